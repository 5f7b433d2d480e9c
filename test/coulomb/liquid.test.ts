/**
 * Classical one-component liquid: the formula as printed in decimal arithmetic, 50-digit values made before the library
 * (fixtures/coulomb-terms.json), exact weak coupling, and simulations.
 *
 * Formula and coefficients: Potekhin & Chabrier 2000, PRE 62, 8554, section IV (from memory).
 */
import { readFileSync } from "node:fs";
import type { Decimal } from "decimal.js";
import { describe, expect, test } from "vitest";
import { addLiquidCorrelation } from "../../src/coulomb/liquid.js";
import * as slot from "../../src/coulomb/slots.js";
import { Measured, uniform } from "../measured.js";
import { abe, ionDebyeHueckel } from "./debye-hueckel.js";
import { decimalMembers, Exact, memberNames } from "./decimal-members.js";

const { rows } = JSON.parse(readFileSync(new URL("../fixtures/coulomb-terms.json", import.meta.url), "utf8")) as {
  readonly rows: readonly (Readonly<Record<string, string>> & { readonly args: readonly string[] })[];
};
const print = (measured: Measured): void => {
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
};

/** Members for one species of number fraction 1. */
function members(gamma: number, order: 2 | 3 = 3): Float64Array {
  const point = new Float64Array(slot.POINT_LENGTH);
  const ion = new Float64Array(slot.ION_LENGTH);
  point[slot.POINT_GAMMA_E] = gamma;
  ion[slot.ION_Z53] = 1;
  ion[slot.ION_X] = 1;
  const u = new Float64Array(6);
  addLiquidCorrelation(u, order, point, ion);
  return u;
}

const [a1, a2, b1, b2, b3, b4] = ["-0.9070", "0.62954", "0.00456", "211.6", "-1e-4", "0.00462"].map(
  (text) => new Exact(text),
) as [Decimal, Decimal, Decimal, Decimal, Decimal, Decimal];
const a3 = new Exact(3).sqrt().div(-2).minus(a1.div(a2.sqrt()));

/** The four parts as printed. */
const parts: readonly ((g: Decimal) => Decimal)[] = [
  (g) =>
    a1.times(
      g
        .times(a2.plus(g))
        .sqrt()
        .minus(a2.times(g.div(a2).sqrt().asinh())),
    ),
  (g) => a3.times(2).times(g.sqrt().minus(g.sqrt().atan())),
  (g) => b1.times(g.minus(b2.times(g.div(b2).plus(1).ln()))),
  (g) => b3.div(2).times(g.times(g).div(b4).plus(1).ln()),
];

const random = uniform(20261);
const couplings = [
  ...[
    1e-12, 1e-9, 1e-6, 1e-4, 1e-3, 0.01, 0.03, 0.0599999, 0.06, 0.0600001, 0.1, 0.3, 1, 3, 10, 30, 100, 175, 200, 1e4,
  ],
  ...Array.from({ length: 30 }, () => 10 ** (-4 + 6.3 * random())),
];

describe("classical liquid", () => {
  // Measured over 50 couplings 1e-12 to 1e4, of each member's own value: first 4e-16, second 5e-16, third 6e-16, fourth
  // 9e-16; f 4.6e-15 and entropy 9.2e-15, both just above Gamma = 0.06, where the series end and the closed form still
  // loses a factor 50; medians 2e-16.
  test("is the printed formula with its derivatives", () => {
    const measured = new Measured();
    for (const gamma of couplings) {
      const exact = parts.map((part) => decimalMembers(part, gamma));
      const u = members(gamma);
      memberNames.forEach((name, k) => {
        const sum = exact.reduce((total, part) => total + part[k]!, 0);
        measured.compare(name, u[k]!, sum, `Gamma ${gamma}`);
      });
    }
    print(measured);
    for (const name of ["first", "second", "third", "fourth"]) measured.expectBelow(name, 2e-15, 4e-16);
    measured.expectBelow("f", 9e-15, 4e-16);
    measured.expectBelow("entropy", 1.8e-14, 4e-16);
  });

  // Measured: 3.4e-16 (cv), entropy 1.8e-16 of f.
  test("agrees with the 50-digit values", () => {
    const measured = new Measured();
    for (const row of rows.filter(({ term }) => term === "f_ii second set")) {
      const gamma = Number(row.args[0]);
      const [f, e, second, , , entropy] = members(gamma) as unknown as [number, number, number, number, number, number];
      const compare = (name: string, value: number): void =>
        measured.compare(name, value, Number(row[name]), `Gamma ${gamma}`);
      compare("f", f);
      compare("u", e);
      compare("cv", -second);
      compare("p", e / 3);
      compare("dPdn", e / 3 + (second + e) / 9);
      compare("dPdT", -second / 3);
      measured.compare("s", entropy, Number(row["u"]) - Number(row["f"]), `Gamma ${gamma}`, Math.abs(f));
    }
    print(measured);
    expect(measured.count("f")).toBe(6);
    for (const name of ["f", "u", "cv", "p", "dPdn", "dPdT", "s"]) measured.expectBelow(name, 8e-16);
  });

  test("adds in proportion to the fraction, and leaves the higher members alone at order 2", () => {
    const full = members(20);
    const half = new Float64Array([1, 1, 1, 1, 1, 1]);
    const point = new Float64Array(slot.POINT_LENGTH);
    const ion = new Float64Array(slot.ION_LENGTH);
    point[slot.POINT_GAMMA_E] = 2;
    ion[slot.ION_Z53] = 10;
    ion[slot.ION_X] = 0.5;
    addLiquidCorrelation(half, 3, point, ion);
    full.forEach((value, k) => {
      expect(half[k]).toBe(1 + 0.5 * value);
    });
    const low = members(20, 2);
    for (const k of [0, 1, 2, 5]) expect(low[k]).toBe(full[k]);
    expect([low[3], low[4]]).toEqual([0, 0]);
  });

  // f_DH = -Gamma^(3/2)/sqrt 3 (Debye & Hueckel 1923). The next order of the printed formula is (B3/B4) Gamma^2/2, at most
  // 0.0500 Gamma^(1/2) of a member (the second).
  test("tends to Debye-Hueckel, every member", () => {
    for (const gamma of [1e-10, 1e-20, 1e-30]) {
      const u = members(gamma);
      const f = ionDebyeHueckel(gamma);
      [f, 1.5 * f, 0.75 * f, -0.375 * f, 0.5625 * f, 0.5 * f].forEach((limit, k) => {
        expect(Math.abs(u[k]! / limit - 1), `${memberNames[k]} at ${gamma}`).toBeLessThan(
          0.0501 * Math.sqrt(gamma) + 1e-15,
        );
      });
    }
  });

  // Abe 1959 adds the next order exactly. Energy of the fit over it minus 1, measured: +3.1e-4, -3.9e-5, -3.8e-4 at
  // 1e-3, 0.01, 0.03; the fit's own error, and the order beyond Abe's at 0.03.
  test("is within 5e-4 of weak coupling to the second order", () => {
    for (const [gamma, deviation] of [
      [1e-3, 3.1e-4],
      [0.01, -3.9e-5],
      [0.03, -3.8e-4],
    ] as const) {
      expect(Math.abs(members(gamma)[1]! / abe(gamma).u - 1 - deviation), `Gamma ${gamma}`).toBeLessThan(1e-5);
    }
  });

  // Canonical Monte Carlo with Ewald sums, 700 ions, own calculation outside this library. Measured: 1.5, 1.0, 0.2, 0.3
  // standard errors.
  test("agrees with simulations", () => {
    for (const [gamma, energy, error] of [
      [1, -0.5723, 0.00017],
      [10, -7.99825, 0.00051],
      [100, -87.5254, 0.0024],
      [160, -141.037, 0.0031],
    ] as const) {
      expect(Math.abs(members(gamma)[1]! - energy) / error, `Gamma ${gamma}`).toBeLessThan(2);
    }
  });

  // DeWitt & Slattery 2003, Contrib. Plasma Phys. 43, 279: f = -0.899172 G + 1.8645 G^0.32301 - 0.2748 ln G - 1.4019 (from
  // memory), another fit to simulations, 1 <= G. Energies differ by 3.2e-4 (1), 7.5e-4 (10), 4.0e-4 (100), 1.7e-3 (160).
  test("is within 0.002 kT of another fit", () => {
    for (const gamma of [1, 10, 100, 160]) {
      const other = -0.899172 * gamma + 1.8645 * 0.32301 * gamma ** 0.32301 - 0.2748;
      expect(Math.abs(members(gamma)[1]! - other), `Gamma ${gamma}`).toBeLessThan(0.002);
    }
  });
});
