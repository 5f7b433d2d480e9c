/**
 * Files of tables and grids: HDF5, CSV on the Web, NumPy's .npz, Parquet. Bytes in, bytes out: runs in Node and browsers;
 * `fermistate/files` writes them whole. HDF5 is written by h5wasm and Parquet by hyparquet-writer, both optional packages.
 *
 * @packageDocumentation
 */

// The types of the arguments, so that this entry point is complete in itself.
export type { Axis } from "../grids/axes.js";
export type { GridTexts } from "../grids/description.js";
export type { FindingCount, FindingsColumn } from "../grids/findings.js";
export type { ColumnName, Grid, GridColumns } from "../grids/grid.js";
export type { RefusedRowCount } from "../grids/refused.js";
export type { SpeciesCertificate, SpeciesError, SpeciesQuantity, SpeciesTable } from "../tables/species-table.js";
export type {
  CertifiedError,
  CertifiedQuantity,
  ColdCurve,
  FreeEnergyTable,
  FreezingLine,
  SheetPhase,
  TableAxis,
  TableCertificate,
  TableSheet,
  TableSource,
} from "../tables/table.js";
export { tableChecksum } from "./checksum.js";
export { type TableCsv, tableCsvNames, tableFromCsv, tableToCsv } from "./csv.js";
export { tableFromHdf5, tableToHdf5 } from "./hdf5.js";
export { gridToParquet } from "./parquet.js";
export {
  speciesTableFromHdf5,
  speciesTableFromNpz,
  speciesTableToHdf5,
  speciesTableToNpz,
} from "./species.js";
