/**
 * From species and their nucleon fractions to a composition: the sums over species, in one order of summation whatever
 * way the fractions came.
 */
import { atomicMassConstant } from "../constants.js";
import type { ChargeMoments, Composition, Species } from "./composition-members.js";
import {
  brand,
  fillNumberFractions,
  mostKnown,
  type Notes,
  notesOf,
  numberFractionsOf,
  type PartOfList,
  type SpeciesList,
  speciesList,
} from "./species-list.js";

/** The list without species whose X/A is no positive double. */
function present(list: SpeciesList, fractions: Float64Array): SpeciesList {
  const places = list.nuclei.map((_, i) => i).filter((i) => isPresent(list, fractions, i));
  const key = places.join();
  let part = list.parts.get(key);
  if (part === undefined) {
    part = { list: speciesList(places.map((i) => list.nuclei[i]!)), places };
    if (list.parts.size >= mostKnown) list.parts.clear();
    list.parts.set(key, part);
  }
  list.recent = part;
  return part.list;
}

/**
 * The composition of checked nucleon fractions in the order of the list, which are not kept; those of zero, or too
 * small for X/A, are dropped.
 */
export function compositionOf(list: SpeciesList, fractions: Float64Array): Composition {
  let count = 0;
  for (let i = 0; i < list.nuclei.length; i++) if (isPresent(list, fractions, i)) count++;
  if (count === list.nuclei.length) return new SummedComposition(list, fractions);
  const { recent } = list; // zones lack the same nuclides as their neighbours
  const part =
    recent !== undefined && isRecent(recent, list, fractions, count) ? recent.list : present(list, fractions);
  const some = remaining(list, fractions);
  return new SummedComposition(part, some);
}

function isPresent({ massNumbers }: SpeciesList, fractions: Float64Array, i: number): boolean {
  return fractions[i]! / massNumbers[i]! > 0;
}

function isRecent({ places }: PartOfList, list: SpeciesList, fractions: Float64Array, count: number): boolean {
  if (places.length !== count) return false;
  for (let i = 0; i < count; i++) if (!isPresent(list, fractions, places[i]!)) return false;
  return true;
}

let someFractions = new Float64Array(32);

/** Fractions of the species that are there, side by side. */
function remaining(list: SpeciesList, fractions: Float64Array): Float64Array {
  const count = list.nuclei.length;
  if (someFractions.length < count) someFractions = new Float64Array(2 * count);
  for (let i = 0, at = 0; i < count; i++) if (isPresent(list, fractions, i)) someFractions[at++] = fractions[i]!;
  return someFractions;
}

/**
 * A composition: the sums over its species, always in the same order. What takes longer than they do, and few ask for, is
 * made when it is asked for.
 */
class SummedComposition implements Composition {
  readonly ionsPerNucleon: number;
  readonly electronsPerNucleon: number;
  readonly meanMassNumber: number;
  readonly meanCharge: number;
  readonly couplingMoment: number;
  readonly ionsPerGram: number;
  readonly electronsPerGram: number;
  readonly ionEntropyConstant: number;
  readonly chargedIonsPerGram: number;
  readonly chargedIonEntropyConstant: number;
  readonly plasmaFrequencySum: number;
  readonly #notes: Notes;
  #name: string | undefined;
  #species: readonly Species[] | undefined;
  #chargeMoments: ChargeMoments | undefined;

  constructor(list: SpeciesList, given: Float64Array) {
    const { nuclei, firstCharged, massNumbers, powers } = list;
    const count = nuclei.length;
    const fractions = list.blank.slice();
    let ions = 0;
    let electrons = 0;
    let charged = 0;
    for (let i = 0; i < count; i++) {
      const fraction = given[i]!;
      const massNumber = massNumbers[i]!;
      const nuclides = fraction / massNumber;
      fractions[i] = fraction;
      ions += nuclides;
      electrons += fraction * (nuclei[i]!.chargeNumber / massNumber); // Z/A first: 0.5 exactly for the usual nuclei
      if (i >= firstCharged) charged += nuclides;
    }
    this.ionsPerNucleon = ions;
    this.#notes = { list, fractions };
    const numbers = fillNumberFractions(this.#notes, this);
    let charge = 0;
    let frequency = 0;
    for (let i = firstCharged; i < count; i++) {
      const { chargeNumber, ionMass } = nuclei[i]!;
      charge += numbers[i]! * chargeNumber;
      frequency += (numbers[i]! * chargeNumber ** 2) / ionMass;
    }
    const constant = entropyConstant(list, numbers, 0);
    this.electronsPerNucleon = electrons;
    this.meanMassNumber = 1 / ions;
    this.meanCharge = charge;
    this.couplingMoment =
      firstCharged === count ? 0 : mean(numbers, powers.fiveThirds) / sumFrom(numbers, firstCharged, count);
    this.ionsPerGram = ions / atomicMassConstant;
    this.electronsPerGram = electrons / atomicMassConstant;
    this.ionEntropyConstant = constant;
    this.chargedIonsPerGram = charged / atomicMassConstant;
    this.chargedIonEntropyConstant = firstCharged === 0 ? constant : entropyConstant(list, numbers, firstCharged);
    this.plasmaFrequencySum = frequency;
    Object.freeze(this);
  }

  get name(): string {
    this.#name ??= nameOf(this.species);
    return this.#name;
  }

  get species(): readonly Species[] {
    this.#species ??= speciesWith(this.#notes, this.ionsPerNucleon);
    return this.#species;
  }

  get chargeMoments(): ChargeMoments {
    this.#chargeMoments ??= momentsOf(this);
    return this.#chargeMoments;
  }

  /** All members: for `JSON.stringify`. */
  toJSON(): Composition {
    const { name, species, chargeMoments } = this;
    return Object.assign({ name, species, chargeMoments }, this);
  }

  /** What Node shows of it. */
  [Symbol.for("nodejs.util.inspect.custom")](): Composition {
    return this.toJSON();
  }

  /** Undefined for copies and heirs, whose members may have been changed. */
  get [brand](): Notes | undefined {
    return #notes in this ? this.#notes : undefined;
  }
}

function speciesWith({ list: { nuclei, massNumbers }, fractions }: Notes, ions: number): readonly Species[] {
  const species = nuclei.map((nucleus, i): Species => {
    const { label, massNumber, chargeNumber, ionMass, spinDegeneracy, spinKnown } = nucleus;
    const nucleonFraction = fractions[i]!;
    const numberFraction = nucleonFraction / massNumbers[i]! / ions;
    const identity = { label, massNumber, chargeNumber };
    return Object.freeze({ ...identity, nucleonFraction, numberFraction, ionMass, spinDegeneracy, spinKnown });
  });
  return Object.freeze(species);
}

function momentsOf(composition: Composition): ChargeMoments {
  const { powers } = notesOf(composition).list;
  const numbers = numberFractionsOf(composition);
  return Object.freeze({
    twoThirds: mean(numbers, powers.twoThirds),
    fourThirds: mean(numbers, powers.fourThirds),
    fiveThirds: mean(numbers, powers.fiveThirds),
    squared: mean(numbers, powers.squared),
    sevenThirds: mean(numbers, powers.sevenThirds),
    fiveHalves: mean(numbers, powers.fiveHalves),
  });
}

/** sum_j y_j ln[(y_j/g_j)(m_u/M_j)^(3/2)], y_j the number fractions among the species from a place on. */
function entropyConstant({ nuclei, logMass }: SpeciesList, numbers: Float64Array, from: number): number {
  const count = nuclei.length;
  const all = sumFrom(numbers, from, count);
  let sum = 0;
  for (let i = from; i < count; i++) {
    const fraction = numbers[i]! / all;
    sum += fraction * (Math.log(fraction / nuclei[i]!.spinDegeneracy) + logMass[i]!);
  }
  return sum;
}

function sumFrom(numbers: Float64Array, from: number, count: number): number {
  let sum = 0;
  for (let i = from; i < count; i++) sum += numbers[i]!;
  return sum;
}

function mean(numbers: Float64Array, values: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += numbers[i]! * values[i]!;
  return sum;
}

/** Up to six species with six digits; of more, the six of the largest nucleon fraction. */
function nameOf(species: readonly Species[]): string {
  const [only] = species;
  if (only?.label === "mean") return `mean A ${short(only.massNumber)}, Z ${short(only.chargeNumber)}`;
  if (only !== undefined && species.length === 1) return only.label;
  const largest = [...species].sort((a, b) => b.nucleonFraction - a.nucleonFraction).slice(0, 6);
  const named = species.filter((one) => largest.includes(one));
  const rest = species.length - named.length;
  const text = named.map((one) => `${one.label} ${short(one.nucleonFraction)}`).join(", ");
  return rest === 0 ? text : `${text}, and ${rest} more`;
}

const short = (value: number): string => String(Number(value.toPrecision(6)));
