/**
 * The newcomer's equation of state: everything this library knows about the matter of a white dwarf, in one call.
 */
import { type CoulombPlasmaOptions, coulombPlasma } from "./coulomb/coulomb-plasma.js";
import { requireFlags } from "./errors.js";
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
   * @defaultValue false
   */
  readonly coulomb?: boolean | CoulombPlasmaOptions;
  /**
   * Ideal gas of nuclei. Without it T = 0 is legal.
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
 * Electrons and positrons, ideal ions and radiation.
 *
 * What is not in: Coulomb interactions, so the pressure is 1 to 30 % too high where white dwarfs live (least in hot or
 * light-element matter, most in cold dense iron), and there is no crystal.
 *
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * const core = composition({ C12: 0.5, O16: 0.5 });
 * const state = whiteDwarfMatter().state(2e6, 1e7, core);
 * state.pressure; // => 7.6999e22
 * state.adiabaticGradient; // => 0.42463
 * ```
 */
export function whiteDwarfMatter(options: WhiteDwarfMatterOptions = {}): EquationOfState {
  const { coulomb = false, ...flags } = typeof options === "object" && options !== null ? options : { flags: options };
  requireFlags("options", flags, ["ions", "radiation"]);
  const parts = [electronPositronGas()];
  if (options.ions ?? true)
    parts.push(coulomb === false ? idealIons() : coulombPlasma(coulomb === true ? {} : coulomb));
  if (options.radiation ?? true) parts.push(radiation());
  return combine(...parts);
}
