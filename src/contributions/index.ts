/**
 * What a contribution of one's own needs: slots of the point and of the members, and the conversion from natural
 * derivatives. Runs in Node and browsers.
 *
 * @packageDocumentation
 */
export {
  CRYSTAL_FRACTION,
  DENSITY,
  ELECTRON_CHEMICAL_POTENTIAL,
  ELECTRON_COUPLING,
  ELECTRON_DEGENERACY,
  ELECTRON_DENSITY,
  FERMI_ENERGY,
  ION_COUPLING,
  PLASMA_TEMPERATURE_SQUARED,
  POSITRON_DENSITY,
  RADIATION_PRESSURE,
  RELATIVITY,
  TEMPERATURE,
} from "../matter/plasma.js";
export type {
  CompositionDependence,
  Contribution,
  Domain,
  PhasePair,
  Physics,
} from "../thermodynamics/contribution.js";
export {
  addNaturalDerivatives,
  ENERGY,
  ENTROPY,
  HEAT,
  HEAT_T,
  MEMBER_COUNT,
  naturalDerivatives,
  naturalOrder,
  type Order,
  PRESSURE,
  PRESSURE_R,
  PRESSURE_RR,
  PRESSURE_RT,
  PRESSURE_RTT,
  PRESSURE_T,
  PRESSURE_TT,
} from "../thermodynamics/free-energy.js";
export {
  SPECIES_ENERGY,
  SPECIES_ENTROPY,
  SPECIES_LENGTH,
  SPECIES_PRESSURE,
  SPECIES_RESIDUAL,
} from "../thermodynamics/species-members.js";
