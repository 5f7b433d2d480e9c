/** Grids as Parquet, read back by hyparquet. */
import { parquetMetadata, parquetReadObjects } from "hyparquet";
import { expect, test } from "vitest";
import { grid, gridToJson } from "../../src/grids/index.js";
import { composition } from "../../src/matter/composition.js";
import { gridToParquet } from "../../src/table-files/index.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";

const made = grid(whiteDwarfMatter({ radiation: false, ions: false }), composition({ C12: 0.5, O16: 0.5 }), {
  density: [1e4, 1e6, 1e8],
  temperature: [0, 1e7],
});

test("every number comes back, infinities and the sign of zero included", async () => {
  made.columns.specificEntropy![0] = -0;
  const bytes = await gridToParquet(made);
  const rows = await parquetReadObjects({ file: bytes.slice().buffer });
  expect(rows).toHaveLength(made.rows);
  for (const [i, row] of rows.entries()) {
    for (const name of made.columnNames)
      expect(Object.is(row[name], made.columns[name]![i]), `${name} ${i}`).toBe(true);
  }
  expect(rows[0]!["electronDegeneracy"]).toBe(Number.POSITIVE_INFINITY);
});

test("the metadata tell units, meanings and what the grid is", async () => {
  const bytes = await gridToParquet(made, { title: "Cold carbon", note: "Invented." });
  const { schema, num_rows, key_value_metadata } = parquetMetadata(bytes.slice().buffer);
  expect(num_rows).toBe(6n);
  expect(schema.slice(1).map(({ name, type, repetition_type }) => [name, type, repetition_type])).toEqual(
    made.columnNames.map((name) => [name, "DOUBLE", "REQUIRED"]),
  );
  const values = Object.fromEntries(key_value_metadata!.map(({ key, value }) => [key, value!]));
  expect(values["title"]).toBe("Cold carbon");
  expect(values["creator"]).toBe(`fermistate ${made.libraryVersion}`);
  expect(JSON.parse(values["units"]!)).toEqual(made.units);
  expect(Object.keys(JSON.parse(values["descriptions"]!))).toEqual(made.columnNames);
  const { columns, infinities, title, creator, ...about } = JSON.parse(
    gridToJson(made, { title: "Cold carbon", note: "Invented." }),
  );
  expect(JSON.parse(values["about"]!)).toEqual(about);
  expect(about.note).toBe("Invented.");
});
