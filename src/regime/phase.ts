/**
 * Which phase the ions are in, and the kind of matter in plain words.
 *
 * The rule: crystal where Gamma >= 175 and R_S >= 160 (the mean over nuclei), else fluid. Gamma of melting 175: Potekhin & Chabrier 2000, Phys.
 * Rev. E 62, 8554. Below R_S of 110 to 160 no bcc crystal of bosons or fermions exists at any temperature (Jones &
 * Ceperley 1996, Phys. Rev. Lett. 76, 4572, from memory). Words: common practice, round numbers.
 */
import { type RegimeParameters, relativisticTemperature } from "./parameters.js";

/** Phase of the ions. */
export type IonPhase = "liquid" | "crystal";

/** What matter is called; the closed list of `kind`. */
export type KindWord =
  | "non-degenerate"
  | "partially degenerate"
  | "degenerate"
  | "relativistic"
  | "ion gas"
  | "liquid"
  | "crystal"
  | "free neutrons";

/** Gamma of melting. */
export const meltingCoupling = 175;
/** R_S below which nothing freezes. */
export const leastIonDensityParameter = 160;

/** The phase by the rule; undefined where nothing is charged. */
export function phaseOf({ ionCoupling, ionDensityParameter, species }: RegimeParameters): IonPhase | undefined {
  if (species.length === 0) return undefined;
  return ionCoupling >= meltingCoupling && ionDensityParameter >= leastIonDensityParameter ? "crystal" : "liquid";
}

/**
 * The words: degeneracy by T/T_F (below 0.1 degenerate, above 2 not), relativity by x_r >= 1 or kT >= m_e c^2, ions by
 * phase, a liquid of Gamma < 1 being a gas.
 */
export function kindOf(
  temperature: number,
  parameters: RegimeParameters,
  phase: IonPhase | undefined,
): readonly KindWord[] {
  const { fermiTemperature, relativityParameter, ionCoupling } = parameters;
  const words: KindWord[] = [];
  if (phase !== undefined) {
    const warmth = temperature / fermiTemperature;
    words.push(warmth < 0.1 ? "degenerate" : warmth <= 2 ? "partially degenerate" : "non-degenerate");
  }
  if (relativityParameter >= 1 || relativisticTemperature(temperature) >= 1) words.push("relativistic");
  words.push(phase === undefined ? "free neutrons" : phase === "liquid" && ionCoupling < 1 ? "ion gas" : phase);
  return Object.freeze(words);
}
