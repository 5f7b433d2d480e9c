/** Parameters against printed and independent figures, kind of matter, guards, immutability, and random places. */
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { isFermistateError } from "../../src/errors.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { type Composition, composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { boundLevelOccupation } from "../../src/regime/ionisation.js";
import type { RegimeOptions } from "../../src/regime/options.js";
import { regime } from "../../src/regime/regime.js";
import { combine } from "../../src/thermodynamics/combine.js";

const pure = (label: string): Composition => composition({ [label]: 1 });
const mix = composition({ C12: 0.5, O16: 0.5 });
/** Relative distance of `actual` from a figure of `digits` printed digits may be half of the last one. */
const printed = (actual: number, figure: number, digits: number) =>
  expect(Number(actual.toPrecision(digits))).toBe(figure);

describe("parameters", () => {
  test("those that a state has too are the same numbers", () => {
    const state = combine(electronPositronGas(), idealIons(), radiation()).state(3e5, 4e8, mix);
    const { parameters } = regime(3e5, 4e8, mix);
    for (const name of [
      "ionCoupling",
      "electronCoupling",
      "densityParameter",
      "relativityParameter",
      "ionPlasmaTemperature",
      "fermiTemperature",
      "electronDegeneracy",
      "radiationPressureFraction",
    ] as const) {
      expect(parameters[name] / state[name]!, name).toBeCloseTo(1, 14);
    }
    expect(parameters.electronChemicalPotential).toBe(state.electronChemicalPotential);
    expect(parameters.pairFraction).toBe(state.positronDensity! / state.electronDensity);
  });

  test("densities of p = 0.25 and 0.62", () => {
    // Own calculation outside this library, two digits (He, C, O, Fe).
    const density = (label: string, p: number): number =>
      1e4 * (regime(1e4, 1e7, pure(label)).parameters.ionisationParameter / p) ** 3;
    printed(density("He4", 0.25), 1.4e3, 2);
    printed(density("C12", 0.25), 1.2e4, 2);
    printed(density("O16", 0.25), 2.2e4, 2);
    printed(density("Fe56", 0.25), 2.5e5, 2);
    printed(density("He4", 0.62), 90, 1);
    printed(density("C12", 0.62), 800, 1);
    printed(density("O16", 0.62), 1.4e3, 2);
    printed(density("Fe56", 0.62), 1.6e4, 2);
  });

  test("densities of R_S = 160 and 1000, and R_S = 3 (Gamma/theta)^2", () => {
    // As above.
    const density = (label: string, rs: number): number =>
      1e4 * (regime(1e4, 1e7, pure(label)).parameters.ionDensityParameter / rs) ** 3;
    printed(density("H1", 160), 4e3, 1);
    printed(density("He4", 160), 6.5e7, 2);
    printed(density("C12", 160), 3.8e12, 2);
    printed(density("He4", 1000), 2.7e5, 2);
    printed(density("C12", 1000), 1.6e10, 2);
    for (const one of regime(1e7, 1e7, composition({ He4: 0.2, Fe56: 0.8 })).parameters.species) {
      expect((3 * (one.coupling / one.quantumParameter) ** 2) / one.ionDensityParameter).toBeCloseTo(1, 13);
    }
    const { parameters } = regime(1e7, 1e7, pure("Fe56"));
    expect(parameters.ionDensityParameter / parameters.species[0]!.ionDensityParameter).toBeCloseTo(1, 13);
    expect(parameters.species[0]!.plasmaTemperature / parameters.ionPlasmaTemperature).toBeCloseTo(1, 14);
  });

  test("occupation of the 1s level", () => {
    // Own calculation outside this library from Ry = 13.605693 eV and k = 8.617333e-5 eV/K, four digits.
    const occupation = (density: number, temperature: number, label: string): number => {
      const matter = pure(label);
      const { parameters } = regime(density, temperature, matter);
      const z = matter.species[0]!.chargeNumber;
      const y = (z * z * parameters.electronCoupling * parameters.densityParameter) / 2;
      return boundLevelOccupation(y, parameters.reducedTemperature);
    };
    printed(occupation(1e2, 1e7, "C12"), -3.248, 4);
    printed(occupation(1e4, 4e7, "Fe56"), 3.203, 4);
    printed(occupation(1e3, 1e6, "C12"), 9.794, 4);
    expect(boundLevelOccupation(1e-3 * (1 - 1e-9), 1)).toBeCloseTo(boundLevelOccupation(1e-3, 1), 6);
    expect(boundLevelOccupation(40, 1)).toBeCloseTo(boundLevelOccupation(40 + 1e-12, 1), 10);
    expect(boundLevelOccupation(1, 0)).toBe(Number.POSITIVE_INFINITY);
  });
});

describe("kind of matter", () => {
  test.each<[string, number, number, Composition]>([
    ["non-degenerate, ion gas", 1e-2, 1e6, pure("H1")],
    ["partially degenerate, liquid", 1e3, 1e7, mix],
    ["degenerate, liquid", 1e6, 2e7, mix],
    ["degenerate, crystal", 1e6, 1e6, mix],
    ["degenerate, relativistic, crystal", 1e9, 7e7, pure("Fe56")],
    ["non-degenerate, relativistic, ion gas", 1e6, 1e10, mix],
    ["degenerate, relativistic, liquid", 1e8, 0, pure("He4")],
    ["free neutrons", 1e10, 1e7, pure("n")],
  ])("%s", (words, density, temperature, matter) => {
    expect(regime(density, temperature, matter).kind.join(", ")).toBe(words);
  });

  test("the crystal starts at Gamma = 175, or where it is told to", () => {
    const melting = (regime(1e6, 1e7, mix).parameters.ionCoupling * 1e7) / 175;
    expect(regime(1e6, melting * 0.999, mix).phase).toBe("crystal");
    expect(regime(1e6, melting * 1.001, mix).phase).toBe("liquid");
    expect(regime(1e6, melting * 1.001, mix, { phase: "crystal" }).phase).toBe("crystal");
    expect(regime(1e6, 1e7, pure("n"), { phase: "crystal" }).phase).toBeUndefined();
  });
});

describe("guards", () => {
  const bad = (density: unknown, temperature: unknown, matter: unknown, options?: unknown): string => {
    try {
      regime(density as number, temperature as number, matter as Composition, options as RegimeOptions);
    } catch (error) {
      return isFermistateError(error) ? `${error.code} ${error.argument}` : `untyped ${String(error)}`;
    }
    return "none";
  };
  const eos = combine(electronPositronGas(), idealIons());

  test.each<[string, unknown, unknown, unknown, unknown?]>([
    ["not-a-number density", Number.NaN, 1e7, mix],
    ["not-a-number density", "1e6", 1e7, mix],
    ["not-a-number temperature", 1e6, Number.POSITIVE_INFINITY, mix],
    ["out-of-range density", -1, 1e7, mix],
    ["out-of-range temperature", 1, -1, mix],
    ["outside-domain density", 1e19, 1e7, mix],
    ["outside-domain temperature", 1, 0.5, mix],
    ["invalid-composition composition", 1, 1e7, { C12: 1 }],
    ["invalid-option options", 1, 1e7, mix, null],
    ["invalid-option options", 1, 1e7, mix, { fase: "liquid" }],
    ["invalid-option phase", 1, 1e7, mix, { phase: "gas" }],
    ["invalid-option equationOfState", 1, 1e7, mix, { equationOfState: 3 }],
    ["invalid-option equationOfState", 1, 1e7, mix, { equationOfState: null }],
    ["invalid-option state", 1, 1e7, mix, { state: eos.state(2, 1e7, mix) }],
    ["outside-domain temperature", 1, 0, mix, { equationOfState: eos }],
  ])("%s", (expected, density, temperature, matter, options) => {
    expect(bad(density, temperature, matter, options)).toBe(expected);
  });
});

/** Every object inside is frozen, every number is one. */
function inspect(value: unknown, path: string): void {
  if (typeof value === "number") expect(value, path).not.toBeNaN();
  if (typeof value !== "object" || value === null) return;
  expect(Object.isFrozen(value), path).toBe(true);
  for (const [key, inner] of Object.entries(value)) inspect(inner, `${path}.${key}`);
}

test("frozen throughout, and the same after JSON where T > 0", () => {
  for (const place of [
    [2e9, 1e8, pure("Fe56")],
    [1, 1e5, mix],
    [1e12, 1e7, composition({ H1: 0.1, Fe56: 0.9 })],
  ] as const satisfies readonly (readonly [number, number, Composition])[]) {
    const [density, temperature, matter] = place;
    const found = regime(density, temperature, matter);
    expect(found.findings.length).toBeGreaterThan(0);
    inspect(found, "regime");
    expect(JSON.parse(JSON.stringify(found))).toEqual(found);
  }
  const cold = JSON.parse(JSON.stringify(regime(1e6, 0, mix))) as ReturnType<typeof regime>;
  expect(cold.parameters.ionCoupling).toBeNull();
});

test("random places: no NaN, every finding beyond its threshold, its value finite", () => {
  const labels = ["n", "H1", "H2", "He3", "He4", "C12", "N14", "O16", "Ne22", "Fe56", "Ni56", "U238", "Og295"];
  const matter = fc
    .array(fc.tuple(fc.constantFrom(...labels), fc.double({ min: -300, max: 0, noNaN: true })), {
      minLength: 1,
      maxLength: 4,
    })
    .map((list) =>
      composition(Object.fromEntries(list.map(([label, power]) => [label, 10 ** power])), { normalise: true }),
    );
  const mean = fc
    .tuple(fc.double({ min: 1, max: 300, noNaN: true }), fc.double({ min: 0, max: 1, noNaN: true }))
    .map(([a, share]) => composition({ meanMassNumber: a, meanCharge: a * share }));
  const kelvin = fc.oneof(
    { weight: 1, arbitrary: fc.constant(0) },
    { weight: 6, arbitrary: fc.double({ min: 0, max: 13, noNaN: true }).map((e) => 10 ** e) },
  );
  const density = fc.double({ min: -20, max: 18, noNaN: true }).map((e) => 10 ** e);
  const phase = fc.constantFrom(undefined, "liquid", "crystal" as const);
  fc.assert(
    fc.property(density, kelvin, fc.oneof(matter, mean), phase, (rho, temperature, nuclei, forced) => {
      const found = regime(rho, temperature, nuclei, forced === undefined ? {} : { phase: forced as "liquid" });
      inspect(found, `${rho} ${temperature} ${nuclei.name}`);
      for (const { value, threshold, message, code } of found.findings) {
        expect(value).not.toBe(threshold);
        if (temperature > 0) expect(Number.isFinite(value), code).toBe(true);
        expect(Number.isFinite(threshold), code).toBe(true);
        expect(message).toMatch(/^\S.*\.$/);
      }
    }),
    { numRuns: 1500, seed: 20250714 },
  );
});
