/** Impossible questions end in typed errors that tell the limit, after a bounded number of evaluations. */
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import {
  type Contribution,
  combine,
  composition,
  type EquationOfState,
  electronPositronGas,
  type FermistateError,
  type Given,
  idealIons,
  isFermistateError,
  radiation,
  refusalReasons,
  solve,
  solveColumns,
  whiteDwarfMatter,
} from "../../src/index.js";
import { pairs } from "./pairs.js";

const matter = whiteDwarfMatter();
const carbonOxygen = composition({ C12: 0.5, O16: 0.5 });

function refusal(call: () => unknown): FermistateError {
  try {
    call();
  } catch (error) {
    if (isFermistateError(error)) return error;
    throw error;
  }
  throw new Error("not refused");
}

describe("values that no matter has", () => {
  test.each<[string, object, string]>([
    ["NaN", { density: Number.NaN, specificEnergy: 1e17 }, "not-a-number"],
    ["infinite", { density: 1e6, pressure: Number.POSITIVE_INFINITY }, "not-a-number"],
    ["text", { density: "1e6" as unknown as number, pressure: 1e23 }, "not-a-number"],
    ["negative density", { density: -1, specificEnergy: 1e17 }, "out-of-range"],
    ["negative pressure", { pressure: -1, temperature: 1e7 }, "out-of-range"],
    ["density outside the domain", { density: 1e30, specificEnergy: 1e17 }, "outside-domain"],
    ["temperature outside the domain", { temperature: 1e20, pressure: 1e17 }, "outside-domain"],
    ["one quantity", { density: 1e6 }, "invalid-option"],
    ["three quantities", { density: 1e6, pressure: 1e23, temperature: 1e7 }, "invalid-option"],
    ["energy at given temperature", { temperature: 1e7, specificEnergy: 1e17 }, "invalid-option"],
    ["energy and enthalpy", { specificEnthalpy: 1e17, specificEnergy: 1e17 }, "invalid-option"],
  ])("%s", (_name, given, code) => {
    expect(refusal(() => solve(matter, carbonOxygen, given as Given)).code).toBe(code);
  });

  test("no object, no composition, no guess", () => {
    expect(refusal(() => solve(matter, carbonOxygen, undefined as unknown as Given)).code).toBe("invalid-option");
    expect(refusal(() => solve(matter, {} as never, { density: 1, pressure: 1e20 })).code).toBe("invalid-composition");
    const given = { density: 1e6, pressure: 2e23 };
    expect(refusal(() => solve(matter, carbonOxygen, given, { guess: 3 as never })).code).toBe("invalid-option");
    const error = refusal(() => solve(matter, carbonOxygen, given, { guess: { temperature: Number.NaN } }));
    expect([error.code, error.argument]).toEqual(["not-a-number", "guess.temperature"]);
  });
});

describe("quantities beyond what matter of a density can have", () => {
  test.each(["specificEnergy", "pressure", "specificEnthalpy"] as const)(
    "%s below that of cold matter: the error carries the cold value",
    (name) => {
      const cold = matter.state(1e6, 0, carbonOxygen)[name];
      const error = refusal(() =>
        solve(matter, carbonOxygen, { density: 1e6, [name]: cold * 0.999 } as object as Given),
      );
      expect(error.code).toBe("below-cold");
      expect(error.limit).toBe(cold);
      expect(error.message).toContain("T = 0");
    },
  );

  test.each(["specificEnergy", "pressure", "specificEnthalpy"] as const)(
    "%s equal to that of cold matter: T = 0, its temperature told to be unknown, with and without a guess",
    (name) => {
      for (const density of [1e4, 1e6, 1e9]) {
        const cold = matter.state(density, 0, carbonOxygen);
        const given = { density, [name]: cold[name] } as object as Given;
        for (const guess of [undefined, { temperature: 3 }, { temperature: 1e3 }, { temperature: 1e8 }]) {
          const found = solve(matter, carbonOxygen, given, guess === undefined ? {} : { guess });
          expect(found.state).toEqual(cold);
          expect(found.residual).toBe(0);
          expect(found.conditionNumber).toEqual({ density: 0, temperature: Number.POSITIVE_INFINITY });
          expect(found.uncertainty.temperature).toBe(Number.POSITIVE_INFINITY);
        }
        // One unit in the last place is rounding; a few more are not, on either side.
        const unit = 2 ** -52 * Math.abs(cold[name]);
        expect(solve(matter, carbonOxygen, { ...given, [name]: cold[name] - unit } as Given).state.temperature).toBe(0);
        const below = { ...given, [name]: cold[name] - 1e-14 * Math.abs(cold[name]) } as Given;
        expect(refusal(() => solve(matter, carbonOxygen, below)).code).toBe("below-cold");
        const above = { ...given, [name]: cold[name] * (1 + 1e-9) } as Given;
        expect(solve(matter, carbonOxygen, above).state.temperature).toBeGreaterThan(1);
      }
    },
  );

  test("columns: cold rows have T = 0 and do not spoil the row after them", () => {
    const density = Float64Array.of(1e6, 1e6, 1.01e6, 1.01e6);
    const warm = matter.state(1e6, 1e7, carbonOxygen);
    const cold = matter.state(1.01e6, 0, carbonOxygen);
    const specificEnergy = Float64Array.of(
      warm.specificEnergy,
      matter.state(1e6, 0, carbonOxygen).specificEnergy,
      cold.specificEnergy,
      matter.state(1.01e6, 1e7, carbonOxygen).specificEnergy,
    );
    const temperature = new Float64Array(4);
    const temperatureConditionNumber = new Float64Array(4);
    const pressure = new Float64Array(4);
    const given = { composition: carbonOxygen, density, specificEnergy };
    solveColumns(matter, given, { temperature, temperatureConditionNumber, pressure });
    expect([...temperature].map((t) => Math.round(t / 1e4))).toEqual([1000, 0, 0, 1000]);
    expect([...temperatureConditionNumber].map(Number.isFinite)).toEqual([true, false, false, true]);
    expect(temperature[1]).toBe(0);
    expect(pressure[2]).toBe(cold.pressure);
  });

  test("an ideal plasma knows no T = 0: the limit is that of its lowest temperature", () => {
    const ideal = combine(electronPositronGas(), idealIons(), radiation());
    const error = refusal(() => solve(ideal, carbonOxygen, { density: 1e6, specificEnergy: 1e15 }));
    expect(error.code).toBe("no-solution");
    expect(error.limit).toBe(ideal.state(1e6, ideal.domain.temperature[0], carbonOxygen).specificEnergy);
  });

  test("entropy below that of the lowest temperature, energy above that of the highest, pressure below that of photons", () => {
    const low = refusal(() => solve(matter, carbonOxygen, { density: 1e6, specificEntropy: -1 }));
    expect(low.code).toBe("no-solution");
    expect(low.limit).toBeGreaterThan(0);
    const high = refusal(() => solve(matter, carbonOxygen, { density: 1e6, specificEnergy: 1e40 }));
    expect(high.limit).toBe(matter.state(1e6, 1e13, carbonOxygen).specificEnergy);
    const thin = refusal(() => solve(matter, carbonOxygen, { temperature: 1e8, pressure: 1e10 }));
    expect(thin.limit).toBeCloseTo(matter.state(1e-20, 1e8, carbonOxygen).pressure, -5);
  });

  test("pairs that contradict each other", () => {
    for (const given of [
      { pressure: 1e22, specificEnergy: -1e30 },
      { pressure: 1e22, specificEnthalpy: 1e5 },
      { pressure: 1e40, specificEntropy: 1 },
      { specificEntropy: 1e20, specificEnergy: 1 },
    ]) {
      expect(refusal(() => solve(matter, carbonOxygen, given)).code).toBe("no-solution");
    }
  });
});

test("whatever is asked: a state with what was given, or a typed error, in a bounded number of evaluations", () => {
  const counter = counting();
  const spread = (low: number, high: number) => fc.double({ min: low, max: high, noNaN: true }).map((x) => 10 ** x);
  const values = {
    density: spread(-22, 20),
    temperature: spread(-1, 14),
    pressure: spread(-5, 45),
    specificEnergy: fc.oneof(
      spread(0, 40),
      spread(0, 20).map((x) => -x),
    ),
    specificEntropy: fc.oneof(
      spread(0, 25),
      spread(0, 10).map((x) => -x),
    ),
    specificEnthalpy: spread(0, 40),
  };
  let answered = 0;
  fc.assert(
    fc.property(fc.constantFrom(...pairs), fc.record(values), ([first, second], all) => {
      const given = { [first]: all[first], [second]: all[second] } as object as Given;
      counter.reset();
      try {
        const { state, residual, evaluations } = solve(counter.eos, carbonOxygen, given);
        expect(evaluations).toBe(counter.count());
        expect(residual).toBeLessThan(1e-11);
        expect(state.density > 0 && state.temperature >= 0 && Number.isFinite(state.pressure)).toBe(true);
        answered++;
      } catch (error) {
        if (!isFermistateError(error)) throw error;
        expect(["no-solution", "below-cold", "outside-domain", "unstable", "out-of-range"]).toContain(error.code);
      }
      expect(counter.count()).toBeLessThan(20_000);
    }),
    { seed: 11, numRuns: 1500 },
  );
  expect(answered).toBeGreaterThan(100);
});

/** The full plasma with a term that adds nothing and counts how often it is asked. */
function counting(): { eos: EquationOfState; count(): number; reset(): void } {
  let calls = 0;
  const counter: Contribution = {
    name: "counter",
    domain: { density: [1e-20, 1e18], temperature: [1, 1e13], zeroTemperature: true },
    add: () => {
      calls++;
    },
  };
  const eos = combine(...matter.contributions, counter);
  return {
    eos,
    count: () => calls,
    reset: () => {
      calls = 0;
    },
  };
}

describe("columns", () => {
  const two = Float64Array.of(1e6, 1e6);

  test("the row of the first question without an answer; rows before it are written", () => {
    const { pressure } = matter.state(1e6, 1e7, carbonOxygen);
    const temperature = new Float64Array(2);
    const given = { composition: carbonOxygen, density: two, pressure: Float64Array.of(pressure, 1) };
    const error = refusal(() => solveColumns(matter, given, { temperature }));
    expect([error.code, error.index]).toEqual(["below-cold", 1]);
    expect(temperature[0] as number).toBeCloseTo(1e7, -2);
  });

  test("a column `refused` marks rows without an answer, leaves their outputs and goes on", () => {
    const { pressure } = matter.state(1e6, 1e7, carbonOxygen);
    const density = Float64Array.of(1e6, 1e6, 1e6, -1, 1e6, Number.NaN, 1e30);
    const given = Float64Array.of(pressure, 1, pressure, pressure, Number.POSITIVE_INFINITY, pressure, pressure);
    const temperature = new Float64Array(7).fill(-2);
    const refused = new Uint8Array(7);
    solveColumns(matter, { composition: carbonOxygen, density, pressure: given }, { temperature, refused });
    const codes = [...refused].map((reason) => refusalReasons[reason]?.code);
    const wrong = ["below-cold", undefined, "out-of-range", "not-a-number", "not-a-number", "outside-domain"];
    expect(codes).toEqual([undefined, ...wrong]);
    expect(temperature[1]).toBe(-2);
    expect(temperature[2] as number).toBeCloseTo(1e7, -2);
  });

  test.each<[string, object, object, string]>([
    ["refused", { density: two, pressure: two }, { refused: new Float64Array(2) }, "invalid-option"],
    ["short refused", { density: two, pressure: two }, { refused: new Uint8Array(1) }, "length-mismatch"],
    ["lengths", { density: two, pressure: Float64Array.of(1) }, {}, "length-mismatch"],
    ["NaN", { density: two, pressure: Float64Array.of(1e23, Number.NaN) }, {}, "not-a-number"],
    ["no column", { density: two, pressure: [1, 2] }, {}, "invalid-option"],
    ["short output", { density: two, pressure: two }, { gamma1: new Float64Array(1) }, "length-mismatch"],
    ["unknown output", { density: two, pressure: two }, { colour: new Float64Array(2) }, "unavailable-quantity"],
    ["no output", { density: two, pressure: two }, null as never, "invalid-option"],
    ["guess", { density: two, pressure: two, guess: 1 }, {}, "invalid-option"],
    [
      "guess length",
      { density: two, pressure: two, guess: { temperature: Float64Array.of(1) } },
      {},
      "length-mismatch",
    ],
  ])("%s", (_name, input, output, code) => {
    const error = refusal(() => solveColumns(matter, { composition: carbonOxygen, ...input } as never, output));
    expect(error.code).toBe(code);
  });

  test("compositions: as many as rows", () => {
    const input = { composition: [carbonOxygen], density: two, pressure: two };
    expect(refusal(() => solveColumns(matter, input, {})).code).toBe("length-mismatch");
  });

  test("a quantity that nobody provides", () => {
    const gas = combine(idealIons(), radiation());
    const { pressure } = gas.state(1, 1e6, carbonOxygen);
    const given = { composition: carbonOxygen, density: Float64Array.of(1), pressure: Float64Array.of(pressure) };
    const error = refusal(() => solveColumns(gas, given, { electronDegeneracy: new Float64Array(1) }));
    expect([error.code, error.index]).toEqual(["unavailable-quantity", 0]);
  });
});
