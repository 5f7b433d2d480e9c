/** The cold curve F_0(ln rho) of a table: quintic Hermite on equal steps of ln rho. */
import { BASIS_LENGTH, fillBasis } from "../numerics/quintic.js";
import { COLD_LENGTH, type ColdCurve, type TableAxis } from "./table.js";

/** A cold curve made ready for look-up. */
export interface ColdLookUp {
  readonly start: number;
  readonly perUnit: number;
  readonly intervals: number;
  readonly nodes: Float64Array;
  /** Slot 0: ln rho. */
  readonly at: Float64Array;
  /** F_0 and its first three derivatives in ln rho, erg/g. */
  readonly out: Float64Array;
  readonly basis: Float64Array;
}

/** Makes the curve ready. */
export function coldLookUp(curve: ColdCurve, density: TableAxis): ColdLookUp {
  const intervals = curve.nodes.length / COLD_LENGTH - 1;
  const perUnit = intervals / Math.log(density.highest / density.lowest);
  const nodes = curve.nodes.map((value, k) => value / perUnit ** (k % COLD_LENGTH));
  const basis = new Float64Array(BASIS_LENGTH);
  const start = Math.log(density.lowest);
  return { start, perUnit, intervals, nodes, at: new Float64Array(1), out: new Float64Array(4), basis };
}

/** Fills `out` at `at`: to the second derivative (order 2) or the third. */
export function fillCold(curve: ColdLookUp, order: number): void {
  const { nodes, basis, out, perUnit } = curve;
  const x = (curve.at[0]! - curve.start) * perUnit;
  const i = Math.min(x | 0, curve.intervals - 1);
  const k = 3 * i;
  const f0 = nodes[k]!;
  const f1 = nodes[k + 1]!;
  const f2 = nodes[k + 2]!;
  const f4 = nodes[k + 4]!;
  const f5 = nodes[k + 5]!;
  const rise = nodes[k + 3]! - f0;
  // The basis of numerics/quintic.ts, in registers.
  const t = x - i;
  const r = 1 - t;
  const t2 = t * t;
  const r2 = r * r;
  const tr = t * r;
  out[0] =
    f0 +
    t2 * t * (1 + 3 * r + 6 * r2) * rise +
    r2 * tr * (1 + 3 * t) * f1 +
    0.5 * r2 * r * t2 * f2 -
    t2 * tr * (1 + 3 * r) * f4 +
    0.5 * t2 * t * r2 * f5;
  out[1] =
    perUnit *
    (30 * tr * tr * rise +
      r2 * (1 + 2 * t - 15 * t2) * f1 +
      0.5 * r * tr * (2 - 5 * t) * f2 +
      t2 * (1 + 2 * r - 15 * r2) * f4 -
      0.5 * t * tr * (2 - 5 * r) * f5);
  out[2] =
    perUnit *
    perUnit *
    (12 * tr * (5 * (r - t) * rise - (3 - 5 * t) * f1 + (3 - 5 * r) * f4) +
      r * (1 - 8 * t + 10 * t2) * f2 +
      t * (1 - 8 * r + 10 * r2) * f5);
  if (order === 3) {
    basis[0] = t;
    fillBasis(basis);
    const third = basis[21]! * rise + basis[19]! * f1 + basis[20]! * f2 + basis[22]! * f4 + basis[23]! * f5;
    out[3] = perUnit * perUnit * perUnit * third;
  }
}
