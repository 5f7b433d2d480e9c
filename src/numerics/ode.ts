/**
 * Ordinary differential equations dy/dx = f(x, y): explicit Runge-Kutta of order 8 with error control (orders 5 and 3),
 * dense output of order 7 and events, by Dormand & Prince (Hairer, Norsett & Wanner 1993, Solving Ordinary Differential
 * Equations I, 2nd ed., II.4 step control, II.5 the pair, II.6 dense output, compensated sums as in II.10 remark).
 *
 * For smooth, non-stiff equations and tight tolerances. A step is accepted when its estimated error is below
 * absoluteTolerance + relativeTolerance |y| in the mean square over the unknowns; the true error is then about as large
 * (error per step, order 7 to 8 in the step). Put discontinuities of f at the ends of integrations. The loop
 * allocates nothing: points and slopes are records.
 */
import { FermistateError } from "../errors.js";
import { denseRows, errorOfOrder5, nodes, stages, weightsOfOrder3 } from "./dormand-prince.js";
import { findRoot } from "./roots.js";

/** The equations. Slot 0 of a point is x, the unknowns follow; so do their slopes in a slope (slot 0 is not read). */
export interface OdeSystem {
  /** Number of unknowns. */
  readonly size: number;
  /** Fills slope[1 ... size] at a point. */
  fillSlope(point: Float64Array, slope: Float64Array): void;
}

/** How accurately, and when to give up. */
export interface OdeOptions {
  /** Error per step relative to each unknown; not below 1e-15. Default 1e-10. */
  readonly relativeTolerance?: number;
  /** Error per step allowed in each unknown whatever its size; default 0. */
  readonly absoluteTolerance?: number | Float64Array;
  /** Steps, refused ones included, after which the integration fails; default 10 000. */
  readonly maximumSteps?: number;
}

/** A step just made. Its arrays are overwritten by the next one. */
export interface OdeStep {
  /** x where it began. */
  readonly start: number;
  /** x where it ends. */
  readonly end: number;
  /** Fills point[1 ... size] from the dense output at point[0], which lies within the step. */
  interpolate(point: Float64Array): void;
  /** Coefficients of the dense output, eight per unknown; see {@link fillDense}. */
  readonly coefficients: Float64Array;
}

/** What an integration is asked beside its end. */
export interface Watch {
  /** Called after each step. Asking for it costs three more evaluations per step. */
  readonly onStep?: (step: OdeStep) => void;
  /**
   * A function of the point whose change of sign within a step ends the integration there. Two changes in one step go
   * unseen.
   */
  readonly event?: (point: Float64Array) => number;
}

/** An integrator with its working space; one integration at a time. */
export interface Integrator {
  /** Where it stands: x and the unknowns. Written by the caller before an integration. */
  readonly point: Float64Array;
  /** Evaluations of the slope, steps made and steps refused since the integrator was made. */
  readonly count: { evaluations: number; steps: number; refused: number };
  /** Step that the next integration begins with; 0 (and at first) asks for an automatic one. */
  firstStep: number;
  /**
   * Moves the point to x = end, or to the event; returns whether an event ended it.
   * @throws `integration-failed` (step too small, too many steps, slope not finite)
   */
  integrate(end: number, watch?: Watch): boolean;
}

const STAGES = 12;
const ROWS = 16;
const DENSE = 8;
/** Stage coefficients without their zeros: for row i the entries first[i] ... first[i + 1]. */
const { first, columns, values } = /* @__PURE__ */ packed(stages);
const dense = /* @__PURE__ */ packed(denseRows);

function packed(rows: readonly (readonly number[])[]): {
  first: Int32Array;
  columns: Int32Array;
  values: Float64Array;
} {
  const first = [0];
  const columns: number[] = [];
  const values: number[] = [];
  for (const row of rows) {
    for (const [j, value] of row.entries()) {
      if (value === 0) continue;
      columns.push(j);
      values.push(value);
    }
    first.push(values.length);
  }
  return { first: Int32Array.from(first), columns: Int32Array.from(columns), values: Float64Array.from(values) };
}

/**
 * point[1 ... size] of the dense output at point[0]: coefficients as {@link OdeStep}, `from` the first of them, for a
 * step from `start` to `end`.
 */
export function fillDense(
  coefficients: Float64Array,
  from: number,
  start: number,
  end: number,
  point: Float64Array,
): void {
  const t = (point[0]! - start) / (end - start);
  const s = 1 - t;
  for (let i = 1, at = from; i < point.length; i++, at += DENSE) {
    let sum = coefficients[at + 7]!;
    sum = coefficients[at + 6]! + t * sum;
    sum = coefficients[at + 5]! + s * sum;
    sum = coefficients[at + 4]! + t * sum;
    sum = coefficients[at + 3]! + s * sum;
    sum = coefficients[at + 2]! + t * sum;
    sum = coefficients[at + 1]! + s * sum;
    point[i] = coefficients[at]! + t * sum;
  }
}

/** An integrator for a system. */
export function integrator(system: OdeSystem, options: OdeOptions = {}): Integrator {
  const { size } = system;
  const { relativeTolerance = 1e-10, absoluteTolerance = 0, maximumSteps = 10_000 } = options;
  const width = size + 1;
  const tolerances =
    typeof absoluteTolerance === "number" ? new Float64Array(size).fill(absoluteTolerance) : absoluteTolerance;
  const point = new Float64Array(width);
  const from = new Float64Array(width);
  const trial = new Float64Array(width);
  const rest = new Float64Array(width); // what rounding cut from the unknowns so far
  const nextRest = new Float64Array(width);
  const slopes = Array.from({ length: ROWS }, () => new Float64Array(width));
  const coefficients = new Float64Array(DENSE * size);
  const count = { evaluations: 0, steps: 0, refused: 0 };
  const error = new Float64Array(1);
  /** Length (signed) and end of the step tried, length of the next: numbers that cross a call or a loop may be boxed. */
  const span = new Float64Array(3);

  const step = {
    start: 0,
    end: 0,
    coefficients,
    interpolate: (target: Float64Array): void => fillDense(coefficients, 0, step.start, step.end, target),
  };
  const instance: Integrator = { point, count, firstStep: 0, integrate };
  return instance;

  function evaluate(at: Float64Array, row: number): void {
    system.fillSlope(at, slopes[row]!);
    count.evaluations += 1;
  }

  /** trial = from + h sum a_ij k_j, with its slope. */
  function evaluateStage(row: number): void {
    const h = span[0]!;
    const begin = first[row]!;
    const end = first[row + 1]!;
    for (let i = 1; i < width; i++) {
      let sum = 0;
      for (let k = begin; k < end; k++) sum += values[k]! * slopes[columns[k]!]![i]!;
      trial[i] = from[i]! + h * sum;
    }
    trial[0] = from[0]! + nodes[row]! * h;
    evaluate(trial, row);
  }

  /** Sets `error` to the estimated error over the tolerated one of the step from -> trial. */
  function estimate(): void {
    let fifth = 0;
    let third = 0;
    const end = slopes[STAGES]!; // slope sum_i b_i k_i, kept there until the end is evaluated
    for (let i = 1; i < width; i++) {
      const scale = tolerances[i - 1]! + relativeTolerance * Math.max(Math.abs(from[i]!), Math.abs(trial[i]!));
      let five = 0;
      let three = end[i]!;
      for (let j = 0; j < STAGES; j++) {
        const slope = slopes[j]![i]!;
        five += errorOfOrder5[j]! * slope;
        three -= weightsOfOrder3[j]! * slope;
      }
      if (five === 0 && three === 0) continue; // also where the scale is zero
      fifth += (five / scale) ** 2;
      third += (three / scale) ** 2;
    }
    const both = fifth + 0.01 * third;
    error[0] = both === 0 ? 0 : (Math.abs(span[0]!) * fifth) / Math.sqrt(both * size);
  }

  /** Tries the step of `span`: trial, its error, nextRest. Slopes[0] is that of `from`. */
  function attempt(): void {
    const h = span[0]!;
    for (let row = 1; row < STAGES; row++) evaluateStage(row);
    const begin = first[STAGES]!;
    const stop = first[STAGES + 1]!;
    const mean = slopes[STAGES]!;
    for (let i = 1; i < width; i++) {
      let sum = 0;
      for (let k = begin; k < stop; k++) sum += values[k]! * slopes[columns[k]!]![i]!;
      mean[i] = sum;
      const change = h * sum + rest[i]!;
      trial[i] = from[i]! + change;
      nextRest[i] = change - (trial[i]! - from[i]!);
    }
    trial[0] = span[1]!;
    estimate();
  }

  /** Coefficients of the dense output of the accepted step from -> point; the slope of its end is in row 12. */
  function fillCoefficients(): void {
    const h = span[0]!;
    for (let row = STAGES + 1; row < ROWS; row++) evaluateStage(row);
    for (let i = 1; i < width; i++) {
      const at = DENSE * (i - 1);
      const change = point[i]! - from[i]!;
      const initial = h * slopes[0]![i]! - change;
      coefficients[at] = from[i]!;
      coefficients[at + 1] = change;
      coefficients[at + 2] = initial;
      coefficients[at + 3] = change - h * slopes[STAGES]![i]! - initial;
      for (let row = 0; row < denseRows.length; row++) {
        let sum = 0;
        for (let k = dense.first[row]!; k < dense.first[row + 1]!; k++)
          sum += dense.values[k]! * slopes[dense.columns[k]!]![i]!;
        coefficients[at + 4 + row] = h * sum;
      }
    }
    step.start = from[0]!;
    step.end = point[0]!;
  }

  /** Length to begin with: the error of an Euler step and its change of slope (Hairer et al., II.4). */
  function automaticStep(end: number): number {
    let value = 0;
    let slope = 0;
    for (let i = 1; i < width; i++) {
      const scale = tolerances[i - 1]! + relativeTolerance * Math.abs(point[i]!);
      if (scale === 0) continue;
      value += (point[i]! / scale) ** 2;
      slope += (slopes[0]![i]! / scale) ** 2;
    }
    const length = Math.abs(end - point[0]!);
    const h = Math.min(length, slope > 0 && value > 0 ? 0.01 * Math.sqrt(value / slope) : 1e-6 * length);
    const sign = Math.sign(end - point[0]!);
    from.set(point);
    for (let i = 1; i < width; i++) trial[i] = point[i]! + sign * h * slopes[0]![i]!;
    trial[0] = point[0]! + sign * h;
    evaluate(trial, 1);
    let change = 0;
    for (let i = 1; i < width; i++) {
      const scale = tolerances[i - 1]! + relativeTolerance * Math.abs(point[i]!);
      if (scale !== 0) change += ((slopes[1]![i]! - slopes[0]![i]!) / scale / h) ** 2;
    }
    const largest = Math.sqrt(Math.max(slope, change) / size);
    const wished = largest > 1e-15 ? (0.01 / largest) ** (1 / 8) : 1e3 * h;
    return Math.min(100 * h, wished, length);
  }

  function fail(argument: string, given: unknown, allowed: string): never {
    throw new FermistateError("integration-failed", { argument, given, allowed: `${allowed}, at x = ${point[0]}` });
  }

  /** x of the change of sign of `event` within the step just made, by its dense output. */
  function locate(event: (at: Float64Array) => number, atStart: number, atEnd: number): number {
    const at = new Float64Array(width);
    const value = (x: number): number => {
      at[0] = x;
      step.interpolate(at);
      return event(at);
    };
    return findRoot(value, step.start, step.end, { values: [atStart, atEnd] }).x;
  }

  function accept(): void {
    point.set(trial);
    rest.set(nextRest);
    evaluate(point, STAGES);
  }

  function integrate(end: number, watch: Watch = {}): boolean {
    const { onStep, event } = watch;
    if (end === point[0]) return false;
    rest.fill(0);
    evaluate(point, 0);
    const sign = Math.sign(end - point[0]!);
    span[2] = instance.firstStep > 0 ? instance.firstStep : automaticStep(end);
    if (!(span[2] > 0)) fail("slope", span[2], "finite numbers");
    let value = event === undefined ? 0 : event(point);
    let growth = 6;
    for (let tried = 0; tried < maximumSteps; tried++) {
      const x = point[0]!;
      const length: number = span[2]!;
      // A last step is stretched or cut rather than left as a crumb.
      const isLast = Math.abs(end - x) <= 1.01 * length;
      const h = isLast ? end - x : sign * length;
      if (x + h === x) fail("step", h, "steps that change x: the slope is singular or not smooth");
      from.set(point);
      span[0] = h;
      span[1] = isLast ? end : x + h;
      attempt();
      const size = error[0]!;
      if (!(size <= 1)) {
        count.refused += 1;
        if (Number.isNaN(size) && Math.abs(h) < 1e-12 * Math.abs(end - x)) fail("slope", Number.NaN, "finite numbers");
        span[2] = Math.abs(h) * (Number.isFinite(size) ? Math.max(0.9 * size ** (-1 / 8), 1 / 3) : 0.1);
        growth = 1;
        continue;
      }
      accept();
      count.steps += 1;
      span[2] = Math.abs(h) * Math.min(size === 0 ? growth : Math.max(0.9 * size ** (-1 / 8), 1 / 3), growth);
      growth = 6;
      const next = event === undefined ? 0 : event(point);
      const isCrossed = value * next < 0 || (next === 0 && value !== 0);
      if (onStep !== undefined || isCrossed) fillCoefficients();
      if (isCrossed) {
        // The step once more, now to the event: the point has the order of the method, not of the dense output.
        const target = locate(event!, value, next);
        span[0] = target - x;
        span[1] = target;
        attempt();
        accept();
        if (onStep !== undefined) fillCoefficients();
        onStep?.(step);
        instance.firstStep = span[2]!;
        return true;
      }
      onStep?.(step);
      value = next;
      if (isLast) {
        instance.firstStep = span[2]!;
        return false;
      }
      slopes[0]!.set(slopes[STAGES]!);
    }
    return fail("steps", maximumSteps, `an integration within ${maximumSteps} steps`);
  }
}
