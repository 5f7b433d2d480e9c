/** The terms of the Coulomb plasma as switches: a part has one of them, the whole all that the options leave in. */
import type { QuantumForm } from "./options.js";

/** Which terms are in a sum. */
export interface Terms {
  readonly idealIons: boolean;
  readonly correlation: boolean;
  readonly quantum: QuantumForm | false;
  readonly lattice: boolean;
  readonly zeroPoint: boolean;
  readonly phonons: boolean;
  readonly anharmonic: boolean;
  readonly polarisation: boolean;
  readonly liquidMixture: boolean;
  readonly mixingEntropy: boolean;
  readonly alloy: boolean;
  readonly exchange: boolean;
}

/** None of them. */
export const nothing: Terms = {
  idealIons: false,
  correlation: false,
  quantum: false,
  lattice: false,
  zeroPoint: false,
  phonons: false,
  anharmonic: false,
  polarisation: false,
  liquidMixture: false,
  mixingEntropy: false,
  alloy: false,
  exchange: false,
};
