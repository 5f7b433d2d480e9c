/**
 * The surface of a species table at a point: L = ln P(eta, ln theta) and its derivatives, below the table continued by the
 * classical gas. One record of the module's functions, so that nothing is allocated.
 */
import { BASIS_LENGTH, fillBasis } from "../numerics/quintic.js";
import type { SpeciesTable } from "./species-table.js";

// Slots of the derivatives L_ij by eta (i) and ln theta (j).

export const L00 = 0;
export const L10 = 1;
export const L01 = 2;
export const L20 = 3;
export const L11 = 4;
export const L02 = 5;
export const L30 = 6;
export const L21 = 7;
export const L12 = 8;
export const L03 = 9;
export const L40 = 10;
export const L31 = 11;
export const L22 = 12;
/** Length of a record of them. */
const SPECIES_SURFACE_LENGTH = 13;

/** Orders (i, j) of the slots. */
const orders = [
  [0, 0],
  [1, 0],
  [0, 1],
  [2, 0],
  [1, 1],
  [0, 2],
  [3, 0],
  [2, 1],
  [1, 2],
  [0, 3],
  [4, 0],
  [3, 1],
  [2, 2],
] as const;
const orderI = Int32Array.from(orders, ([i]) => i);
const orderJ = Int32Array.from(orders, ([, j]) => j);

/** An axis made ready: its nodes, and the cell that holds the start of each bucket of equal width. */
interface AxisIndex {
  readonly nodes: Float64Array;
  readonly buckets: Int32Array;
  readonly lowest: number;
  readonly perUnit: number;
}

/** A table made ready. */
export interface SpeciesSurface {
  readonly eta: AxisIndex;
  readonly y: AxisIndex;
  readonly nodes: Float64Array;
  /** Where: eta, ln theta; slot 2 is scratch of the callers and of the continuation: no double crosses a call. */
  readonly at: Float64Array;
  /** The derivatives L_ij there. */
  readonly out: Float64Array;
  readonly basisE: Float64Array;
  readonly basisY: Float64Array;
  readonly rows: Float64Array;
}

/** Makes a table ready. */
export function speciesSurface(table: Omit<SpeciesTable, "certificate">): SpeciesSurface {
  return {
    eta: axisIndex(table.degeneracy),
    y: axisIndex(table.logTheta),
    nodes: table.nodes,
    at: new Float64Array(3),
    out: new Float64Array(SPECIES_SURFACE_LENGTH),
    basisE: new Float64Array(BASIS_LENGTH + 6),
    basisY: new Float64Array(BASIS_LENGTH + 6),
    rows: new Float64Array(30),
  };
}

function axisIndex(nodes: Float64Array): AxisIndex {
  const lowest = nodes[0]!;
  const span = nodes[nodes.length - 1]! - lowest;
  let shortest = span;
  for (let i = 1; i < nodes.length; i++) shortest = Math.min(shortest, nodes[i]! - nodes[i - 1]!);
  const count = Math.ceil(span / shortest) + 1;
  const perUnit = count / span;
  const buckets = new Int32Array(count + 1);
  for (let b = 0, cell = 0; b <= count; b++) {
    while (cell < nodes.length - 2 && nodes[cell + 1]! <= lowest + b / perUnit) cell++;
    buckets[b] = cell;
  }
  return { nodes, buckets, lowest, perUnit };
}

/** The cell of the value in slot `k` of `at`; a bucket is shorter than any cell, so it holds one node at most. */
function cellOf(axis: AxisIndex, at: Float64Array, k: number): number {
  const { nodes, buckets } = axis;
  const value = at[k]!;
  let bucket = ((value - axis.lowest) * axis.perUnit) | 0;
  if (bucket < 0) bucket = 0;
  if (bucket >= buckets.length) bucket = buckets.length - 1;
  let cell = buckets[bucket]!;
  if (cell < nodes.length - 2 && value >= nodes[cell + 1]!) cell++;
  if (cell > 0 && value < nodes[cell]!) cell--;
  return cell;
}

/** Fills the scaled basis of the cell: slopes by eta or ln theta, whatever the length of the cell. */
function fillCellBasis(basis: Float64Array, nodes: Float64Array, cell: number, at: Float64Array, k: number): void {
  const h = nodes[cell + 1]! - nodes[cell]!;
  const t = (at[k]! - nodes[cell]!) / h;
  const r = 1 - t;
  basis[0] = t;
  fillBasis(basis);
  basis[24] = 360 - 720 * t;
  basis[25] = 192 - 360 * t;
  basis[26] = 36 - 60 * t;
  basis[27] = 720 * t - 360;
  basis[28] = 360 * r - 192;
  basis[29] = 36 - 60 * r;
  let power = 1;
  for (let d = 0; d < 30; d += 6) {
    basis[d]! *= power;
    basis[d + 3]! *= power;
    basis[d + 1]! *= power * h;
    basis[d + 4]! *= power * h;
    basis[d + 2]! *= power * h * h;
    basis[d + 5]! *= power * h * h;
    power /= h;
  }
}

/**
 * Fills `out` at `at` to second order with (3,0), (2,1), (1,2) (order 2), or all of it (order 3). Above the highest eta the last cell
 * is continued: a caller does not look there. Below the lowest, e^(-eta) P = A(theta) + B(theta) e^eta, exact to e^(2 eta).
 */
export function fillSpeciesSurface(surface: SpeciesSurface, order: number): void {
  const { eta, at } = surface;
  const value = at[0]!;
  if (value >= eta.lowest) {
    fillCell(surface, order);
    return;
  }
  at[2] = value - eta.lowest;
  at[0] = eta.lowest;
  fillCell(surface, order);
  at[0] = value;
  continueClassical(surface);
}

/** From L at the lowest eta, L + d + C (e^d - 1) with C = L_eta - 1, which is of the order of e^eta. */
function continueClassical({ at, out }: SpeciesSurface): void {
  const below = at[2]!;
  const growth = Math.expm1(below);
  const c = out[L10]! - 1;
  const cy = out[L11]!;
  const cyy = out[L12]!;
  const rest = 1 + growth;
  out[L00]! += below + c * growth;
  out[L01]! += cy * growth;
  out[L02]! += cyy * growth;
  out[L10] = 1 + c * rest;
  out[L11] = cy * rest;
  out[L12] = cyy * rest;
  out[L20] = c * rest;
  out[L21] = cy * rest;
  out[L22] = cyy * rest;
  out[L30] = c * rest;
  out[L31] = cy * rest;
  out[L40] = c * rest;
}

function fillCell(surface: SpeciesSurface, order: number): void {
  const { eta, y, nodes, at, out, basisE, basisY, rows } = surface;
  const i = cellOf(eta, at, 0);
  const j = cellOf(y, at, 1);
  fillCellBasis(basisE, eta.nodes, i, at, 0);
  fillCellBasis(basisY, y.nodes, j, at, 1);
  const stride = 9 * y.nodes.length;
  const first = i * stride + 9 * j;
  const deepest = order === 3 ? 4 : 3;
  // Values count from one corner and slopes from the near end, so that the factors 1/h^2 of the curvature meet no rounding of
  // the large linear part.
  const corner = nodes[first]!;
  const hy = y.nodes[j + 1]! - y.nodes[j]!;
  const he = eta.nodes[i + 1]! - eta.nodes[i]!;
  const dy = at[1]! - y.nodes[j]!;
  const de = at[0]! - eta.nodes[i]!;
  for (let row = 0; row < 6; row++) {
    const k = row < 3 ? first + 3 * row : first + stride + 3 * (row - 3);
    const near = row === 0 || row === 3 ? nodes[k]! - corner : nodes[k]!;
    const slope = nodes[k + 1]!;
    const rise = nodes[k + 9]! - nodes[k]! - slope * hy;
    const turn = nodes[k + 10]! - slope;
    for (let d = 0; d < deepest; d++) {
      const b = 6 * d;
      rows[b + row] =
        (d === 0 ? near + slope * dy : d === 1 ? slope : 0) +
        (basisY[b + 3]! * rise +
          basisY[b + 2]! * nodes[k + 2]! +
          basisY[b + 4]! * turn +
          basisY[b + 5]! * nodes[k + 11]!);
    }
  }
  const count = order === 3 ? SPECIES_SURFACE_LENGTH : 9;
  for (let slot = 0; slot < count; slot++) {
    const b = 6 * orderI[slot]!;
    const r = 6 * orderJ[slot]!;
    const near = rows[r]!;
    const slope = rows[r + 1]!;
    const rise = rows[r + 3]! - near - slope * he;
    const turn = rows[r + 4]! - slope;
    out[slot] =
      (b === 0 ? near + slope * de : b === 6 ? slope : 0) +
      (basisE[b + 3]! * rise + basisE[b + 2]! * rows[r + 2]! + basisE[b + 4]! * turn + basisE[b + 5]! * rows[r + 5]!);
  }
  out[L00]! += corner;
}
