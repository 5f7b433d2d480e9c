/**
 * Where to compare: points of a region, evenly spread in the logarithms and the same for the same seed.
 *
 * The sequence of Halton (1960, Numer. Math. 2, 84) in bases 2 and 3, shifted modulo one by two numbers from the seed (Cranley
 * & Patterson 1976, SIAM J. Numer. Anal. 13, 904).
 */
import { FermistateError, requireFinite } from "../errors.js";

/** A rectangle in ln density and ln temperature and how many points of it to take. */
export interface CertifiedRegion {
  /** Lowest and highest baryon mass density, g/cm^3, > 0. */
  readonly density: readonly [lowest: number, highest: number];
  /** Lowest and highest temperature, K, > 0. */
  readonly temperature: readonly [lowest: number, highest: number];
  /** Number of points, 1 to 100000. */
  readonly points: number;
  /**
   * Whole number from 0 that chooses among the sets of points.
   * @defaultValue 1
   */
  readonly seed?: number;
}

/** Columns of points: the same length, one row per point. */
export interface PointColumns {
  /** Baryon mass density, g/cm^3. */
  readonly density: ArrayLike<number>;
  /** Temperature, K; 0 where the equation of state answers there. */
  readonly temperature: ArrayLike<number>;
}

const mostPoints = 100_000;

/** The points of a region. */
export function regionPoints(region: CertifiedRegion): PointColumns {
  const allowed = "an object { density: [lowest, highest], temperature: [lowest, highest], points, seed? }";
  if (typeof region !== "object" || region === null) throw invalid("region", region, allowed);
  const known = ["density", "temperature", "points", "seed"];
  const stranger = Object.keys(region).find((name) => !known.includes(name));
  if (stranger !== undefined) throw invalid("region", stranger, allowed);
  const density = range("region.density", region.density, "g/cm^3");
  const temperature = range("region.temperature", region.temperature, "K");
  const points = wholeNumber("region.points", region.points, 1, mostPoints);
  const seed = wholeNumber("region.seed", region.seed ?? 1, 0, 2 ** 31 - 1);
  const [first, second] = shifts(seed);
  const columns = { density: [] as number[], temperature: [] as number[] };
  for (let i = 1; i <= points; i++) {
    columns.density.push(between(density, (radicalInverse(i, 2) + first) % 1));
    columns.temperature.push(between(temperature, (radicalInverse(i, 3) + second) % 1));
  }
  return columns;
}

/** Checked columns of points. */
export function givenPoints(points: PointColumns): PointColumns {
  const allowed = "{ density: [...], temperature: [...] }, columns of the same length, 1 to 100000";
  if (typeof points?.density?.length !== "number" || typeof points.temperature?.length !== "number") {
    throw invalid("points", points, allowed);
  }
  const [density, temperature] = [Array.from(points.density), Array.from(points.temperature)];
  if (density.length !== temperature.length) {
    throw new FermistateError("length-mismatch", { argument: "points", given: temperature.length, allowed });
  }
  if (density.length < 1 || density.length > mostPoints) throw invalid("points", density.length, allowed);
  for (const [i, value] of density.entries()) {
    requireFinite("points.density", value, "finite numbers, g/cm^3", i);
    requireFinite("points.temperature", temperature[i], "finite numbers, K", i);
  }
  return { density, temperature };
}

function range(argument: string, given: readonly [number, number], unit: string): readonly [number, number] {
  const allowed = `[lowest, highest] with 0 < lowest <= highest, ${unit}`;
  if (!Array.isArray(given) || given.length !== 2) throw invalid(argument, given, allowed);
  const [low, high] = given.map((one) => requireFinite(argument, one, allowed)) as [number, number];
  if (!(low > 0 && low <= high)) {
    throw new FermistateError("out-of-range", { argument, given: low > 0 ? high : low, allowed });
  }
  return [low, high];
}

/** Equal ratios; ends are met exactly and never passed. */
function between([low, high]: readonly [number, number], share: number): number {
  return Math.min(high, Math.max(low, low * (high / low) ** share));
}

/** Digits of `index` in `base`, mirrored at the point. */
function radicalInverse(index: number, base: number): number {
  let value = 0;
  let unit = 1 / base;
  for (let rest = index; rest > 0; rest = Math.floor(rest / base)) {
    value += (rest % base) * unit;
    unit /= base;
  }
  return value;
}

/** Two numbers in [0, 1) from a seed: Park & Miller 1988, Commun. ACM 31, 1192, after a few steps. */
function shifts(seed: number): readonly [number, number] {
  const modulus = 2147483647;
  let state = (seed % (modulus - 1)) + 1;
  const next = (): number => {
    for (let i = 0; i < 3; i++) state = (state * 48271) % modulus;
    return state / modulus;
  };
  return [next(), next()];
}

/** Throws unless `given` is a whole number within the bounds; returns it. */
function wholeNumber(argument: string, given: unknown, lowest: number, highest: number): number {
  const allowed = `a whole number from ${lowest} to ${highest}`;
  const value = requireFinite(argument, given, allowed);
  if (!Number.isInteger(value) || value < lowest || value > highest) {
    throw new FermistateError("out-of-range", { argument, given: value, allowed });
  }
  return value;
}

function invalid(argument: string, given: unknown, allowed: string): FermistateError {
  return new FermistateError("invalid-option", { argument, given, allowed });
}
