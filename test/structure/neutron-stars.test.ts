/**
 * Stars of the library's own barotropes: published neutron-star fits against recomputed maxima, the full physics of white dwarfs,
 * catalysed matter with its layers.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { barotrope } from "../../src/barotropes/from-equation-of-state.js";
import { joinBarotropes } from "../../src/barotropes/joined.js";
import { outerCrust } from "../../src/barotropes/outer-crust.js";
import { publishedBarotrope } from "../../src/barotropes/published.js";
import { solarMass } from "../../src/constants.js";
import { composition } from "../../src/matter/composition.js";
import { findRoot } from "../../src/numerics/roots.js";
import { maximumMass } from "../../src/structure/maximum-mass.js";
import type { StarProfile } from "../../src/structure/profile.js";
import { hydrostaticStar, starMaker } from "../../src/structure/star.js";
import { starOfMass } from "../../src/structure/star-of-mass.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { publishedRows } from "./published.js";

describe("published fits have the maxima and radii that an independent integration of them gave", () => {
  test.each(["APR3", "APR4", "FPS", "WFF1", "BBB2", "ENG", "MS1", "H4", "GNH3", "PAL6"].map((name) => [name] as const))(
    "%s, piecewise polytrope of Read et al. 2009: largest mass",
    (name) => {
      const [row] = publishedRows(`Read2009 ${name} M_max (fit)`, "=");
      const most = maximumMass(publishedBarotrope(`${name} piecewise`), { range: [3e14, 4e15] });
      expect(Math.abs(most.mass / solarMass - row!.value)).toBeLessThan(1.2 * row!.halfDigit);
      expect(most.reason).toBe("relativity");
    },
  );

  test.each(["SLy", "WFF1", "WFF2", "ENG", "MPA1", "MS1", "MS1b", "H4", "PAL6"].map((name) => [name] as const))(
    "%s, piecewise: radius of 1.4 solar masses",
    (name) => {
      const [row] = publishedRows(`Read2009 ${name} R_1.4 (fit)`, "=");
      const star = starOfMass(publishedBarotrope(`${name} piecewise`), 1.4 * solarMass, { range: [1e14, 4e15] });
      expect(Math.abs(star.radius / 1e5 / row!.value - 1)).toBeLessThan(1e-5);
    },
  );

  test.each([
    ["SLy", "SLy4 HP2004 M_max"],
    ["FPS", "FPS HP2004 M_max"],
    ["BSk19", "BSk19 M_max"],
    ["BSk20", "BSk20 M_max"],
    ["BSk21", "BSk21 M_max"],
  ])("%s, analytic representation", (name, quantity) => {
    const [row] = publishedRows(quantity, "=");
    const most = maximumMass(publishedBarotrope(name), { range: [3e14, 3.6e15] });
    expect(Math.abs(most.mass / solarMass / row!.value - 1)).toBeLessThan(1e-5);
  });
});

describe("all pieces of Read et al. 2009 against another integration (test/generators/piecewise-polytrope-stars.mjs)", () => {
  const { rows } = JSON.parse(
    readFileSync(new URL("../fixtures/piecewise-polytrope-stars.json", import.meta.url), "utf8"),
  ) as {
    rows: Record<string, Record<"mass" | "radius" | "centralDensity" | "radiusAt1_4", string>>;
  };

  test.each(Object.entries(rows))("%s", (name, row) => {
    const matter = publishedBarotrope(`${name} piecewise`);
    const most = maximumMass(matter, { range: [3e14, 4e15] });
    const off = (value: number, expected: string): number => Math.abs(value / Number(expected) - 1);
    expect(off(most.mass / solarMass, row.mass)).toBeLessThan(2e-11);
    expect(off(most.centralDensity, row.centralDensity)).toBeLessThan(2e-6); // a parabola through masses found it there
    expect(off(most.radius / 1e5, row.radius)).toBeLessThan(1e-6);
    const star = starOfMass(matter, 1.4 * solarMass, { range: [1e14, 4e15] });
    expect(off(star.radius / 1e5, row.radiusAt1_4)).toBeLessThan(2e-11);
    // The limit that the matter states is its heaviest star, rounded up.
    const limit = matter.limits!.find(({ side }) => side === "above")!.density;
    expect(limit).toBeGreaterThan(most.centralDensity);
    expect(limit).toBeLessThan(1.001 * most.centralDensity);
  });
});

/** Radius at which the density falls to 1e6 g/cm^3: there the recomputed stars end, where the formulas were fitted from. */
function radiusOfFormula(star: { readonly radius: number; readonly profile: StarProfile }): number {
  const { at } = star.profile;
  return findRoot((radius) => at(radius).density - 1e6, 0.9 * star.radius, star.radius, { relativeTolerance: 1e-12 }).x;
}

test.each([
  // Recomputed outside this library: radius of 1.4 solar masses, of the heaviest star, km.
  ["SLy", 11.698, 9.9807],
  ["FPS", 10.8277, 9.2478],
  ["BSk19", 10.7356, 9.1021],
  ["BSk20", 11.7403, 10.1705],
  ["BSk21", 12.5863, 11.039],
] as const)("%s, analytic representation: radii", (name, ofMass, ofMaximum) => {
  const matter = publishedBarotrope(name);
  const star = starOfMass(matter, 1.4 * solarMass, { range: [1e14, 3e15], profile: true });
  expect(Math.abs(radiusOfFormula(star) / 1e5 - ofMass)).toBeLessThan(6e-5); // half a unit of the last digit
  const { centralDensity } = maximumMass(matter, { range: [3e14, 3.6e15] });
  const heaviest = hydrostaticStar(matter, { centralDensity, profile: true });
  // Its maximum was found by comparing masses, which leaves some 1e-4 of its density and a tenth of that in the radius.
  expect(Math.abs(radiusOfFormula(heaviest) / 1e5 / ofMaximum - 1)).toBeLessThan(2e-5);
});

test("listed kinks keep the promise of the tolerance for pieces; they stand where the pieces meet", () => {
  const pieces = publishedBarotrope("SLy piecewise");
  const dividing = [2.44034e7, 3.78358e11, 2.6278e12, 10 ** 14.7, 1e15]; // Read et al. 2009
  for (const density of dividing) {
    const { potential } = pieces.state(density);
    expect(pieces.kinks!.some((kink) => Math.abs(kink / potential - 1) < 1e-12)).toBe(true);
  }
  expect(pieces.kinks).toHaveLength(6); // and the join of crust and core
  const mass = (tolerance: number): number => hydrostaticStar(pieces, { centralDensity: 1e15, tolerance }).mass;
  for (const tolerance of [1e-7, 1e-9, 1e-11]) {
    expect(Math.abs(mass(tolerance) / mass(1e-14) - 1)).toBeLessThan(0.3 * tolerance);
  }
});

describe("white dwarfs of the full physics", () => {
  const core = composition({ C12: 0.5, O16: 0.5 });

  test("cold carbon and oxygen: the default tolerance is kept", () => {
    const make = (tolerance: number) =>
      starMaker(barotrope(whiteDwarfMatter(), core, { temperature: 0 }), { tolerance })(1e8);
    const [usual, tight] = [make(1e-11), make(1e-13)];
    expect(Math.abs(usual.mass / tight.mass - 1)).toBeLessThan(3e-12);
    expect(Math.abs(usual.radius / tight.radius - 1)).toBeLessThan(1e-12);
    expect(usual.findings).toEqual([]);
  });

  test("an isotherm that freezes on the way in: cut at its lowest density, and said so", () => {
    const warm = barotrope(whiteDwarfMatter(), core, { temperature: 1e7, density: [1e3, 1e10] });
    const star = hydrostaticStar(warm, { centralDensity: 1e9 });
    expect(star.findings.map(({ code }) => code)).toEqual(["cut-surface"]);
    const [finding] = star.findings;
    // What is missing moves the radius by the share that the finding names, times n + 1 or more.
    const lower = barotrope(whiteDwarfMatter(), core, { temperature: 1e7, density: [1, 1e10] });
    const whole = hydrostaticStar(lower, { centralDensity: 1e9 });
    const share = whole.radius / star.radius - 1;
    expect(share / finding!.value).toBeGreaterThan(1);
    expect(share / finding!.value).toBeLessThan(10);
  });
});

describe("catalysed matter", () => {
  const crust = outerCrust();

  test("white dwarfs of it end near one solar mass at 1.4e9 g/cm^3, by electron capture (Harrison et al. 1965: 1.0; memory)", () => {
    const most = maximumMass(crust);
    expect(Math.abs(most.mass / solarMass - 1)).toBeLessThan(0.02);
    expect(most.reason).toBe("softening");
  });

  test("joined to a core: two families, white dwarfs and neutron stars", () => {
    const matter = joinBarotropes(crust, publishedBarotrope("BSk21"));
    const { turningPoints, mass, reason } = maximumMass(matter);
    // Between them a family of unstable stars whose mass rises and falls again: their inner crust alone would carry them.
    const kinds = ["maximum", "minimum", "maximum", "minimum", "maximum"];
    expect(turningPoints.map(({ kind }) => kind)).toEqual(kinds);
    const lightest = turningPoints[3]!;
    expect((lightest.mass / solarMass).toFixed(2)).toBe("0.09"); // the least mass of a neutron star: common practice
    for (const { centralDensity } of turningPoints) {
      const [below, above] = [1 - 1e-4, 1 + 1e-4].map((factor) =>
        hydrostaticStar(matter, { centralDensity: centralDensity * factor }),
      );
      expect(below!.massSlope * above!.massSlope).toBeLessThan(0);
    }
    expect(reason).toBe("relativity");
    expect(Math.abs(mass / solarMass / 2.27404 - 1)).toBeLessThan(1e-5);
    // 1.4 solar masses: I of (1-2)e45 g cm^2 and Lambda of some hundreds are common practice.
    const star = starOfMass(matter, 1.4 * solarMass, { range: [1e14, 2e15], rotation: true, tides: true });
    expect(star.momentOfInertia! / 1e45).toBeGreaterThan(1);
    expect(star.momentOfInertia! / 1e45).toBeLessThan(2);
    // The relation between I and Lambda that hardly depends on the matter (Yagi & Yunes 2013, Science 341, 365; fit from memory, 1 %).
    const length = star.compactness * star.radius; // G M/c^2
    const reduced = star.momentOfInertia! / (star.mass * length ** 2);
    const x = Math.log(star.tidalDeformability!);
    const fit = 1.496 + 0.05951 * x + 0.02238 * x ** 2 - 6.953e-4 * x ** 3 + 8.345e-6 * x ** 4;
    expect(Math.abs(Math.log(reduced) - fit)).toBeLessThan(0.02);
  });
});
