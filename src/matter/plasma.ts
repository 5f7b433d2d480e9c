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

/** Baryon mass density n_B m_u, g/cm^3. */
export const DENSITY = 0;
/** Temperature, K. */
export const TEMPERATURE = 1;
/** Net electron density n_- - n_+, cm^-3. */
export const ELECTRON_DENSITY = 2;
/** x_r. */
export const RELATIVITY = 3;
/** Gamma_e; Infinity at T = 0. */
export const ELECTRON_COUPLING = 4;
/** Gamma; Infinity at T = 0. */
export const ION_COUPLING = 5;
/** e_F/(m_e c^2) = sqrt(1 + x_r^2) - 1 = k T_F/(m_e c^2). */
export const FERMI_ENERGY = 6;
/** T_p^2, K^2. */
export const PLASMA_TEMPERATURE_SQUARED = 7;

// Written by contributions.

/** mu_- - m_e c^2, erg; NaN where no contribution knows it. */
export const ELECTRON_CHEMICAL_POTENTIAL = 8;
/** (mu_- - m_e c^2)/kT; Infinity at T = 0. */
export const ELECTRON_DEGENERACY = 9;
/** n_+, cm^-3; only on request, see Contribution.addDetail. */
export const POSITRON_DENSITY = 10;
/** a T^4/3, dyn/cm^2; 0 without radiation. */
export const RADIATION_PRESSURE = 11;

/** 1 where the ions are a crystal, 0 where they are a liquid or gas. */
export const CRYSTAL_FRACTION = 12;

/**
 * 1 where the caller needs members of third order to six digits only: a search, which steps by them and moves by 1e-8. Those up
 * to second order keep their full accuracy. Set once by the owner of the record.
 */
export const ROUGH_THIRD_ORDER = 13;

/** Length of the record. */
export const POINT_LENGTH = 16;

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
