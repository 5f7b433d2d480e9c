/**
 * Axes of a grid: the values that density or temperature takes.
 *
 * Logarithmic: x_i = from (to/from)^(i/(n-1)); linear: x_i = from + (to - from) i/(n-1). The ends are the numbers
 * given; values between are rounded to 15 significant digits, so that decades are exact, columns print short, and
 * engines whose powers differ in the last bit agree. That moves a point by at most 5e-15 of itself, and no result:
 * every quantity is evaluated at the rounded value.
 */
import { FermistateError, requireFinite, requireKnown } from "../errors.js";

/** Values of one axis, strictly increasing; frozen. */
export interface Axis {
  /** How the values lie. */
  readonly spacing: "logarithmic" | "linear" | "listed";
  /** The values, strictly increasing, finite, >= 0. */
  readonly values: readonly number[];
}

/** Ends and density of a {@link logarithmicAxis}: give either `points` or `pointsPerDecade`. */
export interface LogarithmicAxisOptions {
  /** First value, > 0. */
  readonly from: number;
  /** Last value, greater than `from`. */
  readonly to: number;
  /** Number of values, both ends counted: a whole number >= 2. */
  readonly points?: number;
  /** Steps per factor of ten, > 0. Where the range is no whole number of steps, the steps are a little smaller. */
  readonly pointsPerDecade?: number;
}

/** Ends and number of values of a {@link linearAxis}. */
export interface LinearAxisOptions {
  /** First value, >= 0. */
  readonly from: number;
  /** Last value, greater than `from`. */
  readonly to: number;
  /** Number of values, both ends counted: a whole number >= 2. */
  readonly points: number;
}

/** Most values one axis may have. */
export const maximumAxisPoints: number = 1e7;

/**
 * Values at equal ratios.
 *
 * @throws FermistateError `not-a-number`, `out-of-range`, `too-large` (more than 1e7 values), `invalid-option` (both or
 * neither of `points` and `pointsPerDecade`)
 * @example
 * ```ts
 * import { logarithmicAxis } from "fermistate/grids";
 * logarithmicAxis({ from: 1e2, to: 1e10, pointsPerDecade: 10 }).values.length; // => 81
 * logarithmicAxis({ from: 1, to: 100, points: 3 }).values; // => [1, 10, 100]
 * ```
 */
export function logarithmicAxis(options: LogarithmicAxisOptions): Axis {
  requireKnown("options", options, ["from", "to", "points", "pointsPerDecade"]);
  const { from, to, points, pointsPerDecade } = options;
  requireEnds(from, to, "> 0", Number.MIN_VALUE);
  const low = Math.log10(from);
  const high = Math.log10(to);
  const count = points === undefined ? 1 + stepsOf(pointsPerDecade, high - low) : requireCount("points", points);
  if (points !== undefined && pointsPerDecade !== undefined) {
    throw refusal("invalid-option", "pointsPerDecade", pointsPerDecade, "either points or pointsPerDecade, not both");
  }
  const last = count - 1;
  // The weighted sum, and not low + i step: for whole exponents it is exact, so decades are.
  return filled("logarithmic", from, to, count, (i) => 10 ** ((low * (last - i) + high * i) / last));
}

/**
 * Values at equal distances.
 *
 * @throws FermistateError `not-a-number`, `out-of-range`, `too-large` (more than 1e7 values)
 * @example
 * ```ts
 * import { linearAxis } from "fermistate/grids";
 * linearAxis({ from: 0, to: 1, points: 5 }).values; // => [0, 0.25, 0.5, 0.75, 1]
 * ```
 */
export function linearAxis(options: LinearAxisOptions): Axis {
  requireKnown("options", options, ["from", "to", "points"]);
  const { from, to, points } = options;
  requireEnds(from, to, ">= 0", 0);
  const count = requireCount("points", points);
  const last = count - 1;
  return filled("linear", from, to, count, (i) => from * ((last - i) / last) + to * (i / last));
}

/**
 * The values given.
 *
 * @param values - at least one, strictly increasing, finite, >= 0; 0 suits a temperature only
 * @throws FermistateError `not-a-number`, `out-of-range`, `too-large` (more than 1e7 values), `invalid-option` (no list)
 */
export function listedAxis(values: ArrayLike<number>): Axis {
  return named("values", values);
}

/** An axis from whatever `grid` accepts; errors name the axis. */
export function axisOf(argument: string, given: Axis | ArrayLike<number> | number): Axis {
  if (typeof given === "number") return named(argument, [given]);
  if (typeof given === "object" && given !== null && "values" in given && "spacing" in given) {
    return Object.freeze({ ...named(argument, given.values), spacing: given.spacing });
  }
  return named(argument, given as ArrayLike<number>);
}

function named(argument: string, values: ArrayLike<number>): Axis {
  const isList = Array.isArray(values) || (ArrayBuffer.isView(values) && !(values instanceof DataView));
  if (!isList || values.length === 0) {
    throw refusal("invalid-option", argument, values, "a number, a list of at least one number, or an axis");
  }
  if (values.length > maximumAxisPoints) throw tooLarge(argument, values.length);
  const allowed = "finite numbers >= 0, each greater than the one before";
  const copy = Array.from(values);
  for (let i = 0; i < copy.length; i++) {
    const value = requireFinite(argument, copy[i], allowed, i);
    if (value < 0 || (i > 0 && value <= copy[i - 1]!)) throw refusal("out-of-range", argument, value, allowed, i);
  }
  return Object.freeze({ spacing: "listed", values: Object.freeze(copy) });
}

/** Ends as given, between them `value(i)` to 15 digits. */
function filled(spacing: Axis["spacing"], from: number, to: number, count: number, value: (i: number) => number): Axis {
  const values = new Array<number>(count);
  values[0] = from;
  for (let i = 1; i < count - 1; i++) values[i] = Number(value(i).toPrecision(15));
  values[count - 1] = to;
  for (let i = 1; i < count; i++) {
    if (values[i]! > values[i - 1]!) continue;
    throw refusal("out-of-range", "points", count, `so few that neighbours between ${from} and ${to} differ by 1e-14`);
  }
  return Object.freeze({ spacing, values: Object.freeze(values) });
}

function requireEnds(from: unknown, to: unknown, sign: string, lowest: number): void {
  const low = requireFinite("from", from, `a finite number ${sign}`);
  const high = requireFinite("to", to, "a finite number greater than from");
  if (low < lowest) throw refusal("out-of-range", "from", low, sign);
  if (high <= low) throw refusal("out-of-range", "to", high, `greater than from, which is ${low}`);
}

function requireCount(argument: string, value: unknown): number {
  const allowed = `a whole number from 2 to ${maximumAxisPoints}`;
  const count = requireFinite(argument, value, allowed);
  if (!Number.isInteger(count) || count < 2) throw refusal("out-of-range", argument, count, allowed);
  if (count > maximumAxisPoints) throw tooLarge(argument, count);
  return count;
}

/** Steps of at most 1/pointsPerDecade; a rounding error beyond a whole number of them does not add one. */
function stepsOf(pointsPerDecade: unknown, decades: number): number {
  if (pointsPerDecade === undefined) {
    throw refusal("invalid-option", "points", undefined, "points or pointsPerDecade");
  }
  const allowed = "a finite number > 0";
  const given = requireFinite("pointsPerDecade", pointsPerDecade, allowed);
  if (given <= 0) throw refusal("out-of-range", "pointsPerDecade", given, allowed);
  const steps = Math.max(1, Math.ceil(given * decades - 1e-9));
  if (steps + 1 > maximumAxisPoints) throw tooLarge("pointsPerDecade", given);
  return steps;
}

function tooLarge(argument: string, given: number): FermistateError {
  return refusal("too-large", argument, given, `at most ${maximumAxisPoints} values on one axis`);
}

function refusal(
  code: "out-of-range" | "invalid-option" | "too-large",
  argument: string,
  given: unknown,
  allowed: string,
  index?: number,
): FermistateError {
  return new FermistateError(
    code,
    index === undefined ? { argument, given, allowed } : { argument, given, allowed, index },
  );
}
