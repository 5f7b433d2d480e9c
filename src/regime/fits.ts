/**
 * Ranges of the usual formulas for Coulomb matter: where liquid, crystal, screening, exchange and mixing are fitted.
 *
 * They are judged whether or not an equation of state with such terms is at hand: outside them nobody's numbers are
 * well founded. Ranges and reasons stand beside each judgement. Species below 1e-3 of the nuclei are left out.
 */

import { ANHARMONIC_SUPPRESSION, bcc } from "../coulomb/lattice.js";
import { alloyDeviation } from "../coulomb/mixing.js";
import { defaultMeltingCoupling, type Phase, quantumMeltingLimit } from "../coulomb/phase.js";
import type { Composition } from "../matter/composition.js";
import { type Finding, judge } from "./finding.js";
import { type RegimeParameters, relativisticTemperature, type SpeciesParameters } from "./parameters.js";

/** Species below this share of the nuclei raise no finding about fits. */
const trace = 1e-3;

/** Adds the findings on formulas of the phase that the ions are in. */
export function judgeFits(
  list: Finding[],
  temperature: number,
  composition: Composition,
  parameters: RegimeParameters,
  phase: Phase,
): void {
  const present = composition.species.filter((one) => one.chargeNumber > 0 && one.numberFraction > trace);
  const charges = present.map((one) => one.chargeNumber);
  const species = parameters.species.filter(({ label }) => present.some((one) => one.label === label));
  if (phase === "liquid") judgeLiquid(list, parameters, species);
  else judgeCrystal(list, parameters, charges);
  if (phase === "crystal") judgeAnharmonic(list, composition, parameters);
  if (phase === "crystal" || parameters.ionCoupling >= defaultMeltingCoupling) judgeQuantumMelting(list, species);
  if (phase === "crystal") judgeAlloy(list, temperature, composition, parameters, charges);
  judgeExchange(list, temperature, parameters);
}

function judgeLiquid(list: Finding[], parameters: RegimeParameters, species: readonly SpeciesParameters[]): void {
  // Fits of liquid free energies rest on simulations up to about Gamma = 200; above, their slope falls below the crystal's.
  judge(list, {
    code: "liquid-fit-range",
    value: parameters.ionCoupling,
    strained: 180,
    outside: 200,
    name: "ion coupling Gamma",
    message: "The liquid is supercooled here beyond the simulations that its free energy is fitted to.",
  });
  // Quantum corrections of the liquid are fitted to theta <= 12 (Baiko & Yakovlev 2019, MNRAS 490, 5839).
  for (const { label, quantumParameter } of species) {
    judge(list, {
      code: "liquid-quantum-range",
      value: quantumParameter,
      strained: 11,
      name: "quantum parameter theta = T_p/T",
      species: label,
      message: `Quantum motion of ${label} in the liquid is beyond the simulations that the correction is fitted to.`,
    });
  }
}

function judgeCrystal(list: Finding[], parameters: RegimeParameters, charges: readonly number[]): void {
  // Anharmonic terms in powers of 1/Gamma: the series is asymptotic.
  judge(list, {
    code: "superheated-crystal",
    value: parameters.ionCoupling,
    strained: 170,
    outside: 100,
    below: true,
    name: "ion coupling Gamma",
    message: "A crystal this hot would have melted: its anharmonic terms are extrapolated.",
  });
  // Lattice sums with exact static response: the usual fit is off by 5 to 11 % at x_r = 0.1, 2 to 4 % above 0.3.
  const byDensity = judge(list, {
    code: "crystal-screening-range",
    value: parameters.relativityParameter,
    strained: 0.3,
    outside: 0.1,
    below: true,
    name: "relativity parameter x_r",
    message: "Screening in the crystal is fitted to denser matter than this.",
  });
  if (byDensity) return;
  judge(list, {
    code: "crystal-screening-range",
    value: Math.max(...charges),
    strained: 30,
    name: "charge number Z",
    message: "Screening in the crystal is fitted to charge numbers up to 30.",
  });
}

/** Zero-point motion shifts the melting line by 6 % at R_S = 1000; below about 160 there is no crystal. */
function judgeQuantumMelting(list: Finding[], species: readonly SpeciesParameters[]): void {
  for (const { label, ionDensityParameter } of species) {
    judge(list, {
      code: "quantum-melting",
      value: ionDensityParameter,
      strained: 1000,
      outside: quantumMeltingLimit,
      below: true,
      name: "ion density parameter R_S",
      species: label,
      message: {
        strained: `Zero-point motion of ${label} shifts the melting point by several per cent, which is not in the rule.`,
        outside: `Zero-point motion of ${label} is so strong that no crystal of it exists.`,
      },
    });
  }
}

/**
 * Each species has anharmonic terms in powers of its own 1/Gamma_j, which is that of a liquid for light nuclei among heavy
 * ones: judged by the last term of the series, in kT per nucleus of the mixture. From 0.08 to
 * 0.17 on, by the pair, melting sets energy free.
 */
function judgeAnharmonic(list: Finding[], composition: Composition, { species }: RegimeParameters): void {
  if (species.length < 2) return; // of one species the coupling says it
  for (const { label, quantumParameter, coupling } of species) {
    const suppression = Math.exp(-ANHARMONIC_SUPPRESSION * quantumParameter * quantumParameter);
    const { numberFraction } = composition.species.find((one) => one.label === label)!;
    judge(list, {
      code: "superheated-crystal",
      value: ((numberFraction * bcc.anharmonic[2]) / (3 * coupling ** 3)) * suppression,
      strained: 0.03,
      outside: 0.08,
      name: "last anharmonic term of the species per nucleus and kT",
      species: label,
      message:
        `${label} alone would be a liquid: its anharmonic terms in this crystal are extrapolated, and energy, heat capacity and ` +
        "freezing with them (coulombPlasma({ anharmonic: false }) leaves them out).",
    });
  }
}

function judgeAlloy(
  list: Finding[],
  temperature: number,
  composition: Composition,
  parameters: RegimeParameters,
  charges: readonly number[],
): void {
  judge(list, {
    code: "mixture-range",
    value: Math.max(...charges) / Math.min(...charges),
    strained: 4.5,
    name: "ratio of the largest and the smallest charge number",
    message: "Charges in this crystal differ by more than the range of the formula for alloys.",
  });
  if (charges.length < 2) return;
  const { deviation, entropy } = alloy(composition);
  // Gamma_e T is finite at T = 0: from T_p and R_S of a species.
  const [first] = parameters.species;
  const z = composition.species.find(({ label }) => label === first!.label)!.chargeNumber;
  const couplingTemperature =
    (Math.sqrt(first!.ionDensityParameter / 3) * first!.plasmaTemperature) / (z * Math.cbrt(z) ** 2);
  if (!(entropy > 0)) return;
  judge(list, {
    code: "alloy-demixing",
    value: temperature,
    strained: (couplingTemperature * deviation) / entropy,
    below: true,
    name: "temperature",
    unit: "K",
    message: "A random alloy is metastable at this temperature: the crystal would rather separate its species.",
  });
}

/**
 * Excess free energy of a random alloy over linear mixing, per charged nucleus and Gamma_e kT (coulomb/mixing.ts), and its
 * entropy of mixing per nucleus and k at common electron density, -sum x_j ln(x_j Z_j/<Z>).
 */
function alloy(composition: Composition): { deviation: number; entropy: number } {
  const charged = composition.species.filter((one) => one.chargeNumber > 0);
  const nuclei = charged.reduce((sum, one) => sum + one.numberFraction, 0);
  const mean = composition.meanCharge / nuclei;
  let entropy = 0;
  for (const { numberFraction, chargeNumber } of charged) {
    const x = numberFraction / nuclei;
    entropy -= x * Math.log((x * chargeNumber) / mean);
  }
  return { deviation: alloyDeviation(composition) / nuclei, entropy };
}

/**
 * Exchange and correlation are fitted to r_s = 0.1 to 20 and t <= 8 (Groth et al. 2017, Phys. Rev. Lett. 119, 135001).
 * Both limits beyond are right, so it is strained only where the term is more than 1e-3 of the electrons' free energy;
 * in hot gas its size is that of Debye and Hueckel, Gamma_e^(3/2)/3^(1/2) kT per electron.
 */
function judgeExchange(list: Finding[], temperature: number, parameters: RegimeParameters): void {
  const { reducedTemperature: t, electronCoupling, densityParameter, relativityParameter } = parameters;
  const code = "exchange-correlation-range";
  const ideal = 1 + Math.log(0.75 * Math.sqrt(Math.PI)) + 1.5 * Math.log(t); // |F|/kT of classical electrons
  const matters = t <= 8 || electronCoupling ** 1.5 / Math.sqrt(3) > 1e-3 * ideal;
  const beyond = "the exchange and correlation of electrons is interpolated between its limits, not fitted.";
  if (!matters) return;
  const thin = judge(list, {
    code,
    value: densityParameter,
    strained: 20,
    name: "density parameter r_s",
    message: `In gas this thin ${beyond}`,
  });
  if (thin) return;
  const hot = judge(list, {
    code,
    value: t,
    strained: 8,
    name: "reduced temperature T/T_F",
    message: `In gas this hot ${beyond}`,
  });
  if (hot || relativityParameter <= 1) return;
  judge(list, {
    code,
    value: relativisticTemperature(temperature),
    strained: 0.1,
    name: "kT/(m_e c^2)",
    message: "Exchange of hot relativistic electrons is taken from formulas for cold or slow ones.",
  });
}
