/**
 * Composition of fully ionised matter: species, and the sums over them that every contribution needs.
 *
 * Convention: density rho is baryon mass density n_B m_u, and the mass fractions X_i are nucleon fractions with integer
 * mass numbers A_i, so n_i = X_i rho/(A_i m_u). Both are conserved by reactions; neither is a physical mass density
 * (the binding energy of nuclei is left out: 0.8 % between H1 and C12). Taking m_H for m_u shifts rho by 0.8 % and a
 * limiting mass by 1.6 %.
 */
import { atomicMassConstant, electronMass } from "../constants.js";
import { FermistateError, requireFinite, withIndex } from "../errors.js";
import type { Composition } from "./composition-members.js";
import { nuclide } from "./nuclides.js";
import { brand, type SpeciesList, speciesList, speciesOf } from "./species-list.js";
import { compositionOf } from "./summed-composition.js";

export type { ChargeMoments, Composition, Species } from "./composition-members.js";

/** Nucleon fractions by label of the nuclide. */
export type NucleonFractions = Readonly<Record<string, number>>;

/** One fictitious nucleus in place of a mixture. */
export interface MeanNucleus {
  /** 1 <= A <= 10000. */
  readonly meanMassNumber: number;
  /** 0 <= Z <= A. */
  readonly meanCharge: number;
}

/** Options of {@link composition}. */
export interface CompositionOptions {
  /** Scale the fractions to a sum of one, instead of refusing any other sum. @defaultValue false */
  readonly normalise?: boolean;
}

/** How far the sum of nucleon fractions may be from one: ten printed digits. */
const sumTolerance = 1e-10;

/**
 * A composition from nucleon (mass) fractions, or from a mean mass and charge number.
 *
 * Fractions must sum to one within 1e-10; inside that they are kept as given, so Y_e and the particles per gram carry
 * the same relative error as the sum. Zero fractions are dropped, as are traces whose X/A is below the smallest double.
 *
 * A mean nucleus has the mass A m_u - Z m_e (no mass excess), spin degeneracy 1 and no mixing entropy: it gives the
 * electrons of a mixture exactly, ion terms roughly (charge moments of a mixture are larger).
 *
 * @param fractions - nucleon fractions by label (see `nuclide`), or `{ meanMassNumber, meanCharge }`
 * @throws FermistateError `unknown-nuclide`, `not-a-number` (a fraction that is no finite number),
 * `invalid-composition` (empty, negative, not summing to one; the message gives the sum), `out-of-range` (a mean
 * nucleus with A outside 1..10000 or Z outside 0..A), `invalid-option`
 * @example
 * ```ts
 * import { composition } from "fermistate";
 * composition({ C12: 0.5, O16: 0.5 }).electronsPerNucleon; // => 0.5
 * ```
 */
export function composition(fractions: NucleonFractions | MeanNucleus, options: CompositionOptions = {}): Composition {
  const normalise = readOptions(options);
  if (typeof fractions !== "object" || fractions === null || Array.isArray(fractions)) {
    throw invalid(fractions, "an object of nucleon fractions by label, or { meanMassNumber, meanCharge }");
  }
  const entries = Object.entries(fractions);
  const isMean = entries.some(([key]) => key === "meanMassNumber" || key === "meanCharge");
  return isMean ? meanNucleus(entries) : nuclei(entries, normalise);
}

/**
 * Throws `invalid-composition` unless `value` was made by {@link composition} or `compositions`, of this or another copy
 * of the library (ESM or CommonJS); returns it. Copies of a composition (a spread, `structuredClone`, a message to a
 * worker) do not pass: send nuclides and fractions, and make it again.
 */
export function requireComposition(value: unknown): Composition {
  return asComposition(value, "a composition, as composition({ C12: 0.5, O16: 0.5 }) makes it, not a copy of one");
}

/** The same with a message of its own: what is allowed, and the row of a list. */
export function asComposition(value: unknown, allowed: string, row?: number): Composition {
  if (typeof value === "object" && value !== null && (value as { [brand]?: object })[brand] && Object.isFrozen(value)) {
    return value as Composition;
  }
  throw invalid(value, allowed, "composition", row);
}

/** Whether fractions are to be scaled. @throws `invalid-option` */
export function readOptions(options: CompositionOptions): boolean {
  const given: Readonly<Record<string, unknown>> =
    typeof options === "object" ? { ...options } : { [String(options)]: 0 };
  const { normalise = false, ...others } = given;
  const [stranger] = Object.keys(others);
  if (stranger === undefined && typeof normalise === "boolean") return normalise;
  const refused = stranger ?? normalise;
  throw new FermistateError("invalid-option", {
    argument: "options",
    given: refused,
    allowed: "{ normalise: true | false }",
  });
}

function nuclei(entries: readonly (readonly [string, unknown])[], normalise: boolean): Composition {
  if (entries.length === 0) throw invalid(0, "at least one nuclide", "number of fractions");
  const fractions = new Float64Array(entries.length);
  for (let i = 0; i < entries.length; i++) {
    const [label, given] = entries[i]!;
    nuclide(label);
    if (!(typeof given === "number" && given >= 0 && given < Number.POSITIVE_INFINITY)) refuseFraction(label, given);
    fractions[i] = given as number;
  }
  const list = speciesOf(entries.map(([label]) => label));
  return mixed(list, fractions, new Float64Array(fractions.length), normalise);
}

/** Throws the error of a fraction that is none. */
export function refuseFraction(label: string, given: unknown, row?: number): never {
  const [argument, allowed] = [`fractions.${label}`, "a nucleon fraction from 0 to 1"];
  throw invalid(requireFinite(argument, given, allowed, row), allowed, argument, row);
}

/** The composition of fractions in the order of the labels, with room to sort them; `row` for the error message. */
export function mixed(
  list: SpeciesList,
  given: Float64Array,
  fractions: Float64Array,
  normalise: boolean,
  row?: number,
): Composition {
  const sum = checkedSum(given, normalise, row);
  const { order } = list;
  for (let i = 0; i < order.length; i++) {
    const fraction = given[order[i]!]!;
    fractions[i] = normalise ? fraction / sum : fraction;
  }
  return compositionOf(list, fractions);
}

/** The sum of fractions. @throws `invalid-composition` where it is not what it must be */
export function checkedSum(given: Float64Array, normalise: boolean, row?: number): number {
  let sum = 0;
  for (let i = 0; i < given.length; i++) sum += given[i]!;
  const good = normalise ? sum > 0 && sum < Number.POSITIVE_INFINITY : Math.abs(sum - 1) <= sumTolerance;
  if (good) return sum;
  const one = `1 within ${sumTolerance}, or { normalise: true } and any positive finite sum`;
  throw invalid(sum, one, "sum of fractions", row);
}

function meanNucleus(entries: readonly (readonly [string, unknown])[]): Composition {
  const { meanMassNumber, meanCharge, ...rest } = Object.fromEntries(entries);
  const other = Object.keys(rest)[0];
  if (other !== undefined) throw invalid(other, "meanMassNumber and meanCharge alone, or nucleon fractions alone");
  const massRange = "a mass number from 1 to 10000";
  const mass = requireFinite("meanMassNumber", meanMassNumber, massRange);
  const charge = requireFinite("meanCharge", meanCharge, "a charge number from 0 to meanMassNumber");
  if (mass < 1 || mass > 1e4) throw outOfRange("meanMassNumber", mass, massRange);
  if (charge < 0 || charge > mass) throw outOfRange("meanCharge", charge, `a charge number from 0 to ${mass}`);
  const ionMass = mass * atomicMassConstant - charge * electronMass;
  const identity = { label: "mean", massNumber: mass, chargeNumber: charge };
  const species = { ...identity, ionMass, spinDegeneracy: 1, spinKnown: true };
  return compositionOf(speciesList([species]), Float64Array.of(1));
}

/** The error of something that is no composition. */
export function invalid(given: unknown, allowed: string, argument = "fractions", row?: number): FermistateError {
  return new FermistateError("invalid-composition", withIndex({ argument, given, allowed }, row));
}

function outOfRange(argument: string, given: number, allowed: string): FermistateError {
  return new FermistateError("out-of-range", { argument, given, allowed });
}
