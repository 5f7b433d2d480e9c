/**
 * Black-body radiation in equilibrium with matter.
 *
 * Specific free energy F = -a T^4/(3 rho), so P = a T^4/3, e = a T^4/rho, s = 4 a T^3/(3 rho).
 * Exact for photons in vacuum; no plasma cut-off, which matters where hbar omega_p of the electrons approaches kT.
 * Source: Planck 1901, Ann. Phys. 309, 553; a from the exact h, k, c of the SI.
 */
import { radiationConstant } from "./constants.js";
import type { Composition } from "./matter/composition.js";
import { DENSITY, RADIATION_PRESSURE, TEMPERATURE } from "./matter/plasma.js";
import type { Contribution } from "./thermodynamics/contribution.js";
import {
  ENERGY,
  ENTROPY,
  HEAT,
  HEAT_T,
  type Order,
  PRESSURE,
  PRESSURE_T,
  PRESSURE_TT,
} from "./thermodynamics/free-energy.js";

/**
 * Photons as a contribution: P = a T^4/3 in dyn/cm^2, whatever the composition. Exact for black-body radiation in vacuum.
 *
 * Alone they give an infinite heat capacity at constant pressure, as they must: pressure fixes their temperature. The share of
 * the pressure is `radiationPressureFraction`. Answers at 1e-20 to 1e18 g/cm^3 and at T = 0 or 1 to 1e13 K.
 */
export function radiation(): Contribution {
  return Object.freeze({
    name: "radiation",
    physics: Object.freeze([{ model: "radiation", options: {} }]),
    validity: "Photons in vacuum: no plasma cut-off, which matters where hbar omega_p of the electrons approaches kT.",
    ideal: true,
    dependsOn: "none",
    domain: Object.freeze({ density: [1e-20, 1e18], temperature: [1, 1e13], zeroTemperature: true } as const),
    add(point: Float64Array, _composition: Composition, order: Order, members: Float64Array): void {
      const square = point[TEMPERATURE]! * point[TEMPERATURE]!;
      const pressure = (radiationConstant / 3) * square * square;
      const p = pressure / point[DENSITY]!;
      point[RADIATION_PRESSURE] = pressure;
      // P does not depend on density: dP/drho and its derivatives are zero, not a difference.
      members[ENERGY]! += 3 * p;
      members[ENTROPY]! += 4 * p;
      members[HEAT]! += 12 * p;
      members[PRESSURE]! += p;
      members[PRESSURE_T]! += 4 * p;
      if (order === 2) return;
      members[HEAT_T]! += 24 * p;
      members[PRESSURE_TT]! += 12 * p;
    },
    rewrite(point: Float64Array): void {
      const square = point[TEMPERATURE]! * point[TEMPERATURE]!;
      point[RADIATION_PRESSURE] = (radiationConstant / 3) * square * square;
    },
  });
}
