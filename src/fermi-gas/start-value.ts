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
import { CLASSICAL_LIMIT, DEGENERATE_START } from "./accuracy.js";
import {
  ETA,
  KINETIC_MU,
  NET_DENSITY,
  NU,
  REGIME_CLASSICAL,
  REGIME_DEGENERATE,
  REGIME_TRAPEZOID,
  THETA,
} from "./record.js";
import {
  ALPHA,
  DENSITY_SCALE,
  fillCoordinates,
  NORM,
  PATCH_SIZE,
  PATCHES_T,
  PATCHES_U,
  TABLE_CLASSICAL,
  TABLE_D,
  TABLE_LENGTH,
  TABLE_T,
  TABLE_THETA,
  TABLE_THRESHOLD,
  TABLE_U,
  TABLE_X,
} from "./start-coordinates.js";
import { densityCoefficients, tableCoefficients } from "./start-table.js";

/** Scratch of a look-up, slots of start-coordinates.ts. */
const table = new Float64Array(TABLE_LENGTH);

/**
 * Writes ETA and NU, or KINETIC_MU, into the record and returns how to solve from there (REGIME_ of record.ts); reads
 * NET_DENSITY, THETA, and KINETIC_MU = e_F of the cold gas.
 * Without `antiparticles` the start is good to some 10 % between the classical and the degenerate gas.
 */
export function startValue(gas: Float64Array, antiparticles: boolean): number {
  const theta = gas[THETA]!;
  const n = gas[NET_DENSITY]!;
  if (gas[KINETIC_MU]! > DEGENERATE_START * theta) {
    degenerateStart(gas);
    return REGIME_DEGENERATE;
  }
  const inverse = 1 / theta;
  table[TABLE_THETA] = theta;
  classicalDensity();
  const classical = table[TABLE_CLASSICAL]!;
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
  table[TABLE_X] = x;
  table[TABLE_THRESHOLD] = threshold;
  fillCoordinates(table);
  evaluateTable();
  const correction = (table[TABLE_D]! * b) / x;
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
  const z2 = 1.6449340668482264; // pi^2/6
  const z4 = 1.8940656589944918; // 7 pi^4/360
  const z6 = 1.9710218259105; // 31 pi^6/15120
  const theta = gas[THETA]!;
  const energy = gas[KINETIC_MU]!;
  const theta2 = theta * theta;
  const x2 = energy * (energy + 2);
  const guess = energy - (z2 * theta2 * (2 * x2 + 1)) / (x2 * (1 + energy));
  const p2 = guess * (guess + 2);
  const total = 1 + guess;
  const p = Math.sqrt(p2);
  const inverse = 1 / p2;
  const r = theta2 * inverse;
  const density =
    (p2 * p) / 3 + r * p * (z2 * (2 * p2 + 1) + 3 * r * inverse * (z4 + z6 * 5 * (6 * p2 + 7) * r * inverse));
  const slope = p * (total + z2 * r * inverse * total * (2 * p2 - 1));
  gas[KINETIC_MU] = guess - (density - gas[NET_DENSITY]!) / slope;
}

/** Writes N(theta) = int p^2 e^(-(E-1)/theta) dp, to 2e-9. */
function classicalDensity(): void {
  const theta = table[TABLE_THETA]!;
  const x = (2 * theta) / (theta + DENSITY_SCALE) - 1;
  let sum = 0;
  for (let k = densityCoefficients.length - 1; k >= 0; k--) sum = sum * x + densityCoefficients[k]!;
  const y = theta * (1 + ALPHA * theta);
  table[TABLE_CLASSICAL] = NORM * y * Math.sqrt(y) * Math.exp(sum);
}

/** Writes D from its patch: a polynomial of degree 9 in either local variable. */
function evaluateTable(): void {
  const t = table[TABLE_T]!;
  const u = table[TABLE_U]!;
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
  table[TABLE_D] = sum;
}
