/** Root finding over a problem set with known roots: none fails, each is exact to rounding, few evaluations. */
import { expect, test } from "vitest";
import { findRoot } from "../../src/numerics/roots.js";

/** Name, function, bracket, root. The second and third defeat the secant method, the last two Newton's. */
const problems: readonly [string, (x: number) => number, number, number, number][] = [
  ["x^2 - 2", (x) => x * x - 2, 0, 2, Math.SQRT2],
  ["1 - 1/x near a pole", (x) => 1 - 1 / x, 1e-6, 100, 1],
  ["x^9", (x) => x ** 9, -1, 4, 0],
  ["cos x - x", (x) => Math.cos(x) - x, 0, 1, 0.7390851332151607],
  ["sign of x - 1/3", (x) => Math.sign(x - 1 / 3), 0, 1, 1 / 3],
  ["cube root", (x) => Math.cbrt(x - 0.25), -1, 1, 0.25],
  ["e^-1/x^2", (x) => Math.exp(-1 / x ** 2) - Math.exp(-25), 0.1, 1, 0.2],
];

test.each(problems)("%s", (_, f, a, b, root) => {
  for (const [low, high] of [
    [a, b],
    [b, a],
  ] as const) {
    const found = findRoot(f, low, high);
    expect(Math.abs(found.x - root)).toBeLessThanOrEqual(Math.max(5e-16 * Math.abs(root), root === 0 ? 1e-12 : 0));
    expect(found.residual).toBe(f(found.x));
    // Measured: 122 for the zero of x^9, 54 for the jump (bisection), 16 at most for the others.
    expect(found.evaluations).toBeLessThanOrEqual(root === 0 ? 150 : root === 1 / 3 ? 60 : 20);
  }
});

test("a loose tolerance costs less and holds", () => {
  const f = (x: number): number => Math.exp(x) - 3;
  const loose = findRoot(f, 0, 10, { relativeTolerance: 1e-4 });
  expect(Math.abs(loose.x / Math.log(3) - 1)).toBeLessThan(2e-4);
  expect(loose.evaluations).toBeLessThan(findRoot(f, 0, 10).evaluations);
});

test("no change of sign, and NaN, are refused", () => {
  const refusal = expect.objectContaining({ code: "out-of-range" });
  expect(() => findRoot((x) => x * x + 1, -1, 1)).toThrow(refusal);
  expect(() => findRoot(() => Number.NaN, -1, 1)).toThrow(refusal);
  expect(() => findRoot((x) => (Math.abs(x) === 1 ? x : Number.NaN), -1, 1)).toThrow(refusal);
});

test("a root at an end is found at once", () => {
  expect(findRoot((x) => x, 0, 1)).toEqual({ x: 0, residual: 0, error: 0, evaluations: 2 });
});
