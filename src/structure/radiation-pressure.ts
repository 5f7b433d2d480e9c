/**
 * Radiation pressure in stars: the standard model and bounds that hold for any star in equilibrium.
 *
 * With P = P_gas + P_rad, P_gas = beta P = rho k T/(mu m), P_rad = (1 - beta) P = a T^4/3, pressure and density at a point give
 * P = [(k/(mu m))^4 (3/a) (1 - beta)/beta^4]^(1/3) rho^(4/3).
 *
 * - Standard model (Eddington 1926, The Internal Constitution of the Stars, chapter VI): beta is the same everywhere, so the star is
 *   a polytrope of index 3 and (1 - beta)/beta^4 = pi G^3 a M^2 (mu m)^4/(48 omega_3^2 k^4).
 * - Bounds (Chandrasekhar 1936, MNRAS 96, 644; 1939, An Introduction to the Study of Stellar Structure, chapter III): where the
 *   mean density within r does not grow outwards,
 *   (1/2)(4 pi/3)^(1/3) G M^(2/3) rho_mean^(4/3) <= P_c <= (1/2)(4 pi/3)^(1/3) G M^(2/3) rho_c^(4/3),
 *   so at the centre (1 - beta)/beta^4 <= pi G^3 a M^2 (mu m)^4/(18 k^4).
 * - Degeneracy (Chandrasekhar 1932, Z. Astrophys. 5, 321): electrons whose pressure is beta P of the total cannot become
 *   degenerate at any density where 1 - beta exceeds pi^4/(960 + pi^4) = 0.0921.
 *
 * Newton's theory, ideal gas. Sources from memory; every constant is derived in the tests.
 */

import { boltzmannConstant, gravitationalConstant, radiationConstant } from "../constants.js";
import { requireKnown } from "../errors.js";
import { chandrasekharMass, type MassUnitOptions, massOfUnit, OMEGA_3, requirePositive } from "./limiting-mass.js";

/** How a pressure is shared between gas and radiation; the two sum to one. */
export interface PressureShares {
  /** beta: gas over total. */
  readonly gas: number;
  /** 1 - beta: radiation over total. */
  readonly radiation: number;
}

/** 1 - beta above which an electron gas cannot become degenerate: pi^4/(960 + pi^4). */
export const nonDegenerateRadiationShare: number = Math.PI ** 4 / (960 + Math.PI ** 4);

/**
 * Gas and radiation pressure in Eddington's standard model of a mass (g) and mean molecular weight, each to rounding however
 * small.
 *
 * ```ts
 * import { solarMass } from "fermistate";
 * import { standardModel } from "fermistate/structure";
 *
 * standardModel(solarMass, 1).radiation; // => 0.00295506
 * standardModel(100 * solarMass, 1).gas; // => 0.379535
 * ```
 * @throws `not-a-number`, `out-of-range`, `invalid-option`
 */
export function standardModel(
  mass: number,
  meanMolecularWeight: number,
  options: MassUnitOptions = {},
): PressureShares {
  return solveQuartic(quarticTerm(mass, meanMolecularWeight, options) / (48 * OMEGA_3 * OMEGA_3));
}

/**
 * Least share of gas and largest share of radiation in the pressure at the centre of a star of a mass (g) and mean
 * molecular weight, whatever its inside, if only its mean density does not grow outwards.
 *
 * ```ts
 * import { solarMass } from "fermistate";
 * import { centralRadiationBound } from "fermistate/structure";
 *
 * centralRadiationBound(solarMass, 1).radiation; // => 0.02889
 * ```
 * @throws `not-a-number`, `out-of-range`, `invalid-option`
 */
export function centralRadiationBound(
  mass: number,
  meanMolecularWeight: number,
  options: MassUnitOptions = {},
): PressureShares {
  return solveQuartic(quarticTerm(mass, meanMolecularWeight, options) / 18);
}

/** pi G^3 a M^2 (mu m)^4/k^4. */
function quarticTerm(mass: number, meanMolecularWeight: number, options: MassUnitOptions): number {
  requirePositive("mass", mass, "g");
  requirePositive("meanMolecularWeight", meanMolecularWeight, "mu");
  // In this order no factor leaves the range of doubles.
  const square = gravitationalConstant * mass * ((meanMolecularWeight * massOfUnit(options)) / boltzmannConstant) ** 2;
  return Math.PI * gravitationalConstant * radiationConstant * square * square;
}

/**
 * beta of (1 - beta)/beta^4 = q. Newton's method on the smaller of beta and 1 - beta, from the side on which it is monotone:
 * neither is ever a difference of nearly equal numbers.
 */
function solveQuartic(q: number): PressureShares {
  if (q < 8) {
    // f(x) = x - q (1 - x)^4, x = 1 - beta <= 1/2: rising and concave, from below.
    let x = 0;
    for (let step = 1; step > Number.EPSILON * x; ) {
      const cube = q * (1 - x) ** 3;
      step = (cube * (1 - x) - x) / (1 + 4 * cube);
      x += step;
    }
    return Object.freeze({ gas: 1 - x, radiation: x });
  }
  // f(beta) = q beta^4 + beta - 1: rising and convex, from above.
  let beta = q ** -0.25;
  for (let step = 1; step > Number.EPSILON * beta; ) {
    const cube = q * beta ** 3;
    step = (cube * beta + beta - 1) / (4 * cube + 1);
    beta -= step;
  }
  return Object.freeze({ gas: beta, radiation: 1 - beta });
}

/**
 * The mass (g) of the standard model whose radiation share is {@link nonDegenerateRadiationShare}, for matter whose gas
 * pressure is that of its electrons: heavier stars cannot become degenerate without losing mass. 1.156 Chandrasekhar masses.
 * @throws `not-a-number`, `out-of-range`, `invalid-option`
 */
export function degenerateMassLimit(massPerElectron: number, options: MassUnitOptions = {}): number {
  return chandrasekharMass(massPerElectron, options) * (1 - nonDegenerateRadiationShare) ** -1.5;
}

/** Numbers of a model of a star in Newton's theory. */
export interface HydrostaticModel {
  /** g. */
  readonly mass: number;
  /** cm. */
  readonly radius: number;
  /** g/cm^3. */
  readonly centralDensity: number;
  /** dyn/cm^2. */
  readonly centralPressure: number;
  /** Share of radiation in the central pressure; needs the molecular weight. */
  readonly centralRadiationShare?: number;
  /** Mean molecular weight at the centre. */
  readonly meanMolecularWeight?: number;
}

/** Lowest and highest pressure at the centre, dyn/cm^2. */
export interface CentralPressureBounds {
  /** (1/2)(4 pi/3)^(1/3) G M^(2/3) rho_mean^(4/3) = 3 G M^2/(8 pi R^4). */
  readonly lowest: number;
  /** (1/2)(4 pi/3)^(1/3) G M^(2/3) rho_c^(4/3). */
  readonly highest: number;
}

/**
 * Bounds on the central pressure from mass (g), radius (cm) and central density (g/cm^3): a uniform star has both.
 * @throws `not-a-number`, `out-of-range`
 */
export function centralPressureBounds(mass: number, radius: number, centralDensity: number): CentralPressureBounds {
  requirePositive("mass", mass, "g");
  requirePositive("radius", radius, "cm");
  requirePositive("centralDensity", centralDensity, "g/cm^3");
  const highest =
    0.5 * Math.cbrt((4 * Math.PI) / 3) * gravitationalConstant * (Math.cbrt(mass) * centralDensity ** (2 / 3)) ** 2;
  return Object.freeze({ lowest: (3 / (8 * Math.PI)) * gravitationalConstant * (mass / radius ** 2) ** 2, highest });
}

/**
 * Which bound a model breaks.
 *
 * - `central-density-too-low`: below the mean density
 * - `central-pressure-too-low`, `central-pressure-too-high`: see {@link centralPressureBounds}
 * - `radiation-too-high`: see {@link centralRadiationBound}
 */
export type HydrostaticViolationCode =
  | "central-density-too-low"
  | "central-pressure-too-low"
  | "central-pressure-too-high"
  | "radiation-too-high";

/** One broken bound; frozen. */
export interface HydrostaticViolation {
  /** Which. */
  readonly code: HydrostaticViolationCode;
  /** The number of the model. */
  readonly value: number;
  /** The bound it breaks. */
  readonly bound: number;
}

/**
 * The bounds that a model breaks: empty for any Newtonian star in equilibrium whose mean density does not grow outwards.
 * A check of any code's models; `tolerance` (relative, default 1e-9) forgives their errors. In general relativity the pressure
 * at the centre may exceed the bound.
 *
 * ```ts
 * import { hydrostaticViolations, laneEmden } from "fermistate/structure";
 *
 * const model = { mass: 2e33, radius: 1e9, centralDensity: 1e7, centralPressure: 1e22 };
 * hydrostaticViolations(model)[0]?.code; // => "central-pressure-too-low"
 * ```
 * @throws `not-a-number`, `out-of-range`, `invalid-option`
 */
export function hydrostaticViolations(
  model: HydrostaticModel,
  options: MassUnitOptions & { readonly tolerance?: number } = {},
): readonly HydrostaticViolation[] {
  const { mass, radius, centralDensity, centralPressure, centralRadiationShare, meanMolecularWeight } = model;
  requireKnown("options", options, ["massUnit", "tolerance"]);
  const { tolerance = 1e-9, ...unit } = options;
  const { lowest, highest } = centralPressureBounds(mass, radius, centralDensity);
  requirePositive("centralPressure", centralPressure, "dyn/cm^2");
  const found: HydrostaticViolation[] = [];
  const hold = (code: HydrostaticViolationCode, value: number, bound: number, isFloor: boolean): void => {
    const isBroken = isFloor ? value < bound * (1 - tolerance) : value > bound * (1 + tolerance);
    if (isBroken) found.push(Object.freeze({ code, value, bound }));
  };
  hold("central-density-too-low", centralDensity, (3 * mass) / (4 * Math.PI * radius ** 3), true);
  hold("central-pressure-too-low", centralPressure, lowest, true);
  hold("central-pressure-too-high", centralPressure, highest, false);
  if (centralRadiationShare !== undefined && meanMolecularWeight !== undefined) {
    const { radiation } = centralRadiationBound(mass, meanMolecularWeight, unit);
    hold("radiation-too-high", requirePositive("centralRadiationShare", centralRadiationShare, ""), radiation, false);
  }
  return Object.freeze(found);
}
