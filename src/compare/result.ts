/** What a comparison says; plain data, frozen at the top, its typed arrays to be treated as read-only. */
import type { Axis } from "../grids/axes.js";
import type { FindingCode } from "../regime/finding.js";
import type { KindWord } from "../regime/phase.js";
import type { QuantityName } from "../thermodynamics/quantities.js";

/**
 * Where in the plane of density and temperature a point lies, by what rules there; the first that applies:
 *
 * - `partial-ionisation`: bound electrons are to be expected
 * - `melting-line`: a neighbour on the grid has another phase
 * - `pairs`: more positrons than net electrons
 * - `pair-onset`: from 1e-4 to 1 positrons per net electron
 * - `radiation`: photons have more than half of the pressure
 * - `crystal`, `degenerate-liquid` (T below T_F/10), `partially-degenerate`, `non-degenerate` (above 2 T_F)
 * - `elsewhere`: beyond what `regime` judges
 */
export type Region =
  | "partial-ionisation"
  | "melting-line"
  | "pairs"
  | "pair-onset"
  | "radiation"
  | "crystal"
  | "degenerate-liquid"
  | "partially-degenerate"
  | "non-degenerate"
  | "elsewhere";

/** A point of the grid. */
export interface Place {
  /** Row of the grid: i_temperature * densities + i_density. */
  readonly row: number;
  /** Baryon mass density, g/cm^3. */
  readonly density: number;
  /** Temperature, K. */
  readonly temperature: number;
}

/** A place where a quantity differs most. */
export interface WorstPlace extends Place {
  /** Relative difference, with its sign. */
  readonly difference: number;
  /** The two values, in the unit of the quantity. */
  readonly values: readonly [a: number, b: number];
  /** Where it lies. */
  readonly region: Region;
  /** What the matter is called there, as `regime` says. */
  readonly kind: readonly KindWord[];
  /** Assumptions that are strained there, by code. */
  readonly findings: readonly FindingCode[];
}

/** Largest and median difference of the points of one region. */
export interface RegionDifference {
  /** Which region. */
  readonly region: Region;
  /** Points compared. */
  readonly points: number;
  /** Largest size of the difference. */
  readonly largest: number;
  /** Size that half of its points stay within. */
  readonly median: number;
}

/** One quantity, compared. */
export interface QuantityDifference {
  /** Which quantity. */
  readonly name: QuantityName;
  /** Unit in cgs, "1" for a pure number. */
  readonly unit: string;
  /** What the difference is divided by, in words. */
  readonly scale: string;
  /**
   * (b - a)/scale at every point, the constant offset removed where there is one; NaN where one of the two refuses or
   * does not know the quantity.
   */
  readonly difference: Float64Array;
  /** Points compared. */
  readonly points: number;
  /** Largest size of the difference. */
  readonly largest: number;
  /** Size that 99 % of the points stay within. */
  readonly percentile99: number;
  /** Size that half of the points stay within. */
  readonly median: number;
  /** A few places of locally largest difference, well apart, the worst first; none where all is equal. */
  readonly worst: readonly WorstPlace[];
  /** The difference by region, the worst first. */
  readonly regions: readonly RegionDifference[];
}

/** A constant by which b lies above a: another zero of energy or entropy. */
export interface Offset {
  /** Which of the two. */
  readonly name: "specificEnergy" | "specificEntropy";
  /** b - a, in the unit of the quantity. */
  readonly value: number;
  /** Unit in cgs. */
  readonly unit: string;
  /** Mean size of the relative difference with the constant. */
  readonly before: number;
  /** The same without it. */
  readonly after: number;
}

/** Points where one answers and the other refuses. */
export interface Refusals {
  /** Points where both answer. */
  readonly both: number;
  /** Points where only the first answers. */
  readonly onlyFirst: number;
  /** Points where only the second answers. */
  readonly onlySecond: number;
  /** Points where none answers. */
  readonly none: number;
  /** 3 where both answer, 1 only the first, 2 only the second, 0 none: one number per point. */
  readonly answers: Uint8Array;
  /** Refusals of each, by code, the most frequent first. */
  readonly codes: readonly [a: readonly RefusalCount[], b: readonly RefusalCount[]];
}

/**
 * Points that both answer and that are nodes of a table in one of the two. There the table repeats what it was made from, whatever its
 * error between them is.
 */
export interface NodeCounts {
  /** Nodes of the first. */
  readonly first: number;
  /** Nodes of the second. */
  readonly second: number;
  /** Nodes of any of the two. */
  readonly any: number;
  /** 1 at a node of the first, 2 of the second, 3 of both, 0 elsewhere: one number per point. */
  readonly points: Uint8Array;
}

/** Refusals with one code. */
export interface RefusalCount {
  /** A code of FermistateError; "not-a-number" for a state that holds none, "other-error" for a foreign error. */
  readonly code: string;
  /** Points refused with it. */
  readonly points: number;
  /** The first such point. */
  readonly example: Place;
}

/** What is checked in {@link ConsistencyCheck}. */
export type ConsistencyName =
  | "free-energy"
  | "pressure"
  | "entropy"
  | "maxwell"
  | "first-law-density"
  | "first-law-temperature"
  | "densityExponent"
  | "temperatureExponent"
  | "heatCapacityV"
  | "gamma1"
  | "adiabaticGradient";

/** One relation of thermodynamics, measured from values alone at every point of one equation of state. */
export interface ConsistencyCheck {
  /** Which relation. */
  readonly name: ConsistencyName;
  /** The relation as a formula. */
  readonly relation: string;
  /** Relative amount by which it is missed at each point; NaN where it could not be measured. */
  readonly residual: Float64Array;
  /** Uncertainty of that amount, from extrapolation and rounding; NaN likewise. */
  readonly error: Float64Array;
  /** Points measured, with an uncertainty below 1 %. */
  readonly measured: number;
  /** Points where the uncertainty is larger, a neighbour is refused or another phase. */
  readonly unresolved: number;
  /** Points measured where the relation is missed by more than three times the uncertainty. */
  readonly missed: number;
  /** Largest amount among those; 0 where there are none. */
  readonly largest: number;
  /** Where that is. */
  readonly worst: Place | undefined;
  /** Median of the uncertainty of the points measured: what could be seen. */
  readonly resolution: number;
}

/** Points where a quantity has a sign that no stable matter has. */
export interface SignCount {
  /** Which of the two: 0 or 1. */
  readonly of: 0 | 1;
  /** What is not positive: as claimed, or as measured from differences of values. */
  readonly quantity:
    | "pressure"
    | "heatCapacityV"
    | "pressureByDensity"
    | "gamma1"
    | "measuredHeatCapacity"
    | "measuredPressureByDensity";
  /** Points where that is so. */
  readonly points: number;
  /** The most negative value; of measured ones relative to P and to P/rho. */
  readonly value: number;
  /** Where it is most negative. */
  readonly worst: Place;
}

/** A discontinuity of one of the two where the other is smooth or jumps differently. */
export interface Jump {
  /** Which quantity. */
  readonly quantity: QuantityName;
  /** Which of the two jumps. */
  readonly of: "first" | "second" | "both";
  /** Relative size of the largest one found. */
  readonly size: number;
  /** Where that is, g/cm^3: between two points of the grid, found by halving. */
  readonly density: number;
  /** Where that is, K. */
  readonly temperature: number;
  /** Steps of the grid in which one was found. Small jumps between others may stay unseen. */
  readonly steps: number;
}

/** What {@link compare} says. */
export interface Comparison {
  /** What the two are called. */
  readonly names: readonly [a: string, b: string];
  /** What they are made of. */
  readonly equationsOfState: readonly [a: string, b: string];
  /** Their compositions. */
  readonly compositions: readonly [a: string, b: string];
  /** The axes of the grid. */
  readonly axes: { readonly density: Axis; readonly temperature: Axis };
  /** Numbers of temperatures and of densities; row = i_temperature * densities + i_density. */
  readonly shape: readonly [temperatures: number, densities: number];
  /** Points of the grid. */
  readonly rows: number;
  /** The quantities in the order asked for. */
  readonly quantities: readonly QuantityDifference[];
  /** Constants taken out of the differences. */
  readonly offsets: readonly Offset[];
  /** Who answers where. */
  readonly refusals: Refusals;
  /** Points at nodes of a table, which show nothing of its error: where there are any, choose others. */
  readonly nodes: NodeCounts;
  /** Thermodynamic consistency of each; empty where it was not asked for. */
  readonly consistency: readonly [a: readonly ConsistencyCheck[], b: readonly ConsistencyCheck[]];
  /** Signs of no stable matter. */
  readonly signs: readonly SignCount[];
  /** Discontinuities found, at most one entry per quantity. */
  readonly jumps: readonly Jump[];
  /** Version of this library. */
  readonly libraryVersion: string;
}
