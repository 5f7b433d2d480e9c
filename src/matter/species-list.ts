/**
 * Species in their order, and what depends on them alone: computed once per list, because a reaction network makes a new
 * composition of the same species in every zone and step.
 */
import { atomicMassConstant } from "../constants.js";
import { FermistateError } from "../errors.js";
import type { ChargeMoments, Composition, Species } from "./composition-members.js";
import { nuclide } from "./nuclides.js";

/** A species without its fractions. */
export type Nucleus = Omit<Species, "nucleonFraction" | "numberFraction">;

/** Species in their final order, and what depends on them alone. */
export interface SpeciesList {
  /** By charge number, then mass number. */
  readonly nuclei: readonly Nucleus[];
  /** Place of each in the list that the caller gave. */
  readonly order: readonly number[];
  /** First of the charged ones. */
  readonly firstCharged: number;
  /** How many different charges above 0 there are. */
  readonly charges: number;
  /** A, by species. */
  readonly massNumbers: Float64Array;
  /**
   * Functions of Z, by species: Z^p for the moments, roots and not powers, which have the exponent's error times ln
   * Z; and Z (Z + 1)^(3/2).
   */
  readonly powers: Readonly<Record<keyof ChargeMoments | "screened", Float64Array>>;
  /** 1.5 ln(m_u/M). */
  readonly logMass: Float64Array;
  /** Lists without some of the species, by the places that are left. */
  readonly parts: Map<string, PartOfList>;
  /** The one of them that was asked for last. */
  recent: PartOfList | undefined;
  /** As many doubles, to be copied: an array that starts as one of doubles stays one. */
  readonly blank: readonly number[];
  /** What other rooms have computed of the list, under symbols of their own. */
  readonly notes: Record<symbol, unknown>;
}

/** Some of the species of a list. */
export interface PartOfList {
  readonly list: SpeciesList;
  /** Their places in the whole list. */
  readonly places: readonly number[];
}

/** What a composition was made of, and what rooms have computed of it, under symbols of their own. */
export interface Notes {
  readonly list: SpeciesList;
  /** Nucleon fractions, in the order of the list. */
  readonly fractions: readonly number[];
  [room: symbol]: unknown;
}

/**
 * Marks a composition, of this or another copy of the library; gives what {@link notesOf} does, nothing for a copy of
 * one.
 */
export const brand: unique symbol = /* @__PURE__ */ Symbol.for("fermistate.composition.1");

/** The notes of a composition: several times cheaper than a WeakMap where compositions are many and short-lived. */
export function notesOf(composition: Composition): Notes {
  return (composition as Composition & { readonly [brand]: Notes })[brand];
}

/** Number fractions of a composition's species, in their order; good until the next call. */
export function numberFractionsOf(composition: Composition): Float64Array {
  return fillNumberFractions(notesOf(composition), composition);
}

/** The same where the notes are at hand; takes the nuclei per nucleon from where they stand, as a number would be boxed. */
export function fillNumberFractions(
  { list, fractions }: Notes,
  sums: Pick<Composition, "ionsPerNucleon">,
): Float64Array {
  const { massNumbers } = list;
  const ions = sums.ionsPerNucleon;
  const numbers = scratch(fractions.length);
  for (let i = 0; i < fractions.length; i++) numbers[i] = fractions[i]! / massNumbers[i]! / ions;
  return numbers;
}

const known = /* @__PURE__ */ new Map<string, SpeciesList>();
/** So many lists are remembered, and so many parts of each. */
export const mostKnown = 256;

/**
 * The list of the nuclides of these labels. @throws `unknown-nuclide`; `invalid-composition` for a label that comes
 * twice
 */
export function speciesOf(labels: readonly string[], argument = "labels"): SpeciesList {
  const key = labels.join(" ");
  const old = known.get(key);
  if (old !== undefined) return old;
  const twice = labels.find((label, i) => labels.indexOf(label) !== i);
  if (twice !== undefined) {
    const details = { argument, given: `${twice} twice`, allowed: "each nuclide once" };
    throw new FermistateError("invalid-composition", details);
  }
  const made = speciesList(
    labels.map((label): Nucleus => {
      const { massNumber, chargeNumber, nuclearMass, groundStateSpin } = nuclide(label);
      const spinKnown = groundStateSpin !== undefined;
      const spinDegeneracy = groundStateSpin === undefined ? 1 : 2 * groundStateSpin + 1;
      return { label, massNumber, chargeNumber, ionMass: nuclearMass, spinDegeneracy, spinKnown };
    }),
  );
  if (known.size >= mostKnown) known.clear();
  known.set(key, made);
  return made;
}

/** The list of given nuclei. */
export function speciesList(given: readonly Nucleus[]): SpeciesList {
  const order = given
    .map((_, i) => i)
    .sort((i, j) => {
      const [a, b] = [given[i]!, given[j]!];
      return a.chargeNumber - b.chargeNumber || a.massNumber - b.massNumber;
    });
  const nuclei = order.map((i) => given[i]!);
  const of = (power: (z: number) => number): Float64Array =>
    Float64Array.from(nuclei, ({ chargeNumber }) => power(chargeNumber));
  const firstCharged = nuclei.findIndex(({ chargeNumber }) => chargeNumber > 0);
  return {
    nuclei,
    order,
    firstCharged: firstCharged < 0 ? nuclei.length : firstCharged,
    charges: new Set(nuclei.map(({ chargeNumber }) => chargeNumber).filter((z) => z > 0)).size,
    massNumbers: Float64Array.from(nuclei, ({ massNumber }) => massNumber),
    powers: {
      twoThirds: of((z) => Math.cbrt(z) ** 2),
      fourThirds: of((z) => z * Math.cbrt(z)),
      fiveThirds: of((z) => z * Math.cbrt(z) ** 2),
      squared: of((z) => z * z),
      sevenThirds: of((z) => z * z * Math.cbrt(z)),
      fiveHalves: of((z) => z * z * Math.sqrt(z)),
      screened: of((z) => z * (z + 1) ** 1.5),
    },
    logMass: Float64Array.from(nuclei, ({ ionMass }) => 1.5 * Math.log(atomicMassConstant / ionMass)),
    parts: new Map(),
    recent: undefined,
    blank: nuclei.map(() => 0.5),
    notes: {},
  };
}

let numberFractions = new Float64Array(32);

/** Room for numbers of one composition: a typed array of its own for each would cost more than its sums. */
function scratch(count: number): Float64Array {
  if (numberFractions.length < count) numberFractions = new Float64Array(2 * count);
  return numberFractions;
}
