/**
 * Composition of fully ionised matter: species, and the sums over them that every contribution needs.
 *
 * Convention: density rho is baryon mass density n_B m_u, and the mass fractions X_i are nucleon fractions with integer
 * mass numbers A_i, so n_i = X_i rho/(A_i m_u). Both are conserved by reactions; neither is a physical mass density
 * (the binding energy of nuclei is left out: 0.8 % between H1 and C12). Taking m_H for m_u shifts rho by 0.8 % and a
 * limiting mass by 1.6 %.
 */
import { atomicMassConstant, electronMass } from "../constants.js";
import { FermistateError, requireFinite } from "../errors.js";
import { nuclide } from "./nuclides.js";

/** One kind of nucleus in a composition. */
export interface Species {
  /** Label of the nuclide, "C12"; "mean" for the fictitious mean nucleus. */
  readonly label: string;
  /** Mass number A; need not be an integer for the mean nucleus. */
  readonly massNumber: number;
  /** Charge number Z; need not be an integer for the mean nucleus, 0 for the free neutron. */
  readonly chargeNumber: number;
  /** Fraction X of the nucleons that sit in this species. */
  readonly nucleonFraction: number;
  /** Fraction x of the nuclei (free neutrons included) that are this species. */
  readonly numberFraction: number;
  /** Mass of the bare nucleus M, g. */
  readonly ionMass: number;
  /** Degeneracy g = 2J + 1 of the ground state; 1 where the spin is not known, and for the mean nucleus. */
  readonly spinDegeneracy: number;
  /** False where `spinDegeneracy` is 1 for want of knowledge. */
  readonly spinKnown: boolean;
}

/** Averages of powers of the charge number over all nuclei, by number fraction: sum_j x_j Z_j^p. */
export interface ChargeMoments {
  /** p = 2/3. */
  readonly twoThirds: number;
  /** p = 4/3. */
  readonly fourThirds: number;
  /** p = 5/3: the ion coupling parameter of a mixture over that of the electrons. */
  readonly fiveThirds: number;
  /** p = 2. */
  readonly squared: number;
  /** p = 7/3. */
  readonly sevenThirds: number;
  /** p = 5/2. */
  readonly fiveHalves: number;
}

/** Species and their sums; made by {@link composition} only, frozen throughout. */
export interface Composition {
  /** Readable label, "C12 0.5, O16 0.5". */
  readonly name: string;
  /** Species of non-zero fraction, by charge number, then mass number. */
  readonly species: readonly Species[];
  /** Nuclei per nucleon, sum X_i/A_i. */
  readonly ionsPerNucleon: number;
  /** Electrons per nucleon Y_e = sum X_i Z_i/A_i. */
  readonly electronsPerNucleon: number;
  /** Mean mass number of the nuclei, 1/sum(X_i/A_i). */
  readonly meanMassNumber: number;
  /** Mean charge number of the nuclei, sum x_j Z_j. */
  readonly meanCharge: number;
  /** Other averages over the charge. */
  readonly chargeMoments: ChargeMoments;
  /** <Z^(5/3)> over the charged nuclei alone: the ion coupling over that of the electrons; 0 without charge. */
  readonly couplingMoment: number;
  /** Nuclei per gram, sum X_i/(A_i m_u), 1/g. */
  readonly ionsPerGram: number;
  /** Electrons per gram, Y_e/m_u, 1/g. */
  readonly electronsPerGram: number;
  /**
   * C = sum_j x_j ln[(x_j/g_j) (m_u/M_j)^(3/2)]. With N = `ionsPerGram` the free energy of the ideal gas is
   * F = N k T {ln[N rho (2 pi hbar^2/(m_u k T))^(3/2)] + C - 1}, erg/g.
   */
  readonly ionEntropyConstant: number;
  /** As `ionsPerGram`, free neutrons left out. */
  readonly chargedIonsPerGram: number;
  /** As `ionEntropyConstant`, with fractions x_j among charged nuclei only; 0 where there are none. */
  readonly chargedIonEntropyConstant: number;
  /** sum_j x_j Z_j^2/M_j, 1/g: the ion plasma frequency squared over 4 pi e^2 n_i. */
  readonly plasmaFrequencySum: number;
}

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
  return fromSpecies(isMean ? meanNucleus(entries) : nuclei(entries, normalise));
}

const brand: unique symbol = /* @__PURE__ */ Symbol.for("fermistate.composition.1");

/**
 * Throws `invalid-composition` unless `value` was made by {@link composition}, of this or another copy of the library
 * (ESM or CommonJS); returns it. Copies of a composition with other members do not pass.
 */
export function requireComposition(value: unknown): Composition {
  if (typeof value === "object" && value !== null && Object.hasOwn(value, brand) && Object.isFrozen(value)) {
    return value as Composition;
  }
  throw invalid(value, "a composition, as composition({ C12: 0.5, O16: 0.5 }) makes it", "composition");
}

/** A species before its share of the nuclei is known. */
type Share = Omit<Species, "numberFraction">;

function readOptions(options: CompositionOptions): boolean {
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

function nuclei(entries: readonly (readonly [string, unknown])[], normalise: boolean): Share[] {
  if (entries.length === 0) throw invalid(0, "at least one nuclide", "number of fractions");
  let sum = 0;
  for (const [label, given] of entries) {
    nuclide(label);
    const fraction = requireFinite(`fractions.${label}`, given, "a nucleon fraction from 0 to 1");
    if (fraction < 0) throw invalid(fraction, "a nucleon fraction from 0 to 1", `fractions.${label}`);
    sum += fraction;
  }
  const one = `1 within ${sumTolerance}, or { normalise: true } and any positive finite sum`;
  const good = normalise ? sum > 0 && sum < Number.POSITIVE_INFINITY : Math.abs(sum - 1) <= sumTolerance;
  if (!good) throw invalid(sum, one, "sum of fractions");
  return entries
    .map(([label, given]): Share => {
      const { massNumber, chargeNumber, nuclearMass, groundStateSpin } = nuclide(label);
      return {
        label,
        massNumber,
        chargeNumber,
        nucleonFraction: normalise ? (given as number) / sum : (given as number),
        ionMass: nuclearMass,
        spinDegeneracy: groundStateSpin === undefined ? 1 : 2 * groundStateSpin + 1,
        spinKnown: groundStateSpin !== undefined,
      };
    })
    .filter(({ nucleonFraction, massNumber }) => nucleonFraction / massNumber > 0)
    .sort((a, b) => a.chargeNumber - b.chargeNumber || a.massNumber - b.massNumber);
}

function meanNucleus(entries: readonly (readonly [string, unknown])[]): Share[] {
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
  return [{ ...identity, nucleonFraction: 1, ionMass, spinDegeneracy: 1, spinKnown: true }];
}

/** All sums, over species in their final order. */
function fromSpecies(shares: readonly Share[]): Composition {
  const ionsPerNucleon = total(shares, (one) => one.nucleonFraction / one.massNumber);
  // Z/A first: 0.5 exactly for the usual nuclei.
  const electronsPerNucleon = total(shares, (one) => one.nucleonFraction * (one.chargeNumber / one.massNumber));
  const species = shares.map(
    (one): Species => Object.freeze({ ...one, numberFraction: one.nucleonFraction / one.massNumber / ionsPerNucleon }),
  );
  const moment = (power: (z: number) => number): number =>
    total(species, (one) => one.numberFraction * power(one.chargeNumber));
  const charged = species.filter((one) => one.chargeNumber > 0);
  const ionsPerGram = ionsPerNucleon / atomicMassConstant;
  const made: Composition = {
    name: nameOf(species),
    species: Object.freeze(species),
    ionsPerNucleon,
    electronsPerNucleon,
    meanMassNumber: 1 / ionsPerNucleon,
    meanCharge: moment((z) => z),
    // Roots, not powers: a power has the rounded exponent's error times ln Z.
    chargeMoments: Object.freeze({
      twoThirds: moment((z) => Math.cbrt(z) ** 2),
      fourThirds: moment((z) => z * Math.cbrt(z)),
      fiveThirds: moment((z) => z * Math.cbrt(z) ** 2),
      squared: moment((z) => z * z),
      sevenThirds: moment((z) => z * z * Math.cbrt(z)),
      fiveHalves: moment((z) => z * z * Math.sqrt(z)),
    }),
    couplingMoment:
      charged.length === 0 ? 0 : moment((z) => z * Math.cbrt(z) ** 2) / total(charged, (one) => one.numberFraction),
    ionsPerGram,
    electronsPerGram: electronsPerNucleon / atomicMassConstant,
    ionEntropyConstant: entropyConstant(species),
    chargedIonsPerGram: total(charged, (one) => one.nucleonFraction / one.massNumber) / atomicMassConstant,
    chargedIonEntropyConstant: entropyConstant(charged),
    plasmaFrequencySum: total(species, (one) => (one.numberFraction * one.chargeNumber ** 2) / one.ionMass),
  };
  // Not enumerable: a spread copy, whose members may have been changed, loses it.
  return Object.freeze(Object.defineProperty(made, brand, { value: true }));
}

/** sum_j y_j ln[(y_j/g_j)(m_u/M_j)^(3/2)], y_j the number fractions among the species given. */
function entropyConstant(species: readonly Species[]): number {
  const all = total(species, (one) => one.numberFraction);
  return total(species, (one) => {
    const fraction = one.numberFraction / all;
    return fraction * (Math.log(fraction / one.spinDegeneracy) + 1.5 * Math.log(atomicMassConstant / one.ionMass));
  });
}

function total<T>(items: readonly T[], term: (item: T) => number): number {
  return items.reduce((sum, item) => sum + term(item), 0);
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

function invalid(given: unknown, allowed: string, argument = "fractions"): FermistateError {
  return new FermistateError("invalid-composition", { argument, given, allowed });
}

function outOfRange(argument: string, given: number, allowed: string): FermistateError {
  return new FermistateError("out-of-range", { argument, given, allowed });
}
