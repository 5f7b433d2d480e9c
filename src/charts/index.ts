/**
 * Charts of grids as SVG text. Runs in Node and browsers.
 *
 * @packageDocumentation
 */
export { type ChartOptions, chartGrid } from "./chart.js";
