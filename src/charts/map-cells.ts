/** Cells of a map from values on a grid: where each ends, and what is drawn where there are more values than pixels. */
import { FermistateError } from "../errors.js";

/** Band of a cell without value. */
export const MISSING = -1;

/** The cells, row by row from the lowest temperature. */
export interface Cells {
  /** Ends of the columns, g/cm^3: one more than there are columns. */
  readonly densityEdges: readonly number[];
  /** Ends of the rows, K. */
  readonly temperatureEdges: readonly number[];
  readonly values: Float64Array;
  /** Cells without value. */
  readonly missing: number;
  /** True where several values share a cell. */
  readonly pooled: boolean;
  /** True where a row of T = 0 was left out. */
  readonly zeroRow: boolean;
}

/** Most cells along an axis: more would be smaller than two pixels. */
const mostCells = 360;

/** Cells of values on axes; a cell reaches to the geometric means with its neighbours. */
export function cellsOf(
  densities: readonly number[],
  temperatures: readonly number[],
  values: ArrayLike<number>,
): Cells {
  const all = densities.length * temperatures.length;
  const isList = Array.isArray(values) || (ArrayBuffer.isView(values) && !(values instanceof DataView));
  if (!isList || values.length !== all) {
    const allowed = `${all} numbers, one per density and temperature`;
    throw new FermistateError("length-mismatch", { argument: "values", given: values, allowed });
  }
  const zeroRow = temperatures[0] === 0;
  const warm = zeroRow ? temperatures.slice(1) : temperatures;
  const skip = zeroRow ? densities.length : 0;
  const columns = groups(densities.length);
  const rows = groups(warm.length);
  const out = new Float64Array((columns.length - 1) * (rows.length - 1));
  let missing = 0;
  let at = 0;
  for (let j = 0; j + 1 < rows.length; j++) {
    for (let i = 0; i + 1 < columns.length; i++) {
      let largest = Number.NaN;
      for (let row = rows[j]!; row < rows[j + 1]!; row++) {
        for (let column = columns[i]!; column < columns[i + 1]!; column++) {
          const value = values[skip + row * densities.length + column]!;
          if (Number.isFinite(value) && !(value <= largest)) largest = value;
        }
      }
      if (Number.isNaN(largest)) missing += 1;
      out[at++] = largest;
    }
  }
  return {
    densityEdges: edgesOf(densities, columns),
    temperatureEdges: edgesOf(warm, rows),
    values: out,
    missing,
    pooled: columns.length - 1 < densities.length || rows.length - 1 < warm.length,
    zeroRow,
  };
}

/** Where groups of neighbours begin, and the end. */
function groups(count: number): number[] {
  const cells = Math.min(count, mostCells);
  return Array.from({ length: cells + 1 }, (_, i) => Math.round((i * count) / cells));
}

function edgesOf(values: readonly number[], starts: readonly number[]): number[] {
  const last = values.length - 1;
  return starts.map((start) => {
    if (start === 0) return values[0]! * Math.sqrt(values[0]! / values[1]!);
    if (start > last) return values[last]! * Math.sqrt(values[last]! / values[last - 1]!);
    return Math.sqrt(values[start - 1]!) * Math.sqrt(values[start]!);
  });
}
