/** Table files on the command line: read by their ending, and as the matter of a command. */
import { readFile } from "node:fs/promises";
import { basename, dirname, join, resolve } from "node:path";
import * as z from "zod/mini";
import { FermistateError } from "../errors.js";
import { reasonOf } from "../files/refusal.js";
import { metadataEnding, tableCsvNames, tableFromCsv } from "../table-files/csv.js";
import { tableFromHdf5 } from "../table-files/hdf5.js";
import type { FreeEnergyTable } from "../tables/table.js";
import { tableEquationOfState } from "../tables/tabulated.js";
import type { CommandIo, OptionHelp } from "./command.js";
import { compositionOf, type MatterChoice, matterOf } from "./matter.js";
import { path } from "./readers.js";

/** The option of commands that take a table in place of the physics. */
export const tableOption = {
  table: {
    value: "FILE",
    help: "take this table (.h5, or the description of csv) instead of the physics it was made from",
    read: z.optional(path),
  },
} as const satisfies Record<string, OptionHelp & { read: z.ZodMiniType }>;

/** Reads a table file: .h5, or the description of a table in CSV with its companions. */
export async function readTable(file: string, option: string): Promise<FreeEnergyTable> {
  const bytes = async (name: string): Promise<Uint8Array> => {
    try {
      return new Uint8Array(await readFile(name));
    } catch (error) {
      const missing = (error as { code?: unknown }).code === "ENOENT";
      const given = `${name}: ${missing ? "there is no such file" : reasonOf(error)}`;
      throw new FermistateError("invalid-file", { argument: option, given, allowed: "a file that can be read" });
    }
  };
  if (/\.h5$/i.test(file)) return tableFromHdf5(await bytes(file));
  if (!file.endsWith(metadataEnding)) {
    const allowed = `a file whose name ends in .h5 or ${metadataEnding}`;
    throw new FermistateError("invalid-option", { argument: option, given: file, allowed });
  }
  const names = tableCsvNames(basename(file).slice(0, -metadataEnding.length));
  const text = async (name: string): Promise<string> =>
    new TextDecoder().decode(await bytes(join(dirname(file), name)));
  return tableFromCsv({
    metadata: await text(names.metadata),
    nodes: await text(names.nodes),
    blocks: await text(names.blocks),
    cold: await text(names.cold),
  });
}

/** The matter of a choice: a table where one is named, else the physics. */
export async function chosenMatter(
  choice: MatterChoice & { readonly table?: string | undefined },
  io: CommandIo,
  option = "--table",
): Promise<ReturnType<typeof matterOf>> {
  if (choice.table === undefined) return matterOf(choice);
  for (const name of ["without", "phase", "melting-coupling"] as const) {
    if (choice[name] === undefined) continue;
    const allowed = `only without ${option}: a table holds the physics it was made from`;
    throw new FermistateError("invalid-option", { argument: `--${name}`, given: String(choice[name]), allowed });
  }
  const table = await readTable(resolve(io.cwd, choice.table), option);
  return { equationOfState: tableEquationOfState(table), matter: compositionOf(choice) };
}
