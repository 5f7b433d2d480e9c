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
import type { Composition } from "../matter/composition.js";
import { notesOf, numberFractionsOf, type SpeciesList } from "../matter/species-list.js";
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
  readonly composition: Composition;
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
  readonly composition: Composition;
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

  constructor(composition: Composition, lattice: LatticeConstants) {
    const { electronsPerGram, ionsPerGram } = composition;
    const { list } = notesOf(composition);
    const { frequency, fiveThirds } = chargesOf(list);
    const numbers = numberFractionsOf(composition);
    const radius = Math.cbrt(3 / (4 * Math.PI * electronsPerGram)); // a_e at rho = 1
    const gammaE = elementaryChargeSquared / (radius * boltzmannConstant);
    const root = Math.sqrt(electronsPerGram);
    const ionsBoltzmann = ionsPerGram * boltzmannConstant;
    let share = 0;
    let gammas = 0;
    let thetas = 0;
    let ground = 0;
    let radii = 0;
    for (let i = list.firstCharged; i < list.nuclei.length; i++) {
      const fraction = numbers[i]!;
      const theta = frequency[i]! * root;
      const gamma = fiveThirds[i]! * gammaE;
      const ratio = gamma / theta;
      share += fraction;
      gammas += fraction * gamma;
      thetas += fraction * theta;
      ground += fraction * (theta / ratio);
      radii += fraction * 3 * ratio * ratio;
    }
    this.composition = composition;
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
    this.mixture = list.nuclei.length - list.firstCharged > 1 ? new Mixture(composition) : undefined;
  }

  get ions(): readonly Float64Array[] {
    if (this.#ions === undefined) {
      this.#ions = [];
      fillIons(this.#ions, this);
    }
    return this.#ions;
  }

  get alloy(): number {
    this.#alloy ??=
      this.mixture === undefined ? 0 : this.ionsBoltzmann * this.gammaE * alloyDeviation(this.composition);
    return this.#alloy;
  }

  get mixing(): number {
    this.#mixing ??= this.mixture === undefined ? 0 : mixingEntropy(this.composition);
    return this.#mixing;
  }

  get spin(): number {
    this.#spin ??= spinEntropy(this.composition);
    return this.#spin;
  }
}

/** The liquid's mixture correction, each form when it is asked for. */
class Mixture {
  readonly #composition: Composition;
  #polarisable: LiquidMixture | undefined;
  #rigid: LiquidMixture | undefined;

  constructor(composition: Composition) {
    this.#composition = composition;
  }

  get polarisable(): LiquidMixture {
    this.#polarisable ??= liquidMixture(this.#composition, true);
    return this.#polarisable;
  }

  get rigid(): LiquidMixture {
    this.#rigid ??= liquidMixture(this.#composition, false);
    return this.#rigid;
  }
}

/** sum x_j ln(x_j Z_j/<Z>) over charged nuclei, x_j among them in the logarithm. */
function mixingEntropy(composition: Composition): number {
  const { nuclei, firstCharged } = notesOf(composition).list;
  const numbers = numberFractionsOf(composition);
  let share = 0; // number fraction of charged nuclei
  let charge = 0;
  for (let i = firstCharged; i < nuclei.length; i++) {
    share += numbers[i]!;
    charge += numbers[i]! * nuclei[i]!.chargeNumber;
  }
  const meanCharge = charge / share;
  let sum = 0;
  for (let i = firstCharged; i < nuclei.length; i++) {
    sum += numbers[i]! * Math.log(((numbers[i]! / share) * nuclei[i]!.chargeNumber) / meanCharge);
  }
  return sum;
}

/** -sum x_j ln g_j over charged nuclei. */
function spinEntropy(composition: Composition): number {
  const { nuclei, firstCharged } = notesOf(composition).list;
  const numbers = numberFractionsOf(composition);
  let sum = 0;
  for (let i = firstCharged; i < nuclei.length; i++) sum += numbers[i]! * Math.log(nuclei[i]!.spinDegeneracy);
  return -sum;
}

/** What the species alone decide, by their place in a list. */
interface Charges {
  /** theta_j T/(rho n_e)^(1/2), n_e electrons per gram. */
  readonly frequency: Float64Array;
  /** Z^(5/3). */
  readonly fiveThirds: Float64Array;
  /** ln of 0.205 theta_j/Gamma_j at T = 1, rho = 1 and one electron per gram. */
  readonly logQ: Float64Array;
}

const chargesKey = /* @__PURE__ */ Symbol("charges of a list");

function chargesOf(list: SpeciesList): Charges {
  list.notes[chargesKey] ??= makeCharges(list);
  return list.notes[chargesKey] as Charges;
}

function makeCharges({ nuclei, powers: { fiveThirds } }: SpeciesList): Charges {
  const frequency = Float64Array.from(nuclei, ({ chargeNumber, ionMass }) => {
    const square = (4 * Math.PI * elementaryChargeSquared * chargeNumber) / ionMass;
    return (reducedPlanckConstant * Math.sqrt(square)) / boltzmannConstant;
  });
  const coupling = (elementaryChargeSquared * Math.cbrt((4 * Math.PI) / 3)) / boltzmannConstant;
  const logQ = frequency.map((theta, i) => Math.log((0.205 * theta) / (coupling * fiveThirds[i]!)));
  return { frequency, fiveThirds, logQ };
}

/** Functions of the charge number, by lattice, of nuclei with integer Z. */
const records = /* @__PURE__ */ new WeakMap<LatticeConstants, Float64Array[]>();

/** Fills records, one per charged species, making and dropping some where their number is another. */
export function fillIons(ions: Float64Array[], species: CoulombSpecies): void {
  const { composition, electronsPerGram, gammaE, lattice } = species;
  const { list } = notesOf(composition);
  const { nuclei, firstCharged } = list;
  const { frequency, logQ } = chargesOf(list);
  const numbers = numberFractionsOf(composition);
  const root = Math.sqrt(electronsPerGram);
  const logElectrons = Math.log(electronsPerGram) / 6; // theta/Gamma goes like n_e^(1/2 - 1/3)
  const count = nuclei.length - firstCharged;
  if (ions.length > count) ions.length = count;
  for (let i = 0; i < count; i++) {
    const place = firstCharged + i;
    const { chargeNumber } = nuclei[place]!;
    const ion = ions[i];
    if (ion === undefined) ions.push(ofCharge(chargeNumber, lattice).slice());
    else if (ion[slot.ION_Z] !== chargeNumber) ion.set(ofCharge(chargeNumber, lattice));
    const record = ions[i]!;
    record[slot.ION_X] = numbers[place]!;
    record[slot.ION_THETA] = frequency[place]! * root;
    record[slot.ION_GAMMA] = record[slot.ION_Z53]! * gammaE;
    record[slot.ION_LOG_Q] = logQ[place]! + logElectrons;
  }
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
