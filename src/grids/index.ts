/**
 * Grids: an equation of state over densities and temperatures, as columns, CSV, JSON or NumPy arrays. Runs in Node and browsers.
 *
 * @packageDocumentation
 */
export {
  type Axis,
  type LinearAxisOptions,
  type LogarithmicAxisOptions,
  linearAxis,
  listedAxis,
  logarithmicAxis,
  maximumAxisPoints,
} from "./axes.js";
export { csvMetadataName, gridToCsv, gridToCsvMetadata, gridToCsvPieces } from "./csv.js";
export type { GridTexts } from "./description.js";
export type { FindingCount, FindingsColumn } from "./findings.js";
export { type ColumnName, type Grid, type GridColumns, grid } from "./grid.js";
export { gridToJson, gridToJsonPieces } from "./json.js";
export { arrayFromNpy, arrayToNpy, type NumberArray } from "./npy.js";
export { arraysFromNpz, arraysToNpz, gridToNpz } from "./npz.js";
export type { RefusedRowCount } from "./refused.js";
export type { GridOptions } from "./request.js";
