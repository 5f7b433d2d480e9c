/**
 * Tables built in a folder: on threads, on many machines, resumable after a kill, with the same bits however they are split. Node only.
 *
 * @packageDocumentation
 */
export { FermistateError, isFermistateError } from "../errors.js";
export type { Composition, MeanNucleus, NucleonFractions } from "../matter/composition.js";
export type { MatterModule, MatterSource, WhiteDwarfMatterSource } from "../parallel/matter-source.js";
export type { TableOptions } from "../tables/plan.js";
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
export type { Physics } from "../thermodynamics/contribution.js";
export {
  assembleFolders,
  buildInFolder,
  type FolderOptions,
  type FolderProgress,
  type FolderResult,
} from "./folder.js";
export type { TableRequest } from "./request.js";
