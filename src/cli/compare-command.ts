/** `fermistate compare`: two choices of physics over a region: how far apart they are, where, and which is consistent. */
import { resolve } from "node:path";
import * as z from "zod/mini";
import { compare } from "../compare/compare.js";
import { comparisonCsv, comparisonJson, comparisonMap } from "../compare/forms.js";
import { standardQuantities } from "../compare/request.js";
import type { Comparison } from "../compare/result.js";
import { comparisonText, nodeSentences } from "../compare/text.js";
import { FermistateError, isFermistateError } from "../errors.js";
import { checkTargets } from "../files/target.js";
import { type QuantityName, quantityNames } from "../thermodynamics/quantities.js";
import { type Command, type CommandIo, command } from "./command.js";
import { type MatterChoice, type matterOf, matterOptions } from "./matter.js";
import { type WritableEntry, writeEntries } from "./output.js";
import { progressOn } from "./progress.js";
import { axis, flag, number, oneOf, path, quantityList, wordList } from "./readers.js";
import { chosenMatter, tableOption } from "./table-file.js";

const { composition, without, phase, "melting-coupling": melting } = matterOptions;

export const compareCommand: Command = command({
  name: "compare",
  summary: "two choices of physics: where they differ, and by how much",
  usage: "compare --density AXIS --temperature AXIS --composition LABEL=X,... [--against-... VALUE]",
  options: {
    density: { value: "AXIS", help: "baryon mass densities, g/cm^3; how to write an axis stands below", read: axis },
    temperature: { value: "AXIS", help: "temperatures, K", read: axis },
    ...matterOptions,
    ...tableOption,
    "against-composition": {
      value: composition.value,
      help: "composition of the second; by default that of the first",
      read: z.optional(composition.read),
    },
    "against-without": {
      value: without.value,
      help: "what to leave out of the second, by default nothing; the options above choose the first",
      read: without.read,
    },
    "against-phase": { value: phase.value, help: "force a phase of the ions of the second", read: phase.read },
    "against-melting-coupling": {
      value: melting.value,
      help: "coupling at which the crystal of the second melts",
      read: melting.read,
    },
    "against-table": { value: "FILE", help: "the second is this table", read: z.optional(path) },
    quantities: {
      value: "NAME,...",
      help: "what to compare; by default pressure, energy, entropy and the first derivatives",
      read: z.optional(quantityList),
    },
    "skip-consistency": {
      help: "do not measure the thermodynamic consistency of each, which takes half of the time",
      read: flag,
    },
    format: {
      value: "text|json|csv",
      help: "a report, all numbers with the maps, or the differences point by point; text by default",
      read: z._default(oneOf(["text", "json", "csv"]), "text"),
    },
    out: {
      value: "PATH",
      help: "where to write: PATH.txt and so on; without it the text goes to standard output",
      read: z.optional(path),
    },
    map: {
      value: "NAME,...",
      help: "quantities whose difference is drawn, each in PATH-NAME.svg",
      read: z.optional(wordList(quantityNames)),
    },
    overwrite: { help: "replace files that exist", read: flag },
    "create-folders": { help: "make the folders of PATH", read: flag },
    "maximum-points": { value: "NUMBER", help: "refuse larger regions; 1e5 by default", read: z.optional(number) },
  },
  examples: [
    [
      "compare --density 1e4..1e9,20-points --temperature 1e6..1e9,12-points --composition C12=0.5,O16=0.5 " +
        "--against-without coulomb",
      "what interactions do to a white dwarf's core",
    ],
    [
      "compare --density 1e4..1e9,30-points --temperature 1e6..1e9,20-points --composition C12=1 " +
        "--against-without polarisation --out polarisation --map pressure,heatCapacityV",
      "one term, with maps",
    ],
    [
      "compare --density 1e6..1e9,10-points --temperature 1e7..1e9,10-points --composition C12=1 " +
        "--against-composition O16=1 --format csv",
      "carbon against oxygen, point by point",
    ],
  ],
  remarks:
    "Differences are those of the second, divided by the size of the first. Points that one of them refuses are part " +
    "of the report. Files are written whole or not at all, and replaced only with --overwrite.",
  async run(options, io) {
    const { out, map = [], format } = options;
    if (out === undefined && map.length > 0) {
      throw new FermistateError("invalid-option", {
        argument: "option",
        given: "--map",
        allowed: "only together with --out PATH",
      });
    }
    const first = await chosenMatter(options, io);
    const second = await secondOf(options, io);
    const base = (out ?? "").replace(/\.(txt|json|csv|svg)$/i, "");
    const entries = entriesOf(base, format, map);
    const files = { overwrite: options.overwrite, createFolders: options["create-folders"] };
    if (out !== undefined) {
      await checkTargets(
        entries.map((one) => ({ path: resolve(io.cwd, one.path) })),
        files,
      );
    }

    const progress = progressOn(io, "compare");
    let found: Comparison;
    try {
      found = compare(first.equationOfState, second.equationOfState, {
        composition: [first.matter, second.matter],
        density: options.density,
        temperature: options.temperature,
        names: ["first", "second"],
        consistency: !options["skip-consistency"],
        quantities: [...new Set([...(options.quantities ?? standardQuantities), ...map])],
        onProgress: progress.report,
        ...(options["maximum-points"] === undefined ? {} : { maximumPoints: options["maximum-points"] }),
      });
    } finally {
      progress.done();
    }
    if (out === undefined) {
      io.out(forms[format](found));
      return;
    }
    const texts = [forms[format](found), ...map.map((name) => comparisonMap(found, name))];
    const list = await writeEntries(
      entries.map((entry, i): WritableEntry => ({ ...entry, text: texts[i]! })),
      io.cwd,
      files,
    );
    const warnings = nodeSentences(found).map((one) => `${one}\n`);
    io.out(`${found.rows} points compared\n${warnings.join("")}${list}\n`);
  },
});

/** The forms of the report by name. */
const forms: Readonly<Record<"text" | "json" | "csv", (found: Comparison) => string>> = {
  text: comparisonText,
  json: comparisonJson,
  csv: comparisonCsv,
};

const endings = { text: ["txt", "the report"], json: ["json", "all numbers"], csv: ["csv", "point by point"] } as const;

function entriesOf(
  base: string,
  format: "text" | "json" | "csv",
  maps: readonly QuantityName[],
): { readonly path: string; readonly about: string }[] {
  const [ending, about] = endings[format];
  return [
    { path: `${base}.${ending}`, about },
    ...maps.map((name) => ({ path: `${base}-${name}.svg`, about: `map of the difference of ${name}` })),
  ];
}

/** The second choice; its errors bear the names it has on the command line. */
async function secondOf(
  options: MatterChoice & {
    readonly "against-table": string | undefined;
    readonly "against-composition": MatterChoice["composition"] | undefined;
    readonly "against-without": MatterChoice["without"];
    readonly "against-phase": MatterChoice["phase"];
    readonly "against-melting-coupling": MatterChoice["melting-coupling"];
  },
  io: CommandIo,
): Promise<ReturnType<typeof matterOf>> {
  const choice = {
    table: options["against-table"],
    composition: options["against-composition"] ?? options.composition,
    normalise: options.normalise,
    without: options["against-without"],
    phase: options["against-phase"],
    "melting-coupling": options["against-melting-coupling"],
  };
  try {
    return await chosenMatter(choice, io, "--against-table");
  } catch (error) {
    if (!isFermistateError(error)) throw error;
    const { code, argument, given, allowed } = error;
    const renamed = (words: string): string => words.replace(/--(?=without|phase|melting)/g, "--against-");
    throw new FermistateError(code, { argument: renamed(argument), given, allowed: renamed(allowed) });
  }
}
