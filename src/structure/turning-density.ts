/** Where the mass of a sequence turns. */
import { findRoot } from "../numerics/roots.js";
import type { Star } from "./star.js";

/** Central density between two stars at which dM/drho_c = 0. */
export function turningDensity(make: (density: number) => Star, low: Star, high: Star): number {
  return findRoot((density) => make(density).massSlope, low.centralDensity, high.centralDensity, {
    values: [low.massSlope, high.massSlope],
    relativeTolerance: 1e-9,
  }).x;
}
