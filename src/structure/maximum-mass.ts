/**
 * The largest mass of the stars of a barotrope, and why it is the largest.
 *
 * Along a sequence by central density the fundamental radial mode turns unstable at a maximum of the mass and stable again
 * at a minimum of the right sense (Harrison, Thorne, Wakano & Wheeler 1965, Gravitation Theory and Gravitational Collapse).
 * The maximum is found as a root of the exact slope dM/drho_c, not by comparing masses, so its density is as good as its mass.
 */
import type { Barotrope } from "../barotropes/barotrope.js";
import { scanSequence } from "./sequence-scan.js";
import { requireStarOptions, requireTolerance, type Star, type StarOptions, starMaker } from "./star.js";
import { turningDensity } from "./turning-density.js";

/**
 * Why masses end.
 *
 * - `relativity`: general relativity alone; in Newton's theory the mass of this matter still rises, to ten times the density
 * - `softening`: the matter itself gives way (its exponent falls below 4/3 on average), so Newton's theory has a maximum too
 * - `density-jump`: the phase above a density jump does not carry the star
 * - `end-of-domain`: the mass still rises where the barotrope ends (electron capture, say: `validity` tells)
 * - `end-of-range`: the mass still rises at the end of the range asked for; no maximum in it
 */
export type MassLimitReason = "relativity" | "softening" | "density-jump" | "end-of-domain" | "end-of-range";

/** A star at which dM/drho_c changes its sign. */
export interface TurningPoint {
  /** Whether the mass is largest or smallest there. */
  readonly kind: "maximum" | "minimum";
  /** Baryon mass density at the centre, g/cm^3. */
  readonly centralDensity: number;
  /** g. */
  readonly mass: number;
  /** cm. */
  readonly radius: number;
}

/** The largest mass and what limits it. */
export interface MaximumMass {
  /** g. */
  readonly mass: number;
  /** Radius of that star, cm. */
  readonly radius: number;
  /** Its central density, g/cm^3. */
  readonly centralDensity: number;
  /** What limits it. */
  readonly reason: MassLimitReason;
  /** The reason in a sentence. */
  readonly message: string;
  /** That star. */
  readonly star: Star;
  /** All maxima and minima of the mass in the range, by rising density. */
  readonly turningPoints: readonly TurningPoint[];
}

/** Where the maximum is looked for. */
export interface MaximumMassOptions extends StarOptions {
  /**
   * Central densities, g/cm^3.
   * @defaultValue those of the barotrope, sixteen decades of them at most
   */
  readonly range?: readonly [lowest: number, highest: number];
}

/**
 * The largest mass in a range of central densities, and by what it is limited.
 *
 * Where the mass still rises at the end of the range, the star at the end is returned and `reason` says so: that is a
 * finding, not an error. Mass as accurate as that of a star; central density to about 1e-7.
 *
 * ```ts
 * import { polytrope } from "fermistate/barotropes";
 * import { maximumMass } from "fermistate/structure";
 *
 * maximumMass(polytrope({ constant: 1e5, index: 1 })).reason; // => "relativity"
 * ```
 * @throws as `hydrostaticStar`
 */
export function maximumMass(barotrope: Barotrope, options: MaximumMassOptions = {}): MaximumMass {
  requireStarOptions(options, ["range"]);
  const tolerance = requireTolerance(options.tolerance);
  const make = starMaker(barotrope, options);
  const bare = { ...options, rotation: false, tides: false };
  const accurate = starMaker(barotrope, bare);
  const rough = starMaker(barotrope, { ...bare, tolerance: Math.max(tolerance, 1e-8) });
  const turning: { readonly kind: "maximum" | "minimum"; readonly star: Star; readonly atJump: boolean }[] = [];
  let last = Number.NaN;
  for (const { low, high, isAcross } of scanSequence(barotrope, rough, options.range)) {
    if (low.massSlope * high.massSlope < 0) {
      const kind = low.massSlope > 0 ? "maximum" : "minimum";
      const at = isAcross ? low.centralDensity : turningDensity(accurate, low, high);
      turning.push({ kind, star: make(at), atJump: isAcross });
    }
    last = high.centralDensity;
  }
  const end = make(last);
  const maxima = turning.filter(({ kind }) => kind === "maximum");
  const highest = maxima.reduce<(typeof maxima)[number] | undefined>(
    (best, one) => (best === undefined || one.star.mass > best.star.mass ? one : best),
    undefined,
  );
  const isAtEnd = highest === undefined || (end.massSlope > 0 && end.mass > highest.star.mass);
  const star = isAtEnd ? end : highest.star;
  const reason = isAtEnd
    ? star.massSlope <= 0
      ? "end-of-range"
      : star.centralDensity >= barotrope.density[1] * (1 - 1e-12)
        ? "end-of-domain"
        : "end-of-range"
    : highest.atJump
      ? "density-jump"
      : reasonOf(barotrope, star, options);
  return Object.freeze({
    mass: star.mass,
    radius: star.radius,
    centralDensity: star.centralDensity,
    reason,
    message: messageOf(reason, barotrope),
    star,
    turningPoints: Object.freeze(
      turning.map(({ kind, star: { centralDensity, mass, radius } }) =>
        Object.freeze({ kind, centralDensity, mass, radius }),
      ),
    ),
  });
}

/** Relativity, unless Newton's theory has a maximum too, at this density or not ten times higher. */
function reasonOf(barotrope: Barotrope, star: Star, options: MaximumMassOptions): MassLimitReason {
  const { centralDensity } = star;
  const highest = barotrope.density[1];
  if (star.relativity === "newton" || centralDensity >= highest) return "softening";
  const inNewton = starMaker(barotrope, { ...options, relativity: "newton", rotation: false, tides: false });
  for (const { low, high } of scanSequence(barotrope, inNewton, [
    centralDensity,
    Math.min(10 * centralDensity, highest),
  ])) {
    if (low.massSlope < 0 || high.massSlope < 0) return "softening";
  }
  return "relativity";
}

function messageOf(reason: MassLimitReason, barotrope: Barotrope): string {
  switch (reason) {
    case "relativity":
      return "General relativity ends the sequence: in Newton's theory this matter would carry more.";
    case "softening":
      return "The matter gives way: its pressure rises too slowly with density to carry more, in Newton's theory too.";
    case "density-jump":
      return "A density jump ends the sequence: a core of the denser phase does not carry the star.";
    case "end-of-domain":
      return `The mass still rises where ${barotrope.name} ends. ${barotrope.validity}`;
    case "end-of-range":
      return "No maximum in this range of central densities: this is the star at its end.";
  }
}
