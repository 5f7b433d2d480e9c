/**
 * The moments M_(m,k) of record.ts as sums over the nodes of the trapezoidal rule.
 *
 * Two passes: the first puts y and A = e^(psi - y) of every node into scratch rows (the only exponential), the second
 * forms f = A/(1 + A), g = f(1-f), t = g(1-2f), u = g(1-6g) and adds. With antiparticles B = A e^(-2 nu), and every
 * difference between the two kinds is formed from D = f - fb = A (1 - e^(-2 nu)) / ((1+A)(1+B)), which keeps its
 * relative accuracy down to nu = 0 (one division serves both kinds):
 *
 *     g - gb = D (1 - f - fb)     t - tb = (g-gb)(1-2f) - 2 gb D     u - ub = (t-tb)(1-2f) - 2 tb D - 2 (g-gb)(g+gb)
 *     g y - gb yb = (g-gb) y - gb c       g y^2 + gb yb^2 = (g+gb) y^2 + gb c (2y + c)       (the same for t and u)
 *
 * with c = yb - y = 2 Ec/theta.
 */
import { EXPONENTIAL_OFFSET, EXPONENTIAL_STEPS, exponentialLow, exponentialTable } from "../numerics/exponential.js";
import { refuseOverflow } from "./momentum-ladder.js";
import { NODE_ENERGY, NODE_ENERGY_LOW, NODE_NUMBER, NODE_PRESSURE, NODE_STRIDE } from "./node-layout.js";
import {
  CENTRE,
  CUT,
  NODES,
  NU,
  PSI,
  STEP,
  SUM_M00,
  SUM_M10,
  SUM_M11,
  SUM_M12,
  SUM_M20,
  SUM_M21,
  SUM_M22,
  SUM_M23,
  SUM_M30,
  SUM_M31,
  SUM_M32,
  SUM_P,
  SUM_Q,
  THETA,
} from "./record.js";

const CAPACITY = 512;
const ys = new Float64Array(CAPACITY);
const factors = new Float64Array(CAPACITY);

/**
 * First pass: y and A of every node with y < CUT; returns their number.
 * `shifted`: the centre lies at E = 0, so e^(-1/theta) is taken out of the exponential to keep its argument small.
 *
 * A to half an ulp: the entropy is an antisymmetric sum about the Fermi edge and amplifies errors of A by 0.28 eta.
 * So the rest r = k/16 - x is not the difference of rounded numbers but theta r = (k theta/16 - E + ...) over theta, with
 * theta/16 in two parts (the first of 40 bits: its multiples are exact), and the table has a low part.
 */
export function fillFactors(gas: Float64Array, row: Float64Array, shifted: boolean): number {
  const theta = gas[THETA]!;
  const inverse = 1 / theta;
  const cut = gas[CUT]!;
  const shift = shifted ? inverse : 0;
  const origin = shifted ? 0 : gas[CENTRE]!;
  const scale = Math.exp(gas[PSI]! - shift);
  const unit = theta * (1 / EXPONENTIAL_STEPS);
  const split = unit * 8193; // 2^13 + 1
  const unitHigh = split - (split - unit);
  const unitLow = unit - unitHigh;
  let count = 0;
  for (let node = 0; ; node += NODE_STRIDE) {
    const energy = row[node + NODE_ENERGY]! - origin;
    const low = row[node + NODE_ENERGY_LOW]!;
    const x = (energy + low) * inverse;
    const y = x + shift;
    if (!(y < cut)) {
      if (y === Number.POSITIVE_INFINITY) refuseOverflow(gas[THETA]!);
      break;
    }
    const k = (x * EXPONENTIAL_STEPS + (EXPONENTIAL_OFFSET + 0.5)) | 0;
    const m = k - EXPONENTIAL_OFFSET;
    const r = (m * unitHigh - energy + (m * unitLow - low)) * inverse + exponentialLow[k]!;
    const r2 = r * r;
    const polynomial =
      1 + (r + (r2 * (0.5 + r * (1 / 6)) + r2 * r2 * (1 / 24 + r * (1 / 120) + r2 * (1 / 720 + r * (1 / 5040)))));
    ys[count] = y;
    factors[count] = scale * exponentialTable[k]! * polynomial;
    count++;
  }
  gas[NODES] = count;
  return count;
}

/** Second pass for particles alone: the moments that order 2 needs. */
export function sumParticles(gas: Float64Array, row: Float64Array, count: number): void {
  let m00 = 0;
  let m10 = 0;
  let m11 = 0;
  let m12 = 0;
  let m20 = 0;
  let m21 = 0;
  let m22 = 0;
  let pressure = 0;
  let q = 0;
  for (let i = 0, node = 0; i < count; i++, node += NODE_STRIDE) {
    const y = ys[i]!;
    const a = factors[i]!;
    const number = row[node + NODE_NUMBER]!;
    const weight = row[node + NODE_PRESSURE]!;
    const empty = 1 / (1 + a);
    const f = a * empty;
    const g = f * empty;
    const pg = number * g;
    const pt = pg * (empty - f);
    const pgy = pg * y;
    const pty = pt * y;
    m00 += number * f;
    m10 += pg;
    m11 += pgy;
    m12 += pgy * y;
    m20 += pt;
    m21 += pty;
    m22 += pty * y;
    pressure += weight * f;
    q += weight * g * y;
  }
  const h = gas[STEP]!;
  gas[SUM_M00] = m00 * h;
  gas[SUM_M10] = m10 * h;
  gas[SUM_M11] = m11 * h;
  gas[SUM_M12] = m12 * h;
  gas[SUM_M20] = m20 * h;
  gas[SUM_M21] = m21 * h;
  gas[SUM_M22] = m22 * h;
  gas[SUM_P] = pressure * h;
  gas[SUM_Q] = q * h;
}

/** The four more that order 3 and (2,2) need. */
export function sumParticlesThird(gas: Float64Array, row: Float64Array, count: number): void {
  let m23 = 0;
  let m30 = 0;
  let m31 = 0;
  let m32 = 0;
  for (let i = 0, node = 0; i < count; i++, node += NODE_STRIDE) {
    const y = ys[i]!;
    const a = factors[i]!;
    const empty = 1 / (1 + a);
    const f = a * empty;
    const g = f * empty;
    const pg = row[node + NODE_NUMBER]! * g;
    const pu = pg * (1 - 6 * g);
    const puy = pu * y;
    m23 += pg * (empty - f) * y * y * y;
    m30 += pu;
    m31 += puy;
    m32 += puy * y;
  }
  const h = gas[STEP]!;
  gas[SUM_M23] = m23 * h;
  gas[SUM_M30] = m30 * h;
  gas[SUM_M31] = m31 * h;
  gas[SUM_M32] = m32 * h;
}

/** Second pass for particles and antiparticles together: the moments that order 2 needs. */
export function sumPairs(gas: Float64Array, row: Float64Array, count: number): void {
  const nu = gas[NU]!;
  const ratio = Math.exp(-2 * nu); // B/A
  const deficit = -Math.expm1(-2 * nu);
  const c = (2 * (1 + gas[CENTRE]!)) / gas[THETA]!;
  let m00 = 0;
  let m10 = 0;
  let m11 = 0;
  let m12 = 0;
  let m20 = 0;
  let m21 = 0;
  let m22 = 0;
  let pressure = 0;
  let q = 0;
  for (let i = 0, node = 0; i < count; i++, node += NODE_STRIDE) {
    const y = ys[i]!;
    const a = factors[i]!;
    const number = row[node + NODE_NUMBER]!;
    const weight = row[node + NODE_PRESSURE]!;
    const b = a * ratio;
    const both = 1 / ((1 + a) * (1 + b));
    const empty = (1 + b) * both;
    const emptyB = (1 + a) * both;
    const f = a * empty;
    const fB = b * emptyB;
    const g = f * empty;
    const gB = fB * emptyB;
    const difference = a * deficit * both;
    const gSum = g + gB;
    const gDifference = difference * (empty - fB);
    const slope = empty - f;
    const tDifference = gDifference * slope - 2 * gB * difference;
    const tB = gB * (emptyB - fB);
    const tSum = g * slope + tB;
    const yc = c * (2 * y + c);
    const gSumY = gSum * y;
    const gBc = gB * c;
    m00 += number * difference;
    m10 += number * gSum;
    m11 += number * (gDifference * y - gBc);
    m12 += number * (gSumY * y + gB * yc);
    m20 += number * tDifference;
    m21 += number * (tSum * y + tB * c);
    m22 += number * (tDifference * y * y - tB * yc);
    pressure += weight * (f + fB);
    q += weight * (gSumY + gBc);
  }
  const h = gas[STEP]!;
  gas[SUM_M00] = m00 * h;
  gas[SUM_M10] = m10 * h;
  gas[SUM_M11] = m11 * h;
  gas[SUM_M12] = m12 * h;
  gas[SUM_M20] = m20 * h;
  gas[SUM_M21] = m21 * h;
  gas[SUM_M22] = m22 * h;
  gas[SUM_P] = pressure * h;
  gas[SUM_Q] = q * h;
}

/** The four more that order 3 and (2,2) need, with antiparticles. */
export function sumPairsThird(gas: Float64Array, row: Float64Array, count: number): void {
  const nu = gas[NU]!;
  const ratio = Math.exp(-2 * nu);
  const deficit = -Math.expm1(-2 * nu);
  const c = (2 * (1 + gas[CENTRE]!)) / gas[THETA]!;
  let m23 = 0;
  let m30 = 0;
  let m31 = 0;
  let m32 = 0;
  for (let i = 0, node = 0; i < count; i++, node += NODE_STRIDE) {
    const y = ys[i]!;
    const a = factors[i]!;
    const number = row[node + NODE_NUMBER]!;
    const b = a * ratio;
    const both = 1 / ((1 + a) * (1 + b));
    const empty = (1 + b) * both;
    const emptyB = (1 + a) * both;
    const f = a * empty;
    const fB = b * emptyB;
    const g = f * empty;
    const gB = fB * emptyB;
    const difference = a * deficit * both;
    const gDifference = difference * (empty - fB);
    const slope = empty - f;
    const t = g * slope;
    const tB = gB * (emptyB - fB);
    const uB = gB * (1 - 6 * gB);
    const uSum = g * (1 - 6 * g) + uB;
    const tDifference = gDifference * slope - 2 * gB * difference;
    const uDifference = tDifference * slope - 2 * tB * difference - 2 * gDifference * (g + gB);
    const yB = y + c;
    m23 += number * (t * y * y * y + tB * yB * yB * yB);
    m30 += number * uSum;
    m31 += number * (uDifference * y - uB * c);
    m32 += number * (uSum * y * y + uB * c * (2 * y + c));
  }
  const h = gas[STEP]!;
  gas[SUM_M23] = m23 * h;
  gas[SUM_M30] = m30 * h;
  gas[SUM_M31] = m31 * h;
  gas[SUM_M32] = m32 * h;
}
