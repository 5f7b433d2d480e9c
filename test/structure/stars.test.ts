/**
 * Stars against values computed independently with 95-digit arithmetic (fixture state-sequence.json), Chandrasekhar's models, closed
 * forms, the virial theorem, and the promised dependence on the tolerance.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import type { Barotrope } from "../../src/barotropes/barotrope.js";
import {
  atomicMassConstant,
  electronMass,
  gravitationalConstant as G,
  planckConstant,
  reducedPlanckConstant,
  solarMass,
  speedOfLight,
} from "../../src/constants.js";
import { laneEmden } from "../../src/structure/lane-emden.js";
import { hydrostaticStar, starMaker } from "../../src/structure/star.js";
import { Measured } from "../measured.js";
import { coldElectrons, kinked, polytrope } from "./barotropes.js";
import { published, publishedRows } from "./published.js";

type Row = Readonly<Record<string, string>>;
const { rows } = JSON.parse(readFileSync(new URL("../fixtures/state-sequence.json", import.meta.url), "utf8")) as {
  rows: readonly Row[];
};

/** mu_e and Z of the compositions of the fixture. */
const matter: Readonly<Record<string, readonly [number, number]>> = { C12: [2, 6], He4: [2, 2], Fe56: [56 / 26, 26] };

function barotropeOf(row: Row): Barotrope {
  const [perElectron, charge] = matter[row["comp"]!]!;
  return coldElectrons(perElectron, row["eos"] === "ideal" ? undefined : charge);
}

/** Errors of mass and radius over all stars of the fixture at a tolerance. */
function errorsAt(tolerance?: number): Measured {
  const measured = new Measured();
  for (const row of rows) {
    const where = ["comp", "eos", "gravity", "rho_c"].map((name) => row[name]).join(" ");
    const star = hydrostaticStar(barotropeOf(row), {
      centralDensity: Number(row["rho_c"]),
      relativity: row["gravity"] === "GR" ? "general" : "newton",
      ...(tolerance === undefined ? {} : { tolerance }),
    });
    measured.compare("mass", star.mass / solarMass, Number(row["M_Msun"]), where);
    measured.compare("baryon mass", star.baryonMass / solarMass, Number(row["M_rest_Msun"]), where);
    measured.compare("radius", star.radius, Number(row["R_cm"]), where);
    measured.compare("matter", star.centralPressure, Number(row["P_c"]), where);
    measured.compare("matter", star.centralSpecificEnergy, Number(row["e_c"]), where);
    const surface = Number(row["rho_surface"]);
    measured.compare("surface", star.surfaceDensity, surface, where, surface === 0 ? 1 : surface);
    expect(star.findings, where).toEqual([]);
  }
  return measured;
}

describe("18 white dwarfs, Newton and Einstein, ideal and with a lattice", () => {
  test("at the default tolerance", () => {
    expect(rows.length).toBe(18);
    const measured = errorsAt();
    if (process.env["FERMISTATE_PRINT"]) console.log(measured.table());
    measured.expectBelow("mass", 2e-12);
    measured.expectBelow("baryon mass", 2e-12);
    measured.expectBelow("radius", 5e-13);
    measured.expectBelow("matter", 4e-15);
    measured.expectBelow("surface", 2e-15);
  });

  test("errors follow the tolerance down to rounding", () => {
    const steps = [1e-6, 1e-8, 1e-10, 1e-12].map((tolerance) => ({ tolerance, measured: errorsAt(tolerance) }));
    for (const { tolerance, measured } of steps) {
      const { error, where } = measured.worst("mass");
      if (process.env["FERMISTATE_PRINT"]) console.log(tolerance, error, measured.worst("radius").error);
      expect(error, where).toBeLessThan(0.3 * tolerance);
      expect(measured.worst("radius").error).toBeLessThan(0.3 * tolerance);
    }
    errorsAt(1e-14).expectBelow("mass", 2e-13); // the reference is good to 1e-12 or better
    errorsAt(1e-14).expectBelow("radius", 2e-14);
  });
});

test("halving the tolerance divides the error by 2^0.8 to 2", () => {
  // 1 by the order of the estimate; ranges near the surface that no tolerance lengthens leave 0.8. Single errors scatter by where
  // the steps fall: geometric means over six stars, fitted over five decades.
  const stars = [
    [coldElectrons(2), 1e8],
    [coldElectrons(2), 1e6],
    [coldElectrons(2, 6), 1e7],
    [coldElectrons(56 / 26, 26), 1e9],
    [polytrope(1e13, 3), 1e4],
    [polytrope(1e13, 2.2), 1e4],
  ] as const;
  const massesAt = (tolerance: number): number[] =>
    stars.map(([b, centralDensity]) => hydrostaticStar(b, { centralDensity, relativity: "newton", tolerance }).mass);
  const exact = massesAt(1e-14);
  const mean = (list: readonly number[]): number => list.reduce((a, b) => a + b, 0) / list.length;
  const tolerances = Array.from({ length: 18 }, (_, i) => 1e-6 * 2 ** -i);
  const x = tolerances.map(Math.log2);
  const y = tolerances.map((one) => mean(massesAt(one).map((mass, i) => Math.log2(Math.abs(mass / exact[i]! - 1)))));
  const slope =
    mean(x.map((one, i) => (one - mean(x)) * (y[i]! - mean(y)))) / mean(x.map((one) => (one - mean(x)) ** 2));
  if (process.env["FERMISTATE_PRINT"]) console.log(`mass error goes like tolerance^${slope}`);
  expect(slope).toBeGreaterThan(0.7);
  expect(slope).toBeLessThan(1.1);
});

describe("closed forms", () => {
  test("polytropes are the Lane-Emden functions, inside too", () => {
    const measured = new Measured();
    for (const index of [0.5, 1, 1.5, 2.5, 3, 4]) {
      const [constant, centralDensity] = [1e13, 1e4];
      const star = hydrostaticStar(polytrope(constant, index), { centralDensity, relativity: "newton", profile: true });
      const sphere = laneEmden(index);
      const alpha = Math.sqrt(((index + 1) * constant * centralDensity ** (1 / index - 1)) / (4 * Math.PI * G));
      measured.compare("radius", star.radius, alpha * sphere.radius, `n = ${index}`);
      measured.compare("mass", star.mass, 4 * Math.PI * alpha ** 3 * centralDensity * sphere.mass, `n = ${index}`);
      for (const xi of [0, 1e-4, 0.1, 1, 2, 2.7]) {
        const { theta, mass } = sphere.at(xi);
        const point = star.profile!.at(alpha * xi);
        measured.add(
          "theta",
          Math.abs((point.density / centralDensity) ** (1 / index) - theta),
          `n = ${index} at ${xi}`,
        );
        const within = 4 * Math.PI * alpha ** 3 * centralDensity * mass;
        measured.add("inside", Math.abs(point.mass - within) / star.mass, `n = ${index} at ${xi}`);
      }
      // Gravitational energy -3/(5 - n) G M^2/R (Ritter 1878), internal energy n/3 of it: binding 1 - n/3 of it.
      const gravity = ((3 / (5 - index)) * G * star.mass ** 2) / star.radius;
      measured.add("binding", Math.abs(star.bindingEnergy / gravity - (1 - index / 3)), `n = ${index}`);
      // ln M = (3 - n)/(2n) ln rho_c + constant.
      measured.add("slope", Math.abs(star.massSlope - (3 - index) / (2 * index)), `n = ${index}`);
    }
    if (process.env["FERMISTATE_PRINT"]) console.log(measured.table());
    measured.expectBelow("radius", 1e-11);
    measured.expectBelow("mass", 5e-11);
    measured.expectBelow("theta", 1e-11);
    measured.expectBelow("inside", 3e-11);
    measured.expectBelow("binding", 2e-11);
    measured.expectBelow("slope", 1e-10);
  });

  test("apsidal constants and moments of inertia of Newtonian polytropes", () => {
    // k_2 of n = 1: 15/(2 pi^2) - 1/2; I/(M R^2) of n = 1: (2/3)(1 - 6/pi^2). Others: Brooker & Olle 1955, MNRAS 115, 101 (from memory).
    const printed = { 1.5: [0.14328, 5e-6], 2: [0.07394, 5e-6], 3: [0.014443, 5e-7] } as const;
    const options = {
      centralDensity: 1e4,
      relativity: "newton",
      rotation: true,
      tides: true,
      tolerance: 1e-12,
    } as const;
    const one = hydrostaticStar(polytrope(1e13, 1), options);
    expect(Math.abs(one.loveNumber! - (15 / (2 * Math.PI ** 2) - 0.5))).toBeLessThan(1e-11);
    const ratio = one.momentOfInertia! / (one.mass * one.radius ** 2);
    expect(Math.abs(ratio - (2 / 3) * (1 - 6 / Math.PI ** 2))).toBeLessThan(1e-11);
    for (const [index, [value, error]] of Object.entries(printed)) {
      const star = hydrostaticStar(polytrope(1e13, Number(index)), options);
      expect(Math.abs(star.loveNumber! - value), `n = ${index}`).toBeLessThan(error);
    }
  });
});

describe("Chandrasekhar's degenerate models (1935, 1939 chapter XI) by 1/y_0^2", () => {
  // Units: P = A f(x), rho = B x^3, y = sqrt(1 + x^2), r = alpha eta, alpha = sqrt(2 A/(pi G))/(B y_0).
  const A = (Math.PI * electronMass ** 4 * speedOfLight ** 5) / (3 * planckConstant ** 3);
  const perElectron = 2;
  const wave = reducedPlanckConstant / (electronMass * speedOfLight);
  const B = (perElectron * atomicMassConstant) / (3 * Math.PI ** 2 * wave ** 3);
  const star = (inverseSquare: number): { eta: number; mass: number; solarMasses: number; radius: number } => {
    const y2 = 1 / inverseSquare;
    const centralDensity = B * (y2 - 1) ** 1.5;
    const made = hydrostaticStar(coldElectrons(perElectron, undefined, 1e24), {
      centralDensity,
      relativity: "newton",
      tolerance: 1e-12,
    });
    const alpha = Math.sqrt((2 * A) / (Math.PI * G) / y2) / B;
    return {
      eta: made.radius / alpha,
      mass: made.mass / (4 * Math.PI * alpha ** 3 * B * y2 ** 1.5),
      solarMasses: (made.mass / solarMass) * perElectron ** 2,
      radius: made.radius * perElectron,
    };
  };

  test("eta_1 and the mass -eta_1^2 phi' to 1e-9 or the digits given, M mu_e^2 and R mu_e to eight digits", () => {
    let count = 0;
    for (const [head, name, limit] of [
      ["Chandrasekhar WD eta_1 at", "eta", 1e-9],
      ["Chandrasekhar WD -eta1^2 phi' at", "mass", 1e-9],
      ["Chandrasekhar WD M mu_e^2 at", "solarMasses", 0],
      ["Chandrasekhar WD R mu_e at", "radius", 0],
    ] as const) {
      for (const row of publishedRows(head, "=").filter(({ at }) => at > 0)) {
        count += 1;
        const error = Math.abs(star(row.at)[name] - row.value);
        expect(error, `${head} ${row.at}`).toBeLessThan(1.01 * Math.max(row.halfDigit, 0) + limit * 1e-2 * row.value);
        if (limit > 0) expect(error / row.value).toBeLessThan(limit);
      }
    }
    expect(count).toBe(50);
  });

  test("towards y_0 = infinity the mass is the limiting mass", () => {
    expect(Math.abs(star(1e-10).solarMasses / published("Chandrasekhar WD M mu_e^2 at 1/y0^2=0") - 1)).toBeLessThan(
      1e-7,
    );
  });
});

describe("the inside", () => {
  test("the virial theorem 3 int P dV = int G m/r dm, from the columns of the profile", () => {
    for (const barotrope of [coldElectrons(2), coldElectrons(2, 6)]) {
      const star = hydrostaticStar(barotrope, {
        centralDensity: 1e8,
        relativity: "newton",
        profile: true,
        tolerance: 1e-13,
      });
      const columns = star.profile!.columns(2001);
      // Trapezoidal rule in the angle of the columns: both integrands vanish at both ends with their odd derivatives, or nearly.
      let [pressure, gravity, binding] = [0, 0, 0];
      for (let i = 1; i <= 2000; i++) {
        const volume = ((4 * Math.PI) / 3) * (columns.radius[i]! ** 3 - columns.radius[i - 1]! ** 3);
        pressure += 1.5 * (columns.pressure[i]! + columns.pressure[i - 1]!) * volume;
        const potential = (k: number): number => (k === 0 ? 0 : (G * columns.mass[k]!) / columns.radius[k]!);
        const mass = columns.mass[i]! - columns.mass[i - 1]!;
        gravity += 0.5 * (potential(i) + potential(i - 1)) * mass;
        binding +=
          0.5 * (potential(i) + potential(i - 1) - columns.specificEnergy[i]! - columns.specificEnergy[i - 1]!) * mass;
      }
      expect(Math.abs(pressure / gravity - 1)).toBeLessThan(3e-6); // second order in 1/2000
      expect(Math.abs(binding / star.bindingEnergy - 1)).toBeLessThan(2e-5);
      expect(columns.radius[0]).toBe(0);
      expect(columns.radius[2000]).toBe(star.radius);
      expect(Math.abs(columns.mass[2000]! / star.mass - 1)).toBeLessThan(1e-15);
      expect(columns.density[0]).toBeCloseTo(1e8, 0);
    }
  });

  test("each point obeys dP/dr = -G m rho/r^2, and Tolman, Oppenheimer & Volkoff's equation", () => {
    for (const relativity of ["newton", "general"] as const) {
      const star = hydrostaticStar(coldElectrons(2, 6), {
        centralDensity: 1e9,
        relativity,
        profile: true,
        tolerance: 1e-13,
      });
      const c2 = speedOfLight ** 2;
      for (const part of [0.01, 0.2, 0.5, 0.9, 0.99]) {
        const r = part * star.radius;
        const h = 1e-4 * r;
        const { mass, density, pressure, specificEnergy } = star.profile!.at(r);
        const around = [-2, -1, 1, 2].map((k) => star.profile!.at(r + k * h).pressure);
        const slope = (8 * (around[2]! - around[1]!) - (around[3]! - around[0]!)) / (12 * h);
        const newton = (-G * mass * density) / r ** 2;
        const factor =
          ((1 + specificEnergy / c2 + pressure / (density * c2)) *
            (1 + (4 * Math.PI * r ** 3 * pressure) / (mass * c2))) /
          (1 - (2 * G * mass) / (r * c2));
        const expected = relativity === "newton" ? newton : newton * factor;
        expect(Math.abs(slope - expected), `${relativity} at ${part}`).toBeLessThan(
          1e-9 * Math.abs(expected) + (1e-13 * pressure) / h,
        );
      }
    }
  });

  test("refuses radii outside and columns of fewer than two", () => {
    const { profile, radius } = hydrostaticStar(coldElectrons(2), { centralDensity: 1e6, profile: true });
    expect(() => profile!.at(1.001 * radius)).toThrow(expect.objectContaining({ code: "outside-domain" }));
    expect(() => profile!.at(Number.NaN)).toThrow(expect.objectContaining({ code: "not-a-number" }));
    expect(() => profile!.columns(1)).toThrow(expect.objectContaining({ code: "out-of-range" }));
  });
});

test("the slope of the sequence is the derivative of its masses", () => {
  const measured = new Measured();
  for (const relativity of ["newton", "general"] as const) {
    for (const [barotrope, density] of [
      [coldElectrons(2), 1e8],
      [coldElectrons(56 / 26, 26), 1e5],
      [polytrope(1e5, 1), 1e15],
    ] as const) {
      const make = starMaker(barotrope, { relativity, tolerance: 1e-13 });
      const logarithm = (x: number): number => Math.log(make(density * Math.exp(x)).mass);
      const h = 3e-3;
      const slope = (8 * (logarithm(h) - logarithm(-h)) - (logarithm(2 * h) - logarithm(-2 * h))) / (12 * h);
      measured.add("slope", Math.abs(make(density).massSlope - slope), `${barotrope.name} ${relativity}`);
    }
  }
  measured.expectBelow("slope", 1e-9); // of the difference, h^4 and 1e-13/h
});

test("a kink of d ln P/d ln rho that the barotrope does not list costs steps, here no digits", () => {
  for (const kink of [1e2, 1e4, 3e5, 9e5]) {
    const [marked, unmarked] = [true, false].map((isMarked) =>
      hydrostaticStar(kinked(1e13, 1.5, kink, 2.5, isMarked), { centralDensity: 1e6, rotation: true, tides: true }),
    );
    for (const [name, bound] of [
      ["mass", 1e-12],
      ["radius", 2e-13],
      ["momentOfInertia", 2e-12],
      ["loveNumber", 1e-9],
      ["massSlope", 1e-10],
    ] as const) {
      expect(Math.abs(unmarked![name]! / marked![name]! - 1), `${name} with a kink at ${kink}`).toBeLessThan(bound);
    }
  }
});

describe("refusals", () => {
  const code = (name: string, argument: string) => expect.objectContaining({ code: name, argument });
  const cold = coldElectrons(2, 6, 1e10);

  test("central densities outside the barotrope, at its surface, and not numbers", () => {
    for (const centralDensity of [1e11, 1, -1]) {
      expect(() => hydrostaticStar(cold, { centralDensity })).toThrow(code("outside-domain", "density"));
    }
    expect(() => hydrostaticStar(cold, { centralDensity: cold.density[0] })).toThrow(
      expect.objectContaining({ code: expect.stringMatching(/outside-domain|unstable/) }),
    );
    expect(() => hydrostaticStar(cold, { centralDensity: Number.NaN })).toThrow(code("not-a-number", "centralDensity"));
  });

  test("options that do not exist", () => {
    const wrong = { centralDensity: 1e6, relativity: "special" as "general" };
    expect(() => hydrostaticStar(cold, wrong)).toThrow(code("invalid-option", "relativity"));
    for (const tolerance of [0, 1e-16, 1]) {
      expect(() => hydrostaticStar(cold, { centralDensity: 1e6, tolerance })).toThrow(
        code("out-of-range", "tolerance"),
      );
    }
  });

  test("matter whose pressure does not rise with density", () => {
    const falling: Barotrope = {
      ...cold,
      fillAtDensity(record) {
        cold.fillAtDensity(record);
        record[4] = -0.1;
      },
    };
    expect(() => hydrostaticStar(falling, { centralDensity: 1e6 })).toThrow(code("unstable", "barotrope"));
  });

  test("a barotrope that answers with NaN", () => {
    const broken: Barotrope = { ...cold, fillAtPotential: (record) => void record.fill(Number.NaN, 0, 3) };
    expect(() => hydrostaticStar(broken, { centralDensity: 1e6 })).toThrow(
      expect.objectContaining({ code: "integration-failed" }),
    );
  });
});

describe("findings", () => {
  test("acausal matter, a star past its maximum, Newton's theory where it fails, a surface that is cut", () => {
    const codes = (barotrope: Barotrope, centralDensity: number, relativity: "newton" | "general" = "general") =>
      hydrostaticStar(barotrope, { centralDensity, relativity }).findings.map((finding) => finding.code);
    // P = K rho^3: c_s^2/c^2 = 3 P/(rho c^2 + 3P/2) passes 1 where P = rho c^2 2/3.
    const stiff = polytrope(1e-10 * 6, 0.5);
    const acausal = Math.sqrt((0.7 * speedOfLight ** 2) / 6e-10);
    expect(codes(stiff, acausal)).toContain("acausal");
    expect(codes(stiff, 0.5 * acausal)).not.toContain("acausal");
    expect(codes(coldElectrons(2), 1e11)).toEqual(["unstable-star"]);
    expect(codes(coldElectrons(2), 1e10)).toEqual([]);
    expect(codes(polytrope(1e5, 1), 1e15, "newton")).toEqual(["relativity-neglected"]);
    const cold = coldElectrons(2);
    expect(codes({ ...cold, density: [1e5, 1e15] }, 1e8)).toEqual(["cut-surface"]);
  });
});
