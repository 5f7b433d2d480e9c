/**
 * Which phase the ions are in, and the kind of matter in plain words.
 *
 * The rule is that of coulomb/phase.ts: crystal where Gamma >= 175 and R_S >= 160 (the mean over nuclei), else fluid.
 * Words: common practice, round numbers.
 */
import { defaultMeltingCoupling, type Phase, quantumMeltingLimit } from "../coulomb/phase.js";
import { type RegimeParameters, relativisticTemperature } from "./parameters.js";

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

/** The phase by the rule; undefined where nothing is charged. */
export function phaseOf({ ionCoupling, ionDensityParameter, species }: RegimeParameters): Phase | undefined {
  if (species.length === 0) return undefined;
  return ionCoupling >= defaultMeltingCoupling && ionDensityParameter >= quantumMeltingLimit ? "crystal" : "liquid";
}

/**
 * The words: degeneracy by T/T_F (below 0.1 degenerate, above 2 not), relativity by x_r >= 1 or kT >= m_e c^2, ions by
 * phase, a liquid of Gamma < 1 being a gas.
 */
export function kindOf(
  temperature: number,
  parameters: RegimeParameters,
  phase: Phase | undefined,
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
