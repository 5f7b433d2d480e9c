/** Integrals of a field over the cells between its nodes, along one line of a mesh. */
import { type CellStencils, cellStencils, weighted } from "../../numerics/stencil.js";
import { gaussRule } from "../gauss.js";

/** What integrates along one axis. */
export interface CellIntegrals {
  readonly axis: Float64Array;
  readonly stencils: CellStencils;
}

const rule = /* @__PURE__ */ gaussRule(4);
/** Nodes of the polynomial. */
const width = 6;

/** Weights of an axis. */
export function cellIntegrals(axis: Float64Array): CellIntegrals {
  return { axis, stencils: cellStencils(axis, width, rule.nodes) };
}

/**
 * Integral over cell `k` of `change(f, x)`, f the polynomial through `values` from `from` in steps of `stride`: exp for a field given
 * as its logarithm.
 */
export function cellIntegral(
  { axis, stencils }: CellIntegrals,
  k: number,
  values: Float64Array,
  from: number,
  stride: number,
  change: (value: number, x: number) => number,
): number {
  const size = axis[k + 1]! - axis[k]!;
  let sum = 0;
  for (let i = 0; i < stencils.places; i++) {
    const at = (k * stencils.places + i) * stencils.width;
    const value = weighted(stencils.values, at, stencils.width, values, from + stencils.first[k]! * stride, stride);
    sum += rule.weights[i]! * change(value, axis[k]! + rule.nodes[i]! * size);
  }
  return size * sum;
}
