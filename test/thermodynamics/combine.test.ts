/** The interface: batch and single agree to the bit, switches switch, refusals say what and why, and nothing is ever NaN. */
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { type ErrorCode, type FermistateError, isFermistateError } from "../../src/errors.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { fermionGas } from "../../src/fermi-gas/fermion-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { combine } from "../../src/thermodynamics/combine.js";
import type { Contribution } from "../../src/thermodynamics/contribution.js";
import {
  addNaturalDerivatives,
  MEMBER_COUNT,
  naturalDerivatives,
  type Order,
} from "../../src/thermodynamics/free-energy.js";
import { quantities, quantityNames } from "../../src/thermodynamics/quantities.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { uniform } from "../measured.js";

const eos = whiteDwarfMatter({ coulomb: false });
const core = composition({ C12: 0.5, O16: 0.5 });

/** The error a call throws; fails if it throws none or another kind. */
function refusal(call: () => unknown): FermistateError {
  try {
    call();
  } catch (error) {
    if (isFermistateError(error)) return error;
    throw error;
  }
  throw new Error("nothing was thrown");
}

describe("batch", () => {
  const random = uniform(99);
  const count = 500;
  const density = Float64Array.from({ length: count }, () => 10 ** (-15 + 30 * random()));
  const temperature = Float64Array.from({ length: count }, () => 10 ** (2 + 11 * random()));
  const matters = [core, composition({ He4: 1 }), composition({ Fe56: 0.9, n: 0.1 })];
  const compositions = Array.from({ length: count }, (_, i) => matters[i % 3]!);

  test("every quantity equals that of the single state, bit for bit, with one composition or one per row", () => {
    for (const matter of [core, compositions]) {
      const output = Object.fromEntries(quantityNames.map((name) => [name, new Float64Array(count)]));
      eos.evaluate({ density, temperature, composition: matter }, output);
      for (let i = 0; i < count; i++) {
        const state = eos.state(density[i]!, temperature[i]!, Array.isArray(matter) ? matter[i]! : matter);
        for (const name of quantityNames) expect(output[name]![i], `${name} row ${i}`).toBe(state[name]);
      }
    }
  });

  test("T = 0 rows stand beside warm ones", () => {
    const cold = combine(electronPositronGas());
    const pressure = new Float64Array(2);
    const gamma3 = new Float64Array(2);
    const input = { density: Float64Array.of(1e6, 1e6), temperature: Float64Array.of(0, 1e6), composition: core };
    cold.evaluate(input, { pressure, gamma3 });
    expect(pressure[0]).toBe(cold.state(1e6, 0, core).pressure);
    expect(gamma3[0]).toBe(cold.state(1e6, 0, core).gamma3);
    expect(pressure[1]).toBeGreaterThan(pressure[0]!);
  });

  test("only the columns given are written, and no more rows than asked for", () => {
    const pressure = new Float64Array(5).fill(-1);
    eos.evaluate(
      { density: density.slice(0, 3), temperature: temperature.slice(0, 3), composition: core },
      { pressure },
    );
    expect([...pressure.slice(3)]).toEqual([-1, -1]);
    expect(pressure[2]).toBeGreaterThan(0);
  });

  test("all rows are checked before the first is written", () => {
    const pressure = new Float64Array(3);
    const input = {
      density: Float64Array.of(1, 1, -1),
      temperature: Float64Array.of(1e6, 1e6, 1e6),
      composition: core,
    };
    const error = refusal(() => eos.evaluate(input, { pressure }));
    expect([error.code, error.argument, error.given, error.index]).toEqual(["out-of-range", "density", -1, 2]);
    expect([...pressure]).toEqual([0, 0, 0]);
  });

  test.each<[string, ErrorCode, () => void]>([
    [
      "short input",
      "length-mismatch",
      () => eos.evaluate({ density, temperature: temperature.slice(1), composition: core }, {}),
    ],
    [
      "short list of compositions",
      "length-mismatch",
      () => eos.evaluate({ density, temperature, composition: [core] }, {}),
    ],
    [
      "short output",
      "length-mismatch",
      () => eos.evaluate({ density, temperature, composition: core }, { pressure: new Float64Array(count - 1) }),
    ],
    [
      "unknown quantity",
      "unavailable-quantity",
      () => eos.evaluate({ density, temperature, composition: core }, { preasure: new Float64Array(count) } as object),
    ],
    [
      "quantity of a contribution that is not there",
      "unavailable-quantity",
      () =>
        combine(radiation()).evaluate(
          { density, temperature, composition: core },
          { electronDegeneracy: new Float64Array(count) },
        ),
    ],
    [
      "plain array",
      "invalid-option",
      () => eos.evaluate({ density: [1, 2] as unknown as Float64Array, temperature, composition: core }, {}),
    ],
  ])("%s: %s", (_name, code, call) => {
    expect(refusal(call).code).toBe(code);
  });
});

describe("switches", () => {
  test("contributions add: the whole is the sum of its parts, the difference is what was left out", () => {
    const [e, i, r] = [electronPositronGas(), idealIons(), radiation()].map((part) => combine(part));
    const at = [1e5, 3e8, core] as const;
    const sum = e!.state(...at).pressure + i!.state(...at).pressure + r!.state(...at).pressure;
    expect(Math.abs(sum / eos.state(...at).pressure - 1)).toBeLessThan(4e-16);
    expect(whiteDwarfMatter({ coulomb: false, radiation: false, ions: false }).state(...at).pressure).toBe(
      e!.state(...at).pressure,
    );
    expect(whiteDwarfMatter({ coulomb: false, radiation: false }).contributions.map((part) => part.name)).toEqual([
      "electrons and positrons",
      "ideal ions",
    ]);
  });

  test("T = 0 is legal without ions, refused with them, and the refusal names who refuses", () => {
    expect(combine(electronPositronGas(), radiation()).state(1e6, 0, core).pressure).toBeGreaterThan(0);
    const error = refusal(() => eos.state(1e6, 0, core));
    expect(error.code).toBe("outside-domain");
    expect(error.allowed).toContain("ideal ions");
  });

  test("quantities that no contribution provides are undefined, not NaN", () => {
    const photons = combine(radiation()).state(1, 1e6, core);
    expect(photons.electronDegeneracy).toBeUndefined();
    expect(photons.positronDensity).toBeUndefined();
    expect(photons.radiationPressureFraction).toBe(1);
    expect(photons.gamma1).toBeCloseTo(4 / 3, 15);
    expect(photons.heatCapacityP).toBe(Number.POSITIVE_INFINITY); // pressure fixes the temperature: heat only adds volume
  });

  test("a contribution of one's own: given as natural derivatives of F", () => {
    // F = K rho^(2/3) * 3/2: a polytrope of index 3/2, P = K rho^(5/3).
    const k = 1e13;
    const own: Contribution = {
      name: "polytrope of one's own",
      domain: { density: [1e-10, 1e10], temperature: [1, 1e10], zeroTemperature: true },
      add(point, _composition, order: Order, members) {
        const f = 1.5 * k * Math.cbrt(point[0]!) ** 2;
        const power = [1, 2 / 3, 0, (2 / 3) * (-1 / 3), 0, 0, (2 / 3) * (-1 / 3) * (-4 / 3), 0, 0, 0, 0];
        addNaturalDerivatives(
          members,
          order,
          Float64Array.from(power, (c) => c * f),
        );
      },
    };
    const state = combine(own).state(1e6, 1e6, core);
    expect(Math.abs(state.pressure / (k * 1e10) - 1)).toBeLessThan(1e-14);
    expect(state.gamma1).toBeCloseTo(5 / 3, 13);
    expect(state.specificEntropy).toBe(0);
    expect(state.gamma3).toBe(1); // no thermal part: the temperature is not its business
  });

  test("members and natural derivatives are linear in each other, both ways", () => {
    const natural = Float64Array.from({ length: MEMBER_COUNT }, (_, i) => (i * 37) % 11);
    const members = new Float64Array(MEMBER_COUNT);
    addNaturalDerivatives(members, 3, natural);
    expect([...naturalDerivatives(members, 3, new Float64Array(MEMBER_COUNT))]).toEqual([...natural]);
  });

  test.each<[string, () => void]>([
    ["no contribution", () => combine()],
    ["the same twice", () => combine(radiation(), radiation())],
    ["no contribution at all", () => combine({} as Contribution)],
    ["null", () => combine(null as unknown as Contribution)],
  ])("%s is refused", (_name, call) => {
    expect(refusal(call).code).toBe("invalid-option");
  });
});

describe("refusals of a point", () => {
  test.each<[string, unknown, unknown, ErrorCode, string]>([
    ["NaN density", Number.NaN, 1e6, "not-a-number", "density"],
    ["infinite density", Number.POSITIVE_INFINITY, 1e6, "not-a-number", "density"],
    ["density as text", "1e6", 1e6, "not-a-number", "density"],
    ["missing density", undefined, 1e6, "not-a-number", "density"],
    ["zero density", 0, 1e6, "out-of-range", "density"],
    ["negative density", -1, 1e6, "out-of-range", "density"],
    ["subnormal density", 5e-324, 1e6, "outside-domain", "density"],
    ["huge density", 1e19, 1e6, "outside-domain", "density"],
    ["NaN temperature", 1, Number.NaN, "not-a-number", "temperature"],
    ["infinite temperature", 1, Number.POSITIVE_INFINITY, "not-a-number", "temperature"],
    ["negative temperature", 1, -1, "out-of-range", "temperature"],
    ["negative zero is zero", 1, -0, "outside-domain", "temperature"],
    ["freezing", 1, 0.5, "outside-domain", "temperature"],
    ["too hot", 1, 1e14, "outside-domain", "temperature"],
  ])("%s", (_name, density, temperature, code, argument) => {
    const error = refusal(() => eos.state(density as number, temperature as number, core));
    expect([error.code, error.argument]).toEqual([code, argument]);
    expect(error.given).toBe(density === 1 ? temperature : density);
    expect(error.message).toContain("allowed");
  });

  test.each([undefined, null, {}, { C12: 1 }, "C12", 7])("composition %s", (value) => {
    expect(refusal(() => eos.state(1, 1e6, value as never)).code).toBe("invalid-composition");
    const input = { density: Float64Array.of(1), temperature: Float64Array.of(1e6), composition: value as never };
    expect(refusal(() => eos.evaluate(input, {})).code).toBe("invalid-composition");
  });

  test("matter that exerts no pressure: neutrons at T = 0 without a contribution for them", () => {
    expect(refusal(() => combine(electronPositronGas()).state(1e10, 0, composition({ n: 1 }))).code).toBe("unstable");
  });
});

describe("properties", () => {
  const finite = { noNaN: true, noDefaultInfinity: true } as const;

  test("whatever is passed, the answer is a state without NaN or a typed error", () => {
    const anything = fc.oneof(
      fc.double(),
      fc.double({ min: -20, max: 20, ...finite }).map((x) => 10 ** x),
      fc.constant(0),
    );
    const mixtures = fc.constantFrom(
      core,
      composition({ n: 1 }),
      composition({ H1: 1 }),
      composition({ meanMassNumber: 3, meanCharge: 0 }),
    );
    const models = fc.constantFrom(
      eos,
      combine(electronPositronGas()),
      combine(electronPositronGas(), fermionGas({ species: "n" })),
    );
    fc.assert(
      fc.property(anything, anything, mixtures, models, (density, temperature, matter, model) => {
        try {
          const state = model.state(density, temperature, matter);
          for (const [name, value] of Object.entries(state)) {
            if (typeof value === "number" && Number.isNaN(value)) throw new Error(`${name} is NaN`);
          }
        } catch (error) {
          if (!isFermistateError(error)) throw error;
        }
      }),
      { seed: 42, numRuns: 20_000 },
    );
  });

  test("pressure rises with density and temperature, entropy with temperature; 4/3 <= gamma_1 <= 5/3", () => {
    const random = uniform(5);
    for (let i = 0; i < 5_000; i++) {
      const density = 10 ** (-14 + 28 * random());
      const temperature = 10 ** (2 + 10.9 * random());
      const state = eos.state(density, temperature, core);
      expect(state.pressureByDensity).toBeGreaterThan(0);
      expect(state.pressureByTemperature).toBeGreaterThan(0);
      expect(state.heatCapacityV).toBeGreaterThan(0);
      expect(state.heatCapacityP).toBeGreaterThanOrEqual(state.heatCapacityV);
      // Pair creation takes gamma_1 below 4/3: common practice (the pair-instability region).
      expect(state.gamma1).toBeGreaterThan(1.1);
      expect(state.gamma1).toBeLessThan(5 / 3 + 1e-12);
      expect(state.soundSpeed).toBeLessThan(29979245800 / Math.sqrt(3) + 1);
    }
  });

  test("the record, the list of quantities and the state have the same order", () => {
    const state = eos.state(1e6, 1e7, core);
    expect(Object.keys(state).slice(3)).toEqual(Object.keys(quantities));
    expect(state.bulkModulus).toBe(state.pressureByDensity * 1e6 + (state.bulkModulus - state.pressureByDensity * 1e6));
    const close = (a: number, b: number): void => expect(Math.abs(a / b - 1)).toBeLessThan(1e-14);
    // Definitions written out a second time, from the fields alone.
    close(state.bulkModulus, state.gamma1 * state.pressure);
    close(state.specificEnthalpy, state.specificEnergy + state.pressure / state.density);
    close(state.specificFreeEnergy, state.specificEnergy - state.temperature * state.specificEntropy);
    close(state.heatCapacityP, (state.heatCapacityV * state.gamma1) / state.densityExponent);
    close(state.gamma1, state.densityExponent + state.temperatureExponent * (state.gamma3 - 1));
    close(state.adiabaticGradient, (state.gamma2 - 1) / state.gamma2);
    close(state.adiabaticGradient, (state.gamma3 - 1) / state.gamma1);
    close(state.gamma3 - 1, (state.pressure * state.temperatureExponent) / (1e6 * 1e7 * state.heatCapacityV));
    close(state.densityExponent, (1e6 / state.pressure) * state.pressureByDensity);
    close(state.temperatureExponent, (1e7 / state.pressure) * state.pressureByTemperature);
    close(state.energyByDensity * 1e12, state.pressure - 1e7 * state.pressureByTemperature);
    close(state.entropyByDensity * 1e12, -state.pressureByTemperature);
    close(state.entropyByTemperature * 1e7, state.heatCapacityV);
    const c2 = 29979245800 ** 2;
    const inertia = 1e6 * c2 + 1e6 * state.specificEnergy + state.pressure;
    close(state.soundSpeed, Math.sqrt((c2 * state.gamma1 * state.pressure) / inertia));
    close(state.electronDensity, (1e6 * 0.5) / 1.66053906892e-24);
    close(state.electronDegeneracy!, state.electronChemicalPotential! / (1.380649e-16 * 1e7));
  });
});

test.each([
  [Number.NaN, 1e8],
  [1e6, Number.NaN],
  [1e6, -1],
  [-1, 1e8],
  [Number.POSITIVE_INFINITY, 1e8],
  [1e6, Number.POSITIVE_INFINITY],
])(
  "an evaluator checks nothing, but comes to an end at %d g/cm^3, %d K: NaN or a typed error",
  (density, temperature) => {
    for (const eos of [combine(electronPositronGas()), whiteDwarfMatter()]) {
      const { point, members, fillMembers } = eos.evaluator();
      point[0] = density;
      point[1] = temperature;
      let outcome: unknown;
      try {
        fillMembers(composition({ C12: 1 }), 2);
        outcome = members.some(Number.isNaN);
      } catch (error) {
        outcome = isFermistateError(error);
      }
      expect(outcome).toBe(true);
    }
  },
);
