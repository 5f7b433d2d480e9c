/**
 * Any equation of state as a barotrope: along T = 0, an isotherm or an adiabat.
 *
 *     T = 0, adiabat   w = e + P/rho                 isotherm   w = F + P/rho       (dw = dP/rho along each)
 *
 * Cold matter with a Coulomb lattice has P = 0 at a density above zero, its surface, which is found to the last digit.
 * An isotherm crosses from the liquid to the crystal where the equation of state says so; at the pressure of the liquid
 * there the crystal is denser by 1e-5 to 1e-3, a density jump; an adiabat goes through mixtures of both
 * (freezing-adiabat.ts). The rule that puts the boundary there is a convention
 * (coulomb/phase.ts), so the two Gibbs energies differ a little; w of the crystal is shifted to be continuous.
 */
import { highestCrystalDensity, meltingDensity } from "../coulomb/phase.js";
import { isCoulombPlasma, withPhase } from "../coulomb/transition.js";
import { FermistateError, requireFinite, requireKnown } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { BAROTROPE_DENSITY, BAROTROPE_LENGTH, BAROTROPE_PRESSURE, type Barotrope } from "./barotrope.js";
import { type Branch, branchOf, type Path } from "./branch.js";
import { compositionLimits } from "./capture-limit.js";
import { freezingBranches } from "./freezing-adiabat.js";
import { requireDensityRange } from "./options.js";
import { stacked } from "./stacked.js";

/** Which path a barotrope follows. */
export type BarotropeOptions =
  | {
      /** Temperature of the isotherm, K; 0 for cold matter. */
      readonly temperature: number;
      /**
       * Lowest and highest density, g/cm^3; where P = 0 above the lowest, the surface takes its place.
       * @defaultValue the highest of the equation of state, down to the surface P = 0 or the domain's lowest density; on
       *   an isotherm down to where d ln P/d ln rho is 1e-3 and radiation is all there is
       */
      readonly density?: readonly [lowest: number, highest: number];
    }
  | {
      /** Specific entropy of the adiabat, erg/(g K). */
      readonly specificEntropy: number;
      /** Lowest and highest density, g/cm^3; on the way the temperature must stay within the domain. */
      readonly density: readonly [lowest: number, highest: number];
    };

/**
 * The barotrope of an equation of state along T = 0, an isotherm or an adiabat.
 *
 * P, e and w are those of the equation of state to rounding; inversion from P or w costs one or two evaluations and is
 * good to rounding over the exponent. Beyond its ends an inversion gives the end. An adiabat of matter that freezes goes
 * through mixtures of liquid and crystal at the melting temperature, by the lever rule as in `solve`: a phase of its own with a kink at
 * both ends.
 *
 * @throws `invalid-option`, `invalid-composition`, `not-a-number`, `out-of-range`, `outside-domain`; `unstable` where matter
 *   stops resisting compression at positive pressure within the densities asked for
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { barotrope } from "fermistate/barotropes";
 * const core = composition({ C12: 0.5, O16: 0.5 });
 * const cold = barotrope(whiteDwarfMatter(), core, { temperature: 0 });
 * cold.density[0]; // => 25.85
 * cold.state(1e6).pressure; // => 2.54361e22
 * ```
 */
export function barotrope(
  equationOfState: EquationOfState,
  composition: Composition,
  options: BarotropeOptions,
): Barotrope {
  requireComposition(composition);
  requireKnown("options", options, ["temperature", "specificEntropy", "density"]);
  const path = pathOf(options);
  const range = rangeOf(equationOfState, composition, path, options.density);
  const branches = branchesOf(equationOfState, composition, path, range);
  requireReached(branches[0]!, options.density);
  return stacked(
    nameOf(equationOfState, composition, path),
    "That of the equation of state it is made of: regime(...) tells, state by state. The composition stays as given.",
    branches,
    compositionLimits(composition, range[1]),
  );
}

/** Refuses densities asked for that radiation alone fills. */
function requireReached({ density, end }: Branch, given: readonly [number, number] | undefined): void {
  if (given === undefined || end !== "radiation") return;
  const allowed = `>= ${density[0]} g/cm^3: below, the pressure hardly depends on density`;
  throw new FermistateError("outside-domain", { argument: "density[0]", given: given[0], allowed });
}

function pathOf(options: BarotropeOptions): Path {
  const { temperature, specificEntropy } = options as { temperature?: unknown; specificEntropy?: unknown };
  if ((temperature === undefined) === (specificEntropy === undefined)) {
    const allowed = "either temperature or specificEntropy, and not both";
    throw new FermistateError("invalid-option", { argument: "options", given: options, allowed });
  }
  if (specificEntropy !== undefined) {
    return { kind: "adiabat", specificEntropy: requireFinite("specificEntropy", specificEntropy, "erg/(g K)") };
  }
  return { kind: "isotherm", temperature: requireFinite("temperature", temperature, "a finite number >= 0, K") };
}

/** The densities asked for, or those of the domain; cut where the crystal of the rule ends. */
function rangeOf(
  { domain, contributions, state }: EquationOfState,
  composition: Composition,
  path: Path,
  given: unknown,
): readonly [number, number] {
  if (path.kind === "adiabat" || given !== undefined) {
    const range = requireDensityRange(given);
    const temperature = path.kind === "isotherm" ? path.temperature : domain.temperature[0];
    for (const density of range) {
      if (density >= domain.density[0] && density <= domain.density[1]) continue;
      state(density, temperature, composition); // throws the error that names who refuses it
    }
    return range;
  }
  const plasma = contributions.find(isCoulombPlasma);
  const crystal = plasma?.options.phase === "equilibrium" && composition.meanCharge > 0;
  const limit = crystal && freezes(plasma.options.meltingCoupling, composition, path);
  return [
    domain.density[0],
    limit ? Math.min(domain.density[1], highestCrystalDensity(composition)) : domain.density[1],
  ];
}

/** Whether matter on the isotherm is a crystal at some density. */
function freezes(meltingCoupling: number, composition: Composition, path: Path): boolean {
  if (path.kind === "adiabat") return false;
  return path.temperature === 0 || Number.isFinite(meltingDensity(path.temperature, composition, meltingCoupling));
}

/** The phases along the path, by rising density. */
function branchesOf(
  equationOfState: EquationOfState,
  composition: Composition,
  path: Path,
  [low, high]: readonly [number, number],
): Branch[] {
  const plasma = equationOfState.contributions.find(isCoulombPlasma);
  const branch = (matter: EquationOfState, lowest: number, highest: number) =>
    branchOf(matter, composition, path, [lowest, highest]);
  const fixed = plasma === undefined || plasma.options.phase !== "equilibrium" || composition.meanCharge === 0;
  if (fixed) {
    if (path.kind === "isotherm") equationOfState.state(high, path.temperature, composition); // refuses what it must
    return [branch(equationOfState, low, high)];
  }
  if (path.kind === "adiabat") {
    const { meltingCoupling } = plasma.options;
    return freezingBranches(equationOfState, composition, path.specificEntropy, [low, high], meltingCoupling);
  }
  const melting =
    path.temperature === 0 ? 0 : meltingDensity(path.temperature, composition, plasma.options.meltingCoupling);
  const limit = highestCrystalDensity(composition);
  if (melting < high && high > limit) {
    const allowed = `up to ${limit} g/cm^3: above, the crystal melts by zero-point motion and the pressure jumps`;
    throw new FermistateError("outside-domain", { argument: "density[1]", given: high, allowed });
  }
  equationOfState.state(high, path.temperature, composition);
  if (melting >= high) return [branch(withPhase(equationOfState, "liquid"), low, high)];
  const crystal = withPhase(equationOfState, "crystal");
  if (melting <= low) return [branch(crystal, low, high)];
  const liquid = branch(withPhase(equationOfState, "liquid"), low, melting);
  // The crystal from a little below the boundary: its density at the liquid's pressure is where it begins.
  const record = new Float64Array(BAROTROPE_LENGTH);
  const wide = branch(crystal, Math.max(low, 0.9 * melting), high);
  record[BAROTROPE_PRESSURE] = liquid.pressure[1];
  wide.fillAtPressure(record);
  const begin = record[BAROTROPE_DENSITY]!;
  if (!(begin >= melting)) {
    const allowed = "densities on one side of the phase boundary: there the crystal is thinner than the liquid";
    throw new FermistateError("unstable", { argument: "density", given: melting, allowed });
  }
  const solid = branch(crystal, begin, high);
  solid.shiftPotential(liquid.potential[1] - solid.potential[0]);
  return [liquid, solid];
}

function nameOf(equationOfState: EquationOfState, composition: Composition, path: Path): string {
  const matter = `${equationOfState.name}, ${composition.name}`;
  if (path.kind === "adiabat") return `${matter}, s = ${path.specificEntropy} erg/(g K)`;
  return `${matter}, ${path.temperature === 0 ? "cold" : `T = ${path.temperature} K`}`;
}
