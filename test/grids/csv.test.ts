/** CSV: read back by an independent reader to the same bits; the description against the W3C's vocabulary. */

import fc from "fast-check";
import { combine, composition, electronPositronGas, quantityNames, regime, whiteDwarfMatter } from "fermistate";
import {
  csvMetadataName,
  type Grid,
  grid,
  gridToCsv,
  gridToCsvMetadata,
  gridToCsvPieces,
  logarithmicAxis,
} from "fermistate/grids";
import { describe, expect, test } from "vitest";
import { numbersText } from "../../src/grids/number-text.js";
import { readCsv, readDouble } from "./csv-reader.js";
import { complaintsAbout } from "./csvw.js";

const core = composition({ C12: 0.5, O16: 0.48, Ne22: 0.02 });
const hot = grid(whiteDwarfMatter({ coulomb: false }), core, {
  density: logarithmicAxis({ from: 1e-6, to: 1e12, points: 25 }),
  temperature: logarithmicAxis({ from: 1e5, to: 1e10, points: 11 }),
  quantities: quantityNames,
});
const cold = grid(combine(electronPositronGas()), core, {
  density: [1e-20, 1e4, 1e6],
  temperature: [0, 1e6],
  quantities: quantityNames,
});

function expectSameBits(made: Grid, text: string): void {
  const [titles, ...records] = readCsv(text);
  expect(titles).toHaveLength(made.columnNames.length);
  expect(records).toHaveLength(made.rows);
  for (const [row, record] of records.entries()) {
    for (const [i, name] of made.columnNames.entries()) {
      if (!Object.is(readDouble(record[i]!), made.columns[name]![row]))
        throw new Error(`${name}, row ${row}: ${record[i]}`);
    }
  }
}

describe("the text", () => {
  test("reads back to the same bits, 0 and infinities included", () => {
    expectSameBits(hot, gridToCsv(hot));
    expectSameBits(cold, gridToCsv(cold));
    expect(gridToCsv(cold)).toMatch(/,INF,/);
    expect(gridToCsv(cold)).not.toMatch(/NaN|Infinity/);
  });

  test("titles name the unit", () => {
    const [titles] = readCsv(gridToCsv(hot));
    expect(titles?.slice(0, 4)).toEqual([
      "density [g/cm^3]",
      "temperature [K]",
      "pressure [dyn/cm^2]",
      "specificEnergy [erg/g]",
    ]);
    expect(titles).toContain("gamma1 [1]");
  });

  test("pieces are the text, and small", () => {
    const pieces = [...gridToCsvPieces(hot)];
    expect(pieces.length).toBeGreaterThan(2);
    expect(pieces.join("")).toBe(gridToCsv(hot));
    expect(Math.max(...pieces.map((piece) => piece.length))).toBeLessThan(70_000);
  });
});

describe("numbers", () => {
  test("any double but NaN reads back to the same bits", () => {
    fc.assert(
      fc.property(fc.array(fc.double({ noNaN: true }), { minLength: 1 }), (list) => {
        const fields = numbersText(list, "").split(",");
        expect(fields).toHaveLength(list.length);
        for (const [i, value] of list.entries()) expect(readDouble(fields[i]!)).toBe(value);
      }),
      { seed: 20260103, numRuns: 3000 },
    );
  });

  test("corners", () => {
    const corners = [0, -0, 5e-324, Number.MAX_VALUE, 1e21, 123456789012345680000, 1e-7, 0.1, Infinity, -Infinity];
    expect(numbersText(corners, "")).toBe(
      "0,-0,5E-324,1.7976931348623157E+308,1E+21,123456789012345680000,1E-7,0.1,INF,-INF",
    );
    expect(numbersText([1, Infinity], '"')).toBe('1,"INF"');
  });
});

describe("the description", () => {
  const document = JSON.parse(gridToCsvMetadata(hot, "core grid.csv", { title: "Core", note: "invented" }));

  test("has the structure that the vocabulary requires", () => expect(complaintsAbout(document)).toEqual([]));

  test("its columns are those of the file, in order, with titles that the first row repeats", () => {
    const [titles] = readCsv(gridToCsv(hot));
    expect(document.tableSchema.columns.map((column: { titles: string }) => column.titles)).toEqual(titles);
    expect(document.tableSchema.columns.map((column: { name: string }) => column.name)).toEqual(hot.columnNames);
    for (const column of document.tableSchema.columns) {
      expect(column["schema:unitText"]).toBe(hot.units[column.name as "pressure"]);
      expect(column["dc:description"]).toBeTypeOf("string");
    }
  });

  test("says who, what of, from what, by which conventions, and where it holds", () => {
    expect(document).toMatchObject({ url: "core%20grid.csv", "dc:title": "Core" });
    expect(document["dc:creator"]).toMatch(/^fermistate \d+\.\d+\.\d+$/);
    const all = JSON.stringify(document);
    for (const word of [
      "invented",
      "baryon mass density",
      "no Coulomb",
      "rest mass",
      "1e-20 to 1e18 g/cm^3",
      "ideal ions",
    ]) {
      expect(all).toContain(word);
    }
    const properties = document["schema:additionalProperty"] as Record<string, unknown>[];
    const fraction = properties.find((one) => one["schema:name"] === "nucleon fraction of Ne22");
    expect(fraction?.["schema:value"]).toBe(0.02);
  });

  test("with findings: valid, and how many points each is met at", () => {
    const density = logarithmicAxis({ from: 1e4, to: 1e11, points: 20 });
    const judged = grid(whiteDwarfMatter(), core, { density, temperature: [1e7, 1e9], findings: regime });
    expectSameBits(judged, gridToCsv(judged));
    const described = JSON.parse(gridToCsvMetadata(judged, "core.csv"));
    expect(complaintsAbout(described)).toEqual([]);
    const values = new Map<string, number>();
    for (const one of described["schema:additionalProperty"]) values.set(one["schema:name"], one["schema:value"]);
    expect(judged.findings?.some(({ outside }) => outside > 0)).toBe(true);
    for (const { code, strained, outside } of judged.findings ?? []) {
      expect(values.get(`points where ${code} is strained`)).toBe(strained);
      expect(values.get(`points where ${code} is outside its range`)).toBe(outside);
    }
  });

  test("goes beside the file under the name of the recommendation", () => {
    expect(csvMetadataName("core.csv")).toBe("core.csv-metadata.json");
  });

  test("a name with a folder is refused", () => {
    for (const name of ["a/b.csv", "", "a\\b.csv"])
      expect(() => gridToCsvMetadata(hot, name)).toThrow(/without folders/);
  });

  test("the primary key tells rows apart", () => {
    const keys = new Set(
      Array.from({ length: hot.rows }, (_, i) => `${hot.columns.temperature[i]} ${hot.columns.density[i]}`),
    );
    expect(keys.size).toBe(hot.rows);
  });
});
