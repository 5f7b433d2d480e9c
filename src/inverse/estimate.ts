/**
 * A start for inverse questions: pressure, energy and entropy of fully ionised matter to some ten per cent, in closed form.
 *
 * Never part of a result. Electrons: closed forms at T = 0, the leading thermal term of Sommerfeld and Boltzmann's gas
 * with the relativistic mean energy, joined by power means; pairs by Boltzmann's law; ions: Sackur and Tetrode with the
 * Madelung energy and an interpolation of the plasma's entropy; photons.
 */
import {
  atomicMassConstant,
  boltzmannConstant,
  electronDensityUnit,
  electronRestEnergy,
  electronRestTemperature,
  radiationConstant,
  reducedPlanckConstant,
} from "../constants.js";
import type { Composition } from "../matter/composition.js";
import {
  DENSITY,
  ELECTRON_DENSITY,
  FERMI_ENERGY,
  fillPlasma,
  ION_COUPLING,
  PLASMA_TEMPERATURE_SQUARED,
  POINT_LENGTH,
  RELATIVITY,
  TEMPERATURE,
} from "../matter/plasma.js";
import { ENERGY_KIND, ENTHALPY_KIND, ENTROPY_KIND, PRESSURE_KIND } from "./slots.js";

/** Which kinds of matter an estimate counts. */
export interface EstimatedMatter {
  /** Electrons and positrons. */
  readonly electrons: boolean;
  /** Nuclei. */
  readonly ions: boolean;
  /** Their Coulomb energy too. */
  readonly coulomb: boolean;
  /** Photons. */
  readonly radiation: boolean;
}

/** Estimates at a point, and roots of them. */
export interface Estimate {
  /** Its first two slots of `point` are the input, `values` (by kind) the output. */
  readonly point: Float64Array;
  /** P, e, s, h. */
  readonly values: Float64Array;
  /** Fills the values. */
  fill(composition: Composition): void;
}

/** ln[(2 pi hbar^2/(m_u k T))^(3/2)] at T = 1 K, cgs. */
const ionPhaseSpace =
  1.5 * Math.log((2 * Math.PI * reducedPlanckConstant ** 2) / (atomicMassConstant * boltzmannConstant));

/** Phase space of dilute electrons over (beta (1 + 1.25 beta))^(3/2), cm^-3. */
const phaseSpace = electronDensityUnit * Math.sqrt(Math.PI / 2);

/** (a^-4 + b^-4)^(-1/4). */
function fourthMean(a: number, b: number): number {
  const ratio = a < b ? a / b : b / a;
  const square = ratio * ratio;
  return Math.min(a, b) / Math.sqrt(Math.sqrt(1 + square * square));
}

/** An estimator with its own records. */
export function estimateOf(matter: EstimatedMatter): Estimate {
  const point = new Float64Array(POINT_LENGTH);
  const values = new Float64Array(4);

  function addElectrons(density: number, temperature: number): void {
    const n = point[ELECTRON_DENSITY]!;
    const x = point[RELATIVITY]!;
    const beta = temperature / electronRestTemperature;
    const fermi = point[FERMI_ENERGY]!;
    const energy = 1 + fermi;
    const perGram = n / density;
    const kT = boltzmannConstant * temperature;
    const mean = 3 - 1.5 / (1 + 1.25 * beta); // kinetic energy of a dilute gas over kT
    const spread = beta * (1 + 1.25 * beta);
    const space = phaseSpace * spread * Math.sqrt(spread);
    const cold =
      x < 0.3
        ? x * x * (0.3 - 0.0536 * x * x)
        : (3 * (x * (2 * x * x + 1) * energy - Math.log(x + energy))) / (8 * x * x * x) - 1;
    const degenerate = (Math.PI * Math.PI * beta * energy) / (x * x);
    const thermal = kT / Math.sqrt(4 / (degenerate * degenerate) + 1 / (mean * mean));
    const dilution = degenerate / (degenerate + 2 * mean);
    const speed = x / energy;
    const exponent = ((2 - speed * speed) / 3) * (1 - dilution) + dilution / mean;
    const rarity = space / n;
    const dilute = mean * Math.log1p(Math.exp(1 + (1 + Math.log(rarity)) / mean));
    values[PRESSURE_KIND]! += n * (electronRestEnergy * (fermi - cold) + exponent * thermal);
    values[ENERGY_KIND]! += perGram * (electronRestEnergy * cold + thermal);
    values[ENTROPY_KIND]! += perGram * boltzmannConstant * fourthMean(degenerate, dilute);
    if (beta < 0.02) return;
    const pairs = space * Math.exp(-1 / beta);
    const positrons =
      rarity > 1
        ? (2 * pairs * pairs) / (n + Math.sqrt(n * n + 4 * pairs * pairs))
        : pairs * Math.exp(-(1 + fermi * (1 - rarity)) / beta);
    values[PRESSURE_KIND]! += 2 * positrons * kT;
    values[ENERGY_KIND]! += (2 * positrons * (electronRestEnergy + mean * kT)) / density;
    values[ENTROPY_KIND]! += (2 * positrons * boltzmannConstant * (mean + 1 + 1 / beta)) / density;
  }

  function addIons(composition: Composition, density: number, temperature: number): void {
    const ions = composition.ionsPerGram;
    const nk = ions * boltzmannConstant;
    const kT = nk * temperature;
    let entropy = 2.5 - (Math.log(ions * density) + ionPhaseSpace - 1.5 * Math.log(temperature));
    entropy -= composition.ionEntropyConstant;
    values[PRESSURE_KIND]! += density * kT;
    values[ENERGY_KIND]! += 1.5 * kT;
    const coupling = point[ION_COUPLING]!;
    if (!matter.coulomb || !(coupling > 0)) {
      values[ENTROPY_KIND]! += nk * entropy;
      return;
    }
    const root = Math.sqrt(coupling);
    const bound = (-0.896 * coupling * root) / (root + 1.035);
    const quantum = Math.sqrt(point[PLASMA_TEMPERATURE_SQUARED]!) / temperature;
    const kinetic = (1.5 * coupling) / (coupling + 30) + 0.77 * quantum;
    values[PRESSURE_KIND]! += density * kT * (bound / 3);
    values[ENERGY_KIND]! += kT * (bound + kinetic);
    if (coupling > 1) entropy -= Math.max(0, 2.84 * Math.sqrt(root) - 0.78 * Math.log(coupling) - 2.6);
    values[ENTROPY_KIND]! += 3 * nk * Math.log1p(Math.exp(entropy / 3));
  }

  function fill(composition: Composition): void {
    fillPlasma(point, composition);
    const density = point[DENSITY]!;
    const temperature = point[TEMPERATURE]!;
    values.fill(0);
    if (matter.electrons && point[ELECTRON_DENSITY]! > 0) addElectrons(density, temperature);
    if (matter.ions && composition.ionsPerGram > 0) addIons(composition, density, temperature);
    if (matter.radiation) {
      const cube = radiationConstant * temperature * temperature * temperature;
      values[PRESSURE_KIND]! += (cube * temperature) / 3;
      values[ENERGY_KIND]! += (cube * temperature) / density;
      values[ENTROPY_KIND]! += (4 * cube) / (3 * density);
    }
    values[ENTHALPY_KIND] = values[ENERGY_KIND]! + values[PRESSURE_KIND]! / density;
  }

  return { point, values, fill };
}
