/** Derivatives from values: the stated error holds the true one, for functions whose derivative is known in closed form. */
import { expect, test } from "vitest";
import { derivativeOf, steps } from "../../src/compare/derivative.js";

const measured = (of: (x: number) => number, at: number) =>
  derivativeOf(
    steps.map((step) => of(at + step)),
    steps.map((step) => of(at - step)),
    Math.abs(of(at)),
  );

// Largest error stated, over the size of the slope: 1.3 to 2 times what was measured.
test.each<[string, (x: number) => number, (x: number) => number, largest: number]>([
  ["exp(5x/3), a degenerate gas", (x) => Math.exp((5 * x) / 3), (x) => (5 / 3) * Math.exp((5 * x) / 3), 7e-13],
  ["exp(4x), photons", (x) => Math.exp(4 * x), (x) => 4 * Math.exp(4 * x), 7e-11],
  ["exp(-30 exp(-x)), pairs", (x) => Math.exp(-30 * Math.exp(-x)), (x) => 30 * Math.exp(-x - 30 * Math.exp(-x)), 5e-3],
  ["1 + 1e-6 exp(2x), cold matter", (x) => 1 + 1e-6 * Math.exp(2 * x), (x) => 2e-6 * Math.exp(2 * x), 1.2e-6],
  ["tanh(20x), a sharp front", (x) => Math.tanh(20 * x), (x) => 20 / Math.cosh(20 * x) ** 2, 3e-4],
])("%s", (_, of, slope, largest) => {
  let worst = 0;
  for (let x = -1; x <= 1; x += 1 / 64) {
    const { value, error } = measured(of, x);
    const size = Math.abs(slope(x));
    // Far from a front its slope is lost in the rounding of the value, and the error says so.
    expect(Math.abs(value - slope(x))).toBeLessThanOrEqual(error);
    if (size > 1e-7 * Math.abs(of(x))) worst = Math.max(worst, error / size);
  }
  expect(worst).toBeLessThan(largest);
});

test("a jump between the points is no derivative: the error is as large as the value", () => {
  for (let place = 0.0002; place < 0.04; place += 0.0007) {
    const { value, error } = measured((x) => (x > place ? 1.01 : 1), 0);
    // Either the jump lies beyond the smaller steps, which see none, or nothing settles.
    expect(error >= 0.3 * Math.abs(value)).toBe(true);
  }
});
