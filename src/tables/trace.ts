/** The function of a coarse cell along one of its edges, as numbers of a node part of the way. */
import { BASIS_LENGTH, fillBasis } from "../numerics/quintic.js";

/** Distance of the orders of a derivative in a node's numbers: along ln T and along ln rho. */
export type EdgeStep = 1 | 3;

const basis = /* @__PURE__ */ new Float64Array(BASIS_LENGTH);

/**
 * Writes the nine numbers at `t` of an edge between the nodes at `low` and `high` to `out`: value, first and second derivative
 * across are quintics along the edge.
 *
 * @param step - 1 for an edge along ln T, 3 along ln rho
 * @param h - length of the edge in the logarithm
 */
export function fillTrace(
  nodes: Float64Array,
  low: number,
  high: number,
  t: number,
  h: number,
  step: EdgeStep,
  out: Float64Array,
  target: number,
): void {
  const side = step === 1 ? 3 : 1;
  basis[0] = t;
  fillBasis(basis);
  for (let order = 0; order < 3; order++) {
    const base = order * side;
    for (let along = 0; along < 3; along++) {
      let sum = 0;
      for (let k = 0; k < 3; k++) {
        const lower = nodes[low + base + k * step]!;
        const upper = nodes[high + base + k * step]!;
        sum += h ** k * (basis[6 * along + k]! * lower + basis[6 * along + 3 + k]! * upper);
      }
      out[target + base + along * step] = sum / h ** along;
    }
  }
}
