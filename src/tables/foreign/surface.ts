/** The fit at a point: quintic Hermite cells of unequal size, F_0 along density and L over both. */
import { BASIS_LENGTH, fillBasis } from "../../numerics/quintic.js";
import { SURFACE_LENGTH } from "../surface.js";
import type { ColumnFit } from "./fit.js";

/** An axis made ready for look-up. */
interface CellAxis {
  readonly nodes: Float64Array;
  /** Lowest node and buckets per unit of the logarithm. */
  readonly scale: Float64Array;
  /** By bucket, the cell in which it starts: from there to the cell of a point is a step or none. */
  readonly buckets: Int32Array;
}

/** Buckets per cell. */
const fineness = 2;

/** Makes an axis ready. */
function cellAxis(nodes: Float64Array): CellAxis {
  const cells = nodes.length - 1;
  const count = fineness * cells;
  const scale = Float64Array.of(nodes[0]!, count / (nodes[cells]! - nodes[0]!));
  const buckets = new Int32Array(count);
  let cell = 0;
  for (let k = 0; k < count; k++) {
    while (cell < cells - 1 && nodes[cell + 1]! <= nodes[0]! + k / scale[1]!) cell += 1;
    // A bucket begins a cell early where rounding could put a point of that cell into it.
    buckets[k] = Math.max(cell - 1, 0);
  }
  return { nodes, scale, buckets };
}

/** The cell of `axis` that holds `at[slot]`; the first or last one outside. Numbers stay in records, so that none is boxed. */
function cellOf({ nodes, scale, buckets }: CellAxis, at: Float64Array, slot: number): number {
  const x = at[slot]!;
  const k = ((x - scale[0]!) * scale[1]!) | 0;
  let cell = buckets[k < 0 ? 0 : k < buckets.length ? k : buckets.length - 1]!;
  const last = nodes.length - 2;
  while (cell < last && nodes[cell + 1]! <= x) cell += 1;
  return cell;
}

/** A fit made ready. Its records are those that addTableMembers reads. */
export interface ColumnSurface {
  readonly fit: ColumnFit;
  readonly u: CellAxis;
  readonly v: CellAxis;
  /** Where: ln rho, ln T. */
  readonly at: Float64Array;
  /** L less its powers of two, and its derivatives. */
  readonly out: Float64Array;
  /** Slot 0: the powers of two. */
  readonly exponent: Int32Array;
  /** Slot 0: 1, the share of the matter that is tabulated. */
  readonly share: Float64Array;
  /** F_0 and its derivatives. */
  readonly cold: { readonly out: Float64Array };
  readonly basisU: Float64Array;
  readonly basisV: Float64Array;
  readonly rows: Float64Array;
}

/** Makes a fit ready. */
export function columnSurface(fit: ColumnFit, u: Float64Array, v: Float64Array): ColumnSurface {
  return {
    fit,
    u: cellAxis(u),
    v: cellAxis(v),
    at: new Float64Array(2),
    out: new Float64Array(SURFACE_LENGTH),
    exponent: new Int32Array(1),
    share: Float64Array.of(1),
    cold: { out: new Float64Array(4) },
    basisU: new Float64Array(BASIS_LENGTH),
    basisV: new Float64Array(BASIS_LENGTH),
    rows: new Float64Array(24),
  };
}

/** Fills `out`, `exponent` and `cold.out` at `at`, to second order (order 2) or all. */
export function fillColumnSurface(surface: ColumnSurface, order: number): void {
  const { u, v, at, out, basisU: bu, basisV: bv, rows } = surface;
  const { nodes, exponents } = surface.fit;
  const i = cellOf(u, at, 0);
  const j = cellOf(v, at, 1);
  fillCellBasis(u, i, at, 0, bu);
  fillCellBasis(v, j, at, 1, bv);
  const n = v.nodes.length;
  const node = i * n + j;
  const base = exponents[node]!;
  surface.exponent[0] = base;
  const last = order === 3 ? 4 : 3;
  for (let row = 0; row < 6; row++) {
    // Rows 0 to 2: L and its derivatives along density at the lower density, 3 to 5 at the higher one.
    const corner = row < 3 ? node : node + n;
    const k = 9 * corner + (row < 3 ? 3 * row : 3 * row - 9);
    const isValue = row === 0 || row === 3;
    const low = nodes[k]! + (isValue ? (exponents[corner]! - base) * Math.LN2 : 0);
    const high = nodes[k + 9]! + (isValue ? (exponents[corner + 1]! - base) * Math.LN2 : 0);
    for (let d = 0; d < last; d++) {
      const b = 6 * d;
      rows[6 * d + row] =
        (d === 0 ? low : 0) +
        bv[b + 3]! * (high - low) +
        bv[b + 1]! * nodes[k + 1]! +
        bv[b + 2]! * nodes[k + 2]! +
        bv[b + 4]! * nodes[k + 10]! +
        bv[b + 5]! * nodes[k + 11]!;
    }
  }
  fillAcross(bu, 0, rows, 0, out, 0);
  fillAcross(bu, 6, rows, 0, out, 1);
  fillAcross(bu, 0, rows, 6, out, 2);
  fillAcross(bu, 12, rows, 0, out, 3);
  fillAcross(bu, 6, rows, 6, out, 4);
  fillAcross(bu, 0, rows, 12, out, 5);
  if (order === 3) {
    fillAcross(bu, 18, rows, 0, out, 6);
    fillAcross(bu, 12, rows, 6, out, 7);
    fillAcross(bu, 6, rows, 12, out, 8);
    fillAcross(bu, 0, rows, 18, out, 9);
    fillAcross(bu, 12, rows, 12, out, 10);
  }
  const f = surface.fit.cold;
  const c = 3 * i;
  const rise = f[c + 3]! - f[c]!;
  for (let d = 0; d < last; d++) {
    const b = 6 * d;
    surface.cold.out[d] =
      (d === 0 ? f[c]! : 0) +
      bu[b + 3]! * rise +
      bu[b + 1]! * f[c + 1]! +
      bu[b + 2]! * f[c + 2]! +
      bu[b + 4]! * f[c + 4]! +
      bu[b + 5]! * f[c + 5]!;
  }
}

/** The basis in a cell, with slopes and curvatures at its ends and derivatives per unit of the axis. */
function fillCellBasis({ nodes }: CellAxis, cell: number, at: Float64Array, slot: number, basis: Float64Array): void {
  const h = nodes[cell + 1]! - nodes[cell]!;
  const per = 1 / h;
  basis[0] = (at[slot]! - nodes[cell]!) * per;
  fillBasis(basis);
  let derivative = 1;
  for (let b = 0; b < 24; b += 6) {
    const first = derivative * h;
    const second = first * h;
    basis[b + 3]! *= derivative;
    basis[b + 1]! *= first;
    basis[b + 4]! *= first;
    basis[b + 2]! *= second;
    basis[b + 5]! *= second;
    derivative *= per;
  }
}

/** `out[slot]`: the sum over the six rows of one derivative of the basis. */
function fillAcross(
  basis: Float64Array,
  b: number,
  rows: Float64Array,
  r: number,
  out: Float64Array,
  slot: number,
): void {
  const low = rows[r]!;
  out[slot] =
    (b === 0 ? low : 0) +
    basis[b + 3]! * (rows[r + 3]! - low) +
    basis[b + 1]! * rows[r + 1]! +
    basis[b + 2]! * rows[r + 2]! +
    basis[b + 4]! * rows[r + 4]! +
    basis[b + 5]! * rows[r + 5]!;
}
