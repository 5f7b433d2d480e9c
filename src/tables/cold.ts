/** The cold curve F_0(ln rho) of a table: quintic Hermite on equal steps of ln rho. */
import { evaluateLine, LINE_LENGTH, linesOf } from "./patch.js";
import { COLD_LENGTH, type ColdCurve, type TableAxis } from "./table.js";

/** A cold curve made ready for look-up. */
export interface ColdLookUp {
  readonly start: number;
  readonly intervals: number;
  /** By interval, its coefficients. */
  readonly lines: Float64Array;
  /** Slot 0: ln rho. */
  readonly at: Float64Array;
  /** Where in the interval, intervals per unit of ln rho. */
  readonly place: Float64Array;
  /** F_0 and its first three derivatives in ln rho, erg/g. */
  readonly out: Float64Array;
}

/** Makes the curve ready. */
export function coldLookUp(curve: ColdCurve, density: TableAxis): ColdLookUp {
  const intervals = curve.nodes.length / COLD_LENGTH - 1;
  const perUnit = intervals / Math.log(density.highest / density.lowest);
  return {
    start: Math.log(density.lowest),
    intervals,
    lines: linesOf(curve.nodes, () => 1 / perUnit),
    at: new Float64Array(1),
    place: Float64Array.of(0, perUnit),
    out: new Float64Array(4),
  };
}

/** Fills `out` at `at`: to the second derivative (order 2) or the third. */
export function fillCold(curve: ColdLookUp, order: number): void {
  const { place, intervals } = curve;
  const x = (curve.at[0]! - curve.start) * place[1]!;
  const i = Math.min(x | 0, intervals - 1);
  place[0] = x - i;
  evaluateLine(curve.lines, LINE_LENGTH * i, place, 1, order, curve.out);
}
