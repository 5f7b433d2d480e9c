/** Where a search begins when nobody guesses: roots of the estimate to less than a per cent of it. */

import { electronRestTemperature } from "../constants.js";
import type { Composition } from "../matter/composition.js";
import { DENSITY, FERMI_ENERGY, PLASMA_TEMPERATURE_SQUARED, TEMPERATURE } from "../matter/plasma.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { type Estimate, estimateOf } from "./estimate.js";
import { DENSITY_NOW, ENTROPY_KIND, FIRST_TARGET, FUNCTION_LENGTH, SECOND_TARGET, TEMPERATURE_NOW } from "./slots.js";

/** Starts of searches in one equation of state. */
export interface Starter {
  /** Writes a temperature for the first target at the density of the search. */
  temperature(composition: Composition, kind: number, w: Float64Array): void;
  /** Writes a density for the first target at the temperature of the search. */
  density(composition: Composition, kind: number, w: Float64Array): void;
  /** Writes both. */
  both(composition: Composition, first: number, second: number, w: Float64Array): void;
  /** True where half the density or temperature (slot 0 or 1) takes only a small part of a quantity away at the start. */
  isRemainder(composition: Composition, kind: number, slot: number, w: Float64Array): boolean;
  /** As {@link Starter.again}, for the density of a pressure that photons and pairs rule. */
  againDensity(composition: Composition, kind: number, w: Float64Array, f: Float64Array): void;
  /**
   * Writes both again, the targets reduced by what the estimate misses at the first start, where the truth is in `f`. In
   * degenerate matter the temperature is a small remainder: the cold parts must cancel.
   */
  again(composition: Composition, first: number, second: number, w: Float64Array, f: Float64Array): void;
}

/** Width in the logarithm at which a start is near enough, and relative difference of a quantity that ends a search. */
const CLOSE = 0.004;
const NEAR = 1e-3;
const MOST_STEPS = 60;

/** A starter for an equation of state; contributions it does not know are taken for ions. */
export function starterOf(eos: EquationOfState): Starter {
  const names = eos.contributions.flatMap((part) => part.standsFor ?? [part.name]);
  const has = (name: string): boolean => names.includes(name);
  const estimate: Estimate = estimateOf({
    electrons: has("electrons and positrons"),
    ions: names.some((name) => name !== "electrons and positrons" && name !== "radiation"),
    coulomb: has("Coulomb plasma"),
    radiation: has("radiation"),
  });
  const { point, values } = estimate;
  const phases = eos.contributions.find((part) => part.phases !== undefined)?.phases;
  const boundary = new Float64Array(5);
  const range = new Float64Array(3);
  const [thinnest, densest] = eos.domain.density;
  const [coldest, hottest] = eos.domain.temperature;
  const bottom = Math.log(Math.max(coldest, 10));
  const top = Math.log(hottest);
  const thin = Math.log(thinnest);
  const dense = Math.log(densest);

  /**
   * Temperature of the target at the density in `point`, left there. Returns -1 or 1 where the target lies below or above
   * all values, else 0. The regula falsi in the Illinois form (Dowell & Jarratt 1971, BIT 11, 168), on a difference that is
   * bounded, so that far from the root it halves.
   */
  function findTemperature(composition: Composition, kind: number, w: Float64Array, slot: number): number {
    const target = w[slot]!;
    let low = bottom;
    let high = top;
    let atLow = -1;
    let atHigh = 1;
    let last = 0;
    let now = 0.5 * (low + high);
    for (let i = 0; i < MOST_STEPS && high - low > CLOSE; i++) {
      now = (low * atHigh - high * atLow) / (atHigh - atLow);
      point[TEMPERATURE] = Math.exp(now);
      estimate.fill(composition);
      const value = values[kind]!;
      const miss = (value - target) / (Math.abs(value) + Math.abs(target));
      if (miss < 0) {
        low = now;
        atLow = miss;
        if (last < 0) atHigh *= 0.5;
      } else {
        high = now;
        atHigh = miss;
        if (last > 0) atLow *= 0.5;
      }
      last = miss;
      if (Math.abs(miss) < NEAR) break;
    }
    point[TEMPERATURE] = Math.exp(now);
    return low === bottom && now - bottom < 0.01 ? -1 : high === top && top - now < 0.01 ? 1 : 0;
  }

  /**
   * Raises a temperature to what the estimate can know: a crystal not far below melting, electrons not far below Fermi's
   * temperature; and where nothing freezes to the range of the liquid's quantum terms, below which c_v has no one sign.
   */
  function liftTemperature(composition: Composition, cold: boolean, w: Float64Array): void {
    boundary[0] = w[DENSITY_NOW]!;
    phases?.fillBoundary(composition, boundary);
    const melting = boundary[2]!;
    let least = coldest;
    if (phases !== undefined && melting === 0) least = Math.sqrt(point[PLASMA_TEMPERATURE_SQUARED]!) / 8;
    else if (cold) least = Math.max(0.003 * melting, 1e-4 * electronRestTemperature * point[FERMI_ENERGY]!);
    w[TEMPERATURE_NOW] = Math.max(coldest, least, point[TEMPERATURE]!);
  }

  function temperature(composition: Composition, kind: number, w: Float64Array): void {
    point[DENSITY] = w[DENSITY_NOW]!;
    const beyond = findTemperature(composition, kind, w, FIRST_TARGET);
    liftTemperature(composition, beyond < 0, w);
  }

  function density(composition: Composition, kind: number, w: Float64Array): void {
    range[0] = thin;
    range[1] = dense;
    range[2] = CLOSE;
    findDensity(composition, kind, -1, w);
  }

  /**
   * Density of the first target between the logarithms in `range`, to the third number there; at the temperature of the search,
   * or (`second` >= 0) at that of the second target, which is found too.
   */
  function findDensity(composition: Composition, first: number, second: number, w: Float64Array): void {
    const target = w[FIRST_TARGET]!;
    const sign = first === ENTROPY_KIND ? -1 : 1;
    let low = range[0]!;
    let high = range[1]!;
    let atLow = -1;
    let atHigh = 1;
    let last = 0;
    let now = 0.5 * (low + high);
    point[TEMPERATURE] = Math.max(w[TEMPERATURE_NOW]!, coldest);
    for (let i = 0; i < MOST_STEPS && high - low > range[2]!; i++) {
      now = (low * atHigh - high * atLow) / (atHigh - atLow);
      point[DENSITY] = Math.exp(now);
      const beyond = second < 0 ? 0 : findTemperature(composition, second, w, SECOND_TARGET);
      estimate.fill(composition);
      const value = values[first]!;
      let miss = (sign * (value - target)) / (Math.abs(value) + Math.abs(target));
      // Too little entropy for all temperatures: the answer is denser; too little energy, or too much of either: thinner.
      if (beyond !== 0) miss = beyond < 0 && second === ENTROPY_KIND ? -1 : 1;
      if (miss < 0) {
        low = now;
        atLow = miss;
        if (last < 0) atHigh *= 0.5;
      } else {
        high = now;
        atHigh = miss;
        if (last > 0) atLow *= 0.5;
      }
      last = miss;
      if (Math.abs(miss) < NEAR * range[2]!) break;
    }
    w[DENSITY_NOW] = Math.exp(now);
    if (second < 0) return;
    point[DENSITY] = w[DENSITY_NOW]!;
    const beyond = findTemperature(composition, second, w, SECOND_TARGET);
    liftTemperature(composition, beyond < 0, w);
  }

  function both(composition: Composition, first: number, second: number, w: Float64Array): void {
    range[0] = thin;
    range[1] = dense;
    range[2] = CLOSE;
    findDensity(composition, first, second, w);
  }

  function isRemainder(composition: Composition, kind: number, slot: number, w: Float64Array): boolean {
    point[DENSITY] = w[DENSITY_NOW]!;
    point[TEMPERATURE] = w[TEMPERATURE_NOW]!;
    estimate.fill(composition);
    const value = values[kind]!;
    point[slot]! *= 0.5;
    estimate.fill(composition);
    return Math.abs(value - values[kind]!) < 0.1 * Math.abs(value);
  }

  function againDensity(composition: Composition, kind: number, w: Float64Array, f: Float64Array): void {
    const target = w[FIRST_TARGET]!;
    point[DENSITY] = w[DENSITY_NOW]!;
    point[TEMPERATURE] = w[TEMPERATURE_NOW]!;
    estimate.fill(composition);
    w[FIRST_TARGET] = target - f[0]! + values[kind]!;
    density(composition, kind, w);
    w[FIRST_TARGET] = target;
  }

  function again(composition: Composition, first: number, second: number, w: Float64Array, f: Float64Array): void {
    const target = w[FIRST_TARGET]!;
    const other = w[SECOND_TARGET]!;
    point[DENSITY] = w[DENSITY_NOW]!;
    point[TEMPERATURE] = w[TEMPERATURE_NOW]!;
    estimate.fill(composition);
    w[FIRST_TARGET] = target * (values[first]! / f[0]!);
    w[SECOND_TARGET] = other - f[FUNCTION_LENGTH]! + values[second]!;
    const now = Math.log(w[DENSITY_NOW]!);
    range[0] = Math.max(thin, now - 0.1);
    range[1] = Math.min(dense, now + 0.1);
    range[2] = 1e-10;
    findDensity(composition, first, second, w);
    w[FIRST_TARGET] = target;
    w[SECOND_TARGET] = other;
  }

  return { temperature, density, both, isRemainder, againDensity, again };
}
