/** Axes: exact ends and decades, spacing to rounding, refusals. Spacing is checked against its own definition. */

import fc from "fast-check";
import { type FermistateError, isFermistateError } from "fermistate";
import { linearAxis, listedAxis, logarithmicAxis } from "fermistate/grids";
import { describe, expect, test } from "vitest";

/** The error that an action throws. */
function errorOf(action: () => unknown): FermistateError {
  try {
    action();
  } catch (error) {
    if (isFermistateError(error)) return error;
    throw error;
  }
  throw new Error("nothing was thrown");
}

describe("logarithmic axes", () => {
  test("the ends are the numbers given, whatever they are", () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1e-300, max: 1e300, noNaN: true }),
        fc.integer({ min: 2, max: 200 }),
        (from, points) => {
          const to = from * 7.3;
          const { values, spacing } = logarithmicAxis({ from, to, points });
          expect(values[0]).toBe(from);
          expect(values.at(-1)).toBe(to);
          expect(values).toHaveLength(points);
          expect(spacing).toBe("logarithmic");
        },
      ),
      { seed: 20260101, numRuns: 300 },
    );
  });

  test("every decade from 1e-20 to 1e18 is the decimal number itself", () => {
    for (const perDecade of [1, 2, 5, 10, 16]) {
      const { values } = logarithmicAxis({ from: 1e-20, to: 1e18, pointsPerDecade: perDecade });
      expect(values).toHaveLength(38 * perDecade + 1);
      for (let k = 0; k <= 38; k++) expect(values[k * perDecade]).toBe(Number(`1e${k - 20}`));
    }
  });

  test("ratios are equal to 2e-14", () => {
    // The worst of these 1233 ratios is off by 1.41e-14: two values rounded to 15 digits, 5e-15 each at most, and the
    // rounding of powers with exponents up to 20.
    for (const [from, to, points] of [
      [3e-20, 7e17, 1000],
      [1.7, 2.9, 33],
      [1e2, 1e10, 203],
    ] as const) {
      const { values } = logarithmicAxis({ from, to, points });
      const ratio = (to / from) ** (1 / (points - 1));
      for (let i = 1; i < points; i++) expect(Math.abs(values[i]! / values[i - 1]! / ratio - 1)).toBeLessThan(2e-14);
    }
  });

  test("pointsPerDecade is the least density where it does not fit, and rounding does not add a step", () => {
    expect(logarithmicAxis({ from: 1e2, to: 1e10, pointsPerDecade: 10 }).values).toHaveLength(81);
    expect(logarithmicAxis({ from: 2e-7, to: 2e5, pointsPerDecade: 20 }).values).toHaveLength(241);
    const { values } = logarithmicAxis({ from: 1, to: 500, pointsPerDecade: 10 });
    expect(values).toHaveLength(28); // log10(500) = 2.699: 27 steps of 0.09996
    expect(logarithmicAxis({ from: 1, to: 1.01, pointsPerDecade: 3 }).values).toEqual([1, 1.01]);
    expect(logarithmicAxis({ from: 1, to: 1e4, pointsPerDecade: 0.5 }).values).toEqual([1, 100, 1e4]);
  });
});

test("linear axes: equal steps, ends exact, no crumbs in the digits", () => {
  expect(linearAxis({ from: 0, to: 1, points: 11 }).values).toEqual([
    0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1,
  ]);
  expect(linearAxis({ from: 0.1, to: 0.3, points: 2 }).values).toEqual([0.1, 0.3]);
  // No overflow on the way, where to - from would be fine but i (to - from) is not.
  expect(linearAxis({ from: 0, to: 1.7e308, points: 3 }).values).toEqual([0, 0.85e308, 1.7e308]);
});

test("listed axes are copies", () => {
  const given = [1, 2, 3];
  const axis = listedAxis(given);
  given[0] = 7;
  expect(axis.values).toEqual([1, 2, 3]);
  expect(Object.isFrozen(axis.values)).toBe(true);
  expect(listedAxis(Float64Array.of(0, 1e7)).values).toEqual([0, 1e7]);
});

test.each([
  ["a NaN end", () => logarithmicAxis({ from: Number.NaN, to: 1, points: 2 }), "not-a-number", "from"],
  [
    "an infinite end",
    () => logarithmicAxis({ from: 1, to: Number.POSITIVE_INFINITY, points: 2 }),
    "not-a-number",
    "to",
  ],
  ["zero", () => logarithmicAxis({ from: 0, to: 1, points: 2 }), "out-of-range", "from"],
  ["a negative end", () => linearAxis({ from: -1, to: 1, points: 2 }), "out-of-range", "from"],
  ["ends turned round", () => logarithmicAxis({ from: 2, to: 1, points: 2 }), "out-of-range", "to"],
  ["equal ends", () => linearAxis({ from: 2, to: 2, points: 2 }), "out-of-range", "to"],
  ["one point", () => linearAxis({ from: 1, to: 2, points: 1 }), "out-of-range", "points"],
  ["half a point", () => linearAxis({ from: 1, to: 2, points: 2.5 }), "out-of-range", "points"],
  ["a text", () => linearAxis({ from: 1, to: 2, points: "3" as unknown as number }), "not-a-number", "points"],
  ["too many points", () => linearAxis({ from: 1, to: 2, points: 1e7 + 1 }), "too-large", "points"],
  [
    "too many per decade",
    () => logarithmicAxis({ from: 1, to: 2, pointsPerDecade: 1e9 }),
    "too-large",
    "pointsPerDecade",
  ],
  ["no count", () => logarithmicAxis({ from: 1, to: 2 }), "invalid-option", "points"],
  [
    "two counts",
    () => logarithmicAxis({ from: 1, to: 2, points: 2, pointsPerDecade: 2 }),
    "invalid-option",
    "pointsPerDecade",
  ],
  ["no step between doubles", () => linearAxis({ from: 1, to: 1 + 1e-14, points: 100 }), "out-of-range", "points"],
  ["an empty list", () => listedAxis([]), "invalid-option", "values"],
  ["no list", () => listedAxis("12" as unknown as number[]), "invalid-option", "values"],
  ["a falling list", () => listedAxis([1, 3, 2]), "out-of-range", "values"],
  ["a repeated value", () => listedAxis([1, 1]), "out-of-range", "values"],
  ["a NaN in a list", () => listedAxis([1, Number.NaN]), "not-a-number", "values"],
  ["a negative value", () => listedAxis([-1, 1]), "out-of-range", "values"],
] as const)("%s is refused", (_, action, code, argument) => {
  const error = errorOf(action);
  expect([error.code, error.argument]).toEqual([code, argument]);
  expect(error.message).toMatch(/given .+; allowed: .+/);
});

test("the row of a wrong value is named", () => expect(errorOf(() => listedAxis([1, 3, 2])).index).toBe(2));
