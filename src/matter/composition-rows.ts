/**
 * Compositions row by row, as a reaction network has them: a matrix of nucleon fractions of the same nuclides.
 *
 * A batch takes the matrix itself, and makes the composition of a row when it comes to that row: nothing is kept of it, so
 * a million zones need no more memory than one.
 */
import { FermistateError } from "../errors.js";
import {
  asComposition,
  type Composition,
  type CompositionOptions,
  checkedSum,
  invalid,
  mixed,
  readOptions,
  refuseFraction,
} from "./composition.js";
import { speciesOf } from "./species-list.js";

/** Compositions of a batch as numbers, one for each row; no column of the batch's output may overlap them. */
export interface CompositionRows {
  /** Labels of the nuclides, each once. */
  readonly nuclides: readonly string[];
  /**
   * Nucleon fractions: one column per nuclide, each with one number per row; or one array, row after row, with the
   * fractions of a row side by side.
   */
  readonly fractions: Float64Array | readonly Float64Array[];
  /** Scale the fractions of each row to a sum of one, instead of refusing any other sum. @defaultValue false */
  readonly normalise?: boolean;
}

/** What a batch takes for its compositions: one for all rows, one per row, or one per row as numbers. */
export type CompositionInput = Composition | readonly Composition[] | CompositionRows;

/** Checked compositions of a batch. */
export interface CompositionSource {
  /** The one composition of all rows; undefined where each has its own. */
  readonly one: Composition | undefined;
  /** Number of rows; undefined where one serves for all. */
  readonly rows: number | undefined;
  /** The composition of a row. */
  at(row: number): Composition;
}

/**
 * Many compositions of the same species, as a reaction network makes them in every zone and step: the same as
 * `composition` of each row, to the bit, several times faster.
 *
 * @param labels - nuclides, each once
 * @param fractions - nucleon fractions: one column per label, each with one number per row; or one array, row after
 * row, with the labels' fractions of a row side by side
 * @returns one composition per row, for `evaluate` and `solveColumns`
 * @throws FermistateError as {@link composition}, with the row; `length-mismatch`
 * @example
 * ```ts
 * import { compositions } from "fermistate";
 * const zones = compositions(["He4", "C12", "O16"], Float64Array.of(0.1, 0.4, 0.5, 0, 0.5, 0.5));
 * zones.map((zone) => zone.name); // => ["He4 0.1, C12 0.4, O16 0.5", "C12 0.5, O16 0.5"]
 * ```
 */
export function compositions(
  labels: readonly string[],
  fractions: Float64Array | readonly Float64Array[],
  options: CompositionOptions = {},
): Composition[] {
  const source = matrixSource(labels, fractions, readOptions(options), "labels");
  const made = new Array<Composition>(source.rows);
  for (let row = 0; row < made.length; row++) made[row] = source.at(row);
  return made;
}

const anyInput =
  "a composition, as composition({ C12: 0.5, O16: 0.5 }) makes it, a list of them, or a matrix { nuclides, fractions }";

/** True for compositions as numbers. */
export function areRows(given: unknown): given is CompositionRows {
  return typeof given === "object" && given !== null && Object.hasOwn(given, "nuclides");
}

/**
 * The compositions of a batch, every one checked.
 *
 * @throws `invalid-composition`, `unknown-nuclide`, `not-a-number`, `length-mismatch`, `invalid-option`, with the row
 */
export function compositionSource(given: CompositionInput): CompositionSource {
  if (Array.isArray(given)) {
    const list = given as readonly Composition[];
    for (let i = 0; i < list.length; i++) asComposition(list[i], anyInput, i);
    return { one: undefined, rows: list.length, at: (row) => list[row]! };
  }
  if (areRows(given)) {
    const { nuclides, fractions, normalise = false, ...others } = given;
    const [stranger] = Object.keys(others);
    if (stranger !== undefined || typeof normalise !== "boolean") {
      const allowed = "{ nuclides, fractions, normalise: true | false }";
      throw new FermistateError("invalid-option", { argument: "composition", given: stranger ?? normalise, allowed });
    }
    const source = matrixSource(nuclides, fractions, normalise, "nuclides");
    source.check();
    return source;
  }
  const one = asComposition(given, anyInput);
  return { one, rows: undefined, at: () => one };
}

interface MatrixSource extends CompositionSource {
  readonly rows: number;
  /** Throws for the first row that is no composition. */
  check(): void;
}

function matrixSource(
  labels: readonly string[],
  fractions: Float64Array | readonly Float64Array[],
  normalise: boolean,
  argument: "labels" | "nuclides",
): MatrixSource {
  if (!Array.isArray(labels) || labels.length === 0) throw invalid(labels, "a list of at least one nuclide", argument);
  const list = speciesOf(labels, argument);
  const count = labels.length;
  const columns = fractions instanceof Float64Array ? undefined : checkedColumns(fractions, count);
  const rows = columns === undefined ? (fractions as Float64Array).length / count : columns[0]!.length;
  if (!Number.isInteger(rows)) {
    const allowed = `rows of ${count} numbers, one for each nuclide`;
    const details = { argument: "fractions", given: (fractions as Float64Array).length, allowed };
    throw new FermistateError("length-mismatch", details);
  }
  const one = new Float64Array(count);
  const sorted = new Float64Array(count);

  function read(row: number): void {
    for (let i = 0; i < count; i++) {
      const fraction = columns === undefined ? (fractions as Float64Array)[row * count + i]! : columns[i]![row]!;
      if (!(fraction >= 0 && fraction < Number.POSITIVE_INFINITY)) refuseFraction(labels[i]!, fraction, row);
      one[i] = fraction;
    }
  }

  return {
    one: undefined,
    rows,
    at: (row) => {
      read(row);
      return mixed(list, one, sorted, normalise, row);
    },
    check: () => {
      for (let row = 0; row < rows; row++) {
        read(row);
        checkedSum(one, normalise, row);
      }
    },
  };
}

function checkedColumns(given: unknown, count: number): readonly Float64Array[] {
  const allowed = `a Float64Array of rows, or ${count} columns, each a Float64Array`;
  if (!Array.isArray(given) || ![...given].every((column) => column instanceof Float64Array)) {
    throw new FermistateError("invalid-option", { argument: "fractions", given, allowed });
  }
  const columns = given as readonly Float64Array[];
  if (columns.length !== count) {
    throw new FermistateError("length-mismatch", { argument: "fractions", given: columns.length, allowed });
  }
  const rows = columns[0]!.length;
  const other = columns.find((column) => column.length !== rows);
  if (other === undefined) return columns;
  const details = { argument: "fractions", given: other.length, allowed: `${rows} rows, as the first column has` };
  throw new FermistateError("length-mismatch", details);
}
