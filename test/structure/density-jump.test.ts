/**
 * Density jumps against closed forms: a Newtonian star of two polytropes of index 1, where every equation is Helmholtz's.
 *
 * rho'' + (2/r) rho' + k^2 rho = 0, k^2 = 2 pi G/K, in both phases; the quadrupole of a tide obeys the same with -6/r^2, so it
 * is made of spherical Bessel functions of order 2 (Abramowitz & Stegun 1964, 10.1).
 */
import { describe, expect, test } from "vitest";
import type { Barotrope } from "../../src/barotropes/barotrope.js";
import { gravitationalConstant as G } from "../../src/constants.js";
import { maximumMass } from "../../src/structure/maximum-mass.js";
import { hydrostaticStar } from "../../src/structure/star.js";
import { barotropeOf } from "./barotropes.js";

/** P = inner rho^2 above, outer rho^2 below; `width` spreads the jump over a range of w, linear in w, for a smooth copy. */
function twoPhases(outer: number, below: number, ratio: number, highest = 1e8, width = 0): Barotrope {
  const pressure = outer * below ** 2;
  const above = ratio * below;
  const potential = 2 * outer * below;
  const range = width * potential;
  const upper = potential + range;
  // Across the range rho rises linearly in w: P = P_1 + int rho dw.
  const upperPressure = pressure + 0.5 * (below + above) * range;
  const inner = upperPressure / above ** 2;
  return barotropeOf({
    name: "two phases of index 1",
    density: [0, highest],
    jumps: width > 0 ? [] : [{ pressure, potential, densities: [below, above] }],
    fill(w, record) {
      let [density, p, gamma] = [0, 0, 2];
      if (w <= potential) {
        density = w / (2 * outer);
        p = outer * density ** 2;
      } else if (w < upper) {
        const slope = (above - below) / range;
        density = below + slope * (w - potential);
        p = pressure + 0.5 * (below + density) * (w - potential);
        gamma = density ** 2 / (p * slope);
      } else {
        density = above + (w - upper) / (2 * inner);
        p = inner * density ** 2;
      }
      record[0] = density;
      record[1] = p;
      record[2] = density === 0 ? 0 : w - p / density;
      record[3] = w;
      record[4] = gamma;
    },
    fromDensity: (rho) =>
      rho <= below
        ? 2 * outer * rho
        : rho < above
          ? potential + (range * (rho - below)) / (above - below)
          : upper + 2 * inner * (rho - above),
    fromPressure: () => Number.NaN, // stars do not ask for it
    fromPotential: (w) => w,
  });
}

const j2 = (x: number): number => (3 / x ** 3 - 1 / x) * Math.sin(x) - (3 / x ** 2) * Math.cos(x);
const y2 = (x: number): number => (-3 / x ** 3 + 1 / x) * Math.cos(x) - (3 / x ** 2) * Math.sin(x);
const j1 = (x: number): number => Math.sin(x) / x ** 2 - Math.cos(x) / x;
const y1 = (x: number): number => -Math.cos(x) / x ** 2 - Math.sin(x) / x;
/** x f'(x) of order 2: x f_1 - 3 f_2. */
const slopeOf = (f1: number, f2: number, x: number): number => x * f1 - 3 * f2;

function bisect(f: (x: number) => number, low: number, high: number): number {
  let [a, b] = [low, high];
  for (let i = 0; i < 200; i++) {
    const middle = 0.5 * (a + b);
    if (f(middle) > 0 === f(a) > 0) a = middle;
    else b = middle;
  }
  return 0.5 * (a + b);
}

/** int rho r^4 dr of (A sin kr + B cos kr)/r from r_1 to r_2. */
function fourthMoment(A: number, B: number, k: number, from: number, to: number): number {
  // int r^3 sin kr and int r^3 cos kr.
  const sine = (r: number): number =>
    (-(r ** 3) / k + (6 * r) / k ** 3) * Math.cos(k * r) + ((3 * r * r) / k ** 2 - 6 / k ** 4) * Math.sin(k * r);
  const cosine = (r: number): number =>
    (r ** 3 / k - (6 * r) / k ** 3) * Math.sin(k * r) + ((3 * r * r) / k ** 2 - 6 / k ** 4) * Math.cos(k * r);
  return A * (sine(to) - sine(from)) + B * (cosine(to) - cosine(from));
}

/** Mass, radius, I and k_2 in closed form. */
function exactStar(outer: number, below: number, ratio: number, centre: number) {
  const above = ratio * below;
  const inner = outer / ratio ** 2;
  const [ka, kb] = [inner, outer].map((K) => Math.sqrt((2 * Math.PI * G) / K)) as [number, number];
  const core = bisect((r) => (centre * Math.sin(ka * r)) / (ka * r) - above, 1e-3 / ka, Math.PI / ka);
  const coreSlope = (centre / ka) * ((ka * Math.cos(ka * core)) / core - Math.sin(ka * core) / core ** 2);
  // rho = below and rho' = (inner/outer) coreSlope outside: (r rho) and its derivative give A and B.
  const [g, h] = [core * below, below + (core * inner * coreSlope) / outer];
  const A = g * Math.sin(kb * core) + (h / kb) * Math.cos(kb * core);
  const B = g * Math.cos(kb * core) - (h / kb) * Math.sin(kb * core);
  const shape = (r: number): number => A * Math.sin(kb * r) + B * Math.cos(kb * r);
  const radius = bisect(shape, core, core + Math.PI / kb);
  const slope = (kb * (A * Math.cos(kb * radius) - B * Math.sin(kb * radius))) / radius;
  const mass = ((-2 * outer) / G) * radius ** 2 * slope;
  const coreMass = ((-2 * inner) / G) * core ** 2 * coreSlope;
  const inertia =
    ((8 * Math.PI) / 3) * (fourthMoment(centre / ka, 0, ka, 0, core) + fourthMoment(A, B, kb, core, radius));
  const x = ka * core;
  let y = slopeOf(j1(x), j2(x), x) / j2(x) - (4 * Math.PI * core ** 3 * (above - below)) / coreMass;
  const z = kb * core;
  // C j2 + D y2 with logarithmic slope y at z.
  const mix = -(y * j2(z) - slopeOf(j1(z), j2(z), z)) / (y * y2(z) - slopeOf(y1(z), y2(z), z));
  const s = kb * radius;
  y = (slopeOf(j1(s), j2(s), s) + mix * slopeOf(y1(s), y2(s), s)) / (j2(s) + mix * y2(s));
  return { mass, radius, inertia, love: (2 - y) / (2 * (3 + y)) };
}

describe("a star with a denser core", () => {
  test.each([
    [1.3, 1.5],
    [1.3, 4],
    [2, 2.5],
    [1.05, 1.06], // the core is small
  ])("the jump is %d-fold, the centre %d times the lower density", (ratio, centre) => {
    const [outer, below] = [1e10, 1e5];
    const options = { centralDensity: centre * below, relativity: "newton", rotation: true, tides: true } as const;
    const star = hydrostaticStar(twoPhases(outer, below, ratio), { ...options, tolerance: 1e-13 });
    const exact = exactStar(outer, below, ratio, centre * below);
    expect(Math.abs(star.mass / exact.mass - 1)).toBeLessThan(1e-12);
    expect(Math.abs(star.radius / exact.radius - 1)).toBeLessThan(1e-12);
    expect(Math.abs(star.momentOfInertia! / exact.inertia - 1)).toBeLessThan(3e-12);
    expect(Math.abs(star.loveNumber! / exact.love - 1)).toBeLessThan(3e-12);
  });

  test("in general relativity it is the limit of steeper and steeper matter without a jump, in proportion to the width", () => {
    const [outer, below, ratio, centralDensity] = [2e5, 5e14, 1.4, 1.2e15] as const;
    const options = { centralDensity, rotation: true, tides: true, tolerance: 1e-12 } as const;
    const sharp = hydrostaticStar(twoPhases(outer, below, ratio, 1e17), options);
    expect(sharp.compactness).toBeGreaterThan(0.1);
    for (const name of ["mass", "radius", "bindingEnergy", "momentOfInertia", "loveNumber"] as const) {
      const [wide, narrow] = [1e-4, 1e-5].map((width) => {
        const smooth = hydrostaticStar(twoPhases(outer, below, ratio, 1e17, width), options);
        return smooth[name]! / sharp[name]! - 1;
      }) as [number, number];
      expect(Math.abs(narrow), name).toBeLessThan(1e-4);
      expect(Math.abs(wide / narrow - 10), name).toBeLessThan(0.1);
    }
  });

  test("central densities inside the jump are refused; at its edges the star has no core yet", () => {
    const matter = twoPhases(1e10, 1e5, 1.3);
    expect(() => hydrostaticStar(matter, { centralDensity: 1.1e5 })).toThrow(
      expect.objectContaining({ code: "outside-domain" }),
    );
    const [below, above] = [1e5, 1.3e5].map((centralDensity) =>
      hydrostaticStar(matter, { centralDensity, relativity: "newton" }),
    );
    expect(Math.abs(above!.mass / below!.mass - 1)).toBeLessThan(1e-11);
    expect(Math.abs(above!.radius / below!.radius - 1)).toBeLessThan(1e-11);
    // A growing core: from left out (below 1e-9 in w) to integrated, nothing jumps.
    for (const part of [1e-12, 1e-10, 1e-9, 3e-9, 1e-8, 1e-7, 1e-6, 1e-5]) {
      const just = hydrostaticStar(matter, { centralDensity: 1.3e5 * (1 + part), relativity: "newton" });
      expect(Math.abs(just.mass / below!.mass - 1), String(part)).toBeLessThan(1e-11 + part);
    }
  });
});

describe("where a jump ends the sequence", () => {
  test("a range inside the jump is refused, one that ends in it ends below", () => {
    const matter = twoPhases(1e10, 1e5, 1.3);
    const most = (low: number, high: number) => maximumMass(matter, { relativity: "newton", range: [low, high] });
    expect(() => most(1.1e5, 1.2e5)).toThrow(expect.objectContaining({ code: "outside-domain", argument: "range" }));
    for (const low of [1e4, 1e5])
      expect(most(low, 1.2e5)).toMatchObject({ reason: "end-of-range", centralDensity: 1e5 });
  });

  test("a core denser by more than 3/2 is unstable, by less stable (Ramsey 1950, Lighthill 1950; Seidov 1971)", () => {
    const range = [1e4, 1e6] as const;
    for (const [ratio, isEnd] of [
      [1.45, false],
      [1.55, true],
    ] as const) {
      const matter = twoPhases(1e10, 1e5, ratio);
      const { turningPoints, reason } = maximumMass(matter, { relativity: "newton", range });
      const maximum = turningPoints.find((point) => point.kind === "maximum");
      expect(maximum?.centralDensity, String(ratio)).toBe(isEnd ? 1e5 : undefined);
      // Beyond the jump the mass falls, then rises again past any bound: n = 1 has no maximum in Newton's theory.
      expect(reason).toBe("end-of-range");
    }
    const short = maximumMass(twoPhases(1e10, 1e5, 1.55), { relativity: "newton", range: [1e4, 1.56e5] });
    expect(short.reason).toBe("density-jump");
    expect(short.centralDensity).toBe(1e5);
  });
});
