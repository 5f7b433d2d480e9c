/** Hermite basis of any order: what defines it, the derivatives at both ends, and polynomials, which it must reproduce. */
import { describe, expect, test } from "vitest";
import { fillHermiteBasis, hermiteBasis } from "../../src/numerics/hermite.js";

/** d-th derivative of (t - 1/2)^n. */
function power(n: number, t: number, d: number): number {
  if (d > n) return 0;
  let factor = 1;
  for (let q = 0; q < d; q++) factor *= n - q;
  return factor * (t - 0.5) ** (n - d);
}

describe.each([4, 6, 9])("order %i", (order) => {
  const basis = hermiteBasis(order);
  const row = 2 * order + 2;
  const at = (t: number, depth: number): Float64Array => {
    basis.values[0] = t;
    fillHermiteBasis(basis, depth);
    return basis.values;
  };

  test("at the ends each function is its derivative alone", () => {
    for (const [t, own] of [
      [0, 0],
      [1, order + 1],
    ] as const) {
      const values = at(t, 5);
      for (let d = 0; d < 5; d++) {
        for (let i = 0; i < row; i++)
          expect(Math.abs(values[d * row + i]! - (i === own + d ? 1 : 0))).toBeLessThan(1e-13);
      }
    }
  });

  test("every polynomial of its degree with four derivatives, to rounding of the sum", () => {
    for (const t of [0, 0.1, 0.37, 0.5, 0.93, 1]) {
      const values = at(t, 5);
      for (let n = 0; n < row; n++) {
        for (let d = 0; d < 5; d++) {
          let sum = 0;
          let size = 0;
          for (let i = 0; i <= order; i++) {
            for (const term of [
              values[d * row + i]! * power(n, 0, i),
              values[d * row + order + 1 + i]! * power(n, 1, i),
            ]) {
              sum += term;
              size += Math.abs(term);
            }
          }
          expect(Math.abs(sum - power(n, t, d))).toBeLessThanOrEqual(2e-15 * size + 1e-15); // measured: 8e-16
        }
      }
    }
  });

  test("depth 3 fills the same values and slopes", () => {
    const deep = at(0.3, 5).slice(0, 3 * row);
    basis.values.fill(0);
    expect(at(0.3, 3).slice(0, 3 * row)).toEqual(deep);
    expect(basis.values[3 * row]).toBe(0);
  });
});
