/**
 * What a contribution tells of each species: derivatives of its free energy by the amount of that species, as members.
 *
 * Amount of species a: Y_a = X_a/A_a, nuclei per nucleon; every Y is treated as independent, density and temperature are
 * held. One row of {@link SPECIES_LENGTH} slots per species, in the order of `composition.species`:
 *
 *     slot                 meaning
 *     SPECIES_ENERGY       de/dY_a             erg/g
 *     SPECIES_ENTROPY      T ds/dY_a           erg/g
 *     SPECIES_PRESSURE     (1/rho) dP/dY_a     erg/g
 *     SPECIES_RESIDUAL     ds/dY_a at T = 0    erg/(g K); only written there, where T ds vanishes
 *
 * dF/dY_a is the first less the second, and the chemical potential per particle is m_u times that. As in free-energy.ts
 * each member comes from an expression of its own: e of thin gas must not be F + T s.
 * Where F depends on n_a = rho Y_a/m_u and T only (everything physical does), sum Y_a dF/dY_a = F + P/rho.
 */
import type { Composition } from "../matter/composition.js";
import { notesOf } from "../matter/species-list.js";
import { ENERGY, ENTROPY, PRESSURE, PRESSURE_R, PRESSURE_T } from "./free-energy.js";

/** Slot of de/dY_a, erg/g. */
export const SPECIES_ENERGY = 0;
/** Slot of T ds/dY_a, erg/g. */
export const SPECIES_ENTROPY = 1;
/** Slot of (1/rho) dP/dY_a, erg/g. */
export const SPECIES_PRESSURE = 2;
/** Slot of ds/dY_a at T = 0, erg/(g K). */
export const SPECIES_RESIDUAL = 3;
/** Slots per species. */
export const SPECIES_LENGTH = 4;

/**
 * Rows of a free energy that depends on rho Y_e and T alone, from its members: with F = Phi(n_e, T)/rho, every derivative
 * by Y_a is Z_a/Y_e times one by ln n_e. Where pairs outnumber the net electrons e + P/rho - (T/rho) dP/dT cancels: a gas
 * with pairs says it itself.
 */
export function addFromElectronDensity(members: Float64Array, composition: Composition, rows: Float64Array): void {
  const electrons = composition.electronsPerNucleon;
  if (electrons === 0) return;
  const thermal = members[PRESSURE_T]!;
  const { nuclei } = notesOf(composition).list;
  for (let i = 0, row = 0; i < nuclei.length; i++, row += SPECIES_LENGTH) {
    const share = nuclei[i]!.chargeNumber / electrons;
    rows[row + SPECIES_ENERGY]! += share * (members[ENERGY]! + members[PRESSURE]! - thermal);
    rows[row + SPECIES_ENTROPY]! += share * (members[ENTROPY]! - thermal);
    rows[row + SPECIES_PRESSURE]! += share * members[PRESSURE_R]!;
  }
}
