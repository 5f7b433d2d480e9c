/**
 * Derivatives of the Coulomb plasma's free energy by the amount Y_a = X_a/A_a of each species, at fixed density,
 * temperature and phase.
 *
 *     linear mixing   F = (kT/m_u) sum Y_j phi_j(n_e, T)    dF/dY_a = (kT/m_u) phi_a + (Z_a/Y_e) rho F_rho
 *     per electron    F = (Y_e/m_u) g(n_e, T)               dF/dY_a = (Z_a/Y_e) (F + rho F_rho)
 *
 * The departures from linear mixing have tangents of their own in place of phi_a (mixing-tangents.ts). Because rho F_rho
 * enters for all terms alike, the members of the sum serve; only phi_a is computed anew, by the functions of the terms for
 * one nucleus. rho d/drho and T d/dT of these lines need members of second order and no more.
 */
import { notesOf } from "../matter/species-list.js";
import { addGround, addInverseThermal, addThermal, NATURAL_LENGTH, SINGLE_LENGTH } from "../numerics/natural.js";
import {
  SPECIES_ENERGY,
  SPECIES_ENTROPY,
  SPECIES_LENGTH,
  SPECIES_PRESSURE,
  SPECIES_RESIDUAL,
} from "../thermodynamics/species-members.js";
import { addAnharmonic, addPhonons, type PhononFit } from "./crystal.js";
import { addCrystalPolarisation } from "./crystal-polarisation.js";
import { addExchangeCorrelation } from "./exchange.js";
import type { LatticeConstants } from "./lattice.js";
import { addLiquidCorrelation } from "./liquid.js";
import { addLiquidPolarisation, preparePolarisation } from "./liquid-polarisation.js";
import { addBaikoYakovlev, addTwoOscillators, addWignerKirkwood } from "./liquid-quantum.js";
import { addLiquidTangent, prepareLiquidTangents } from "./mixing-tangents.js";
import {
  ION_X,
  POINT_CUBE_ROOT,
  POINT_ROOT_DENSITY,
  POINT_TEMPERATURE,
  TANGENT_ALLOY,
  TANGENT_ANHARMONIC,
  TANGENT_LENGTH,
  TANGENT_MADELUNG,
  TANGENT_MIXING,
  TANGENT_PER_ELECTRON,
  TANGENT_ZERO_POINT,
} from "./slots.js";
import type { CoulombSpecies } from "./species.js";
import { boltzmannPerGram } from "./species-tangents.js";
import type { Terms } from "./terms.js";

/** What stays the same from point to point. */
export interface Choice {
  /** Terms of the sum. */
  readonly terms: Terms;
  /** Lattice of the crystal. */
  readonly lattice: LatticeConstants;
  /** Its phonons. */
  readonly fit: PhononFit;
  /** True where the electrons around the mixture's ions are polarisable. */
  readonly polarisable: boolean;
}

/** kT/m_u. */
const unit = new Float64Array(1);
/** Exchange and correlation alone, natural derivatives. */
const electrons = new Float64Array(NATURAL_LENGTH);
/** The part of one nucleus, natural derivatives of first order; the rest is scratch. */
const own = new Float64Array(NATURAL_LENGTH);
const polarisation = new Float64Array(NATURAL_LENGTH);
const ofBoth = new Float64Array(NATURAL_LENGTH);
const ofGamma = new Float64Array(SINGLE_LENGTH);
const ofTheta = new Float64Array(SINGLE_LENGTH);
const energy = new Float64Array(1);

/**
 * Adds to the rows of the charged species. `natural` holds the natural derivatives of the terms' sum, `point` their record
 * with what liquid or crystal need in it, `ions` the records of the species; `first` is the place of the first charged one.
 */
export function addSpeciesDerivatives(
  rows: Float64Array,
  choice: Choice,
  tangents: Float64Array,
  species: CoulombSpecies,
  ions: readonly Float64Array[],
  first: number,
  point: Float64Array,
  natural: Float64Array,
  crystal: boolean,
): void {
  const { terms } = choice;
  unit[0] = boltzmannPerGram * point[POINT_TEMPERATURE]!;
  for (let i = 0; i < 6; i++) electrons[i] = 0;
  if (terms.exchange) addExchangeCorrelation(electrons, 2, point);
  const { mixture } = species;
  const departs = terms.liquidMixture && mixture !== undefined && !crystal && charges(species) > 1;
  if (departs) prepareLiquidTangents(point, choice.polarisable ? mixture.polarisable : mixture.rigid, ions);
  if (terms.polarisation && !crystal) preparePolarisation(2, point);
  for (let i = 0; i < ions.length; i++) {
    const ion = ions[i]!;
    const at = i * TANGENT_LENGTH;
    const row = (first + i) * SPECIES_LENGTH;
    for (let j = 0; j < 6; j++) {
      own[j] = 0;
      ofBoth[j] = 0;
      ofGamma[j] = 0;
      ofTheta[j] = 0;
    }
    // One nucleus: its record for a share of one.
    const fraction = ion[ION_X]!;
    ion[ION_X] = 1;
    if (crystal) {
      addCrystalNucleus(choice, tangents, at, ion, species, point);
    } else {
      addLiquidNucleus(choice, ion, point);
      if (departs) addLiquidTangent(ofGamma, tangents, at);
    }
    ion[ION_X] = fraction;
    if (unit[0]! > 0) {
      addThermal(own, 2, unit, 1 / 3, ofGamma);
      addThermal(own, 2, unit, 0.5, ofTheta);
      addInverseThermal(own, 2, unit, ofBoth);
    }
    // F + rho F_rho of the electrons, rho F_rho of all; rho d/drho of rho F_rho is F_10 + F_20.
    const share = tangents[at + TANGENT_PER_ELECTRON]!;
    const value = own[0]! + share * (electrons[0]! + natural[1]!);
    const pressure = own[1]! + share * (electrons[1]! + natural[1]! + natural[3]!);
    const thermal = own[2]! + share * (electrons[2]! + natural[4]!);
    rows[row + SPECIES_ENERGY]! += value - thermal;
    rows[row + SPECIES_ENTROPY]! -= thermal;
    rows[row + SPECIES_PRESSURE]! += pressure;
    if (terms.mixingEntropy && crystal && unit[0] === 0) {
      rows[row + SPECIES_RESIDUAL]! -= boltzmannPerGram * tangents[at + TANGENT_MIXING]!;
    }
  }
}

function charges({ composition }: CoulombSpecies): number {
  return notesOf(composition).list.charges;
}

function addLiquidNucleus({ terms }: Choice, ion: Float64Array, point: Float64Array): void {
  if (terms.correlation) addLiquidCorrelation(ofGamma, 2, point, ion);
  if (terms.quantum === "two-oscillators") addTwoOscillators(ofTheta, 2, point, ion);
  else if (terms.quantum === "wigner-kirkwood") addWignerKirkwood(ofTheta, 2, point, ion);
  else if (terms.quantum === "baiko-yakovlev") addBaikoYakovlev(ofTheta, 2, point, ion);
  if (terms.polarisation) addLiquidPolarisation(ofBoth, 2, point, ion);
}

function addCrystalNucleus(
  choice: Choice,
  tangents: Float64Array,
  at: number,
  ion: Float64Array,
  species: CoulombSpecies,
  point: Float64Array,
): void {
  const { terms } = choice;
  const cubeRoot = point[POINT_CUBE_ROOT]!;
  energy[0] =
    ((terms.lattice ? tangents[at + TANGENT_MADELUNG]! : 0) + (terms.alloy ? tangents[at + TANGENT_ALLOY]! : 0)) *
    cubeRoot;
  addGround(own, 2, energy, 1 / 3);
  if (terms.zeroPoint) {
    energy[0] = tangents[at + TANGENT_ZERO_POINT]! * point[POINT_ROOT_DENSITY]!;
    addGround(own, 2, energy, 0.5);
  }
  if (terms.anharmonic) {
    energy[0] = tangents[at + TANGENT_ANHARMONIC]! * cubeRoot * cubeRoot;
    addGround(own, 2, energy, 2 / 3);
  }
  if (terms.polarisation) {
    for (let j = 0; j < 6; j++) polarisation[j] = 0;
    addCrystalPolarisation(polarisation, 2, point, ion, species);
    const perNucleus = boltzmannPerGram / species.ionsBoltzmann;
    for (let j = 0; j < 6; j++) own[j]! += perNucleus * polarisation[j]!;
  }
  if (unit[0] === 0) return;
  if (terms.phonons) addPhonons(ofTheta, 2, point, ion, choice.fit);
  if (terms.anharmonic) addAnharmonic(ofBoth, 2, point, ion, choice.lattice);
  if (terms.mixingEntropy) {
    const constant = tangents[at + TANGENT_MIXING]!;
    ofTheta[0]! += constant;
    ofTheta[5]! -= constant;
  }
}
