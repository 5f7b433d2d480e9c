/**
 * From the description of matter to the terms of its free energy: which formulas a model and its options stand for.
 *
 * Electrons and positrons are not among them: their reference is a quadrature (electron-gas.ts), not a formula.
 */
import type { Physics } from "../thermodynamics/contribution.js";
import { coldTerms } from "./cold-terms.js";
import {
  anharmonic,
  crystalPolarisation,
  type Lattice,
  latticeEnergy,
  lattices,
  phonons,
  zeroPointEnergy,
} from "./crystal-terms.js";
import { exchangeCorrelation } from "./exchange-terms.js";
import { idealGas, photons } from "./gas-terms.js";
import { baikoYakovlev, classicalLiquid, liquidPolarisation, twoOscillators, wignerKirkwood } from "./liquid-terms.js";
import { alloy, liquidMixture, mixingAndSpin } from "./mixture-terms.js";
import type { ExactSpecies, Plasma } from "./plasma.js";
import { type Series, sumOf } from "./series.js";

/** Name of the model whose reference is the quadrature. */
export const electronModel = "electrons and positrons";
/** The model that has two phases. */
export const coulombModel = "Coulomb plasma";

/** A term's free energy, erg/g; undefined where it is zero at every density and temperature. */
export type TermSeries = readonly (readonly [name: string, freeEnergy: Series])[];

type Options = Physics["options"];
type Model = (options: Options, plasma: Plasma, crystal: boolean) => TermSeries;

const models: Readonly<Record<string, Model>> = {
  radiation: (_, plasma) => [["radiation", photons(plasma)]],
  "ideal ions": (options, plasma) => named("ideal ions", idealGas(plasma, gasSpecies(options, plasma))),
  "cold corrections": (options, plasma) =>
    plasma.matter.charged.length === 0
      ? []
      : Object.entries(coldTerms(plasma, options)).map(([name, one]) => [name, perElectron(plasma, one)]),
  [coulombModel]: coulombTerms,
};

/** Whether a description has a reference here. */
export function hasReference({ model }: Physics): boolean {
  return model === electronModel || Object.hasOwn(models, model);
}

/** The terms of a description at a point. */
export function termsOf({ model, options }: Physics, plasma: Plasma, crystal: boolean): TermSeries {
  return models[model]!(options, plasma, crystal);
}

function gasSpecies({ only, freeNeutrons }: Options, { matter: { all, charged } }: Plasma): readonly ExactSpecies[] {
  if (only === "free neutrons") return all.filter((one) => !charged.includes(one));
  return freeNeutrons === false ? charged : all;
}

function coulombTerms(options: Options, plasma: Plasma, crystal: boolean): TermSeries {
  const isOn = (name: string): boolean => options[name] !== false;
  const { part } = options;
  const free = { only: "free neutrons" };
  const ions = crystal
    ? isOn("freeNeutrons") && idealGas(plasma, gasSpecies(free, plasma))
    : idealGas(plasma, gasSpecies({ freeNeutrons: isOn("freeNeutrons") }, plasma));
  const interacting: readonly (readonly [string, Series | undefined | false])[] =
    plasma.matter.charged.length === 0
      ? []
      : [
          ...(crystal ? crystalTerms(options, plasma, isOn) : liquidTerms(options, plasma, isOn)),
          ["exchange and correlation", isOn("exchange") && perElectron(plasma, exchangeCorrelation(plasma))],
        ];
  return [["ideal ions", ions] as const, ...interacting].filter(
    (entry): entry is readonly [string, Series] =>
      entry[1] !== false && entry[1] !== undefined && (part === undefined || part === entry[0]),
  );
}

type Candidates = readonly (readonly [name: string, freeEnergy: Series | undefined | false])[];

const quantumForms: Readonly<Record<string, (plasma: Plasma, one: ExactSpecies) => Series>> = {
  "two-oscillators": twoOscillators,
  "wigner-kirkwood": wignerKirkwood,
  "baiko-yakovlev": baikoYakovlev,
};

function liquidTerms(options: Options, plasma: Plasma, isOn: (name: string) => boolean): Candidates {
  const form = quantumForms[String(options["quantum"])];
  return [
    ["ion correlation", perIon(plasma, (one) => classicalLiquid(plasma, one))],
    ["quantum correction", form !== undefined && perIon(plasma, (one) => form(plasma, one))],
    ["electron polarisation", isOn("polarisation") && perIon(plasma, (one) => liquidPolarisation(plasma, one))],
    ["mixture correction", isOn("mixture") && perNucleus(plasma, liquidMixture(plasma, isOn("polarisation")))],
  ];
}

function crystalTerms(options: Options, plasma: Plasma, isOn: (name: string) => boolean): Candidates {
  const lattice: Lattice = options["lattice"] === "fcc" ? lattices.fcc : lattices.bcc;
  const mixing = mixingAndSpin(plasma);
  return [
    ["lattice energy", perIon(plasma, (one) => latticeEnergy(plasma, one, lattice))],
    ["zero-point energy", perIon(plasma, (one) => zeroPointEnergy(plasma, one, lattice))],
    ["phonons", perIon(plasma, (one) => phonons(plasma, one, lattice))],
    ["anharmonic lattice", isOn("anharmonic") && perIon(plasma, (one) => anharmonic(plasma, one, lattice))],
    [
      "electron polarisation",
      isOn("polarisation") && perIon(plasma, (one) => crystalPolarisation(plasma, one, lattice)),
    ],
    ["mixing and spin entropy", !mixing.isZero() && plasma.kT.times(plasma.matter.chargedPerGram.times(mixing))],
    ["alloy deviation", isOn("mixture") && perNucleus(plasma, alloy(plasma))],
  ];
}

/** sum_j N_j kT f_j over charged nuclei. */
function perIon(plasma: Plasma, f: (one: ExactSpecies) => Series | undefined): Series | undefined {
  const terms = plasma.matter.charged.flatMap((one) => f(one)?.times(one.perGram) ?? []);
  return terms.length === 0 ? undefined : sumOf(terms).times(plasma.kT);
}

function perNucleus({ matter, kT }: Plasma, f: Series | undefined): Series | undefined {
  return f?.times(matter.chargedPerGram).times(kT);
}

function perElectron({ matter }: Plasma, energy: Series): Series {
  return energy.times(matter.electronsPerGram);
}

function named(name: string, freeEnergy: Series | undefined): TermSeries {
  return freeEnergy === undefined ? [] : [[name, freeEnergy]];
}
