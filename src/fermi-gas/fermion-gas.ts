/**
 * One species of fermions without antiparticles as a contribution: neutrons, protons, any spin and mass.
 *
 * The same integrals as for electrons, with the particle's own mass and degeneracy g: n = g/(2 pi^2) int p^2 f dp.
 * Ideal: neutrons at nuclear density interact strongly, so there this is a limit to compare with and no model. Antiparticles
 * are left out; kT must stay far below the rest energy (for neutrons 1e13 K is kT/mc^2 = 0.9 and strains that).
 */
import { atomicMassConstant, boltzmannConstant, reducedPlanckConstant, speedOfLight } from "../constants.js";
import { FermistateError, requireFinite } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { nuclide } from "../matter/nuclides.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import type { Order } from "../thermodynamics/free-energy.js";
import {
  SPECIES_ENERGY,
  SPECIES_ENTROPY,
  SPECIES_LENGTH,
  SPECIES_PRESSURE,
} from "../thermodynamics/species-members.js";
import { addColdGasSlopes, addColdMembers, fermiEnergy, fillColdParticleMembers } from "./cold.js";
import { addGasMembers, fillParticleMembers } from "./density-derivatives.js";
import { solveDensity } from "./net-density.js";
import { FERMI_MOMENTUM, KINETIC_MU, NET_DENSITY, RECORD_LENGTH, THETA } from "./record.js";

/** Options of {@link fermionGas}. */
export interface FermionGasOptions {
  /** Label of the species in the composition, such as `"n"`. */
  readonly species: string;
  /**
   * Mass of one particle, g.
   * @defaultValue the nuclear mass of the nuclide of that label
   */
  readonly mass?: number;
  /**
   * Number of spin states g = 2J + 1.
   * @defaultValue that of the nuclide, 2 for neutrons
   */
  readonly degeneracy?: number;
}

/**
 * An ideal gas of one fermion species, counted by its nucleon fraction in the composition; absent, it adds nothing.
 * Combine with `idealIons({ freeNeutrons: false })`, which then leaves the neutrons to this gas.
 *
 * @throws `unknown-nuclide`, `out-of-range`, `not-a-number`, `invalid-option` (a boson, or an unknown spin)
 */
export function fermionGas(options: FermionGasOptions): Contribution {
  const known = ["species", "mass", "degeneracy"];
  const stranger =
    typeof options === "object" && options !== null
      ? Object.keys(options).find((one) => !known.includes(one))
      : options;
  if (stranger !== undefined || typeof options.species !== "string") {
    const allowed = `an object { species: "n", mass?, degeneracy? }`;
    throw new FermistateError("invalid-option", { argument: "options", given: stranger ?? options.species, allowed });
  }
  const label = options.species;
  const mass = options.mass ?? nuclide(label).nuclearMass;
  const degeneracy = options.degeneracy ?? spinStates(label);
  for (const [argument, value] of [
    ["mass", mass],
    ["degeneracy", degeneracy],
  ] as const) {
    requireFinite(argument, value, "a finite number > 0");
    if (!(value > 0)) throw new FermistateError("out-of-range", { argument, given: value, allowed: "> 0" });
  }
  const restEnergy = mass * speedOfLight * speedOfLight;
  const restTemperature = restEnergy / boltzmannConstant;
  const wavelength = reducedPlanckConstant / (mass * speedOfLight);
  const densityUnit = degeneracy / (2 * Math.PI * Math.PI * wavelength ** 3);
  const gas = new Float64Array(RECORD_LENGTH);
  const scale = new Float64Array(1);
  const perParticle = new Float64Array(3);

  /** Fills the record; false where the species is absent. */
  function enter(point: Float64Array, composition: Composition): boolean {
    const perNucleon = particlesPerNucleon(composition, label);
    if (perNucleon === 0) return false;
    const n = (point[DENSITY]! * perNucleon) / (atomicMassConstant * densityUnit);
    gas[NET_DENSITY] = n;
    gas[FERMI_MOMENTUM] = Math.cbrt(3 * n);
    gas[KINETIC_MU] = fermiEnergy(gas[FERMI_MOMENTUM]!);
    gas[THETA] = point[TEMPERATURE]! / restTemperature;
    scale[0] = (restEnergy * densityUnit) / point[DENSITY]!;
    return true;
  }

  return Object.freeze({
    name: `fermions ${label}`,
    physics: Object.freeze([{ model: "fermions", options: { species: label, mass, degeneracy } }]),
    validity: `An ideal gas of ${label} without antiparticles: at nuclear density a limit to compare with, no model.`,
    ideal: true,
    // The classical gas of nuclei counts free neutrons too, unless told not to.
    excludes: label === "n" ? ["ideal ions"] : [],
    domain: Object.freeze({ density: [1e-20, 1e18], temperature: [1, 1e13], zeroTemperature: true } as const),

    add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void {
      if (!enter(point, composition)) return;
      if (point[TEMPERATURE] === 0) {
        addColdMembers(gas, scale, order, members);
        return;
      }
      solveDensity(gas, false, order);
      addGasMembers(gas, scale, order, members);
    },

    addColdSlopes(point: Float64Array, composition: Composition, slopes: Float64Array): void {
      if (!enter(point, composition)) return;
      scale[0]! /= restTemperature * restTemperature;
      addColdGasSlopes(gas, scale, slopes);
    },

    addSpecies(point: Float64Array, composition: Composition, rows: Float64Array): void {
      const index = indexOf(composition, label);
      if (index < 0) return;
      if (point[TEMPERATURE] === 0) fillColdParticleMembers(gas, perParticle);
      else fillParticleMembers(gas, perParticle);
      const unit = restEnergy / atomicMassConstant;
      const row = SPECIES_LENGTH * index;
      rows[row + SPECIES_ENERGY]! += unit * perParticle[0]!;
      rows[row + SPECIES_ENTROPY]! += unit * perParticle[1]!;
      rows[row + SPECIES_PRESSURE]! += unit * perParticle[2]!;
    },
  });
}

function particlesPerNucleon(composition: Composition, label: string): number {
  const index = indexOf(composition, label);
  return index < 0 ? 0 : composition.species[index]!.numberFraction * composition.ionsPerNucleon;
}

/** Where the species stands in the composition, -1 where it is absent. */
function indexOf(composition: Composition, label: string): number {
  for (let i = 0; i < composition.species.length; i++) {
    if (composition.species[i]!.label === label) return i;
  }
  return -1;
}

function spinStates(label: string): number {
  const spin = nuclide(label).groundStateSpin;
  if (spin !== undefined && (2 * spin) % 2 === 1) return 2 * spin + 1;
  throw new FermistateError("invalid-option", {
    argument: "species",
    given: spin === undefined ? `${label} (spin unknown)` : `${label} (spin ${spin})`,
    allowed: "a fermion, half-integer spin; or give its degeneracy",
  });
}
