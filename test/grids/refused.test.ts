/**
 * Grids that keep their rows without a state: each row against a single state of the same point, the forms against what their
 * formats say of missing values (CSV on the Web, 2015: an empty field is null; RFC 8259: null).
 */

import {
  combine,
  composition,
  electronPositronGas,
  isFermistateError,
  quantities,
  radiation,
  refusalReasons,
  regime,
  whiteDwarfMatter,
} from "fermistate";
import { chartGrid } from "fermistate/charts";
import {
  arraysFromNpz,
  type Grid,
  type GridOptions,
  grid,
  gridToCsv,
  gridToCsvMetadata,
  gridToJson,
  gridToNpz,
  logarithmicAxis,
} from "fermistate/grids";
import { gridToParquet } from "fermistate/table-files";
import { parquetReadObjects } from "hyparquet";
import { describe, expect, test } from "vitest";
import { readCsv } from "./csv-reader.js";
import { complaintsAbout } from "./csvw.js";

const carbon = composition({ C12: 1 });
const matter = whiteDwarfMatter();
const asked: GridOptions = {
  density: logarithmicAxis({ from: 1e-6, to: 1e3, pointsPerDecade: 1 }),
  temperature: [1e3, 1e7],
  quantities: ["pressure", "gamma1", "electronDegeneracy"],
};
const kept = grid(matter, carbon, { ...asked, refused: "keep" });
const isRefused = (made: Grid, row: number): boolean => made.columns.refused![row] !== 0;
const rowsOf = (made: Grid): number[] => Array.from({ length: made.rows }, (_, row) => row);

describe("the grid", () => {
  test("is an error that names the row unless rows are kept", () => {
    for (const options of [asked, { ...asked, refused: "throw" as const }]) {
      expect(() => grid(matter, carbon, options)).toThrow(/row 0.*for stable matter/s);
    }
    const { refused, ...columns } = grid(matter, carbon, { ...asked, density: [1e4], temperature: [1e7] }).columns;
    expect(refused).toBeUndefined();
    expect(Object.keys(columns)).toHaveLength(5);
  });

  test("has in each row what a single state says there, or the reason", () => {
    expect(kept.columnNames).toEqual(["density", "temperature", ...asked.quantities!, "refused"]);
    let count = 0;
    for (const row of rowsOf(kept)) {
      const { density, temperature, pressure, gamma1, electronDegeneracy, refused } = kept.columns;
      try {
        const state = matter.state(density[row]!, temperature[row]!, carbon);
        expect([refused![row], pressure![row], gamma1![row], electronDegeneracy![row]]).toEqual([
          0,
          state.pressure,
          state.gamma1,
          state.electronDegeneracy,
        ]);
      } catch (error) {
        if (!isFermistateError(error)) throw error;
        count += 1;
        expect(refusalReasons[refused![row]!]!.code).toBe(error.code);
        expect([pressure![row], gamma1![row], electronDegeneracy![row]]).toEqual([NaN, NaN, NaN]);
      }
    }
    expect(count).toBeGreaterThan(5);
    expect(count).toBeLessThan(kept.rows);
    expect(kept.refusedRows!.reduce((sum, one) => sum + one.rows, 0)).toBe(count);
    for (const one of kept.refusedRows!) expect(one).toMatchObject(refusalReasons[one.reason]!);
    expect(Object.isFrozen(kept.refusedRows)).toBe(true);
  });

  test("goes beyond the domain, over many chunks, with findings", () => {
    const made = grid(matter, carbon, {
      density: logarithmicAxis({ from: 1e4, to: 1e20, points: 70 }),
      temperature: logarithmicAxis({ from: 1e7, to: 1e9, points: 80 }),
      quantities: ["pressure"],
      findings: regime,
      refused: "keep",
    });
    const highest = matter.domain.density[1];
    for (const row of rowsOf(made)) {
      const isBeyond = made.columns.density[row]! > highest;
      expect(isRefused(made, row)).toBe(isBeyond);
      expect(Number.isNaN(made.columns.pressure![row]!)).toBe(isBeyond);
      expect(Number.isNaN(made.columns.findingsStrained![row]!)).toBe(isBeyond);
    }
    expect(made.refusedRows).toMatchObject([{ code: "outside-domain", meaning: "density above the domain" }]);
  });

  test("without any state is all empty; without a refusal it says so", () => {
    const none = grid(matter, carbon, { density: 1e-6, temperature: 1e3, refused: "keep" });
    expect(none.refusedRows).toMatchObject([{ rows: 1, code: "unstable" }]);
    expect(none.columns.pressure![0]).toBeNaN();
    const all = grid(matter, carbon, { density: 1e6, temperature: 1e7, refused: "keep" });
    expect([all.refusedRows, all.columns.refused![0]]).toEqual([[], 0]);
  });

  test("refuses what does not exist anywhere, and other words for the option", () => {
    const light = combine(radiation());
    const at = { density: [1, 1e19], temperature: 1e7, refused: "keep" } as const;
    expect(() => grid(light, carbon, { ...at, quantities: ["electronDegeneracy"] })).toThrow(/needs the electron gas/);
    expect(grid(light, carbon, at).columnNames).not.toContain("electronDegeneracy");
    for (const refused of ["skip", true, 0]) {
      expect(() => grid(light, carbon, { ...at, refused } as unknown as GridOptions)).toThrow(/"throw" or "keep"/);
    }
  });

  test("a NaN in a row with a state is an error still", () => {
    const bad = {
      ...combine(electronPositronGas()),
      evaluate: (_: unknown, { pressure }: { pressure?: Float64Array }) => void pressure?.fill(Number.NaN),
    };
    const at = { density: 1e6, temperature: 1e7, quantities: ["pressure"], refused: "keep" } as const;
    expect(() => grid(bad, carbon, at)).toThrow(/a number from the equation of state/);
  });
});

describe("its forms", () => {
  test("CSV: empty fields, and a valid description with the reasons", () => {
    const [, ...records] = readCsv(gridToCsv(kept));
    for (const [row, record] of records.entries()) {
      expect(record[5]).toBe(String(kept.columns.refused![row]));
      for (const field of record.slice(2, 5)) expect(field === "").toBe(isRefused(kept, row));
    }
    const document = JSON.parse(gridToCsvMetadata(kept, "a.csv"));
    expect(complaintsAbout(document)).toEqual([]);
    expect(document.tableSchema.columns.map((one: { required: boolean }) => one.required)).toEqual([
      ...[true, true],
      ...[false, false, false],
      true,
    ]);
    const text = JSON.stringify(document);
    for (const { reason, meaning } of kept.refusedRows!) expect(text).toContain(`refused = ${reason}: ${meaning}`);
  });

  test("JSON: null, and the reasons", () => {
    const text = gridToJson(kept);
    expect(text).not.toContain("NaN");
    const read = JSON.parse(text);
    expect(read.refusedRows).toEqual(kept.refusedRows);
    for (const row of rowsOf(kept)) {
      const value = read.columns.pressure.values[row];
      expect(value).toBe(isRefused(kept, row) ? null : kept.columns.pressure![row]);
    }
    expect(read.columns.refused.description).toContain("number of the reason");
  });

  test("NumPy: NaN, told in the description", () => {
    const read = arraysFromNpz(gridToNpz(kept));
    expect((read.get("pressure") as { values: Float64Array }).values).toEqual(kept.columns.pressure);
    const about = JSON.parse(read.get("description") as string);
    expect([about.refusedRows, about.empty]).toEqual([kept.refusedRows, "NaN, where refused is not 0"]);
  });

  test("Parquet: null", async () => {
    const rows = await parquetReadObjects({ file: (await gridToParquet(kept)).slice().buffer });
    for (const [row, one] of rows.entries()) {
      expect(one["refused"]).toBe(kept.columns.refused![row]);
      expect(one["pressure"] ?? null).toBe(isRefused(kept, row) ? null : kept.columns.pressure![row]);
    }
  });

  test("a chart leaves them out and says so", () => {
    const svg = chartGrid(kept, { quantity: "gamma1" });
    expect(svg).not.toContain("NaN");
    expect(svg).toMatch(/points refused or/);
    expect(Object.keys(quantities)).not.toContain("refused");
  });
});
