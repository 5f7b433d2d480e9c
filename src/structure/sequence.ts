/** Sequences of stars of one barotrope by central density, and the star of a given mass. */
import type { Barotrope } from "../barotropes/barotrope.js";
import { FermistateError, requireFinite } from "../errors.js";
import { findRoot } from "../numerics/roots.js";
import { densityGrid, requireRange } from "./density-grid.js";
import { requireStarOptions, requireTolerance, type Star, type StarOptions, type StarWith, starMaker } from "./star.js";
import { turningDensity } from "./turning-density.js";

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
  options: Options,
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

/** Which star of a mass. */
export interface StarOfMassOptions extends StarOptions {
  /**
   * Central densities to search, g/cm^3.
   * @defaultValue those of the barotrope, sixteen decades of them at most
   */
  readonly range?: readonly [lowest: number, highest: number];
  /**
   * Keep the inside of the star as `profile`.
   * @defaultValue false
   */
  readonly profile?: boolean;
}

/**
 * The stable star of a gravitational mass: the least dense one in the range on a branch where mass rises with density.
 *
 * Where white dwarfs and neutron stars have the same mass, `range` chooses. The mass is met to the tolerance.
 * @throws as `hydrostaticStar`; `outside-domain` where no star of the range has this mass
 */
export function starOfMass<const Options extends StarOfMassOptions = Record<never, never>>(
  barotrope: Barotrope,
  mass: number,
  options?: Options,
): StarWith<Options> {
  return searchStar(barotrope, mass, options ?? {}) as StarWith<Options>;
}

function searchStar(barotrope: Barotrope, mass: number, options: StarOfMassOptions): Star {
  requireStarOptions(options, ["range", "profile"]);
  requireFinite("mass", mass, "a mass in g");
  const tolerance = requireTolerance(options.tolerance);
  const make = starMaker(barotrope, options);
  const excess = (star: Star): number => Math.log(star.mass / mass);
  let before: Star | undefined;
  let [lightest, heaviest] = [Number.POSITIVE_INFINITY, 0];
  for (const { density, isAcross } of densityGrid(barotrope, options.range)) {
    const star = make(density);
    lightest = Math.min(lightest, star.mass);
    heaviest = Math.max(heaviest, star.mass);
    let above = star;
    if (before !== undefined && !isAcross && before.massSlope > 0 && star.massSlope < 0) {
      // The maximum lies between the two.
      above = make(turningDensity(make, before, star));
      heaviest = Math.max(heaviest, above.mass);
    }
    if (before !== undefined && !isAcross && excess(before) <= 0 && excess(above) >= 0) {
      const root = findRoot((at) => excess(make(at)), before.centralDensity, above.centralDensity, {
        values: [excess(before), excess(above)],
        relativeTolerance: 0.01 * tolerance,
      });
      return make(root.x, options.profile === true);
    }
    before = star;
  }
  throw new FermistateError("outside-domain", {
    argument: "mass",
    given: mass,
    allowed: `masses of stars of ${barotrope.name} on rising branches, within ${lightest} to ${heaviest} g`,
  });
}
