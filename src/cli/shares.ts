/** What each contribution adds to pressure, energy and entropy. */
import type { Composition } from "../matter/composition.js";
import { combine } from "../thermodynamics/combine.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";

/** The share of one contribution. */
export interface Share {
  readonly name: string;
  /** dyn/cm^2. */
  readonly pressure: number;
  /** erg/g. */
  readonly specificEnergy: number;
  /** erg/(g K). */
  readonly specificEntropy: number;
}

/**
 * Shares from the free energy of each contribution alone: P = rho (rho F_rho), e = F - T F_T, s = -F_T.
 *
 * At T = 0 the entropy is what a contribution declares to be left there.
 */
export function sharesOf(
  equationOfState: EquationOfState,
  density: number,
  temperature: number,
  composition: Composition,
): Share[] {
  return equationOfState.contributions.map((part) => {
    const { f, fR, fT } = combine(part).freeEnergy(density, temperature, composition);
    const left = part.residualEntropy?.(composition) ?? 0;
    // 0 - x and not -x: a contribution without entropy has 0 of it, not -0.
    const specificEntropy = temperature === 0 ? left : (0 - fT) / temperature;
    return { name: part.name, pressure: density * fR, specificEnergy: f - fT, specificEntropy };
  });
}
