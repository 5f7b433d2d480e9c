/**
 * One sheet of a table at a point: L(ln rho, ln T) and its derivatives from the patch that holds the point.
 *
 * Loads the four corners once; every derivative is of the same polynomial, so they belong to each other to rounding.
 */
import { BASIS_LENGTH, fillBasis } from "../numerics/quintic.js";
import type { TableAxis, TableSheet } from "./table.js";

/** Slots of the derivatives L_ij by ln rho and ln T: the natural order 00 10 01 20 11 02 30 21 12 03 22. */
export const SURFACE_LENGTH = 11;

/** A sheet made ready for look-up. */
export interface Surface {
  readonly u: AxisScale;
  readonly v: AxisScale;
  /** By block: first number of its nodes (-1: none), cells along density, cells along temperature, exponent. */
  readonly blocks: Int32Array;
  /** Node derivatives times powers of the cell's sizes. */
  readonly nodes: Float64Array;
  /** Where: ln rho, ln T. */
  readonly at: Float64Array;
  /** L and its derivatives. */
  readonly out: Float64Array;
  /** Slot 0: the exponent k of the block. */
  readonly exponent: Int32Array;
  /** Slot 0: what the free energy is multiplied by, 1 for the composition of the table. */
  readonly share: Float64Array;
  readonly basisU: Float64Array;
  readonly basisV: Float64Array;
  readonly rows: Float64Array;
}

/** ln of the lower end, and blocks per unit of the logarithm. */
export interface AxisScale {
  readonly start: number;
  readonly perUnit: number;
  readonly blocks: number;
}

/** The scale of an axis. */
export function axisScale({ lowest, highest, blocks }: TableAxis): AxisScale {
  return { start: Math.log(lowest), perUnit: blocks / Math.log(highest / lowest), blocks };
}

/** The number that a block's nodes start with, by block, -1 where there is none; the last entry is their end. */
export function firstNumbers({ densityLevels, temperatureLevels }: TableSheet): Int32Array {
  const first = new Int32Array(densityLevels.length + 1);
  let next = 0;
  for (let i = 0; i < densityLevels.length; i++) {
    const [m, n] = [densityLevels[i]!, temperatureLevels[i]!];
    first[i] = m < 0 ? -1 : next;
    if (m >= 0) next += 9 * (2 ** m + 1) * (2 ** n + 1);
  }
  first[densityLevels.length] = next;
  return first;
}

/** Makes a sheet ready. */
export function surfaceOf(sheet: TableSheet, density: TableAxis, temperature: TableAxis): Surface {
  const u = axisScale(density);
  const v = axisScale(temperature);
  const first = firstNumbers(sheet);
  const blocks = new Int32Array(4 * sheet.densityLevels.length);
  const nodes = Float64Array.from(sheet.nodes);
  for (let i = 0; i < sheet.densityLevels.length; i++) {
    if (first[i]! < 0) {
      blocks[4 * i] = -1;
      continue;
    }
    const m = 2 ** sheet.densityLevels[i]!;
    const n = 2 ** sheet.temperatureLevels[i]!;
    blocks.set([first[i]!, m, n, sheet.exponents[i]!], 4 * i);
    const du = 1 / (u.perUnit * m);
    const dv = 1 / (v.perUnit * n);
    const scale = [1, dv, dv * dv, du, du * dv, du * dv * dv, du * du, du * du * dv, du * du * dv * dv];
    const end = first[i]! + 9 * (m + 1) * (n + 1);
    for (let k = first[i]!; k < end; k++) nodes[k]! *= scale[(k - first[i]!) % 9]!;
  }
  const record = (length: number): Float64Array => new Float64Array(length);
  return {
    u,
    v,
    blocks,
    nodes,
    at: record(2),
    out: record(SURFACE_LENGTH),
    exponent: new Int32Array(1),
    share: Float64Array.of(1),
    basisU: record(BASIS_LENGTH),
    basisV: record(BASIS_LENGTH),
    rows: record(24),
  };
}

/** Fills `out` at `at`, to second order (order 2) or to the eleven. False where the sheet has no block. */
export function fillSurface(surface: Surface, order: number): boolean {
  const { u, v, blocks, nodes, at, out, basisU, basisV, rows } = surface;
  const x = (at[0]! - u.start) * u.perUnit;
  const y = (at[1]! - v.start) * v.perUnit;
  // Ends belong to the last block; rounding may put them a step outside.
  const p = Math.min(Math.max(Math.floor(x), 0), u.blocks - 1) | 0;
  const q = Math.min(Math.max(Math.floor(y), 0), v.blocks - 1) | 0;
  const block = 4 * (p * v.blocks + q);
  const first = blocks[block]!;
  if (first < 0) return false;
  const m = blocks[block + 1]!;
  const n = blocks[block + 2]!;
  surface.exponent[0] = blocks[block + 3]!;
  const xm = (x - p) * m;
  const yn = (y - q) * n;
  const i = Math.min(Math.max(Math.floor(xm), 0), m - 1) | 0;
  const j = Math.min(Math.max(Math.floor(yn), 0), n - 1) | 0;
  basisU[0] = xm - i;
  basisV[0] = yn - j;
  fillBasis(basisU);
  fillBasis(basisV);

  const stride = 9 * (n + 1);
  const corner = first + i * stride + 9 * j;
  const b0 = basisV[0]!;
  const b1 = basisV[1]!;
  const b2 = basisV[2]!;
  const b3 = basisV[3]!;
  const b4 = basisV[4]!;
  const b5 = basisV[5]!;
  const c0 = basisV[6]!;
  const c1 = basisV[7]!;
  const c2 = basisV[8]!;
  const c4 = basisV[10]!;
  const c5 = basisV[11]!;
  const d0 = basisV[12]!;
  const d1 = basisV[13]!;
  const d2 = basisV[14]!;
  const d4 = basisV[16]!;
  const d5 = basisV[17]!;
  // Along temperature: value, slope and curvature of L, L_u, L_uu at both densities.
  for (let row = 0; row < 6; row++) {
    const k = row < 3 ? corner + 3 * row : corner + stride + 3 * (row - 3);
    const f0 = nodes[k]!;
    const f1 = nodes[k + 1]!;
    const f2 = nodes[k + 2]!;
    const f3 = nodes[k + 9]!;
    const f4 = nodes[k + 10]!;
    const f5 = nodes[k + 11]!;
    rows[row] = b0 * f0 + b1 * f1 + b2 * f2 + b3 * f3 + b4 * f4 + b5 * f5;
    rows[row + 6] = c0 * (f0 - f3) + c1 * f1 + c2 * f2 + c4 * f4 + c5 * f5;
    rows[row + 12] = d0 * (f0 - f3) + d1 * f1 + d2 * f2 + d4 * f4 + d5 * f5;
  }
  const perU = u.perUnit * m;
  const perV = v.perUnit * n;
  const perUU = perU * perU;
  const perVV = perV * perV;
  const e0 = basisU[0]!;
  const e1 = basisU[1]!;
  const e2 = basisU[2]!;
  const e3 = basisU[3]!;
  const e4 = basisU[4]!;
  const e5 = basisU[5]!;
  const f0 = basisU[6]!;
  const f1 = basisU[7]!;
  const f2 = basisU[8]!;
  const f4 = basisU[10]!;
  const f5 = basisU[11]!;
  const g0 = basisU[12]!;
  const g1 = basisU[13]!;
  const g2 = basisU[14]!;
  const g4 = basisU[16]!;
  const g5 = basisU[17]!;
  const r0 = rows[0]!;
  const r1 = rows[1]!;
  const r2 = rows[2]!;
  const r3 = rows[3]!;
  const r4 = rows[4]!;
  const r5 = rows[5]!;
  const s0 = rows[6]!;
  const s1 = rows[7]!;
  const s2 = rows[8]!;
  const s3 = rows[9]!;
  const s4 = rows[10]!;
  const s5 = rows[11]!;
  out[0] = e0 * r0 + e1 * r1 + e2 * r2 + e3 * r3 + e4 * r4 + e5 * r5;
  out[1] = perU * (f0 * (r0 - r3) + f1 * r1 + f2 * r2 + f4 * r4 + f5 * r5);
  out[2] = perV * (e0 * s0 + e1 * s1 + e2 * s2 + e3 * s3 + e4 * s4 + e5 * s5);
  out[3] = perUU * (g0 * (r0 - r3) + g1 * r1 + g2 * r2 + g4 * r4 + g5 * r5);
  out[4] = perU * perV * (f0 * (s0 - s3) + f1 * s1 + f2 * s2 + f4 * s4 + f5 * s5);
  out[5] =
    perVV * (e0 * rows[12]! + e1 * rows[13]! + e2 * rows[14]! + e3 * rows[15]! + e4 * rows[16]! + e5 * rows[17]!);
  if (order === 3) fillThird(surface, corner, stride, perU, perV);
  return true;
}

/** The third derivatives (they jump from cell to cell) and (2,2); after the rest. */
function fillThird(surface: Surface, corner: number, stride: number, perU: number, perV: number): void {
  const { nodes, out, basisU: bu, basisV: bv, rows } = surface;
  for (let row = 0; row < 6; row++) {
    const k = row < 3 ? corner + 3 * row : corner + stride + 3 * (row - 3);
    rows[row + 18] =
      bv[18]! * (nodes[k]! - nodes[k + 9]!) +
      bv[19]! * nodes[k + 1]! +
      bv[20]! * nodes[k + 2]! +
      bv[22]! * nodes[k + 10]! +
      bv[23]! * nodes[k + 11]!;
  }
  out[6] = perU * perU * perU * along(bu, 18, rows, 0);
  out[7] = perU * perU * perV * along(bu, 12, rows, 6);
  out[8] = perU * perV * perV * along(bu, 6, rows, 12);
  out[9] = perV * perV * perV * along(bu, 0, rows, 18);
  out[10] = perU * perU * perV * perV * along(bu, 12, rows, 12);
}

/** Sum over the six rows of one derivative of the basis. */
function along(basis: Float64Array, b: number, rows: Float64Array, r: number): number {
  return (
    basis[b]! * rows[r]! +
    basis[b + 1]! * rows[r + 1]! +
    basis[b + 2]! * rows[r + 2]! +
    basis[b + 3]! * rows[r + 3]! +
    basis[b + 4]! * rows[r + 4]! +
    basis[b + 5]! * rows[r + 5]!
  );
}
