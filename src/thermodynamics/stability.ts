/** The error for a sum that is unstable at a point: which condition is broken, where, and where it is not. */
import { FermistateError, withIndex } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../matter/point.js";
import type { Domain } from "./contribution.js";
import { compact } from "./domain.js";
import {
  ANSWERED,
  NEGATIVE_HEAT_CAPACITY,
  NO_ADIABATIC_RESISTANCE,
  NO_NUMBER_ADDED,
  NO_PRESSURE,
  NO_RESISTANCE,
} from "./refusal-numbers.js";

/** The records and steps of an evaluator that are needed here. */
interface Steps {
  readonly point: Float64Array;
  readonly quantities: Float64Array;
  fillMembers(composition: Composition, order: 2): void;
  fillWhereStable(composition: Composition): number;
}

const limits: Readonly<Record<number, readonly [argument: string, allowed: string]>> = {
  [NO_PRESSURE]: ["pressure over density", "> 0: contributions that act on this matter"],
  [NO_RESISTANCE]: ["pressureByDensity", ">= 0 at constant temperature"],
  [NO_ADIABATIC_RESISTANCE]: ["pressureByDensity", "> 0 at constant entropy"],
  [NEGATIVE_HEAT_CAPACITY]: ["heatCapacityV times temperature", ">= 0"],
  [NO_NUMBER_ADDED]: ["specificEnergy", "a finite number"],
};

/** Throws `unstable` for the point of the evaluator: what is broken, where, and where it is not. */
export function refuseUnstable(
  reason: number,
  evaluator: Steps,
  composition: Composition,
  domain: Domain,
  row: number,
): never {
  const { point, quantities } = evaluator;
  const given = quantities[0]!;
  const [density, temperature] = [point[DENSITY]!, point[TEMPERATURE]!];
  const [argument, allowed] = limits[reason]!;
  const place = `at density ${density} g/cm^3 and temperature ${temperature} K`;
  const words = Number.isNaN(given)
    ? `a number: a contribution has added NaN ${place}`
    : `${allowed}, for stable matter; given ${place}${cureOf(evaluator, composition, domain)}`;
  throw new FermistateError("unstable", withIndex({ argument, given, allowed: words }, row < 0 ? undefined : row));
}

/** From which temperature at this density, and which density at this temperature, the sum is stable. */
function cureOf(evaluator: Steps, composition: Composition, { density, temperature }: Domain): string {
  const hotter = stableFrom(evaluator, composition, TEMPERATURE, temperature, 4);
  const denser = stableFrom(evaluator, composition, DENSITY, density, 10);
  const cures = [
    hotter === undefined ? [] : `about ${compact(Number(hotter.toPrecision(2)))} K at this density`,
    denser === undefined ? [] : `about ${compact(Number(denser.toPrecision(2)))} g/cm^3 at this temperature`,
  ].flat();
  const reason = "regime(density, temperature, composition) tells which assumption fails here";
  return cures.length === 0 ? `; ${reason}` : `, stable from ${cures.join(" or ")}; ${reason}`;
}

/**
 * The first stable value above that in a slot of the point, by steps of a factor, then halved; the point is as
 * before.
 */
function stableFrom(
  evaluator: Steps,
  composition: Composition,
  slot: number,
  [lowest, highest]: readonly [number, number],
  factor: number,
): number | undefined {
  const { point } = evaluator;
  const place = [point[DENSITY]!, point[TEMPERATURE]!] as const;
  const isStable = (value: number): boolean => {
    [point[DENSITY], point[TEMPERATURE]] = place;
    point[slot] = value;
    try {
      evaluator.fillMembers(composition, 2);
      return evaluator.fillWhereStable(composition) === ANSWERED;
    } catch {
      return false;
    } finally {
      [point[DENSITY], point[TEMPERATURE]] = place;
    }
  };
  let low = Math.max(point[slot]!, lowest);
  let high = low * factor;
  while (high <= highest && !isStable(high)) {
    low = high;
    high *= factor;
  }
  if (high > highest) return undefined;
  for (let i = 0; i < 6; i++) {
    const middle = Math.sqrt(low * high);
    if (isStable(middle)) high = middle;
    else low = middle;
  }
  return high;
}
