/**
 * What is wrong with a barotrope: where it is acausal, where it resists no compression, where its w does not belong to
 * its P; and the limits it knows of.
 */
import { speedOfLight } from "../constants.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
  type BarotropeLimit,
} from "./barotrope.js";
import { soundSpeedSquared } from "./from-record.js";
import { requireBarotrope } from "./options.js";

/** One thing that is wrong. */
export interface BarotropeFinding {
  /**
   * `acausal`: sound faster than light; `unstable`: P <= 0 or d ln P/d ln rho <= 0; `inconsistent`: dw is not dP/rho,
   * to 1 %. `electron-capture`, `neutron-drip`, `extrapolated`: it answers beyond one of its `limits`.
   */
  readonly code: "acausal" | "unstable" | "inconsistent" | BarotropeLimit["code"];
  /**
   * Lowest density at which it is so, g/cm^3; for `inconsistent` the end of the first step, for a limit that concerns
   * lower densities the highest one.
   */
  readonly density: number;
  /** The number: (c_s/c)^2, d ln P/d ln rho, or how far dw is outside its bounds; for a limit the density it answers to. */
  readonly value: number;
  /** In words. */
  readonly message: string;
}

/** Steps in ln rho looked at. */
const steps = 2000;
/** Densities further below the highest one than this are not looked at. */
const depth = 1e-14;

/**
 * Looks at a barotrope over the upper 14 decades of its densities in 2000 steps; at most one finding of each kind, the
 * one at the lowest density, narrowed down to the last digit for `acausal` and `unstable`. The limits that the barotrope
 * itself states and goes beyond follow. An empty list means that none was seen.
 *
 * A Newtonian star does not mind an acausal barotrope, a relativistic one whose centre lies below that density neither.
 *
 * @throws `invalid-option`
 * @example
 * ```ts
 * import { barotropeFindings, publishedBarotrope } from "fermistate/barotropes";
 * const [finding] = barotropeFindings(publishedBarotrope("APR4 piecewise"));
 * finding?.code; // => "acausal"
 * finding?.density; // => 1.446e15
 * ```
 */
export function barotropeFindings(barotrope: Barotrope): readonly BarotropeFinding[] {
  requireBarotrope("barotrope", barotrope);
  const record = new Float64Array(BAROTROPE_LENGTH);
  const at = (density: number): void => {
    record[BAROTROPE_DENSITY] = density;
    barotrope.fillAtDensity(record);
  };
  const causality = (density: number): number => {
    at(density);
    return soundSpeedSquared(record) / (speedOfLight * speedOfLight);
  };
  const stability = (density: number): number => {
    at(density);
    return record[BAROTROPE_PRESSURE]! > 0 ? record[BAROTROPE_GAMMA]! : Number.NEGATIVE_INFINITY;
  };
  const [lowest, highest] = barotrope.density;
  const low = Math.max(lowest, depth * highest);
  const found = new Map<BarotropeFinding["code"], BarotropeFinding>();
  const add = (code: BarotropeFinding["code"], density: number, value: number, message: string): void => {
    if (!found.has(code)) found.set(code, Object.freeze({ code, density, value, message }));
  };
  let below = low;
  let before: Float64Array | undefined;
  for (let i = 0; i <= steps; i++) {
    const density = i === 0 ? low : i === steps ? highest : low * (highest / low) ** (i / steps);
    const jumped = barotrope.jumps.some(({ densities: [start, end] }) => density > start && below < end);
    if (barotrope.jumps.some(({ densities: [start, end] }) => density > start && density < end)) continue;
    if (
      !found.has("unstable") &&
      !(stability(density) > 0) &&
      !(density === lowest && record[BAROTROPE_PRESSURE] === 0)
    ) {
      const edge = i === 0 ? low : edgeOf(below, density, (rho) => !(stability(rho) > 0));
      add(
        "unstable",
        edge,
        stability(edge),
        "The pressure is not positive, or does not rise with density, from here on.",
      );
    }
    if (!found.has("acausal") && causality(density) > 1) {
      const edge = i === 0 ? low : edgeOf(below, density, (rho) => causality(rho) > 1);
      add("acausal", edge, causality(edge), "Sound is faster than light from this density on.");
    }
    at(density);
    if (before !== undefined && !jumped) {
      const error = potentialError(before, record);
      if (error > 0)
        add("inconsistent", density, error, "The potential w does not belong to the pressure: dw is not dP/rho.");
    }
    before = record.slice();
    below = density;
  }
  const beyond = (barotrope.limits ?? [])
    .filter(({ side, density }) => (side === "above" ? density < highest : density > lowest))
    .map(({ code, density, side, message }): BarotropeFinding => {
      return Object.freeze({ code, density, value: side === "above" ? highest : lowest, message });
    });
  return Object.freeze([...found.values(), ...beyond]);
}

/** The boundary between a density where it is not so and one where it is, by bisection. */
function edgeOf(good: number, bad: number, isBad: (density: number) => boolean): number {
  let [a, b] = [good, bad];
  for (let i = 0; i < 60; i++) {
    const middle = a + 0.5 * (b - a);
    if (isBad(middle)) b = middle;
    else a = middle;
  }
  return b;
}

/** By how much the step in w lies outside the bounds dP/rho of its two ends, over the mean of them. */
function potentialError(low: Float64Array, high: Float64Array): number {
  const rise = high[BAROTROPE_PRESSURE]! - low[BAROTROPE_PRESSURE]!;
  const least = rise / high[BAROTROPE_DENSITY]!;
  const most = rise / low[BAROTROPE_DENSITY]!;
  const step = high[BAROTROPE_POTENTIAL]! - low[BAROTROPE_POTENTIAL]!;
  const noise =
    1e-14 * Math.abs(high[BAROTROPE_POTENTIAL]!) + 1e-14 * (high[BAROTROPE_PRESSURE]! / low[BAROTROPE_DENSITY]!);
  return (2 * Math.max(0, least - step - noise, step - most - noise)) / (least + most);
}
