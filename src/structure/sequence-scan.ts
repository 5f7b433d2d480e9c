/**
 * Looks along a whole sequence of stars by central density, closely enough that no maximum of the mass is missed.
 *
 * Every star comes with the exact slope of its mass, so two neighbours and their slopes tell whether the mass between them can be
 * what a cubic through them says. Where it is, they may stand a decade apart; where it is not, or where the slope changes its
 * sign, the step is halved down to an eighth of a decade. Both sides of every density jump are looked at.
 */
import type { Barotrope } from "../barotropes/barotrope.js";
import { FermistateError, requireFinite } from "../errors.js";
import type { Star } from "./star.js";

/** Two neighbours of a sequence. */
export interface Neighbours {
  /** The star of the lower central density. */
  readonly low: Star;
  /** The star of the higher one. */
  readonly high: Star;
  /** Whether a density jump lies between them. */
  readonly isAcross: boolean;
}

/** Longest and shortest step, in decades of density. */
const [longest, shortest] = [1, 1 / 8] as const;
/** Decades below the highest density that are looked at unless a range is given. */
const DECADES = 16;
/** A centre this little above a density jump has a core, which its slope then feels. */
const ABOVE_JUMP = 1e-6;

/** Neighbours by rising density, from the lowest to the highest density; stars are made as they are asked for. */
export function* scanSequence(
  barotrope: Barotrope,
  make: (density: number) => Star,
  range?: readonly [number, number],
): Generator<Neighbours, void, undefined> {
  let before: Star | undefined;
  for (const [from, to] of stretches(barotrope, range)) {
    const first = make(from);
    if (before !== undefined) yield { low: before, high: first, isAcross: true };
    const count = Math.max(1, Math.ceil(Math.log10(to / from) / longest));
    let low = first;
    for (let i = 1; i <= count; i++) {
      const high = to === from ? first : make(i === count ? to : from * (to / from) ** (i / count));
      yield* refine(make, low, high);
      low = high;
    }
    before = low;
  }
}

/** The pair, or pairs between them where the mass may do more than a cubic says. */
function* refine(make: (density: number) => Star, low: Star, high: Star): Generator<Neighbours, void, undefined> {
  const decades = Math.log10(high.centralDensity / low.centralDensity);
  if (decades <= shortest * 1.001 || isPlain(low, high)) {
    yield { low, high, isAcross: false };
    return;
  }
  const middle = make(Math.sqrt(low.centralDensity) * Math.sqrt(high.centralDensity));
  yield* refine(make, low, middle);
  yield* refine(make, middle, high);
}

/**
 * Whether the mass rises or falls all the way, as far as its slopes tell: a cubic with slopes of up to three times the mean one
 * is monotonic (Fritsch & Carlson 1980, SIAM J. Numer. Anal. 17, 238), and the mean of the slopes is near that of the masses.
 */
function isPlain(low: Star, high: Star): boolean {
  const mean = Math.log(high.mass / low.mass) / Math.log(high.centralDensity / low.centralDensity);
  const [a, b] = [low.massSlope / mean, high.massSlope / mean];
  return a > 0 && b > 0 && a <= 3 && b <= 3 && Math.abs(0.5 * (a + b) - 1) < 0.25;
}

/** Stretches of density without a jump, rising. */
function stretches(barotrope: Barotrope, range?: readonly [number, number]): (readonly [number, number])[] {
  const [lowest, highest] = barotrope.density;
  const [low, high] =
    range === undefined
      ? [Math.max(lowest * 1.01, highest * 10 ** -DECADES), highest]
      : requireRange(range, lowest, highest);
  const found: (readonly [number, number])[] = [];
  let from = low;
  for (const { densities } of barotrope.jumps) {
    const [below, above] = [densities[0], densities[1] * (1 + ABOVE_JUMP)];
    if (above <= from) continue;
    if (below >= high) break;
    if (below >= from) found.push([from, below]);
    from = above;
  }
  if (from <= high) found.push([from, high]);
  if (found.length > 0) return found;
  const allowed = "central densities outside a density jump";
  throw new FermistateError("outside-domain", { argument: "range", given: `${low} to ${high}`, allowed });
}
/** A range of central densities, checked. */
export function requireRange(
  range: readonly [number, number],
  lowest = 0,
  highest: number = Number.POSITIVE_INFINITY,
): readonly [number, number] {
  const allowed = `two rising densities in g/cm^3 within ${lowest} to ${highest}`;
  if (!Array.isArray(range) || range.length !== 2) {
    throw new FermistateError("invalid-option", { argument: "range", given: range, allowed });
  }
  for (const end of range) requireFinite("range", end, allowed);
  const [low, high] = range;
  if (low <= 0 || low >= high || low < lowest || high > highest) {
    throw new FermistateError("out-of-range", { argument: "range", given: `${low} to ${high}`, allowed });
  }
  return [low, high];
}
