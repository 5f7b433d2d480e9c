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
import { notesOf } from "../matter/species-list.js";
import type { LatticeConstants } from "./lattice.js";
import { alloyDeviation, type LiquidMixture, liquidMixture } from "./mixing.js";
import * as slot from "./slots.js";

/** Constants of a composition for the Coulomb rooms. */
export interface CoulombSpecies {
  /**
   * One record per charged species, slots of slots.ts; for many compositions in turn {@link fillIons} allocates
   * nothing.
   */
  readonly ions: readonly Float64Array[];
  /** The charged species, and the lattice: what {@link fillIons} makes records of. */
  readonly charged: readonly Species[];
  readonly lattice: LatticeConstants;
  /** Net electrons, 1/g. */
  readonly electronsPerGram: number;
  /** Mean of R_S = 3 (Gamma/theta)^2 over the charged nuclei, times rho^(1/3); 0 without charge. */
  readonly quantumRadius: number;
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

/** Under which symbol a composition keeps its constants for a lattice. */
const keys = /* @__PURE__ */ new WeakMap<LatticeConstants, symbol>();

/** The constants of a composition for a lattice; computed at the first call. */
export function coulombSpecies(composition: Composition, lattice: LatticeConstants): CoulombSpecies {
  let key = keys.get(lattice);
  if (key === undefined) {
    key = Symbol("Coulomb species");
    keys.set(lattice, key);
  }
  const notes = notesOf(composition);
  let found = notes[key] as CoulombSpecies | undefined;
  if (found === undefined) {
    found = new SummedSpecies(composition, lattice);
    notes[key] = found;
  }
  return found;
}

/** What only a crystal or only a liquid needs is computed when it is asked for. */
class SummedSpecies implements CoulombSpecies {
  readonly charged: readonly Species[];
  readonly lattice: LatticeConstants;
  readonly electronsPerGram: number;
  readonly quantumRadius: number;
  readonly ionsBoltzmann: number;
  readonly electronsBoltzmann: number;
  readonly gammaE: number;
  readonly rs: number;
  readonly x: number;
  readonly madelung: number;
  readonly zeroPoint: number;
  readonly anharmonicGround: number;
  readonly mixture: CoulombSpecies["mixture"];
  #ions: Float64Array[] | undefined;
  #alloy: number | undefined;
  #mixing: number | undefined;
  #spin: number | undefined;

  constructor({ electronsPerGram, ionsPerGram, species }: Composition, lattice: LatticeConstants) {
    const radius = Math.cbrt(3 / (4 * Math.PI * electronsPerGram)); // a_e at rho = 1
    const gammaE = elementaryChargeSquared / (radius * boltzmannConstant);
    const charged = species.filter(({ chargeNumber }) => chargeNumber > 0);
    const ionsBoltzmann = ionsPerGram * boltzmannConstant;
    let share = 0;
    let gammas = 0;
    let thetas = 0;
    let ground = 0;
    let radii = 0;
    for (const one of charged) {
      const fraction = one.numberFraction;
      const theta = thetaOf(one, electronsPerGram);
      const gamma = fiveThirds(one.chargeNumber) * gammaE;
      const ratio = gamma / theta;
      share += fraction;
      gammas += fraction * gamma;
      thetas += fraction * theta;
      ground += fraction * ((theta * theta) / gamma);
      radii += fraction * 3 * ratio * ratio;
    }
    this.charged = charged;
    this.lattice = lattice;
    this.electronsPerGram = electronsPerGram;
    this.quantumRadius = share === 0 ? 0 : radii / share;
    this.ionsBoltzmann = ionsBoltzmann;
    this.electronsBoltzmann = electronsPerGram * boltzmannConstant;
    this.gammaE = gammaE;
    this.rs = radius / bohrRadius;
    this.x = (Math.cbrt((9 * Math.PI) / 4) * fineStructureConstant * bohrRadius) / radius;
    this.madelung = ionsBoltzmann * lattice.madelung * gammas;
    this.zeroPoint = ionsBoltzmann * 1.5 * lattice.u1 * thetas;
    this.anharmonicGround = -ionsBoltzmann * lattice.anharmonicQuantum * ground;
    this.mixture = charged.length > 1 ? new Mixture(charged) : undefined;
  }

  get ions(): readonly Float64Array[] {
    if (this.#ions === undefined) {
      this.#ions = [];
      fillIons(this.#ions, this);
    }
    return this.#ions;
  }

  get alloy(): number {
    this.#alloy ??= this.mixture === undefined ? 0 : this.ionsBoltzmann * this.gammaE * alloyDeviation(this.charged);
    return this.#alloy;
  }

  get mixing(): number {
    this.#mixing ??= this.mixture === undefined ? 0 : mixingEntropy(this.ions);
    return this.#mixing;
  }

  get spin(): number {
    this.#spin ??= -this.charged.reduce((sum, one) => sum + one.numberFraction * Math.log(one.spinDegeneracy), 0);
    return this.#spin;
  }
}

/** The liquid's mixture correction, each form when it is asked for. */
class Mixture {
  readonly #charged: readonly Species[];
  #polarisable: LiquidMixture | undefined;
  #rigid: LiquidMixture | undefined;

  constructor(charged: readonly Species[]) {
    this.#charged = charged;
  }

  get polarisable(): LiquidMixture {
    this.#polarisable ??= liquidMixture(this.#charged, true);
    return this.#polarisable;
  }

  get rigid(): LiquidMixture {
    this.#rigid ??= liquidMixture(this.#charged, false);
    return this.#rigid;
  }
}

/** sum x_j ln(x_j Z_j/<Z>) over charged nuclei, x_j among them in the logarithm. */
function mixingEntropy(ions: readonly Float64Array[]): number {
  const sum = (term: (ion: Float64Array) => number): number =>
    ions.reduce((total, ion) => total + ion[slot.ION_X]! * term(ion), 0);
  const share = sum(() => 1); // number fraction of charged nuclei
  const meanCharge = sum((ion) => ion[slot.ION_Z]!) / share;
  return sum((ion) => Math.log(((ion[slot.ION_X]! / share) * ion[slot.ION_Z]!) / meanCharge));
}

/** Functions of the charge number, by lattice, of nuclei with integer Z. */
const records = /* @__PURE__ */ new WeakMap<LatticeConstants, Float64Array[]>();

/** Fills records, one per charged species, making and dropping some where their number is another. */
export function fillIons(ions: Float64Array[], species: CoulombSpecies): void {
  const { charged, electronsPerGram, gammaE, lattice } = species;
  if (ions.length > charged.length) ions.length = charged.length;
  for (let i = 0; i < charged.length; i++) {
    const one = charged[i]!;
    const ion = ions[i];
    if (ion === undefined) ions.push(ofCharge(one.chargeNumber, lattice).slice());
    else if (ion[slot.ION_Z] !== one.chargeNumber) ion.set(ofCharge(one.chargeNumber, lattice));
    const record = ions[i]!;
    const theta = thetaOf(one, electronsPerGram);
    const gamma = record[slot.ION_Z53]! * gammaE;
    record[slot.ION_X] = one.numberFraction;
    record[slot.ION_THETA] = theta;
    record[slot.ION_GAMMA] = gamma;
    record[slot.ION_LOG_Q] = Math.log((0.205 * theta) / gamma);
  }
}

/** theta_j T/rho^(1/2). */
function thetaOf({ chargeNumber, ionMass }: Species, electronsPerGram: number): number {
  const frequency = Math.sqrt((4 * Math.PI * elementaryChargeSquared * electronsPerGram * chargeNumber) / ionMass);
  return (reducedPlanckConstant * frequency) / boltzmannConstant;
}

/** Z^(5/3). */
function fiveThirds(z: number): number {
  const third = Math.cbrt(z);
  return z * third * third;
}

/** The part of the record that depends on the charge alone; not to be written to. */
function ofCharge(z: number, lattice: LatticeConstants): Float64Array {
  if (!Number.isInteger(z)) return chargeRecord(z, lattice);
  let all = records.get(lattice);
  if (all === undefined) {
    all = [];
    records.set(lattice, all);
  }
  all[z] ??= chargeRecord(z, lattice);
  return all[z];
}

function chargeRecord(z: number, lattice: LatticeConstants): Float64Array {
  const ion = new Float64Array(slot.ION_LENGTH);
  const log = Math.log(z);
  const third = Math.cbrt(z);
  const root = Math.sqrt(z);
  ion[slot.ION_Z] = z;
  ion[slot.ION_Z53] = fiveThirds(z);

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
