/**
 * Derivatives, values and integrals of a function given at unequally spaced nodes: of the polynomial through the nearest ones.
 *
 * Local, so that one bad value spoils its neighbourhood alone. Weights by Fornberg 1988, Math. Comput. 51, 699.
 */

/** Weights for nodes of an axis. */
export interface LineStencils {
  /** Number of nodes. */
  readonly count: number;
  /** Nodes of each stencil. */
  readonly width: number;
  /** First node of each stencil. */
  readonly first: Int32Array;
  /** `width` weights of the first derivative, by node. */
  readonly slopes: Float64Array;
  /** `width` weights of the second derivative, by node. */
  readonly bends: Float64Array;
}

/** Weights for places within the cells of an axis. */
export interface CellStencils {
  /** Nodes of each stencil. */
  readonly width: number;
  /** Places within each cell. */
  readonly places: number;
  /** First node of the stencil of each cell. */
  readonly first: Int32Array;
  /** `width` weights of the value, by cell and place. */
  readonly values: Float64Array;
}

/**
 * Weights w of the derivatives 0..`highest` at `z` of the polynomial through `nodes`: w[k * nodes.length + i] times f(nodes[i]).
 */
export function stencilWeights(nodes: Float64Array, z: number, highest: number): Float64Array {
  const n = nodes.length;
  const w = new Float64Array(n * (highest + 1));
  let c1 = 1;
  let c4 = nodes[0]! - z;
  w[0] = 1;
  for (let i = 1; i < n; i++) {
    const top = Math.min(i, highest);
    let c2 = 1;
    const c5 = c4;
    c4 = nodes[i]! - z;
    for (let j = 0; j < i; j++) {
      const c3 = nodes[i]! - nodes[j]!;
      c2 *= c3;
      if (j === i - 1) {
        for (let k = top; k >= 1; k--) {
          w[k * n + i] = (c1 * (k * w[(k - 1) * n + i - 1]! - c5 * w[k * n + i - 1]!)) / c2;
        }
        w[i] = (-c1 * c5 * w[i - 1]!) / c2;
      }
      for (let k = top; k >= 1; k--) w[k * n + j] = (c4 * w[k * n + j]! - k * w[(k - 1) * n + j]!) / c3;
      w[j] = (c4 * w[j]!) / c3;
    }
    c1 = c2;
  }
  return w;
}

/** Stencils of at most `widest` nodes around each node, one-sided at the ends. */
export function lineStencils(axis: Float64Array, widest: number): LineStencils {
  const count = axis.length;
  const width = Math.min(widest, count);
  const first = new Int32Array(count);
  const slopes = new Float64Array(count * width);
  const bends = new Float64Array(count * width);
  for (let k = 0; k < count; k++) {
    const start = Math.min(Math.max(k - (width >> 1), 0), count - width);
    const w = stencilWeights(axis.subarray(start, start + width), axis[k]!, 2);
    first[k] = start;
    slopes.set(w.subarray(width, 2 * width), k * width);
    bends.set(w.subarray(2 * width, 3 * width), k * width);
  }
  return { count, width, first, slopes, bends };
}

/** Stencils of at most `widest` nodes around each cell, for places `fractions` of the way through it. */
export function cellStencils(axis: Float64Array, widest: number, fractions: readonly number[]): CellStencils {
  const cells = axis.length - 1;
  const width = Math.min(widest, axis.length);
  const places = fractions.length;
  const first = new Int32Array(cells);
  const values = new Float64Array(cells * places * width);
  for (let k = 0; k < cells; k++) {
    const start = Math.min(Math.max(k + 1 - (width >> 1), 0), axis.length - width);
    first[k] = start;
    fractions.forEach((t, i) => {
      const z = axis[k]! + t * (axis[k + 1]! - axis[k]!);
      values.set(stencilWeights(axis.subarray(start, start + width), z, 0), (k * places + i) * width);
    });
  }
  return { width, places, first, values };
}

/** Sum of weights `weights[at...]` times `values` from `from` on in steps of `stride`. */
export function weighted(
  weights: Float64Array,
  at: number,
  width: number,
  values: Float64Array,
  from: number,
  stride: number,
): number {
  let sum = 0;
  for (let i = 0; i < width; i++) sum += weights[at + i]! * values[from + i * stride]!;
  return sum;
}
