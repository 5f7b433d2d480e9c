/** The closing of cells against its definition: no change of any node makes the sum of squares smaller. */
import { expect, test } from "vitest";
import { closing } from "../../src/tables/foreign/least-squares.js";
import { uniform } from "../measured.js";

const [m, n] = [6, 5];

function mismatch(seed: number, degeneracy: number) {
  const random = uniform(seed);
  const open = Float64Array.from({ length: (m - 1) * n }, (_, k) => (k % n === 0 ? 0 : random() - 0.5));
  const isothermScale = Float64Array.from({ length: (m - 1) * n }, () => 0.5 + random());
  const isochoreScale = Float64Array.from({ length: m * (n - 1) }, () => degeneracy * (0.5 + random()));
  return { densities: m, temperatures: n, open, isothermScale, isochoreScale };
}

/** The sum of squares, node by node. */
function squares({ open, isothermScale, isochoreScale }: ReturnType<typeof mismatch>, f: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < m; i++) {
    for (let j = 0; j < n; j++) {
      const k = i * n + j;
      if (j + 1 < n) sum += ((f[k + 1]! - f[k]!) / isochoreScale[i * (n - 1) + j]!) ** 2;
      if (i + 1 < m) sum += ((f[k + n]! - f[k]! - open[k]!) / isothermScale[k]!) ** 2;
    }
  }
  return sum;
}

test.each([
  ["hot", 1, 1],
  ["T s above P/rho", 2, 20],
  ["degenerate", 3, 1e-2],
])("%s: least at every node", (_name, seed, degeneracy) => {
  const given = mismatch(seed, degeneracy);
  const f = closing(given);
  expect(f[0]).toBe(0);
  const least = squares(given, f);
  expect(least).toBeLessThan(squares(given, new Float64Array(m * n)));
  for (let k = 0; k < m * n; k++) {
    for (const step of [1e-4, -1e-4]) {
      const moved = f.slice();
      moved[k]! += step * degeneracy;
      expect(squares(given, moved)).toBeGreaterThan(least);
    }
  }
});

test("cells that close stay as they are", () => {
  const given = { ...mismatch(4, 1), open: new Float64Array((m - 1) * n) };
  expect(closing(given).every((value) => value === 0)).toBe(true);
});
