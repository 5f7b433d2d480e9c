/**
 * One sheet of a table at a point: L(ln rho, ln T) and its derivatives from the patch that holds the point.
 *
 * A patch is kept as the 36 coefficients of its powers, four times the memory of its share of the nodes and two thirds of the time; every
 * derivative is of the same polynomial, so they belong to each other to rounding.
 */
import { toPowers } from "../numerics/quintic.js";
import { NODE_LENGTH, type TableAxis, type TableSheet } from "./table.js";

/** Slots of the derivatives L_ij by ln rho and ln T: the natural order 00 10 01 20 11 02 30 21 12 03 22. */
export const SURFACE_LENGTH = 11;

/** Coefficients of a cell. */
const PATCH_LENGTH = 36;

/** A sheet made ready for look-up. */
export interface Surface {
  readonly u: AxisScale;
  readonly v: AxisScale;
  /** By block: first number of its cells (-1: none), cells along density, cells along temperature, exponent. */
  readonly blocks: Int32Array;
  /** By cell, the coefficient of x^i y^j in slot 6 i + j: x, y from 0 to 1 along density and temperature. */
  readonly cells: Float64Array;
  /** Where: ln rho, ln T. */
  readonly at: Float64Array;
  /** L and its derivatives. */
  readonly out: Float64Array;
  /** Slot 0: the exponent k of the block. */
  readonly exponent: Int32Array;
  /** Slot 0: what the free energy is multiplied by, 1 for the composition of the table. */
  readonly share: Float64Array;
  /** By power of x: the row's value, slope, half its curvature and a sixth of its third derivative. */
  readonly rows: Float64Array;
  /** Place in the cell, x and y; cells per unit of ln rho and ln T. */
  readonly place: Float64Array;
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
  let next = 0;
  for (let i = 0; i < sheet.densityLevels.length; i++) {
    if (first[i]! < 0) {
      blocks[4 * i] = -1;
      continue;
    }
    const m = 2 ** sheet.densityLevels[i]!;
    const n = 2 ** sheet.temperatureLevels[i]!;
    blocks.set([next, m, n, sheet.exponents[i]!], 4 * i);
    next += PATCH_LENGTH * m * n;
  }
  const cells = new Float64Array(next);
  for (let i = 0; i < sheet.densityLevels.length; i++) {
    const [at, m, n] = [blocks[4 * i]!, blocks[4 * i + 1]!, blocks[4 * i + 2]!];
    if (at < 0) continue;
    const du = 1 / (u.perUnit * m);
    const dv = 1 / (v.perUnit * n);
    for (let cell = 0; cell < m * n; cell++) {
      const node = first[i]! + NODE_LENGTH * (cell + Math.floor(cell / n));
      const patch = cells.subarray(at + PATCH_LENGTH * cell, at + PATCH_LENGTH * (cell + 1));
      fillPatch(patch, sheet.nodes, node, NODE_LENGTH * (n + 1), du, dv);
    }
  }
  return {
    u,
    v,
    blocks,
    cells,
    at: new Float64Array(2),
    out: new Float64Array(SURFACE_LENGTH),
    exponent: new Int32Array(1),
    share: Float64Array.of(1),
    rows: new Float64Array(24),
    place: new Float64Array(4),
  };
}

const line = new Float64Array(6);

/** The coefficients of a cell of size du, dv from the nodes of its corners: the first at `k`, the one of higher density at `stride`. */
function fillPatch(patch: Float64Array, nodes: Float64Array, k: number, stride: number, du: number, dv: number): void {
  for (let row = 0; row < 6; row++) {
    const at = row < 3 ? k + 3 * row : k + stride + 3 * (row - 3);
    const scale = du ** (row % 3);
    for (let j = 0; j < 6; j++) {
      const corner = j < 3 ? at + j : at + NODE_LENGTH + j - 3;
      line[j] = scale * dv ** (j % 3) * nodes[corner]!;
    }
    toPowers(line);
    patch.set(line, 6 * row);
  }
  for (let j = 0; j < 6; j++) {
    for (let row = 0; row < 6; row++) line[row] = patch[6 * row + j]!;
    toPowers(line);
    for (let row = 0; row < 6; row++) patch[6 * row + j] = line[row]!;
  }
}

/**
 * Fills `out` at `at`, to second order (order 2) or to the eleven. False where the sheet has no block.
 *
 * Horner's scheme with derivatives: each sum of it is the next derivative's coefficient.
 */
export function fillSurface(surface: Surface, order: number): boolean {
  const { u, v, cells, at, out, rows } = surface;
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
  const s = xm - i;
  const t = yn - j;
  const cell = first + PATCH_LENGTH * (i * n + j);
  // Along temperature: value, slope and half the curvature of the six rows.
  for (let row = 0; row < 6; row++) {
    const k = cell + 6 * row;
    const a5 = cells[k + 5]!;
    const a4 = a5 * t + cells[k + 4]!;
    const a3 = a4 * t + cells[k + 3]!;
    const a2 = a3 * t + cells[k + 2]!;
    const a1 = a2 * t + cells[k + 1]!;
    const b4 = a5 * t + a4;
    const b3 = b4 * t + a3;
    const b2 = b3 * t + a2;
    rows[row] = a1 * t + cells[k]!;
    rows[row + 6] = b2 * t + a1;
    rows[row + 12] = ((a5 * t + b4) * t + b3) * t + b2;
  }
  // Along density.
  const perU = u.perUnit * m;
  const perV = v.perUnit * n;
  const a5 = rows[5]!;
  const a4 = a5 * s + rows[4]!;
  const a3 = a4 * s + rows[3]!;
  const a2 = a3 * s + rows[2]!;
  const a1 = a2 * s + rows[1]!;
  const b4 = a5 * s + a4;
  const b3 = b4 * s + a3;
  const b2 = b3 * s + a2;
  out[0] = a1 * s + rows[0]!;
  out[1] = perU * (b2 * s + a1);
  out[3] = 2 * perU * perU * (((a5 * s + b4) * s + b3) * s + b2);
  const c5 = rows[11]!;
  const c4 = c5 * s + rows[10]!;
  const c3 = c4 * s + rows[9]!;
  const c2 = c3 * s + rows[8]!;
  const c1 = c2 * s + rows[7]!;
  out[2] = perV * (c1 * s + rows[6]!);
  out[4] = perU * perV * ((((c5 * s + c4) * s + c3) * s + c2) * s + c1);
  const curvature = ((((rows[17]! * s + rows[16]!) * s + rows[15]!) * s + rows[14]!) * s + rows[13]!) * s + rows[12]!;
  out[5] = 2 * perV * perV * curvature;
  if (order === 3) {
    surface.place[0] = s;
    surface.place[1] = t;
    surface.place[2] = perU;
    surface.place[3] = perV;
    fillThird(surface, cell);
  }
  return true;
}

/** The third derivatives (they jump from cell to cell) and (2,2) of the patch that starts at `cell`. */
function fillThird(surface: Surface, cell: number): void {
  const { cells, out, rows, place } = surface;
  const t = place[1]!;
  const perU = place[2]!;
  const perV = place[3]!;
  for (let row = 0; row < 6; row++) {
    const k = cell + 6 * row;
    rows[row] = horner(cells, k, t, 0);
    rows[6 + row] = horner(cells, k, t, 1);
    rows[12 + row] = horner(cells, k, t, 2);
    rows[18 + row] = horner(cells, k, t, 3);
  }
  const s = place[0]!;
  out[6] = perU * perU * perU * horner(rows, 0, s, 3);
  out[7] = perU * perU * perV * horner(rows, 6, s, 2);
  out[8] = perU * perV * perV * horner(rows, 12, s, 1);
  out[9] = perV * perV * perV * horner(rows, 18, s, 0);
  out[10] = perU * perU * perV * perV * horner(rows, 12, s, 2);
}

/** The derivative of that order of the polynomial of degree five whose coefficients start at `k`. */
function horner(coefficients: Float64Array, k: number, t: number, order: number): number {
  let sum = 0;
  for (let power = 5; power >= order; power--) {
    let factor = 1;
    for (let d = 0; d < order; d++) factor *= power - d;
    sum = sum * t + factor * coefficients[k + power]!;
  }
  return sum;
}
