/**
 * The ideal, non-degenerate gas of nuclei.
 *
 *     F = sum_i N_i kT [ln(n_i lambda_i^3/g_i) - 1],    lambda_i^2 = 2 pi hbar^2/(M_i kT),  g_i = 2 J_i + 1
 *
 * (Sackur 1911, Tetrode 1912), with N_i nuclei of species i per gram. Entropy of mixing and ground-state spins are in the
 * logarithm; so is the mass of each species. All of that is one number per composition, so a point costs one logarithm.
 * Valid where nuclei are far from degenerate, n_i lambda_i^3 << 1, and kT is far below their first excitation. In cold
 * dense matter the formula's entropy turns negative: there ions are a Coulomb liquid or crystal and not this gas.
 */
import { atomicMassConstant, boltzmannConstant, reducedPlanckConstant } from "../constants.js";
import { requireFlags } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { nuclide } from "../matter/nuclides.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import { notesOf, numberFractionsOf } from "../matter/species-list.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import {
  ENERGY,
  ENTROPY,
  HEAT,
  HEAT_T,
  type Order,
  PRESSURE,
  PRESSURE_R,
  PRESSURE_RT,
  PRESSURE_T,
} from "../thermodynamics/free-energy.js";
import {
  SPECIES_ENERGY,
  SPECIES_ENTROPY,
  SPECIES_LENGTH,
  SPECIES_PRESSURE,
} from "../thermodynamics/species-members.js";

/** Options of {@link idealIons}. */
export interface IdealIonsOptions {
  /**
   * Whether free neutrons count as one of the classical species.
   * @defaultValue true; choose false where another contribution describes the neutrons
   */
  readonly freeNeutrons?: boolean;
  /** Free neutrons alone: beside a crystal, which has no ideal gas of nuclei. */
  readonly only?: "free neutrons";
}

/** ln[(m_u/m_n)^(3/2)/2]: mass and spin of free neutrons. */
const neutronConstant = (): number => 1.5 * Math.log(atomicMassConstant / nuclide("n").nuclearMass) - Math.LN2;
/** (2 pi hbar^2/(m_u k))^(3/2): the volume lambda^3 of one atomic mass unit at 1 K, cm^3 K^(3/2). */
const thermalVolume = ((2 * Math.PI * reducedPlanckConstant ** 2) / (atomicMassConstant * boltzmannConstant)) ** 1.5;

/** Scratch: species per gram and entropy constant of those that count. Variables set by a branch would be boxed. */
const counted = new Float64Array(2);

/**
 * The ideal gas of nuclei as a contribution, F = sum_i N_i kT [ln(n_i lambda_i^3/g_i) - 1] in erg/g.
 *
 * Valid where n_i lambda_i^3 << 1 and the Coulomb coupling is far below 1 (Sackur 1911, Tetrode 1912). T = 0 is refused: a
 * classical gas has no entropy there to speak of. Answers at 1e-20 to 1e18 g/cm^3 and 1 to 1e13 K.
 * @throws `invalid-option`
 */
export function idealIons(options: IdealIonsOptions = {}): Contribution {
  requireFlags("options", options, ["freeNeutrons"], ["only"]);
  const { only, freeNeutrons = true } = options;
  const ofNeutrons = only === undefined ? 0 : neutronConstant();
  let lastComposition: Composition | undefined;
  let constants: Float64Array = new Float64Array(0);
  return Object.freeze({
    name: only ?? (freeNeutrons ? "ideal ions" : "ideal ions without free neutrons"),
    physics: Object.freeze([
      { model: "ideal ions", options: { freeNeutrons, ...(only === undefined ? {} : { only }) } },
    ]),
    validity:
      "Nuclei and free neutrons are a classical gas in their ground states: in cold dense matter, where nuclei freeze and " +
      "neutrons are degenerate, its entropy turns negative.",
    ideal: true,
    ...(only === undefined && freeNeutrons ? { dependsOn: "ion density" as const } : {}),
    domain: Object.freeze({ density: [1e-20, 1e18], temperature: [1, 1e13], zeroTemperature: false } as const),
    add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void {
      const temperature = point[TEMPERATURE]!;
      if (only !== undefined) {
        counted[0] = composition.ionsPerGram - composition.chargedIonsPerGram;
        counted[1] = ofNeutrons;
      } else if (freeNeutrons) {
        counted[0] = composition.ionsPerGram;
        counted[1] = composition.ionEntropyConstant;
      } else {
        counted[0] = composition.chargedIonsPerGram;
        counted[1] = composition.chargedIonEntropyConstant;
      }
      const perGram = counted[0]!;
      const constant = counted[1]!;
      if (perGram === 0) return;
      const energy = perGram * boltzmannConstant * temperature; // N kT, erg/g
      const volume = thermalVolume / (temperature * Math.sqrt(temperature));
      const occupation = Math.log(perGram * point[DENSITY]! * volume);
      members[ENERGY]! += 1.5 * energy;
      members[ENTROPY]! += energy * (2.5 - occupation - constant);
      members[HEAT]! += 1.5 * energy;
      members[PRESSURE]! += energy;
      members[PRESSURE_R]! += energy;
      members[PRESSURE_T]! += energy;
      if (order === 2) return;
      members[HEAT_T]! -= 1.5 * energy;
      members[PRESSURE_RT]! += energy;
    },

    // N_a = Y_a/m_u, so dF/dY_a = (kT/m_u) ln(n_a lambda_a^3/g_a).
    addSpecies(point: Float64Array, composition: Composition, rows: Float64Array): void {
      if (composition !== lastComposition) {
        lastComposition = composition;
        constants = entropyConstants(composition, constants);
      }
      const temperature = point[TEMPERATURE]!;
      if (temperature === 0) return; // beside a crystal, neutrons fewer than rounding: nothing added, nothing to say
      const energy = (boltzmannConstant / atomicMassConstant) * temperature;
      const volume = thermalVolume / (temperature * Math.sqrt(temperature));
      const occupation = Math.log(composition.ionsPerGram * point[DENSITY]! * volume);
      const { nuclei } = notesOf(composition).list;
      for (let i = 0, row = 0; i < nuclei.length; i++, row += SPECIES_LENGTH) {
        const isNeutral = nuclei[i]!.chargeNumber === 0;
        if (isNeutral ? !freeNeutrons : only !== undefined) continue;
        rows[row + SPECIES_ENERGY]! += 1.5 * energy;
        const constant = only === undefined ? constants[i]! : Math.log(numberFractionsOf(composition)[i]!) + ofNeutrons;
        rows[row + SPECIES_ENTROPY]! += energy * (1.5 - occupation - constant);
        rows[row + SPECIES_PRESSURE]! += energy;
      }
    },
  });
}

/** ln[(x_a/g_a)(m_u/M_a)^(3/2)] of each species, in the given record where they fit. */
function entropyConstants(composition: Composition, old: Float64Array): Float64Array {
  const { nuclei, logMass } = notesOf(composition).list;
  const numbers = numberFractionsOf(composition);
  const constants = old.length < nuclei.length ? new Float64Array(nuclei.length) : old;
  for (let i = 0; i < nuclei.length; i++) {
    constants[i] = Math.log(numbers[i]! / nuclei[i]!.spinDegeneracy) + logMass[i]!;
  }
  return constants;
}
