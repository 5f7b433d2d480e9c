/**
 * Two equations of state compared before one is swapped for the other. Runs in Node and browsers.
 *
 * @packageDocumentation
 */

// The types of arguments and results, so that this entry point is complete in itself.
export type { MapMark, MapOptions } from "../charts/map-request.js";
export type { Axis } from "../grids/axes.js";
export { compare } from "./compare.js";
export { type ComparisonMapOptions, comparisonCsv, comparisonJson, comparisonMap } from "./forms.js";
export type { CompareOptions } from "./request.js";
export type {
  Comparison,
  ConsistencyCheck,
  ConsistencyName,
  Jump,
  NodeCounts,
  Offset,
  Place,
  QuantityDifference,
  RefusalCount,
  Refusals,
  Region,
  RegionDifference,
  SignCount,
  WorstPlace,
} from "./result.js";
export { comparisonSummary, comparisonText } from "./text.js";
