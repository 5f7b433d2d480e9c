/** A table of the electrons alone as HDF5 and as NumPy's .npz. */
import type { SpeciesTable } from "../tables/species-table.js";
import { hdf5OfTable, tableOfHdf5 } from "./hdf5.js";
import { npzOfTable, tableOfNpz } from "./npz.js";
import { speciesForm } from "./species-form.js";

/**
 * The bytes of an .npz file that holds a table of `buildSpeciesTable` and describes itself: `numpy.load` reads it, and
 * so do `docs/electron_table.py` and `docs/electron_table.c` of the repository. The same table gives the same bytes.
 *
 * @throws FermistateError `invalid-option` where `table` is no table of this layout
 * @example
 * ```ts
 * import { writeText } from "fermistate/files";
 * import { speciesTableFromNpz, speciesTableToNpz } from "fermistate/table-files";
 * import { buildSpeciesTable } from "fermistate/tables";
 * const bytes = await speciesTableToNpz(buildSpeciesTable({ coarseness: 2 }));
 * await writeText("electrons.npz", bytes);
 * (await speciesTableFromNpz(bytes)).layout; // => 2
 * ```
 */
export async function speciesTableToNpz(table: SpeciesTable): Promise<Uint8Array> {
  return npzOfTable(speciesForm, table);
}

/**
 * The table in an .npz file of {@link speciesTableToNpz}. What comes back equals what was written, or there is an
 * error; memory is bounded by three times the bytes given. Constants other than this library's are kept:
 * `speciesTableContribution` refuses them.
 *
 * @throws FermistateError `invalid-file` for a file that is damaged, truncated, of another version or layout
 */
export async function speciesTableFromNpz(bytes: Uint8Array): Promise<SpeciesTable> {
  return tableOfNpz(speciesForm, bytes);
}

/**
 * The bytes of an HDF5 file that holds a table of `buildSpeciesTable` and describes itself, as `tableToHdf5` does for
 * tables of the free energy. Needs the package h5wasm, which is optional: `npm install h5wasm`.
 *
 * @throws FermistateError `invalid-option` where `table` is no table of this layout, or h5wasm is missing
 */
export async function speciesTableToHdf5(table: SpeciesTable): Promise<Uint8Array> {
  return hdf5OfTable(speciesForm, table);
}

/**
 * The table in an HDF5 file of {@link speciesTableToHdf5}; needs no package. As {@link speciesTableFromNpz} otherwise.
 *
 * @throws FermistateError `invalid-file`
 */
export async function speciesTableFromHdf5(bytes: Uint8Array): Promise<SpeciesTable> {
  return tableOfHdf5(speciesForm, bytes);
}
