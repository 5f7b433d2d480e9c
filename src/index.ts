/**
 * fermistate: equations of state of dense, degenerate matter from one Helmholtz free energy.
 *
 * The public surface of the core, one list. Runs in Node and browsers; no file system, no dependencies.
 * @packageDocumentation
 */
export * from "./constants.js";
export { type ColdCorrectionsOptions, coldCorrections } from "./coulomb/cold-corrections.js";
export {
  type CoulombPlasma,
  coulombPlasma,
} from "./coulomb/coulomb-plasma.js";
export type { LatticeName } from "./coulomb/lattice.js";
export type { CoulombPlasmaOptions, QuantumForm } from "./coulomb/options.js";
export { meltingDensity, meltingTemperature, type Phase } from "./coulomb/phase.js";
export { type RigidMelting, rigidPlasmaMelting } from "./coulomb/rigid-melting.js";
export { type Transition, transition, withPhase } from "./coulomb/transition.js";
export { type ErrorCode, type ErrorDetails, FermistateError, isFermistateError } from "./errors.js";
export { electronPositronGas } from "./fermi-gas/electron-positron-gas.js";
export { type FermionGasOptions, fermionGas } from "./fermi-gas/fermion-gas.js";
export { type SearchColumn, type SolveInput, type SolveOutput, solveColumns } from "./inverse/columns.js";
export type { GivenName, GivenPair, PairOf } from "./inverse/questions.js";
export { type Given, type Guess, type Solution, type SolveOptions, solve } from "./inverse/solve.js";
export { type IdealIonsOptions, idealIons } from "./ions/ideal-ions.js";
export {
  type ChargeMoments,
  type Composition,
  type CompositionOptions,
  composition,
  type MeanNucleus,
  type NucleonFractions,
  requireComposition,
  type Species,
} from "./matter/composition.js";
export { type CompositionInput, type CompositionRows, compositions } from "./matter/composition-rows.js";
export { type Nuclide, nuclide, nuclides } from "./matter/nuclides.js";
export { radiation } from "./radiation.js";
export type { CaptureThreshold } from "./regime/capture.js";
export type { Finding, FindingCode, FindingQuantity, Severity } from "./regime/finding.js";
export type { RegimeOptions } from "./regime/options.js";
export type { RegimeParameters, SpeciesParameters } from "./regime/parameters.js";
export type { KindWord } from "./regime/phase.js";
export { type Regime, regime } from "./regime/regime.js";
export {
  type EquationOfStateWithFindings,
  type StateWithFindings,
  withFindings,
} from "./regime/with-findings.js";
export type { StateVariable } from "./thermodynamics/brackets.js";
export { type Breakdown, breakdown, type Share } from "./thermodynamics/breakdown.js";
export { combine } from "./thermodynamics/combine.js";
export {
  type CompositionDerivatives,
  type CompositionDerivativesOptions,
  compositionDerivatives,
  type DirectionalDerivatives,
  type ReactionDerivatives,
  type RestMass,
  type SpeciesDerivatives,
} from "./thermodynamics/composition-derivatives.js";
export type { CompositionDependence, Contribution, Domain, PhasePair, Physics } from "./thermodynamics/contribution.js";
export {
  type ByVariable,
  type DerivativeColumns,
  type Derivatives,
  type DerivativesEvaluator,
  type DerivativesRequest,
  derivatives,
  derivativesEvaluator,
} from "./thermodynamics/derivatives.js";
export type {
  BatchInput,
  BatchOutput,
  EquationOfState,
  FreeEnergyDerivatives,
  OptionalQuantity,
  RefusedRows,
  State,
} from "./thermodynamics/equation-of-state.js";
export type { Evaluator } from "./thermodynamics/evaluator.js";
export type { Order } from "./thermodynamics/free-energy.js";
export type { DifferentiableQuantity } from "./thermodynamics/gradients.js";
export {
  type MeanDerivatives,
  meanDerivatives,
  type PressureAndEnergy,
} from "./thermodynamics/mean-derivatives.js";
export { type Quantity, type QuantityName, quantities, quantityNames } from "./thermodynamics/quantities.js";
export { type RefusalReason, refusalReasons } from "./thermodynamics/refusal-reasons.js";
export { type WhiteDwarfMatterOptions, whiteDwarfMatter } from "./white-dwarf-matter.js";
