/** Radiation pressure: Eddington's quartic and Chandrasekhar's bounds against recomputed figures, limits and stars. */
import { describe, expect, test } from "vitest";
import {
  atomicMassConstant,
  boltzmannConstant,
  gravitationalConstant as G,
  planckConstant,
  radiationConstant,
  solarMass,
  speedOfLight,
} from "../../src/constants.js";
import { laneEmden } from "../../src/structure/lane-emden.js";
import { chandrasekharMass, uniformSphereMass } from "../../src/structure/limiting-mass.js";
import {
  centralPressureBounds,
  centralRadiationBound,
  degenerateMassLimit,
  hydrostaticViolations,
  nonDegenerateRadiationShare,
  standardModel,
} from "../../src/structure/radiation-pressure.js";
import { hydrostaticStar } from "../../src/structure/star.js";
import { coldElectrons, coldNeutrons, polytrope } from "./barotropes.js";
import { published, publishedRows } from "./published.js";

describe("the standard model", () => {
  test("1 - beta at mu^2 M = 1 to 500 solar masses (Eddington 1926; recomputed to 15 digits)", () => {
    const rows = publishedRows("Eddington 1-beta at", "=");
    expect(rows).toHaveLength(12);
    for (const { at, value } of rows) {
      expect(Math.abs(standardModel(at * solarMass, 1).radiation / value - 1), String(at)).toBeLessThan(4e-15);
      // Only mu^2 M counts.
      expect(Math.abs(standardModel((at * solarMass) / 4, 2).radiation / value - 1)).toBeLessThan(4e-15);
    }
  });

  test("both shares solve the quartic to rounding from 1e-100 to 1e60 solar masses", () => {
    const q1 = standardModel(1e-60 * solarMass, 1).radiation; // q itself: (1 - beta)/beta^4 there
    for (let power = -100; power <= 60; power += 0.37) {
      const { gas, radiation } = standardModel(10 ** power * solarMass, 1);
      const q = q1 * 10 ** (2 * power + 120);
      expect(Math.abs(radiation / gas ** 4 / q - 1), `1e${power}`).toBeLessThan(3e-12); // 10 ** x has 1e-12 of its own here
      expect(Math.abs(gas + radiation - 1)).toBeLessThan(2e-16);
    }
  });

  test("is a polytrope of index 3 with that beta throughout", () => {
    const mu = 0.61;
    const { gas, radiation } = standardModel(5 * solarMass, mu);
    const constant = Math.cbrt(
      ((boltzmannConstant / (mu * atomicMassConstant)) ** 4 * 3 * radiation) / gas ** 4 / radiationConstant,
    );
    const star = hydrostaticStar(polytrope(constant, 3), { centralDensity: 50, relativity: "newton" });
    expect(Math.abs(star.mass / (5 * solarMass) - 1)).toBeLessThan(1e-10);
    expect(Math.abs(laneEmden(3).densityRatio / 54.18248 - 1)).toBeLessThan(1e-7);
  });
});

describe("the limiting mass", () => {
  test.each([
    ["atomic-mass-constant", "m_u"],
    ["hydrogen-atom", "m_H (1H atom)"],
    ["proton", "m_p"],
  ] as const)("M mu_e^2 with %s (Chandrasekhar 1935; recomputed to 13 digits)", (massUnit, name) => {
    const value = published(`M_Ch mu_e^2 in Msun, ${name} CODATA 2022`);
    expect(Math.abs(chandrasekharMass(1, { massUnit }) / solarMass / value - 1)).toBeLessThan(1e-13);
  });

  test("common practice: 5.825190 by m_u; about 1.44 for mu_e = 2 with the hydrogen atom; a uniform sphere about 1.7", () => {
    expect(chandrasekharMass(1) / solarMass).toBeCloseTo(5.82519, 5);
    expect(Math.abs(chandrasekharMass(2, { massUnit: "hydrogen-atom" }) / solarMass - 1.44)).toBeLessThan(0.01);
    expect(Math.abs(uniformSphereMass(2, { massUnit: "hydrogen-atom" }) / solarMass - 1.7)).toBeLessThan(0.05);
    expect(Math.abs(uniformSphereMass(2) / solarMass - 1.7)).toBeLessThan(0.05);
  });

  test("refusals", () => {
    expect(() => chandrasekharMass(0)).toThrow(expect.objectContaining({ code: "out-of-range" }));
    expect(() => chandrasekharMass(Number.NaN)).toThrow(expect.objectContaining({ code: "not-a-number" }));
    expect(() => chandrasekharMass(2, { massUnit: "pound" as "proton" })).toThrow(
      expect.objectContaining({ code: "invalid-option", argument: "massUnit" }),
    );
    expect(() => standardModel(-1, 1)).toThrow(expect.objectContaining({ code: "out-of-range", argument: "mass" }));
  });
});

describe("degeneracy", () => {
  test("1 - beta = 0.0921 and the mass ratio 1.156 (Chandrasekhar 1932, 1939)", () => {
    expect(Math.abs(nonDegenerateRadiationShare / published("Chandrasekhar critical 1-beta") - 1)).toBeLessThan(3e-16);
    const ratio = degenerateMassLimit(2) / chandrasekharMass(2);
    expect(Math.abs(ratio / published("beta_omega^-3/2") - 1)).toBeLessThan(1e-14);
  });

  test("is where the classical P(rho) at fixed beta has the constant of the extremely degenerate gas", () => {
    const beta = 1 - nonDegenerateRadiationShare;
    const m = 2 * atomicMassConstant;
    const classical = Math.cbrt(((boltzmannConstant / m) ** 4 * 3 * (1 - beta)) / beta / radiationConstant);
    const degenerate = (Math.cbrt(3 / Math.PI) * planckConstant * speedOfLight) / (8 * m ** (4 / 3)); // Chandrasekhar 1931
    expect(Math.abs(classical / degenerate - 1)).toBeLessThan(1e-14);
  });

  test("the standard model of that mass has that share", () => {
    expect(Math.abs(standardModel(degenerateMassLimit(2), 2).radiation / nonDegenerateRadiationShare - 1)).toBeLessThan(
      1e-13,
    );
  });
});

describe("bounds on the centre", () => {
  test("common practice: at one solar mass and mu = 1 radiation is at most about 3 % of the central pressure", () => {
    expect(Math.abs(centralRadiationBound(solarMass, 1).radiation - 0.03)).toBeLessThan(0.002);
    expect(Math.abs(centralRadiationBound(solarMass, 1, { massUnit: "hydrogen-atom" }).radiation - 0.03)).toBeLessThan(
      0.001,
    );
  });

  test("a uniform star meets the bound on radiation, and both on pressure", () => {
    // P_c = (2 pi/3) G rho^2 R^2; T from P_rad = (1 - beta) P_c and the gas law.
    const [mass, radius] = [20 * solarMass, 3e11];
    const density = (3 * mass) / (4 * Math.PI * radius ** 3);
    const pressure = ((2 * Math.PI) / 3) * G * density ** 2 * radius ** 2;
    const { lowest, highest } = centralPressureBounds(mass, radius, density);
    expect(Math.abs(lowest / pressure - 1)).toBeLessThan(1e-14);
    expect(Math.abs(highest / pressure - 1)).toBeLessThan(1e-14);
    const { gas, radiation } = centralRadiationBound(mass, 0.6);
    const temperature = ((3 * radiation * pressure) / radiationConstant) ** 0.25;
    const law = (density * boltzmannConstant * temperature) / (0.6 * atomicMassConstant);
    expect(Math.abs(law / (gas * pressure) - 1)).toBeLessThan(1e-13);
  });

  test("every Newtonian star keeps them; a relativistic one need not", () => {
    for (const barotrope of [polytrope(1e13, 0.1), polytrope(1e13, 1.5), polytrope(1e13, 4), coldElectrons(2, 6)]) {
      const star = hydrostaticStar(barotrope, { centralDensity: 1e6, relativity: "newton" });
      expect(hydrostaticViolations(star), barotrope.name).toEqual([]);
    }
    const star = hydrostaticStar(coldNeutrons(), { centralDensity: 1e17 });
    expect(hydrostaticViolations(star).map(({ code }) => code)).toContain("central-pressure-too-high");
  });

  test("each bound that is broken is named, with the number and the bound", () => {
    const good = hydrostaticStar(polytrope(1e13, 1.5), { centralDensity: 1e6, relativity: "newton" });
    const codes = (change: object) => hydrostaticViolations({ ...good, ...change }).map(({ code }) => code);
    expect(codes({ centralPressure: 10 * good.centralPressure })).toEqual(["central-pressure-too-high"]);
    expect(codes({ centralPressure: 0.01 * good.centralPressure })).toEqual(["central-pressure-too-low"]);
    expect(codes({ centralDensity: 1e5 })).toContain("central-density-too-low");
    expect(codes({ centralRadiationShare: 0.5, meanMolecularWeight: 1 })).toEqual(["radiation-too-high"]);
    expect(codes({ centralRadiationShare: 1e-9, meanMolecularWeight: 1 })).toEqual([]);
    const [first] = hydrostaticViolations({ ...good, centralPressure: 10 * good.centralPressure });
    expect(first!.value / first!.bound).toBeGreaterThan(1);
    expect(() => hydrostaticViolations({ ...good, radius: 0 })).toThrow(
      expect.objectContaining({ code: "out-of-range" }),
    );
  });
});
