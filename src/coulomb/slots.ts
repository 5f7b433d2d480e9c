/**
 * Slots of the records of the Coulomb rooms. No imports, so that the bundler writes them as literals.
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

// How the sum changes with the amount of a species (species-tangents.ts): one stretch of a record per charged species.
// Energies in erg/g per unit of Y_a at rho = 1 g/cm^3.

/** Z_a/Y_e. */
export const TANGENT_PER_ELECTRON = 0;
/** Madelung energy over rho^(1/3). */
export const TANGENT_MADELUNG = 1;
/** Zero-point energy over rho^(1/2). */
export const TANGENT_ZERO_POINT = 2;
/** Quantum part of the anharmonic ground state over rho^(2/3). */
export const TANGENT_ANHARMONIC = 3;
/** Deviation of a random alloy over rho^(1/3). */
export const TANGENT_ALLOY = 4;
/** Entropy of mixing and spin of the crystal, negative, over k: ln(Y_a Z_a/Y_e) + 1 - Z_a/<Z> - ln g_a. */
export const TANGENT_MIXING = 5;
/** d(N amplitude)/dY_a of the liquid's departure from linear mixing. */
export const TANGENT_AMPLITUDE = 6;
/** N d ln a/dY_a. */
export const TANGENT_LOG_A = 7;
/** N d ln b/dY_a. */
export const TANGENT_LOG_B = 8;
/** N d alpha/dY_a. */
export const TANGENT_ALPHA = 9;
/** N d beta/dY_a. */
export const TANGENT_BETA = 10;
/** N d ln <Z^(5/3)>/dY_a. */
export const TANGENT_LOG_COUPLING = 11;
export const TANGENT_LENGTH = 12;
