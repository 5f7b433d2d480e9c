/**
 * What the derivatives by the amount of each species need of a composition.
 *
 * Amount of species a: Y_a = X_a/A_a. At fixed electron density a term of linear mixing is sum Y_j phi_j, so its derivative
 * is phi_a, that of one nucleus; the two departures from linear mixing and the entropy of mixing have tangents of their
 * own. What comes in through the electron density is added by species-derivatives.ts for all terms at once.
 *
 * A network asks for them in every zone and step: they go into a record that is used again, {@link TANGENT_LENGTH} slots
 * (slots.ts) per charged species.
 */
import { atomicMassConstant, boltzmannConstant } from "../constants.js";
import { notesOf, numberFractionsOf } from "../matter/species-list.js";
import type { LatticeConstants } from "./lattice.js";
import { fillAlloyTangents, fillLiquidTangents } from "./mixing-tangents.js";
import {
  ION_GAMMA,
  ION_THETA,
  TANGENT_ALLOY,
  TANGENT_ANHARMONIC,
  TANGENT_LENGTH,
  TANGENT_MADELUNG,
  TANGENT_MIXING,
  TANGENT_PER_ELECTRON,
  TANGENT_ZERO_POINT,
} from "./slots.js";
import type { CoulombSpecies } from "./species.js";

/** k/m_u, erg/(g K). */
export const boltzmannPerGram: number = boltzmannConstant / atomicMassConstant;

/** Fills what a liquid needs; `polarisable` as in `liquidMixture`. */
export function fillTangentsOfLiquid(
  tangents: Float64Array,
  { composition }: CoulombSpecies,
  polarisable: boolean,
): void {
  fillPerElectron(tangents, composition);
  if (notesOf(composition).list.charges > 1) fillLiquidTangents(tangents, composition, polarisable);
}

/** Fills what a crystal needs. `ions`: records of its charged species. */
export function fillTangentsOfCrystal(
  tangents: Float64Array,
  { composition, gammaE }: CoulombSpecies,
  ions: readonly Float64Array[],
  lattice: LatticeConstants,
): void {
  const { nuclei, firstCharged } = notesOf(composition).list;
  fillPerElectron(tangents, composition);
  fillAlloyTangents(tangents, composition);
  const numbers = numberFractionsOf(composition);
  let share = 0;
  for (let i = firstCharged; i < nuclei.length; i++) share += numbers[i]!;
  const meanCharge = composition.meanCharge / share;
  for (let i = 0, at = 0; i < ions.length; i++, at += TANGENT_LENGTH) {
    const { chargeNumber, spinDegeneracy } = nuclei[firstCharged + i]!;
    const theta = ions[i]![ION_THETA]!;
    const gamma = ions[i]![ION_GAMMA]!;
    const relative = chargeNumber / meanCharge;
    const mixing = Math.log((numbers[firstCharged + i]! / share) * relative) + 1 - relative;
    tangents[at + TANGENT_ALLOY]! *= boltzmannPerGram * gammaE;
    tangents[at + TANGENT_MADELUNG] = boltzmannPerGram * lattice.madelung * gamma;
    tangents[at + TANGENT_ZERO_POINT] = boltzmannPerGram * 1.5 * lattice.u1 * theta;
    tangents[at + TANGENT_ANHARMONIC] = (-boltzmannPerGram * lattice.anharmonicQuantum * theta * theta) / gamma;
    tangents[at + TANGENT_MIXING] = mixing - Math.log(spinDegeneracy);
  }
}

function fillPerElectron(tangents: Float64Array, composition: CoulombSpecies["composition"]): void {
  const { nuclei, firstCharged } = notesOf(composition).list;
  for (let i = firstCharged, at = 0; i < nuclei.length; i++, at += TANGENT_LENGTH) {
    tangents[at + TANGENT_PER_ELECTRON] = nuclei[i]!.chargeNumber / composition.electronsPerNucleon;
  }
}
