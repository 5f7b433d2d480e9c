/**
 * The terms of the Coulomb plasma at a point, summed: which phase, what the terms share, and which of them count.
 *
 * Functions of the module and records of the module, not of a closure: V8 then builds their addresses into the code.
 */
import { FermistateError } from "../errors.js";
import { idealIons } from "../ions/ideal-ions.js";
import type { Composition } from "../matter/composition.js";
import {
  CRYSTAL_FRACTION,
  DENSITY,
  ELECTRON_COUPLING,
  ELECTRON_DENSITY,
  ION_COUPLING,
  RELATIVITY,
  radiusFactor,
  TEMPERATURE,
} from "../matter/plasma.js";
import { notesOf } from "../matter/species-list.js";
import {
  addInverseThermal,
  addThermal,
  clear,
  clearSingle,
  NATURAL_LENGTH,
  SINGLE_LENGTH,
} from "../numerics/natural.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import { addNaturalDerivatives, type Order } from "../thermodynamics/free-energy.js";
import { addAnharmonic, addGroundState, addPhonons, phononFit } from "./crystal.js";
import { addCrystalPolarisation } from "./crystal-polarisation.js";
import { addExchangeCorrelation } from "./exchange.js";
import { bcc, fcc } from "./lattice.js";
import { addLiquidCorrelation } from "./liquid.js";
import { addLiquidPolarisation, preparePolarisation } from "./liquid-polarisation.js";
import { addBaikoYakovlev, addTwoOscillators, addWignerKirkwood } from "./liquid-quantum.js";
import { addMixture } from "./mixing.js";
import type { CoulombPlasmaOptions } from "./options.js";
import { highestCrystalDensity } from "./phase.js";
import {
  POINT_CUBE_ROOT,
  POINT_DENSITY,
  POINT_ELECTRON_ENERGY,
  POINT_GAMMA_E,
  POINT_KT,
  POINT_LENGTH,
  POINT_LOG_DENSITY,
  POINT_LOG_GAMMA_E,
  POINT_ROOT,
  POINT_ROOT_DENSITY,
  POINT_ROOT_GAMMA_E,
  POINT_RS,
  POINT_T,
  POINT_TEMPERATURE,
  POINT_X,
  TANGENT_LENGTH,
} from "./slots.js";
import { type CoulombSpecies, coulombSpecies, fillIons } from "./species.js";
import { addSpeciesDerivatives, type Choice } from "./species-derivatives.js";
import { fillTangentsOfCrystal, fillTangentsOfLiquid } from "./species-tangents.js";
import type { Terms } from "./terms.js";

/** A choice of terms with what it needs at every point, and what depends on the composition it met last. */
export interface CoulombSum extends Choice {
  readonly options: Required<CoulombPlasmaOptions>;
  /** Ideal ions of the liquid; free neutrons of the crystal. */
  readonly gas: Contribution;
  readonly neutrons: Contribution;
  composition: Composition | undefined;
  species: CoulombSpecies | undefined;
  /** Records of its charged species, filled anew for each composition. */
  readonly ions: Float64Array[];
  crystalLimit: number;
  /** Whether the ions were a crystal at the last point. */
  crystal: boolean;
  /** How the constants change with the amount of each species (slots.ts), and which of them are those of the composition. */
  tangents: Float64Array;
  knowsLiquid: boolean;
  knowsCrystal: boolean;
}

/** A sum of the chosen terms. */
export function coulombSum(terms: Terms, options: Required<CoulombPlasmaOptions>): CoulombSum {
  const lattice = options.lattice === "bcc" ? bcc : fcc;
  return {
    terms,
    options,
    lattice,
    fit: phononFit(lattice),
    polarisable: options.polarisation,
    gas: idealIons({ freeNeutrons: options.freeNeutrons }),
    neutrons: idealIons({ only: "free neutrons" }),
    composition: undefined,
    species: undefined,
    ions: [], // not frozen: V8 does not inline the access to an element of a frozen array
    crystalLimit: Number.NaN,
    crystal: false,
    tangents: new Float64Array(0),
    knowsLiquid: false,
    knowsCrystal: false,
  };
}

const plasma = new Float64Array(POINT_LENGTH);
const natural = new Float64Array(NATURAL_LENGTH);
const ofGamma = new Float64Array(SINGLE_LENGTH);
const ofTheta = new Float64Array(SINGLE_LENGTH);
const ofBoth = new Float64Array(NATURAL_LENGTH);

/** t = T/T_F = 2 (4/9 pi)^(2/3) r_s/Gamma_e, T_F non-relativistic. */
const NON_RELATIVISTIC = 2 * (4 / (9 * Math.PI)) ** (2 / 3);

/** Adds the sum to the members of the free energy. */
export function addCoulombSum(
  sum: CoulombSum,
  point: Float64Array,
  composition: Composition,
  order: Order,
  members: Float64Array,
): void {
  const { terms, options } = sum;
  const species = enter(sum, point, composition);
  const crystal = isCrystal(sum, point);
  sum.crystal = crystal;
  point[CRYSTAL_FRACTION] = crystal ? 1 : 0;
  if (point[TEMPERATURE] === 0 && composition.ionsPerGram > 0) {
    if (!crystal) refuseColdLiquid(options, point);
    if (terms.idealIons && options.freeNeutrons && composition.ionsPerGram > composition.chargedIonsPerGram) {
      refuseColdNeutrons();
    }
  }
  if (terms.idealIons) {
    if (!crystal) sum.gas.add(point, composition, order, members);
    else if (options.freeNeutrons) sum.neutrons.add(point, composition, order, members);
  }
  if (point[ELECTRON_DENSITY] === 0) return; // no charge, no Coulomb terms
  clear(natural, order);
  clear(ofBoth, order);
  clearSingle(ofTheta);
  if (crystal) {
    addCrystal(sum, species, order);
  } else {
    clearSingle(ofGamma);
    addLiquid(sum, species, order);
    addThermal(natural, order, plasma, 1 / 3, ofGamma); // POINT_KT is slot 0: the record is the scale
  }
  if (plasma[POINT_KT]! > 0) {
    addThermal(natural, order, plasma, 0.5, ofTheta);
    addInverseThermal(natural, order, plasma, ofBoth);
  }
  if (terms.exchange) addExchangeCorrelation(natural, order, plasma);
  addNaturalDerivatives(members, order, natural);
}

/** Adds the slopes at T = 0, as `addColdSlopes` of a contribution. */
export function addColdCoulombSlopes(
  sum: CoulombSum,
  point: Float64Array,
  composition: Composition,
  slopes: Float64Array,
): void {
  // Phonons and polarisation vanish faster than T; exchange and correlation go like t^2 with a correction of order t^3,
  // t = T/T_F, and their members do not cancel: at t = 1e-20 they give the limits.
  if (!sum.terms.exchange || point[ELECTRON_DENSITY] === 0) return;
  const species = enter(sum, point, composition);
  const tiny = 1e-20;
  const temperature = (tiny * species.gammaE * plasma[POINT_CUBE_ROOT]!) / (NON_RELATIVISTIC * plasma[POINT_RS]!);
  plasma[POINT_TEMPERATURE] = temperature;
  plasma[POINT_T] = tiny;
  ofBoth.fill(0); // not `natural`, which addCoulombSpecies may still read
  addExchangeCorrelation(ofBoth, 2, plasma);
  slopes[0]! -= ofBoth[5]! / (temperature * temperature);
  slopes[1]! += ofBoth[4]! / (temperature * temperature);
}

/** Adds the derivatives by the amount of each species, as `addSpecies` of a contribution: directly after `addCoulombSum`. */
export function addCoulombSpecies(
  sum: CoulombSum,
  point: Float64Array,
  composition: Composition,
  rows: Float64Array,
): void {
  const species = enter(sum, point, composition);
  const crystal = isCrystal(sum, point);
  if (sum.terms.idealIons) {
    if (!crystal) sum.gas.addSpecies?.(point, composition, rows);
    else if (sum.options.freeNeutrons) sum.neutrons.addSpecies?.(point, composition, rows);
  }
  if (point[ELECTRON_DENSITY] === 0) return;
  fillTangents(sum, species, crystal);
  const first = notesOf(composition).list.firstCharged;
  addSpeciesDerivatives(rows, sum, sum.tangents, species, sum.ions, first, plasma, natural, crystal);
}

function fillTangents(sum: CoulombSum, species: CoulombSpecies, crystal: boolean): void {
  const count = sum.ions.length * TANGENT_LENGTH;
  if (sum.tangents.length < count) sum.tangents = new Float64Array(count);
  if (crystal && !sum.knowsCrystal) {
    fillTangentsOfCrystal(sum.tangents, species, sum.ions, sum.lattice);
    sum.knowsCrystal = true;
  } else if (!crystal && !sum.knowsLiquid) {
    fillTangentsOfLiquid(sum.tangents, species, sum.polarisable);
    sum.knowsLiquid = true;
  }
}

/** Fills the record that the terms share; returns the constants of the composition. */
function enter(sum: CoulombSum, point: Float64Array, composition: Composition): CoulombSpecies {
  if (composition !== sum.composition) {
    sum.species = coulombSpecies(composition, sum.lattice);
    fillIons(sum.ions, sum.species);
    sum.crystalLimit = highestCrystalDensity(composition);
    sum.composition = composition;
    sum.knowsLiquid = false;
    sum.knowsCrystal = false;
  }
  const species = sum.species!;
  const density = point[DENSITY]!;
  const temperature = point[TEMPERATURE]!;
  const x = point[RELATIVITY]!;
  const coupling = point[ELECTRON_COUPLING]!;
  const rs = radiusFactor / x;
  const cubeRoot = x / species.x;
  const rootDensity = Math.sqrt(density);
  plasma[POINT_DENSITY] = density;
  plasma[POINT_TEMPERATURE] = temperature;
  plasma[POINT_KT] = species.ionsBoltzmann * temperature;
  plasma[POINT_X] = x;
  plasma[POINT_RS] = rs;
  plasma[POINT_CUBE_ROOT] = cubeRoot;
  plasma[POINT_GAMMA_E] = coupling;
  plasma[POINT_ROOT_DENSITY] = rootDensity;
  plasma[POINT_ROOT] = rootDensity / temperature;
  plasma[POINT_ELECTRON_ENERGY] = species.electronsBoltzmann * species.gammaE * cubeRoot;
  plasma[POINT_T] = (NON_RELATIVISTIC * rs) / coupling;
  return species;
}

/** True where the ions are a crystal. */
function isCrystal({ options, crystalLimit }: CoulombSum, point: Float64Array): boolean {
  if (options.phase !== "equilibrium") return options.phase === "crystal";
  return point[ION_COUPLING]! >= options.meltingCoupling && point[DENSITY]! <= crystalLimit;
}

function addLiquid({ terms, options, ions }: CoulombSum, { mixture }: CoulombSpecies, order: Order): void {
  plasma[POINT_LOG_GAMMA_E] = Math.log(plasma[POINT_GAMMA_E]!);
  plasma[POINT_ROOT_GAMMA_E] = Math.sqrt(plasma[POINT_GAMMA_E]!);
  if (terms.polarisation) preparePolarisation(order, plasma);
  for (let i = 0; i < ions.length; i++) {
    const ion = ions[i]!;
    if (terms.correlation) addLiquidCorrelation(ofGamma, order, plasma, ion);
    if (terms.quantum === "two-oscillators") addTwoOscillators(ofTheta, order, plasma, ion);
    else if (terms.quantum === "wigner-kirkwood") addWignerKirkwood(ofTheta, order, plasma, ion);
    else if (terms.quantum === "baiko-yakovlev") addBaikoYakovlev(ofTheta, order, plasma, ion);
    if (terms.polarisation) addLiquidPolarisation(ofBoth, order, plasma, ion);
  }
  if (terms.liquidMixture && mixture !== undefined) {
    // Polarised electrons change the weak-coupling limit of the mixture: the form goes with the switch.
    addMixture(ofGamma, order, plasma, options.polarisation ? mixture.polarisable : mixture.rigid);
  }
}

function addCrystal({ terms, fit, lattice, ions }: CoulombSum, species: CoulombSpecies, order: Order): void {
  const cold = plasma[POINT_TEMPERATURE] === 0;
  if (terms.lattice || terms.zeroPoint || terms.anharmonic || terms.alloy) {
    addGroundState(natural, order, plasma, species, terms);
  }
  if (terms.polarisation) plasma[POINT_LOG_DENSITY] = Math.log(plasma[POINT_DENSITY]!);
  for (let i = 0; i < ions.length; i++) {
    const ion = ions[i]!;
    if (terms.phonons && !cold) addPhonons(ofTheta, order, plasma, ion, fit);
    if (terms.anharmonic && !cold) addAnharmonic(ofBoth, order, plasma, ion, lattice);
    if (terms.polarisation) addCrystalPolarisation(natural, order, plasma, ion, species);
  }
  if (terms.mixingEntropy && !cold) {
    const constant = species.mixing + species.spin;
    ofTheta[0]! += constant;
    ofTheta[5]! -= constant;
  }
}

function refuseColdNeutrons(): never {
  throw new FermistateError("outside-domain", {
    argument: "temperature",
    given: 0,
    allowed:
      "> 0 K with free neutrons: a classical gas has no entropy at T = 0 to speak of; coulombPlasma({ freeNeutrons: false }) " +
      'leaves them to fermionGas({ species: "n" })',
  });
}

function refuseColdLiquid(options: Required<CoulombPlasmaOptions>, point: Float64Array): never {
  throw new FermistateError("outside-domain", {
    argument: "temperature",
    given: 0,
    allowed:
      options.phase === "liquid"
        ? "> 0 K: a classical liquid has no entropy at T = 0 to speak of (Coulomb plasma, phase liquid)"
        : `> 0 K at ${point[DENSITY]} g/cm^3: these nuclei do not freeze there (quantum melting)`,
  });
}
