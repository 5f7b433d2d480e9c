/** A table as an HDF5 file. */
import type { FreeEnergyTable } from "../tables/table.js";
import { libraryVersion } from "../version.js";
import { checkedTable, requireBytes } from "./checked.js";
import { checksumOf } from "./checksum.js";
import { checksumRecipe, type TableForm } from "./form.js";
import { freeEnergyForm } from "./free-energy.js";
import { hdf5OfItems } from "./hdf5-items.js";
import { hdf5Reader } from "./hdf5-reader.js";
import { formatItems } from "./item.js";
import { optionalPackage } from "./optional.js";

/**
 * The bytes of an HDF5 file that holds a table and describes itself.
 *
 * Every part is a dataset with attributes `units` and `description`; the root's attribute `reading` says how to get numbers
 * out, `checksum_recipe` how the checksum in `format/checksum` is made. Datasets are contiguous and not compressed: any
 * HDF5 library reads them, and {@link tableFromHdf5}, which has read them once before they are returned. The same table gives
 * the same bytes.
 *
 * Needs the package h5wasm, which is optional: `npm install h5wasm`.
 *
 * @throws FermistateError `invalid-option` where `table` is no table of this layout, or h5wasm is missing
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { writeText } from "fermistate/files";
 * import { tableToHdf5 } from "fermistate/table-files";
 * import { buildTable } from "fermistate/tables";
 * const region = { density: [1e6, 3e6], temperature: [2e7, 3e7], accuracy: 1e-3 } as const;
 * const table = buildTable(whiteDwarfMatter(), composition({ He4: 1 }), region);
 * await writeText("helium.h5", await tableToHdf5(table));
 * ```
 */
export async function tableToHdf5(table: FreeEnergyTable): Promise<Uint8Array> {
  return hdf5OfTable(freeEnergyForm, table);
}

/** The writer of HDF5; `invalid-option` where the package is missing. */
export async function hdf5Writer(): Promise<typeof import("h5wasm")> {
  return optionalPackage("h5wasm", "HDF5", () => import("h5wasm"));
}

/** The same of any kind of table. */
export async function hdf5OfTable<T>(form: TableForm<T>, table: T): Promise<Uint8Array> {
  const items = form.itemsOf(form.check(table, "invalid-option"));
  const checksum = await checksumOf(items);
  const hdf5 = await hdf5Writer();
  await hdf5.ready;
  const attributes = {
    title: form.titleOf(table),
    creator: `fermistate ${libraryVersion}`,
    reading: form.recipe,
    checksum_recipe: checksumRecipe,
  };
  const bytes = hdf5OfItems(hdf5, [...items, ...formatItems(items, checksum)], attributes, form.meaningOf);
  await tableOfHdf5(form, bytes); // h5wasm passes over what libhdf5 fails to write
  return bytes;
}

/**
 * The table in an HDF5 file of {@link tableToHdf5}. Needs no package; runs in browsers.
 *
 * What comes back equals what was written, or there is an error: structure, sizes, levels, numbers and the checksum of the
 * content are checked. Takes memory for the numbers once more while the checksum is made, whatever the file claims; nothing
 * in a file is run.
 *
 * @param bytes - the whole file
 * @throws FermistateError `invalid-file` for a file that is damaged, truncated, of another version or layout, or written by
 * another program
 */
export async function tableFromHdf5(bytes: Uint8Array): Promise<FreeEnergyTable> {
  return tableOfHdf5(freeEnergyForm, bytes);
}

/** The same of any kind of table. */
export async function tableOfHdf5<T>(form: TableForm<T>, bytes: Uint8Array): Promise<T> {
  requireBytes(bytes);
  const read = hdf5Reader(bytes);
  return checkedTable(form, read, read("format/checksum", "text", [])[0]!);
}
