/** Options of `regime`, and their checks. */

import type { Phase } from "../coulomb/phase.js";
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";

/** Options of `regime`. */
export interface RegimeOptions {
  /** Take the ions to be in this phase, instead of by the rule. */
  readonly phase?: Phase;
  /**
   * Judge the stability of its sum at the point. Where it has interactions, nuclei are not judged as an ideal gas;
   * where it has none, their coupling is.
   * Its own domain applies.
   */
  readonly equationOfState?: EquationOfState;
  /** Judge the stability of this state, which must be of the same density, temperature and composition. */
  readonly state?: State;
}

/** Checks the options against the point; returns them. */
export function readOptions(
  options: RegimeOptions,
  density: number,
  temperature: number,
  composition: Composition,
): RegimeOptions {
  const refuse = (argument: string, given: unknown, allowed: string): never => {
    throw new FermistateError("invalid-option", { argument, given, allowed });
  };
  const all = "{ phase, equationOfState, state }";
  if (typeof options !== "object" || options === null) return refuse("options", options, all);
  const { phase, equationOfState, state, ...others } = options;
  const [stranger] = Object.keys(others);
  if (stranger !== undefined) refuse("options", stranger, all);
  if (phase !== undefined && phase !== "liquid" && phase !== "crystal") refuse("phase", phase, '"liquid" or "crystal"');
  if (equationOfState !== undefined) {
    const { state: call, freeEnergy, contributions } = Object(equationOfState) as Partial<EquationOfState>;
    const good = typeof call === "function" && typeof freeEnergy === "function" && Array.isArray(contributions);
    if (!good) refuse("equationOfState", equationOfState, "an equation of state, as combine(...) makes it");
  }
  if (state !== undefined) {
    const of = Object(state) as Partial<State>;
    const same = of.density === density && of.temperature === temperature && of.composition === composition;
    const numbers = [of.pressure, of.pressureByDensity, of.heatCapacityV].every(Number.isFinite);
    if (!same || !numbers) refuse("state", state, "a state at the same density, temperature and composition");
  }
  return options;
}
