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
import { addInverseThermal, addThermal, NATURAL_LENGTH, SINGLE_LENGTH } from "../numerics/natural.js";
import type { Contribution, PhasePair } from "../thermodynamics/contribution.js";
import { addNaturalDerivatives, type Order, SECOND_ORDER_COUNT } from "../thermodynamics/free-energy.js";
import { addAnharmonic, addGroundState, addPhonons, phononFit } from "./crystal.js";
import { addCrystalPolarisation } from "./crystal-polarisation.js";
import { addExchangeCorrelation } from "./exchange.js";
import { bcc, fcc } from "./lattice.js";
import { addLiquidCorrelation } from "./liquid.js";
import { addLiquidPolarisation, preparePolarisation } from "./liquid-polarisation.js";
import { addBaikoYakovlev, addTwoOscillators, addWignerKirkwood } from "./liquid-quantum.js";
import { addMixture } from "./mixing.js";
import { type CoulombPlasmaOptions, checkedOptions } from "./options.js";
import { fillBoundary, highestCrystalDensity, type Phase } from "./phase.js";
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
} from "./slots.js";
import { type CoulombSpecies, coulombSpecies } from "./species.js";
import { addSpeciesDerivatives, type Choice } from "./species-derivatives.js";
import { type SpeciesTangent, speciesTangents } from "./species-tangents.js";
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
  const lattice = options.lattice === "bcc" ? bcc : fcc;
  const fit = phononFit(lattice);
  const gas = idealIons({ freeNeutrons: options.freeNeutrons });
  const neutrons = idealIons({ only: "free neutrons" });
  const choice: Choice = { terms, lattice, fit, polarisable: options.polarisation };
  const plasma = new Float64Array(POINT_LENGTH);
  const natural = new Float64Array(NATURAL_LENGTH);
  const ofGamma = new Float64Array(SINGLE_LENGTH);
  const ofTheta = new Float64Array(SINGLE_LENGTH);
  const ofBoth = new Float64Array(NATURAL_LENGTH);
  let lastComposition: Composition | undefined;
  let species: CoulombSpecies;
  let crystal = false;
  const crystalLimit = new Float64Array(1); // a variable would be boxed at every change of composition
  let tangents: readonly SpeciesTangent[] | undefined;

  function enter(point: Float64Array, composition: Composition): void {
    if (composition !== lastComposition) {
      lastComposition = composition;
      species = coulombSpecies(composition, lattice);
      crystalLimit[0] = highestCrystalDensity(composition);
      tangents = undefined;
    }
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
  }

  /** True where the ions are a crystal. */
  function isCrystal(point: Float64Array): boolean {
    if (options.phase !== "equilibrium") return options.phase === "crystal";
    return point[ION_COUPLING]! >= options.meltingCoupling && point[DENSITY]! <= crystalLimit[0]!;
  }

  function addLiquid(order: Order): void {
    const ions = species.ions;
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
    if (terms.liquidMixture && species.mixture !== undefined) {
      // Polarised electrons change the weak-coupling limit of the mixture: the form goes with the switch.
      const mixture = options.polarisation ? species.mixture.polarisable : species.mixture.rigid;
      addMixture(ofGamma, order, plasma, mixture);
    }
  }

  function addCrystal(order: Order): void {
    const ions = species.ions;
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

  return {
    name,
    domain: Object.freeze({ density: [1e-20, 1e18], temperature: [1, 1e13], zeroTemperature: true } as const),
    validity:
      "Coulomb terms assume full ionisation and electrons that are nearly uniform: outside the range of their fits ask " +
      "regime(...) which assumption is strained.",

    add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void {
      enter(point, composition);
      crystal = isCrystal(point);
      point[CRYSTAL_FRACTION] = crystal ? 1 : 0;
      if (!crystal && point[TEMPERATURE] === 0 && composition.ionsPerGram > 0) refuseColdLiquid(options, point);
      if (terms.idealIons) {
        if (!crystal) gas.add(point, composition, order, members);
        else if (options.freeNeutrons) neutrons.add(point, composition, order, members);
      }
      if (point[ELECTRON_DENSITY] === 0) return; // no charge, no Coulomb terms
      const count = order === 2 ? SECOND_ORDER_COUNT : NATURAL_LENGTH;
      for (let i = 0; i < count; i++) {
        natural[i] = 0;
        ofBoth[i] = 0;
      }
      for (let i = 0; i < SINGLE_LENGTH; i++) {
        ofGamma[i] = 0;
        ofTheta[i] = 0;
      }
      if (crystal) addCrystal(order);
      else addLiquid(order);
      if (plasma[POINT_KT]! > 0) {
        // POINT_KT is slot 0: the record is the scale.
        if (!crystal) addThermal(natural, order, plasma, 1 / 3, ofGamma);
        addThermal(natural, order, plasma, 0.5, ofTheta);
        addInverseThermal(natural, order, plasma, ofBoth);
      }
      if (terms.exchange) addExchangeCorrelation(natural, order, plasma);
      addNaturalDerivatives(members, order, natural);
    },

    rewrite(point: Float64Array): void {
      point[CRYSTAL_FRACTION] = crystal ? 1 : 0;
    },

    addColdSlopes(point: Float64Array, composition: Composition, slopes: Float64Array): void {
      // Phonons and polarisation vanish faster than T; exchange and correlation go like t^2, t = T/T_F, so that their
      // members at t = 1e-7 give the limits to 1e-14.
      if (!terms.exchange || point[ELECTRON_DENSITY] === 0) return;
      enter(point, composition);
      const tiny = 1e-7;
      const temperature = (tiny * species.gammaE * plasma[POINT_CUBE_ROOT]!) / (NON_RELATIVISTIC * plasma[POINT_RS]!);
      plasma[POINT_TEMPERATURE] = temperature;
      plasma[POINT_T] = tiny;
      ofBoth.fill(0); // not `natural`, which addSpecies may still read
      addExchangeCorrelation(ofBoth, 2, plasma);
      slopes[0]! -= ofBoth[5]! / (temperature * temperature);
      slopes[1]! += ofBoth[4]! / (temperature * temperature);
    },

    residualEntropy(composition: Composition): number {
      if (!terms.mixingEntropy) return 0;
      const { ionsBoltzmann, mixing, spin } = coulombSpecies(composition, lattice);
      return -ionsBoltzmann * (mixing + spin);
    },

    addSpecies(point: Float64Array, composition: Composition, rows: Float64Array): void {
      enter(point, composition);
      const crystal = isCrystal(point);
      if (terms.idealIons) {
        if (!crystal) gas.addSpecies?.(point, composition, rows);
        else if (options.freeNeutrons) neutrons.addSpecies?.(point, composition, rows);
      }
      if (point[ELECTRON_DENSITY] === 0) return;
      tangents ??= speciesTangents(composition, lattice);
      addSpeciesDerivatives(rows, choice, tangents, species, plasma, natural, crystal);
    },
  };
}

/** t = T/T_F = 2 (4/9 pi)^(2/3) r_s/Gamma_e, T_F non-relativistic. */
const NON_RELATIVISTIC = 2 * (4 / (9 * Math.PI)) ** (2 / 3);

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
