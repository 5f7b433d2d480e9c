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

/** Rows over which members of third order serve: they enter the steps only, so that 10 % in them cost no evaluation. */
const OLDEST = 3;
/** Steps longer than this are no prediction. */
const FARTHEST = 0.5;

/**
 * Moves the start of a search from the neighbour's place, where `f` holds the functions, towards the new targets.
 * `at` [ln rho, ln T of the given variable over the neighbour's]: slot 0 for density, 1 for temperature; third order.
 */
export function predict(question: number, w: Float64Array, f: Float64Array, at: Float64Array): void {
  let du = at[0]!;
  let dv = at[1]!;
  if (question === TEMPERATURE_AT_DENSITY) {
    const rest = w[FIRST_TARGET]! - f[0]! - (f[BY_U]! + 0.5 * f[BY_UU]! * du) * du;
    dv = alone(rest, f[BY_V]! + f[BY_UV]! * du, f[BY_VV]!);
  } else if (question === DENSITY_AT_TEMPERATURE) {
    const rest = w[FIRST_TARGET]! - f[0]! - (f[BY_V]! + 0.5 * f[BY_VV]! * dv) * dv;
    du = alone(rest, f[BY_U]! + f[BY_UV]! * dv, f[BY_UU]!);
  } else {
    const g = FUNCTION_LENGTH;
    let restA = w[FIRST_TARGET]! - f[0]!;
    let restB = w[SECOND_TARGET]! - f[g]!;
    const inverse = 1 / (f[BY_U]! * f[g + BY_V]! - f[BY_V]! * f[g + BY_U]!);
    const linearU = (f[g + BY_V]! * restA - f[BY_V]! * restB) * inverse;
    const linearV = (f[BY_U]! * restB - f[g + BY_U]! * restA) * inverse;
    restA -= 0.5 * ((f[BY_UU]! * linearU + 2 * f[BY_UV]! * linearV) * linearU + f[BY_VV]! * linearV * linearV);
    restB -=
      0.5 * ((f[g + BY_UU]! * linearU + 2 * f[g + BY_UV]! * linearV) * linearU + f[g + BY_VV]! * linearV * linearV);
    du = (f[g + BY_V]! * restA - f[BY_V]! * restB) * inverse;
    dv = (f[BY_U]! * restB - f[g + BY_U]! * restA) * inverse;
  }
  const distance = Math.abs(du) + Math.abs(dv);
  w[AGE]! += 1;
  w[FOLLOWS] = w[AGE]! <= OLDEST && distance < FARTHEST ? 1 : 0;
  if (!(Math.abs(du) < FARTHEST)) du = 0;
  if (!(Math.abs(dv) < FARTHEST)) dv = 0;
  if (question !== TEMPERATURE_AT_DENSITY) w[DENSITY_NOW]! *= Math.exp(du);
  if (question !== DENSITY_AT_TEMPERATURE) w[TEMPERATURE_NOW]! *= Math.exp(dv);
}

/** The step of a power law on a constant (search.ts). */
function alone(rest: number, slope: number, bend: number): number {
  const plain = rest / slope;
  const stretch = (bend * rest) / (slope * slope);
  if (Math.abs(stretch) < 1e-5) return plain * (1 - 0.5 * stretch);
  return stretch > -0.95 ? (Math.log1p(stretch) * slope) / bend : Number.NaN;
}
