/**
 * Slots of the record of one point, which plasma.ts describes and fills. No imports, so that the bundler writes them as
 * literals into the loops.
 */

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
