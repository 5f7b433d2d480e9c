/**
 * Stellar structure: Lane-Emden functions, stars of any barotrope in Newton's and Einstein's gravity, limiting masses,
 * bounds. Runs in Node and browsers, no dependencies.
 *
 * @packageDocumentation
 */
export type { Barotrope, BarotropeLimit, BarotropeState, DensityJump } from "../barotropes/barotrope.js";
export { FermistateError, isFermistateError } from "../errors.js";
export type { StarFinding, StarFindingCode } from "./findings.js";
export type { Relativity } from "./hydrostatic-equations.js";
export type { LadderEnd, LadderRung, LadderRungCode } from "./ladder-rung.js";
export * from "./lane-emden.js";
export { chandrasekharMass, type MassUnit, type MassUnitOptions, uniformSphereMass } from "./limiting-mass.js";
export { type LadderOptions, limitingMassLadder } from "./limiting-mass-ladder.js";
export {
  type MassLimitReason,
  type MaximumMass,
  type MaximumMassOptions,
  maximumMass,
  type TurningPoint,
} from "./maximum-mass.js";
export type { ProfileColumns, StarPoint, StarProfile } from "./profile.js";
export * from "./radiation-pressure.js";
export {
  type MassRadiusSequence,
  massRadiusSequence,
  type SequenceOptions,
  type SequenceWith,
} from "./sequence.js";
export {
  hydrostaticStar,
  type Known,
  type SingleStarOptions,
  type Star,
  type StarOptions,
  type StarWith,
} from "./star.js";
export { type StarFigures, type StarFiguresOptions, starFigures } from "./star-figures.js";
export { type StarOfMassOptions, starOfMass } from "./star-of-mass.js";
