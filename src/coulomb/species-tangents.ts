/**
 * What the derivatives by the amount of each species need of a composition, computed once.
 *
 * Amount of species a: Y_a = X_a/A_a. At fixed electron density a term of linear mixing is sum Y_j phi_j, so its derivative
 * is phi_a, that of one nucleus; the two departures from linear mixing and the entropy of mixing have tangents of their
 * own. What comes in through the electron density is added by species-derivatives.ts for all terms at once.
 */
import { atomicMassConstant, boltzmannConstant } from "../constants.js";
import type { Composition } from "../matter/composition.js";
import { notesOf } from "../matter/species-list.js";
import { SPECIES_LENGTH } from "../thermodynamics/species-members.js";
import type { LatticeConstants } from "./lattice.js";
import { alloyTangents, type LiquidMixtureTangent, liquidMixtureTangents } from "./mixing-tangents.js";
import { ION_GAMMA, ION_THETA, ION_X } from "./slots.js";
import { coulombSpecies } from "./species.js";

/** Constants of one charged species. Energies in erg/g per unit of Y_a at rho = 1 g/cm^3. */
export interface SpeciesTangent {
  /** First slot of its row among all species. */
  readonly row: number;
  /** Its record (slots.ts) for a share of one. */
  readonly ion: Float64Array;
  /** Z_a/Y_e. */
  readonly perElectron: number;
  /** Madelung energy over rho^(1/3). */
  readonly madelung: number;
  /** Zero-point energy over rho^(1/2). */
  readonly zeroPoint: number;
  /** Quantum part of the anharmonic ground state over rho^(2/3). */
  readonly anharmonicGround: number;
  /** Deviation of a random alloy over rho^(1/3). */
  readonly alloy: number;
  /** Entropy of mixing of the crystal, negative, over k: ln(Y_a Z_a/Y_e) + 1 - Z_a/<Z>. */
  readonly mixing: number;
  /** -ln g_a. */
  readonly spin: number;
  /** Of the liquid's mixture correction with polarisable and with rigid background; undefined for one charge. */
  readonly mixture: { readonly polarisable: LiquidMixtureTangent; readonly rigid: LiquidMixtureTangent } | undefined;
}

/** k/m_u, erg/(g K). */
export const boltzmannPerGram: number = boltzmannConstant / atomicMassConstant;

/** Under which symbol a composition keeps its tangents for a lattice. */
const keys = /* @__PURE__ */ new WeakMap<LatticeConstants, symbol>();

/** The tangents of a composition on a lattice, charged species in their order; computed at the first call. */
export function speciesTangents(composition: Composition, lattice: LatticeConstants): readonly SpeciesTangent[] {
  let key = keys.get(lattice);
  if (key === undefined) {
    key = Symbol("tangents");
    keys.set(lattice, key);
  }
  const notes = notesOf(composition);
  notes[key] ??= compute(composition, lattice);
  return notes[key] as readonly SpeciesTangent[];
}

function compute(composition: Composition, lattice: LatticeConstants): readonly SpeciesTangent[] {
  const { ions, gammaE } = coulombSpecies(composition, lattice);
  const charged = composition.species.filter(({ chargeNumber }) => chargeNumber > 0);
  const neutral = composition.species.length - charged.length; // these come first
  const share = charged.reduce((sum, one) => sum + one.numberFraction, 0);
  const meanCharge = composition.meanCharge / share;
  const alloy = alloyTangents(charged);
  const polarisable = liquidMixtureTangents(charged, true);
  const rigid = liquidMixtureTangents(charged, false);
  return charged.map((one, i): SpeciesTangent => {
    const theta = ions[i]![ION_THETA]!;
    const gamma = ions[i]![ION_GAMMA]!;
    const relative = one.chargeNumber / meanCharge;
    const ion = Float64Array.from(ions[i]!);
    ion[ION_X] = 1;
    return Object.freeze({
      row: SPECIES_LENGTH * (neutral + i),
      ion,
      perElectron: one.chargeNumber / composition.electronsPerNucleon,
      madelung: boltzmannPerGram * lattice.madelung * gamma,
      zeroPoint: boltzmannPerGram * 1.5 * lattice.u1 * theta,
      anharmonicGround: (-boltzmannPerGram * lattice.anharmonicQuantum * theta * theta) / gamma,
      alloy: boltzmannPerGram * gammaE * alloy[i]!,
      mixing: Math.log((one.numberFraction / share) * relative) + 1 - relative,
      spin: -Math.log(one.spinDegeneracy),
      mixture:
        polarisable === undefined || rigid === undefined
          ? undefined
          : { polarisable: polarisable[i]!, rigid: rigid[i]! },
    });
  });
}
