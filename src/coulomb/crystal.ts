/**
 * The Coulomb crystal: ground state, phonons, anharmonic terms.
 *
 *     F/N_i kT = C_M Gamma + (3/2) u_1 theta + f_th(theta) + f_ah(Gamma, theta),   no ideal-gas term: it is in the phonons
 *
 * What does not depend on T is a ground state of power laws in density, kept apart from the thermal part, which vanishes
 * term by term at T -> 0: so T = 0 needs no formula of its own, and no digit is lost when Gamma kT is 1e10 times kT.
 * Thermal fit f_th = sum ln(1 - e^(-alpha_n theta)) - A(theta)/B(theta): Baiko, Potekhin & Yakovlev 2001, Phys. Rev. E
 * 64, 057402, error 4e-5. Anharmonic: f_ah = -sum A_k/(k Gamma^k) e^(-c_1 theta^2) - d_1 theta^2/Gamma, Farouki & Hamaguchi
 * 1993, Phys. Rev. E 47, 4330 (classical, Gamma from 170 on), quantum suppression Potekhin & Chabrier 2010, Contrib. Plasma
 * Phys. 50, 82; coefficients from memory, see lattice.ts. Below Gamma = 100 the anharmonic sum is meaningless.
 */
import { addGround, divideSingle, lift, multiply, NATURAL_LENGTH, SINGLE_LENGTH } from "../numerics/natural.js";
import type { Order } from "../thermodynamics/free-energy.js";
import { ANHARMONIC_SUPPRESSION, type LatticeConstants } from "./lattice.js";
import {
  ION_GAMMA,
  ION_THETA,
  ION_X,
  POINT_CUBE_ROOT,
  POINT_ROOT,
  POINT_ROOT_DENSITY,
  POINT_TEMPERATURE,
} from "./slots.js";
import type { CoulombSpecies } from "./species.js";

/** Energies that do not depend on temperature, each a power of density; terms as switches. */
export interface GroundTerms {
  /** Madelung energy. */
  readonly lattice: boolean;
  /** Zero-point energy of the phonons. */
  readonly zeroPoint: boolean;
  /** Anharmonic part. */
  readonly anharmonic: boolean;
  /** Deviation of a random alloy from linear mixing. */
  readonly alloy: boolean;
}

const energy = new Float64Array(1);

/** Adds the ground state of the lattice to the natural derivatives of F. */
export function addGroundState(
  out: Float64Array,
  order: Order,
  point: Float64Array,
  species: CoulombSpecies,
  terms: GroundTerms,
): void {
  const cubeRoot = point[POINT_CUBE_ROOT]!;
  const electrostatic = (terms.lattice ? species.madelung : 0) + (terms.alloy ? species.alloy : 0);
  energy[0] = electrostatic * cubeRoot;
  addGround(out, order, energy, 1 / 3);
  if (terms.zeroPoint) {
    energy[0] = species.zeroPoint * point[POINT_ROOT_DENSITY]!;
    addGround(out, order, energy, 0.5);
  }
  if (terms.anharmonic) {
    energy[0] = species.anharmonicGround * cubeRoot * cubeRoot;
    addGround(out, order, energy, 2 / 3);
  }
}

/** The thermal fit of a lattice with the coefficients of its derivatives: theta^k d^k/dtheta^k multiplies by n!/(n-k)!. */
export interface PhononFit {
  /** alpha_1 ... alpha_3. */
  readonly exponents: Float64Array;
  /**
   * Coefficients of theta^n, ten per power: theta^k A^(k) and theta^k B^(k) in turn for k = 0..4. Side by side, so that their
   * sums run in one loop and do not wait for each other.
   */
  readonly coefficients: Float64Array;
  /** alpha_8. */
  readonly alpha8: number;
}

const STRIDE = 10;

/** The fit of a lattice, prepared for {@link addPhonons}. */
export function phononFit(lattice: LatticeConstants): PhononFit {
  const coefficients = new Float64Array(STRIDE * lattice.denominator.length);
  for (let n = 0; n < lattice.denominator.length; n++) {
    let falling = 1; // n!/(n - k)!
    for (let k = 0; k < 5; k++) {
      coefficients[STRIDE * n + 2 * k] = falling * (lattice.numerator[n] ?? 0);
      coefficients[STRIDE * n + 2 * k + 1] = falling * lattice.denominator[n]!;
      falling *= n - k;
    }
  }
  return { exponents: Float64Array.from(lattice.exponents), coefficients, alpha8: lattice.alpha8 };
}

const top = new Float64Array(SINGLE_LENGTH);
const bottom = new Float64Array(SINGLE_LENGTH);

/** Adds x_j f_th(theta_j): u[k] = theta^k d^k f/dtheta^k, u[5] the entropy theta f' - f. Needs T > 0. */
export function addPhonons(
  u: Float64Array,
  order: Order,
  point: Float64Array,
  ion: Float64Array,
  fit: PhononFit,
): void {
  const asymptotic = 1e9; // from here on f_th is -1/(alpha_8 theta^3) to rounding, and theta^11 would overflow later
  const extinct = 2800; // the slowest exponential is exactly 0
  const small = 0.7; // below, 1 - e^(-x) needs expm1
  const theta = point[POINT_ROOT]! * ion[ION_THETA]!;
  const weight = ion[ION_X]!;
  if (theta > asymptotic) {
    const q = weight / (fit.alpha8 * theta * theta * theta);
    u[0]! -= q;
    u[1]! += 3 * q;
    u[5]! += 4 * q;
    u[2]! -= 12 * q;
    if (order === 3) {
      u[3]! += 60 * q;
      u[4]! -= 360 * q;
    }
    return;
  }
  const c = fit.coefficients;
  let a0 = 0;
  let a1 = 0;
  let a2 = 0;
  let b0 = 0;
  let b1 = 0;
  let b2 = 0;
  for (let i = c.length - 10; i >= 0; i -= 10) {
    a0 = a0 * theta + c[i]!;
    b0 = b0 * theta + c[i + 1]!;
    a1 = a1 * theta + c[i + 2]!;
    b1 = b1 * theta + c[i + 3]!;
    a2 = a2 * theta + c[i + 4]!;
    b2 = b2 * theta + c[i + 5]!;
  }
  top[0] = a0;
  top[1] = a1;
  top[2] = a2;
  bottom[0] = b0;
  bottom[1] = b1;
  bottom[2] = b2;
  if (order === 3) {
    let a3 = 0;
    let a4 = 0;
    let b3 = 0;
    let b4 = 0;
    for (let i = c.length - 10; i >= 0; i -= 10) {
      a3 = a3 * theta + c[i + 6]!;
      b3 = b3 * theta + c[i + 7]!;
      a4 = a4 * theta + c[i + 8]!;
      b4 = b4 * theta + c[i + 9]!;
    }
    top[3] = a3;
    top[4] = a4;
    bottom[3] = b3;
    bottom[4] = b4;
  }
  divideSingle(top, order, top, bottom);
  u[0]! -= weight * top[0]!;
  u[1]! -= weight * top[1]!;
  u[2]! -= weight * top[2]!;
  u[5]! += weight * (top[0]! - top[1]!);
  if (order === 3) {
    u[3]! -= weight * top[3]!;
    u[4]! -= weight * top[4]!;
  }
  if (theta > extinct) return;

  // Three logarithms in one: the product of (1 - e_n), kept also as 1 - lost. With n = 1/(e^x - 1) and w = x^2 n (n + 1),
  // x (ln(1 - e^-x))' = x n, x^2 (...)'' = -w, x^3 (...)''' = w x (1 + 2n), x^4 (...)'''' = -w x^2 (1 + 6n + 6n^2).
  let keep = 1;
  let lost = 0;
  let d1 = 0;
  let d2 = 0;
  let d3 = 0;
  let d4 = 0;
  for (let i = 0; i < 3; i++) {
    const x = fit.exponents[i]! * theta;
    const e = Math.exp(-x);
    const rest = x < small ? -Math.expm1(-x) : 1 - e;
    const n = e / rest;
    const xn = x * n;
    const w = xn * (x + xn);
    lost += e * keep;
    keep *= rest;
    d1 += xn;
    d2 -= w;
    if (order === 2) continue;
    d3 += w * x * (1 + 2 * n);
    d4 -= w * x * x * (1 + 6 * n * (1 + n));
  }
  const logarithm = theta < 4 ? Math.log(keep) : Math.log1p(-lost);
  u[0]! += weight * logarithm;
  u[1]! += weight * d1;
  u[2]! += weight * d2;
  u[5]! += weight * (d1 - logarithm);
  if (order === 3) {
    u[3]! += weight * d3;
    u[4]! += weight * d4;
  }
}

const ofGamma = new Float64Array(SINGLE_LENGTH);
const ofTheta = new Float64Array(SINGLE_LENGTH);
const first = new Float64Array(NATURAL_LENGTH);
const second = new Float64Array(NATURAL_LENGTH);

/** Adds x_j f_ah0(Gamma_j) e^(-c_1 theta_j^2), natural derivatives in (rho, 1/T). Needs T > 0. */
export function addAnharmonic(
  f: Float64Array,
  order: Order,
  point: Float64Array,
  ion: Float64Array,
  lattice: LatticeConstants,
): void {
  const vanished = 800; // exp of this is exactly 0: no 0 times infinity
  const theta = point[POINT_ROOT]! * ion[ION_THETA]!;
  const y = ANHARMONIC_SUPPRESSION * theta * theta;
  if (y > vanished) return;
  const e = Math.exp(-y);
  const r = point[POINT_TEMPERATURE]! / (ion[ION_GAMMA]! * point[POINT_CUBE_ROOT]!); // 1/Gamma
  const p1 = lattice.anharmonic[0] * r;
  const p2 = (lattice.anharmonic[1] / 2) * r * r;
  const p3 = (lattice.anharmonic[2] / 3) * r * r * r;
  if (order === 2) {
    // Terms -p_k e^(-y) with p_k ~ (T rho^(-1/3))^k and y ~ rho/T^2: logarithmic slopes -(k/3 + y) in rho, -(k + 2y) in 1/T.
    const weight = -ion[ION_X]! * e;
    const s0 = p1 + p2 + p3;
    const s1 = p1 + 2 * p2 + 3 * p3;
    const s2 = p1 + 4 * p2 + 9 * p3;
    const y2 = y * y;
    f[0]! += weight * s0;
    f[1]! -= weight * (s1 / 3 + y * s0);
    f[2]! -= weight * (s1 + 2 * y * s0);
    f[3]! += weight * (s2 / 9 + (2 * y + 1) * (s1 / 3) + y2 * s0);
    f[4]! += weight * (s2 / 3 + (5 / 3) * y * s1 + 2 * (y2 - y) * s0);
    f[5]! += weight * (s2 + (4 * y + 1) * s1 + (4 * y2 - 2 * y) * s0);
    return;
  }
  ofGamma[0] = -(p1 + p2 + p3);
  ofGamma[1] = p1 + 2 * p2 + 3 * p3;
  ofGamma[2] = -(2 * p1 + 6 * p2 + 12 * p3);
  ofGamma[3] = 6 * p1 + 24 * p2 + 60 * p3;
  ofGamma[4] = -(24 * p1 + 120 * p2 + 360 * p3);
  ofTheta[0] = e;
  ofTheta[1] = -2 * y * e;
  ofTheta[2] = 2 * y * (2 * y - 1) * e;
  ofTheta[3] = 4 * y * y * (3 - 2 * y) * e;
  ofTheta[4] = 4 * y * y * (3 - 12 * y + 4 * y * y) * e;
  lift(first, order, 1 / 3, ofGamma);
  lift(second, order, 0.5, ofTheta);
  multiply(first, order, first, second);
  const share = ion[ION_X]!;
  for (let i = 0; i < NATURAL_LENGTH; i++) f[i]! += share * first[i]!;
}
