/** From the items of a file to a table that is what was written. */
import { FermistateError, isFermistateError } from "../errors.js";
import { checksumOf } from "./checksum.js";
import type { TableForm } from "./form.js";
import { invalidFile } from "./invalid.js";
import type { ReadItem } from "./item.js";

/** The table that items describe. @throws FermistateError `invalid-file` unless it is one and has this checksum */
export async function checkedTable<T>(form: TableForm<T>, read: ReadItem, checksum: string): Promise<T> {
  const { item, version } = form.layout;
  const layout = read(item, "int32", [])[0];
  if (layout !== version) throw invalidFile("layout", layout, `${version}: another version of this library wrote it`);
  const names = new Set<string>();
  const noted: ReadItem = (name, kind, shape) => {
    names.add(name);
    return read(name, kind, shape);
  };
  const table = form.check(described(form, noted), "invalid-file");
  const items = form.itemsOf(table);
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

function described<T>(form: TableForm<T>, read: ReadItem): T {
  try {
    return form.tableOf(read);
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
