/**
 * How a state changes with its composition: derivatives by every nucleon fraction, chemical potentials, and the change
 * along a reaction. Exact derivatives of the one free energy, no differences.
 *
 * The nucleon fractions X_a are treated as independent at fixed density rho = n_B m_u and temperature, so n_a = rho
 * X_a/(A_a m_u) changes alone, and Y_e = sum X_a Z_a/A_a with it. Reactions conserve nucleons: only differences with
 * sum dX_a = 0 are physical. With N_a = X_a/(A_a m_u) nuclei per gram and mu_a of a nucleus with its Z_a electrons,
 *
 *     dF = -s dT - P d(1/rho) + sum mu_a dN_a,     T ds = de + P d(1/rho) - sum mu_a dN_a
 *     F + P/rho = sum mu_a N_a                     where F depends on the densities n_a and T alone
 */
import { atomicMassConstant, speedOfLight } from "../constants.js";
import { FermistateError, requireFinite } from "../errors.js";
import { type Composition, type NucleonFractions, requireComposition, type Species } from "../matter/composition.js";
import { nuclide } from "../matter/nuclides.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import { holds, refusePoint } from "./domain.js";
import type { EquationOfState } from "./equation-of-state.js";
import { SECOND_ORDER_COUNT } from "./free-energy.js";
import {
  SPECIES_ENERGY,
  SPECIES_ENTROPY,
  SPECIES_LENGTH,
  SPECIES_PRESSURE,
  SPECIES_RESIDUAL,
} from "./species-members.js";

/**
 * Which rest mass energies, chemical potentials included, contain.
 *
 * - `"excluded"`: none, as in `specificEnergy`; differences between nuclides then lack the energy of the reaction
 * - `"excess"`: per nucleus the mass excess of the neutral atom, M + Z m_e - A m_u (AME2020, electron binding left out): with
 *   nucleons conserved the energy of the reaction is in, and no digit is lost
 * - `"included"`: M + Z m_e
 */
export type RestMass = "excluded" | "excess" | "included";

/** Options of {@link compositionDerivatives}. */
export interface CompositionDerivativesOptions {
  /** Rest mass in energies and chemical potentials. @defaultValue "excluded" */
  readonly restMass?: RestMass;
}

/** Change of a state along a direction in composition, at fixed density and temperature. */
export interface DirectionalDerivatives {
  /** Of the specific free energy, erg/g: this is sum mu_a dN_a. */
  readonly specificFreeEnergy: number;
  /** Of the pressure, dyn/cm^2. */
  readonly pressure: number;
  /** Of the specific energy, erg/g. */
  readonly specificEnergy: number;
  /** Of the specific entropy, erg/(g K). */
  readonly specificEntropy: number;
  /** Of Y_e. */
  readonly electronsPerNucleon: number;
}

/**
 * Change of matter by one reaction, at fixed density and temperature: derivatives by the number of reactions per
 * gram.
 */
export interface ReactionDerivatives {
  /** Of the free energy, erg per reaction: sum nu_a mu_a, zero in equilibrium. */
  readonly freeEnergy: number;
  /**
   * Of the energy, erg per reaction; its negative, with rest mass not "excluded", is the heat set free, neutrinos
   * included.
   */
  readonly energy: number;
  /** Of the entropy, erg/K per reaction. */
  readonly entropy: number;
  /** Of the pressure, (dyn/cm^2) per (reaction/g). */
  readonly pressure: number;
  /** Electrons made by one reaction, sum nu_a Z_a: negative where they are captured. */
  readonly electrons: number;
}

/** Derivatives by the nucleon fraction X of one species, the other fractions held. */
export interface SpeciesDerivatives extends DirectionalDerivatives {
  /** Label of the species. */
  readonly label: string;
  /**
   * Chemical potential of one nucleus together with its Z electrons (matter stays neutral), erg: A m_u dF/dX. Its zero is
   * that of `specificEnergy`: the rest mass of nucleus and electrons is left out unless asked for.
   */
  readonly chemicalPotential: number;
}

/** What {@link compositionDerivatives} returns; immutable. */
export interface CompositionDerivatives {
  /** g/cm^3, as given. */
  readonly density: number;
  /** K, as given. */
  readonly temperature: number;
  /** As given. */
  readonly composition: Composition;
  /** Which rest mass is in the energies. */
  readonly restMass: RestMass;
  /** One entry per species, in the order of `composition.species`. */
  readonly species: readonly SpeciesDerivatives[];
  /** The entry of a label. @throws `invalid-composition` for a species that is not there */
  of(label: string): SpeciesDerivatives;
  /**
   * Derivative along a change of nucleon fractions, sum_a dX_a d/dX_a; per unit of the parameter that the dX belong to.
   *
   * @param change - dX by label; must sum to zero within 1e-10 of its parts, since reactions conserve nucleons
   * @throws `invalid-composition`, `not-a-number`
   */
  along(change: NucleonFractions): DirectionalDerivatives;
  /**
   * Change by one reaction. `-energy`, with rest mass not "excluded", is the heat to be carried off (neutrinos
   * included) to hold density and temperature.
   *
   * @param nuclei - nuclei made by one reaction, those consumed negative: `{ C12: -2, Mg24: 1 }`; electrons follow
   * @throws as {@link CompositionDerivatives.along}
   */
  alongReaction(nuclei: Readonly<Record<string, number>>): ReactionDerivatives;
}

/**
 * Derivatives of F, P, e and s by every nucleon fraction at fixed density and temperature, and the chemical potentials.
 *
 * In a Coulomb plasma the phase is held too: on the boundary the derivatives are those of the side that `state` shows. At
 * T = 0 the entropy is the residual one. Species of zero fraction have no entry: their chemical potential is minus
 * infinity (ln n_a); give them a trace, 1e-300 will do. There is no derivative by mean A or mean Z here, because fits in the charge of
 * single nuclei have none: use `along`, or `meanDerivatives` for the ideal plasma. For loops that must not allocate:
 * `fillSpecies` of the evaluator.
 *
 * Measured error: 4e-16 of the electrons, 7e-16 of the largest Coulomb term and at most 3e-13 of any
 * (test/fermi-gas, test/coulomb).
 *
 * @param density - g/cm^3
 * @param temperature - K
 * @throws `unavailable-quantity` where a contribution does not know its derivatives; else as the method `freeEnergy`
 * @example
 * ```ts
 * import { composition, compositionDerivatives, whiteDwarfMatter } from "fermistate";
 * const matter = composition({ C12: 0.49, O16: 0.5, Mg24: 0.01 });
 * const derivatives = compositionDerivatives(whiteDwarfMatter(), 1e9, 5e8, matter, { restMass: "excess" });
 * derivatives.alongReaction({ C12: -2, Mg24: 1 }).freeEnergy / 1.602177e-6; // => -14.162 MeV
 * ```
 */
export function compositionDerivatives(
  equationOfState: EquationOfState,
  density: number,
  temperature: number,
  composition: Composition,
  options: CompositionDerivativesOptions = {},
): CompositionDerivatives {
  const restMass = readRestMass(options);
  requireComposition(composition);
  if (
    typeof density !== "number" ||
    typeof temperature !== "number" ||
    !holds(equationOfState.domain, density, temperature)
  ) {
    refusePoint(equationOfState.contributions, density, temperature);
  }
  const evaluator = equationOfState.evaluator();
  evaluator.point[DENSITY] = density;
  evaluator.point[TEMPERATURE] = temperature;
  const rows = new Float64Array(SPECIES_LENGTH * composition.species.length);
  evaluator.fillMembers(composition, 2);
  evaluator.fillSpecies(composition, rows);
  const members = evaluator.members.subarray(0, SECOND_ORDER_COUNT);
  const bad = [...members, ...rows].find((value) => !Number.isFinite(value));
  if (bad !== undefined) {
    const allowed = "finite derivatives: a contribution has added something else";
    throw new FermistateError("unstable", { argument: "composition derivatives", given: bad, allowed });
  }
  const species = composition.species.map((one, i) =>
    speciesDerivatives(one, density, temperature, massEnergy(one, restMass), rows, SPECIES_LENGTH * i),
  );
  return Object.freeze({
    density,
    temperature,
    composition,
    restMass,
    species: Object.freeze(species),
    of: (label: string) => entryOf(species, label, "label"),
    along: (change: NucleonFractions) => sumAlong(species, fractions("change", change)),
    alongReaction: (nuclei: Readonly<Record<string, number>>) => alongReaction(composition, species, nuclei),
  });
}

function alongReaction(
  composition: Composition,
  species: readonly SpeciesDerivatives[],
  nuclei: Readonly<Record<string, number>>,
): ReactionDerivatives {
  let electrons = 0;
  const nucleons = fractions("nuclei", nuclei).map(([label, count]) => {
    entryOf(species, label, `nuclei.${label}`);
    const { massNumber, chargeNumber } = composition.species.find((one) => one.label === label)!;
    electrons += count * chargeNumber;
    return [label, count * massNumber] as const;
  });
  const change = sumAlong(species, nucleons, atomicMassConstant);
  return Object.freeze({
    freeEnergy: change.specificFreeEnergy,
    energy: change.specificEnergy,
    entropy: change.specificEntropy,
    pressure: change.pressure,
    electrons,
  });
}

function readRestMass(options: CompositionDerivativesOptions): RestMass {
  const allowed = `an object { restMass: "excluded" | "excess" | "included" }`;
  if (typeof options !== "object" || options === null) {
    throw new FermistateError("invalid-option", { argument: "options", given: options, allowed });
  }
  const { restMass = "excluded", ...others } = options;
  const stranger = Object.keys(others)[0];
  if (stranger === undefined && ["excluded", "excess", "included"].includes(restMass)) return restMass;
  throw new FermistateError("invalid-option", { argument: "options", given: stranger ?? restMass, allowed });
}

/** Rest energy per unit of Y, erg/g. */
function massEnergy({ label, massNumber }: Species, restMass: RestMass): number {
  if (restMass === "excluded") return 0;
  // The mean nucleus has no mass excess.
  const atomicMass = label === "mean" ? massNumber : nuclide(label).atomicMass;
  return speedOfLight * speedOfLight * (restMass === "excess" ? atomicMass - massNumber : atomicMass);
}

function speciesDerivatives(
  { label, massNumber, chargeNumber }: Species,
  density: number,
  temperature: number,
  mass: number,
  rows: Float64Array,
  row: number,
): SpeciesDerivatives {
  const energy = rows[row + SPECIES_ENERGY]! + mass;
  const heat = rows[row + SPECIES_ENTROPY]!;
  const free = energy - heat;
  const entropy = temperature === 0 ? rows[row + SPECIES_RESIDUAL]! : heat / temperature;
  return Object.freeze({
    label,
    specificFreeEnergy: free / massNumber,
    pressure: (density * rows[row + SPECIES_PRESSURE]!) / massNumber,
    specificEnergy: energy / massNumber,
    specificEntropy: entropy / massNumber,
    electronsPerNucleon: chargeNumber / massNumber,
    chemicalPotential: atomicMassConstant * free,
  });
}

function entryOf(species: readonly SpeciesDerivatives[], label: string, argument: string): SpeciesDerivatives {
  const entry = species.find((one) => one.label === label);
  if (entry !== undefined) return entry;
  throw new FermistateError("invalid-composition", {
    argument,
    given: label,
    allowed: `${species.map((one) => one.label).join(", ")}: a species of zero fraction has mu = -Infinity, give it a trace`,
  });
}

type Entries = readonly (readonly [label: string, value: number])[];

function fractions(argument: string, change: unknown): Entries {
  if (typeof change !== "object" || change === null || Array.isArray(change)) {
    const allowed = "an object of numbers by label";
    throw new FermistateError("invalid-composition", { argument, given: change, allowed });
  }
  return Object.entries(change).map(([label, value]) => [
    label,
    requireFinite(`${argument}.${label}`, value, "a finite number"),
  ]);
}

/** Sum over species of dX, or of nucleons times `unit`, times the derivative. */
function sumAlong(species: readonly SpeciesDerivatives[], change: Entries, unit = 1): DirectionalDerivatives {
  const total = { free: 0, pressure: 0, energy: 0, entropy: 0, electrons: 0 };
  let sum = 0;
  let size = 0;
  for (const [label, nucleons] of change) {
    const entry = entryOf(species, label, `change.${label}`);
    const weight = nucleons * unit;
    sum += nucleons;
    size += Math.abs(nucleons);
    total.free += weight * entry.specificFreeEnergy;
    total.pressure += weight * entry.pressure;
    total.energy += weight * entry.specificEnergy;
    total.entropy += weight * entry.specificEntropy;
    total.electrons += weight * entry.electronsPerNucleon;
  }
  if (Math.abs(sum) > 1e-10 * size) {
    const allowed = "0: reactions conserve nucleons";
    throw new FermistateError("invalid-composition", { argument: "sum of changes", given: sum, allowed });
  }
  return Object.freeze({
    specificFreeEnergy: total.free,
    pressure: total.pressure,
    specificEnergy: total.energy,
    specificEntropy: total.entropy,
    electronsPerNucleon: total.electrons,
  });
}
