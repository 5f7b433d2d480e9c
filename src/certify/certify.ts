/**
 * A certificate: how far an equation of state is from an independent evaluation of the same formulas, and where.
 *
 * It measures arithmetic and implementation (and, for a table, interpolation), not the physics: both sides evaluate the same formulas.
 */
import { FermistateError, isFermistateError } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import type { Physics } from "../thermodynamics/contribution.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { isNodeOf } from "../thermodynamics/interpolation-nodes.js";
import { quantities as stateQuantities } from "../thermodynamics/quantities.js";
import { libraryVersion } from "../version.js";
import { compareAt, ownValues, type PointComparison } from "./comparison.js";
import { requireDigits } from "./digits.js";
import type { CertifiedQuantity } from "./reference-quantities.js";
import { type CertifiedRegion, givenPoints, type PointColumns, regionPoints } from "./sample.js";
import { requireQuantities, subjectOf } from "./subject.js";

/** Options of {@link certify}: a region or columns of points, and what to compare. */
export interface CertifyOptions {
  /** Points spread over a rectangle in ln density and ln temperature. */
  readonly region?: CertifiedRegion;
  /** Points one by one, in place of a region. */
  readonly points?: PointColumns;
  /**
   * Correct digits of the reference, 17 to 60.
   * @defaultValue 20
   */
  readonly digits?: number;
  /**
   * Quantities of a state, or natural derivatives of the free energy up to `f22`.
   * @defaultValue pressure, specificEnergy, specificEntropy, specificFreeEnergy, heatCapacityV, densityExponent, temperatureExponent, gamma1, gamma3,
   * adiabaticGradient, soundSpeed
   */
  readonly quantities?: readonly CertifiedQuantity[];
  /** Called after every point with the number of points done and of all; may throw to stop. */
  readonly onProgress?: (done: number, all: number) => void;
}

/** Errors over the points that were compared. */
export interface ErrorSummary {
  /** The worst of all points. */
  readonly largest: number;
  /** 99 % of the points are not worse (nearest rank). */
  readonly percentile99: number;
  /** Half of the points are not worse (nearest rank). */
  readonly median: number;
  /** Where the largest is: g/cm^3 and K. */
  readonly at: { readonly density: number; readonly temperature: number };
}

/** The errors of one quantity. */
export interface CertifiedErrors {
  /** Name of the quantity. */
  readonly name: CertifiedQuantity;
  /** Its unit in cgs, "1" for a pure number. */
  readonly unit: string;
  /** |value - reference| over the larger of the two. */
  readonly relative: ErrorSummary;
  /** |value - reference| over the sum of the absolute values of the terms; undefined where the quantity is no sum. */
  readonly scaled?: ErrorSummary;
  /** Largest share of the sum of absolute terms that has no reference; undefined where all has one or it is no sum. */
  readonly uncertifiedShare?: number;
}

/** Points that were not compared. */
export interface RefusedPoints {
  /** Who refused. */
  readonly by: "equation of state" | "reference";
  /** Code of the error. */
  readonly code: string;
  /** How many points. */
  readonly count: number;
  /** The first of them and the message there. */
  readonly first: { readonly density: number; readonly temperature: number; readonly message: string };
}

/** What {@link certify} returns: plain data, ready for JSON. */
export interface Certificate {
  /** Version of the library that made it. */
  readonly libraryVersion: string;
  /** Name of the equation of state. */
  readonly equationOfState: string;
  /** What the matter is made of. */
  readonly composition: {
    readonly name: string;
    readonly species: readonly { readonly label: string; readonly nucleonFraction: number }[];
  };
  /** The formulas that were evaluated a second time. */
  readonly physics: readonly Physics[];
  /** Contributions without a reference: their own values stand on both sides, so their errors are not seen. */
  readonly uncertified: readonly string[];
  /** Digits of the reference. */
  readonly digits: number;
  /** Largest error estimate of the reference, relative to sums of absolute terms. */
  readonly referenceError: number;
  /** The region as asked for; undefined for columns of points. */
  readonly region?: CertifiedRegion;
  /** Number of points asked for. */
  readonly asked: number;
  /** Number of points that both sides answered. */
  readonly compared: number;
  /** Number of them that are nodes of a table: exact by construction, they show nothing of its error between them. */
  readonly nodes: number;
  /** The others. */
  readonly refused: readonly RefusedPoints[];
  /** Quantities asked for that the equation of state or the reference does not know. */
  readonly unknown: readonly CertifiedQuantity[];
  /** Errors of each quantity. */
  readonly quantities: readonly CertifiedErrors[];
  /** Errors point by point, in the order of `quantities`. */
  readonly columns: CertificateColumns;
}

/** Every point that was compared with its errors. */
export interface CertificateColumns {
  /** Baryon mass density, g/cm^3. */
  readonly density: readonly number[];
  /** Temperature, K. */
  readonly temperature: readonly number[];
  /** Whether the point is a node of a table. */
  readonly isNode: readonly boolean[];
  /** One column per quantity of relative errors. */
  readonly relative: readonly (readonly number[])[];
  /** The same over the sum of absolute terms; null where the quantity is no sum. */
  readonly scaled: readonly (readonly number[] | null)[];
}

/**
 * Compares an equation of state with an independent evaluation of its formulas in decimal arithmetic.
 *
 * Electrons and positrons: quadrature of the defining integrals. All other terms: the printed formulas, coefficients
 * written a second time, derivatives by Taylor arithmetic. Nothing of it is shared with what is certified but nuclide
 * masses and the composition. Contributions without a reference are named, and with what share they enter.
 *
 * A point takes half a second or so at 20 digits.
 *
 * @throws FermistateError `invalid-option`, `invalid-composition`, `out-of-range`, `not-a-number`, `length-mismatch`,
 * `unavailable-quantity`; `outside-domain` where no point at all could be compared
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { certify } from "fermistate/certify";
 * const core = composition({ C12: 0.5, O16: 0.5 });
 * const region = { density: [1e5, 1e9], temperature: [1e7, 1e9], points: 4 } as const;
 * const certificate = certify(whiteDwarfMatter(), core, { region, quantities: ["pressure"] });
 * certificate.quantities.every(({ relative }) => relative.largest < 1e-14); // => true
 * ```
 */
export function certify(
  equationOfState: EquationOfState,
  composition: Composition,
  options: CertifyOptions,
): Certificate {
  const subject = subjectOf(equationOfState);
  requireComposition(composition);
  const { points, digits, names, onProgress } = checked(options);
  const count = points.density.length;
  const compared: ComparedPoint[] = [];
  const refused = new Map<string, RefusedPoints>();
  for (let i = 0; i < count; i++) {
    const [density, temperature] = [points.density[i]!, points.temperature[i]!];
    let by: RefusedPoints["by"] = "equation of state";
    try {
      const own = ownValues(subject, composition, density, temperature, names);
      by = "reference";
      const result = compareAt(subject, composition, density, temperature, names, digits, own);
      const isNode = isNodeOf(equationOfState, density, temperature, composition);
      compared.push({ density, temperature, isNode, result });
    } catch (error) {
      if (!isFermistateError(error)) throw error;
      const key = `${by} ${error.code}`;
      const first = refused.get(key)?.first ?? { density, temperature, message: error.message };
      refused.set(key, { by, code: error.code, count: (refused.get(key)?.count ?? 0) + 1, first });
    }
    onProgress?.(i + 1, count);
  }
  if (compared.length === 0) throw nothingCompared([...refused.values()][0]!);
  const known = names.filter((name) => compared.every(({ result }) => !result.unknown.includes(name)));
  return {
    libraryVersion,
    equationOfState: equationOfState.name,
    composition: {
      name: composition.name,
      species: composition.species.map(({ label, nucleonFraction }) => ({ label, nucleonFraction })),
    },
    physics: subject.physics,
    uncertified: subject.uncertified.map(({ name }) => name),
    digits,
    referenceError: Math.max(...compared.map(({ result }) => result.referenceError)),
    ...(options.region === undefined ? {} : { region: options.region }),
    asked: count,
    compared: compared.length,
    nodes: compared.filter((one) => one.isNode).length,
    refused: [...refused.values()],
    unknown: names.filter((name) => !known.includes(name)),
    ...summaries(known, compared),
  };
}

interface ComparedPoint {
  readonly density: number;
  readonly temperature: number;
  readonly isNode: boolean;
  readonly result: PointComparison;
}

function summaries(
  names: readonly CertifiedQuantity[],
  compared: readonly ComparedPoint[],
): Pick<Certificate, "quantities" | "columns"> {
  const density = compared.map((one) => one.density);
  const temperature = compared.map((one) => one.temperature);
  const rows = names.map((name) => compared.map(({ result }) => result.comparisons.find((one) => one.name === name)!));
  const relative = rows.map((row) => row.map((one) => one.relative));
  // A limit at T = 0 is no sum: such a quantity has no second measure at all.
  const scaled = rows.map((row) =>
    row.every((one) => one.scaled !== undefined) ? row.map((one) => one.scaled!) : null,
  );
  const quantities = names.map((name, k): CertifiedErrors => {
    const shares = rows[k]!.flatMap((one) => one.uncertifiedShare ?? []);
    const sums = scaled[k];
    return {
      name,
      unit: unitOf(name),
      relative: summary(relative[k]!, density, temperature),
      ...(sums == null ? {} : { scaled: summary(sums, density, temperature) }),
      ...(shares.length === 0 ? {} : { uncertifiedShare: Math.max(...shares) }),
    };
  });
  const isNode = compared.map((one) => one.isNode);
  return { quantities, columns: { density, temperature, isNode, relative, scaled } };
}

function summary(errors: readonly number[], density: readonly number[], temperature: readonly number[]): ErrorSummary {
  const sorted = [...errors].sort((a, b) => a - b);
  const rank = (share: number): number => sorted[Math.max(0, Math.ceil(share * sorted.length) - 1)]!;
  const largest = sorted.at(-1)!;
  const worst = errors.indexOf(largest);
  return {
    largest,
    percentile99: rank(0.99),
    median: rank(0.5),
    at: { density: density[worst]!, temperature: temperature[worst]! },
  };
}

/** Unit of a quantity; derivatives of the free energy are in erg/g. */
export function unitOf(name: CertifiedQuantity): string {
  return (stateQuantities as Readonly<Record<string, { readonly unit: string }>>)[name]?.unit ?? "erg/g";
}

/** Fewest digits at which a double is a rounded reference and not the other way round. */
const fewestDigits = 17;

/** Checked digits. */
export function certificateDigits(given: unknown): number {
  const digits = requireDigits(given);
  if (digits >= fewestDigits) return digits;
  const allowed = `whole numbers ${fewestDigits} to 60: a reference must be better than a double`;
  throw new FermistateError("invalid-option", { argument: "digits", given: digits, allowed });
}

const known = ["region", "points", "digits", "quantities", "onProgress"];

function checked(options: CertifyOptions): {
  readonly points: PointColumns;
  readonly digits: number;
  readonly names: readonly CertifiedQuantity[];
  readonly onProgress: CertifyOptions["onProgress"];
} {
  const fail = (argument: string, given: unknown, allowed: string): never => {
    throw new FermistateError("invalid-option", { argument, given, allowed });
  };
  if (typeof options !== "object" || options === null) {
    fail("options", options, `an object with region or points, and perhaps ${known.slice(2).join(", ")}`);
  }
  const stranger = Object.keys(options).find((name) => !known.includes(name));
  if (stranger !== undefined) fail("options", stranger, known.join(", "));
  const { region, points, digits = 20, quantities, onProgress } = options;
  if ((region === undefined) === (points === undefined)) {
    fail("options", region === undefined ? "neither" : "region and points", "one of region, points");
  }
  if (onProgress !== undefined && typeof onProgress !== "function") {
    fail("onProgress", onProgress, "a function of (done, all)");
  }
  return {
    points: region === undefined ? givenPoints(points!) : regionPoints(region),
    digits: certificateDigits(digits),
    names: requireQuantities(quantities),
    onProgress,
  };
}

function nothingCompared({ by, first }: RefusedPoints): FermistateError {
  return new FermistateError("outside-domain", {
    argument: "points",
    given: `${first.density} g/cm^3, ${first.temperature} K`,
    allowed: `points that both sides answer; refused by the ${by}: ${first.message}`,
  });
}
