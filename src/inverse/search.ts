/**
 * Roots of one quantity in one variable, and of two in two, on one smooth side of an equation of state.
 *
 * Steps are of third order: along a step the quantity is taken as an offset plus a power law with the value, slope and
 * curvature that the third-order members give,
 *
 *     f(u) = f_0 + (f_1/k)(e^(k (u - u_0)) - 1),   k = f_2/f_1   =>   u - u_0 = ln(1 + k (f* - f_0)/f_1)/k,
 *
 * with u = ln rho or ln T. That is exact for a power law on top of anything constant (the thermal energy of degenerate
 * matter, T^2 on top of the cold energy; a gas on top of photons) and for a logarithm (k = 0), and it sees from one
 * evaluation where the constant lies. In two variables each target is replaced by the one whose linear solution steps as
 * far as the power law along Newton's direction. To second order these are the methods of Halley and Chebyshev (Traub
 * 1964, Iterative Methods for the Solution of Equations, section 5.2). Brackets and halved steps keep them safe.
 */
import type { Composition } from "../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import type { Evaluator } from "../thermodynamics/evaluator.js";
import { fillFunction } from "./functions.js";
import {
  AGE,
  BEYOND_LOWER,
  BEYOND_UPPER,
  BY_U,
  BY_UU,
  BY_UV,
  BY_V,
  BY_VV,
  DENSITY_NOW,
  ENTROPY_KIND,
  EVALUATIONS,
  FIRST_TARGET,
  FOLLOWS,
  FOUND,
  FUNCTION_LENGTH,
  HIGHEST_DENSITY,
  HIGHEST_TEMPERATURE,
  LOST,
  LOWEST_DENSITY,
  LOWEST_TEMPERATURE,
  SECOND_TARGET,
  SIZE,
  STEP_U,
  STEP_V,
  TEMPERATURE_NOW,
} from "./slots.js";

/** A residual of this many units of the terms' size is rounding. */
export const ROUNDING: number = 3 * 2 ** -52;
/** A step whose square is below rounding: the members' own derivatives make it (free-energy.ts). */
const LAST_STEP = 6e-9;
/** The same where the residual is rounding: such a step is as uncertain as it is long. */
const LAST_NOISE = 2e-8;
/**
 * The same two after an evaluation of second order, with members of third order from the place before, 4e-6 away at most, and with
 * those of a neighbour, good to 10 %: what they make wrong stays near 1e-14 of the second-order members.
 */
const LAST_FRESH = 1e-10;
const FRESH_NOISE = 2e-9;
const LAST_STALE = 5e-14;
/**
 * An evaluation of second order does after a step shorter than this: with the members of third order of the place before, and with
 * those of a neighbour, the next residual is rounding.
 */
const SURE_FRESH = 4e-6;
const SURE_STEP = 5e-7;
/** Steps of one search before it gives up. */
const STEPS_IN_ONE = 80;
const STEPS_IN_TWO = 30;
/** Longest step in a logarithm. */
const LONGEST = 8;

/** The step in hand: a variable that several branches set is boxed. */
const stride = new Float64Array(1);

/** Function records of the quantities of a search. */
export const functionsOf = (): Float64Array => new Float64Array(2 * FUNCTION_LENGTH);

/**
 * Finds density (`inDensity`) or temperature at which the quantity of `kind` has its first target; the other variable
 * stays as it is in the record. Start and result are in the record `w`.
 */
export function searchOne(
  ev: Evaluator,
  composition: Composition,
  inDensity: boolean,
  kind: number,
  w: Float64Array,
  f: Float64Array,
): number {
  const { point, members } = ev;
  const slot = inDensity ? DENSITY_NOW : TEMPERATURE_NOW;
  const by = inDensity ? BY_U : BY_V;
  const twice = inDensity ? BY_UU : BY_VV;
  const bottom = w[inDensity ? LOWEST_DENSITY : LOWEST_TEMPERATURE]!;
  const top = w[inDensity ? HIGHEST_DENSITY : HIGHEST_TEMPERATURE]!;
  const target = w[FIRST_TARGET]!;
  const sign = inDensity && kind === ENTROPY_KIND ? -1 : 1;
  let low = bottom;
  let high = top;
  let lowSeen = false;
  let highSeen = false;
  let suspicions = 0;
  let doubtful = false;
  let limit = ROUNDING; // not 1 times it: a variable that starts as an integer is boxed later
  w[slot] = Math.min(Math.max(w[slot]!, bottom), top);
  w[STEP_U] = 0;
  w[STEP_V] = 0;
  for (let i = 0; i < STEPS_IN_ONE; i++) {
    const now: number = w[slot]!;
    point[DENSITY] = w[DENSITY_NOW]!;
    point[TEMPERATURE] = w[TEMPERATURE_NOW]!;
    const sure = w[AGE] === 0 ? SURE_FRESH : SURE_STEP;
    const brief: boolean = i === 0 ? w[FOLLOWS] === 1 : !doubtful && Math.abs(stride[0]!) < sure;
    doubtful = brief && i > 0;
    ev.fillMembers(composition, brief ? 2 : 3);
    if (!brief) w[AGE] = 0;
    w[EVALUATIONS]! += 1;
    fillFunction(f, 0, kind, point, members);
    const rest = (target - f[0]!) * sign;
    const slope = f[by]! * sign;
    if (!Number.isFinite(rest)) return LOST;
    if (Math.abs(rest) <= limit * f[SIZE]!) return FOUND;
    const scatter = Math.abs(rest) <= 8 * ROUNDING * f[SIZE]!; // the values themselves are no smoother
    if (scatter) limit *= 2;
    if (rest > 0) {
      low = now;
      lowSeen = true;
      if (now >= top) return BEYOND_UPPER;
    } else {
      high = now;
      highSeen = true;
      if (now <= bottom) return BEYOND_LOWER;
    }
    let floor = false;
    if (slope > 0) {
      const power = (f[twice]! * sign) / slope;
      const plain = rest / slope;
      const stretch = power * plain;
      if (Math.abs(stretch) < 1e-5) stride[0] = plain * (1 - 0.5 * stretch);
      else if (stretch > -0.95) stride[0] = Math.log1p(stretch) / power;
      else {
        stride[0] = -3 / power;
        floor = true;
      }
      const goal = now + now * stride[0]!;
      const last = brief
        ? w[AGE]! > 0
          ? LAST_STALE
          : scatter
            ? FRESH_NOISE
            : LAST_FRESH
        : scatter
          ? LAST_NOISE
          : LAST_STEP;
      if (Math.abs(stride[0]!) <= last && goal >= low && goal <= high) {
        w[inDensity ? STEP_U : STEP_V] = stride[0]!;
        return FOUND;
      }
    } else stride[0] = rest > 0 ? LONGEST : -LONGEST;
    suspicions = floor ? suspicions + 1 : 0;
    if (stride[0]! > LONGEST && !highSeen) stride[0] = LONGEST;
    else if (stride[0]! < -LONGEST && !lowSeen) stride[0] = -LONGEST;
    let next: number = now * Math.exp(stride[0]!);
    if (suspicions >= 3 && rest < 0 && !lowSeen) next = bottom;
    if (suspicions >= 3 && rest > 0 && !highSeen) next = top;
    if (next <= low) next = lowSeen ? Math.sqrt(low * now) : bottom;
    else if (next >= high) next = highSeen ? Math.sqrt(high * now) : top;
    if (lowSeen && highSeen && (high - low <= 4e-16 * high || next === now)) {
      // Neighbouring numbers on both sides: as near as the values' scatter, or a jump, allows.
      return Math.abs(rest) <= 1e-12 * f[SIZE]! ? FOUND : LOST;
    }
    if (i > 20 && lowSeen && highSeen && i % 2 === 0) next = Math.sqrt(low * high);
    w[slot] = next;
  }
  return LOST;
}

/**
 * Finds density and temperature at which the quantities of two kinds have their targets: Newton's direction with
 * stretched targets. Returns LOST where it does not converge; the caller then nests {@link searchOne}.
 */
export function searchTwo(
  ev: Evaluator,
  composition: Composition,
  first: number,
  second: number,
  w: Float64Array,
  f: Float64Array,
): number {
  const { point, members } = ev;
  let limit = ROUNDING;
  let before = Number.POSITIVE_INFINITY;
  let halvings = 0;
  let doubtful = false;
  w[STEP_U] = 0;
  w[STEP_V] = 0;
  for (let i = 0; i < STEPS_IN_TWO; i++) {
    point[DENSITY] = w[DENSITY_NOW]!;
    point[TEMPERATURE] = w[TEMPERATURE_NOW]!;
    const sure = w[AGE] === 0 ? SURE_FRESH : SURE_STEP;
    const brief: boolean = i === 0 ? w[FOLLOWS] === 1 : !doubtful && Math.abs(w[STEP_U]!) + Math.abs(w[STEP_V]!) < sure;
    doubtful = brief && i > 0;
    ev.fillMembers(composition, brief ? 2 : 3);
    if (!brief) w[AGE] = 0;
    w[EVALUATIONS]! += 1;
    fillFunction(f, 0, first, point, members);
    fillFunction(f, FUNCTION_LENGTH, second, point, members);
    const restA = w[FIRST_TARGET]! - f[0]!;
    const restB = w[SECOND_TARGET]! - f[FUNCTION_LENGTH]!;
    const shareA = Math.abs(restA) / f[SIZE]!;
    const shareB = Math.abs(restB) / f[FUNCTION_LENGTH + SIZE]!;
    const merit = shareA + shareB;
    if (shareA <= limit && shareB <= limit) {
      w[STEP_U] = 0;
      w[STEP_V] = 0;
      return FOUND;
    }
    const scatter = merit <= 8 * ROUNDING;
    if (scatter) limit *= 2;
    const aU = f[BY_U]!;
    const aV = f[BY_V]!;
    const bU = f[FUNCTION_LENGTH + BY_U]!;
    const bV = f[FUNCTION_LENGTH + BY_V]!;
    const determinant = aU * bV - aV * bU;
    const sound = Number.isFinite(merit) && f[SIZE]! > 0 && aU * aU + bV * bV > 0 && determinant !== 0;
    if (!sound || (merit > 3 * before && halvings < 6)) {
      // Back half way to where it was better.
      if (before === Number.POSITIVE_INFINITY || halvings >= 6) return LOST;
      halvings += 1;
      const half = -(0.5 ** halvings);
      w[DENSITY_NOW]! *= Math.exp(half * w[STEP_U]!);
      w[TEMPERATURE_NOW]! *= Math.exp(half * w[STEP_V]!);
      continue;
    }
    halvings = 0;
    before = merit;
    const inverse = 1 / determinant;
    let du = (bV * restA - aV * restB) * inverse;
    let dv = (aU * restB - bU * restA) * inverse;
    const bendA = (f[BY_UU]! * du + 2 * f[BY_UV]! * dv) * du + f[BY_VV]! * dv * dv;
    const bendB =
      (f[FUNCTION_LENGTH + BY_UU]! * du + 2 * f[FUNCTION_LENGTH + BY_UV]! * dv) * du +
      f[FUNCTION_LENGTH + BY_VV]! * dv * dv;
    const short = Math.abs(du) + Math.abs(dv) < 0.5;
    const alone = Math.abs(du) < 1e-3 * Math.abs(dv); // one variable steps: as in searchOne
    const wayA = stretched(restA, bendA, short, alone);
    const wayB = stretched(restB, bendB, short, alone);
    du = (bV * wayA - aV * wayB) * inverse;
    dv = (aU * wayB - bU * wayA) * inverse;
    const length = Math.max(Math.abs(du), Math.abs(dv));
    const last = brief
      ? w[AGE]! > 0
        ? LAST_STALE
        : scatter
          ? FRESH_NOISE
          : LAST_FRESH
      : scatter
        ? LAST_NOISE
        : LAST_STEP;
    if (length <= last) {
      w[STEP_U] = du;
      w[STEP_V] = dv;
      return FOUND;
    }
    if (!(length < 1e300)) return LOST;
    if (Math.abs(dv) > 1 && Math.abs(dv) > 20 * Math.abs(du)) {
      // Degenerate matter: the temperature is a small remainder of both quantities, noise until the density is found.
      const plain = restA / aU;
      const power = f[BY_UU]! / aU;
      const stretch = power * plain;
      const toFirst = Math.abs(stretch) < 1e-5 || stretch < -0.9 ? plain : Math.log1p(stretch) / power;
      if (Math.abs(toFirst) > 1e-6) {
        du = toFirst;
        dv = 0;
      }
    }
    du = Math.min(Math.max(du, -3), 3);
    dv = Math.min(Math.max(dv, -3), 3);
    const density = w[DENSITY_NOW]!;
    const temperature = w[TEMPERATURE_NOW]!;
    w[DENSITY_NOW] = Math.min(Math.max(density * Math.exp(du), w[LOWEST_DENSITY]!), w[HIGHEST_DENSITY]!);
    w[TEMPERATURE_NOW] = Math.min(
      Math.max(temperature * Math.exp(dv), w[LOWEST_TEMPERATURE]!),
      w[HIGHEST_TEMPERATURE]!,
    );
    if (w[DENSITY_NOW] === density && w[TEMPERATURE_NOW] === temperature) return LOST;
    w[STEP_U] = du;
    w[STEP_V] = dv;
  }
  return LOST;
}

/**
 * The distance to go on a straight line that goes as far as the power law with this bend; where the bend is that of the
 * other variable's step, half of it is taken off, on short steps only.
 */
function stretched(rest: number, bend: number, short: boolean, alone: boolean): number {
  if (rest === 0) return short ? -0.5 * bend : 0;
  const ratio = bend / rest;
  if (Math.abs(ratio) < 1e-5) return rest * (1 - 0.5 * ratio);
  if (alone && ratio <= -0.95) return 3.15 * rest;
  if (alone || (ratio > -0.8 && ratio < 4)) return (rest * Math.log1p(ratio)) / ratio;
  return short ? rest - 0.5 * bend : rest;
}
