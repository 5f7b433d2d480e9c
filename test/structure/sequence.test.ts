/** Sequences, the star of a mass, the largest mass: consistency with single stars, scaling laws, refusals. */
import { describe, expect, test } from "vitest";
import { solarMass } from "../../src/constants.js";
import { maximumMass } from "../../src/structure/maximum-mass.js";
import { massRadiusSequence } from "../../src/structure/sequence.js";
import { hydrostaticStar } from "../../src/structure/star.js";
import { starOfMass } from "../../src/structure/star-of-mass.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { coldElectrons, coldNeutrons, kinked, polytrope } from "./barotropes.js";

describe("massRadiusSequence", () => {
  test("its rows are single stars, bit by bit, whatever stood before them", () => {
    const barotrope = coldElectrons(2, 6);
    const options = { relativity: "general", rotation: true, tides: true } as const;
    const sequence = massRadiusSequence(barotrope, { range: [1e6, 1e9], count: 7, ...options });
    for (const i of [0, 6]) expect(sequence.centralDensity[i]).toBe(i === 0 ? 1e6 : 1e9);
    expect(Math.abs(sequence.centralDensity[3]! / 10 ** 7.5 - 1)).toBeLessThan(1e-14);
    for (let i = 0; i < 7; i++) {
      const star = hydrostaticStar(barotrope, { centralDensity: sequence.centralDensity[i]!, ...options });
      for (const [name, column] of Object.entries(sequence)) {
        expect(column[i], `${name} ${i}`).toBe(star[name as keyof typeof sequence]);
      }
    }
  });

  test("polytropes obey M ~ rho_c^((3-n)/2n), R ~ rho_c^((1-n)/2n) (Lane 1870)", () => {
    const centralDensities = [1e4, 1e5, 1e6];
    for (const n of [0.8, 1.5, 3]) {
      const { mass, radius } = massRadiusSequence(polytrope(1e13, n), { centralDensities, relativity: "newton" });
      for (const i of [1, 2]) {
        expect(Math.abs(mass[i]! / mass[0]! / 10 ** ((i * (3 - n)) / (2 * n)) - 1)).toBeLessThan(1e-11);
        expect(Math.abs(radius[i]! / radius[0]! / 10 ** ((i * (1 - n)) / (2 * n)) - 1)).toBeLessThan(1e-11);
      }
    }
  });

  test("what was not asked for has no column", () => {
    const plain = massRadiusSequence(coldElectrons(2), { centralDensities: [1e6] });
    expect(Object.keys(plain)).not.toContain("momentOfInertia");
    const { momentOfInertia, loveNumber, tidalDeformability } = plain;
    expect([momentOfInertia, loveNumber, tidalDeformability]).toEqual([undefined, undefined, undefined]);
    const turning = massRadiusSequence(coldElectrons(2), { centralDensities: [1e6], rotation: true });
    expect(turning.momentOfInertia[0]).toBeGreaterThan(0); // and its type says that it is there
    expect(turning.tidalDeformability).toBeUndefined();
  });

  test("a slip in a literal does not compile, and what is asked for has its type", () => {
    const barotrope = coldElectrons(2);
    // @ts-expect-error: relativty
    expect(() => hydrostaticStar(barotrope, { centralDensity: 1e6, relativty: "newton" })).toThrow("relativty");
    // @ts-expect-error: cuont
    expect(() => massRadiusSequence(barotrope, { range: [1e6, 1e7], cuont: 3 })).toThrow("cuont");
    const star = hydrostaticStar(barotrope, { centralDensity: 1e6, profile: true });
    expect(star.profile.at(0).density).toBeCloseTo(1e6, 4);
  });

  test("unknown options, and options of the wrong kind, are refused by all", () => {
    const barotrope = coldElectrons(2);
    const calls: readonly ((options: object) => unknown)[] = [
      (options) => hydrostaticStar(barotrope, { centralDensity: 1e6, ...options }),
      (options) => massRadiusSequence(barotrope, { centralDensities: [1e6], ...options }),
      (options) => starOfMass(barotrope, solarMass, options),
      (options) => maximumMass(barotrope, options),
    ];
    for (const call of calls) {
      expect(() => call({ relativty: "newton" })).toThrow(
        expect.objectContaining({
          code: "invalid-option",
          given: "relativty",
          allowed: expect.stringContaining("tides"),
        }),
      );
      expect(() => call({ tides: 1 })).toThrow(expect.objectContaining({ code: "invalid-option", argument: "tides" }));
    }
  });

  test("refusals name the row or the option", () => {
    const barotrope = coldElectrons(2, undefined, 1e10);
    const refused = (options: object) => () => massRadiusSequence(barotrope, options);
    expect(refused({ centralDensities: [1e6, 1e11] })).toThrow(
      expect.objectContaining({ code: "outside-domain", index: 1 }),
    );
    expect(refused({})).toThrow(expect.objectContaining({ code: "invalid-option" }));
    expect(refused({ range: [1e6, 1e7], centralDensities: [1] })).toThrow(
      expect.objectContaining({ code: "invalid-option" }),
    );
    expect(refused({ range: [1e7, 1e6] })).toThrow(
      expect.objectContaining({ code: "out-of-range", argument: "range" }),
    );
    expect(refused({ range: 5 })).toThrow(expect.objectContaining({ code: "invalid-option", argument: "range" }));
    expect(refused({ range: [1e6, 1e7], count: 1 })).toThrow(
      expect.objectContaining({ code: "out-of-range", argument: "count" }),
    );
  });
});

describe("starOfMass", () => {
  test("up to the largest mass itself, between the stars of the scan", () => {
    const largest = maximumMass(coldNeutrons());
    const star = starOfMass(coldNeutrons(), largest.mass * (1 - 1e-9));
    expect(star.mass / largest.mass).toBeCloseTo(1 - 1e-9, 11);
    expect(star.massSlope).toBeGreaterThan(0);
    expect(() => starOfMass(coldNeutrons(), largest.mass * (1 + 1e-9))).toThrow("rising branches");
  });

  test("an equation of state in place of a barotrope, or no options: a typed error", () => {
    expect(() => hydrostaticStar(whiteDwarfMatter() as never, { centralDensity: 1e8 })).toThrow("a barotrope");
    expect(() => hydrostaticStar(coldNeutrons(), undefined as never)).toThrow("centralDensity, profile");
  });

  test.each([0.2, 0.6, 1, 1.3])("%d solar masses of ideal electrons", (wanted) => {
    const star = starOfMass(coldElectrons(2), wanted * solarMass, { relativity: "newton" });
    expect(Math.abs(star.mass / (wanted * solarMass) - 1)).toBeLessThan(1e-11);
    expect(star.massSlope).toBeGreaterThan(0);
  });

  test("the range chooses the branch; falling branches are not taken", () => {
    // 0.6 solar masses of ideal neutrons: stable below 3.5e15 g/cm^3, unstable above.
    const star = starOfMass(coldNeutrons(), 0.6 * solarMass, { profile: true });
    expect(star.centralDensity).toBeLessThan(3.5e15);
    expect(star.profile).toBeDefined();
    expect(() => starOfMass(coldNeutrons(), 0.6 * solarMass, { range: [3.6e15, 1e17] })).toThrow(
      expect.objectContaining({ code: "outside-domain", argument: "mass" }),
    );
  });

  test("a mass above the largest is refused, and the message says what there is", () => {
    try {
      starOfMass(coldElectrons(2), 1.5 * solarMass);
      expect.fail("no refusal");
    } catch (error) {
      expect(error).toMatchObject({ code: "outside-domain", argument: "mass" });
      expect(String(error)).toMatch(/within .* to 2\.8\d+e\+33 g/);
    }
    expect(() => starOfMass(coldElectrons(2), Number.NaN)).toThrow(expect.objectContaining({ code: "not-a-number" }));
  });
});

describe("maximumMass", () => {
  test("no maximum in the range, and the end of the matter, are findings", () => {
    const ranged = maximumMass(coldElectrons(2), { range: [1e6, 1e8] });
    expect(ranged).toMatchObject({ reason: "end-of-range", centralDensity: 1e8, turningPoints: [] });
    const capture = coldElectrons(2, 6, 2e10); // an end before the maximum, as electron capture would set one
    const ended = maximumMass(capture);
    expect(ended).toMatchObject({ reason: "end-of-domain", centralDensity: 2e10 });
    expect(ended.message).toContain(capture.name);
    expect(ended.mass).toBe(hydrostaticStar(capture, { centralDensity: 2e10 }).mass);
  });

  test("in Newton's theory ideal electrons have no maximum, and the mass tends to the limiting mass", () => {
    const most = maximumMass(coldElectrons(2), { relativity: "newton" });
    expect(most.reason).toBe("end-of-domain");
    expect(most.turningPoints).toEqual([]);
  });

  test("matter that softens ends in Newton's theory too, a sequence that only falls at the end of the range", () => {
    const most = maximumMass(kinked(1e13, 1.5, 1e6, 4, false), { range: [1e5, 1e9], relativity: "newton" });
    expect(most).toMatchObject({ reason: "softening" });
    expect(most.centralDensity).toBeGreaterThan(1e6);
    expect(maximumMass(kinked(1e13, 1.5, 1e6, 4, false), { range: [1e5, 1e9] }).reason).toBe("softening");
    const falling = maximumMass(polytrope(1e15, 3.2), { relativity: "newton", range: [1e5, 1e9] });
    expect(falling.reason).toBe("end-of-range");
    expect(falling.star.findings.map(({ code }) => code)).toEqual(["unstable-star"]);
  });

  test("moment of inertia and tide of the star are those asked for", () => {
    const { star } = maximumMass(coldNeutrons(), { rotation: true, tides: true, range: [1e15, 1e16] });
    expect(star.momentOfInertia).toBeGreaterThan(0);
    expect(star.tidalDeformability).toBeGreaterThan(0);
  });

  test("ranges outside the matter are refused", () => {
    expect(() => maximumMass(coldElectrons(2, undefined, 1e10), { range: [1e6, 1e11] })).toThrow(
      expect.objectContaining({ code: "out-of-range", argument: "range" }),
    );
  });
});
