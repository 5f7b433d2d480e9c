/** From the items of a file to a table that is what was written. */
import { FermistateError, isFermistateError } from "../errors.js";
import type { FreeEnergyTable } from "../tables/table.js";
import { checkTable } from "./check.js";
import { checksumOf } from "./checksum.js";
import { invalidFile } from "./invalid.js";
import { itemsOf, LAYOUT, type ReadItem, tableOfItems } from "./items.js";

/** The table that items describe. @throws FermistateError `invalid-file` unless it is one and has this checksum */
export async function checkedTable(read: ReadItem, checksum: string): Promise<FreeEnergyTable> {
  const layout = read("format/layout", "int32", [])[0];
  if (layout !== LAYOUT) throw invalidFile("layout", layout, `${LAYOUT}: another version of this library wrote it`);
  const table = checkTable(described(read), "invalid-file");
  // Of the table, not of the items read: names and numbers that follow from others must be theirs.
  const found = await checksumOf(itemsOf(table));
  if (found !== checksum) throw invalidFile("checksum of the content", found, `${checksum}, as the file states it`);
  return table;
}

function described(read: ReadItem): FreeEnergyTable {
  try {
    return tableOfItems(read);
  } catch (error) {
    if (!isFermistateError(error) || error.code === "invalid-file") throw error;
    throw invalidFile(error.argument, error.given, error.allowed); // a composition that is none
  }
}

/** Throws `invalid-option` unless `bytes` are a Uint8Array. */
export function requireBytes(bytes: unknown): void {
  if (bytes instanceof Uint8Array) return;
  throw new FermistateError("invalid-option", { argument: "bytes", given: bytes, allowed: "a Uint8Array: the whole file" });
}
