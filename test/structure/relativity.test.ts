/**
 * Stars in general relativity: polytropes by mpmath (fixture stars-mpmath.json: Taylor series in the radius of the second-order
 * equations of Hartle and Hinderer), ideal neutrons and electrons, the field outside.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import {
  gravitationalConstant as G,
  neutronMass,
  planckConstant,
  solarMass,
  speedOfLight,
} from "../../src/constants.js";
import { maximumMass } from "../../src/structure/maximum-mass.js";
import { hydrostaticStar } from "../../src/structure/star.js";
import { loveNumber } from "../../src/structure/tides.js";
import { Measured } from "../measured.js";
import { coldElectrons, coldNeutrons, polytrope } from "./barotropes.js";
import { published } from "./published.js";

const { relativistic } = JSON.parse(
  readFileSync(new URL("../fixtures/stars-mpmath.json", import.meta.url), "utf8"),
) as { relativistic: readonly Readonly<Record<string, string>>[] };
const c2 = speedOfLight ** 2;

test("mass, baryon mass, radius, moment of inertia and Love number of relativistic polytropes (mpmath)", () => {
  const measured = new Measured();
  const length = 1e6; // cm: the unit in which G = c = K = 1
  for (const tolerance of [1e-11, 1e-13]) {
    for (const row of relativistic) {
      const [n, b] = [Number(row["n"]), Number(row["b"])];
      const density = c2 / (G * length ** 2);
      const star = hydrostaticStar(polytrope(c2 * density ** (-1 / n), n), {
        centralDensity: density * b ** n,
        rotation: true,
        tides: true,
        tolerance,
      });
      const where = `n = ${n}, P_c/rho_c = ${b}`;
      const name = (quantity: string): string => `${quantity} at ${tolerance}`;
      measured.compare(name("mass"), (star.mass * G) / (c2 * length), Number(row["mass"]), where);
      measured.compare(name("mass"), (star.baryonMass * G) / (c2 * length), Number(row["baryonMass"]), where);
      measured.compare(name("radius"), star.radius / length, Number(row["radius"]), where);
      // Below n = 1 d rho/dP is infinite at the surface: its integral ends as w^n, clamped 1e-14 before the end.
      const love = n < 1 ? "love of n < 1" : "love";
      const inertia = (star.momentOfInertia! * G) / (c2 * length ** 3);
      measured.compare(name("inertia"), inertia, Number(row["momentOfInertia"]), where);
      measured.compare(name(love), star.loveNumber!, Number(row["loveNumber"]), where);
      const lambda = (2 / 3) * Number(row["loveNumber"]) * (Number(row["radius"]) / Number(row["mass"])) ** 5;
      measured.compare(name(love), star.tidalDeformability!, lambda, where);
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.log(measured.table());
  measured.expectBelow("mass at 1e-11", 5e-12);
  measured.expectBelow("radius at 1e-11", 1e-12);
  measured.expectBelow("inertia at 1e-11", 1e-11);
  measured.expectBelow("love at 1e-11", 3e-11);
  measured.expectBelow("love of n < 1 at 1e-11", 3e-10);
  measured.expectBelow("mass at 1e-13", 3e-13);
  measured.expectBelow("radius at 1e-13", 1e-13);
  measured.expectBelow("inertia at 1e-13", 3e-13);
  measured.expectBelow("love at 1e-13", 2e-12);
});

describe("ideal cold neutrons (Oppenheimer & Volkoff 1939)", () => {
  const wave = planckConstant / (neutronMass * speedOfLight);
  /** Density of the parameter t = 4 asinh x. */
  const densityAt = (t: number): number => ((8 * Math.PI) / (3 * wave ** 3)) * neutronMass * Math.sinh(t / 4) ** 3;

  test("masses and radii of their table at t_0 = 1, 2, 3, 4 (recomputed to six digits)", () => {
    for (const t of [1, 2, 3, 4]) {
      const { mass, radius } = hydrostaticStar(coldNeutrons(), { centralDensity: densityAt(t) });
      expect(Math.abs(mass / solarMass - published(`OV M at t0=${t}`))).toBeLessThan(0.6e-6);
      expect(Math.abs(radius / 1e5 - published(`OV R at t0=${t}`))).toBeLessThan(0.6e-4);
    }
  });

  test("the largest mass is 0.71018 solar masses at 9.1615 km, ended by relativity", () => {
    const most = maximumMass(coldNeutrons());
    expect(Math.abs(most.mass / solarMass - published("OV max mass"))).toBeLessThan(1e-6);
    expect(Math.abs(most.radius / 1e5 - published("OV radius at max"))).toBeLessThan(1e-4);
    const { centralDensity, star } = most;
    const total = centralDensity * (1 + star.centralSpecificEnergy / c2);
    expect(Math.abs(total / published("OV rho_c at max") - 1)).toBeLessThan(2e-6);
    expect(most.reason).toBe("relativity");
    expect(Math.abs(star.massSlope)).toBeLessThan(1e-8);
    // Beyond it the masses swing around that of an infinite density: a minimum, and a second maximum (Harrison et al. 1965).
    expect(most.turningPoints.map((point) => point.kind).slice(0, 2)).toEqual(["maximum", "minimum"]);
  });
});

describe("ideal relativistic white dwarfs (Mathew & Nandy 2017: 1.4166 and 1.2230)", () => {
  test.each([
    ["WD GR ideal M_max mu_e=2 m_u", 2],
    ["WD GR ideal M_max Fe56 A/Z=56/26 m_u", 56 / 26],
  ])("%s", (quantity, perElectron) => {
    const most = maximumMass(coldElectrons(perElectron));
    expect(Math.abs(most.mass / solarMass - published(quantity))).toBeLessThan(1e-5);
    expect(most.reason).toBe("relativity");
    expect(most.turningPoints).toHaveLength(1);
  });
});

test("common practice: with Coulomb terms and general relativity a carbon star ends at about 1.39 solar masses", () => {
  // Lattice energy of bcc carbon alone; further terms and electron capture move it by less than 0.01.
  const { mass } = maximumMass(coldElectrons(2, 6));
  expect(Math.abs(mass / solarMass - 1.39)).toBeLessThan(0.01);
});

describe("the field outside", () => {
  /** Hinderer 2008, eq. 23, as printed; it cancels like C^5. */
  function closedForm(y: number, C: number): number {
    const d = 1 - 2 * C;
    const below =
      2 * C * (6 - 3 * y + 3 * C * (5 * y - 8)) +
      4 * C ** 3 * (13 - 11 * y + C * (3 * y - 2) + 2 * C * C * (1 + y)) +
      3 * d * d * (2 - y + 2 * C * (y - 1)) * Math.log(d);
    return ((8 / 5) * C ** 5 * d * d * (2 + 2 * C * (y - 1) - y)) / below;
  }

  test("is that of Hinderer's closed form, where that has digits", () => {
    for (const C of [0.1, 0.2, 0.3, 0.4]) {
      for (const y of [-1, 0.3, 1, 1.9]) {
        const lost = 1e-15 / C ** 5;
        expect(Math.abs(loveNumber(y, C) / closedForm(y, C) - 1), `y = ${y}, C = ${C}`).toBeLessThan(lost);
      }
    }
  });

  test("is (2 - y)/(2 (3 + y)) in Newton's theory, 3/4 for a uniform star (y = -1), and its limit is smooth", () => {
    expect(loveNumber(-1, 0)).toBe(0.75);
    for (const y of [0.3, 1.5]) {
      expect(loveNumber(y, 0)).toBeCloseTo((2 - y) / (2 * (3 + y)), 15);
      expect(Math.abs(loveNumber(y, 1e-9) / loveNumber(y, 0) - 1)).toBeLessThan(2e-8);
    }
  });

  test("redshift and surface gravity are those of Schwarzschild's field", () => {
    const { compactness, redshift, surfaceGravity, mass, radius } = hydrostaticStar(coldNeutrons(), {
      centralDensity: 3e15,
    });
    expect(Math.abs((1 + redshift) ** -2 - (1 - 2 * compactness))).toBeLessThan(1e-15);
    expect(Math.abs((surfaceGravity * radius ** 2) / (G * mass * (1 + redshift)) - 1)).toBeLessThan(1e-14);
  });
});

test("a weak field is Newton's: white dwarfs of both theories differ by a few times G M/(R c^2)", () => {
  const options = { centralDensity: 1e5, rotation: true, tides: true };
  const general = hydrostaticStar(coldElectrons(2), options);
  const newton = hydrostaticStar(coldElectrons(2), { ...options, relativity: "newton" });
  const few = 10 * newton.compactness;
  for (const name of ["mass", "radius", "bindingEnergy", "momentOfInertia", "loveNumber", "redshift"] as const) {
    const difference = Math.abs(general[name]! / newton[name]! - 1);
    expect(difference, name).toBeLessThan(few);
    expect(difference, name).toBeGreaterThan(0.01 * newton.compactness);
  }
});
