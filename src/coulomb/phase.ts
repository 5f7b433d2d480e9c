/**
 * Liquid or crystal: the rule, and where it puts the boundary.
 *
 * Convention: matter is a crystal where sum x_j Gamma_j >= Gamma_m, 175 by default (the classical one-component plasma
 * melts at 175.17 with the free energies of this library; Potekhin & Chabrier 2000 give 175.0 +- 0.4). For mixtures one
 * number stands for a phase diagram, and polarisation would move it by more than it is known: so it is a parameter.
 * Quantum melting: no bcc crystal exists where R_S = (M/m_e) Z^(7/3) r_s is below about 160 (Ceperley & Alder 1980, Phys.
 * Rev. Lett. 45, 566; Jones & Ceperley 1996, ibid. 76, 4572; from memory): no hydrogen crystal
 * above 4.0e3 g/cm^3, no helium crystal above 6.5e7. R_S falls with density, so the rule sets a highest density.
 */
import { type Composition, requireComposition } from "../matter/composition.js";
import { bcc } from "./lattice.js";
import { coulombSpecies } from "./species.js";

/** A phase of the ions. */
export type Phase = "liquid" | "crystal";

/** Coupling at which matter melts, unless another is chosen. */
export const defaultMeltingCoupling = 175;
/** R_S below which no crystal exists. */
export const quantumMeltingLimit = 160;

/** Highest density of a crystal of this composition, g/cm^3, by the rule of quantum melting; 0 without charged nuclei. */
export function highestCrystalDensity(composition: Composition): number {
  return (coulombSpecies(composition, bcc).quantumRadius / quantumMeltingLimit) ** 3;
}

/**
 * Temperature at which matter of a density freezes, K: T_m = sum x_j Gamma_j T/Gamma_m. 0 where it never does.
 *
 * @param density - g/cm^3
 * @param meltingCoupling - Gamma_m
 */
export function meltingTemperature(
  density: number,
  composition: Composition,
  meltingCoupling: number = defaultMeltingCoupling,
): number {
  requireComposition(composition);
  record[0] = density;
  fillBoundary(composition, meltingCoupling, record);
  return record[2]!;
}

/**
 * Density above which matter of a temperature is a crystal, g/cm^3; Infinity where it never is.
 *
 * @param temperature - K
 * @param meltingCoupling - Gamma_m
 */
export function meltingDensity(
  temperature: number,
  composition: Composition,
  meltingCoupling: number = defaultMeltingCoupling,
): number {
  requireComposition(composition);
  record[1] = temperature;
  fillBoundary(composition, meltingCoupling, record);
  return record[3]!;
}

const record = new Float64Array(5);
/** The boundary as a record: see PhasePair in thermodynamics/contribution.ts. Allocates nothing per call. */
export function fillBoundary(composition: Composition, meltingCoupling: number, boundary: Float64Array): void {
  const coupling = coulombSpecies(composition, bcc).gammaE * composition.couplingMoment;
  const limit = highestCrystalDensity(composition);
  const ratio = (meltingCoupling * boundary[1]!) / coupling;
  const density = ratio * ratio * ratio;
  boundary[2] = boundary[0]! > limit ? 0 : (coupling * Math.cbrt(boundary[0]!)) / meltingCoupling;
  boundary[3] = density <= limit ? density : Number.POSITIVE_INFINITY;
  boundary[4] = limit;
}
