/** The cold curve F_0(ln rho) of a table: quintic Hermite on equal steps of ln rho. */
import { toPowers } from "../numerics/quintic.js";
import { COLD_LENGTH, type ColdCurve, type TableAxis } from "./table.js";

/** A cold curve made ready for look-up. */
export interface ColdLookUp {
  readonly start: number;
  readonly perUnit: number;
  readonly intervals: number;
  /** By interval, the six coefficients of the powers of the place in it, from 0 to 1. */
  readonly powers: Float64Array;
  /** Slot 0: ln rho. */
  readonly at: Float64Array;
  /** F_0 and its first three derivatives in ln rho, erg/g. */
  readonly out: Float64Array;
}

/** Makes the curve ready. */
export function coldLookUp(curve: ColdCurve, density: TableAxis): ColdLookUp {
  const intervals = curve.nodes.length / COLD_LENGTH - 1;
  const perUnit = intervals / Math.log(density.highest / density.lowest);
  const powers = new Float64Array(6 * intervals);
  for (let i = 0; i < intervals; i++) {
    const ends = powers.subarray(6 * i, 6 * i + 6);
    for (let j = 0; j < 6; j++) ends[j] = curve.nodes[COLD_LENGTH * i + j]! / perUnit ** (j % COLD_LENGTH);
    toPowers(ends);
  }
  const start = Math.log(density.lowest);
  return { start, perUnit, intervals, powers, at: new Float64Array(1), out: new Float64Array(4) };
}

/** Fills `out` at `at`: to the second derivative (order 2) or the third. */
export function fillCold(curve: ColdLookUp, order: number): void {
  const { powers, out, perUnit } = curve;
  const x = (curve.at[0]! - curve.start) * perUnit;
  const i = Math.min(x | 0, curve.intervals - 1);
  const t = x - i;
  const k = 6 * i;
  const a5 = powers[k + 5]!;
  const a4 = a5 * t + powers[k + 4]!;
  const a3 = a4 * t + powers[k + 3]!;
  const a2 = a3 * t + powers[k + 2]!;
  const a1 = a2 * t + powers[k + 1]!;
  const b4 = a5 * t + a4;
  const b3 = b4 * t + a3;
  const b2 = b3 * t + a2;
  out[0] = a1 * t + powers[k]!;
  out[1] = perUnit * (b2 * t + a1);
  const c4 = a5 * t + b4;
  const c3 = c4 * t + b3;
  out[2] = 2 * perUnit * perUnit * (c3 * t + b2);
  if (order === 3) out[3] = 6 * perUnit * perUnit * perUnit * ((a5 * t + c4) * t + c3);
}
