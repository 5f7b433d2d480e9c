/** What the numbers in a column `refused` mean, and the cheap test of a point that gives the first of them. */
import { type ErrorCode, isFermistateError } from "../errors.js";
import { DENSITY, TEMPERATURE } from "../matter/point.js";
import type { Domain } from "./contribution.js";
import {
  ANSWERED,
  COMPOSITION_REFUSED,
  CONTRIBUTION_OUTSIDE,
  CONTRIBUTION_UNSTABLE,
  DENSITY_NO_NUMBER,
  DENSITY_NOT_POSITIVE,
  DENSITY_TOO_HIGH,
  DENSITY_TOO_LOW,
  NO_CONVERGENCE,
  TEMPERATURE_NEGATIVE,
  TEMPERATURE_NO_NUMBER,
  TEMPERATURE_TOO_HIGH,
  TEMPERATURE_TOO_LOW,
} from "./refusal-numbers.js";

/** Why a row has no answer. */
export interface RefusalReason {
  /** The code of the error that a single call throws for it; undefined where there is an answer. */
  readonly code: ErrorCode | undefined;
  /** Which quantity breaks which limit, in words. */
  readonly meaning: string;
}

const reason = (code: ErrorCode | undefined, meaning: string): RefusalReason => Object.freeze({ code, meaning });

/**
 * What the numbers in a column `refused` mean, by number: 0 is an answer. Single calls (`state`, `solve`) throw the
 * error of the same code, with values and limits.
 *
 * ```ts
 * import { composition, refusalReasons, whiteDwarfMatter } from "fermistate";
 * const refused = new Uint8Array(2);
 * const pressure = new Float64Array(2);
 * const input = { density: Float64Array.of(1e6, 1e30), temperature: Float64Array.of(1e7, 1e7) };
 * whiteDwarfMatter().evaluate({ ...input, composition: composition({ C12: 1 }) }, { pressure, refused });
 * refusalReasons[refused[1] ?? 0]?.meaning; // => "density above the domain"
 * ```
 */
export const refusalReasons: readonly RefusalReason[] = /* @__PURE__ */ Object.freeze([
  reason(undefined, "answered"),
  reason("not-a-number", "density is no finite number"),
  reason("not-a-number", "temperature is no finite number"),
  reason("out-of-range", "density is not positive"),
  reason("out-of-range", "temperature is negative"),
  reason("outside-domain", "density below the domain"),
  reason("outside-domain", "density above the domain"),
  reason("outside-domain", "temperature below the domain, or 0 where that is not legal"),
  reason("outside-domain", "temperature above the domain"),
  reason("outside-domain", "a contribution refuses this point inside its domain"),
  reason("unstable", "pressure is not positive"),
  reason("unstable", "pressure falls with density at constant temperature"),
  reason("unstable", "pressure does not rise with density at constant entropy"),
  reason("unstable", "heat capacity at constant volume is negative"),
  reason("unstable", "specific energy is no finite number"),
  reason("no-convergence", "an iteration did not reach its promise"),
  reason("not-a-number", "a given quantity is no finite number"),
  reason("out-of-range", "a given pressure is not positive"),
  reason("below-cold", "a given quantity is below its value at T = 0 and this density"),
  reason("no-solution", "a given quantity is below all that matter has there"),
  reason("no-solution", "a given quantity is above all that matter has there"),
  reason("no-solution", "no state with both given quantities was found"),
  reason("invalid-composition", "a contribution does not answer for this composition"),
  reason("unstable", "a contribution says that matter is unstable here"),
]);

/** The number of the reason for which the point of the record is refused before anything is computed; 0 for none. */
export function reasonOutside({ density, temperature, zeroTemperature }: Domain, point: Float64Array): number {
  const rho = point[DENSITY]!;
  const t = point[TEMPERATURE]!;
  if (rho >= density[0] && rho <= density[1] && t >= temperature[0] && t <= temperature[1]) return ANSWERED;
  if (!Number.isFinite(rho)) return DENSITY_NO_NUMBER;
  if (!Number.isFinite(t)) return TEMPERATURE_NO_NUMBER;
  if (rho <= 0) return DENSITY_NOT_POSITIVE;
  if (t < 0) return TEMPERATURE_NEGATIVE;
  if (rho < density[0]) return DENSITY_TOO_LOW;
  if (rho > density[1]) return DENSITY_TOO_HIGH;
  if (t > temperature[1]) return TEMPERATURE_TOO_HIGH;
  return t === 0 && zeroTemperature ? ANSWERED : TEMPERATURE_TOO_LOW;
}

/** The number for an error that a contribution has thrown at one point; what is not about the point is thrown again. */
export function reasonOf(error: unknown): number {
  if (isFermistateError(error)) {
    if (error.code === "outside-domain") return CONTRIBUTION_OUTSIDE;
    if (error.code === "no-convergence") return NO_CONVERGENCE;
    if (error.code === "invalid-composition") return COMPOSITION_REFUSED;
    if (error.code === "unstable") return CONTRIBUTION_UNSTABLE;
  }
  throw error;
}
