/**
 * Derivatives of pressure and energy by the means of a composition, Y_e, Y_i, mean A and mean Z, where they exist: in an
 * ideal plasma, whose P and e depend on the composition through Y_e and Y_i = 1/<A> alone.
 */
import { FermistateError } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import type { Contribution } from "./contribution.js";
import { holds, refusePoint } from "./domain.js";
import type { EquationOfState } from "./equation-of-state.js";
import { evaluatorOf } from "./evaluator.js";
import { SPECIES_ENERGY, SPECIES_LENGTH, SPECIES_PRESSURE } from "./species-members.js";

/** Derivatives of pressure and energy by one variable of the composition, at fixed density and temperature. */
export interface PressureAndEnergy {
  /** Of the pressure, dyn/cm^2. */
  readonly pressure: number;
  /** Of the specific energy without rest mass, erg/g. */
  readonly specificEnergy: number;
}

/** What {@link meanDerivatives} returns. */
export interface MeanDerivatives {
  /** By Y_e at fixed Y_i. */
  readonly electronsPerNucleon: PressureAndEnergy;
  /** By Y_i, nuclei per nucleon, at fixed Y_e. */
  readonly ionsPerNucleon: PressureAndEnergy;
  /** By the mean mass number <A> = 1/Y_i at fixed mean charge. */
  readonly meanMassNumber: PressureAndEnergy;
  /** By the mean charge <Z> = Y_e/Y_i at fixed mean mass number. */
  readonly meanCharge: PressureAndEnergy;
}

/**
 * Derivatives of P and e by Y_e, Y_i, mean A and mean Z, for an equation of state that depends on nothing else: electrons,
 * ideal ions, radiation.
 *
 * Not offered, because they do not exist: derivatives of a Coulomb plasma, whose averages such as <Z^(5/3)> are
 * independent of <Z> and <A>, and whose fits hold for the charges of nuclei; and those of F and s of ideal ions, which
 * carry the mixing and the mass of each nuclide. For these `compositionDerivatives` has the derivative along any change of
 * the nucleon fractions.
 *
 * @param density - g/cm^3
 * @param temperature - K
 * @throws `unavailable-quantity` for any other equation of state; else as the method `freeEnergy`
 * @example
 * ```ts
 * import { composition, meanDerivatives, whiteDwarfMatter } from "fermistate";
 * const ideal = whiteDwarfMatter({ coulomb: false });
 * meanDerivatives(ideal, 1e6, 1e8, composition({ C12: 1 })).electronsPerNucleon.pressure; // => 8.2526e22
 * ```
 */
export function meanDerivatives(
  equationOfState: EquationOfState,
  density: number,
  temperature: number,
  composition: Composition,
): MeanDerivatives {
  requireComposition(composition);
  const { contributions, domain } = equationOfState;
  if (typeof density !== "number" || typeof temperature !== "number" || !holds(domain, density, temperature)) {
    refusePoint(contributions, density, temperature);
  }
  const other = contributions.find((part) => part.dependsOn === undefined);
  if (other !== undefined) {
    throw new FermistateError("unavailable-quantity", {
      argument: "mean derivatives",
      given: other.name,
      allowed: "contributions that depend on Y_e, or on Y_i, alone; for others use compositionDerivatives(...).along",
    });
  }
  const chargedIndex = composition.species.findIndex(({ chargeNumber }) => chargeNumber > 0);
  if (chargedIndex < 0) {
    const allowed = "charged nuclei";
    throw new FermistateError("invalid-composition", { argument: "composition", given: composition.name, allowed });
  }
  const of = (kind: Contribution["dependsOn"], per: number): PressureAndEnergy => {
    const evaluator = evaluatorOf(contributions.filter((part) => part.dependsOn === kind));
    evaluator.point[DENSITY] = density;
    evaluator.point[TEMPERATURE] = temperature;
    const rows = new Float64Array(SPECIES_LENGTH * composition.species.length);
    evaluator.fillMembers(composition, 2);
    evaluator.fillSpecies(composition, rows);
    const row = SPECIES_LENGTH * chargedIndex;
    return Object.freeze({
      pressure: (density * rows[row + SPECIES_PRESSURE]!) / per,
      specificEnergy: rows[row + SPECIES_ENERGY]! / per,
    });
  };
  // The derivative by Y_a is Z_a times that by Y_e, or that by Y_i.
  const electrons = of("electron density", composition.species[chargedIndex]!.chargeNumber);
  const ions = of("ion density", 1);
  const { ionsPerNucleon, meanCharge } = composition;
  const combined = (ofIons: number, ofElectrons: number): PressureAndEnergy =>
    Object.freeze({
      pressure: ofIons * ions.pressure + ofElectrons * electrons.pressure,
      specificEnergy: ofIons * ions.specificEnergy + ofElectrons * electrons.specificEnergy,
    });
  const square = -ionsPerNucleon * ionsPerNucleon; // d(1/A)/dA
  return Object.freeze({
    electronsPerNucleon: electrons,
    ionsPerNucleon: ions,
    meanMassNumber: combined(square, square * meanCharge),
    meanCharge: combined(0, ionsPerNucleon),
  });
}
