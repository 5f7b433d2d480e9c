/**
 * Constants of the two Coulomb lattices: ground state, phonons, screening.
 *
 * Madelung constants and u_1: independent Ewald and phonon calculations (test/coulomb reproduces them to 1e-12 and 1e-13).
 * Thermal fit: Baiko, Potekhin & Yakovlev 2001, Phys. Rev. E 64, 057402 (coefficients from memory, confirmed to 4e-5
 * by an exact phonon calculation). Screening: Potekhin & Chabrier 2000, Phys. Rev. E 62, 8554 (from memory; f_inf confirmed
 * to 2-4 % by an independent lattice sum for x_r >= 0.3, Z <= 30). Anharmonic: Farouki & Hamaguchi 1993, Phys. Rev. E 47,
 * 4330, for bcc (from memory); no fcc coefficients are known here, so fcc is harmonic.
 */

/** Name of a lattice. */
export type LatticeName = "bcc" | "fcc";

/** Constants of one lattice. */
export interface LatticeConstants {
  /** "bcc" or "fcc". */
  readonly name: LatticeName;
  /** Madelung constant: U = madelung Z^2 e^2/a. */
  readonly madelung: number;
  /** <omega/omega_p>. */
  readonly u1: number;
  /** Exponents alpha_1, alpha_2, alpha_3 of the thermal fit. */
  readonly exponents: readonly [number, number, number];
  /** Numerator of the thermal fit, coefficients of theta^0, theta^1, ... */
  readonly numerator: readonly number[];
  /** Denominator of the thermal fit. */
  readonly denominator: readonly number[];
  /** alpha_8: f_th -> -1/(alpha_8 theta^3) at low temperature. */
  readonly alpha8: number;
  /** a_1 ... a_4 of the crystal polarisation. */
  readonly screening: readonly [number, number, number, number];
  /** Classical anharmonic coefficients A_1, A_2, A_3; zeros where none are known. */
  readonly anharmonic: readonly [number, number, number];
  /** d_1 = A_1 c_1 of the anharmonic ground state: the order hbar^2 is then exactly theta^2/24. */
  readonly anharmonicQuantum: number;
}

/** c_1 of the quantum suppression of the anharmonic terms (Potekhin & Chabrier 2010, Contrib. Plasma Phys. 50, 82). */
export const ANHARMONIC_SUPPRESSION = 0.0112;

export const bcc: LatticeConstants = Object.freeze({
  name: "bcc",
  madelung: -0.8959292556817653,
  u1: 0.51138746358371,
  exponents: [0.932446, 0.334547, 0.265764],
  numerator: [1, 0.1839, 0.593586, 5.4814e-3, 5.01813e-4, 0, 3.9247e-7, 0, 5.8356e-11],
  denominator: [
    261.66,
    0,
    7.07997,
    0,
    0.0409484,
    3.97355e-4,
    5.11148e-5,
    2.19749e-6,
    0,
    4.757014e-3 * 3.9247e-7,
    0,
    4.7770935e-3 * 5.8356e-11,
  ],
  alpha8: 4.7770935e-3,
  screening: [1.1866, 0.684, 17.9, 41.5],
  anharmonic: [10.9, 247, 1.765e5],
  anharmonicQuantum: 10.9 * ANHARMONIC_SUPPRESSION,
} as const);

export const fcc: LatticeConstants = Object.freeze({
  name: "fcc",
  madelung: -0.8958736151951085,
  u1: 0.51319400101425,
  exponents: [0.916707, 0.365284, 0.257591],
  numerator: [1, 0, 0.532535, 0, 3.76545e-4, 0, 2.63013e-7, 0, 6.6318e-11],
  denominator: [
    303.2,
    0,
    7.7255,
    0,
    0.0439597,
    1.14295e-4,
    5.63434e-5,
    1.36488e-6,
    0,
    4.92387e-3 * 2.63013e-7,
    0,
    4.37506e-3 * 6.6318e-11,
  ],
  alpha8: 4.37506e-3,
  screening: [1.1857, 0.663, 17.1, 40],
  anharmonic: [0, 0, 0],
  anharmonicQuantum: 0,
} as const);
