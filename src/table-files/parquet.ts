/** A grid as an Apache Parquet file. */
import type { GridTexts } from "../grids/description.js";
import { type ColumnName, columnOf, type Grid } from "../grids/grid.js";
import { aboutGrid } from "../grids/json.js";
import { optionalPackage } from "./optional.js";

/**
 * The bytes of a Parquet file with the columns of a grid, doubles that read back to the same bits, infinities included; null in
 * rows that are refused.
 *
 * The file's key-value metadata are `title`, `creator`, `units` and `descriptions` (JSON, by column) and `about` (JSON: what
 * the grid is, its composition, conventions and validity, as in `gridToJson`).
 *
 * Needs the package hyparquet-writer, which is optional: `npm install hyparquet-writer`.
 *
 * @throws FermistateError `invalid-option` where hyparquet-writer is missing
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { grid } from "fermistate/grids";
 * import { gridToParquet } from "fermistate/table-files";
 * const made = grid(whiteDwarfMatter(), composition({ He4: 1 }), { density: [1e4, 1e5], temperature: 1e8 });
 * const bytes = await gridToParquet(made);
 * String.fromCharCode(...bytes.subarray(0, 4)); // => "PAR1"
 * ```
 */
export async function gridToParquet(grid: Grid, texts: GridTexts = {}): Promise<Uint8Array> {
  const { parquetWriteBuffer } = await parquetWriter();
  const byColumn = (of: (name: (typeof grid.columnNames)[number]) => string): string =>
    JSON.stringify(Object.fromEntries(grid.columnNames.map((name) => [name, of(name)])));
  const { title, creator, infinities, ...about } = aboutGrid(grid, texts); // infinities are themselves here
  const buffer = parquetWriteBuffer({
    columnData: grid.columnNames.map((name) => ({
      name,
      ...valuesOf(grid, name),
      type: "DOUBLE" as const,
      // A dictionary would take -0 for 0; the axes have no zero with a sign, and repeat.
      ...(name === "density" || name === "temperature" ? {} : { encoding: "PLAIN" as const }),
    })),
    createdBy: String(creator),
    kvMetadata: [
      { key: "title", value: String(title) },
      { key: "creator", value: String(creator) },
      { key: "units", value: byColumn((name) => columnOf(name).unit) },
      { key: "descriptions", value: byColumn((name) => columnOf(name).description) },
      { key: "about", value: JSON.stringify(about) },
    ],
  });
  return new Uint8Array(buffer);
}

/** The numbers of a column; null in rows that are refused. */
function valuesOf({ columns, refusedRows }: Grid, name: ColumnName) {
  const data = columns[name]!;
  if (refusedRows === undefined || ["density", "temperature", "refused"].includes(name)) {
    return { data, nullable: false };
  }
  return { data: Array.from(data, (value) => (Number.isNaN(value) ? null : value)), nullable: true };
}

/** The package that writes Parquet. @throws FermistateError `invalid-option` where it is missing */
export function parquetWriter(): Promise<typeof import("hyparquet-writer")> {
  return optionalPackage("hyparquet-writer", "Parquet", () => import("hyparquet-writer"));
}
