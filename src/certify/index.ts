/**
 * Certification: the slow, independent evaluation to any number of digits. Runs in Node and browsers, needs decimal.js.
 *
 * @packageDocumentation
 */
export type { MapMark, MapOptions } from "../charts/map-request.js";
export { FermistateError, isFermistateError } from "../errors.js";
export {
  certificateCsv,
  certificateText,
  type ErrorMap,
  errorMaps,
  stateCertificateText,
} from "./certificate-text.js";
export {
  type Certificate,
  type CertificateColumns,
  type CertifiedErrors,
  type CertifyOptions,
  certify,
  type ErrorSummary,
  type RefusedPoints,
} from "./certify.js";
export { type CertifiedValue, type CertifyStateOptions, certifyState, type StateCertificate } from "./certify-state.js";
export type { ReferenceElectronGasInput } from "./conditions.js";
export {
  type ReferenceElectronGas,
  type ReferenceOptions,
  referenceElectronGas,
} from "./electron-gas.js";
export { certificateMap } from "./error-map.js";
export type { ExactNumber } from "./exact.js";
export { type ReferenceFermiDirac, referenceFermiDirac } from "./fermi-dirac.js";
export type { CertifiedQuantity } from "./reference-quantities.js";
export type { CertifiedRegion, PointColumns } from "./sample.js";
export type { ElectronGasValues } from "./state-functions.js";
