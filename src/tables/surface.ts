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
  /** Cells per unit of ln rho and ln T. */
  readonly scale: Float64Array;
}

/** ln of the lower end, and blocks per unit of the logarithm. */
interface AxisScale {
  readonly start: number;
  readonly perUnit: number;
  readonly blocks: number;
}

/** The scale of an axis. */
function axisScale({ lowest, highest, blocks }: TableAxis): AxisScale {
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
    scale: record(2),
  };
}

/**
 * Fills `out` at `at`, to second order (order 2) or to the eleven. False where the sheet has no block.
 *
 * Written out: the sums along temperature of six rows, then along density, all in registers.
 */
export function fillSurface(surface: Surface, order: number): boolean {
  const { u, v, nodes, at, out } = surface;
  const x = (at[0]! - u.start) * u.perUnit;
  const y = (at[1]! - v.start) * v.perUnit;
  // Ends belong to the last block; rounding may put them a step outside.
  const p = Math.min(x | 0, u.blocks - 1);
  const q = Math.min(y | 0, v.blocks - 1);
  const block = 4 * (p * v.blocks + q);
  const first = surface.blocks[block]!;
  if (first < 0) return false;
  const m = surface.blocks[block + 1]!;
  const n = surface.blocks[block + 2]!;
  surface.exponent[0] = surface.blocks[block + 3]!;
  const xm = (x - p) * m;
  const yn = (y - q) * n;
  const i = Math.min(xm | 0, m - 1);
  const j = Math.min(yn | 0, n - 1);
  const stride = 9 * (n + 1);
  const k = first + i * stride + 9 * j;
  const l = k + stride;

  // The basis along temperature (numerics/quintic.ts): b values, c slopes, d curvatures.
  const t = yn - j;
  const r = 1 - t;
  const t2 = t * t;
  const r2 = r * r;
  const tr = t * r;
  const b3 = t2 * t * (1 + 3 * r + 6 * r2);
  const b1 = r2 * tr * (1 + 3 * t);
  const b2 = 0.5 * r2 * r * t2;
  const b4 = -t2 * tr * (1 + 3 * r);
  const b5 = 0.5 * t2 * t * r2;
  const c3 = 30 * tr * tr;
  const c1 = r2 * (1 + 2 * t - 15 * t2);
  const c2 = 0.5 * r * tr * (2 - 5 * t);
  const c4 = t2 * (1 + 2 * r - 15 * r2);
  const c5 = -0.5 * t * tr * (2 - 5 * r);
  const d3 = 60 * tr * (r - t);
  const d1 = -12 * tr * (3 - 5 * t);
  const d2 = r * (1 - 8 * t + 10 * t2);
  const d4 = 12 * tr * (3 - 5 * r);
  const d5 = t * (1 - 8 * r + 10 * r2);

  const a0 = nodes[k]!;
  const a01 = nodes[k + 1]!;
  const a02 = nodes[k + 2]!;
  const a04 = nodes[k + 10]!;
  const a05 = nodes[k + 11]!;
  const a0d = nodes[k + 9]! - a0;
  const a0v = a0 + b3 * a0d + b1 * a01 + b2 * a02 + b4 * a04 + b5 * a05;
  const a0s = c3 * a0d + c1 * a01 + c2 * a02 + c4 * a04 + c5 * a05;
  const a0c = d3 * a0d + d1 * a01 + d2 * a02 + d4 * a04 + d5 * a05;

  const a1 = nodes[k + 3]!;
  const a11 = nodes[k + 4]!;
  const a12 = nodes[k + 5]!;
  const a14 = nodes[k + 13]!;
  const a15 = nodes[k + 14]!;
  const a1d = nodes[k + 12]! - a1;
  const a1v = a1 + b3 * a1d + b1 * a11 + b2 * a12 + b4 * a14 + b5 * a15;
  const a1s = c3 * a1d + c1 * a11 + c2 * a12 + c4 * a14 + c5 * a15;
  const a1c = d3 * a1d + d1 * a11 + d2 * a12 + d4 * a14 + d5 * a15;

  const a2 = nodes[k + 6]!;
  const a21 = nodes[k + 7]!;
  const a22 = nodes[k + 8]!;
  const a24 = nodes[k + 16]!;
  const a25 = nodes[k + 17]!;
  const a2d = nodes[k + 15]! - a2;
  const a2v = a2 + b3 * a2d + b1 * a21 + b2 * a22 + b4 * a24 + b5 * a25;
  const a2s = c3 * a2d + c1 * a21 + c2 * a22 + c4 * a24 + c5 * a25;
  const a2c = d3 * a2d + d1 * a21 + d2 * a22 + d4 * a24 + d5 * a25;

  const z0 = nodes[l]!;
  const z01 = nodes[l + 1]!;
  const z02 = nodes[l + 2]!;
  const z04 = nodes[l + 10]!;
  const z05 = nodes[l + 11]!;
  const z0d = nodes[l + 9]! - z0;
  const z0v = z0 + b3 * z0d + b1 * z01 + b2 * z02 + b4 * z04 + b5 * z05;
  const z0s = c3 * z0d + c1 * z01 + c2 * z02 + c4 * z04 + c5 * z05;
  const z0c = d3 * z0d + d1 * z01 + d2 * z02 + d4 * z04 + d5 * z05;

  const z1 = nodes[l + 3]!;
  const z11 = nodes[l + 4]!;
  const z12 = nodes[l + 5]!;
  const z14 = nodes[l + 13]!;
  const z15 = nodes[l + 14]!;
  const z1d = nodes[l + 12]! - z1;
  const z1v = z1 + b3 * z1d + b1 * z11 + b2 * z12 + b4 * z14 + b5 * z15;
  const z1s = c3 * z1d + c1 * z11 + c2 * z12 + c4 * z14 + c5 * z15;
  const z1c = d3 * z1d + d1 * z11 + d2 * z12 + d4 * z14 + d5 * z15;

  const z2 = nodes[l + 6]!;
  const z21 = nodes[l + 7]!;
  const z22 = nodes[l + 8]!;
  const z24 = nodes[l + 16]!;
  const z25 = nodes[l + 17]!;
  const z2d = nodes[l + 15]! - z2;
  const z2v = z2 + b3 * z2d + b1 * z21 + b2 * z22 + b4 * z24 + b5 * z25;
  const z2s = c3 * z2d + c1 * z21 + c2 * z22 + c4 * z24 + c5 * z25;
  const z2c = d3 * z2d + d1 * z21 + d2 * z22 + d4 * z24 + d5 * z25;

  const h = xm - i;
  const w = 1 - h;
  const h2 = h * h;
  const w2 = w * w;
  const hw = h * w;
  const e3 = h2 * h * (1 + 3 * w + 6 * w2);
  const e1 = w2 * hw * (1 + 3 * h);
  const e2 = 0.5 * w2 * w * h2;
  const e4 = -h2 * hw * (1 + 3 * w);
  const e5 = 0.5 * h2 * h * w2;
  const f3 = 30 * hw * hw;
  const f1 = w2 * (1 + 2 * h - 15 * h2);
  const f2 = 0.5 * w * hw * (2 - 5 * h);
  const f4 = h2 * (1 + 2 * w - 15 * w2);
  const f5 = -0.5 * h * hw * (2 - 5 * w);
  const g3 = 60 * hw * (w - h);
  const g1 = -12 * hw * (3 - 5 * h);
  const g2 = w * (1 - 8 * h + 10 * h2);
  const g4 = 12 * hw * (3 - 5 * w);
  const g5 = h * (1 - 8 * w + 10 * w2);
  const perU = u.perUnit * m;
  const perV = v.perUnit * n;
  const rise = z0v - a0v;
  const steepening = z0s - a0s;
  out[0] = a0v + e3 * rise + e1 * a1v + e2 * a2v + e4 * z1v + e5 * z2v;
  out[1] = perU * (f3 * rise + f1 * a1v + f2 * a2v + f4 * z1v + f5 * z2v);
  out[2] = perV * (a0s + e3 * steepening + e1 * a1s + e2 * a2s + e4 * z1s + e5 * z2s);
  out[3] = perU * perU * (g3 * rise + g1 * a1v + g2 * a2v + g4 * z1v + g5 * z2v);
  out[4] = perU * perV * (f3 * steepening + f1 * a1s + f2 * a2s + f4 * z1s + f5 * z2s);
  out[5] = perV * perV * (a0c + e3 * (z0c - a0c) + e1 * a1c + e2 * a2c + e4 * z1c + e5 * z2c);
  if (order === 3) {
    surface.basisU[0] = h;
    surface.basisV[0] = t;
    surface.scale[0] = perU;
    surface.scale[1] = perV;
    fillThird(surface, k, stride);
  }
  return true;
}

/** The third derivatives (they jump from cell to cell) and (2,2) of the patch with its corner at `k`. */
function fillThird(surface: Surface, k: number, stride: number): void {
  const { nodes, out, basisU: bu, basisV: bv, rows, scale } = surface;
  const perU = scale[0]!;
  const perV = scale[1]!;
  fillBasis(bu);
  fillBasis(bv);
  for (let row = 0; row < 6; row++) {
    const at = row < 3 ? k + 3 * row : k + stride + 3 * (row - 3);
    const rise = nodes[at + 9]! - nodes[at]!;
    for (let order = 0; order < 4; order++) {
      const b = 6 * order;
      rows[6 * order + row] =
        (order === 0 ? nodes[at]! : 0) +
        bv[b + 3]! * rise +
        bv[b + 1]! * nodes[at + 1]! +
        bv[b + 2]! * nodes[at + 2]! +
        bv[b + 4]! * nodes[at + 10]! +
        bv[b + 5]! * nodes[at + 11]!;
    }
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
