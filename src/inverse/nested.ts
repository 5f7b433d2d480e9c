/**
 * Density and temperature from two quantities by nesting: for each density the temperature that gives the second one,
 * bracketed in density for the first. Slow and safe; asked only where the search in both at once is lost.
 *
 * Along constant entropy pressure, energy and enthalpy rise with density (P, P/rho^2 and gamma_1 P/rho are positive);
 * along constant energy or enthalpy the pressure does.
 */
import type { Composition } from "../matter/composition.js";
import type { Evaluator } from "../thermodynamics/evaluator.js";
import { fillFunction } from "./functions.js";
import { searchOne } from "./search.js";
import {
  BEYOND_UPPER,
  BY_U,
  BY_V,
  DENSITY_NOW,
  FIRST_TARGET,
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

const OUTER_STEPS = 100;

/** As `searchTwo`, of the same record; FOUND, or LOST with the start untouched. */
export function nestedSearch(
  ev: Evaluator,
  composition: Composition,
  first: number,
  second: number,
  w: Float64Array,
  f: Float64Array,
): number {
  const target = w[FIRST_TARGET]!;
  const other = w[SECOND_TARGET]!;
  let low = w[LOWEST_DENSITY]!;
  let high = w[HIGHEST_DENSITY]!;
  let density = w[DENSITY_NOW]!;
  let seen = 0;
  let end = LOST;
  for (let i = 0; i < OUTER_STEPS; i++) {
    w[FIRST_TARGET] = other;
    w[DENSITY_NOW] = density;
    const inner = searchOne(ev, composition, false, second, w, f);
    w[FIRST_TARGET] = target;
    let step = density;
    let heavier = false; // whether the answer lies at higher density
    if (inner === FOUND) {
      fillFunction(f, FUNCTION_LENGTH, second, ev.point, ev.members);
      fillFunction(f, 0, first, ev.point, ev.members);
      const along = f[BY_U]! - (f[BY_V]! * f[FUNCTION_LENGTH + BY_U]!) / f[FUNCTION_LENGTH + BY_V]!;
      const rest = target - f[0]! - f[BY_V]! * w[STEP_V]!;
      heavier = rest > 0;
      step = along > 0 ? rest / along : heavier ? 1 : -1;
      // The temperature moves along with the density.
      const turn = (step * f[FUNCTION_LENGTH + BY_U]!) / f[FUNCTION_LENGTH + BY_V]!;
      const small = along > 0 && Math.abs(step) <= 6e-9 && Math.abs(turn) <= 6e-9;
      if (Math.abs(rest) <= 4e-16 * f[SIZE]! || small) {
        w[STEP_U] = small ? step : 0;
        if (small) w[STEP_V]! -= turn;
        end = FOUND;
        break;
      }
    } else if (inner === LOST) break;
    else {
      // No temperature of the domain gives the target at this density: to where its bound comes nearer to it.
      heavier = (inner === BEYOND_UPPER) === f[BY_U]! > 0;
      step = heavier ? 0.7 : -0.7;
      w[TEMPERATURE_NOW] = Math.sqrt(w[LOWEST_TEMPERATURE]! * w[HIGHEST_TEMPERATURE]!);
    }
    if (heavier) low = density;
    else high = density;
    seen |= heavier ? 1 : 2;
    let next = density * Math.exp(Math.min(Math.max(step, -3), 3));
    if (!(next > low && next < high) || (i > 12 && seen === 3 && i % 2 === 0)) next = Math.sqrt(low * high);
    if (next === density || high - low <= 4e-16 * high) break;
    density = next;
  }
  w[FIRST_TARGET] = target;
  w[SECOND_TARGET] = other;
  return end;
}
