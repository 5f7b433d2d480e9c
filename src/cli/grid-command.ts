/** `fermistate grid`: an equation of state over densities and temperatures, into files or onto standard output. */
import * as z from "zod/mini";
import { FermistateError } from "../errors.js";
import { gridToCsvPieces } from "../grids/csv.js";
import { defaultQuantities, type Grid, grid } from "../grids/grid.js";
import { gridToJsonPieces } from "../grids/json.js";
import type { GridOptions } from "../grids/request.js";
import { regime } from "../regime/regime.js";
import { parquetWriter } from "../table-files/parquet.js";
import { quantityNames } from "../thermodynamics/quantities.js";
import { type Command, command } from "./command.js";
import { matterOptions } from "./matter.js";
import { checkOutput, gridTextsOf, type Output, writeOutput } from "./output.js";
import { table, timeText } from "./print.js";
import { progressOn } from "./progress.js";
import { axis, flag, number, oneOf, path, quantityList, wordList, words } from "./readers.js";
import { chosenMatter, tableOption } from "./table-file.js";

export const gridCommand: Command = command({
  name: "grid",
  summary: "many states over density and temperature: files and charts",
  usage: "grid --density AXIS --temperature AXIS --composition LABEL=X,... [--out PATH]",
  options: {
    density: { value: "AXIS", help: "baryon mass densities, g/cm^3; how to write an axis stands below", read: axis },
    temperature: { value: "AXIS", help: "temperatures, K", read: axis },
    ...matterOptions,
    ...tableOption,
    quantities: {
      value: "NAME,...",
      help:
        "columns besides density and temperature, or all; by default pressure, energy, entropy, the first " +
        "derivatives and the electron degeneracy",
      read: z.optional(quantityList),
    },
    findings: {
      help:
        "judge every point: columns with the number of assumptions that are strained and of those that do not hold, and " +
        "which they are; takes some 70 microseconds per point, six times as long as the rest",
      read: flag,
    },
    "keep-refused": {
      help:
        "keep rows without a state (unstable, outside the domain) instead of stopping at the first: their fields are empty, and " +
        "a column refused has the number of the reason",
      read: flag,
    },
    out: {
      value: "PATH",
      help: "where to write: PATH.csv and so on; without it the text goes to standard output",
      read: z.optional(path),
    },
    format: {
      value: "csv|json|both|npz|parquet",
      help:
        "csv (with its description beside it), json (which describes itself), both of them, npz (arrays for " +
        "numpy.load, described by the text inside), or parquet (needs the package hyparquet-writer); csv by default",
      read: z._default(oneOf(["csv", "json", "both", "npz", "parquet"]), "csv"),
    },
    chart: {
      value: "NAME,...",
      help: "quantities to draw over density, each in PATH-NAME.svg",
      read: z.optional(wordList(quantityNames)),
    },
    title: { value: "TEXT", help: "title for files and charts", read: z.optional(words) },
    note: { value: "TEXT", help: "a remark that goes into files and below charts", read: z.optional(words) },
    overwrite: { help: "replace files that exist", read: flag },
    "create-folders": { help: "make the folders of PATH", read: flag },
    "maximum-points": { value: "NUMBER", help: "refuse larger grids; 1e7 by default", read: z.optional(number) },
  },
  examples: [
    [
      "grid --density 1e2..1e10,10-per-decade --temperature 1e6..1e9,4-points --composition C12=0.5,O16=0.5 " +
        "--out core --chart pressure,gamma1",
      "four isotherms of a white dwarf's core",
    ],
    [
      "grid --density 1e6 --temperature 1e7,1e8,1e9 --composition He4=1 --quantities pressure,gamma1",
      "one density, printed",
    ],
    [
      "grid --density 1e5..1e10,5-per-decade --temperature 1e7,1e8 --composition C12=0.5,O16=0.5 --findings --out judged",
      "which assumptions are strained, and where",
    ],
    [
      "grid --density 1e-6..1e3,1-per-decade --temperature 1e3,1e7 --composition C12=1 --keep-refused",
      "across matter that is not ionised, whose rows stay empty",
    ],
    [
      "grid --density 1e4..1e9,51-points --temperature 0 --composition Fe56=1 --without ions,radiation --format json",
      "cold electrons in iron",
    ],
  ],
  remarks:
    "Files are written whole or not at all, and replaced only with --overwrite. Rows run through all densities of the " +
    "lowest temperature, then the next. Numbers read back to the same bits; infinities are INF and -INF.",
  async run(options, io) {
    const { out, chart = [], format } = options;
    if (out === undefined && chart.length > 0) throw needsOut("--chart");
    if (out === undefined && ["both", "npz", "parquet"].includes(format)) throw needsOut(`--format ${format}`);
    const { equationOfState, matter } = await chosenMatter(options, io);
    const outputOptions = { overwrite: options.overwrite, createFolders: options["create-folders"] };
    const output: Output = {
      base: (out ?? "").replace(/\.(csv|json|npz|parquet|svg)$/i, ""),
      csv: format === "csv" || format === "both",
      json: format === "json" || format === "both",
      npz: format === "npz",
      parquet: format === "parquet",
      charts: chart,
      ...(options.title === undefined ? {} : { title: options.title }),
      ...(options.note === undefined ? {} : { note: options.note }),
    };
    if (out !== undefined) await checkOutput([output], io.cwd, outputOptions);
    if (output.parquet) await parquetWriter(); // before the work

    const start = performance.now();
    const names = options.quantities ?? defaultQuantities;
    const progress = progressOn(io, "grid");
    const gridOptions: GridOptions = {
      density: options.density,
      temperature: options.temperature,
      quantities: [...new Set([...names, ...chart])],
      onProgress: progress.report,
      ...(options.findings ? { findings: regime } : {}),
      ...(options["keep-refused"] ? { refused: "keep" as const } : {}),
      ...(options["maximum-points"] === undefined ? {} : { maximumPoints: options["maximum-points"] }),
    };
    const made = evaluated(() => grid(equationOfState, matter, gridOptions), progress.done);
    if (out === undefined) {
      for (const piece of format === "csv" ? gridToCsvPieces(made) : gridToJsonPieces(made, gridTextsOf(output))) {
        if (!io.out(piece)) return; // nobody reads on
      }
      return;
    }
    const [temperatures, densities] = made.shape;
    const took = performance.now() - start;
    const list = await writeOutput([{ grid: made, output }], io.cwd, outputOptions);
    io.out(
      `${counted(densities, "density", "densities")} x ${counted(temperatures, "temperature", "temperatures")} = ` +
        `${counted(made.rows, "state", "states")} of ${matter.name} in ${timeText(took)}; written in ` +
        `${timeText(performance.now() - start - took)}\n${list}\n${refusedList(made)}${findingsList(made)}`,
    );
  },
});

/** Reasons of refused rows and how many there are; nothing where they were not kept. */
function refusedList({ refusedRows, rows }: Grid): string {
  if (refusedRows === undefined) return "";
  const all = refusedRows.reduce((sum, one) => sum + one.rows, 0);
  const head = `Refused ${all} of ${counted(rows, "row", "rows")}`;
  const lines = refusedRows.map((one) => [String(one.reason), one.meaning, String(one.rows)]);
  return lines.length === 0 ? `${head}\n` : `${head}\n${table([["refused", "", "rows"], ...lines], "rlr")}\n`;
}

/** Findings and at how many points; nothing where none were asked for. */
function findingsList({ findings, rows }: Grid): string {
  if (findings === undefined) return "";
  const head = `Findings among ${counted(rows, "state", "states")}`;
  if (findings.length === 0) return `${head}: none\n`;
  const lines = findings.map(({ code, strained, outside }) => [code, String(strained), String(outside)]);
  return `${head}\n${table([["", "strained", "outside"], ...lines], "lrr")}\n`;
}

function evaluated<T>(action: () => T, wipe: () => void): T {
  try {
    return action();
  } finally {
    wipe();
  }
}

function counted(count: number, one: string, many: string): string {
  return `${count} ${count === 1 ? one : many}`;
}

function needsOut(option: string): FermistateError {
  const allowed = `only together with --out PATH`;
  return new FermistateError("invalid-option", { argument: "option", given: option, allowed });
}
