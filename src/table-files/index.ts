/**
 * Files of tables and grids: HDF5, CSV on the Web, Parquet. Bytes in, bytes out: runs in Node and browsers;
 * `fermistate/files` writes them whole. HDF5 is written by h5wasm and Parquet by hyparquet-writer, both optional packages.
 *
 * @packageDocumentation
 */

export type * from "../tables/table.js";
export { tableChecksum } from "./checksum.js";
export { type TableCsv, tableCsvNames, tableFromCsv, tableToCsv } from "./csv.js";
export { tableFromHdf5, tableToHdf5 } from "./hdf5.js";
export { gridToParquet } from "./parquet.js";
