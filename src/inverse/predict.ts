/** Where the answer lies, seen from a neighbour's answer: the step of a search without an evaluation. */
import {
  AGE,
  BY_U,
  BY_UU,
  BY_UV,
  BY_V,
  BY_VV,
  DENSITY_AT_TEMPERATURE,
  DENSITY_NOW,
  FIRST_TARGET,
  FOLLOWS,
  FUNCTION_LENGTH,
  SECOND_TARGET,
  TEMPERATURE_AT_DENSITY,
  TEMPERATURE_NOW,
} from "./slots.js";

/** Rows over which members of third order serve: they enter steps only (last ones of 5e-14), so that 10 % in them cost nothing. */
const OLDEST = 5;
/** Distance in ln rho and ln T up to which they do. */
const NEAR = 0.05;
/** Steps longer than this are no prediction. */
const FARTHEST = 0.5;

/** The step in ln rho and ln T, and a change along it: longer than needed, so that V8 knows where it stands. */
const move = new Float64Array(16);
const U = 0;
const V = 1;
const BEND = 2;

/**
 * Moves the start of a search from the neighbour's place, where `f` holds the functions, towards the new targets.
 * `at` [ln rho, ln T of the given variable over the neighbour's]: slot 0 for density, 1 for temperature; third order.
 */
export function predict(question: number, w: Float64Array, f: Float64Array, at: Float64Array): void {
  move[U] = at[0]!;
  move[V] = at[1]!;
  if (question === TEMPERATURE_AT_DENSITY) {
    const u = move[U]!;
    // The thermal part and its derivatives are taken as one power of density.
    const rise = (f[BY_UV]! * u) / f[BY_V]!;
    const growth = 1 + rise * (1 + 0.5 * rise);
    move[V] = 0;
    fillBends(f, 0);
    const rest = w[FIRST_TARGET]! - f[0]! - f[BY_U]! * u - move[BEND]!;
    move[V] = alone(rest, f[BY_V]! * growth, f[BY_VV]! * growth);
  } else if (question === DENSITY_AT_TEMPERATURE) {
    const v = move[V]!;
    move[U] = 0;
    fillBends(f, 0);
    const rest = w[FIRST_TARGET]! - f[0]! - f[BY_V]! * v - move[BEND]!;
    move[U] = alone(rest, f[BY_U]! + f[BY_UV]! * v, f[BY_UU]!);
  } else {
    const g = FUNCTION_LENGTH;
    const inverse = 1 / (f[BY_U]! * f[g + BY_V]! - f[BY_V]! * f[g + BY_U]!);
    // Newton's direction, then twice with what the bends take off: each time one order more.
    for (let i = 0; i < 3; i++) {
      fillBends(f, 0);
      const restA = w[FIRST_TARGET]! - f[0]! - move[BEND]!;
      fillBends(f, g);
      const restB = w[SECOND_TARGET]! - f[g]! - move[BEND]!;
      move[U] = (f[g + BY_V]! * restA - f[BY_V]! * restB) * inverse;
      move[V] = (f[BY_U]! * restB - f[g + BY_U]! * restA) * inverse;
    }
    // Temperature as the noise of two quantities of cold matter: density by the first of them alone.
    if (!(Math.abs(move[V]!) < FARTHEST)) move[U] = alone(w[FIRST_TARGET]! - f[0]!, f[BY_U]!, f[BY_UU]!);
  }
  let du = move[U]!;
  let dv = move[V]!;
  const distance = Math.abs(du) + Math.abs(dv);
  w[AGE]! += 1;
  w[FOLLOWS] = w[AGE]! <= OLDEST && distance < NEAR ? 1 : 0;
  if (!(Math.abs(du) < FARTHEST)) du = 0;
  if (!(Math.abs(dv) < FARTHEST)) dv = 0;
  if (question !== TEMPERATURE_AT_DENSITY) w[DENSITY_NOW]! *= Math.exp(du);
  if (question !== DENSITY_AT_TEMPERATURE) w[TEMPERATURE_NOW]! *= Math.exp(dv);
}

/**
 * What a function changes along the step `move` beyond its slopes: second order, and of third order that of powers of density
 * and of temperature on a constant. It counts where the answer hangs on a remainder: temperature in cold matter, density among pairs.
 */
function fillBends(f: Float64Array, at: number): void {
  const u = move[U]!;
  const v = move[V]!;
  const slopeU = f[at + BY_U]!;
  const slopeV = f[at + BY_V]!;
  const bendU = f[at + BY_UU]!;
  const bendV = f[at + BY_VV]!;
  const thirdU = Math.abs(bendU) < 10 * Math.abs(slopeU) ? (bendU * bendU * u) / (6 * slopeU) : 0;
  const thirdV = Math.abs(v) < 0.03 && Math.abs(bendV) < 10 * Math.abs(slopeV) ? (bendV * bendV * v) / (6 * slopeV) : 0;
  move[BEND] = ((0.5 * bendU + thirdU) * u + f[at + BY_UV]! * v) * u + (0.5 * bendV + thirdV) * v * v;
}

/** The step of a power law on a constant (search.ts). */
function alone(rest: number, slope: number, bend: number): number {
  const plain = rest / slope;
  const stretch = (bend * rest) / (slope * slope);
  if (Math.abs(stretch) < 1e-5) return plain * (1 - 0.5 * stretch);
  return stretch > -0.95 ? (Math.log1p(stretch) * slope) / bend : Number.NaN;
}
