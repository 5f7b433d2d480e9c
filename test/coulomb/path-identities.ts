/**
 * Derivatives held to values: what a natural derivative integrates to along a path is the difference of the values at its
 * ends. No difference quotient, so nothing is lost but rounding. Gauss-Legendre, 14 nodes over 0.2 in the logarithm.
 */
import { gaussLegendre } from "./gauss-legendre.js";

/** One identity: member, its power of the variable, member of the derivative. */
type Identity = readonly [value: number, power: number, derivative: number];

/** d f_ij/d ln rho = f_(i+1)j + i f_ij. */
export const alongDensity: readonly Identity[] = [
  [0, 0, 1],
  [1, 1, 3],
  [2, 0, 4],
  [3, 2, 6],
  [4, 1, 7],
  [5, 0, 8],
  [8, 1, 10],
];
/** d f_ij/d ln y = f_i(j+1) + j f_ij, y = T or 1/T. */
export const alongOther: readonly Identity[] = [
  [0, 0, 2],
  [1, 0, 4],
  [2, 1, 5],
  [3, 0, 7],
  [4, 1, 8],
  [5, 2, 9],
  [7, 1, 10],
];

const rule = gaussLegendre(14);
const length = 0.2;

/**
 * Hands over both sides of every identity at a place; `at` gives the eleven members at a distance from it in ln rho
 * and ln y, `record` takes mean slope and mean derivative.
 */
export function pathIdentities(
  at: (logDensity: number, logOther: number) => Float64Array,
  record: (axis: "rho" | "y", identity: Identity, difference: number, mean: number) => void,
): void {
  const start = at(0, 0);
  for (const [axis, identities, along] of [
    ["rho", alongDensity, (s: number) => at(s, 0)],
    ["y", alongOther, (s: number) => at(0, s)],
  ] as const) {
    const end = along(length);
    const nodes = Array.from(rule.nodes, (s) => along(s * length));
    for (const identity of identities) {
      const [value, power, derivative] = identity;
      const mean = nodes.reduce((s, m, i) => s + rule.weights[i]! * (m[derivative]! + power * m[value]!), 0);
      record(axis, identity, (end[value]! - start[value]!) / length, mean);
    }
  }
}
