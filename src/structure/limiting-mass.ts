/**
 * The limiting mass of cold stars in closed form, and the mass conventions that move it.
 *
 * Chandrasekhar 1931, ApJ 74, 81; 1935, MNRAS 95, 207: extremely relativistic electrons are a polytrope of index 3, whose
 * mass does not depend on its central density:
 *
 *     M = ((3 pi)^(1/2)/2) omega_3 (hbar c/G)^(3/2)/(mu_e m)^2,    omega_3 = -xi_1^2 theta'(xi_1) at n = 3.
 */
import {
  atomicMassConstant,
  gravitationalConstant,
  protonMass,
  reducedPlanckConstant,
  speedOfLight,
} from "../constants.js";
import { FermistateError, requireFinite, requireKnown } from "../errors.js";

/**
 * The mass m that a molecular weight counts: the atomic mass constant, the mass of the hydrogen atom or of the proton. The
 * last two belong to older texts: they move a limiting mass by 1.6 % and 1.4 %.
 */
export type MassUnit = "atomic-mass-constant" | "hydrogen-atom" | "proton";

/** Option of formulas with a molecular weight. */
export interface MassUnitOptions {
  /**
   * What the molecular weight counts.
   * @defaultValue "atomic-mass-constant"
   */
  readonly massUnit?: MassUnit;
}

/** -xi_1^2 theta'(xi_1) of the polytrope of index 3. */
export const OMEGA_3 = 2.0182359509662284;
/** Mass of the hydrogen atom in m_u (AME2020). */
const HYDROGEN_IN_U = 1.007825031898;

/** The unit in g. */
export function massOfUnit(options: MassUnitOptions): number {
  requireKnown("options", options, ["massUnit"]);
  const { massUnit = "atomic-mass-constant" } = options;
  if (massUnit === "atomic-mass-constant") return atomicMassConstant;
  if (massUnit === "hydrogen-atom") return HYDROGEN_IN_U * atomicMassConstant;
  if (massUnit === "proton") return protonMass;
  const allowed = '"atomic-mass-constant", "hydrogen-atom" or "proton"';
  throw new FermistateError("invalid-option", { argument: "massUnit", given: massUnit, allowed });
}

/** Throws unless the value is a positive number; returns it. */
export function requirePositive(argument: string, value: unknown, unit: string): number {
  const allowed = `a positive number${unit === "" ? "" : `, ${unit}`}`;
  const number = requireFinite(argument, value, allowed);
  if (number <= 0) throw new FermistateError("out-of-range", { argument, given: number, allowed });
  return number;
}

/** (hbar c/G)^(3/2)/(mu_e m)^2, g. */
function massScale(massPerElectron: number, options: MassUnitOptions): number {
  requirePositive("massPerElectron", massPerElectron, "mu_e");
  const planck = (reducedPlanckConstant * speedOfLight) / gravitationalConstant;
  return (planck * Math.sqrt(planck)) / (massPerElectron * massOfUnit(options)) ** 2;
}

/**
 * The Chandrasekhar mass, g: the limit of ideal, cold white dwarfs in Newton's theory; mu_e is 1/Y_e (2 for helium to oxygen).
 *
 * Exact as a formula; as a number it has the 3e-5 of G. In solar masses, GM_sun/G, only 1e-5 of that is left.
 *
 * ```ts
 * import { solarMass } from "fermistate";
 * import { chandrasekharMass } from "fermistate/structure";
 *
 * chandrasekharMass(2) / solarMass; // => 1.456298
 * chandrasekharMass(2, { massUnit: "hydrogen-atom" }) / solarMass; // => 1.433771
 * ```
 * @throws `not-a-number`, `out-of-range`, `invalid-option`
 */
export function chandrasekharMass(massPerElectron: number, options: MassUnitOptions = {}): number {
  return 0.5 * Math.sqrt(3 * Math.PI) * OMEGA_3 * massScale(massPerElectron, options);
}

/**
 * The limiting mass of a uniform sphere of extremely relativistic electrons, g, from its energy alone: the sum of 3/4 of the Fermi
 * energy per electron and of -(3/5) G M^2/R changes its sign at [(5/4)(9 pi/4)^(1/3) hbar c/G]^(3/2)/(mu_e m)^2.
 *
 * An estimate, 18 % above {@link chandrasekharMass}, since a star is not uniform.
 * @throws `not-a-number`, `out-of-range`, `invalid-option`
 */
export function uniformSphereMass(massPerElectron: number, options: MassUnitOptions = {}): number {
  return (1.25 * Math.cbrt((9 * Math.PI) / 4)) ** 1.5 * massScale(massPerElectron, options);
}
