import { expect, test } from "vitest";
import { cellStencils, lineStencils, stencilWeights, weighted } from "../../src/numerics/stencil.js";
import { uniform } from "../measured.js";

test("weights on equal steps are those of Fornberg 1988, Math. Comput. 51, 699, table 1 (from memory)", () => {
  const w = stencilWeights(Float64Array.of(-3, -2, -1, 0, 1, 2, 3), 0, 2);
  const first = [-1 / 60, 3 / 20, -3 / 4, 0, 3 / 4, -3 / 20, 1 / 60];
  const second = [1 / 90, -3 / 20, 3 / 2, -49 / 18, 3 / 2, -3 / 20, 1 / 90];
  for (const [i, value] of first.entries()) expect(Math.abs(w[7 + i]! - value)).toBeLessThan(2e-16);
  for (const [i, value] of second.entries()) expect(Math.abs(w[14 + i]! - value)).toBeLessThan(9e-16);
  expect([...w.subarray(0, 7)].map(Math.abs)).toEqual([0, 0, 0, 1, 0, 0, 0]);
});

test("on unequal steps polynomials of the degree that the stencil holds are exact, ends included", () => {
  const random = uniform(3);
  let x = 0;
  const axis = Float64Array.from({ length: 11 }, () => (x += 0.1 + 0.2 * random()));
  const f = (z: number, order: number): number => {
    const power = (n: number): number => (n < 0 ? 0 : z ** n);
    return order === 0 ? 2 + z ** 3 - 0.2 * z ** 6 : order === 1 ? 3 * power(2) - 1.2 * power(5) : 6 * z - 6 * power(4);
  };
  const values = axis.map((z) => f(z, 0));
  const { width, first, slopes, bends } = lineStencils(axis, 7);
  expect(width).toBe(7);
  axis.forEach((z, k) => {
    expect(Math.abs(weighted(slopes, 7 * k, 7, values, first[k]!, 1) - f(z, 1))).toBeLessThan(1e-11);
    expect(Math.abs(weighted(bends, 7 * k, 7, values, first[k]!, 1) - f(z, 2))).toBeLessThan(1e-9);
  });
  const cells = cellStencils(axis, 7, [0.1, 0.8]);
  for (let k = 0; k < 10; k++) {
    [0.1, 0.8].forEach((t, i) => {
      const at = (k * cells.places + i) * cells.width;
      const value = weighted(cells.values, at, cells.width, values, cells.first[k]!, 1);
      expect(Math.abs(value - f(axis[k]! + t * (axis[k + 1]! - axis[k]!), 0))).toBeLessThan(1e-12);
    });
  }
});

test("a short axis takes all its nodes", () => {
  expect(lineStencils(Float64Array.of(0, 1, 3), 7).width).toBe(3);
});
