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
  const i = Math.min(Math.max(Math.floor(x), 0), curve.intervals - 1) | 0;
  basis[0] = x - i;
  fillBasis(basis);
  const k = 3 * i;
  const f0 = nodes[k]!;
  const f1 = nodes[k + 1]!;
  const f2 = nodes[k + 2]!;
  const f4 = nodes[k + 4]!;
  const f5 = nodes[k + 5]!;
  const rise = nodes[k + 3]! - f0;
  out[0] = f0 + basis[3]! * rise + basis[1]! * f1 + basis[2]! * f2 + basis[4]! * f4 + basis[5]! * f5;
  out[1] = perUnit * (basis[9]! * rise + basis[7]! * f1 + basis[8]! * f2 + basis[10]! * f4 + basis[11]! * f5);
  out[2] =
    perUnit * perUnit * (basis[15]! * rise + basis[13]! * f1 + basis[14]! * f2 + basis[16]! * f4 + basis[17]! * f5);
  if (order === 3) {
    const third = basis[21]! * rise + basis[19]! * f1 + basis[20]! * f2 + basis[22]! * f4 + basis[23]! * f5;
    out[3] = perUnit * perUnit * perUnit * third;
  }
}
