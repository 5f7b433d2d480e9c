/** What a fit does to stars: figures in its report, against stars made one by one and the scaling laws of polytropes. */
import { describe, expect, test } from "vitest";
import { fitPiecewisePolytrope } from "../../src/barotropes/fit.js";
import { barotrope } from "../../src/barotropes/from-equation-of-state.js";
import { polytrope } from "../../src/barotropes/polytrope.js";
import { publishedBarotrope } from "../../src/barotropes/published.js";
import { fitSmoothBarotrope } from "../../src/barotropes/smooth-fit.js";
import { solarMass } from "../../src/constants.js";
import { composition } from "../../src/matter/composition.js";
import { maximumMass } from "../../src/structure/maximum-mass.js";
import { hydrostaticStar } from "../../src/structure/star.js";
import { starFigures } from "../../src/structure/star-figures.js";
import { starOfMass } from "../../src/structure/star-of-mass.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";

const cold = barotrope(whiteDwarfMatter(), composition({ C12: 0.5, O16: 0.5 }), { temperature: 0 });
const off = (actual: number, expected: number): number => Math.abs(actual / expected - 1);

test("the report compares the largest mass, its radius, and stars of given mass and density", () => {
  const density = [1e4, 1e11] as const;
  const figures = starFigures({ mass: 0.6 * solarMass, centralDensity: 1e8 });
  const { barotrope: fit, report } = fitPiecewisePolytrope(cold, { pieces: 6, density, figures });
  const stars = [cold, fit].map((matter) => ({
    most: maximumMass(matter, { range: density }),
    ofMass: starOfMass(matter, 0.6 * solarMass, { range: density }),
    ofDensity: hydrostaticStar(matter, { centralDensity: 1e8 }),
  }));
  const expected = stars.map(({ most, ofMass, ofDensity }) => ({
    maximumMass: most.mass,
    maximumMassRadius: most.radius,
    maximumMassDensity: most.centralDensity,
    radiusOfMass: ofMass.radius,
    densityOfMass: ofMass.centralDensity,
    massOfDensity: ofDensity.mass,
    radiusOfDensity: ofDensity.radius,
  }));
  expect(Object.keys(report.figures)).toEqual(Object.keys(expected[0]!));
  for (const [name, { source, fit: ofFit, relativeError }] of Object.entries(report.figures)) {
    const [a, b] = expected.map((one) => one[name as keyof typeof one]) as [number, number];
    const loose = name === "maximumMassDensity" ? 1e-6 : 1e-8; // the mass hardly depends on it there
    expect(off(source!, a), name).toBeLessThan(loose);
    expect(off(ofFit!, b), name).toBeLessThan(loose);
    expect(relativeError, name).toBe(ofFit! / source! - 1);
  }
  // 1.3 % in the pressure leave 0.3 % of the mass and, since the maximum is flat, a tenth of its radius.
  expect(Math.abs(report.figures["maximumMass"]!.relativeError!)).toBeLessThan(3e-3);
  expect(Math.abs(report.figures["maximumMassRadius"]!.relativeError!)).toBeGreaterThan(0.1);
});

test("a range that ends before the maximum compares the stars at its end", () => {
  const { report } = fitPiecewisePolytrope(cold, { pieces: 5, density: [1e4, 1e10], figures: starFigures() });
  const { maximumMassDensity, maximumMass: most } = report.figures;
  expect(maximumMassDensity).toEqual({ source: 1e10, fit: 1e10, relativeError: 0 });
  expect(off(most!.source!, hydrostaticStar(cold, { centralDensity: 1e10 }).mass)).toBeLessThan(1e-8);
});

test("a smooth fit is a thousand times better, neutron stars have a range of their own", () => {
  const smooth = fitSmoothBarotrope(cold, { terms: 16, density: [1e4, 1e11], figures: starFigures() });
  expect(Math.abs(smooth.report.figures["maximumMass"]!.relativeError!)).toBeLessThan(1e-5);
  const figures = starFigures({ mass: 1.4 * solarMass, range: [1e14, 3e15] });
  const { report } = fitPiecewisePolytrope(publishedBarotrope("BSk21"), { pieces: 7, density: [1e6, 3e15], figures });
  // Recomputed outside this library: 2.27404 solar masses, 11.039 km.
  expect(off(report.figures["maximumMass"]!.source! / solarMass, 2.27404)).toBeLessThan(3e-6);
  expect(off(report.figures["maximumMassRadius"]!.source!, 1.1039e6)).toBeLessThan(1.5e-4); // by comparing masses
  expect(Math.abs(report.figures["maximumMass"]!.relativeError!)).toBeLessThan(5e-3);
});

describe("by itself", () => {
  test("Newtonian polytropes of index 1 and 3/2: M ~ K^(n/2), R at given mass ~ K^(n/(3-n))", () => {
    for (const [index, ofMass, ofRadius] of [
      [1, 1.5, 0.5],
      [1.5, 1.5, 1],
    ] as const) {
      const figures = starFigures({ mass: 1e33, centralDensity: 1e5, relativity: "newton", range: [1, 1e9] });
      const [one, two] = [1, 2].map((factor) => figures(polytrope({ constant: factor * 1e13, index })));
      expect(off(two!.massOfDensity! / one!.massOfDensity!, 2 ** ofMass)).toBeLessThan(1e-9);
      expect(off(two!.radiusOfMass! / one!.radiusOfMass!, 2 ** ofRadius)).toBeLessThan(1e-8);
    }
  });

  test("refuses what it does not know, and a mass that the matter does not carry", () => {
    expect(() => starFigures({ masses: 1 } as never)).toThrow(expect.objectContaining({ code: "invalid-option" }));
    const figures = starFigures({ mass: 2 * solarMass });
    const refused = () => fitPiecewisePolytrope(cold, { pieces: 2, density: [1e4, 1e10], figures });
    expect(refused).toThrow(expect.objectContaining({ code: "outside-domain", argument: "mass" }));
    expect(() => fitPiecewisePolytrope(cold, { pieces: 2, density: [1e4, 1e10], figures: {} as never })).toThrow(
      expect.objectContaining({ code: "invalid-option", argument: "figures" }),
    );
  });
});
