/** Wrong entries, wrong units and missing rows: found and named; clean columns are not blamed. */
import { describe, expect, test } from "vitest";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { sortedRows } from "../../src/tables/foreign/columns.js";
import { meshOf } from "../../src/tables/foreign/mesh.js";
import { outliersOf } from "../../src/tables/foreign/outliers.js";
import { type ColumnsOptions, columnsReportText, equationOfStateFromColumns } from "../../src/tables/index.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { columnsOf, idealGas, type Row, rowsOf, statesOf, steps } from "./foreign-rows.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const options: ColumnsOptions = { composition: core };
const matter = combine(electronPositronGas(), idealIons(), radiation());
const frozen = statesOf(whiteDwarfMatter(), core);
const kinds = {
  degenerate: (m: number, n: number) => rowsOf(steps(1e4, 1e8, m), steps(1e6, 3e8, n), statesOf(matter, core)),
  pairs: (m: number, n: number) => rowsOf(steps(1e2, 1e7, m), steps(1e8, 1e10, n), statesOf(matter, core)),
  freezing: (m: number, n: number) => rowsOf(steps(1e5, 1e9, m), steps(1e6, 1e8, n), frozen),
  photons: (m: number, n: number) => rowsOf(steps(1e-6, 1e2, m), steps(1e4, 1e7, n), idealGas),
  "ideal gas": (m: number, n: number) =>
    rowsOf(steps(1e-6, 1e2, m), steps(1e4, 1e7, n), (rho, t) => idealGas(rho, t, 0)),
  "both signs": (m: number, n: number) =>
    rowsOf(steps(1e-4, 1e2, m), steps(1e4, 1e7, n), (rho, t) => idealGas(rho, t, 0, -7e8)),
};
type Value = "pressure" | "specificEnergy" | "specificEntropy";

const printed = (rows: readonly Row[], digits: number): Row[] => {
  const round = (x: number): number => Number(x.toPrecision(digits));
  return rows.map((row) => ({
    ...row,
    pressure: round(row.pressure),
    specificEnergy: round(row.specificEnergy),
    specificEntropy: round(row.specificEntropy),
  }));
};
const changed = (rows: readonly Row[], index: number, name: Value, factor: number): Row[] =>
  rows.map((row, k) => (k === index ? { ...row, [name]: row[name] * factor } : row));
const found = (rows: readonly Row[]) => {
  const sorted = sortedRows(columnsOf(rows));
  return outliersOf(meshOf(sorted), sorted);
};

describe("clean columns are not blamed", () => {
  const cases = Object.entries(kinds).flatMap(([name, make]) =>
    [
      [61, 41],
      [31, 25],
      [13, 11],
      [7, 6],
    ].map(([m, n]) => [name, m!, n!, make(m!, n!)] as const),
  );
  test.each(cases)("%s on %d by %d nodes", (name, m, _n, rows) => {
    // Photons on steps of a factor 20 in density and 4 in temperature: no mesh resolves the change of regime there.
    const most = name === "photons" && m === 7 ? 2 : 0;
    // A corner of 61 by 41 and pairs on 31 by 25 in full digits: kinks of 1e-5 and 7e-5 that the mesh shows at one node.
    const kinks = (name === "freezing" && m === 61) || (name === "pairs" && m === 31) ? 3 : 0;
    expect(found(rows).length).toBeLessThanOrEqual(most + kinks);
    for (const { deviation } of found(rows)) if (kinks > 0) expect(Math.abs(deviation)).toBeLessThan(1e-4);
    for (const digits of [6, 4, 3]) expect(found(printed(rows, digits)).length).toBeLessThanOrEqual(most);
  });
});

describe("one wrong entry among 775 of six digits is the only one named", () => {
  const errors: readonly (readonly [Value, number])[] = [
    ["pressure", 1.05],
    ["specificEntropy", 1.02],
    ["pressure", 1.003],
    ["specificEnergy", 1.003],
  ];
  const rows = printed(kinds.degenerate(31, 25), 6);
  // Corners, edges, next to edges, inside.
  const places = [
    0,
    24,
    30 * 25,
    30 * 25 + 24,
    11,
    12 * 25,
    30 * 25 + 7,
    5 * 25 + 24,
    26,
    29 * 25 + 23,
    15 * 25 + 12,
    170,
  ];
  test.each(errors)("%s times %d", (name, factor) => {
    for (const index of places) {
      const outliers = found(changed(rows, index, name, factor));
      expect(outliers.map(({ row, column }) => [row, column])).toEqual([[index, name]]);
      expect(outliers[0]!.density).toBe(rows[index]!.density);
      expect(outliers[0]!.temperature).toBe(rows[index]!.temperature);
      // 31 by 25 nodes predict a value to a tenth of a percent, but for corners.
      expect(Math.abs(outliers[0]!.deviation - (factor - 1))).toBeLessThan(2e-3);
    }
  });

  test("several at a time, far from each other", () => {
    const given: readonly (readonly [number, Value, number])[] = [
      [4 * 25 + 5, "pressure", 1.05],
      [15 * 25 + 12, "pressure", 0.997],
      [16 * 25 + 13, "specificEntropy", 1.02],
      [26 * 25 + 20, "pressure", 1.003],
    ];
    const wrong = given.reduce<Row[]>((all, [index, name, factor]) => changed(all, index, name, factor), rows);
    const outliers = found(wrong).map(({ row, column }) => `${row} ${column}`);
    expect(outliers.sort()).toEqual(given.map(([index, name]) => `${index} ${name}`).sort());
  });

  test("report and text: rows of the input, whatever their order; the verdict does not explain them away", () => {
    const index = 15 * 25 + 12;
    const wrong = changed(rows, index, "pressure", 1.003).reverse();
    const { report } = equationOfStateFromColumns(columnsOf(wrong), options);
    expect(report.outliers!.map(({ row }) => row)).toEqual([774 - index]);
    const text = columnsReportText(report);
    expect(text.split("\n")[0]).toBe(
      `Verdict: one entry stands out from what the neighbours say: row ${774 - index} (pressure); mend or remove such rows.`,
    );
    expect(text).toMatch(new RegExp(`row ${774 - index}, .* pressure 0.3 % too high`));
    expect(text).not.toMatch(/explains\.$/m);
    const clean = equationOfStateFromColumns(columnsOf(rows), options).report;
    expect(clean.outliers).toEqual([]);
    expect(columnsReportText(clean).split("\n")[0]).toMatch(/no entry stands out/);
  });

  test("where the fit is refused as unstable, the likely entry is named", () => {
    const photons = printed(kinds["ideal gas"](31, 25), 6);
    const index = 15 * 25 + 12;
    for (const row of [index, 3]) {
      expect(() => equationOfStateFromColumns(columnsOf(changed(photons, row, "pressure", 3)), options)).toThrow(
        new RegExp(`likely wrong, for they stand out from their neighbours: row ${row} \\(pressure\\)`),
      );
    }
  });
});

describe("columns that contradict each other by order one", () => {
  const rows = kinds.degenerate(25, 21);
  const change = (how: (row: Row) => Partial<Row>) => columnsOf(rows.map((row) => ({ ...row, ...how(row) })));
  const log = Math.log10;
  const wrong: readonly (readonly [string, ReturnType<typeof columnsOf>])[] = [
    ["pressure times 1e5", change(({ pressure }) => ({ pressure: 1e5 * pressure }))],
    ["pressure in Pa", change(({ pressure }) => ({ pressure: 0.1 * pressure }))],
    ["energy in J/kg", change(({ specificEnergy }) => ({ specificEnergy: 1e-4 * specificEnergy }))],
    ["entropy in J/(kg K)", change(({ specificEntropy }) => ({ specificEntropy: 1e-4 * specificEntropy }))],
    ["density in kg/m^3", change(({ density }) => ({ density: 1e3 * density }))],
    ["temperature in keV", change(({ temperature }) => ({ temperature: temperature / 1.16e7 }))],
    ["logarithms", change(({ density, temperature }) => ({ density: log(density), temperature: log(temperature) }))],
    ["swapped", change(({ pressure, specificEnergy }) => ({ pressure: specificEnergy, specificEnergy: pressure }))],
  ];
  test.each(wrong)("%s: refused, or reported on request, verdict first", (name, columns) => {
    const call = (how: Partial<ColumnsOptions>) => equationOfStateFromColumns(columns, { ...options, ...how });
    for (const unstable of ["refuse", "report"] as const) {
      expect(() => call({ unstable })).toThrow(
        /columns that contradict each other by order one.*likely reasons: units/,
      );
    }
    const { report } = call({ unstable: "report", contradictory: "report" });
    expect(report.contradictions.length).toBeGreaterThan(0);
    expect(columnsReportText(report)).toMatch(
      /^These columns contradict each other by order one over most of the mesh/,
    );
    // Without entropy its column cannot be the reason, nor can a unit of temperature: only logarithms of it show in an energy.
    if (name.startsWith("entropy") || name.startsWith("temperature")) return;
    const { specificEntropy: _, ...rest } = columns;
    expect(() => equationOfStateFromColumns(rest, options)).toThrow(/contradict each other/);
  });

  test("all of them in SI agree with each other: nothing can tell", () => {
    const columns = change(({ density, pressure, specificEnergy, specificEntropy }) => ({
      density: 1e3 * density,
      pressure: 0.1 * pressure,
      specificEnergy: 1e-4 * specificEnergy,
      specificEntropy: 1e-4 * specificEntropy,
    }));
    expect(equationOfStateFromColumns(columns, options).report.contradictions).toEqual([]);
  });

  test("heat that three digits do not hold, and coarse meshes, are no contradiction", () => {
    const cold = rowsOf(steps(1e8, 1e10, 31), steps(1e5, 1e7, 25), statesOf(matter, core));
    for (const given of [printed(cold, 3), printed(cold, 6), printed(rows, 3), kinds.photons(7, 6)]) {
      const { report } = equationOfStateFromColumns(columnsOf(given), { ...options, unstable: "report" });
      expect(report.contradictions).toEqual([]);
    }
    const { report } = equationOfStateFromColumns(columnsOf(printed(cold, 3)), { ...options, unstable: "report" });
    expect(report.residuals.maxwell!.median).toBeGreaterThan(0.9);
    expect(columnsReportText(report)).toMatch(/printed with no more digits than that/);
  });
});

describe("a rectangle with gaps", () => {
  const rows = kinds.degenerate(25, 21);

  test("missing rows are named", () => {
    const lost = [100, 301];
    const { report } = equationOfStateFromColumns(columnsOf(rows.filter((_, k) => !lost.includes(k))), options);
    expect(report.arrangement).toBe("rectangular but for some rows");
    expect([...report.missing.density]).toEqual(lost.map((k) => rows[k]!.density));
    expect([...report.missing.temperature]).toEqual(lost.map((k) => rows[k]!.temperature));
    expect(report.strayRows).toEqual([]);
    expect(report.outliers).toBeUndefined();
    expect(columnsReportText(report)).toMatch(/2 rows of a rectangle are missing, at [\d.]+ g\/cm\^3, [\d.]+ K; /);
  });

  test("a wrong temperature is a missing row and a stray one", () => {
    const wrong = rows.map((row, k) => (k === 100 ? { ...row, temperature: 1.001 * row.temperature } : row));
    const { report } = equationOfStateFromColumns(columnsOf(wrong), options);
    expect([...report.missing.density]).toEqual([rows[100]!.density]);
    expect(report.strayRows).toEqual([100]);
    expect(columnsReportText(report)).toMatch(/1 row of a rectangle is missing.*temperatures of their own.*: 100/);
  });

  test("a whole mesh has none; scattered temperatures are no gaps", () => {
    const whole = equationOfStateFromColumns(columnsOf(rows), options).report;
    expect([whole.arrangement, whole.missing.density.length]).toEqual(["rectangular", 0]);
    const scattered = steps(1e-6, 1e2, 21).flatMap((rho, i) =>
      steps(1e4 * 1.01 ** i, 1e7, 30).map((t) => idealGas(rho, t, 0)),
    );
    const { report } = equationOfStateFromColumns(columnsOf(scattered), options);
    expect([report.arrangement, report.missing.density.length]).toEqual(["scattered in temperature", 0]);
  });
});
