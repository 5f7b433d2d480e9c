/**
 * The ladder of limiting masses: closed forms of its limits, recomputed and published maxima, facts of the trade.
 *
 * "Recomputed" masses come from an integration of Salpeter's terms (1961, ApJ 134, 669) outside this library, with the
 * lattice energy of ion spheres, 0.9; that of the bcc lattice, 0.8959, moves them by 5e-5 (helium) to 3e-4 (iron).
 */
import { describe, expect, test } from "vitest";
import { fineStructureConstant, solarMass } from "../../src/constants.js";
import { composition, type NucleonFractions } from "../../src/matter/composition.js";
import type { LadderRung, LadderRungCode } from "../../src/structure/ladder-rung.js";
import { limitingMassLadder } from "../../src/structure/limiting-mass-ladder.js";
import { maximumMass } from "../../src/structure/maximum-mass.js";
import { massRadiusSequence } from "../../src/structure/sequence.js";
import { hydrostaticStar } from "../../src/structure/star.js";

const known = new Map<string, readonly LadderRung[]>();

/** The ladder of a composition at 1e8 K, made once. */
function ladder(fractions: NucleonFractions): Readonly<Record<LadderRungCode, LadderRung>> {
  const matter = composition(fractions);
  const rungs = known.get(matter.name) ?? limitingMassLadder(matter);
  known.set(matter.name, rungs);
  return Object.fromEntries(rungs.map((one) => [one.code, one])) as Record<LadderRungCode, LadderRung>;
}
const core = { C12: 0.5, O16: 0.5 };
const off = (actual: number, expected: number): number => Math.abs(actual / expected - 1);

test("nine rungs, frozen, each with its reason; sizes only where a star has the mass", () => {
  ladder(core);
  const rungs = known.get(composition(core).name)!;
  expect(rungs.map(({ code }) => code)).toEqual([
    "uniform-sphere",
    "index-3-polytrope",
    "ideal-electrons",
    "lattice",
    "exchange-and-screening",
    "general-relativity",
    "moving-nuclei",
    "electron-capture",
    "isothermal-core",
  ]);
  expect(rungs.map(({ end }) => end)).toEqual([
    "energy",
    "scale-free",
    ...Array.from({ length: 3 }, () => "infinite-density"),
    ...Array.from({ length: 2 }, () => "relativity"),
    ...Array.from({ length: 2 }, () => "electron-capture"),
  ]);
  expect(Object.isFrozen(rungs)).toBe(true);
  for (const one of rungs) {
    expect(Object.isFrozen(one)).toBe(true);
    expect(one.solarMasses).toBe(one.mass / solarMass);
    const isStar = one.end === "relativity" || one.end === "electron-capture";
    expect([typeof one.radius, typeof one.centralDensity]).toEqual(Array(2).fill(isStar ? "number" : "undefined"));
    if (!isStar) continue;
    const star = hydrostaticStar(one.matter!, { centralDensity: one.centralDensity!, relativity: one.relativity });
    expect(off(star.mass, one.mass)).toBeLessThan(1e-8);
    expect(off(star.radius, one.radius!)).toBeLessThan(1e-8);
  }
});

describe("Newton's limits", () => {
  test("n = 3: 5.8251902/mu_e^2 (CODATA 2022, IAU GM_sun); uniform sphere about 1.7 (common practice)", () => {
    const rungs = ladder(core);
    expect(Math.abs(rungs["index-3-polytrope"].solarMasses * 4 - 5.8251902)).toBeLessThan(1e-7);
    expect(rungs["uniform-sphere"].solarMasses.toFixed(1)).toBe("1.7");
    // Its own formula: [(5/4)(9 pi/4)^(1/3)]^(3/2) over (3 pi)^(1/2) omega_3/2, Emden's omega_3 = 2.01824.
    const ratio = (1.25 * Math.cbrt(2.25 * Math.PI)) ** 1.5 / (0.5 * Math.sqrt(3 * Math.PI) * 2.0182359509);
    expect(off(rungs["uniform-sphere"].mass / rungs["index-3-polytrope"].mass, ratio)).toBeLessThan(1e-9);
  });

  test("ideal electrons tend to it: Chandrasekhar's model 1/y_0^2 = 1e-4 (5.82202/mu_e^2), and the end", () => {
    const { matter, mass, solarMasses } = ladder(core)["ideal-electrons"];
    expect(Math.abs(solarMasses * 4 - 5.8251902)).toBeLessThan(2e-7);
    // rho_c = mu_e m_u x^3/(3 pi^2 lambdabar^3), x^2 = y_0^2 - 1; 9.739330e5 g/cm^3 at x = 1, mu_e = 1 (CODATA 2022).
    const centralDensity = 2 * 9.73933e5 * (1e4 - 1) ** 1.5;
    const star = hydrostaticStar(matter!, { centralDensity, relativity: "newton" });
    expect(Math.abs((star.mass / solarMass) * 4 - 5.82202)).toBeLessThan(1e-6);
    expect(star.mass).toBeLessThan(mass);
  });

  test.each([
    ["He4", 2, 4],
    ["C12", 6, 12],
    ["Fe56", 26, 56],
  ] as const)("%s: lattice, exchange and screening in closed form", (label, z, a) => {
    const rungs = ladder({ [label]: 1 });
    const alpha = fineStructureConstant;
    const lambda = Math.cbrt(4 / (9 * Math.PI));
    const ideal = 5.8251902 * (z / a) ** 2;
    // Energies per electron in units of (3/4) x m c^2 at x >> 1; bcc Madelung constant by Ewald sums.
    const lattice = (4 / 3) * 0.895929255681765 * alpha * lambda * Math.cbrt(z * z);
    const exchange = alpha / (2 * Math.PI); // Akhiezer & Peletminskii 1960: -(3/4 pi) alpha x Phi, Phi -> -1/2
    const thomasFermi = (4 / 3) * (162 / 175) * (alpha * lambda) ** 2 * Math.cbrt(z) ** 4;
    const nucleons = composition({ [label]: 1 }).electronsPerNucleon * (a / z); // A m_u over the mass of the nuclide
    const limit = (share: number): number => ideal * nucleons ** 2 * share ** 1.5;
    expect(off(rungs.lattice.solarMasses, limit(1 - lattice))).toBeLessThan(1e-7);
    const all = limit(1 - lattice + exchange - thomasFermi);
    expect(off(rungs["exchange-and-screening"].solarMasses, all)).toBeLessThan(1e-7);
  });

  test.each(["ideal-electrons", "lattice", "exchange-and-screening"] as const)("%s: the mass rises to it", (code) => {
    const { matter, mass } = ladder(core)[code];
    const { mass: masses, radius } = massRadiusSequence(matter!, {
      range: [1e6, 1e16],
      count: 6,
      relativity: "newton",
      tolerance: 1e-9,
    });
    for (let i = 1; i < 6; i++) {
      expect(masses[i]).toBeGreaterThan(masses[i - 1]!);
      expect(radius[i]).toBeLessThan(radius[i - 1]!);
    }
    expect(masses[5]).toBeLessThan(mass);
    expect(off(masses[5]!, mass)).toBeLessThan(2e-5);
  });
});

describe("Einstein's maxima", () => {
  /** From ion spheres to the bcc lattice, M ~ (1 - share)^(3/2) with the share of the lattice in the pressure. */
  function inBcc(mass: number, charge: number): number {
    const share = (4 / 3) * fineStructureConstant * Math.cbrt(4 / (9 * Math.PI)) * Math.cbrt(charge) ** 2;
    return mass * ((1 - 0.895929255682 * share) / (1 - 0.9 * share)) ** 1.5;
  }

  test.each([
    ["C12", 1.41661],
    ["Fe56", 1.22305],
  ] as const)("ideal electrons of %s (recomputed; Mathew & Nandy 2017, RAA 17, 061: 1.4166, 1.2230)", (label, mass) => {
    const { matter } = ladder({ [label]: 1 })["ideal-electrons"];
    const most = maximumMass(matter!, { range: [1e10, 1e11] });
    expect(off(most.mass / solarMass, mass)).toBeLessThan(1e-5);
  });

  test.each([
    ["He4", 2, 1.40383],
    ["C12", 6, 1.38707],
    ["O16", 8, 1.3802],
    ["Fe56", 26, 1.15045],
  ] as const)("%s with lattice, screening, exchange (recomputed with Salpeter's terms)", (label, charge, mass) => {
    expect(off(ladder({ [label]: 1 })["general-relativity"].solarMasses, inBcc(mass, charge))).toBeLessThan(1.5e-5);
  });

  test.each([
    ["He4", 2, 1.40134],
    ["Fe56", 26, 1.15071],
  ] as const)("%s with the lattice alone (recomputed)", (label, charge, mass) => {
    const most = maximumMass(ladder({ [label]: 1 }).lattice.matter!, { range: [1e10, 1e11] });
    expect(off(most.mass / solarMass, inBcc(mass, charge))).toBeLessThan(1.5e-5);
  });
});

describe("electron capture", () => {
  test.each([
    ["O16", 2.05927e10],
    ["Fe56", 1.37587e9],
  ] as const)("%s ends where it captures in its lattice (Gibbs equality, AME2020)", (label, density) => {
    const rung = ladder({ [label]: 1 })["electron-capture"];
    expect(rung.end).toBe("electron-capture");
    expect(off(rung.centralDensity!, density)).toBeLessThan(3e-3);
    expect(rung.mass).toBeLessThan(ladder({ [label]: 1 })["moving-nuclei"].mass);
  });

  test.each(["He4", "C12"] as const)("%s: relativity comes first", (label) => {
    const { "electron-capture": rung, "moving-nuclei": before } = ladder({ [label]: 1 });
    expect(rung).toMatchObject({ end: "relativity", mass: before.mass, centralDensity: before.centralDensity });
    expect(rung.message).toContain("relativity decides");
  });

  test.each([
    ["He4", 1.40906],
    ["C12", 1.38603],
    ["O16", 1.38024],
    ["Fe56", 1.10618],
  ] as const)(
    "%s: Rotondo, Rueda, Ruffini & Xue 2011, PRD 84, 084007 (from memory), to half a percent",
    (label, mass) => {
      expect(off(ladder({ [label]: 1 })["electron-capture"].solarMasses, mass)).toBeLessThan(5e-3);
    },
  );

  test("carbon and oxygen: about 1.39 (common practice)", () => {
    expect(ladder(core)["electron-capture"].solarMasses.toFixed(2)).toBe("1.39");
  });

  test("a mean nucleus has no known threshold", () => {
    const rungs = limitingMassLadder(composition({ meanMassNumber: 14, meanCharge: 7 }), { temperature: false });
    expect(rungs).toHaveLength(8);
    expect(rungs.at(-1)).toMatchObject({ end: "relativity", assumes: expect.stringContaining("no threshold") });
  });
});

test("each assumption moves the mass the way it must", () => {
  for (const fractions of [core, { He4: 1 }, { C12: 1 }, { O16: 1 }, { Fe56: 1 }]) {
    const mass = Object.values(ladder(fractions)).map((rung) => rung.mass) as [
      number,
      number,
      number,
      number,
      number,
      number,
      number,
      number,
      number,
    ];
    const [sphere, polytrope, ideal, lattice, exchange, relativity, vibration, capture, warm] = mass;
    expect(sphere).toBeGreaterThan(polytrope);
    expect(off(ideal, polytrope)).toBeLessThan(1e-7);
    expect(lattice).toBeLessThan(ideal); // attraction
    // Magnetic exchange repels, screening attracts: it wins for iron.
    expect(exchange > lattice).toBe(!("Fe56" in fractions));
    expect(relativity).toBeLessThan(exchange);
    expect(vibration).toBeGreaterThan(relativity);
    expect(capture).toBeLessThanOrEqual(vibration);
    expect(warm).toBeGreaterThan(capture); // thermal pressure
  }
});

test("a cool core is a cold one", () => {
  const rungs = limitingMassLadder(composition(core), { temperature: 1e6 });
  expect(off(rungs[8]!.mass, rungs[7]!.mass)).toBeLessThan(1e-6);
});

test("refusals name what is wrong", () => {
  const matter = composition(core);
  const refused = (options: unknown) => () => limitingMassLadder(matter, options as object);
  expect(refused({ temperature: Number.NaN })).toThrow(expect.objectContaining({ code: "not-a-number" }));
  expect(refused({ temperature: 1e9 })).toThrow(expect.objectContaining({ code: "out-of-range" }));
  expect(refused({ heat: 1 })).toThrow(expect.objectContaining({ code: "invalid-option", given: "heat" }));
  expect(refused(7)).toThrow(expect.objectContaining({ code: "invalid-option" }));
  expect(() => limitingMassLadder({} as typeof matter)).toThrow(
    expect.objectContaining({ code: "invalid-composition" }),
  );
  const of = (fractions: NucleonFractions) => () => limitingMassLadder(composition(fractions));
  expect(of({ n: 1 })).toThrow(expect.objectContaining({ code: "out-of-range", argument: "composition" }));
  expect(of({ N14: 1 })).toThrow(expect.objectContaining({ code: "outside-domain", argument: "composition" }));
  expect(of({ C12: 0.2, Fe56: 0.8 })).toThrow(
    expect.objectContaining({
      code: "unstable",
      argument: "temperature",
      allowed: expect.stringMatching(/unlike[\s\S]*thinner than the liquid[\s\S]*false/),
    }),
  );
  for (const fractions of [{ H1: 1 }, { H1: 0.7, He4: 0.3 }]) {
    expect(of(fractions)).toThrow(
      expect.objectContaining({
        code: "unstable",
        argument: "composition",
        allowed: expect.stringMatching(/hydrogen[\s\S]*chandrasekharMass/),
      }),
    );
  }
});

test("a star that the heat has blown up is refused; cooler it is there, and less than three times as wide", () => {
  // Argon 36 captures at 2e7 g/cm^3, so its heaviest star is thin enough for 5e8 K to matter.
  const argon = composition({ Ar36: 1 });
  expect(() => limitingMassLadder(argon, { temperature: 5e8 })).toThrow(
    expect.objectContaining({
      code: "outside-domain",
      argument: "temperature",
      allowed: expect.stringMatching(/envelope[\s\S]*3 times/),
    }),
  );
  const [cold, warm] = limitingMassLadder(argon, { temperature: 1e8 }).slice(-2);
  expect(warm!.radius! / cold!.radius!).toBeGreaterThan(1);
  expect(warm!.radius! / cold!.radius!).toBeLessThan(3);
});

test("carbon and iron without the warm rung", () => {
  const rungs = limitingMassLadder(composition({ C12: 0.2, Fe56: 0.8 }), { temperature: false });
  expect(rungs.map(({ code }) => code)).not.toContain("isothermal-core");
  expect(rungs.at(-1)).toMatchObject({ end: "electron-capture", assumes: expect.stringContaining("Fe56") });
});
