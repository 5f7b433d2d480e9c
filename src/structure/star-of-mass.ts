/** The star of a given mass: rough stars show where it is, a few accurate ones find it. */
import type { Barotrope } from "../barotropes/barotrope.js";
import { FermistateError, requireFinite } from "../errors.js";
import { findRoot } from "../numerics/roots.js";
import { scanSequence } from "./sequence-scan.js";
import {
  type Known,
  requireStarOptions,
  requireTolerance,
  type Star,
  type StarOptions,
  type StarWith,
  starMaker,
} from "./star.js";
import { turningDensity } from "./turning-density.js";

/** Which star of a mass. */
export interface StarOfMassOptions extends StarOptions {
  /**
   * Central densities to search, g/cm^3.
   * @defaultValue those of the barotrope, sixteen decades of them at most
   */
  readonly range?: readonly [lowest: number, highest: number];
  /**
   * Keep the inside of the star as `profile`.
   * @defaultValue false
   */
  readonly profile?: boolean;
}

/**
 * The stable star of a gravitational mass: the least dense one in the range on a branch where mass rises with density.
 *
 * Where white dwarfs and neutron stars have the same mass, `range` chooses. The mass is met to the tolerance.
 * @throws as `hydrostaticStar`; `outside-domain` where no star of the range has this mass
 */
export function starOfMass<const Options extends StarOfMassOptions = Record<never, never>>(
  barotrope: Barotrope,
  mass: number,
  options?: Known<Options, StarOfMassOptions>,
): StarWith<Options> {
  return find(barotrope, mass, options ?? {}) as StarWith<Options>;
}

/** Relative error of the stars that show where to look. */
const rough = 1e-6;
/** By how much rough masses may be wrong. */
const slack = 1e-5;

type Make = (centralDensity: number) => Star;

function find(barotrope: Barotrope, mass: number, options: StarOfMassOptions): Star {
  requireStarOptions(options, ["range", "profile"]);
  requireFinite("mass", mass, "a mass in g");
  const tolerance = requireTolerance(options.tolerance);
  const bare = { ...options, rotation: false, tides: false };
  const accurate = starMaker(barotrope, bare);
  const quick = starMaker(barotrope, { ...bare, tolerance: Math.max(tolerance, rough) });
  const excess = (star: Star): number => Math.log(star.mass / mass);
  /** The star itself, or made again where a rough mass decides nothing. */
  const sure = (star: Star): Star => (Math.abs(excess(star)) > slack ? star : accurate(star.centralDensity));
  let [lightest, heaviest] = [Number.POSITIVE_INFINITY, 0];
  const look = (star: Star): Star => {
    lightest = Math.min(lightest, star.mass);
    heaviest = Math.max(heaviest, star.mass);
    return star;
  };
  for (const { low, high, isAcross } of scanSequence(barotrope, quick, options.range)) {
    const ends = [look(sure(low)), look(sure(high))] as [Star, Star];
    if (isAcross) continue;
    // A turning point between the two: the rising branch ends or begins there.
    if (low.massSlope > 0 && high.massSlope < 0) ends[1] = look(turningStar(quick, accurate, low, high, excess));
    if (low.massSlope < 0 && high.massSlope > 0) ends[0] = look(turningStar(quick, accurate, low, high, excess));
    if (low.massSlope < 0 && high.massSlope < 0) continue;
    if (excess(ends[0]) > 0 || excess(ends[1]) < 0) continue;
    const density = densityOf(quick, accurate, ends, excess, tolerance);
    return starMaker(barotrope, options)(density, options.profile === true);
  }
  throw new FermistateError("outside-domain", {
    argument: "mass",
    given: mass,
    allowed: `masses of stars of ${barotrope.name} on rising branches, within ${lightest} to ${heaviest} g`,
  });
}

/** The star where the mass turns; accurate where its mass is close to the one wanted. */
function turningStar(quick: Make, accurate: Make, low: Star, high: Star, excess: (star: Star) => number): Star {
  const star = quick(turningDensity(quick, low, high));
  if (Math.abs(excess(star)) > slack) return star;
  const ends = [accurate(low.centralDensity), accurate(high.centralDensity)] as const;
  return accurate(turningDensity(accurate, ...ends));
}

/** Central density between two stars at which the mass is met. */
function densityOf(
  quick: Make,
  accurate: Make,
  [low, high]: readonly [Star, Star],
  excess: (star: Star) => number,
  tolerance: number,
): number {
  const [from, to] = [low.centralDensity, high.centralDensity];
  const [below, above] = [quick(from), quick(to)];
  if (excess(below) < 0 && excess(above) > 0) {
    const values = [excess(below), excess(above)] as const;
    const start = findRoot((at) => excess(quick(at)), from, to, { values, relativeTolerance: rough });
    // Newton with the exact slope: where it does not end at once, the bracket decides.
    let density = start.x;
    for (let i = 0; i < 4; i++) {
      const star = accurate(density);
      const step = -excess(star) / star.massSlope;
      if (!(Math.abs(step) < 1e-3)) break;
      density *= Math.exp(step);
      if (Math.abs(step) < 0.01 * Math.sqrt(tolerance)) return density;
    }
  }
  const values = [excess(accurate(from)), excess(accurate(to))] as const;
  return findRoot((at) => excess(accurate(at)), from, to, { values, relativeTolerance: 0.01 * tolerance }).x;
}
