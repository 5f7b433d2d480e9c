/**
 * Lane-Emden and isothermal functions against 22-digit values (fixture stars-published.json), mpmath Taylor series in the radius
 * (fixture stars-mpmath.json, made by test/generators/stars-mpmath.mjs) and closed forms.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { bonnorEbertSphere, isothermalSphere, laneEmden } from "../../src/structure/lane-emden.js";
import { OMEGA_3 } from "../../src/structure/limiting-mass.js";
import { Measured } from "../measured.js";
import { published, publishedRows } from "./published.js";

interface Spheres {
  readonly laneEmden: readonly { n: string; radius: string; mass: string; theta: Record<string, string> }[];
  readonly isothermal: readonly { xi: string; potential: string; mass: string }[];
  readonly bonnorEbert: { radius: string; densityRatio: string; mass: string };
}
const reference = JSON.parse(
  readFileSync(new URL("../fixtures/stars-mpmath.json", import.meta.url), "utf8"),
) as Spheres;

describe("Lane-Emden", () => {
  test("xi_1, theta', the mass and the density ratio of n = 0, 0.5, ... 4.5 (22 digits)", () => {
    const measured = new Measured();
    for (const [head, value] of [
      ["Lane-Emden xi_1 ", (n: number) => laneEmden(n).radius],
      ["Lane-Emden -theta'(xi_1) ", (n: number) => -laneEmden(n).surfaceSlope],
      ["Lane-Emden -xi1^2 theta' ", (n: number) => laneEmden(n).mass],
      ["Lane-Emden rho_c/rho_mean ", (n: number) => laneEmden(n).densityRatio],
    ] as const) {
      const rows = publishedRows(head, "n=");
      expect(rows.length).toBe(10);
      for (const row of rows) measured.compare("all", value(row.at), row.value, `${head} n = ${row.at}`);
    }
    measured.expectBelow("all", 2e-14); // measured 7e-15
  });

  test("indices that no table has, 0.1 to 4.999 (mpmath)", () => {
    const measured = new Measured();
    for (const row of reference.laneEmden) {
      const n = Number(row.n);
      const sphere = laneEmden(n);
      // Close to 5 the radius is as ill-conditioned as 1/(5 - n): rounding of theta is amplified by it.
      measured.add("radius", Math.abs(sphere.radius / Number(row.radius) - 1) * Math.min(1, 5 - n), row.n);
      measured.compare("mass", sphere.mass, Number(row.mass), row.n);
      for (const [xi, theta] of Object.entries(row.theta)) {
        measured.add("theta", Math.abs(sphere.at(Number(xi)).theta - Number(theta)), `${row.n} at ${xi}`);
      }
    }
    measured.expectBelow("radius", 1e-14);
    measured.expectBelow("mass", 1e-14);
    measured.expectBelow("theta", 1e-13);
  });

  test("n = 0 and n = 1 are 1 - xi^2/6 and sin xi/xi everywhere", () => {
    const measured = new Measured();
    for (const [n, exact] of [
      [0, (x: number) => 1 - (x * x) / 6],
      [1, (x: number) => (x === 0 ? 1 : Math.sin(x) / x)],
    ] as const) {
      const sphere = laneEmden(n);
      for (let i = 0; i <= 200; i++) {
        const xi = Math.min((i / 200) * sphere.radius, sphere.radius);
        measured.add("theta", Math.abs(sphere.at(xi).theta - exact(xi)), `n = ${n} at ${xi}`);
      }
    }
    measured.expectBelow("theta", 2e-14);
  });

  test("the inside solves the equation: xi^2 theta' is minus the mass, whose slope is xi^2 theta^n", () => {
    const sphere = laneEmden(2.5);
    for (const xi of [0.02, 0.5, 1, 3, 5]) {
      const h = 1e-3;
      const { theta, slope, mass } = sphere.at(xi);
      expect(Math.abs(slope * xi * xi + mass)).toBeLessThan(1e-14 * mass);
      const around = [-2, -1, 1, 2].map((k) => sphere.at(xi + k * h).mass);
      const derivative = (8 * (around[2]! - around[1]!) - (around[3]! - around[0]!)) / (12 * h);
      expect(Math.abs(derivative - xi * xi * theta ** 2.5)).toBeLessThan(1e-11);
    }
  });

  test("towards n = 5 the radius follows 32 sqrt(3)/(pi (5 - n)) and theta 1/sqrt(1 + xi^2/3)", () => {
    const sphere = laneEmden(5 - 1e-8);
    expect(Math.abs((sphere.radius * Math.PI * 1e-8) / (32 * Math.sqrt(3)) - 1)).toBeLessThan(1e-6);
    expect(Math.abs(sphere.at(10).theta - 1 / Math.sqrt(1 + 100 / 3))).toBeLessThan(1e-8);
    expect(Math.abs(sphere.mass / Math.sqrt(3) - 1)).toBeLessThan(1e-7);
  });

  test("the constant of the limiting mass is that of n = 3", () => {
    expect(Math.abs(OMEGA_3 / published("Lane-Emden -xi1^2 theta' n=3") - 1)).toBeLessThan(2e-16);
  });

  test("refuses other indices and radii outside", () => {
    for (const n of [-1e-9, 5, 6]) {
      expect(() => laneEmden(n)).toThrow(expect.objectContaining({ code: "out-of-range", argument: "index" }));
    }
    expect(() => laneEmden(Number.NaN)).toThrow(expect.objectContaining({ code: "not-a-number" }));
    const sphere = laneEmden(1);
    expect(() => sphere.at(3.15)).toThrow(expect.objectContaining({ code: "outside-domain" }));
    expect(() => sphere.at(-1)).toThrow(expect.objectContaining({ code: "outside-domain" }));
    expect(() => sphere.at(Number.NaN)).toThrow(expect.objectContaining({ code: "not-a-number" }));
  });
});

describe("the isothermal sphere", () => {
  test("psi and the mass at radii 0.5 to 1e6 (mpmath)", () => {
    const measured = new Measured();
    for (const { xi, potential, mass } of reference.isothermal) {
      const at = isothermalSphere(Number(xi)).at(Number(xi));
      measured.compare("end", at.potential, Number(potential), xi);
      measured.compare("end", at.mass, Number(mass), xi);
      const inside = isothermalSphere(1e7).at(Number(xi));
      measured.compare("inside", inside.potential, Number(potential), xi);
      measured.compare("inside", inside.mass, Number(mass), xi);
    }
    measured.expectBelow("end", 1e-13);
    measured.expectBelow("inside", 1e-13);
  });

  test("far out it swings around 2/xi^2 (Chandrasekhar 1939, IV.25)", () => {
    const { potential } = isothermalSphere(1e10).at(1e10);
    expect(Math.abs(potential - Math.log(1e20 / 2))).toBeLessThan(2e-5);
  });

  test("the critical sphere: 6.451, 14.04, 1.182 (Ebert 1955, Bonnor 1956; common practice), 20 digits by mpmath", () => {
    const sphere = bonnorEbertSphere();
    expect(sphere.radius).toBeCloseTo(6.451, 3);
    expect(sphere.densityRatio).toBeCloseTo(14.04, 2);
    expect(sphere.mass).toBeCloseTo(1.182, 3);
    // psi'^2 - 2 e^-psi crosses zero at a finite slope: the radius is as good as the functions.
    expect(Math.abs(sphere.radius / Number(reference.bonnorEbert.radius) - 1)).toBeLessThan(1e-13);
    expect(Math.abs(sphere.densityRatio / Number(reference.bonnorEbert.densityRatio) - 1)).toBeLessThan(1e-12);
    expect(Math.abs(sphere.mass / Number(reference.bonnorEbert.mass) - 1)).toBeLessThan(1e-14);
  });

  test("the gravothermal limit: -E R/(G M^2) is largest, 0.335, at the density ratio 709 (Antonov 1962, Lynden-Bell & Wood 1968; from memory)", () => {
    const sphere = isothermalSphere(100);
    // E = 4 pi R^3 P - K by the virial theorem of a sphere within walls; both over G M^2/R.
    const bound = (xi: number): number => {
      const { potential, slope } = sphere.at(xi);
      return 1.5 / (xi * slope) - Math.exp(-potential) / slope ** 2;
    };
    let best = 30;
    for (let xi = 30; xi < 40; xi += 0.01) if (bound(xi) > bound(best)) best = xi;
    expect(bound(best)).toBeCloseTo(0.335, 3);
    expect(best).toBeCloseTo(34.4, 1);
    expect(Math.abs(Math.exp(sphere.at(best).potential) - 709)).toBeLessThan(1);
  });

  test("refuses radii it has not", () => {
    for (const radius of [0, -1, 2e10]) {
      expect(() => isothermalSphere(radius)).toThrow(expect.objectContaining({ code: "out-of-range" }));
    }
    expect(() => isothermalSphere(5).at(5.1)).toThrow(expect.objectContaining({ code: "outside-domain" }));
    expect(isothermalSphere(0.01).at(0.01).potential).toBeCloseTo(1e-4 / 6 - 1e-8 / 120, 14);
  });
});
