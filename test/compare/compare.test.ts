/**
 * Comparisons: of equations of state whose difference is known beforehand, because the second is the first with a change made
 * on purpose; and of the ideal with the interacting plasma, against the published size of that effect.
 */
import {
  type Composition,
  combine,
  composition,
  type EquationOfState,
  electronPositronGas,
  FermistateError,
  idealIons,
  isFermistateError,
  radiation,
  type State,
  whiteDwarfMatter,
} from "fermistate";
import {
  type CompareOptions,
  type Comparison,
  type ConsistencyName,
  compare,
  comparisonCsv,
  comparisonJson,
  comparisonMap,
  comparisonSummary,
  comparisonText,
} from "fermistate/compare";
import { logarithmicAxis } from "fermistate/grids";
import { describe, expect, test } from "vitest";

const core = composition({ C12: 0.5, O16: 0.5 });
const matter = whiteDwarfMatter();
const ideal = combine(electronPositronGas(), idealIons(), radiation());

/** An equation of state whose states are changed on the way. */
const changed = (of: EquationOfState, change: (state: State) => Partial<State>): EquationOfState => ({
  ...of,
  state: (density, temperature, mixture) => {
    const state = of.state(density, temperature, mixture);
    return { ...state, ...change(state) } as State;
  },
});
const region = (options: Partial<CompareOptions> = {}): CompareOptions => ({
  composition: core,
  density: logarithmicAxis({ from: 1e4, to: 1e9, points: 9 }),
  temperature: logarithmicAxis({ from: 3e6, to: 5e9, points: 7 }),
  ...options,
});
const check = (found: Comparison, of: 0 | 1, name: ConsistencyName) =>
  found.consistency[of].find((one) => one.name === name)!;
const quantity = (found: Comparison, name: string) => found.quantities.find((one) => one.name === name)!;

describe("the same twice", () => {
  const found = compare(matter, whiteDwarfMatter(), region());

  test("differs by nothing, jumps nowhere, refuses nothing", () => {
    for (const one of found.quantities) {
      expect([one.largest, one.percentile99, one.median, one.points]).toEqual([0, 0, 0, 63]);
      expect(one.worst).toEqual([]);
    }
    expect([found.jumps, found.signs, found.offsets]).toEqual([[], [], []]);
    expect(found.refusals).toMatchObject({ both: 63, onlyFirst: 0, onlySecond: 0, none: 0 });
    expect(comparisonSummary(found)[0]).toBe("pressure is identical at every point.");
  });

  test("obeys thermodynamics at every point that could be measured, to what differences can see", () => {
    for (const one of found.consistency[0]) {
      expect([one.name, one.missed, one.largest]).toEqual([one.name, 0, 0]);
      expect(one.measured + one.unresolved).toBe(63);
      expect(one.measured).toBeGreaterThanOrEqual(60); // measured: 62 or 63; a step across the melting line says nothing
    }
    // Measured: 1e-12, 1e-10. Rounding over the step: what cannot be seen is said to be unseen.
    expect(check(found, 0, "pressure").resolution).toBeLessThan(4e-12);
    expect(check(found, 0, "maxwell").resolution).toBeLessThan(4e-10);
  });
});

describe("the ideal against the interacting plasma", () => {
  const found = compare(
    matter,
    ideal,
    region({
      density: logarithmicAxis({ from: 1e4, to: 1e9, points: 16 }),
      temperature: logarithmicAxis({ from: 1e6, to: 1e8, points: 9 }),
      quantities: ["pressure", "specificEntropy", "heatCapacityV"],
      names: ["plasma", "ideal"],
    }),
  );

  test("cold and relativistic, the difference is the classic Coulomb correction", () => {
    // Salpeter 1961, ApJ 134, 669, leading term of the ion sphere in the relativistic limit (from memory):
    // -P_C/P = (2^(5/3)/5) (3/pi)^(1/3) alpha <Z^(5/3)>/<Z> = 1.67 %. Zero-point motion, exchange and polarisation take
    // a tenth of it away here (measured: 8 %).
    const published =
      ((2 ** (5 / 3) / 5) * Math.cbrt(3 / Math.PI) * core.chargeMoments.fiveThirds) / core.meanCharge / 137.036;
    const dense = quantity(found, "pressure").difference[15]!; // 1e9 g/cm^3, 1e6 K
    expect(Math.abs(dense / published - 1)).toBeLessThan(0.1);
  });

  test("the pressure is 1 to 30 % too high", () => {
    const { difference, largest, median } = quantity(found, "pressure");
    expect(Math.min(...difference)).toBeGreaterThan(0.01);
    expect(largest).toBeLessThan(0.3);
    expect(median).toBeGreaterThan(0.015);
    for (const [row, one] of difference.entries()) {
      const { density, temperature } = {
        density: found.axes.density.values[row % 16]!,
        temperature: found.axes.temperature.values[Math.floor(row / 16)]!,
      };
      const expected =
        ideal.state(density, temperature, core).pressure / matter.state(density, temperature, core).pressure - 1;
      expect(Math.abs(one - expected)).toBeLessThan(4e-16);
    }
  });

  test("the worst places are local maxima, in order and apart, and say what rules there", () => {
    for (const { worst, difference } of found.quantities) {
      expect(Math.abs(worst[0]!.difference)).toBe(Math.max(...difference.map(Math.abs)));
      expect(worst.map((one) => Math.abs(one.difference))).toEqual(
        worst.map((one) => Math.abs(one.difference)).sort((p, q) => q - p),
      );
    }
    const [first] = quantity(found, "pressure").worst;
    expect(first).toMatchObject({ density: 1e4, region: "partial-ionisation" });
    expect(first?.kind).toContain("degenerate");
    const [coldest] = quantity(found, "heatCapacityV").worst;
    expect(coldest).toMatchObject({ region: "crystal", temperature: 1e6 });
    expect(quantity(found, "heatCapacityV").regions.map((one) => one.region)).toContain("melting-line");
  });

  test("the freezing of the first is a jump that the second has not", () => {
    const jump = found.jumps.find((one) => one.quantity === "specificEntropy")!;
    expect(jump.of).toBe("first");
    expect(jump.steps).toBeGreaterThan(3);
    // Where it was found the phase changes, and nowhere else; its size is the entropy of melting there.
    const beside = [0.999, 1.001].map((factor) => matter.state(jump.density, jump.temperature * factor, core));
    expect(beside.map((one) => one.crystalFraction)).toEqual([1, 0]);
    const [solid, liquid] = beside.map((one) => one.specificEntropy) as [number, number];
    expect(jump.size).toBeGreaterThan(0.2);
    expect(Math.abs(liquid / solid - 1)).toBeGreaterThan(0.2);
  });
});

describe("a change made on purpose is found, and its size", () => {
  test("a pressure that belongs to no free energy", () => {
    const wrong = changed(ideal, ({ pressure, density }) => ({
      pressure: pressure * (1 + 1e-4 * Math.sin(Math.log(density))),
    }));
    const found = compare(ideal, wrong, region({ quantities: ["pressure"], names: ["honest", "wrong"] }));
    const densities = found.axes.density.values;
    const bound = Math.max(...densities.map((rho) => Math.abs(1e-4 * Math.sin(Math.log(rho)))));
    expect(Math.abs(quantity(found, "pressure").largest / bound - 1)).toBeLessThan(1e-11);
    for (const one of found.consistency[0]) expect(one.missed).toBe(0);
    // P is off by that share of itself; so is rho^2 dF/drho seen from it.
    const { largest, missed, worst, residual } = check(found, 1, "pressure");
    expect(Math.abs(largest / (bound / (1 + bound)) - 1)).toBeLessThan(3e-4);
    expect(missed).toBe(63);
    expect(worst).toBeDefined();
    for (const [row, one] of residual.entries()) {
      const share = 1e-4 * Math.sin(Math.log(densities[row % densities.length]!));
      expect(Math.abs(one - Math.abs(share / (1 + share)))).toBeLessThan(1e-10); // measured 1e-12
    }
    for (const name of ["maxwell", "first-law-density", "densityExponent"] as const)
      expect(check(found, 1, name).missed).toBeGreaterThan(50);
    for (const name of ["entropy", "heatCapacityV", "first-law-temperature", "free-energy"] as const) {
      expect(check(found, 1, name).missed).toBe(0);
    }
    expect(comparisonText(found)).toMatch(/wrong misses P = rho\^2 dF\/drho at 63 of 63 points, by up to\s+9\.5e-5/);
  });

  test("claimed derivatives that do not belong to the values", () => {
    const wrong = changed(ideal, ({ densityExponent, heatCapacityV, gamma1 }) => ({
      densityExponent: densityExponent * 1.001,
      heatCapacityV: heatCapacityV * 0.99,
      gamma1: gamma1 * (1 + 1e-12),
    }));
    const found = compare(ideal, wrong, region({ quantities: ["pressure"] }));
    expect(quantity(found, "pressure").largest).toBe(0);
    expect(Math.abs(check(found, 1, "densityExponent").largest / (0.001 / 1.001) - 1)).toBeLessThan(1e-6);
    expect(Math.abs(check(found, 1, "heatCapacityV").largest / (0.01 / 0.99) - 1)).toBeLessThan(1e-5);
    for (const name of ["pressure", "entropy", "maxwell", "temperatureExponent"] as const)
      expect(check(found, 1, name).missed).toBe(0);
    expect(check(found, 1, "gamma1").missed).toBe(63);
  });

  test("other zeros of energy and entropy are a constant, taken out and told", () => {
    const shifted = changed(
      matter,
      ({ specificEnergy, specificEntropy, specificFreeEnergy, specificEnthalpy, temperature }) => ({
        specificEnergy: specificEnergy * (1 + 1e-6) + 9e17,
        specificEntropy: specificEntropy - 4e8,
        specificFreeEnergy: specificFreeEnergy + 9e17 + 4e8 * temperature,
        specificEnthalpy: specificEnthalpy + 9e17,
      }),
    );
    const quantities = ["specificEnergy", "specificEntropy", "specificFreeEnergy", "specificEnthalpy"] as const;
    const found = compare(matter, shifted, region({ quantities, consistency: false }));
    expect(found.offsets.map(({ name }) => name)).toEqual(["specificEnergy", "specificEntropy"]);
    expect(Math.abs(found.offsets[0]!.value / 9e17 - 1)).toBeLessThan(1e-6);
    expect(Math.abs(found.offsets[1]!.value / -4e8 - 1)).toBeLessThan(1e-9);
    expect(quantity(found, "specificEnergy").median).toBeLessThan(1e-5);
    expect(quantity(found, "specificEntropy").largest).toBeLessThan(1e-8); // rounding of the constant in a small entropy
    expect(comparisonSummary(found).join("\n")).toContain(
      "specificEnergy of second has another zero: 9e17 erg/g above",
    );
    expect(found.consistency).toEqual([[], []]);
  });

  test("a real difference is not explained away by a constant", () => {
    expect(compare(matter, ideal, region({ consistency: false })).offsets).toEqual([]);
  });

  test("a step in one of the two, anywhere", () => {
    const edge = 2.5e7;
    const stepped = changed(ideal, ({ temperature, pressure }) => ({
      pressure: temperature > edge ? pressure * (1 + 1e-5) : pressure,
    }));
    const options = region({ quantities: ["pressure", "specificEntropy"], consistency: false });
    for (const [found, of] of [
      [compare(ideal, stepped, options), "second"],
      [compare(stepped, ideal, options), "first"],
    ] as const) {
      expect(found.jumps).toHaveLength(1);
      expect(found.jumps[0]).toMatchObject({ quantity: "pressure", of, steps: 9 });
      expect(Math.abs(found.jumps[0]!.size / 1e-5 - 1)).toBeLessThan(1e-4);
      expect(Math.abs(found.jumps[0]!.temperature / edge - 1)).toBeLessThan(1e-6);
    }
    const both = compare(
      stepped,
      changed(stepped, ({ temperature, pressure }) => ({ pressure: temperature > edge ? pressure * 1.01 : pressure })),
      options,
    );
    expect(both.jumps[0]).toMatchObject({ of: "both" });
  });

  test("signs of no stable matter, claimed or hidden in the values", () => {
    const unstable = changed(ideal, ({ density, pressure, specificEnergy, temperature, heatCapacityV }) => ({
      pressure: density > 1e8 ? (pressure * 1e10) / density ** 3 : pressure,
      heatCapacityV: temperature > 4e9 ? -heatCapacityV : heatCapacityV,
      specificEnergy: temperature < 4e6 ? -specificEnergy * temperature : specificEnergy,
    }));
    const found = compare(ideal, unstable, region({ quantities: ["pressure"] }));
    const of = (name: string) => found.signs.find((one) => one.quantity === name);
    expect(found.signs.every((one) => one.of === 1)).toBe(true);
    expect(of("heatCapacityV")).toMatchObject({ points: 9, worst: { temperature: 5e9 } });
    expect(of("measuredPressureByDensity")?.worst.density).toBeGreaterThan(1e8);
    expect(of("measuredHeatCapacity")).toMatchObject({ points: 9, worst: { temperature: 3e6 } });
    expect(of("pressure")).toBeUndefined();
    expect(comparisonText(found)).toContain("second has a negative heat capacity at constant volume at 9 points");
  });
});

describe("refusals are part of the result", () => {
  const choosy: EquationOfState = {
    ...ideal,
    state: (density, temperature, mixture) => {
      if (density > 1e8)
        throw new FermistateError("outside-domain", { argument: "density", given: density, allowed: "less" });
      if (temperature > 4e9) throw new RangeError("a foreign error");
      const state = ideal.state(density, temperature, mixture);
      return temperature < 4e6 ? { ...state, pressure: Number.NaN } : state;
    },
  };
  const found = compare(ideal, choosy, region({ quantities: ["pressure"] }));

  test("by code, with an example, and a map of who answers", () => {
    const { both, onlyFirst, onlySecond, none, codes, answers } = found.refusals;
    expect([both, onlyFirst, onlySecond, none]).toEqual([35, 28, 0, 0]);
    expect(codes[0]).toEqual([]);
    expect(codes[1].map(({ code, points }) => [code, points])).toEqual([
      ["outside-domain", 14],
      ["not-a-number", 7],
      ["other-error", 7],
    ]);
    expect(codes[1][0]?.example.density).toBeGreaterThan(1e8);
    expect(answers.filter((one) => one === 3)).toHaveLength(35);
    expect(quantity(found, "pressure")).toMatchObject({ points: 35, largest: 0 });
    expect(quantity(found, "pressure").difference.filter(Number.isNaN)).toHaveLength(28);
    expect(comparisonText(found)).toMatch(
      /28 of 63 points: first answers, second refuses \(outside-domain 14, such\s+as/,
    );
  });

  test("a quantity that is no number at some points is told, and nothing is claimed of it", () => {
    const holey = changed(ideal, ({ temperature }) => (temperature > 4e9 ? { densityExponent: Number.NaN } : {}));
    const some = compare(ideal, holey, region({ quantities: ["densityExponent"] }));
    expect(quantity(some, "densityExponent")).toMatchObject({ points: 54, largest: 0 });
    expect(check(some, 1, "densityExponent")).toMatchObject({ measured: 54, unresolved: 9, missed: 0 });
    expect(comparisonSummary(some).join("\n")).toContain(
      "densityExponent is no number, or not known to one of the two, at 9 points",
    );
  });

  test("nothing in common is said, and no map of it drawn", () => {
    const never: EquationOfState = {
      ...ideal,
      state: () => {
        throw new Error("never");
      },
    };
    const nothing = compare(ideal, never, region({ quantities: ["pressure"] }));
    expect(comparisonSummary(nothing)[0]).toBe("There is no point where both answer: nothing can be compared.");
    expect(comparisonText(nothing)).not.toMatch(/NaN|undefined|Infinity/);
    expect(() => comparisonMap(nothing, "pressure")).toThrow(/at least one finite value/);
  });
});

describe("forms", () => {
  const found = compare(matter, ideal, region({ quantities: ["pressure", "gamma1"], names: ["plasma", "ideal"] }));

  test("text fits 80 columns and holds no number that is none", () => {
    const text = comparisonText(found);
    for (const line of text.split("\n")) expect(line.length, line).toBeLessThanOrEqual(80);
    expect(text).not.toMatch(/NaN|undefined|Infinity|null/);
    expect(text).toContain("Comparison of plasma (a) and ideal (b)");
    expect(
      comparisonText(
        compare(matter, ideal, region({ quantities: ["pressure", "gamma1"], names: ["plasma", "ideal"] })),
      ),
    ).toBe(text);
  });

  test("JSON and CSV hold the maps", () => {
    const read = JSON.parse(comparisonJson(found));
    expect(read.quantities[0].difference).toEqual([...quantity(found, "pressure").difference]);
    expect(read.summary).toEqual(comparisonSummary(found));
    expect(read.consistency[1][0].residual).toHaveLength(63);
    const lines = comparisonCsv(found).split("\r\n");
    expect(lines[0]).toBe("density [g/cm^3],temperature [K],answers [1],pressure difference [1],gamma1 difference [1]");
    expect(lines).toHaveLength(65);
    expect(lines[1]!.split(",").map(Number)).toEqual([
      1e4,
      3e6,
      3,
      ...found.quantities.map((one) => one.difference[0]!),
    ]);
  });

  test("maps mark the worst places; a relation can be drawn too", () => {
    const svg = comparisonMap(found, "pressure");
    expect(svg).toContain("Pressure: ideal (b) against plasma (a)");
    expect(svg.match(/<circle /g)).toHaveLength(2 * quantity(found, "pressure").worst.length);
    const relation = comparisonMap(found, "pressure", { show: { of: "second", relation: "maxwell" }, width: 700 });
    expect(relation).toContain("ideal: by how much it misses ds/drho = -(dP/dT)/rho^2");
    expect(() => comparisonMap(found, "temperatureExponent")).toThrow(/a quantity that was compared: pressure, gamma1/);
  });

  test("T = 0, one density, one temperature", () => {
    const cold = compare(combine(electronPositronGas()), combine(electronPositronGas()), {
      composition: core,
      density: 1e6,
      temperature: [0, 1e7],
      quantities: ["pressure", "electronDegeneracy"],
    });
    expect(cold.quantities.map((one) => one.largest)).toEqual([0, 0]); // two infinities are equal
    expect(check(cold, 0, "pressure").measured).toBe(2);
    expect(check(cold, 0, "entropy").measured).toBe(1);
    expect(comparisonText(cold)).not.toMatch(/NaN/);
  });

  test("two compositions", () => {
    const helium = composition({ He4: 1 });
    const two = compare(
      ideal,
      ideal,
      region({ composition: [core, helium], quantities: ["pressure"], consistency: false }),
    );
    const [rho, t] = [two.axes.density.values[3]!, two.axes.temperature.values[2]!];
    const expected = ideal.state(rho, t, helium).pressure / ideal.state(rho, t, core).pressure - 1;
    expect(Math.abs(quantity(two, "pressure").difference[2 * 9 + 3]! - expected)).toBeLessThan(4e-16);
    expect(two.compositions).toEqual(["C12 0.5, O16 0.5", "He4"]);
  });
});

test("progress is reported after every row, and may stop", () => {
  const seen: number[] = [];
  compare(
    ideal,
    ideal,
    region({ quantities: ["pressure"], consistency: false, onProgress: (done, all) => seen.push(done / all) }),
  );
  expect(seen).toHaveLength(7);
  expect(seen.at(-1)).toBe(1);
  const stop = () => {
    throw new RangeError("enough");
  };
  expect(() => compare(ideal, ideal, region({ onProgress: stop }))).toThrow(new RangeError("enough"));
});

test.each<[string, Partial<Record<keyof CompareOptions | "other", unknown>> | null, string]>([
  ["no options", null, "invalid-option"],
  ["an unknown option", { other: 1 }, "invalid-option"],
  ["no composition", { composition: undefined }, "invalid-composition"],
  ["three compositions", { composition: [core, core, core] as unknown as Composition }, "invalid-option"],
  ["a negative density", { density: [-1, 1] }, "out-of-range"],
  ["density 0", { density: [0, 1] }, "out-of-range"],
  ["a density of NaN", { density: Number.NaN }, "not-a-number"],
  ["temperatures that fall", { temperature: [2, 1] }, "out-of-range"],
  ["an unknown quantity", { quantities: ["presure"] }, "unavailable-quantity"],
  ["a quantity twice", { quantities: ["pressure", "pressure"] }, "invalid-option"],
  ["one name", { names: ["a"] }, "invalid-option"],
  ["the same name twice", { names: ["a", "a"] }, "invalid-option"],
  ["consistency 1", { consistency: 1 }, "invalid-option"],
  ["progress into a text", { onProgress: "x" }, "invalid-option"],
  ["too many points", { maximumPoints: 62 }, "too-large"],
  ["a limit of NaN", { maximumPoints: Number.NaN }, "not-a-number"],
])("refuses %s", (_, options, code) => {
  let error: unknown;
  try {
    compare(ideal, ideal, (options === null ? null : region(options as Partial<CompareOptions>)) as CompareOptions);
  } catch (caught) {
    error = caught;
  }
  expect(isFermistateError(error) && error.code).toBe(code);
});

test("refuses what is no equation of state, and quantities that one never knows", () => {
  expect(() => compare({} as EquationOfState, ideal, region())).toThrow(/an equation of state/);
  const ions = combine(idealIons());
  const options = region({ quantities: ["electronDegeneracy"], consistency: false });
  expect(() => compare(ions, ideal, options)).toThrow(/first or second never does/);
});
