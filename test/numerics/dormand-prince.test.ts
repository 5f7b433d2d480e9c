/**
 * The Runge-Kutta coefficients against what defines them: the order conditions sum_i b_i Phi_i(t) = 1/gamma(t) for every
 * rooted tree t (Butcher 1963; Hairer, Norsett & Wanner 1993, theorem II.2.13; for the dense output theorem II.6.1).
 */
import { describe, expect, test } from "vitest";
import {
  denseRows,
  errorOfOrder5,
  nodes,
  stages,
  weights,
  weightsOfOrder3,
} from "../../src/numerics/dormand-prince.js";
import { fillDense } from "../../src/numerics/ode.js";

/** A rooted tree: the trees that hang on its root. */
type Tree = readonly Tree[];

/** All rooted trees of an order, each once: multisets of smaller trees, in the order of the list `smaller`. */
function treesOf(order: number): Tree[] {
  const smaller = Array.from({ length: order - 1 }, (_, i) => treesOf(i + 1)).flat();
  const sizes = smaller.map(orderOf);
  const found: Tree[] = [];
  const extend = (branches: Tree[], left: number, from: number): void => {
    if (left === 0) found.push([...branches]);
    for (let i = from; i < smaller.length; i++) {
      if (sizes[i]! <= left) extend([...branches, smaller[i]!], left - sizes[i]!, i);
    }
  };
  extend([], order - 1, 0);
  return found;
}

const orderOf = (tree: Tree): number => 1 + tree.reduce((sum, branch) => sum + orderOf(branch), 0);
const densityOf = (tree: Tree): number => orderOf(tree) * tree.reduce((product, one) => product * densityOf(one), 1);

/** Phi_i(t) for the stages i: the product over branches u of sum_j a_ij Phi_j(u). */
function phi(tree: Tree, count: number): number[] {
  const branches = tree.map((branch) => phi(branch, count));
  return Array.from({ length: count }, (_, i) =>
    branches.reduce((product, one) => product * (stages[i] ?? []).reduce((s, a, j) => s + a * one[j]!, 0), 1),
  );
}

const sum = (b: readonly number[], values: readonly number[]): number =>
  b.reduce((total, weight, i) => total + weight * values[i]!, 0);

/** Largest error of the conditions of one order. */
const worst = (b: readonly number[], order: number, count = 12): number =>
  Math.max(...treesOf(order).map((tree) => Math.abs(sum(b, phi(tree, count)) - 1 / densityOf(tree))));

test("there are 1, 1, 2, 4, 9, 20, 48, 115 rooted trees (Cayley 1857)", () => {
  expect([1, 2, 3, 4, 5, 6, 7, 8].map((order) => treesOf(order).length)).toEqual([1, 1, 2, 4, 9, 20, 48, 115]);
});

describe("the weights", () => {
  test("row sums are the nodes", () => {
    for (const [i, row] of stages.entries())
      expect(Math.abs(row.reduce((s, a) => s + a, 0) - nodes[i]!)).toBeLessThan(2e-14);
  });

  // Measured: 5e-15 at most; weights up to 50 with signs leave that much of rounding.
  test("all 200 conditions up to order 8 hold", () => {
    for (let order = 1; order <= 8; order++) expect(worst(weights, order)).toBeLessThan(2e-14);
  });

  test("the order is not 9", () => expect(worst(weights, 9)).toBeGreaterThan(1e-6));

  test("the estimates are of order 5 and 3, and of no more", () => {
    const fifth = weights.map((b, i) => b - errorOfOrder5[i]!);
    for (let order = 1; order <= 5; order++) expect(worst(fifth, order)).toBeLessThan(2e-14);
    expect(worst(fifth, 6)).toBeGreaterThan(1e-5);
    for (let order = 1; order <= 3; order++) expect(worst(weightsOfOrder3, order)).toBeLessThan(2e-14);
    expect(worst(weightsOfOrder3, 4)).toBeGreaterThan(1e-4);
  });
});

test("the dense output is of order 7 everywhere in the step, and not of order 8", () => {
  /** Weights b_i(t) of the dense output: what it makes of the slopes' unit vectors, for a step from 0 to 1. */
  const weightsAt = (t: number): number[] =>
    Array.from({ length: 16 }, (_, i) => {
      const change = weights[i] ?? 0;
      const initial = (i === 0 ? 1 : 0) - change;
      const head = [0, change, initial, change - (i === 12 ? 1 : 0) - initial];
      const coefficients = Float64Array.from([...head, ...denseRows.map((row) => row[i] ?? 0)]);
      const point = Float64Array.of(t, 0);
      fillDense(coefficients, 0, 0, 1, point);
      return point[1]!;
    });
  for (const t of [0.125, 0.4, 0.7, 0.93]) {
    const b = weightsAt(t);
    const error = (order: number): number =>
      Math.max(...treesOf(order).map((tree) => Math.abs(sum(b, phi(tree, 16)) - t ** order / densityOf(tree))));
    for (let order = 1; order <= 7; order++) expect(error(order), `order ${order} at ${t}`).toBeLessThan(1e-13);
    expect(error(8)).toBeGreaterThan(1e-7);
  }
});
