/** Grids: the same bits as single states, order and names of the columns, everything refused before the first point. */

import fc from "fast-check";
import {
  combine,
  composition,
  type EquationOfState,
  electronPositronGas,
  FermistateError,
  type Finding,
  idealIons,
  isFermistateError,
  type QuantityName,
  quantities,
  quantityNames,
  radiation,
  regime,
  whiteDwarfMatter,
} from "fermistate";
import { type Grid, type GridOptions, grid, linearAxis, logarithmicAxis } from "fermistate/grids";
import { describe, expect, test } from "vitest";

const core = composition({ C12: 0.5, O16: 0.5 });
const matter = whiteDwarfMatter({ coulomb: false });
const small: GridOptions = {
  density: logarithmicAxis({ from: 1e-3, to: 1e11, points: 29 }),
  temperature: logarithmicAxis({ from: 1e4, to: 1e10, points: 13 }),
};

function errorOf(action: () => unknown): FermistateError {
  try {
    action();
  } catch (error) {
    if (isFermistateError(error)) return error;
    throw error;
  }
  throw new Error("nothing was thrown");
}

/** Every number of a grid against the state of its point, bit by bit. */
function expectStates(made: Grid, equationOfState: EquationOfState): void {
  const [temperatures, densities] = made.shape;
  for (let row = 0; row < made.rows; row++) {
    const density = made.axes.density.values[row % densities]!;
    const temperature = made.axes.temperature.values[Math.floor(row / densities)]!;
    const state = equationOfState.state(density, temperature, made.composition);
    for (const name of made.columnNames) {
      if (name === "findingsStrained" || name === "findingsOutside" || name === "refused") continue;
      if (Object.is(made.columns[name]![row], state[name])) continue;
      throw new Error(`${name} at ${density}, ${temperature}: ${made.columns[name]![row]} for ${state[name]}`);
    }
  }
  expect(made.rows).toBe(temperatures * densities);
}

describe("values", () => {
  test("all quantities are those of eos.state, to the last bit", () => {
    const made = grid(matter, core, { ...small, quantities: quantityNames });
    expect(made.columnNames).toEqual(["density", "temperature", ...quantityNames]);
    expectStates(made, matter);
  });

  test("beyond one chunk too, and at T = 0", () => {
    expectStates(
      grid(matter, core, { density: 1e6, temperature: linearAxis({ from: 1e6, to: 2e6, points: 9000 }) }),
      matter,
    );
    const cold = combine(electronPositronGas());
    const made = grid(cold, core, { density: [1e4, 1e6], temperature: [0, 1e6], quantities: quantityNames });
    expectStates(made, cold);
    expect(made.columns.electronDegeneracy?.[1]).toBe(Number.POSITIVE_INFINITY);
  });

  test("a single point, an isotherm, a single density", () => {
    expect(grid(matter, core, { density: 1e6, temperature: 1e7 }).shape).toEqual([1, 1]);
    expect(grid(matter, core, { density: [1, 2, 3], temperature: 1e7 }).shape).toEqual([1, 3]);
    expect(grid(matter, core, { density: 1e6, temperature: Float64Array.of(1e7, 1e8) }).shape).toEqual([2, 1]);
  });
});

describe("the full plasma", () => {
  const full = whiteDwarfMatter();

  test("all quantities are those of eos.state, across freezing and at T = 0", () => {
    const density = logarithmicAxis({ from: 1e4, to: 1e10, points: 25 });
    const made = grid(full, core, { density, temperature: [0, 1e6, 3e6, 1e7, 1e9], quantities: quantityNames });
    expectStates(made, full);
    expect(new Set(made.columns.crystalFraction)).toEqual(new Set([0, 1]));
    expect(made.ideal).toBe(false);
    expect(made.validity.join(" ")).toContain("Coulomb terms");
    expect(made.validity.join(" ")).not.toContain("Ideal plasma");
    expect(grid(matter, core, { density: 1e6, temperature: 1e7 }).validity.join(" ")).toContain("Ideal plasma");
  });

  test("a point that is no stable matter is named", () => {
    const first = errorOf(() => grid(full, core, { density: [10, 1e6], temperature: [1e5, 1e7] }));
    expect(first).toMatchObject({ code: "unstable", index: 0 });
    expect(first.allowed).toContain("at density 10 g/cm^3, temperature 100000 K");
    const later = errorOf(() => grid(full, core, { density: [1e-9, 10], temperature: [1e5, 1e7] }));
    expect(later).toMatchObject({ code: "unstable", index: 1 });
    expect(later.allowed).toContain("at density 10 g/cm^3, temperature 100000 K");
  });
});

describe("findings", () => {
  const mix = composition({ C12: 0.4, O16: 0.4, Fe56: 0.2 });
  const density = logarithmicAxis({ from: 1e4, to: 1e11, points: 40 });
  const temperature = [1e6, 1e7, 1e8, 1e9, 5e9, 1e10, 3e10, 1e11, 2e11]; // 360 rows: more than one chunk of them

  /** Counts by the documented rule, from `regime` itself. */
  function expected(made: Grid, judgeOf: (density: number, temperature: number) => readonly Finding[]) {
    const points: Record<string, { code: string; strained: number; outside: number }> = {};
    const [strained, outside]: [number[], number[]] = [[], []];
    for (let row = 0; row < made.rows; row++) {
      const found = judgeOf(made.columns.density[row]!, made.columns.temperature[row]!);
      strained.push(found.filter((one) => one.severity === "strained").length);
      outside.push(found.filter((one) => one.severity === "outside").length);
      const worst: Record<string, "strained" | "outside"> = {};
      for (const one of found) if (worst[one.code] !== "outside") worst[one.code] = one.severity;
      for (const [code, severity] of Object.entries(worst)) {
        points[code] ??= { code, strained: 0, outside: 0 };
        points[code][severity] += 1;
      }
    }
    return { strained, outside, points: Object.values(points) };
  }

  test.each([
    ["full", whiteDwarfMatter()],
    ["ideal", matter],
  ] as const)("are those of regime at every point: %s plasma", (kind, eos) => {
    const made = grid(eos, mix, { density, temperature, quantities: ["pressure"], findings: regime });
    expect(made.columnNames).toEqual(["density", "temperature", "pressure", "findingsStrained", "findingsOutside"]);
    expectStates(made, eos);
    const { strained, outside, points } = expected(made, (rho, t) => {
      return regime(rho, t, mix, { equationOfState: eos }).findings;
    });
    expect([...made.columns.findingsStrained!]).toEqual(strained);
    expect([...made.columns.findingsOutside!]).toEqual(outside);
    expect(made.findings).toEqual(points);
    expect(Math.max(...outside)).toBeGreaterThan(1); // captures of several nuclides at one point, counted one by one
    expect(points.some(({ code }) => code === "ideal-ions-degenerate")).toBe(kind === "ideal");
    expect(made.units).toMatchObject({ findingsStrained: "1", findingsOutside: "1" });
    for (const part of [made.findings, made.findings?.[0]]) expect(Object.isFrozen(part)).toBe(true);
  });

  test("take the phase of the equation of state, forced or by its melting coupling", () => {
    const at = { density: 1e6, temperature: 1e8, findings: regime }; // far above melting
    const forced = grid(whiteDwarfMatter({ coulomb: { phase: "crystal" } }), core, at);
    expect(forced.findings?.map(({ code }) => code)).toContain("superheated-crystal");
    expect(grid(whiteDwarfMatter(), core, at).findings?.map(({ code }) => code)).not.toContain("superheated-crystal");
  });

  test("are absent unless asked for, none where nothing is strained, and count in the limit of cells", () => {
    const at = { density: 2e6, temperature: 1e7 };
    const full = whiteDwarfMatter();
    expect(grid(full, core, at).findings).toBeUndefined();
    expect(grid(full, core, { ...at, findings: regime }).findings).toEqual([]);
    expect(errorOf(() => grid(full, core, { ...at, findings: regime, maximumCells: 13 })).code).toBe("too-large");
    expect(grid(full, core, { ...at, findings: regime, maximumCells: 14 }).rows).toBe(1);
    const wrong = { ...at, findings: true } as unknown as GridOptions;
    expect(errorOf(() => grid(full, core, wrong))).toMatchObject({ code: "invalid-option", argument: "findings" });
  });
});

describe("description", () => {
  const made = grid(matter, core, small);

  test("default quantities, units, order, what it is made of", () => {
    expect(made.columnNames).toEqual([
      "density",
      "temperature",
      "pressure",
      "specificEnergy",
      "specificEntropy",
      "heatCapacityV",
      "densityExponent",
      "temperatureExponent",
      "gamma1",
      "adiabaticGradient",
      "soundSpeed",
      "electronDegeneracy",
    ]);
    expect(made.units).toMatchObject({ density: "g/cm^3", temperature: "K", pressure: "dyn/cm^2", gamma1: "1" });
    expect(made.order).toEqual(["temperature", "density"]);
    expect(made.contributions).toEqual(["electrons and positrons", "ideal ions", "radiation"]);
    expect(made.composition).toBe(core);
    expect(made.domain).toBe(matter.domain);
    expect(made.equationOfState).toBe(matter.name);
  });

  test("the grid is frozen throughout, the arrays of numbers excepted", () => {
    for (const part of [made, made.shape, made.order, made.axes, made.columnNames, made.columns, made.units]) {
      expect(Object.isFrozen(part)).toBe(true);
    }
  });

  test("without electrons the default leaves their quantities out, and by name they are refused", () => {
    const hot = combine(idealIons(), radiation());
    expect(grid(hot, core, { density: 1, temperature: 1e6 }).columnNames).not.toContain("electronDegeneracy");
    const ask = () => grid(hot, core, { density: 1, temperature: 1e6, quantities: ["positronDensity"] });
    expect(errorOf(ask)).toMatchObject({ code: "unavailable-quantity", given: "positronDensity" });
  });
});

test("progress counts up to all points", () => {
  const seen: [number, number][] = [];
  const axis = linearAxis({ from: 1e6, to: 2e6, points: 10000 });
  grid(matter, core, {
    density: 1e6,
    temperature: axis,
    quantities: ["pressure"],
    onProgress: (...two) => seen.push(two),
  });
  expect(seen.length).toBeGreaterThan(1);
  expect(seen.at(-1)).toEqual([10000, 10000]);
  expect(seen.every(([done], i) => i === 0 || done > seen[i - 1]![0])).toBe(true);
});

describe("refusals", () => {
  /** An equation of state that must not be asked for numbers. */
  const untouchable: EquationOfState = {
    ...matter,
    evaluate: () => {
      throw new Error("evaluated");
    },
  };

  test.each([
    ["no equation of state", { density: 1, temperature: 1e7 }, "invalid-option", "equationOfState", {}],
    ["a density outside", { density: [1, 1e19], temperature: 1e7 }, "outside-domain", "density"],
    ["zero density", { density: [0, 1], temperature: 1e7 }, "out-of-range", "density"],
    ["a negative density", { density: -1, temperature: 1e7 }, "out-of-range", "density"],
    ["a temperature outside", { density: 1, temperature: [0.5, 1e7] }, "outside-domain", "temperature"],
    ["T = 0 with ions", { density: 1, temperature: [0, 1e7] }, "outside-domain", "temperature"],
    ["NaN", { density: Number.NaN, temperature: 1e7 }, "not-a-number", "density"],
    ["a text for a temperature", { density: 1, temperature: "hot" }, "invalid-option", "temperature"],
    ["no temperature", { density: 1 }, "invalid-option", "temperature"],
    ["an unknown option", { density: 1, temperature: 1e7, densities: 3 }, "invalid-option", "options"],
    ["null", null, "invalid-option", "options"],
    ["no quantity", { density: 1, temperature: 1e7, quantities: [] }, "invalid-option", "quantities"],
    [
      "a quantity twice",
      { density: 1, temperature: 1e7, quantities: ["temperatureExponent", "temperatureExponent"] },
      "invalid-option",
      "quantities",
    ],
    [
      "an unknown quantity",
      { density: 1, temperature: 1e7, quantities: ["gama1"] },
      "unavailable-quantity",
      "quantities",
    ],
    [
      "an inherited name",
      { density: 1, temperature: 1e7, quantities: ["toString"] },
      "unavailable-quantity",
      "quantities",
    ],
    ["no function", { density: 1, temperature: 1e7, onProgress: 3 }, "invalid-option", "onProgress"],
    ["an unlimited limit", { density: 1, temperature: 1e7, maximumPoints: Infinity }, "not-a-number", "maximumPoints"],
    ["a limit of none", { density: 1, temperature: 1e7, maximumPoints: 0 }, "out-of-range", "maximumPoints"],
    ["too many points", { density: [1, 2, 3], temperature: [1e7, 1e8], maximumPoints: 5 }, "too-large", "points"],
    ["too many cells", { density: [1, 2, 3], temperature: [1e7, 1e8], maximumCells: 71 }, "too-large", "points"],
    [
      "more than the default limit",
      {
        density: linearAxis({ from: 1, to: 2, points: 5001 }),
        temperature: linearAxis({ from: 1, to: 2, points: 2000 }),
      },
      "too-large",
      "points",
    ],
  ] as [string, unknown, string, string, EquationOfState?][])(
    "%s",
    (_, options, code, argument, other = untouchable) => {
      const error = errorOf(() => grid(other, core, options as GridOptions));
      expect([error.code, error.argument]).toEqual([code, argument]);
    },
  );

  test("a composition that is none", () => {
    expect(errorOf(() => grid(untouchable, { ...core }, small)).code).toBe("invalid-composition");
  });

  test("an unknown quantity gets the nearest name", () => {
    const error = errorOf(() => grid(matter, core, { ...small, quantities: ["gama1" as QuantityName] }));
    expect(error.allowed).toMatch(/^perhaps gamma1; one of pressure, /);
  });

  test("the limits themselves are allowed", () => {
    const options = { density: [1, 2, 3], temperature: [1e7, 1e8], maximumPoints: 6, maximumCells: 72 };
    expect(grid(matter, core, options).rows).toBe(6);
  });

  test("a point that fails inside the domain is named with its row", () => {
    const failing: EquationOfState = {
      ...matter,
      evaluate(input, output) {
        const index = input.temperature.indexOf(1e8);
        const details = { argument: "pressure", given: 0, allowed: "a sum that resists compression", index };
        if (index >= 0) throw new FermistateError("outside-domain", details);
        matter.evaluate(input, output);
      },
    };
    const density = linearAxis({ from: 1, to: 2, points: 5000 });
    const error = errorOf(() => grid(failing, core, { density, temperature: [1e7, 1e8] }));
    expect(error).toMatchObject({ code: "outside-domain", index: 5000, argument: "pressure" });
    expect(error.allowed).toContain("at density 1 g/cm^3, temperature 100000000 K");
  });

  test("a NaN of a foreign equation of state is an error, not a number of the grid", () => {
    const foreign: EquationOfState = {
      ...matter,
      evaluate(input, output) {
        matter.evaluate(input, output);
        output.pressure![1] = Number.NaN;
      },
    };
    expect(errorOf(() => grid(foreign, core, { density: [1, 2], temperature: 1e7 }))).toMatchObject({
      code: "not-a-number",
      argument: "pressure",
      index: 1,
    });
  });
});

test("any argument gives a grid without NaN or a typed error", () => {
  const good = fc.double({ min: 1, max: 1e12, noNaN: true });
  const number = fc.oneof(
    { weight: 4, arbitrary: good },
    fc.double(),
    fc.constantFrom(0, -0, 1e-20, 1e18, 1e13, 5e-324),
  );
  const rising = fc.uniqueArray(good, { minLength: 1, maxLength: 5 }).map((list) => list.sort((a, b) => a - b));
  const axis = fc.oneof(
    { weight: 3, arbitrary: number },
    { weight: 3, arbitrary: rising },
    fc.array(number),
    fc.anything(),
  );
  const options = fc.record(
    {
      density: axis,
      temperature: axis,
      quantities: fc.oneof({ weight: 5, arbitrary: fc.subarray([...quantityNames], { minLength: 1 }) }, fc.anything()),
      maximumPoints: fc.oneof({ weight: 5, arbitrary: fc.constant(1000) }, fc.anything()),
    },
    { requiredKeys: ["density", "temperature"] },
  );
  let made = 0;
  fc.assert(
    fc.property(options, (given) => {
      let result: Grid;
      try {
        result = grid(matter, core, given as GridOptions);
      } catch (error) {
        expect(isFermistateError(error), String(error)).toBe(true);
        return;
      }
      made += 1;
      for (const name of result.columnNames) expect(result.columns[name]!.some(Number.isNaN), name).toBe(false);
    }),
    { seed: 20260102, numRuns: 3000 },
  );
  expect(made).toBeGreaterThan(100); // the property is about both outcomes
});

test("every quantity has a unit and a meaning to put into files", () => {
  for (const name of quantityNames)
    expect(quantities[name].unit.length * quantities[name].description.length).toBeGreaterThan(0);
});
