/** Published barotropes: the recomputed pressures, the join of crust and core, first law, causality. */
import { describe, expect, test } from "vitest";
import { barotropeFindings } from "../../src/barotropes/findings.js";
import { fitPiecewisePolytrope } from "../../src/barotropes/fit.js";
import { barotrope } from "../../src/barotropes/from-equation-of-state.js";
import { joinBarotropes } from "../../src/barotropes/joined.js";
import { outerCrust } from "../../src/barotropes/outer-crust.js";
import type { PiecewisePolytrope } from "../../src/barotropes/piecewise-polytrope.js";
import { publishedBarotrope, publishedBarotropes } from "../../src/barotropes/published.js";
import { fitSmoothBarotrope } from "../../src/barotropes/smooth-fit.js";
import { speedOfLight } from "../../src/constants.js";
import { isFermistateError } from "../../src/errors.js";
import { composition } from "../../src/matter/composition.js";
import { findRoot } from "../../src/numerics/roots.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { Measured } from "../measured.js";

const c2 = speedOfLight ** 2;

// log10 P at log10(E/c^2) = 6, 8, 10, 11, 11.5, 12: own calculation outside this library from the same formulas, six decimals.
const printed: readonly [string, readonly number[]][] = [
  ["SLy", [22.341268, 25.247658, 27.87419, 29.142326, 29.745222, 30.038864]],
  ["FPS", [22.336985, 25.247931, 27.874859, 29.1447, 29.75358, 30.252665]],
  ["BSk19", [22.337348, 25.248962, 27.872055, 29.136852, 29.725699, 30.090377]],
  ["BSk20", [22.3367, 25.248609, 27.871833, 29.13602, 29.728024, 30.094354]],
  ["BSk21", [22.33666, 25.249017, 27.872605, 29.136052, 29.735536, 30.103568]],
];

test("the formulas: pressure at given mass-energy, to the six decimals printed", () => {
  const measured = new Measured();
  for (const [name, row] of printed) {
    const matter = publishedBarotrope(name);
    for (const [i, xi] of [6, 8, 10, 11, 11.5, 12].entries()) {
      const excess = (rho: number): number => rho * (1 + matter.state(rho).specificEnergy / c2) - 10 ** xi;
      const rho = findRoot(excess, 0.9 * 10 ** xi, 1.1 * 10 ** xi).x;
      measured.add("log10 P", Math.abs(Math.log10(matter.state(rho).pressure) - row[i]!), `${name} at ${xi}`);
    }
  }
  measured.expectBelow("log10 P", 5.1e-7);
});

test("at the lowest density a baryon weighs what it weighs in iron", () => {
  for (const [name] of printed) {
    // (55.934935537/56 - 1) c^2, AME2020.
    expect(publishedBarotrope(name).state(0).specificEnergy / c2).toBeCloseTo(55.934935537 / 56 - 1, 15);
  }
});

test("the pieces: printed constants of the crust, p_1 at rho_1, the printed join mismatches", () => {
  // K of P/c^2 = K rho^Gamma, Read et al. 2009, table II (from memory); they agree with continuity to 1.2e-4.
  const crust = [6.8011e-9, 1.06186e-6, 5.32697e1, 3.99874e-8];
  const cores = publishedBarotropes.filter(({ name }) => name.endsWith("piecewise"));
  expect(cores).toHaveLength(15);
  for (const { name, parameters } of cores) {
    const matter = publishedBarotrope(name) as PiecewisePolytrope;
    for (const [i, constant] of crust.entries()) {
      expect(Math.abs(matter.pieces[i]!.constant / c2 / constant - 1), `${name} piece ${i}`).toBeLessThan(1.5e-4);
    }
    const [logPressure, first, second, third] = parameters as [number, number, number, number];
    expect(Math.abs(Math.log10(matter.state(10 ** 14.7).pressure) - logPressure), name).toBeLessThan(1e-12);
    expect(matter.pieces.slice(4).map((piece) => piece.gamma)).toEqual([first, second, third]);
    const join = matter.pieces[4]!.density;
    expect(join).toBeGreaterThan(1e13);
    expect(join).toBeLessThan(3e14);
    const expected = 10 ** logPressure * (1e15 / 10 ** 14.7) ** second * (3e15 / 1e15) ** third;
    expect(Math.abs(matter.state(3e15).pressure / expected - 1), name).toBeLessThan(1e-13);
  }
});

test("first law, by Simpson's rule, and inversion", () => {
  const measured = new Measured();
  const r = new Float64Array(5);
  for (const { name } of publishedBarotropes) {
    const matter = publishedBarotrope(name);
    for (let log = 5.03; log < Math.log10(matter.density[1]) - 0.01; log += 0.21) {
      const h = 1e-3;
      const [a, b, c] = [1, 1 + h / 2, 1 + h].map((factor) => matter.state(10 ** log * factor));
      const g = (s: typeof a): number => s!.pressure / s!.density ** 2;
      const work = (10 ** log * h * (g(a) + 4 * g(b) + g(c))) / 6;
      const noise = 4e-16 * Math.abs(a!.specificEnergy);
      const error = Math.max(0, Math.abs(c!.specificEnergy - a!.specificEnergy - work) - noise);
      // A break within the step.
      const smooth = a!.gamma1 === c!.gamma1 || !name.endsWith("piecewise");
      if (smooth) measured.add("de", error / work, `${name} at ${log}`);
      r[1] = a!.pressure;
      matter.fillAtPressure(r);
      measured.add("P", Math.abs(r[0]! / a!.density - 1), `${name} at ${log}`);
      r[3] = a!.potential;
      matter.fillAtPotential(r);
      const slope = (a!.gamma1 * a!.pressure) / a!.density;
      measured.add(
        "w",
        (Math.abs(r[0]! / a!.density - 1) * slope) / Math.max(slope, Math.abs(a!.potential)),
        `${name} ${log}`,
      );
    }
  }
  measured.expectBelow("de", 1e-9);
  measured.expectBelow("P", 2e-13); // xi = 15 has a last digit of 2e-15, which is 4e-15 in ln E
  measured.expectBelow("w", 1e-13);
});

describe("findings", () => {
  test("where sound is faster than light", () => {
    for (const { name } of publishedBarotropes) {
      const matter = publishedBarotrope(name);
      const found = barotropeFindings(matter);
      const seen = found.filter(({ code }) => code === "acausal");
      expect(found.filter(({ code }) => code !== "acausal").map(({ code }) => code)).toEqual(
        Array(2).fill("extrapolated"),
      );
      for (const { density, value } of seen) {
        expect(value).toBeGreaterThan(1);
        expect(matter.state(density * (1 - 1e-9)).soundSpeed).toBeLessThanOrEqual(speedOfLight);
        expect(matter.state(density * (1 + 1e-6)).soundSpeed).toBeGreaterThan(speedOfLight);
      }
    }
    // A polytrope with gamma <= 2 never is: c_s^2/c^2 rises to gamma - 1.
    const codes = (name: string) => barotropeFindings(publishedBarotrope(name)).map(({ code }) => code);
    expect(codes("APR4 piecewise")[0]).toBe("acausal");
    expect(codes("MS1 piecewise")).not.toContain("acausal");
  });

  test("limits: stated once each, kept by a join where they apply, and by fits", () => {
    const low = publishedBarotrope("SLy");
    expect(barotropeFindings(low).filter(({ code }) => code === "extrapolated")).toMatchObject([
      { density: 1e6, value: 0 },
      { density: 2.008e15, value: low.density[1] },
    ]);
    // The crust reaches below what the core's own envelope was schematic for.
    const joined = joinBarotropes(outerCrust(), low);
    const [limit] = joined.limits!;
    expect(joined.limits).toHaveLength(1);
    expect(limit).toMatchObject({ code: "extrapolated", side: "above" });
    expect(Math.abs(limit!.density / 2.008e15 - 1)).toBeLessThan(2e-3); // the join rescales rho
    const core = barotrope(whiteDwarfMatter(), composition({ Fe56: 1 }), { temperature: 0, density: [1e4, 1e12] });
    expect(barotropeFindings(core).map(({ code }) => code)).toEqual(["electron-capture", "neutron-drip"]);
    const { barotrope: fit } = fitPiecewisePolytrope(core, { pieces: 3, density: [1e5, 1e11] });
    expect(barotropeFindings(fit).map(({ code, density }) => [code, density])).toEqual([
      ["electron-capture", core.limits![0]!.density],
      ["extrapolated", 1e5],
    ]);
    const { barotrope: smooth } = fitSmoothBarotrope(core, { terms: 10, density: [1e5, 1e9] });
    expect(barotropeFindings(smooth)).toEqual([]);
  });

  test("a pressure that falls, and a potential that belongs to another one", () => {
    const good = publishedBarotrope("SLy piecewise");
    const falling = {
      ...good,
      density: [1e6, 1e9] as const,
      fillAtDensity(record: Float64Array): void {
        good.fillAtDensity(record);
        if (record[0]! > 1e8) record[4] = -0.5;
      },
    };
    const [finding] = barotropeFindings(falling);
    expect(finding?.code).toBe("unstable");
    expect(Math.abs((finding?.density ?? 0) / 1e8 - 1)).toBeLessThan(1e-12);
    const shifted = {
      ...good,
      fillAtDensity(record: Float64Array): void {
        good.fillAtDensity(record);
        if (record[0]! > 1e8) record[3]! *= 1.1;
      },
    };
    expect(barotropeFindings(shifted).map(({ code }) => code)).toContain("inconsistent");
  });
});

test.each([
  ["findings", () => barotropeFindings(undefined as never)],
  ["a join", () => joinBarotropes(publishedBarotrope("SLy"), { density: [0, 1] } as never)],
  ["a smooth fit", () => fitSmoothBarotrope(null as never, { terms: 5, density: [1, 2] })],
])("%s of something else is refused", (_, action) => {
  expect(action).toThrow(/allowed: a barotrope/);
});

test("a name that is not there is refused with those that are", () => {
  try {
    publishedBarotrope("ABC");
    expect.fail("it answered");
  } catch (error) {
    if (!isFermistateError(error)) throw error;
    expect(error.code).toBe("invalid-option");
    expect(error.allowed).toContain("BSk21");
  }
});

test("every set names its source and how it is known", () => {
  for (const { source, howKnown, range } of publishedBarotropes) {
    expect(source).toMatch(/(2004|2009|2013)/);
    expect(howKnown).toMatch(/from memory/);
    expect(range[1]).toBe(1e16);
  }
});
