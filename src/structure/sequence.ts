/** Sequences of stars of one barotrope by central density. */
import type { Barotrope } from "../barotropes/barotrope.js";
import { FermistateError } from "../errors.js";
import { requireRange } from "./sequence-scan.js";
import { type Known, requireStarOptions, type StarOptions, starMaker } from "./star.js";

/** Which stars of a sequence. */
export interface SequenceOptions extends StarOptions {
  /** Central densities, g/cm^3; either these or `range` and `count`. */
  readonly centralDensities?: ArrayLike<number>;
  /** Lowest and highest central density of stars spaced evenly in its logarithm. */
  readonly range?: readonly [lowest: number, highest: number];
  /**
   * Number of stars in the range, 2 to 100 000.
   * @defaultValue 100
   */
  readonly count?: number;
}

/** A sequence in columns, one row per star; meanings and units as in {@link Star}. */
export interface MassRadiusSequence {
  /** g/cm^3. */
  readonly centralDensity: Float64Array;
  /** dyn/cm^2. */
  readonly centralPressure: Float64Array;
  /** g. */
  readonly mass: Float64Array;
  /** g. */
  readonly baryonMass: Float64Array;
  /** cm. */
  readonly radius: Float64Array;
  /** erg. */
  readonly bindingEnergy: Float64Array;
  /** d ln M/d ln rho_c. */
  readonly massSlope: Float64Array;
  /** g cm^2; undefined unless asked for. */
  readonly momentOfInertia: Float64Array | undefined;
  /** Undefined unless asked for. */
  readonly loveNumber: Float64Array | undefined;
  /** Undefined unless asked for. */
  readonly tidalDeformability: Float64Array | undefined;
}

/** A sequence whose optional columns are there where the options ask for them by the word `true`. */
export type SequenceWith<Options> = MassRadiusSequence &
  (Options extends { readonly rotation: true } ? { readonly momentOfInertia: Float64Array } : unknown) &
  (Options extends { readonly tides: true }
    ? { readonly loveNumber: Float64Array; readonly tidalDeformability: Float64Array }
    : unknown);

const columnNames = [
  "centralDensity",
  "centralPressure",
  "mass",
  "baryonMass",
  "radius",
  "bindingEnergy",
  "massSlope",
] as const;
const ofRotation = ["momentOfInertia"] as const;
const ofTides = ["loveNumber", "tidalDeformability"] as const;

/**
 * Mass, radius and what else is asked for along central densities.
 *
 * ```ts
 * import { polytrope } from "fermistate/barotropes";
 * import { massRadiusSequence } from "fermistate/structure";
 *
 * const matter = polytrope({ constant: 1e13, index: 1.5 });
 * const { mass, radius } = massRadiusSequence(matter, { range: [1e4, 1e6], count: 50, relativity: "newton" });
 * ```
 * @throws as `hydrostaticStar`, with the row; `invalid-option`
 */
export function massRadiusSequence<const Options extends SequenceOptions>(
  barotrope: Barotrope,
  options: Known<Options, SequenceOptions>,
): SequenceWith<Options> {
  requireStarOptions(options, ["centralDensities", "range", "count"]);
  const densities = densitiesOf(options);
  const make = starMaker(barotrope, options);
  const { rotation = false, tides = false } = options;
  const asked = [...columnNames, ...(rotation ? ofRotation : []), ...(tides ? ofTides : [])];
  const columns = asked.map((name) => [name, new Float64Array(densities.length)] as const);
  for (let i = 0; i < densities.length; i++) {
    const star = withRow(i, () => make(densities[i]!));
    for (const [name, column] of columns) column[i] = star[name]!;
  }
  return Object.freeze(Object.fromEntries(columns)) as unknown as SequenceWith<Options>;
}

/** The action; its refusals get the row. */
function withRow<Result>(index: number, action: () => Result): Result {
  try {
    return action();
  } catch (error) {
    if (!(error instanceof FermistateError)) throw error;
    const { code, argument, given, allowed } = error;
    throw new FermistateError(code, { argument, given, allowed, index });
  }
}

function densitiesOf({ centralDensities, range, count = 100 }: SequenceOptions): ArrayLike<number> {
  if ((centralDensities === undefined) === (range === undefined)) {
    throw new FermistateError("invalid-option", {
      argument: "centralDensities",
      given: centralDensities,
      allowed: "either centralDensities or range (with count)",
    });
  }
  if (centralDensities !== undefined) return centralDensities;
  if (!Number.isInteger(count) || count < 2 || count > 100_000) {
    throw new FermistateError("out-of-range", {
      argument: "count",
      given: count,
      allowed: "a whole number, 2 to 100000",
    });
  }
  const [low, high] = requireRange(range!);
  return Float64Array.from({ length: count }, (_, i) =>
    i === count - 1 ? high : low * (high / low) ** (i / (count - 1)),
  );
}
