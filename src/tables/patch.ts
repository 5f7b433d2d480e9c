/**
 * The polynomial of a cell, of degree five in either variable, and of an interval of the cold curve, by powers: what a look-up
 * evaluates. Four times the memory of the nodes and two thirds of the time; every derivative is of the same polynomial, so they
 * belong to each other to rounding.
 */
import { toPowers } from "../numerics/quintic.js";
import { NODE_LENGTH } from "./table.js";

/** Coefficients of a cell: of x^i y^j in slot 6 i + j, x and y from 0 to 1 along density and temperature. */
export const PATCH_LENGTH = 36;
/** Coefficients of an interval. */
export const LINE_LENGTH = 6;
/** Slots of the derivatives L_ij by ln rho and ln T: the natural order 00 10 01 20 11 02 30 21 12 03 22. */
const SURFACE_LENGTH = 11;
/** Length of the record of a place: x, y, cells per unit of ln rho and of ln T there. */
const PLACE_LENGTH = 4;

/** What an evaluation writes. */
export interface PatchRecord {
  /** Where in the cell: x, y; cells per unit of ln rho and ln T. */
  readonly place: Float64Array;
  /** By power of x: the value, slope, half the curvature and a sixth of the third derivative along temperature. */
  readonly rows: Float64Array;
  /** L and its derivatives. */
  readonly out: Float64Array;
}

/** A record for evaluations. */
export function patchRecord(): PatchRecord {
  return {
    place: new Float64Array(PLACE_LENGTH),
    rows: new Float64Array(24),
    out: new Float64Array(SURFACE_LENGTH),
  };
}

/**
 * Gathers the numbers of the four nodes of a cell: of two neighbours along temperature from `low` on, and of those at the higher
 * density from `high` on.
 */
export function gather(patch: Float64Array, nodes: Float64Array, low: number, high: number): void {
  for (let row = 0; row < 6; row++) {
    const first = row < 3 ? low + 3 * row : high + 3 * (row - 3);
    for (let j = 0; j < 3; j++) {
      patch[6 * row + j] = nodes[first + j]!;
      patch[6 * row + j + 3] = nodes[first + NODE_LENGTH + j]!;
    }
  }
}

const line = new Float64Array(LINE_LENGTH);

/** Turns what {@link gather} has put into a patch, in a cell of size `du` by `dv`, into its coefficients. */
export function takePowers(patch: Float64Array, du: number, dv: number): void {
  for (let row = 0; row < 6; row++) {
    for (let j = 0; j < 6; j++) line[j] = patch[6 * row + j]! * du ** (row % 3) * dv ** (j % 3);
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
 * Fills `out` from the patch that starts at `cell`, at `place`: to second order (order 2) or to the eleven, of which third
 * derivatives jump from cell to cell.
 *
 * Horner's scheme with derivatives: each sum of it is a coefficient of the next derivative.
 */
export function evaluatePatch(cells: Float64Array, cell: number, record: PatchRecord, order: number): void {
  const { place, rows, out } = record;
  const t = place[1]!;
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
  const s = place[0]!;
  const perU = place[2]!;
  const perV = place[3]!;
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
  const bend = ((((rows[17]! * s + rows[16]!) * s + rows[15]!) * s + rows[14]!) * s + rows[13]!) * s + rows[12]!;
  out[5] = 2 * perV * perV * bend;
  if (order === 3) addThird(cells, cell, record);
}

/** The third derivatives and (2,2). */
function addThird(cells: Float64Array, cell: number, { place, rows, out }: PatchRecord): void {
  const t = place[1]!;
  for (let row = 0; row < 6; row++) {
    const k = cell + 6 * row;
    rows[row + 18] = (10 * cells[k + 5]! * t + 4 * cells[k + 4]!) * t + cells[k + 3]!;
  }
  const s = place[0]!;
  const u = place[2]!;
  const v = place[3]!;
  out[6] = 6 * u * u * u * ((10 * rows[5]! * s + 4 * rows[4]!) * s + rows[3]!);
  out[7] = 2 * u * u * v * (((10 * rows[11]! * s + 6 * rows[10]!) * s + 3 * rows[9]!) * s + rows[8]!);
  const slope = (((5 * rows[17]! * s + 4 * rows[16]!) * s + 3 * rows[15]!) * s + 2 * rows[14]!) * s + rows[13]!;
  out[8] = 2 * u * v * v * slope;
  const third = ((((rows[23]! * s + rows[22]!) * s + rows[21]!) * s + rows[20]!) * s + rows[19]!) * s + rows[18]!;
  out[9] = 6 * v * v * v * third;
  out[10] = 4 * u * u * v * v * (((10 * rows[17]! * s + 6 * rows[16]!) * s + 3 * rows[15]!) * s + rows[14]!);
}

/** The coefficients of every interval of a curve from its nodes, three numbers each, `step(i)` the length of interval i. */
export function linesOf(nodes: Float64Array, step: (interval: number) => number): Float64Array {
  const lines = new Float64Array(LINE_LENGTH * (nodes.length / 3 - 1));
  for (let i = 0; LINE_LENGTH * i < lines.length; i++) {
    const h = step(i);
    for (let j = 0; j < 6; j++) line[j] = nodes[3 * i + j]! * h ** (j % 3);
    toPowers(line);
    lines.set(line, LINE_LENGTH * i);
  }
  return lines;
}

/**
 * Fills `out` with the curve whose coefficients start at `k`, and its derivatives to the second (order 2) or third; slot 0 of
 * `place` is where in the interval, slot `unit` the intervals per unit.
 */
export function evaluateLine(
  lines: Float64Array,
  k: number,
  place: Float64Array,
  unit: number,
  order: number,
  out: Float64Array,
): void {
  const t = place[0]!;
  const per = place[unit]!;
  const a5 = lines[k + 5]!;
  const a4 = a5 * t + lines[k + 4]!;
  const a3 = a4 * t + lines[k + 3]!;
  const a2 = a3 * t + lines[k + 2]!;
  const a1 = a2 * t + lines[k + 1]!;
  const b4 = a5 * t + a4;
  const b3 = b4 * t + a3;
  const b2 = b3 * t + a2;
  const c4 = a5 * t + b4;
  const c3 = c4 * t + b3;
  out[0] = a1 * t + lines[k]!;
  out[1] = per * (b2 * t + a1);
  out[2] = 2 * per * per * (c3 * t + b2);
  if (order === 3) out[3] = 6 * per * per * per * ((a5 * t + c4) * t + c3);
}
