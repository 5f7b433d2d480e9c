/** One sheet of a table at a point: L(ln rho, ln T) and its derivatives from the patch that holds the point. */
import { isNodePlace } from "../thermodynamics/interpolation-nodes.js";
import { evaluatePatch, gather, PATCH_LENGTH, type PatchRecord, patchRecord, takePowers } from "./patch.js";
import { NODE_LENGTH, type TableAxis, type TableSheet } from "./table.js";

/** A sheet made ready for look-up. */
export interface Surface extends PatchRecord {
  readonly u: AxisScale;
  readonly v: AxisScale;
  /** By block: first number of its cells (-1: none), cells along density, cells along temperature, exponent. */
  readonly blocks: Int32Array;
  /** The patches of the cells. */
  readonly cells: Float64Array;
  /** Where: ln rho, ln T. */
  readonly at: Float64Array;
  /** Slot 0: the exponent k of the block. */
  readonly exponent: Int32Array;
  /** Slot 0: what the free energy is multiplied by, 1 for the composition of the table. */
  readonly share: Float64Array;
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
      const patch = cells.subarray(at + PATCH_LENGTH * cell, at + PATCH_LENGTH * (cell + 1));
      const node = first[i]! + NODE_LENGTH * (cell + Math.floor(cell / n));
      gather(patch, sheet.nodes, node, node + NODE_LENGTH * (n + 1));
      takePowers(patch, du, dv);
    }
  }
  return {
    u,
    v,
    blocks,
    cells,
    at: new Float64Array(2),
    exponent: new Int32Array(1),
    share: Float64Array.of(1),
    ...patchRecord(),
  };
}

/** Fills `out` at `at`, to second order (order 2) or to the eleven. False where the sheet has no block. */
export function fillSurface(surface: Surface, order: number): boolean {
  const { u, v, at, place, blocks } = surface;
  const x = (at[0]! - u.start) * u.perUnit;
  const y = (at[1]! - v.start) * v.perUnit;
  // Ends belong to the last block; rounding may put them a step outside.
  const p = Math.min(x | 0, u.blocks - 1);
  const q = Math.min(y | 0, v.blocks - 1);
  const block = 4 * (p * v.blocks + q);
  const first = blocks[block]!;
  if (first < 0) return false;
  const m = blocks[block + 1]!;
  const n = blocks[block + 2]!;
  surface.exponent[0] = blocks[block + 3]!;
  const xm = (x - p) * m;
  const yn = (y - q) * n;
  const i = Math.min(xm | 0, m - 1);
  const j = Math.min(yn | 0, n - 1);
  place[0] = xm - i;
  place[1] = yn - j;
  place[2] = u.perUnit * m;
  place[3] = v.perUnit * n;
  evaluatePatch(surface.cells, first + PATCH_LENGTH * (i * n + j), surface, order);
  return true;
}

/**
 * Whether a point is a node. On an edge of blocks it must be one of all that meet there: where a fine block meets a coarse one, the
 * coarse one rules, and the nodes that it lacks are interpolated.
 */
export function isSurfaceNode({ u, v, blocks }: Surface, logDensity: number, logTemperature: number): boolean {
  const x = (logDensity - u.start) * u.perUnit;
  const y = (logTemperature - v.start) * v.perUnit;
  let found = false;
  for (const p of blocksAt(x, u.blocks)) {
    for (const q of blocksAt(y, v.blocks)) {
      const block = 4 * (p * v.blocks + q);
      if (blocks[block]! < 0) continue;
      if (!isNodePlace((x - p) * blocks[block + 1]!) || !isNodePlace((y - q) * blocks[block + 2]!)) return false;
      found = true;
    }
  }
  return found;
}

/** The block that holds a place along an axis, or the two that meet there. */
function blocksAt(x: number, count: number): number[] {
  const near = Math.round(x);
  const found = isNodePlace(x) ? [near - 1, near] : [Math.floor(x)];
  return found.filter((one) => one >= 0 && one < count);
}
