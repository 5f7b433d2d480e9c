/**
 * Kinks and jumps of joined and layered matter reach the integrator: the error stays below the tolerance, as for matter
 * without them, and a star of joined matter is that of the same curve made in one piece.
 */
import { describe, expect, test } from "vitest";
import type { Barotrope } from "../../src/barotropes/barotrope.js";
import { joinBarotropes } from "../../src/barotropes/joined.js";
import { neutronProtonElectronGas } from "../../src/barotropes/nucleon-gas.js";
import { outerCrust } from "../../src/barotropes/outer-crust.js";
import { piecewisePolytrope } from "../../src/barotropes/piecewise-polytrope.js";
import { publishedBarotrope } from "../../src/barotropes/published.js";
import { hydrostaticStar } from "../../src/structure/star.js";

const slyPieces = publishedBarotrope("SLy piecewise");
const npe = neutronProtonElectronGas();

/** Largest relative error of mass and radius over the tolerance, against a star at 1e-14 that stops at every kink. */
function worst(matter: Barotrope, listed: Barotrope, centralDensity: number): number {
  const exact = hydrostaticStar(listed, { centralDensity, tolerance: 1e-14 });
  const errors = [1e-7, 1e-9, 1e-11].flatMap((tolerance) => {
    const star = hydrostaticStar(matter, { centralDensity, tolerance });
    return [star.mass / exact.mass - 1, star.radius / exact.radius - 1].map((error) => Math.abs(error) / tolerance);
  });
  return Math.max(...errors);
}

describe("the error stays below the tolerance", () => {
  test.each<[string, Barotrope, number, number, number]>([
    // Measured with the kinks and without them, in tolerances.
    ["a crust of layers on pieces", joinBarotropes(outerCrust(), slyPieces), 1e15, 0.3, 5],
    ["pieces on a formula", joinBarotropes(slyPieces, publishedBarotrope("BSk21")), 1e15, 0.3, 2],
    ["a formula on its polytropic envelope", publishedBarotrope("SLy"), 1e8, 0.3, 20],
    ["where neutrons appear", npe, 1e10, 0.5, 1],
  ])("%s", (_, matter, centralDensity, atMost, atLeastWithout) => {
    expect(worst(matter, matter, centralDensity)).toBeLessThan(atMost);
    expect(worst({ ...matter, kinks: [] }, matter, centralDensity)).toBeGreaterThan(atLeastWithout);
  });
});

test("formulas with narrow features: below ten tolerances at every central density, a hundred and more without stops", () => {
  const without: number[] = [];
  for (const name of ["SLy", "FPS", "BSk19", "BSk20", "BSk21"]) {
    const matter = publishedBarotrope(name);
    for (let i = 0; i < 20; i++) {
      const centralDensity = 3e14 * (1 + 0.1 * i);
      const exact = hydrostaticStar(matter, { centralDensity, tolerance: 1e-14 }).mass;
      const error = (one: Barotrope): number =>
        Math.abs(hydrostaticStar(one, { centralDensity, tolerance: 1e-11 }).mass / exact - 1) / 1e-11;
      expect(error(matter), `${name} ${centralDensity}`).toBeLessThan(10);
      without.push(error({ ...matter, kinks: [] }));
    }
  }
  expect(Math.max(...without)).toBeGreaterThan(100);
});

describe("where they stand", () => {
  test("joined matter keeps the kinks of both, and has one where they meet without a jump", () => {
    const pieces = piecewisePolytrope({
      gammas: [1.6, 1.4, 1.7, 2.1],
      dividingDensities: [1e6, 1e8, 1e10],
      referenceDensity: 1e6,
      referencePressure: 2e22,
    });
    const [, , third, last] = pieces.pieces;
    const outer = piecewisePolytrope({
      gammas: [1.6, 1.4],
      dividingDensities: [1e6],
      referenceDensity: 1e6,
      referencePressure: 2e22,
    });
    // The inner pieces alone, begun so that e is the same at the join.
    const { specificEnergy, pressure } = pieces.state(1e8);
    const inner = piecewisePolytrope({
      gammas: [third!.gamma, last!.gamma],
      dividingDensities: [1e10],
      referenceDensity: 1e8,
      referencePressure: pressure,
      energyAtZeroDensity: specificEnergy - pressure / 1e8 / (third!.gamma - 1),
    });
    const joined = joinBarotropes(outer, inner, { pressure });
    expect(joined.jumps).toEqual([]);
    expect(joined.kinks).toHaveLength(3);
    for (const [i, kink] of [...joined.kinks!].sort((a, b) => a - b).entries()) {
      expect(Math.abs(kink / pieces.kinks![i]! - 1)).toBeLessThan(1e-13);
    }
    for (const centralDensity of [1e7, 1e9, 1e11]) {
      const [a, b] = [joined, pieces].map((matter) => hydrostaticStar(matter, { centralDensity, tides: true }));
      for (const name of ["mass", "radius", "massSlope", "loveNumber"] as const) {
        expect(Math.abs(a![name]! / b![name]! - 1), `${name} ${centralDensity}`).toBeLessThan(2e-11);
      }
    }
  });

  test("neutrons appear at the kink of the gas", () => {
    const [kink] = npe.kinks!;
    expect(Math.abs(npe.state(npe.neutronOnset).potential / kink! - 1)).toBeLessThan(1e-13);
    expect(npe.protonFraction(npe.neutronOnset * (1 - 1e-9))).toBe(1);
    expect(npe.protonFraction(npe.neutronOnset * (1 + 1e-6))).toBeLessThan(1);
  });
});
