/**
 * Ions as a Coulomb plasma: liquid or crystal, polarised electrons, exchange and correlation, mixtures.
 *
 * One contribution that takes the place of the ideal ions: a crystal has no ideal-gas term (its kinetic energy is in the
 * phonons), so the two phases differ in what they sum.
 *
 *     liquid    ideal ions + f_ii(Gamma_j) + f_q(theta_j) + f_ie + mixture correction          + exchange-correlation
 *     crystal   ground state + phonons + anharmonic + f_ie + mixing entropy + alloy deviation + exchange-correlation
 *
 * Terms are linear in number fractions at common electron density (Hansen, Torrie & Vieillefosse 1977, Phys. Rev. A 16,
 * 2153, from memory) but for the two mixture corrections. Each term's file names its paper, section and range.
 */
import type { Composition } from "../matter/composition.js";
import { CRYSTAL_FRACTION } from "../matter/point.js";
import type { Contribution, PhasePair, Physics } from "../thermodynamics/contribution.js";
import type { Order } from "../thermodynamics/free-energy.js";
import { type CoulombPlasmaOptions, checkedOptions } from "./options.js";
import { fillBoundary, type Phase } from "./phase.js";
import { coulombSpecies } from "./species.js";
import { addColdCoulombSlopes, addCoulombSpecies, addCoulombSum, coulombSum } from "./sum.js";
import { nothing, type Terms } from "./terms.js";

/** The Coulomb plasma as a contribution: what {@link coulombPlasma} returns. */
export interface CoulombPlasma extends Contribution {
  /** Its terms one by one, for a breakdown. */
  readonly parts: readonly Contribution[];
  /** The options in force, defaults filled in. */
  readonly options: Required<CoulombPlasmaOptions>;
}

/**
 * Ions as a Coulomb liquid or crystal, with polarisation, exchange and correlation, each a switch.
 *
 * Contains the ideal gas of ions: do not add `idealIons()` beside it (`combine` refuses).
 * @throws `invalid-option`, `out-of-range` (a melting coupling outside 100 to 300)
 */
export function coulombPlasma(options: CoulombPlasmaOptions = {}): CoulombPlasma {
  const chosen = checkedOptions(options);
  const terms: Terms = {
    idealIons: true,
    correlation: true,
    quantum: chosen.quantum,
    lattice: true,
    zeroPoint: true,
    phonons: true,
    anharmonic: chosen.anharmonic,
    polarisation: chosen.polarisation,
    liquidMixture: chosen.mixture,
    mixingEntropy: true,
    alloy: chosen.mixture,
    exchange: chosen.exchange,
  };
  const names: readonly [keyof Terms, string][] = [
    ["idealIons", "ideal ions"],
    ["correlation", "ion correlation"],
    ["quantum", "quantum correction"],
    ["lattice", "lattice energy"],
    ["zeroPoint", "zero-point energy"],
    ["phonons", "phonons"],
    ["anharmonic", "anharmonic lattice"],
    ["polarisation", "electron polarisation"],
    ["liquidMixture", "mixture correction"],
    ["mixingEntropy", "mixing and spin entropy"],
    ["alloy", "alloy deviation"],
    ["exchange", "exchange and correlation"],
  ];
  const parts = names
    .filter(([term]) => terms[term] !== false)
    .map(([term, name]) => contributionOf(name, { ...nothing, [term]: terms[term] }, chosen));
  const side = (phase: Phase): Contribution => contributionOf("Coulomb plasma", terms, { ...chosen, phase });
  const phases: PhasePair = Object.freeze({
    liquid: side("liquid"),
    crystal: side("crystal"),
    fillBoundary: (composition: Composition, boundary: Float64Array): void =>
      fillBoundary(composition, chosen.meltingCoupling, boundary),
  });
  return Object.freeze({
    ...contributionOf("Coulomb plasma", terms, chosen),
    ...(chosen.phase === "equilibrium" ? { phases } : {}),
    excludes: ["ideal ions", "cold corrections"],
    parts: Object.freeze(parts),
    options: chosen,
  });
}

/** One contribution from a choice of terms. */
function contributionOf(name: string, terms: Terms, options: Required<CoulombPlasmaOptions>): Contribution {
  const sum = coulombSum(terms, options);
  const physics: Physics = {
    model: "Coulomb plasma",
    options: { ...options, ...(name === "Coulomb plasma" ? {} : { part: name }) },
  };
  return {
    name,
    physics: Object.freeze([Object.freeze(physics)]),
    domain: Object.freeze({ density: [1e-20, 1e18], temperature: [1, 1e13], zeroTemperature: true } as const),
    validity:
      "Coulomb terms assume full ionisation and electrons that are nearly uniform: outside the range of their fits ask " +
      "regime(...) which assumption is strained.",

    add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void {
      addCoulombSum(sum, point, composition, order, members);
    },

    rewrite(point: Float64Array): void {
      point[CRYSTAL_FRACTION] = sum.crystal ? 1 : 0;
    },

    addColdSlopes(point: Float64Array, composition: Composition, slopes: Float64Array): void {
      addColdCoulombSlopes(sum, point, composition, slopes);
    },

    residualEntropy(composition: Composition): number {
      if (!terms.mixingEntropy) return 0;
      const { ionsBoltzmann, mixing, spin } = coulombSpecies(composition, sum.lattice);
      return -ionsBoltzmann * (mixing + spin);
    },

    addSpecies(point: Float64Array, composition: Composition, rows: Float64Array): void {
      addCoulombSpecies(sum, point, composition, rows);
    },
  };
}
