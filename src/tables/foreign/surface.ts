/** The fit at a point: quintic Hermite cells of unequal size, F_0 along density and L over both. */
import {
  evaluateLine,
  evaluatePatch,
  gather,
  LINE_LENGTH,
  linesOf,
  PATCH_LENGTH,
  type PatchRecord,
  patchRecord,
  takePowers,
} from "../patch.js";
import { NODE_LENGTH } from "../table.js";
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
export interface ColumnSurface extends PatchRecord {
  readonly u: CellAxis;
  readonly v: CellAxis;
  /** The patches of the cells, temperature fastest, and the powers of two taken out of exp L in each. */
  readonly cells: Float64Array;
  readonly exponents: Int32Array;
  /** F_0 by interval of density. */
  readonly lines: Float64Array;
  /** Where: ln rho, ln T. */
  readonly at: Float64Array;
  /** Slot 0: the powers of two. */
  readonly exponent: Int32Array;
  /** Slot 0: 1, the share of the matter that is tabulated. */
  readonly share: Float64Array;
  /** F_0 and its derivatives. */
  readonly cold: { readonly out: Float64Array };
}

/** Makes a fit ready. */
export function columnSurface(fit: ColumnFit, u: Float64Array, v: Float64Array): ColumnSurface {
  const [m, n] = [u.length - 1, v.length - 1];
  const length = (axis: Float64Array, cell: number): number => axis[cell + 1]! - axis[cell]!;
  const cells = new Float64Array(PATCH_LENGTH * m * n);
  const exponents = new Int32Array(m * n);
  for (let i = 0, cell = 0; i < m; i++) {
    for (let j = 0; j < n; j++, cell++) {
      const low = i * (n + 1) + j;
      const high = low + n + 1;
      const patch = cells.subarray(PATCH_LENGTH * cell, PATCH_LENGTH * (cell + 1));
      gather(patch, fit.nodes, NODE_LENGTH * low, NODE_LENGTH * high);
      const base = fit.exponents[low]!;
      exponents[cell] = base;
      // L of each corner counts from its own power of two: from that of the first.
      for (const [slot, corner] of [
        [3, low + 1],
        [18, high],
        [21, high + 1],
      ] as const) {
        patch[slot]! += (fit.exponents[corner]! - base) * Math.LN2;
      }
      takePowers(patch, length(u, i), length(v, j));
    }
  }
  return {
    u: cellAxis(u),
    v: cellAxis(v),
    cells,
    exponents,
    lines: linesOf(fit.cold, (i) => length(u, i)),
    at: new Float64Array(2),
    exponent: new Int32Array(1),
    share: Float64Array.of(1),
    cold: { out: new Float64Array(4) },
    ...patchRecord(),
  };
}

/** Fills `out`, `exponent` and `cold.out` at `at`, to second order (order 2) or all. */
export function fillColumnSurface(surface: ColumnSurface, order: number): void {
  const { u, v, at, place } = surface;
  const i = cellOf(u, at, 0);
  const j = cellOf(v, at, 1);
  const cell = i * (v.nodes.length - 1) + j;
  surface.exponent[0] = surface.exponents[cell]!;
  place[2] = 1 / (u.nodes[i + 1]! - u.nodes[i]!);
  place[3] = 1 / (v.nodes[j + 1]! - v.nodes[j]!);
  place[0] = (at[0]! - u.nodes[i]!) * place[2]!;
  place[1] = (at[1]! - v.nodes[j]!) * place[3]!;
  evaluatePatch(surface.cells, PATCH_LENGTH * cell, surface, order);
  evaluateLine(surface.lines, LINE_LENGTH * i, place, 2, order, surface.cold.out);
}
