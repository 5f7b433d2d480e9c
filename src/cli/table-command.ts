/** `fermistate table`: a table of the free energy, built in a folder that survives a kill, written with its certificate. */
import { rm } from "node:fs/promises";
import { basename, dirname, join, resolve } from "node:path";
import * as z from "zod/mini";
import { FermistateError } from "../errors.js";
import { checkTargets } from "../files/target.js";
import { assembleFolders, buildInFolder, type FolderResult } from "../table-build/folder.js";
import type { TableRequest } from "../table-build/request.js";
import { tableCsvNames, tableToCsv } from "../table-files/csv.js";
import { hdf5Writer, tableToHdf5 } from "../table-files/hdf5.js";
import type { FreeEnergyTable } from "../tables/table.js";
import { type Command, type CommandIo, command } from "./command.js";
import { interruptible } from "./interrupt.js";
import { matterOptions, switchesOf } from "./matter.js";
import { type WritableEntry, writeEntries } from "./output.js";
import { timeText } from "./print.js";
import { stripsOn } from "./progress.js";
import { flag, interval, number, oneOf, path, share, textList } from "./readers.js";
import { readTable } from "./table-file.js";
import { tableText } from "./table-text.js";

const { composition } = matterOptions;

export const tableCommand: Command = command({
  name: "table",
  summary: "tables of the free energy, with their measured error",
  usage: "table --density LOW..HIGH --temperature LOW..HIGH --composition LABEL=X,... --out PATH",
  options: {
    density: { value: "LOW..HIGH", help: "baryon mass densities, g/cm^3", read: z.optional(interval) },
    temperature: { value: "LOW..HIGH", help: "temperatures, K", read: z.optional(interval) },
    ...matterOptions,
    composition: { ...composition, read: z.optional(composition.read) },
    accuracy: {
      value: "NUMBER",
      help:
        "largest relative error of any quantity up to second order, 1e-10 to 0.1; 1e-6 by default. Pressure, energy and " +
        "entropy come out far better",
      read: z.optional(number),
    },
    "finest-level": {
      value: "NUMBER",
      help: "most halvings of a block of half a decade of density by a quarter of temperature, 1 to 8; 7 by default",
      read: z.optional(number),
    },
    out: { value: "PATH", help: "where to write: PATH.h5, or PATH.csv and its companions", read: z.optional(path) },
    format: {
      value: "hdf5|csv",
      help: "hdf5 needs the package h5wasm; csv is text with a description (CSV on the Web); hdf5 by default",
      read: z._default(oneOf(["hdf5", "csv"]), "hdf5"),
    },
    threads: { value: "NUMBER", help: "threads that build, 1 to 64; 1 by default", read: z.optional(number) },
    work: {
      value: "FOLDER",
      help: "where finished strips are kept, so that a build that was stopped goes on; PATH.strips by default",
      read: z.optional(path),
    },
    shard: {
      value: "K/N",
      help: "make only share K of N of the strips, into --work: N machines make a table, --merge joins it",
      read: z.optional(share),
    },
    merge: {
      value: "FOLDER,...",
      help: "write the table whose strips stand in these folders, instead of building",
      read: z.optional(textList),
    },
    show: {
      value: "FILE",
      help: "print what a table file holds, after checking all of it (.h5, or the -metadata.json of csv)",
      read: z.optional(path),
    },
    "keep-strips": { help: "leave the strips in the folder once the table is written", read: flag },
    overwrite: { help: "replace files that exist", read: flag },
    "create-folders": { help: "make the folders of PATH", read: flag },
  },
  examples: [
    [
      "table --density 1e5..1e8 --temperature 1e7..1e9 --composition C12=0.5,O16=0.5 --accuracy 1e-4 --out core",
      "the interior of a white dwarf",
    ],
    [
      "table --density 1e5..1e8 --temperature 1e7..1e9 --composition C12=0.5,O16=0.5 --accuracy 1e-4 --work part-2 " +
        "--shard 2/3",
      "the second of three shares",
    ],
    [
      "table --density 1e4..1e7 --temperature 1e7..1e9 --composition C12=1 --without ions,radiation --accuracy 1e-4 " +
        "--out electrons --format csv",
      "electrons and positrons alone: for any composition",
    ],
  ],
  remarks:
    "Ctrl-C or a kill loses at most the strips under way: the same line goes on. The bits do not depend on threads, shares " +
    "or interruptions. Photons stand beside the table and are not in it. Files are written whole or not at all, and replaced only with " +
    "--overwrite.",
  async run(options, io) {
    if (options.show !== undefined) {
      io.out(tableText(await readTable(resolve(io.cwd, options.show), "--show")));
      return;
    }
    const base = options.out?.replace(/\.(h5|csv)$/i, "");
    const paths = base === undefined ? [] : filesOf(base, options.format);
    const files = { overwrite: options.overwrite, createFolders: options["create-folders"] };
    await checkTargets(
      paths.map((one) => ({ path: resolve(io.cwd, one.path) })),
      files,
    );
    // Before the work, not after it.
    if (base !== undefined && options.format === "hdf5") await hdf5Writer();
    if (options.merge !== undefined) {
      if (base === undefined) throw missing("--out PATH");
      const folders = options.merge.map((folder) => resolve(io.cwd, folder));
      await writeTable(await assembleFolders(...folders), base, options.format, io, files);
      return;
    }

    const { density, temperature, composition: fractions, accuracy, "finest-level": finestLevel, threads } = options;
    if (density === undefined) throw missing("--density LOW..HIGH");
    if (temperature === undefined) throw missing("--temperature LOW..HIGH");
    if (fractions === undefined) throw missing("--composition LABEL=X,...");
    const request: TableRequest = {
      matter: { whiteDwarfMatter: switchesOf(options) },
      composition: fractions,
      options: {
        density,
        temperature,
        ...(accuracy === undefined ? {} : { accuracy }),
        ...(finestLevel === undefined ? {} : { finestLevel }),
      },
    };
    const { shard } = options;
    const work = options.work ?? (base === undefined ? undefined : `${base}.strips`);
    if (work === undefined) throw missing(shard === undefined ? "--out PATH" : "--work FOLDER");
    const folder = resolve(io.cwd, work);
    const start = performance.now();
    const built = await build(io, folder, request, threads, shard);
    if (shard !== undefined) {
      io.out(`${built.made} strips made, ${built.kept} kept: share ${shard[0]} of ${shard[1]} stands in ${work}\n`);
      return;
    }
    if (base === undefined) throw missing("--out PATH");
    const table = await assembleFolders(folder);
    io.out(`${built.strips} strips, ${built.kept} of them kept, in ${timeText(performance.now() - start)}\n`);
    await writeTable(table, base, options.format, io, files);
    if (!options["keep-strips"] && options.work === undefined) await rm(folder, { recursive: true, force: true });
  },
});

/** Builds with a line of progress; stops in good order at the first Ctrl-C. */
async function build(
  io: CommandIo,
  folder: string,
  request: TableRequest,
  threads: number | undefined,
  shard: readonly [number, number] | undefined,
): Promise<FolderResult> {
  const progress = stripsOn(io, "table");
  try {
    const result = await interruptible((signal) =>
      buildInFolder(folder, request, {
        signal,
        onProgress: progress.report,
        ...(threads === undefined ? {} : { threads }),
        ...(shard === undefined ? {} : { shard }),
      }),
    );
    if (result.left === 0) return result;
    const given = `stopped with ${result.left} strips left`;
    throw new FermistateError("file-not-written", { argument: "table", given, allowed: "the same line goes on" });
  } finally {
    progress.done();
  }
}

interface TableFile {
  readonly path: string;
  readonly about: string;
}

/** The files of a table. */
function filesOf(base: string, format: "hdf5" | "csv"): TableFile[] {
  if (format === "hdf5") return [{ path: `${base}.h5`, about: "the table, with its certificate (HDF5)" }];
  const names = tableCsvNames(basename(base));
  const beside = (name: string): string => join(dirname(base), name);
  return [
    { path: beside(names.metadata), about: "what the columns mean (CSV on the Web), certificate" },
    { path: beside(names.nodes), about: "nodes of the patches" },
    { path: beside(names.blocks), about: "blocks of the mesh" },
    { path: beside(names.cold), about: "the cold curve" },
  ];
}

async function writeTable(
  table: FreeEnergyTable,
  base: string,
  format: "hdf5" | "csv",
  io: CommandIo,
  files: { readonly overwrite: boolean; readonly createFolders: boolean },
): Promise<void> {
  const entries: WritableEntry[] = [];
  const paths = filesOf(base, format);
  if (format === "hdf5") entries.push({ ...paths[0]!, text: await tableToHdf5(table) });
  else {
    const texts = await tableToCsv(table, basename(base));
    for (const [i, name] of (["metadata", "nodes", "blocks", "cold"] as const).entries()) {
      entries.push({ ...paths[i]!, text: texts[name] });
    }
  }
  const list = await writeEntries(entries, io.cwd, files);
  io.out(`${list}\n\n${tableText(table)}`);
}

function missing(option: string): FermistateError {
  const allowed = `${option}, which table needs here`;
  return new FermistateError("invalid-option", { argument: "option", given: undefined, allowed });
}
