import { expect, test } from "vitest";
import { BASIS_LENGTH, fillBasis, toPowers } from "../../src/numerics/quintic.js";
import { uniform } from "../measured.js";

const basis = new Float64Array(BASIS_LENGTH);
const at = (t: number): Float64Array => {
  basis[0] = t;
  fillBasis(basis);
  return basis.slice();
};

// Swesty 1996, J. Comput. Phys. 127, 118, section 3: the quintic basis in powers of t, and its derivatives.
const powers = [
  [1, 0, 0, -10, 15, -6],
  [0, 1, 0, -6, 8, -3],
  [0, 0, 0.5, -1.5, 1.5, -0.5],
  [0, 0, 0, 10, -15, 6],
  [0, 0, 0, -4, 7, -3],
  [0, 0, 0, 0.5, -1, 0.5],
];

test("the basis and three derivatives are the polynomials of the paper", () => {
  const random = uniform(1);
  for (let i = 0; i < 200; i++) {
    const t = random();
    const values = at(t);
    powers.forEach((given, k) => {
      let p: readonly number[] = given;
      for (let order = 0; order < 4; order++) {
        const expected = p.reduceRight((sum, c) => sum * t + c, 0);
        const size = p.reduceRight((sum, c) => sum * t + Math.abs(c), 0);
        expect(Math.abs(values[6 * order + k]! - expected)).toBeLessThanOrEqual(1.2e-15 * size);
        p = p.slice(1).map((c, n) => c * (n + 1));
      }
    });
  }
});

test("ends: each function carries one of the six numbers", () => {
  for (const [t, place] of [
    [0, 0],
    [1, 3],
  ] as const) {
    const values = at(t);
    for (let order = 0; order < 3; order++) {
      for (let k = 0; k < 6; k++) expect(Math.abs(values[6 * order + k]! - (k === place + order ? 1 : 0))).toBe(0);
    }
  }
});

test("by powers: the coefficients are the paper's polynomials, weighted by value, slope and curvature at the ends", () => {
  const random = uniform(2);
  for (let i = 0; i < 200; i++) {
    const ends = Float64Array.from({ length: 6 }, () => 2 * random() - 1);
    const coefficients = ends.slice();
    toPowers(coefficients);
    for (let power = 0; power < 6; power++) {
      const terms = powers.map((p, k) => ends[k]! * p[power]!);
      const expected = terms.reduce((sum, term) => sum + term, 0);
      const size = terms.reduce((sum, term) => sum + Math.abs(term), 0);
      expect(Math.abs(coefficients[power]! - expected)).toBeLessThanOrEqual(8e-16 * size);
    }
  }
});
