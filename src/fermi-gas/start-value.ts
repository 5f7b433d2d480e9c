/**
 * The start value of charge neutrality, good to 2e-8: so one sweep and a Taylor step reach rounding.
 *
 * Degenerate gas: three terms of Sommerfeld's series, inverted by one Newton step. Otherwise: let N(theta) be the
 * classical density int p^2 e^(-(E-1)/theta) dp, b = n/N, and
 *
 *     X = sqrt(b^2 + 4 e^(-2/theta)) = 2 e^(-1/theta) cosh Qc,    nu = Qc + tanh(Qc) D(X, theta)
 *
 * Qc = asinh(b e^(1/theta)/2) is the classical answer. nu - Qc is odd in n, so D is a function of cosh Qc alone, and its
 * Fermi corrections are a power series in X without structure at the scale e^(-1/theta): one smooth table of 1500
 * numbers serves classical gas, pairs, and the onset of degeneracy. Only the start depends on it.
 */
import { ETA, KINETIC_MU, NET_DENSITY, NU, THETA } from "./record.js";
import { densityCoefficients, tableCoefficients } from "./start-table.js";

/** How to solve from here: 0 trapezoid, 1 degenerate (KINETIC_MU is the unknown), 2 classical (no equation). */
export type Regime = 0 | 1 | 2;
export const REGIME_TRAPEZOID = 0;
export const REGIME_DEGENERATE = 1;
export const REGIME_CLASSICAL = 2;

/** Fermi energy over temperature from which the degenerate start is the better one. */
export const DEGENERATE_START = 39;
/** X below which the Fermi correction 2^(-3/2) X is beyond rounding. */
const CLASSICAL_LIMIT = Math.exp(-38);

const Z2 = 1.6449340668482264; // pi^2/6
const Z4 = 1.8940656589944918; // 7 pi^4/360
const Z6 = 1.9710218259105; // 31 pi^6/15120

/** Scratch of the table look-up, as records: see record.ts for why. */
const table = new Float64Array(4);
const CLASSICAL = 0;
const U = 1;
const T = 2;
const D = 3;

/**
 * Writes ETA and NU, or KINETIC_MU, into the record; reads NET_DENSITY, THETA, and KINETIC_MU = e_F of the cold gas.
 * Without `antiparticles` the start is good to some 10 % between the classical and the degenerate gas.
 */
export function startValue(gas: Float64Array, antiparticles: boolean): Regime {
  const theta = gas[THETA]!;
  const n = gas[NET_DENSITY]!;
  if (gas[KINETIC_MU]! > DEGENERATE_START * theta) {
    degenerateStart(gas);
    return REGIME_DEGENERATE;
  }
  const inverse = 1 / theta;
  classicalDensity(gas, table);
  const classical = table[CLASSICAL]!;
  const b = n / classical;
  if (!antiparticles) {
    if (b < CLASSICAL_LIMIT) return REGIME_CLASSICAL;
    const ratio = gas[KINETIC_MU]! * inverse;
    // First Fermi correction of the classical gas; first Sommerfeld correction of the degenerate one.
    gas[ETA] = b < 2 ? Math.log(b) + 0.35 * b : ratio - 0.8 / ratio;
    gas[NU] = gas[ETA]! + inverse;
    return REGIME_TRAPEZOID;
  }
  const threshold = Math.exp(-inverse);
  const x = Math.sqrt(b * b + 4 * threshold * threshold);
  if (x < CLASSICAL_LIMIT) return REGIME_CLASSICAL;
  const lowest = BRANCH_POINT + 2 * threshold;
  let u = Math.log((BRANCH_POINT + x) / lowest) / Math.log((BRANCH_POINT + largestX(theta, classical)) / lowest);
  if (u > 1) u = 1;
  table[U] = u;
  table[T] = temperatureCoordinate(theta, u);
  evaluateTable(table);
  const correction = (table[D]! * b) / x;
  if (b < 4 * threshold) {
    gas[NU] = Math.asinh((0.5 * b) / threshold) + correction;
    gas[ETA] = gas[NU]! - inverse;
  } else {
    gas[ETA] = Math.log(0.5 * (b + x)) + correction;
    gas[NU] = gas[ETA]! + inverse;
  }
  return REGIME_TRAPEZOID;
}

/** KINETIC_MU of the degenerate gas to 1e-8, from its value at T = 0, the Fermi energy. */
function degenerateStart(gas: Float64Array): void {
  const theta = gas[THETA]!;
  const energy = gas[KINETIC_MU]!;
  const theta2 = theta * theta;
  const x2 = energy * (energy + 2);
  const guess = energy - (Z2 * theta2 * (2 * x2 + 1)) / (x2 * (1 + energy));
  const p2 = guess * (guess + 2);
  const total = 1 + guess;
  const p = Math.sqrt(p2);
  const r = theta2 / p2;
  const density =
    (p2 * p) / 3 + (theta2 / p) * (Z2 * (2 * p2 + 1) + ((3 * r) / p2) * (Z4 + (Z6 * 5 * (6 * p2 + 7) * r) / p2));
  const slope = p * total + (Z2 * r * total * (2 * p2 - 1)) / p;
  gas[KINETIC_MU] = guess - (density - gas[NET_DENSITY]!) / slope;
}

// The coordinates of the table (docs/generators/start-table.ts makes it with these very functions).

/** The branch point of the Fermi integrals at e^eta = -1 lies at b = -2.61: logarithms of 2.6 + X see it alike. */
export const BRANCH_POINT = 2.6;
const LARGEST_THETA = 4000;
const SCALE_THETA = 0.3;
/** Patch borders in the temperature coordinate and in u. */
export const PATCHES_T: readonly number[] = [0, 0.25, 0.5, 0.75, 0.92, 1];
export const PATCHES_U: readonly number[] = [0, 0.3, 0.62, 1];
/** Coefficients per direction of a patch. */
export const PATCH_SIZE = 10;
const DENSITY_SCALE = 0.7;
/** (2/sqrt(pi/2))^(2/3): makes [theta (1 + ALPHA theta)]^(3/2) right in both limits of N(theta). */
const ALPHA = 1.3655681265105915;

/** X at which the degenerate start takes over: p^3/(3N) at Fermi energy 39 theta. */
export function largestX(theta: number, classical: number): number {
  const energy = DEGENERATE_START * theta;
  const p2 = energy * (energy + 2);
  return (p2 * Math.sqrt(p2)) / (3 * classical);
}

/** t = theta/(theta + s(u)), stretched so that t = 1 at the largest temperature (u = 0). */
export function temperatureCoordinate(theta: number, u: number): number {
  return (theta / (theta + SCALE_THETA / (1 + 2 * u))) * ((LARGEST_THETA + SCALE_THETA) / LARGEST_THETA);
}

/** The temperature at coordinate t; inverse of {@link temperatureCoordinate}. */
export function temperatureAt(t: number, u: number): number {
  const ratio = (t * LARGEST_THETA) / (LARGEST_THETA + SCALE_THETA);
  return ((SCALE_THETA / (1 + 2 * u)) * ratio) / (1 - ratio);
}

/** Coordinate of the density fit, in [-1, 1]. */
export function densityCoordinate(theta: number): number {
  return (2 * theta) / (theta + DENSITY_SCALE) - 1;
}

/** The temperature at a coordinate of the density fit. */
export function densityTemperature(x: number): number {
  return (DENSITY_SCALE * (1 + x)) / (1 - x);
}

/** Both limits of the classical density: sqrt(pi/2) [theta (1 + alpha theta)]^(3/2). */
export function densityLimit(theta: number): number {
  const y = theta * (1 + ALPHA * theta);
  return Math.sqrt(Math.PI / 2) * y * Math.sqrt(y);
}

/** Writes N(theta) = int p^2 e^(-(E-1)/theta) dp, to 2e-9. */
function classicalDensity(gas: Float64Array, out: Float64Array): void {
  const theta = gas[THETA]!;
  const x = densityCoordinate(theta);
  let sum = 0;
  for (let k = densityCoefficients.length - 1; k >= 0; k--) sum = sum * x + densityCoefficients[k]!;
  out[CLASSICAL] = densityLimit(theta) * Math.exp(sum);
}

/** Writes D from its patch: a polynomial of degree 9 in either local variable. */
function evaluateTable(record: Float64Array): void {
  const t = record[T]!;
  const u = record[U]!;
  const i = t < 0.25 ? 0 : t < 0.5 ? 1 : t < 0.75 ? 2 : t < 0.92 ? 3 : 4;
  const j = u < 0.3 ? 0 : u < 0.62 ? 1 : 2;
  const y = (2 * t - PATCHES_T[i]! - PATCHES_T[i + 1]!) / (PATCHES_T[i + 1]! - PATCHES_T[i]!);
  const x = (2 * u - PATCHES_U[j]! - PATCHES_U[j + 1]!) / (PATCHES_U[j + 1]! - PATCHES_U[j]!);
  const x2 = x * x;
  const d = tableCoefficients;
  let c = (i * 3 + j) * PATCH_SIZE * PATCH_SIZE + PATCH_SIZE * (PATCH_SIZE - 1);
  let sum = 0;
  for (let k = 0; k < PATCH_SIZE; k++, c -= PATCH_SIZE) {
    const even = (((d[c + 8]! * x2 + d[c + 6]!) * x2 + d[c + 4]!) * x2 + d[c + 2]!) * x2 + d[c]!;
    const odd = (((d[c + 9]! * x2 + d[c + 7]!) * x2 + d[c + 5]!) * x2 + d[c + 3]!) * x2 + d[c + 1]!;
    sum = sum * y + (even + odd * x);
  }
  record[D] = sum;
}
