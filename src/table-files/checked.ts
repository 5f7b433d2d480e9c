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
  const names = new Set<string>();
  const noted: ReadItem = (name, kind, shape) => {
    names.add(name);
    return read(name, kind, shape);
  };
  const table = checkTable(described(noted), "invalid-file");
  const items = itemsOf(table);
  for (const { name, kind, shape, values } of items) {
    if (names.has(name)) continue; // it has become part of the table; the rest follows from that
    const stated = Array.from<unknown>(read(name, kind, shape));
    if (stated.some((value, i) => value !== values[i]))
      throw invalidFile(name, stated, `${Array.from<unknown>(values)}`);
  }
  const found = await checksumOf(items);
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
  throw new FermistateError("invalid-option", {
    argument: "bytes",
    given: bytes,
    allowed: "a Uint8Array: the whole file",
  });
}
