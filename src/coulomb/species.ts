/**
 * What the Coulomb terms need of a composition, computed once: constants per species and sums.
 *
 * Charge functions of the polarisation fits: Potekhin & Chabrier 2000, Phys. Rev. E 62, 8554, sections on the ion-electron
 * term of liquid and crystal (coefficients from memory, confirmed to a few per cent by independent linear response; range
 * Z <= 30). Fundamental constants CODATA 2022; ion masses without electron binding.
 */
import {
  bohrRadius,
  boltzmannConstant,
  elementaryChargeSquared,
  fineStructureConstant,
  reducedPlanckConstant,
} from "../constants.js";
import type { Composition, Species } from "../matter/composition.js";
import type { LatticeConstants } from "./lattice.js";
import { alloyDeviation, type LiquidMixture, liquidMixture } from "./mixing.js";
import * as slot from "./slots.js";

/** Constants of a composition for the Coulomb rooms. */
export interface CoulombSpecies {
  /** One record per charged species, slots of slots.ts. */
  readonly ions: readonly Float64Array[];
  /** N_i k, erg/(g K): nuclei of all species, free neutrons included. */
  readonly ionsBoltzmann: number;
  /** N_e k, erg/(g K). */
  readonly electronsBoltzmann: number;
  /** Gamma_e T/rho^(1/3). */
  readonly gammaE: number;
  /** r_s rho^(1/3). */
  readonly rs: number;
  /** x_r/rho^(1/3). */
  readonly x: number;
  /** Madelung energy over rho^(1/3), erg/g. */
  readonly madelung: number;
  /** Zero-point energy over rho^(1/2), erg/g. */
  readonly zeroPoint: number;
  /** Quantum part of the anharmonic ground state over rho^(2/3), erg/g. */
  readonly anharmonicGround: number;
  /** Deviation of a random alloy from linear mixing over rho^(1/3), erg/g; 0 for one species. */
  readonly alloy: number;
  /** sum x_j ln(x_j Z_j/<Z>): entropy of mixing of a crystal (negative), per ion and k. */
  readonly mixing: number;
  /** -sum x_j ln g_j: spins, per ion and k. */
  readonly spin: number;
  /** Parameters of the liquid's mixture correction with polarisable and with rigid background; undefined for one species. */
  readonly mixture: { readonly polarisable: LiquidMixture; readonly rigid: LiquidMixture } | undefined;
}

/** Constants of the compositions seen, for each lattice. */
const known = new WeakMap<LatticeConstants, WeakMap<Composition, CoulombSpecies>>();

/** The constants of a composition for a lattice; computed at the first call. */
export function coulombSpecies(composition: Composition, lattice: LatticeConstants): CoulombSpecies {
  let ofLattice = known.get(lattice);
  if (ofLattice === undefined) {
    ofLattice = new WeakMap();
    known.set(lattice, ofLattice);
  }
  let found = ofLattice.get(composition);
  if (found === undefined) {
    found = compute(composition, lattice);
    ofLattice.set(composition, found);
  }
  return found;
}

function compute(composition: Composition, lattice: LatticeConstants): CoulombSpecies {
  const { electronsPerGram, ionsPerGram } = composition;
  const radius = Math.cbrt(3 / (4 * Math.PI * electronsPerGram)); // a_e at rho = 1
  const gammaE = elementaryChargeSquared / (radius * boltzmannConstant);
  const charged = composition.species.filter(({ chargeNumber }) => chargeNumber > 0);
  const ions = charged.map((one) => ionRecord(one, electronsPerGram, gammaE, lattice));
  const ionsBoltzmann = ionsPerGram * boltzmannConstant;
  const sum = (term: (ion: Float64Array) => number): number =>
    ions.reduce((total, ion) => total + ion[slot.ION_X]! * term(ion), 0);
  const theta = (ion: Float64Array): number => ion[slot.ION_THETA]!;
  const gamma = (ion: Float64Array): number => ion[slot.ION_GAMMA]!;
  const several = charged.length > 1;
  const share = sum(() => 1); // number fraction of charged nuclei
  const meanCharge = sum((ion) => ion[slot.ION_Z]!) / share;
  const logarithm = (ion: Float64Array): number =>
    Math.log(((ion[slot.ION_X]! / share) * ion[slot.ION_Z]!) / meanCharge);
  return Object.freeze({
    ions, // not frozen: V8 does not inline the access to an element of a frozen array
    ionsBoltzmann,
    electronsBoltzmann: electronsPerGram * boltzmannConstant,
    gammaE,
    rs: radius / bohrRadius,
    x: (Math.cbrt((9 * Math.PI) / 4) * fineStructureConstant * bohrRadius) / radius,
    madelung: ionsBoltzmann * lattice.madelung * sum(gamma),
    zeroPoint: ionsBoltzmann * 1.5 * lattice.u1 * sum(theta),
    anharmonicGround: -ionsBoltzmann * lattice.anharmonicQuantum * sum((ion) => (theta(ion) * theta(ion)) / gamma(ion)),
    alloy: several ? ionsBoltzmann * gammaE * alloyDeviation(charged) : 0,
    mixing: several ? sum(logarithm) : 0,
    spin: -charged.reduce((total, one) => total + one.numberFraction * Math.log(one.spinDegeneracy), 0),
    mixture: several ? { polarisable: liquidMixture(charged, true), rigid: liquidMixture(charged, false) } : undefined,
  });
}

/** The record of one species. */
function ionRecord(one: Species, electronsPerGram: number, gammaE: number, lattice: LatticeConstants): Float64Array {
  const ion = new Float64Array(slot.ION_LENGTH);
  const z = one.chargeNumber;
  const log = Math.log(z);
  const third = Math.cbrt(z);
  const root = Math.sqrt(z);
  const z53 = z * third * third;
  const frequency = Math.sqrt((4 * Math.PI * elementaryChargeSquared * electronsPerGram * z) / one.ionMass);
  const theta = (reducedPlanckConstant * frequency) / boltzmannConstant;
  ion[slot.ION_X] = one.numberFraction;
  ion[slot.ION_Z] = z;
  ion[slot.ION_Z53] = z53;
  ion[slot.ION_THETA] = theta;
  ion[slot.ION_GAMMA] = z53 * gammaE;
  ion[slot.ION_LOG_Q] = Math.log((0.205 * theta) / (z53 * gammaE));

  const a = 1.11 * z ** 0.475;
  const c = (18 / 175) * (12 / Math.PI) ** (2 / 3) * z * z * third * (1 - 1 / third + 0.2 / root);
  ion[slot.ION_C_DH] = (z / Math.sqrt(3)) * ((1 + z) ** 1.5 - 1 - z * root);
  ion[slot.ION_C_TF] = c * a;
  ion[slot.ION_A] = a;
  ion[slot.ION_B] = 0.2 + 0.078 * log * log;
  ion[slot.ION_NU] = 1.16 + 0.08 * log;
  ion[slot.ION_W] = 0.78 / root;
  ion[slot.ION_Z3] = z ** 3;
  ion[slot.ION_ZETA] = (z - 1) / 9;
  ion[slot.ION_E0] = 0.001 * z * z;
  ion[slot.ION_H1] = 0.18 / Math.sqrt(root);
  ion[slot.ION_H2] = 0.37 / root + 0.2;

  const [a1, a2, a3, a4] = lattice.screening;
  const z6 = 0.222 * z ** 6;
  const thomasFermi = (54 / 175) * Math.cbrt(12 / Math.PI) * fineStructureConstant;
  ion[slot.ION_F_INF] = thomasFermi * third * third * (1 - a1 * z ** -0.267 + 0.27 / z);
  ion[slot.ION_B2] = 1 + ((2.25 / third) * (1 + a2 * z ** 5 + z6)) / (1 + z6);
  ion[slot.ION_A3] = a3;
  ion[slot.ION_B3] = a4 / (1 + log);
  ion[slot.ION_B4] = 0.395 * log + 0.347 / (z * root);
  ion[slot.ION_S] = 1 / (1 + 0.01 * log ** 1.5 + 0.097 / (z * z));
  return ion;
}
