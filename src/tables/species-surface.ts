/**
 * The surface of a species table at a point: L = ln P(eta, ln theta) and its derivatives, below the table continued by
 * the classical gas. One record of the module's functions, so that nothing is allocated.
 */
import { fillHermiteBasis, type HermiteBasis, hermiteBasis } from "../numerics/hermite.js";
import { NODE_LENGTH, NODE_ORDER, type SpeciesTable } from "./species-table.js";

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
const L13 = 13;
/** Length of a record of them. */
const SPECIES_SURFACE_LENGTH = 14;

/** Derivatives in one variable at a node, and at both ends of a cell. */
const WIDTH = NODE_ORDER + 1;
const ROWS = 2 * WIDTH;

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
  [1, 3],
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
  readonly basisE: HermiteBasis;
  readonly basisY: HermiteBasis;
  /** Derivatives by ln theta, up to 3, of the derivatives by eta at both ends of the cell: slot d ROWS + row. */
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
    basisE: hermiteBasis(NODE_ORDER),
    basisY: hermiteBasis(NODE_ORDER),
    rows: new Float64Array(4 * ROWS),
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

/** Fills the basis of the cell: derivatives by eta or ln theta, whatever the length of the cell. */
function fillCellBasis(
  basis: HermiteBasis,
  nodes: Float64Array,
  cell: number,
  at: Float64Array,
  k: number,
  depth: number,
): void {
  const { values } = basis;
  const h = nodes[cell + 1]! - nodes[cell]!;
  values[0] = (at[k]! - nodes[cell]!) / h;
  fillHermiteBasis(basis, depth);
  let inverse = 1;
  for (let from = 0; from < depth * ROWS; from += ROWS) {
    let power = inverse;
    for (let i = from; i < from + WIDTH; i++) {
      values[i]! *= power;
      values[i + WIDTH]! *= power;
      power *= h;
    }
    inverse /= h;
  }
}

/**
 * Fills `out` at `at` to second order with (3,0), (2,1), (1,2) (order 2), or all of it (order 3). Above the highest eta
 * the last cell is continued: a caller does not look there. Below the lowest, e^(-eta) P = A(theta) + B(theta) e^eta,
 * exact to e^(2 eta).
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
  const cyyy = out[L13]!;
  const rest = 1 + growth;
  out[L00]! += below + c * growth;
  out[L01]! += cy * growth;
  out[L02]! += cyy * growth;
  out[L03]! += cyyy * growth;
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
  const { eta, y, nodes, at, out, rows } = surface;
  const basisE = surface.basisE.values;
  const basisY = surface.basisY.values;
  const i = cellOf(eta, at, 0);
  const j = cellOf(y, at, 1);
  const depth = order === 3 ? 4 : 3;
  fillCellBasis(surface.basisE, eta.nodes, i, at, 0, depth + 1);
  fillCellBasis(surface.basisY, y.nodes, j, at, 1, depth);
  const stride = NODE_LENGTH * y.nodes.length;
  const first = i * stride + NODE_LENGTH * j;
  // Values count from one corner and slopes from the near end, so that the factors 1/h^2 of the curvature meet no
  // rounding of the large linear part.
  const corner = nodes[first]!;
  const hy = y.nodes[j + 1]! - y.nodes[j]!;
  const he = eta.nodes[i + 1]! - eta.nodes[i]!;
  const dy = at[1]! - y.nodes[j]!;
  const de = at[0]! - eta.nodes[i]!;
  for (let row = 0; row < ROWS; row++) {
    const near = first + (row < WIDTH ? row : row - WIDTH) * WIDTH + (row < WIDTH ? 0 : stride);
    const far = near + NODE_LENGTH;
    const value = row === 0 || row === WIDTH ? nodes[near]! - corner : nodes[near]!;
    const slope = nodes[near + 1]!;
    const rise = nodes[far]! - nodes[near]! - slope * hy;
    const turn = nodes[far + 1]! - slope;
    for (let d = 0, b = 0; d < depth; d++, b += ROWS) {
      let sum = 0;
      for (let k = WIDTH - 1; k > 1; k--) {
        sum += basisY[b + k]! * nodes[near + k]! + basisY[b + WIDTH + k]! * nodes[far + k]!;
      }
      sum += basisY[b + WIDTH + 1]! * turn;
      sum += basisY[b + WIDTH]! * rise;
      rows[b + row] = sum + (d === 0 ? value + slope * dy : d === 1 ? slope : 0);
    }
  }
  const count = order === 3 ? SPECIES_SURFACE_LENGTH : 9;
  for (let slot = 0; slot < count; slot++) {
    const b = ROWS * orderI[slot]!;
    const r = ROWS * orderJ[slot]!;
    const value = rows[r]!;
    const slope = rows[r + 1]!;
    const rise = rows[r + WIDTH]! - value - slope * he;
    const turn = rows[r + WIDTH + 1]! - slope;
    let sum = 0;
    for (let k = WIDTH - 1; k > 1; k--) {
      sum += basisE[b + k]! * rows[r + k]! + basisE[b + WIDTH + k]! * rows[r + WIDTH + k]!;
    }
    sum += basisE[b + WIDTH + 1]! * turn;
    sum += basisE[b + WIDTH]! * rise;
    out[slot] = sum + (b === 0 ? value + slope * de : b === ROWS ? slope : 0);
  }
  out[L00]! += corner;
}
