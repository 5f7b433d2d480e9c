/** Rows of a grid without a state, where they are kept: how many, and for which reason. */
import type { ErrorCode } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { refusalReasons } from "../thermodynamics/refusal-reasons.js";

/** Rows of a grid that are refused for one reason; frozen. */
export interface RefusedRowCount {
  /** The number in the column `refused`: the index in `refusalReasons`. */
  readonly reason: number;
  /** The code of the error that a single state has there. */
  readonly code: ErrorCode | undefined;
  /** Which quantity breaks which limit, in words. */
  readonly meaning: string;
  /** How many rows. */
  readonly rows: number;
}

/** What a file says of rows without a state; nothing where they are errors. */
export function aboutRefused(refusedRows: readonly RefusedRowCount[] | undefined): readonly string[] {
  if (refusedRows === undefined) return [];
  return [
    "A row whose refused is not 0 has no state: its other fields are empty, and refused is the number of the reason.",
  ];
}

/** The reasons met in a column `refused`, by number. */
export function refusedRowCounts(column: Float64Array): readonly RefusedRowCount[] {
  const counts = new Map<number, number>();
  for (const reason of column) if (reason !== 0) counts.set(reason, (counts.get(reason) ?? 0) + 1);
  const found = [...counts].sort(([a], [b]) => a - b);
  return Object.freeze(found.map(([reason, rows]) => Object.freeze({ reason, ...refusalReasons[reason]!, rows })));
}

/** Points tried at once. */
const some = 256;

/** The first row with a state; undefined where there is none. */
export function firstAnswered(
  equationOfState: EquationOfState,
  composition: Composition,
  density: Float64Array,
  temperature: Float64Array,
): number | undefined {
  for (let start = 0; start < density.length; start += some) {
    const part = (column: Float64Array): Float64Array => column.subarray(start, start + some);
    const refused = new Uint8Array(part(density).length);
    equationOfState.evaluate({ density: part(density), temperature: part(temperature), composition }, { refused });
    const row = refused.indexOf(0);
    if (row >= 0) return start + row;
  }
  return undefined;
}
