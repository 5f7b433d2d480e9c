/**
 * The newcomer's equation of state: everything this library knows about the matter of a white dwarf, in one call.
 */
import { coulombPlasma } from "./coulomb/coulomb-plasma.js";
import type { CoulombPlasmaOptions } from "./coulomb/options.js";
import { FermistateError, requireFlags } from "./errors.js";
import { electronPositronGas } from "./fermi-gas/electron-positron-gas.js";
import { idealIons } from "./ions/ideal-ions.js";
import { radiation } from "./radiation.js";
import { combine } from "./thermodynamics/combine.js";
import type { EquationOfState } from "./thermodynamics/equation-of-state.js";

/** Switches of {@link whiteDwarfMatter}: each is one contribution. */
export interface WhiteDwarfMatterOptions {
  /**
   * Coulomb interactions: liquid and crystal, polarisation, exchange and correlation, in place of the ideal ions. An
   * object chooses among its terms.
   * @defaultValue true
   */
  readonly coulomb?: boolean | CoulombPlasmaOptions;
  /**
   * Nuclei, with their Coulomb interactions or as an ideal gas.
   * @defaultValue true
   */
  readonly ions?: boolean;
  /**
   * Photons.
   * @defaultValue true
   */
  readonly radiation?: boolean;
}

/**
 * The matter of a white dwarf: electrons and positrons, ions as a Coulomb liquid or crystal, radiation; each a switch.
 *
 * The ions' Coulomb terms include polarisation, exchange and correlation, and the corrections for mixtures; `coulomb: false`
 * gives the ideal plasma, whose pressure is 1 to 30 % too high where white dwarfs live. Where the sum is unstable it
 * is refused (`unstable`): cold matter too thin to be ionised, and cold hydrogen or helium so dense that its quantum liquid is
 * beyond the fits. `regime(...)` says which assumption is strained before that.
 *
 * @throws `invalid-option`
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * const core = composition({ C12: 0.5, O16: 0.5 });
 * whiteDwarfMatter().state(2e6, 1e7, core).pressure; // => 7.50013e22
 * whiteDwarfMatter({ coulomb: false }).state(2e6, 1e7, core).pressure; // => 7.6999e22
 * whiteDwarfMatter().state(2e6, 1e6, core).crystalFraction; // => 1
 * ```
 */
export function whiteDwarfMatter(options: WhiteDwarfMatterOptions = {}): EquationOfState {
  requireFlags("options", options, ["ions", "radiation"], ["coulomb"]);
  const { coulomb = true } = options;
  if (typeof coulomb !== "boolean" && (typeof coulomb !== "object" || coulomb === null || Array.isArray(coulomb))) {
    const allowed = "true, false or an object of options of coulombPlasma";
    throw new FermistateError("invalid-option", { argument: "options.coulomb", given: coulomb, allowed });
  }
  const parts = [electronPositronGas()];
  if (options.ions ?? true)
    parts.push(coulomb === false ? idealIons() : coulombPlasma(coulomb === true ? {} : coulomb));
  if (options.radiation ?? true) parts.push(radiation());
  return combine(...parts);
}
