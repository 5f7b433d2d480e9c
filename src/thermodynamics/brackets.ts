/**
 * Brackets [a, b] = (da/d ln rho)(db/dT) - (da/dT)(db/d ln rho) of the variables a solver may hold: Jacobian
 * determinants, so that
 *
 *     (dQ/da) at constant b = [Q, b]/[a, b].
 *
 * Written in P/rho, dP/drho, k = c_v, w = (dP/dT)/rho and u = ds/dT, most are one product or a sum of positive terms,
 * where the definition would subtract large numbers: in [P, h] and [s, h], say, the term c_v dP/drho stands beside one
 * that cancels. Bridgman's table (1914, Phys. Rev. 3, 273) in the variables of a free energy. With T s_T = c_v they
 * hold at T = 0, where k = w = 0 and u is the slope of c_v.
 */
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import type { Evaluator } from "./evaluator.js";
import { PRESSURE, PRESSURE_R, PRESSURE_T } from "./free-energy.js";

/** A variable that may be held or varied: two of these fix the state. */
export type StateVariable =
  | "density"
  | "temperature"
  | "pressure"
  | "specificEnergy"
  | "specificEntropy"
  | "specificEnthalpy";

/** The first six of the differentiable quantities, in the order of the tables below. */
export const stateVariables: readonly StateVariable[] = [
  "density",
  "temperature",
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "specificEnthalpy",
];

const COUNT = 6;

/** Length of a table of brackets. */
export const BRACKET_COUNT: number = COUNT * COUNT;

/** Slot of [a, b] in a table, from the positions of a and b in {@link stateVariables}. */
export function bracketSlot(a: number, b: number): number {
  return COUNT * a + b;
}

/**
 * Fills both tables from the records of `at`, after `fillMembers` and `fillThermodynamics`: `out` with the brackets,
 * `sizes` with the sum of the sizes of the terms of each. A bracket far below its size has lost digits: the pair
 * hardly fixes the state.
 */
export function fillBrackets(at: Evaluator, out: Float64Array, sizes: Float64Array): void {
  const { point, members, quantities } = at;
  const density = point[DENSITY]!;
  const temperature = point[TEMPERATURE]!;
  const p = members[PRESSURE]!;
  const r = members[PRESSURE_R]!;
  const t = members[PRESSURE_T]!;
  const w = temperature === 0 ? 0 : t / temperature;
  const k = quantities[5]!;
  const u = quantities[20]!;
  const stiff = r * k + t * w; // c_v (dP/drho)_s

  // Two terms of [a, b] for the time being: the first in the place of [a, b], the second in that of [b, a].
  out.fill(0);
  out[1] = density; // [rho, T]
  out[2] = density * density * w; // [rho, P]
  out[3] = density * k; // [rho, e]
  out[4] = density * u; // [rho, s]
  out[5] = density * k; // [rho, h]
  out[30] = density * w;
  out[8] = -density * r; // [T, P]
  out[9] = -p; // [T, e]
  out[19] = t;
  out[10] = w; // [T, s]
  out[11] = -r; // [T, h]
  out[31] = t;
  out[15] = density * stiff; // [P, e]
  out[20] = -density * w * p;
  out[16] = density * (r * u + w * w); // [P, s]
  out[17] = density * stiff; // [P, h]
  out[22] = p * u; // [e, s]
  out[23] = p * (k + w); // [e, h]
  out[33] = -stiff;
  out[29] = -(r * u + w * w); // [s, h]

  for (let a = 0; a < COUNT; a++) {
    for (let b = a + 1; b < COUNT; b++) {
      const first = out[COUNT * a + b]!;
      const second = out[COUNT * b + a]!;
      const size = Math.abs(first) + Math.abs(second);
      out[COUNT * a + b] = first + second;
      out[COUNT * b + a] = -first - second;
      sizes[COUNT * a + b] = size;
      sizes[COUNT * b + a] = size;
    }
  }
}
