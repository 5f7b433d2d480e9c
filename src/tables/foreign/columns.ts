/** Columns from elsewhere: what is given, what is refused, and their rows in order. */
import { FermistateError, requireFinite } from "../../errors.js";

/** Columns of a table from anywhere, one row a state, in any order; arrays of numbers or Float64Array, all of one length. */
export interface StateColumns {
  /** Density, g/cm^3, > 0. */
  readonly density: ArrayLike<number>;
  /** Temperature, K, > 0. */
  readonly temperature: ArrayLike<number>;
  /** Pressure, dyn/cm^2, > 0. */
  readonly pressure: ArrayLike<number>;
  /** Specific energy, erg/g, from any zero of its own. */
  readonly specificEnergy: ArrayLike<number>;
  /** Specific entropy, erg/(g K), from any zero of its own; found from the other columns where it is left out. */
  readonly specificEntropy?: ArrayLike<number> | undefined;
}

/** Rows by density, then by temperature, duplicates dropped. */
export interface SortedRows {
  readonly density: Float64Array;
  readonly temperature: Float64Array;
  readonly pressure: Float64Array;
  readonly energy: Float64Array;
  readonly entropy: Float64Array | undefined;
  /** First row of each density, and the number of rows. */
  readonly starts: readonly number[];
  /** Rows that said the same as another one. */
  readonly duplicates: number;
  /** Row of the input, by row. */
  readonly index: Uint32Array;
}

/** Rows taken at most: fitting so many takes a minute. */
const mostRows = 1_000_000;
/** Densities and temperatures needed at least. */
export const fewestNodes = 5;
/** Values of an axis closer than this, relative, are one: what is lost when logarithms are stored. */
const sameValue = 1e-10;

const known = ["density", "temperature", "pressure", "specificEnergy", "specificEntropy"];

/**
 * Checks the columns and sorts their rows.
 *
 * @throws `invalid-option`, `length-mismatch`, `too-large`, `not-a-number`, `out-of-range`
 */
export function sortedRows(columns: StateColumns): SortedRows {
  checkColumns(columns);
  const count = columns.density.length;
  const { density, temperature, pressure, specificEnergy, specificEntropy } = columns;
  const rho = positive("density", density, "g/cm^3");
  const kelvin = positive("temperature", temperature, "K");
  const p = positive("pressure", pressure, "dyn/cm^2");
  const e = finite("specificEnergy", specificEnergy, "erg/g");
  const s = specificEntropy === undefined ? undefined : finite("specificEntropy", specificEntropy, "erg/(g K)");

  const order = Uint32Array.from({ length: count }, (_, i) => i).sort((a, b) => rho[a]! - rho[b]!);
  // One density is one value, its first; rows of it are sorted by temperature.
  const bounds = [0];
  for (let i = 1; i < count; i++) {
    const lowest = rho[order[bounds.at(-1)!]!]!;
    if (rho[order[i]!]! - lowest > sameValue * lowest) bounds.push(i);
  }
  const keep: number[] = [];
  const starts: number[] = [];
  const densities: number[] = [];
  let duplicates = 0;
  bounds.forEach((from, k) => {
    const rows = order.subarray(from, bounds[k + 1] ?? count).sort((a, b) => kelvin[a]! - kelvin[b]! || a - b);
    const one = rho[order[from]!]!;
    starts.push(keep.length);
    let last = -1;
    for (const row of rows) {
      if (last >= 0 && kelvin[row]! - kelvin[last]! <= sameValue * kelvin[last]!) {
        if (p[row] !== p[last] || e[row] !== e[last] || s?.[row] !== s?.[last])
          refuseTwin(row, last, one, kelvin[row]!);
        duplicates += 1;
        continue;
      }
      keep.push(row);
      densities.push(one);
      last = row;
    }
  });
  const pick = (column: Float64Array): Float64Array => Float64Array.from(keep, (row) => column[row]!);
  return {
    density: Float64Array.from(densities),
    temperature: pick(kelvin),
    pressure: pick(p),
    energy: pick(e),
    entropy: s === undefined ? undefined : pick(s),
    starts: [...starts, keep.length],
    duplicates,
    index: Uint32Array.from(keep),
  };
}

function checkColumns(columns: StateColumns): void {
  const isObject = typeof columns === "object" && columns !== null;
  const stranger = isObject ? Object.keys(columns).find((name) => !known.includes(name)) : columns;
  if (!isObject || stranger !== undefined) {
    const allowed = `{ ${known.join(", ")} }, the last one optional`;
    throw new FermistateError("invalid-option", { argument: "columns", given: stranger, allowed });
  }
  for (const name of known) {
    const column = columns[name as keyof StateColumns];
    if (column === undefined && name === "specificEntropy") continue;
    if (!(Array.isArray(column) || column instanceof Float64Array)) {
      const allowed = "an array of numbers or a Float64Array";
      throw new FermistateError("invalid-option", { argument: name, given: column, allowed });
    }
    const count = columns.density.length;
    if (column.length !== count) {
      const allowed = `${count} rows, as density has`;
      throw new FermistateError("length-mismatch", { argument: name, given: column.length, allowed });
    }
  }
  if (columns.density.length > mostRows) {
    const allowed = `at most ${mostRows} rows`;
    throw new FermistateError("too-large", { argument: "columns", given: columns.density.length, allowed });
  }
}

function finite(argument: string, column: ArrayLike<number>, unit: string): Float64Array {
  return Float64Array.from({ length: column.length }, (_, i) =>
    requireFinite(argument, column[i], `a finite number, ${unit}`, i),
  );
}

function positive(argument: string, column: ArrayLike<number>, unit: string): Float64Array {
  const numbers = finite(argument, column, unit);
  const index = numbers.findIndex((value) => !(value > 0));
  if (index < 0) return numbers;
  throw new FermistateError("out-of-range", { argument, given: numbers[index], allowed: `> 0 ${unit}`, index });
}

function refuseTwin(row: number, twin: number, density: number, temperature: number): never {
  throw new FermistateError("invalid-option", {
    argument: "columns",
    given: `rows ${twin} and ${row} at ${density} g/cm^3, ${temperature} K with different values`,
    allowed: "one row a state (rows that say the same twice are dropped)",
    index: row,
  });
}
