/** Central densities at which a whole sequence of stars is looked at: close enough that no maximum of the mass is missed. */
import type { Barotrope } from "../barotropes/barotrope.js";
import { FermistateError, requireFinite } from "../errors.js";

/** One density of the grid. */
interface GridDensity {
  /** g/cm^3. */
  readonly density: number;
  /** Whether a density jump lies between the density before and this one. */
  readonly isAcross: boolean;
}

const PER_DECADE = 8;
/** Decades below the highest density that are looked at unless a range is given. */
const DECADES = 16;
/** A centre this little above a density jump has a core, which its slope then feels. */
const ABOVE_JUMP = 1e-6;

/** Densities from low to high, eight per decade, with both sides of every jump. */
export function densityGrid(barotrope: Barotrope, range?: readonly [number, number]): GridDensity[] {
  const [lowest, highest] = barotrope.density;
  const [low, high] =
    range === undefined
      ? [Math.max(lowest * 1.01, highest * 10 ** -DECADES), highest]
      : requireRange(range, lowest, highest);
  const count = Math.max(2, Math.ceil(PER_DECADE * Math.log10(high / low)) + 1);
  const even = Array.from({ length: count }, (_, i) =>
    i === 0 ? low : i === count - 1 ? high : low * (high / low) ** (i / (count - 1)),
  );
  const jumps = barotrope.jumps.map(({ densities: [below, above] }) => [below, above * (1 + ABOVE_JUMP)] as const);
  const isInside = (density: number): boolean => jumps.some(([below, above]) => density > below && density < above);
  const sides = jumps.flat().filter((density) => density > low && density < high);
  const all = [...even.filter((density) => !isInside(density)), ...sides].sort((a, b) => a - b);
  return all.map((density, i) => ({
    density,
    isAcross: i > 0 && jumps.some(([below, above]) => all[i - 1]! <= below && density >= above),
  }));
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
