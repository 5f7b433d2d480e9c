/** What a star says about itself: one star for each finding, and its neighbour that has none. */
import { describe, expect, test } from "vitest";
import type { Barotrope } from "../../src/barotropes/barotrope.js";
import { barotrope } from "../../src/barotropes/from-equation-of-state.js";
import { piecewisePolytrope } from "../../src/barotropes/piecewise-polytrope.js";
import { publishedBarotrope } from "../../src/barotropes/published.js";
import { composition } from "../../src/matter/composition.js";
import { hydrostaticStar } from "../../src/structure/star.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { polytrope } from "./barotropes.js";

const codes = (matter: Barotrope, centralDensity: number): readonly string[] =>
  hydrostaticStar(matter, { centralDensity }).findings.map(({ code }) => code);

describe("limits of the matter", () => {
  // Thresholds in the lattice: own calculation by equal Gibbs energies, AME2020 (as in electron-capture.json): O16, Fe56.
  test.each([
    ["O16", 2.05927e10],
    ["Fe56", 1.37587e9],
  ] as const)("%s captures electrons above %d g/cm^3", (label, density) => {
    const matter = barotrope(whiteDwarfMatter(), composition({ [label]: 1 }), { temperature: 0 });
    expect(codes(matter, 0.99 * density)).not.toContain("electron-capture");
    const { findings } = hydrostaticStar(matter, { centralDensity: 1.01 * density });
    const found = findings.find(({ code }) => code === "electron-capture");
    expect(found).toMatchObject({ value: 1.01 * density, message: expect.stringContaining(label) });
    expect(Math.abs(found!.threshold / density - 1)).toBeLessThan(3e-3); // the shift in closed form
  });

  test("neutron drip at 4.3e11 g/cm^3 (Baym, Pethick & Sutherland 1971)", () => {
    const matter = barotrope(whiteDwarfMatter(), composition({ C12: 1 }), { temperature: 0 });
    expect(codes(matter, 4.2e11)).not.toContain("neutron-drip");
    expect(codes(matter, 4.4e11)).toContain("neutron-drip");
  });

  test("a mean nucleus has no threshold known, a light element none below its surface", () => {
    const mean = barotrope(whiteDwarfMatter(), composition({ meanMassNumber: 14, meanCharge: 7 }), { temperature: 0 });
    expect(mean.limits!.map(({ code }) => code)).toEqual(["neutron-drip"]);
    const nitrogen = barotrope(whiteDwarfMatter(), composition({ N14: 1 }), { temperature: 0 });
    // 1.15599e6 without the lattice (as above), which moves it up by some per cent.
    expect(nitrogen.limits![0]!.density / 1.15599e6).toBeGreaterThan(1.01);
    expect(nitrogen.limits![0]!.density / 1.15599e6).toBeLessThan(1.15);
  });

  test("published matter: denser than its heaviest star, thinner than it was made for", () => {
    const matter = publishedBarotrope("BSk21");
    expect(codes(matter, 1e15)).toEqual([]);
    expect(codes(matter, 1.7e15)).toEqual(["unstable-star", "extrapolated"]);
    expect(codes(matter, 1e5)).toEqual(["extrapolated"]);
  });
});

test("matter whose pressure falls somewhere inside", () => {
  const good = polytrope(1e13, 1.5);
  const bad: Barotrope = {
    ...good,
    fillAtPotential(record) {
      good.fillAtPotential(record);
      if (record[0]! > 1e4 && record[0]! < 2e4) record[4] = -0.1;
    },
  };
  for (const relativity of ["newton", "general"] as const) {
    const found = (matter: Barotrope) => hydrostaticStar(matter, { centralDensity: 1e5, relativity }).findings;
    expect(found(good)).toEqual([]);
    expect(found(bad)).toMatchObject([{ code: "unstable-matter", threshold: 0 }]);
  }
});

describe("a zero of energy far off", () => {
  const numbers = { gammas: [5 / 3], dividingDensities: [], referenceDensity: 1, referencePressure: 1e13 };
  /** Two polytropes of one pressure whose inertia is the same to 1e-12 in Newton's theory, which does not see e. */
  const [near, far] = [0, -1e18].map((energyAtZeroDensity) => piecewisePolytrope({ ...numbers, energyAtZeroDensity }));

  test.each([1e-8, 1e-4, 1e-2, 1])("central density %d g/cm^3: the loss is found and not exceeded much", (density) => {
    const options = { centralDensity: density, relativity: "newton" } as const;
    const tolerance = density < 1e-3 ? 1e-5 : 1e-11;
    const star = hydrostaticStar(far!, { ...options, tolerance });
    const exact = hydrostaticStar(near!, options);
    const rounding = (2.2e-16 * 1e18) / (2.5e13 * Math.cbrt(density) ** 2); // epsilon |e|/w, w = (5/2) K rho^(2/3)
    const found = star.findings.find(({ code }) => code === "digits-lost");
    if (rounding > tolerance) expect(found!.value / rounding).toBeCloseTo(1, 1);
    else expect(found).toBeUndefined();
    expect(Math.abs(star.mass / exact.mass - 1)).toBeLessThan(5 * rounding + tolerance);
    expect(Math.abs(star.radius / exact.radius - 1)).toBeLessThan(5 * rounding + tolerance);
  });

  test("where no digits are left for the tolerance, the refusal names one that works", () => {
    const refused = (tolerance: number) => () => hydrostaticStar(far!, { centralDensity: 1e-6, tolerance });
    expect(refused(1e-11)).toThrow(expect.objectContaining({ code: "out-of-range", argument: "tolerance" }));
    try {
      refused(1e-11)();
    } catch (error) {
      const advised = Number.parseFloat((error as { allowed: string }).allowed);
      expect(advised).toBeGreaterThan(1e-7);
      expect(refused(advised)).not.toThrow();
    }
  });
});
