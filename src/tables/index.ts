/**
 * Tables of the free energy: build, look up, certify. Consistent to rounding between nodes, swapped in without touching the solver.
 *
 * @packageDocumentation
 */
export { FermistateError, isFermistateError } from "../errors.js";
export { assembleTable, buildTable } from "./build.js";
export { type TableOptions, type TablePlan, tablePlan } from "./plan.js";
export { buildSpeciesTable, type SpeciesTableOptions } from "./species-build.js";
export { speciesTableContribution } from "./species-contribution.js";
export {
  type SpeciesCertificate,
  type SpeciesError,
  type SpeciesQuantity,
  type SpeciesTable,
  speciesTableBytes,
} from "./species-table.js";
export { buildStrip, type SheetStrip, type Strip } from "./strip.js";
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
