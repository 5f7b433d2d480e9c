/**
 * Both sides of the boundary between liquid and crystal, at one density: entropy jump, latent heat, pressure jump.
 *
 * The boundary is a convention (phase.ts), so the free energies of the two sides differ there by a little, which is
 * reported and not hidden. A solver root-finds inside one phase with the boundary as an end; in the gap between the two
 * entropies matter coexists at the melting temperature.
 */
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { combine } from "../thermodynamics/combine.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";
import { type CoulombPlasma, coulombPlasma } from "./coulomb-plasma.js";
import { meltingTemperature, type Phase } from "./phase.js";

/** Liquid and crystal at the melting temperature of one density. */
export interface Transition {
  /** Melting temperature, K. */
  readonly temperature: number;
  /** State of the liquid there. */
  readonly liquid: State;
  /** State of the crystal there. */
  readonly crystal: State;
  /** s_liquid - s_crystal, erg/(g K). */
  readonly entropyJump: number;
  /** T (s_liquid - s_crystal), erg/g: what freezing sets free where the two sides are in balance. */
  readonly latentHeat: number;
  /**
   * e_liquid - e_crystal, erg/g: what a code that follows energy at constant density sees set free. It differs from the latent
   * heat by the mismatch of the free energies, some 15 % for carbon and oxygen at Gamma = 175.
   */
  readonly energyJump: number;
  /** P_liquid - P_crystal at the same density, dyn/cm^2. */
  readonly pressureJump: number;
  /** F_liquid - F_crystal, erg/g: zero at a true transition, here what the convention leaves. */
  readonly freeEnergyMismatch: number;
}

/** The equation of state with its ions forced into one phase. @throws `invalid-option` without a Coulomb plasma */
export function withPhase(equationOfState: EquationOfState, phase: Phase): EquationOfState {
  const plasma = equationOfState.contributions.find(isCoulombPlasma);
  if (plasma === undefined) {
    throw new FermistateError("invalid-option", {
      argument: "equationOfState",
      given: equationOfState.name,
      allowed: "a sum that contains coulombPlasma(...)",
    });
  }
  const forced = coulombPlasma({ ...plasma.options, phase });
  return combine(...equationOfState.contributions.map((part) => (part === plasma ? forced : part)));
}

/**
 * The transition at a density, or undefined where these nuclei never freeze.
 *
 * @param equationOfState - a sum that contains `coulombPlasma(...)`; its melting coupling is used
 * @param density - g/cm^3
 * @throws `invalid-option` without a Coulomb plasma, and the errors of a state
 */
export function transition(
  equationOfState: EquationOfState,
  density: number,
  composition: Composition,
): Transition | undefined {
  const liquidSide = withPhase(equationOfState, "liquid");
  const crystalSide = withPhase(equationOfState, "crystal");
  const plasma = equationOfState.contributions.find(isCoulombPlasma);
  const temperature = meltingTemperature(density, composition, plasma?.options.meltingCoupling);
  if (temperature === 0) return undefined;
  const liquid = liquidSide.state(density, temperature, composition);
  const crystal = crystalSide.state(density, temperature, composition);
  const entropyJump = liquid.specificEntropy - crystal.specificEntropy;
  return Object.freeze({
    temperature,
    liquid,
    crystal,
    entropyJump,
    latentHeat: temperature * entropyJump,
    energyJump: liquid.specificEnergy - crystal.specificEnergy,
    pressureJump: liquid.pressure - crystal.pressure,
    freeEnergyMismatch: liquid.specificFreeEnergy - crystal.specificFreeEnergy,
  });
}

/** Whether a contribution is the Coulomb plasma of this library. */
export function isCoulombPlasma(part: Contribution): part is CoulombPlasma {
  return part.name === "Coulomb plasma" && "options" in part;
}
