/**
 * Charts of grids, and maps over density and temperature, as SVG text. Runs in Node and browsers.
 *
 * @packageDocumentation
 */

// The types of the argument, so that this entry point is complete in itself.
export type { Axis } from "../grids/axes.js";
export type { FindingCount, FindingsColumn } from "../grids/findings.js";
export type { ColumnName, Grid, GridColumns } from "../grids/grid.js";
export type { RefusedRowCount } from "../grids/refused.js";
export { type ChartOptions, chartGrid } from "./chart.js";
export { chartMap, mapOfGrid } from "./map.js";
export type { MapData, MapMark, MapOptions } from "./map-request.js";
