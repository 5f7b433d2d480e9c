/**
 * What a barotrope leads to in stars, as named numbers: for the report of a fit, or to compare any two barotropes.
 *
 * A fit is judged by the stars it makes, and barotropes do not know stars: the fit takes these numbers as an option.
 */

import type { Barotrope } from "../barotropes/barotrope.js";
import { requireKnown } from "../errors.js";
import type { Relativity } from "./hydrostatic-equations.js";
import { maximumMass } from "./maximum-mass.js";
import { hydrostaticStar } from "./star.js";
import { starOfMass } from "./star-of-mass.js";

/** Options of {@link starFigures}. */
export interface StarFiguresOptions {
  /**
   * Central densities among which the largest mass, and a star of given mass, is looked for, g/cm^3.
   * @defaultValue the range of the fit
   */
  readonly range?: readonly [lowest: number, highest: number];
  /** Also a star of this mass, g. */
  readonly mass?: number;
  /** Also a star of this central density, g/cm^3. */
  readonly centralDensity?: number;
  /**
   * Theory of gravity: "newton" or "general" (relativity).
   * @defaultValue "general"
   */
  readonly relativity?: Relativity;
}

/** The figures of stars; cgs. */
export interface StarFigures {
  /** Largest mass in the range, g. */
  readonly maximumMass: number;
  /** Radius of that star, cm. */
  readonly maximumMassRadius: number;
  /** Its central density, g/cm^3: the end of the range where the mass still rises there. */
  readonly maximumMassDensity: number;
  /** Radius of the star of the mass given, cm. */
  readonly radiusOfMass?: number;
  /** Its central density, g/cm^3. */
  readonly densityOfMass?: number;
  /** Mass of the star of the central density given, g. */
  readonly massOfDensity?: number;
  /** Its radius, cm. */
  readonly radiusOfDensity?: number;
}

/** Relative error of the stars: far below what any fit moves. */
const tolerance = 1e-9;

/**
 * Figures of stars as the option `figures` of `fitPiecewisePolytrope` and `fitSmoothBarotrope` takes them: the report then
 * says what the fit does to the largest mass and its radius and, where asked for, to a star of given mass or central density.
 *
 * Where the mass still rises at the end of the range, the star there is the largest: `maximumMassDensity` tells. Near a
 * maximum the mass hardly depends on the central density, so the radius of the heaviest star has a far larger error than
 * its mass. Layers of the star thinner than the fit's lowest density are its first piece going on: that error is included.
 *
 * @throws `invalid-option`; when called, as `maximumMass`, `starOfMass` and `hydrostaticStar`: `outside-domain`, say, where the
 * fit has no star of the mass
 * @example
 * ```ts
 * import { composition, solarMass, whiteDwarfMatter } from "fermistate";
 * import { barotrope, fitPiecewisePolytrope } from "fermistate/barotropes";
 * import { starFigures } from "fermistate/structure";
 *
 * const cold = barotrope(whiteDwarfMatter(), composition({ C12: 0.5, O16: 0.5 }), { temperature: 0 });
 * const figures = starFigures({ mass: 0.6 * solarMass });
 * const { report } = fitPiecewisePolytrope(cold, { pieces: 6, density: [1e4, 1e11], figures });
 * report.figures["maximumMass"]?.relativeError; // => -0.00250
 * report.figures["radiusOfMass"]?.relativeError; // => 0.00058
 * ```
 */
export function starFigures(
  options: StarFiguresOptions = {},
): (
  barotrope: Barotrope,
  density?: readonly [lowest: number, highest: number],
) => StarFigures & Record<string, number> {
  requireKnown("options", options, ["range", "mass", "centralDensity", "relativity"]);
  const { mass, centralDensity, relativity = "general" } = options;
  return (barotrope, density) => {
    const range = options.range ?? (density && aboveSurface(barotrope, density));
    const where = { relativity, tolerance, ...(range === undefined ? {} : { range }) };
    const most = maximumMass(barotrope, where);
    const ofMass = mass === undefined ? undefined : starOfMass(barotrope, mass, where);
    const ofDensity =
      centralDensity === undefined ? undefined : hydrostaticStar(barotrope, { centralDensity, relativity, tolerance });
    return Object.freeze({
      maximumMass: most.mass,
      maximumMassRadius: most.radius,
      maximumMassDensity: most.centralDensity,
      ...(ofMass && { radiusOfMass: ofMass.radius, densityOfMass: ofMass.centralDensity }),
      ...(ofDensity && { massOfDensity: ofDensity.mass, radiusOfDensity: ofDensity.radius }),
    });
  };
}

/** The range of a fit without the surface of a barotrope that begins there. */
function aboveSurface(barotrope: Barotrope, [low, high]: readonly [number, number]): readonly [number, number] {
  return [Math.max(low, 1.01 * barotrope.density[0]), high];
}
