/** The files of a grid: their names, their texts, and the list that is printed once they are written. */
import { resolve } from "node:path";
import { chartGrid } from "../charts/chart.js";
import { checkTargets } from "../files/target.js";
import { type TextFile, writeTexts } from "../files/write.js";
import { csvMetadataName, gridToCsvMetadata, gridToCsvPieces } from "../grids/csv.js";
import type { GridTexts } from "../grids/description.js";
import type { Grid } from "../grids/grid.js";
import { gridToJsonPieces } from "../grids/json.js";
import { gridToNpz } from "../grids/npz.js";
import { gridToParquet } from "../table-files/parquet.js";
import type { QuantityName } from "../thermodynamics/quantities.js";
import { interruptible } from "./interrupt.js";
import { bytesText, table } from "./print.js";

/** What to write of a grid. */
export interface Output {
  /** Path of the files without their endings. */
  readonly base: string;
  readonly csv: boolean;
  readonly json: boolean;
  readonly npz: boolean;
  readonly parquet: boolean;
  /** Quantities drawn, one chart each. */
  readonly charts: readonly QuantityName[];
  readonly title?: string;
  readonly note?: string;
}

/** How to write. */
export interface OutputOptions {
  readonly overwrite: boolean;
  readonly createFolders: boolean;
}

/** One file and what it is, for the list. */
interface Entry {
  readonly path: string;
  readonly about: string;
}

/** A file with its content. */
export interface WritableEntry extends Entry {
  readonly text: TextFile["text"];
}

/** The files of an output; `about` needs the number of rows only. */
function entriesOf(output: Output): Entry[] {
  const { base, charts } = output;
  return [
    ...(output.csv
      ? [
          { path: `${base}.csv`, about: "the columns, with units in the first row" },
          { path: csvMetadataName(`${base}.csv`), about: "what they mean (CSV on the Web)" },
        ]
      : []),
    ...(output.json ? [{ path: `${base}.json`, about: "columns and meanings in one" }] : []),
    ...(output.npz ? [{ path: `${base}.npz`, about: "arrays for NumPy, with their meanings" }] : []),
    ...(output.parquet ? [{ path: `${base}.parquet`, about: "the columns, with units in the metadata" }] : []),
    ...charts.map((name) => ({ path: `${base}-${name}.svg`, about: `chart of ${name}` })),
  ];
}

/** Refuses files that cannot be written, before the work of a calculation. */
export async function checkOutput(outputs: readonly Output[], cwd: string, options: OutputOptions): Promise<void> {
  const files = outputs.flatMap(entriesOf).map(({ path }) => ({ path: resolve(cwd, path) }));
  await checkTargets(files, options);
}

/** Writes the files of grids, all or none, and returns the printed list of them. */
export async function writeOutput(
  made: readonly { readonly grid: Grid; readonly output: Output }[],
  cwd: string,
  options: OutputOptions,
): Promise<string> {
  const texts = (await Promise.all(made.map(({ grid, output }) => textsOf(grid, output)))).flat();
  const entries = made.flatMap(({ output }) => entriesOf(output));
  return writeEntries(
    entries.map((entry, i) => ({ ...entry, text: texts[i]! })),
    cwd,
    options,
  );
}

/** Writes files, all or none, and returns the printed list of them. */
export async function writeEntries(
  entries: readonly WritableEntry[],
  cwd: string,
  options: OutputOptions,
): Promise<string> {
  const files = entries.map(({ path, text }) => ({ path: resolve(cwd, path), text }));
  const written = await interruptible((signal) => writeTexts(files, { ...options, signal }));
  return table(
    entries.map(({ path, about }, i) => [path, bytesText(written[i]!.bytes), about]),
    "lrl",
  );
}

/** What the files of a grid say beside its numbers. */
export function gridTextsOf({ title, note }: Output): GridTexts {
  return { ...(title === undefined ? {} : { title }), ...(note === undefined ? {} : { note }) };
}

/** Texts in the order of {@link entriesOf}. */
async function textsOf(grid: Grid, output: Output): Promise<TextFile["text"][]> {
  const texts = gridTextsOf(output);
  const csvName = `${output.base}.csv`.split(/[/\\]/).at(-1)!;
  return [
    ...(output.csv ? [gridToCsvPieces(grid), gridToCsvMetadata(grid, csvName, texts)] : []),
    ...(output.json ? [gridToJsonPieces(grid, texts)] : []),
    ...(output.npz ? [gridToNpz(grid, texts)] : []),
    ...(output.parquet ? [await gridToParquet(grid, texts)] : []),
    ...output.charts.map((quantity) => chartGrid(grid, { quantity, ...texts })),
  ];
}
