/**
 * Tables of the free energy: build, look up, certify. Consistent to rounding between nodes, swapped in without touching the solver.
 *
 * @packageDocumentation
 */
export { FermistateError, isFermistateError } from "../errors.js";
export type { Composition, Species } from "../matter/composition.js";
export type { Contribution, Domain } from "../thermodynamics/contribution.js";
export type { EquationOfState } from "../thermodynamics/equation-of-state.js";
export { buildTable } from "./build.js";
export type { StateColumns } from "./foreign/columns.js";
export { type ColumnsOptions, type ColumnsResult, equationOfStateFromColumns } from "./foreign/from-columns.js";
export type {
  ColumnsDeviations,
  ColumnsOutlier,
  ColumnsReport,
  ColumnsResiduals,
  ColumnsStability,
  ErrorSpread,
  Places,
  ResidualMap,
} from "./foreign/report.js";
export { columnsReportText } from "./foreign/report-text.js";
export type { TableOptions } from "./plan.js";
export { buildSpeciesTable, type SpeciesTableOptions } from "./species-build.js";
export { speciesTableContribution } from "./species-contribution.js";
export {
  type SpeciesCertificate,
  type SpeciesError,
  type SpeciesQuantity,
  type SpeciesTable,
  speciesTableBytes,
} from "./species-table.js";
export {
  type CertifiedError,
  type CertifiedQuantity,
  type ColdCurve,
  type FreeEnergyTable,
  type FreezingLine,
  type SheetPhase,
  type TableAxis,
  type TableCertificate,
  type TableSheet,
  type TableSource,
  tableBytes,
} from "./table.js";
export { tableEquationOfState, tabulated } from "./tabulated.js";
