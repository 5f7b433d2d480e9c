/**
 * Barotropes: matter whose pressure depends on density alone, for whoever builds stars. Polytropes, any equation of
 * state along an isotherm or an adiabat, fits, published neutron-star matter, cold catalysed matter. Runs in Node and
 * browsers.
 *
 * @packageDocumentation
 */
export {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
  type BarotropeLimit,
  type BarotropeState,
  type DensityJump,
} from "./barotrope.js";
export { firstElectronCapture } from "./capture-limit.js";
export { type BarotropeFinding, barotropeFindings } from "./findings.js";
export { type BarotropeColumns, type FitOptions, fitPiecewisePolytrope, type PiecewisePolytropeFit } from "./fit.js";
export type { FigureError, Figures, FitError, FitReport } from "./fit-report.js";
export { type BarotropeOptions, barotrope } from "./from-equation-of-state.js";
export { type JoinOptions, joinBarotropes } from "./joined.js";
export { type NucleonGas, neutronGas, neutronProtonElectronGas } from "./nucleon-gas.js";
export { type CrustLayer, type OuterCrust, type OuterCrustOptions, outerCrust } from "./outer-crust.js";
export {
  type PiecewisePolytrope,
  type PiecewisePolytropeOptions,
  piecewisePolytrope,
} from "./piecewise-polytrope.js";
export {
  type BarotropicContribution,
  type DegenerateElectrons,
  degenerateElectrons,
  type PolytropeOptions,
  polytrope,
} from "./polytrope.js";
export { type PublishedBarotrope, publishedBarotrope, publishedBarotropes } from "./published.js";
export { fitSmoothBarotrope, type SmoothBarotrope, type SmoothFit, type SmoothFitOptions } from "./smooth-fit.js";
