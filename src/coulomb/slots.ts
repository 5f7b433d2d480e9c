/**
 * Slots of the two records of the Coulomb rooms. No imports, so that the bundler writes them as literals.
 *
 * The point (filled by coulomb-plasma.ts) and one record per species of a composition (filled by species.ts). Coupling and
 * quantum parameter of a species: Gamma_j = POINT_GAMMA_E * ION_Z53, theta_j = POINT_ROOT * ION_THETA (POINT_ROOT =
 * rho^(1/2)/T).
 */

// The point.

/** N_i k T, erg/g. */
export const POINT_KT = 0;
/** rho, g/cm^3. */
export const POINT_DENSITY = 1;
/** T, K. */
export const POINT_TEMPERATURE = 2;
/** rho^(1/3). */
export const POINT_CUBE_ROOT = 3;
/** Gamma_e = e^2/(a_e kT). */
export const POINT_GAMMA_E = 4;
/** ln Gamma_e. */
export const POINT_LOG_GAMMA_E = 5;
/** Gamma_e^(1/2). */
export const POINT_ROOT_GAMMA_E = 6;
/** r_s. */
export const POINT_RS = 7;
/** x_r. */
export const POINT_X = 8;
/** rho^(1/2)/T. */
export const POINT_ROOT = 9;
/** rho^(1/2). */
export const POINT_ROOT_DENSITY = 10;
/** ln rho. */
export const POINT_LOG_DENSITY = 11;
/** e^2/a_e per gram of electrons: N_e e^2/a_e, erg/g. */
export const POINT_ELECTRON_ENERGY = 12;
/** t = T/T_F with the non-relativistic Fermi temperature, 2 (4/9 pi)^(2/3) r_s/Gamma_e. */
export const POINT_T = 13;
export const POINT_LENGTH = 16;

// A species.

/** Number fraction x_j among all nuclei. */
export const ION_X = 0;
/** Charge number Z. */
export const ION_Z = 1;
/** Z^(5/3). */
export const ION_Z53 = 2;
/** theta_j T/rho^(1/2), K cm^(3/2) g^(-1/2). */
export const ION_THETA = 3;
/** Gamma_j T/rho^(1/3). */
export const ION_GAMMA = 4;
/** ln(0.205 theta_j/Gamma_j / rho^(1/6)). */
export const ION_LOG_Q = 5;

// Liquid polarisation.

/** c_DH. */
export const ION_C_DH = 6;
/** c_TF a. */
export const ION_C_TF = 7;
/** a. */
export const ION_A = 8;
/** b. */
export const ION_B = 9;
/** nu. */
export const ION_NU = 10;
/** 0.78 Z^(-1/2). */
export const ION_W = 11;
/** Z^3. */
export const ION_Z3 = 12;
/** (Z - 1)/9. */
export const ION_ZETA = 13;
/** 0.001 Z^2. */
export const ION_E0 = 14;
/** 0.18 Z^(-1/4). */
export const ION_H1 = 15;
/** 0.37 Z^(-1/2) + 0.2. */
export const ION_H2 = 16;

// Crystal polarisation.

/** a_TF Z^(2/3) b1. */
export const ION_F_INF = 17;
/** b2. */
export const ION_B2 = 18;
/** a3. */
export const ION_A3 = 19;
/** b3. */
export const ION_B3 = 20;
/** b4. */
export const ION_B4 = 21;
/** s. */
export const ION_S = 22;
export const ION_LENGTH = 24;
