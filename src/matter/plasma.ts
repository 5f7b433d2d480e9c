/**
 * The record of one point: density, temperature, and the plasma variables that contributions share.
 *
 * A Float64Array with named slots, filled once per point; contributions read it and some add what only they know
 * (the chemical potential of the electrons). A record and not an object, so that no number is boxed in a batch.
 *
 *     n_e     = rho Y_e/m_u                              net electrons per cm^3
 *     x_r     = (3 pi^2 n_e)^(1/3) hbar/(m_e c)           relativity parameter, p_F/(m_e c)
 *     r_s     = a_e/a_B,  a_e = (3/(4 pi n_e))^(1/3)      density parameter
 *     Gamma_e = e^2/(a_e kT),  Gamma = Gamma_e <Z^(5/3)>  coupling of electrons and of (charged) ions
 *     T_F     = (sqrt(1 + x_r^2) - 1) m_e c^2/k           Fermi temperature
 *     T_p     = (hbar/k) (4 pi e^2 n_i <Z^2/M>)^(1/2)     ion plasma temperature
 *
 * Definitions as in Salpeter & Van Horn 1969 (ApJ 155, 183) and common practice since.
 */
import {
  bohrRadius,
  boltzmannConstant,
  electronDensityUnit,
  elementaryChargeSquared,
  fineStructureConstant,
  reducedPlanckConstant,
} from "../constants.js";
import type { Composition } from "./composition.js";
import {
  CRYSTAL_FRACTION,
  DENSITY,
  ELECTRON_CHEMICAL_POTENTIAL,
  ELECTRON_COUPLING,
  ELECTRON_DEGENERACY,
  ELECTRON_DENSITY,
  FERMI_ENERGY,
  ION_COUPLING,
  PLASMA_TEMPERATURE_SQUARED,
  POSITRON_DENSITY,
  RADIATION_PRESSURE,
  RELATIVITY,
  TEMPERATURE,
} from "./point.js";

export * from "./point.js";

const relativityFactor = 3 / electronDensityUnit;
/** r_s x_r = (9 pi/4)^(1/3) alpha: the density parameter is this over x_r. */
export const radiusFactor: number = Math.cbrt((9 * Math.PI) / 4) * fineStructureConstant;
const couplingFactor = elementaryChargeSquared / (bohrRadius * boltzmannConstant * radiusFactor);
const plasmaFactor = (reducedPlanckConstant / boltzmannConstant) ** 2 * 4 * Math.PI * elementaryChargeSquared;

/** Fills the plasma variables from DENSITY and TEMPERATURE, and clears what contributions write. */
export function fillPlasma(point: Float64Array, composition: Composition): void {
  const density = point[DENSITY]!;
  const temperature = point[TEMPERATURE]!;
  const electrons = density * composition.electronsPerGram;
  const x = Math.cbrt(electrons * relativityFactor);
  // Without electrons the coupling is zero at every temperature, T = 0 included.
  const coupling = electrons === 0 ? 0 : (couplingFactor * x) / temperature;
  const moment = composition.couplingMoment; // may underflow for a mean nucleus of next to no charge
  const ions = density * composition.ionsPerGram;
  point[ELECTRON_DENSITY] = electrons;
  point[RELATIVITY] = x;
  point[ELECTRON_COUPLING] = coupling;
  point[ION_COUPLING] = moment === 0 ? 0 : coupling * moment;
  point[FERMI_ENERGY] = (x * x) / (1 + Math.sqrt(1 + x * x));
  point[PLASMA_TEMPERATURE_SQUARED] = plasmaFactor * ions * composition.plasmaFrequencySum;
  point[ELECTRON_CHEMICAL_POTENTIAL] = Number.NaN;
  point[ELECTRON_DEGENERACY] = Number.NaN;
  point[POSITRON_DENSITY] = Number.NaN;
  point[RADIATION_PRESSURE] = 0;
  point[CRYSTAL_FRACTION] = 0;
}
