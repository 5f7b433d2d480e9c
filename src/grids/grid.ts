/**
 * A grid: any equation of state over densities and temperatures, as named columns with units.
 *
 * Row r = i_T n_rho + i_rho: the densities of the lowest temperature, then those of the next. An isotherm is one
 * temperature; a single density is legal too. Every number is what `state` gives at that point, to the last bit.
 */
import { FermistateError, isFermistateError } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import type { Domain } from "../thermodynamics/contribution.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { type QuantityName, quantities } from "../thermodynamics/quantities.js";
import { libraryVersion } from "../version.js";
import { type Axis, axisOf } from "./axes.js";
import { type FindingCount, type FindingsColumn, findingsColumns, findingsCounter } from "./findings.js";
import { firstAnswered, type RefusedRowCount, refusedRowCounts } from "./refused.js";
import {
  checkAvailable,
  checkDomain,
  checkEquationOfState,
  checkOptions,
  checkQuantities,
  checkSize,
  errorAt,
  type GridOptions,
} from "./request.js";
import { isIdeal, validityOf } from "./validity.js";

/** Columns of a {@link Grid}, all of the same length: one row per point. */
export type GridColumns = {
  /** Baryon mass density, g/cm^3. */
  readonly density: Float64Array;
  /** Temperature, K. */
  readonly temperature: Float64Array;
} & { readonly [Name in QuantityName | FindingsColumn | "refused"]?: Float64Array };

/** Name of a column: one of the two axes, a quantity, a number of findings, or the reason of a refusal. */
export type ColumnName = "density" | "temperature" | QuantityName | FindingsColumn | "refused";

/**
 * An evaluated grid. The object is frozen; its Float64Arrays cannot be, so treat them as read-only.
 */
export interface Grid {
  /** Number of temperatures and of densities: the slow axis first. */
  readonly shape: readonly [temperatures: number, densities: number];
  /** The axes from slow to fast: row = i_temperature * densities + i_density. */
  readonly order: readonly ["temperature", "density"];
  /** Number of rows, the product of the shape. */
  readonly rows: number;
  /** The axes. */
  readonly axes: { readonly density: Axis; readonly temperature: Axis };
  /** Names of all columns in order: density, temperature, the quantities, then, if asked for, the numbers of findings and `refused`. */
  readonly columnNames: readonly ColumnName[];
  /** The columns by name. */
  readonly columns: GridColumns;
  /** Unit of each column in cgs, "1" for a pure number. */
  readonly units: { readonly [Name in ColumnName]?: string };
  /** The composition, the same at all points. */
  readonly composition: Composition;
  /** Name of the equation of state. */
  readonly equationOfState: string;
  /** Names of its contributions. */
  readonly contributions: readonly string[];
  /** Where the equation of state answers. */
  readonly domain: Domain;
  /** Where its numbers hold and what is not in them, in sentences. */
  readonly validity: readonly string[];
  /** True for electrons and nuclei without interactions. */
  readonly ideal: boolean;
  /** Findings met and at how many points, in the order they were met; undefined where none were asked for. */
  readonly findings: readonly FindingCount[] | undefined;
  /** Reasons for which rows have no state, by number; empty where all have one, undefined where such rows are errors. */
  readonly refusedRows: readonly RefusedRowCount[] | undefined;
  /** Version of this library. */
  readonly libraryVersion: string;
}

/** Quantities of a grid where none are named; the electron's only where a contribution knows it. */
export const defaultQuantities: readonly QuantityName[] = [
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "heatCapacityV",
  "densityExponent",
  "temperatureExponent",
  "gamma1",
  "adiabaticGradient",
  "soundSpeed",
  "electronDegeneracy",
];

/** Rows between two reports of progress: long enough to cost nothing, short enough (some 20 ms) to look alive. */
const chunk = 4096;
/** The same where points are judged too, which takes much longer. */
const judgedChunk = 256;

/**
 * Evaluates an equation of state over density and temperature.
 *
 * Everything is checked before the first point: options, axes, size, domain, and that the quantities exist here.
 *
 * @param equationOfState - any, such as `whiteDwarfMatter()`
 * @param composition - from `composition(...)`, the same at every point
 * @returns the grid; its numbers are finite, or infinite where a quantity is (electron degeneracy at T = 0); never NaN,
 * except in rows that are refused, with `refused: "keep"`
 * @throws FermistateError `invalid-option`, `invalid-composition`, `not-a-number`, `out-of-range`, `outside-domain`,
 * `unavailable-quantity`, `too-large`; where a point inside the domain fails, the message says which
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { grid, logarithmicAxis } from "fermistate/grids";
 * const made = grid(whiteDwarfMatter(), composition({ C12: 0.5, O16: 0.5 }), {
 *   density: logarithmicAxis({ from: 1e4, to: 1e8, pointsPerDecade: 10 }),
 *   temperature: [1e7, 1e8],
 *   quantities: ["pressure", "gamma1"],
 * });
 * made.shape; // => [2, 41]
 * made.units.pressure; // => "dyn/cm^2"
 * ```
 */
export function grid(equationOfState: EquationOfState, composition: Composition, options: GridOptions): Grid {
  checkEquationOfState(equationOfState);
  requireComposition(composition);
  checkOptions(options);
  const density = axisOf("density", options.density);
  const temperature = axisOf("temperature", options.temperature);
  const names = checkQuantities(options.quantities);
  const shape = [temperature.values.length, density.values.length] as const;
  const rows = shape[0] * shape[1];
  const asked = names ?? defaultQuantities;
  const judge = options.findings && findingsCounter(options.findings, equationOfState, composition);
  const keeps = options.refused === "keep";
  const counts: readonly ColumnName[] = [
    ...(judge === undefined ? [] : findingsColumns),
    ...(keeps ? (["refused"] as const) : []),
  ];
  checkSize(rows, 2 + asked.length + counts.length, options);
  if (!keeps) checkDomain(equationOfState, density.values, temperature.values);
  const axes = allocate(["density", "temperature"], rows);
  fillAxes(axes, density.values, temperature.values);
  const first = keeps ? firstAnswered(equationOfState, composition, axes.density, axes.temperature) : 0;
  const at = first === undefined ? first : { density: axes.density[first]!, temperature: axes.temperature[first]! };
  const found = checkAvailable(equationOfState, composition, at, asked, names !== undefined);
  const columnNames: ColumnName[] = ["density", "temperature", ...found, ...counts];

  const columns = { ...allocate([...found, ...counts], rows), ...axes };
  const step = judge === undefined ? chunk : judgedChunk;
  for (let start = 0; start < rows; start += step) {
    const end = Math.min(start + step, rows);
    fillQuantities(equationOfState, composition, columns, found, start, end);
    judge?.count(columns, start, end);
    options.onProgress?.(end, rows);
  }
  const units = Object.fromEntries(columnNames.map((name) => [name, columnOf(name).unit]));
  return Object.freeze({
    shape: Object.freeze(shape),
    order: Object.freeze(["temperature", "density"] as const),
    rows,
    axes: Object.freeze({ density, temperature }),
    columnNames: Object.freeze(columnNames),
    columns: Object.freeze(columns),
    units: Object.freeze(units),
    composition,
    equationOfState: equationOfState.name,
    contributions: Object.freeze(equationOfState.contributions.map((part) => part.name)),
    domain: equationOfState.domain,
    validity: Object.freeze(validityOf(equationOfState)),
    ideal: isIdeal(equationOfState.contributions),
    findings: judge?.met(),
    refusedRows: keeps ? refusedRowCounts(columns.refused) : undefined,
    libraryVersion,
  });
}

/** Unit and meaning of a column. */
export function columnOf(name: ColumnName): { readonly unit: string; readonly description: string } {
  if (name === "density") return { unit: "g/cm^3", description: "baryon mass density rho = n_B m_u" };
  if (name === "temperature") return { unit: "K", description: "temperature T" };
  if (name === "findingsStrained") return { unit: "1", description: "number of assumptions that are strained here" };
  if (name === "findingsOutside") return { unit: "1", description: "number of assumptions that do not hold here" };
  if (name === "refused")
    return { unit: "1", description: "number of the reason why there is no state, 0 for a state" };
  return quantities[name];
}

function allocate(names: readonly ColumnName[], rows: number): Record<ColumnName, Float64Array> {
  try {
    return Object.fromEntries(names.map((name) => [name, new Float64Array(rows)])) as Record<ColumnName, Float64Array>;
  } catch {
    const allowed = `what memory holds; ${names.length} columns of 8 bytes per point were asked for`;
    throw new FermistateError("too-large", { argument: "points", given: rows, allowed });
  }
}

function fillAxes(columns: GridColumns, densities: readonly number[], temperatures: readonly number[]): void {
  const count = densities.length;
  for (let i = 0; i < temperatures.length; i++) {
    columns.density.set(densities, i * count);
    columns.temperature.fill(temperatures[i]!, i * count, (i + 1) * count);
  }
}

/** Fills rows `start` to `end` of the quantities. */
function fillQuantities(
  equationOfState: EquationOfState,
  composition: Composition,
  columns: Record<ColumnName, Float64Array>,
  names: readonly QuantityName[],
  start: number,
  end: number,
): void {
  const part = (name: ColumnName): Float64Array => columns[name].subarray(start, end);
  const output = Object.fromEntries(names.map((name) => [name, part(name)]));
  const input = { density: part("density"), temperature: part("temperature"), composition };
  const refused = columns.refused === undefined ? undefined : new Uint8Array(end - start);
  try {
    equationOfState.evaluate(input, refused === undefined ? output : { ...output, refused });
  } catch (error) {
    throw located(error, columns, start);
  }
  if (refused !== undefined) columns.refused!.set(refused, start);
  for (const [name, column] of Object.entries(output)) {
    // -1 unless there is a NaN, which no row with a state may hold whoever wrote the equation of state.
    const bad = column.findIndex((value, row) => Number.isNaN(value) && !refused?.[row]);
    refused?.forEach((reason, row) => {
      if (reason !== 0) column[row] = Number.NaN;
    });
    if (bad < 0) continue;
    const details = { argument: name, given: Number.NaN, allowed: "a number from the equation of state", index: bad };
    throw located(new FermistateError("not-a-number", details), columns, start);
  }
}

/** The error of a row of a chunk, with the row of the grid and its point. */
function located(error: unknown, columns: GridColumns, start: number): unknown {
  if (!isFermistateError(error) || error.index === undefined) return error;
  const index = start + error.index;
  return errorAt(error, index, columns.density[index]!, columns.temperature[index]!);
}
