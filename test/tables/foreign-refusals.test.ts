/** Columns that are refused, with the row and the reason. */
import { describe, expect, test } from "vitest";
import { isFermistateError } from "../../src/errors.js";
import { composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import {
  type ColumnsOptions,
  columnsReportText,
  equationOfStateFromColumns,
  type StateColumns,
} from "../../src/tables/index.js";
import { columnsOf, idealGas, type Row, rowsOf, steps } from "./foreign-rows.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const at = (rho: number, t: number): Row => idealGas(rho, t, 0);
const rows = rowsOf(steps(1e-2, 1e2, 7), steps(1e5, 1e7, 6), at);
const columns = columnsOf(rows);
const options: ColumnsOptions = { composition: core };

function errorWith(given: unknown, how: unknown): unknown {
  try {
    equationOfStateFromColumns(given as StateColumns, how as ColumnsOptions);
  } catch (error) {
    return error;
  }
  return undefined;
}

const errorOf = (given: unknown): unknown => errorWith(given, options);

/** Columns with one value changed. */
const with1 = (name: keyof Row, index: number, value: number) => ({
  ...columns,
  [name]: columns[name].map((x, i) => (i === index ? value : x)),
});
/** Rows that pass a filter. */
const only = (keep: (row: Row, index: number) => boolean) => columnsOf(rows.filter(keep));

describe("columns", () => {
  const wrong: readonly (readonly [string, unknown, string, string, number?])[] = [
    ["none", undefined, "invalid-option", "columns"],
    ["null", null, "invalid-option", "columns"],
    ["a stranger", { ...columns, colour: [1] }, "invalid-option", "columns"],
    ["no pressure", { ...columns, pressure: undefined }, "invalid-option", "pressure"],
    ["text", { ...columns, pressure: "1, 2, 3" }, "invalid-option", "pressure"],
    ["text in a column", { ...columns, pressure: columns.pressure.map(String) }, "not-a-number", "pressure", 0],
    ["lengths", { ...columns, pressure: columns.pressure.slice(1) }, "length-mismatch", "pressure"],
    ["entropy too short", { ...columns, specificEntropy: [1] }, "length-mismatch", "specificEntropy"],
    [
      "too many rows",
      Object.fromEntries(Object.keys(columns).map((name) => [name, new Array(1_000_001)])),
      "too-large",
      "columns",
    ],
    ["a hole", { ...columns, density: new Array(42) }, "not-a-number", "density", 0],
    ["NaN", with1("pressure", 5, Number.NaN), "not-a-number", "pressure", 5],
    ["infinity", with1("specificEnergy", 6, Number.POSITIVE_INFINITY), "not-a-number", "specificEnergy", 6],
    ["NaN entropy", with1("specificEntropy", 8, Number.NaN), "not-a-number", "specificEntropy", 8],
    ["negative density", with1("density", 4, -1), "out-of-range", "density", 4],
    ["temperature 0", with1("temperature", 3, 0), "out-of-range", "temperature", 3],
    ["negative pressure", with1("pressure", 41, -1), "out-of-range", "pressure", 41],
    ["no rows", only(() => false), "invalid-option", "columns"],
    ["4 densities", only((row) => row.density < 3), "invalid-option", "columns"],
    ["4 temperatures", only((row) => row.temperature < 2e6), "invalid-option", "columns"],
    ["rows that share no density", only((_, i) => i % 7 === 0), "invalid-option", "columns"],
    ["no common temperatures", only((row) => row.density > 1 === row.temperature > 2e6), "invalid-option", "columns"],
    [
      "two values of one state",
      columnsOf([...rows, { ...rows[9]!, pressure: 1.1 * rows[9]!.pressure }]),
      "invalid-option",
      "columns",
      42,
    ],
  ];
  test.each(wrong)("%s", (_name, given, code, argument, index) => {
    const error = errorOf(given);
    expect(isFermistateError(error), String(error)).toBe(true);
    expect(error).toMatchObject({ code, argument, ...(index === undefined ? {} : { index }) });
  });

  test("values near the end of the numbers still make typed errors or states", () => {
    for (const factor of [1e-280, 1e280]) {
      const error = errorOf({ ...columns, pressure: columns.pressure.map((x) => x * factor) });
      expect(error === undefined || isFermistateError(error), String(error)).toBe(true);
    }
  });
});

describe("columns of unstable matter", () => {
  // Isotherms of van der Waals 1873 (law of corresponding states), critical point at 1 g/cm^3 and 1e6 K: they fall within the loop.
  const k = 1e8;
  const loop = rowsOf(steps(0.1, 2, 25), steps(8e5, 2e6, 9), (rho, t) => ({
    density: rho,
    temperature: t,
    pressure: (k * rho * t) / (1 - rho / 3) - (9 / 8) * k * 1e6 * rho * rho,
    specificEnergy: 1.5 * k * t - (9 / 8) * k * 1e6 * rho,
    specificEntropy: k * Math.log((t ** 1.5 * (1 - rho / 3)) / rho) + 1e9,
  })).map((row) => ({ ...row, pressure: Math.max(row.pressure, 1e10) }));
  const given = columnsOf(loop);

  test("refused, with the place", () => {
    expect(errorOf(given)).toMatchObject({ code: "unstable", argument: "columns" });
    expect(String(errorOf(given))).toMatch(/first .* g\/cm\^3, 8/);
  });

  test("reported on request; a state there is refused by itself", () => {
    const { equationOfState, report } = equationOfStateFromColumns(given, { ...options, unstable: "report" });
    const [density, temperature] = [report.unstable.density[0]!, report.unstable.temperature[0]!];
    expect(report.stability.densityExponent.density.length).toBeGreaterThan(10);
    expect(report.stability.pressureAlongDensity.density.length).toBeGreaterThan(10);
    expect(report.stability.heatCapacityV.density.length).toBe(0);
    // Spinodal of the law: T = 1e6 rho (3 - rho)^2/4 K; all nodes found lie below it, but for a step of the mesh.
    report.stability.densityExponent.density.forEach((rho, i) => {
      const spinodal = (1e6 * rho * (3 - rho) ** 2) / 4;
      expect(report.stability.densityExponent.temperature[i]!).toBeLessThan(1.1 * spinodal);
    });
    expect(() => equationOfState.state(density, temperature, core)).toThrow(/stable matter/);
    expect(equationOfState.state(0.3, 1.8e6, core).pressure).toBeGreaterThan(0);
    expect(columnsReportText(report)).toMatch(/not stable, and refuses to answer, at/);
  });

  test("energy that does not rise cannot give an entropy", () => {
    const { specificEntropy: _, ...rest } = columns;
    const flat = { ...rest, specificEnergy: rest.specificEnergy.map(() => 1e15) };
    expect(errorOf(flat)).toMatchObject({ code: "unstable", argument: "specificEnergy" });
  });
});

describe("options", () => {
  const wrong: readonly (readonly [unknown, string, string])[] = [
    [undefined, "invalid-option", "options"],
    [null, "invalid-option", "options"],
    [{}, "invalid-composition", "composition"],
    [{ ...options, colour: 1 }, "invalid-option", "options"],
    [{ ...options, name: "" }, "invalid-option", "name"],
    [{ ...options, beside: "radiation" }, "invalid-option", "beside"],
    [{ ...options, beside: [{}] }, "invalid-option", "contributions"],
    [{ ...options, unstable: "ignore" }, "invalid-option", "unstable"],
    [{ ...options, entropyAtLowestNode: 1 }, "invalid-option", "entropyAtLowestNode"],
    [{ ...options, entropyAtLowestNode: Number.NaN }, "not-a-number", "entropyAtLowestNode"],
    // The columns hold no photons.
    [{ ...options, beside: [radiation()] }, "out-of-range", "pressure"],
  ];
  test.each(wrong)("%j", (how, code, argument) => {
    const error = errorWith(columns, how);
    expect(isFermistateError(error), String(error)).toBe(true);
    expect(error).toMatchObject({ code, argument });
  });
});

describe("what the equation of state refuses", () => {
  const { equationOfState: eos } = equationOfStateFromColumns(columns, options);

  test("another composition; an equal one made anew passes", () => {
    expect(() => eos.state(1, 1e6, composition({ C12: 0.4, O16: 0.6 }))).toThrow(
      /C12 0.4 instead of 0.5.*the one composition of these columns/,
    );
    expect(eos.state(1, 1e6, composition({ O16: 0.5, C12: 0.5 })).pressure).toBe(eos.state(1, 1e6, core).pressure);
  });

  test("outside the mesh; its corners are inside", () => {
    expect(() => eos.state(0.99e-2, 1e6, core)).toThrow(/given columns/);
    expect(() => eos.state(1, 1.01e7, core)).toThrow(/given columns/);
    expect(() => eos.state(1, 0, core)).toThrow(/given columns/);
    for (const rho of eos.domain.density) {
      for (const t of eos.domain.temperature) {
        const { pressure } = at(rho, t);
        expect(Math.abs(eos.state(rho, t, core).pressure / pressure - 1)).toBeLessThan(1e-3);
      }
    }
  });

  test("composition derivatives and chemical potentials, which columns of one composition do not hold", () => {
    const evaluator = eos.evaluator();
    evaluator.point[0] = 1;
    evaluator.point[1] = 1e6;
    evaluator.fillMembers(core, 2);
    expect(() => evaluator.fillSpecies(core, new Float64Array(8))).toThrow(/composition derivatives/);
    expect(eos.state(1, 1e6, core).electronChemicalPotential).toBeUndefined();
  });
});
