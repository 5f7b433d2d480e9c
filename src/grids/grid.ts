/**
 * A grid: any equation of state over densities and temperatures, as named columns with units.
 *
 * Row r = i_T n_rho + i_rho: the densities of the lowest temperature, then those of the next. An isotherm is one
 * temperature; a single density is legal too. Every number is what `state` gives at that point, to the last bit.
 */
import { FermistateError, isFermistateError, requireFinite } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import type { Domain } from "../thermodynamics/contribution.js";
import { holds, refusePoint } from "../thermodynamics/domain.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { optionalQuantities, type QuantityName, quantities, quantityNames } from "../thermodynamics/quantities.js";
import { libraryVersion } from "../version.js";
import { type Axis, axisOf } from "./axes.js";
import { nearestWord } from "./nearest.js";
import { isIdeal, validityOf } from "./validity.js";

/** Options of {@link grid}. */
export interface GridOptions {
  /** Baryon mass densities, g/cm^3: an axis, a list of increasing numbers, or one number. */
  readonly density: Axis | ArrayLike<number> | number;
  /** Temperatures, K: an axis, a list of increasing numbers, or one number. */
  readonly temperature: Axis | ArrayLike<number> | number;
  /**
   * Quantities, in the order of the columns.
   * @defaultValue pressure, specificEnergy, specificEntropy, heatCapacityV, chiRho, chiT, gamma1, adiabaticGradient,
   * soundSpeed and, where a contribution knows it, electronDegeneracy
   */
  readonly quantities?: readonly QuantityName[];
  /** Most points. @defaultValue 1e7 */
  readonly maximumPoints?: number;
  /** Most numbers in all columns together, 8 bytes each. @defaultValue 1.5e8 (1.2 GB) */
  readonly maximumCells?: number;
  /** Called after every few thousand points with the number of points done and of all; may throw to stop. */
  readonly onProgress?: (done: number, total: number) => void;
}

/** Columns of a {@link Grid}, all of the same length: one row per point. */
export type GridColumns = {
  /** Baryon mass density, g/cm^3. */
  readonly density: Float64Array;
  /** Temperature, K. */
  readonly temperature: Float64Array;
} & { readonly [Name in QuantityName]?: Float64Array };

/** Name of a column: a quantity, or one of the two axes. */
export type ColumnName = "density" | "temperature" | QuantityName;

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
  /** Names of all columns in order: density, temperature, then the quantities. */
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
  /** Version of this library. */
  readonly libraryVersion: string;
}

/** Quantities of a grid where none are named; the electron's only where a contribution knows it. */
export const defaultQuantities: readonly QuantityName[] = [
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "heatCapacityV",
  "chiRho",
  "chiT",
  "gamma1",
  "adiabaticGradient",
  "soundSpeed",
  "electronDegeneracy",
];

/** Rows between two reports of progress: long enough to cost nothing, short enough (some 20 ms) to look alive. */
const chunk = 4096;

/**
 * Evaluates an equation of state over density and temperature.
 *
 * Everything is checked before the first point: options, axes, size, domain, and that the quantities exist here.
 *
 * @param equationOfState - any, such as `whiteDwarfMatter()`
 * @param composition - from `composition(...)`, the same at every point
 * @returns the grid; its numbers are finite, or infinite where a quantity is (electron degeneracy at T = 0); never NaN
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
  checkSize(rows, asked.length + 2, options);
  checkDomain(equationOfState, density.values, temperature.values);
  const columnNames = checkAvailable(equationOfState, composition, density, temperature, asked, names !== undefined);

  const columns = allocate(columnNames, rows);
  fillAxes(columns, density.values, temperature.values);
  fillQuantities(equationOfState, composition, columns, columnNames, options.onProgress);
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
    libraryVersion,
  });
}

/** Unit and meaning of a column. */
export function columnOf(name: ColumnName): { readonly unit: string; readonly description: string } {
  if (name === "density") return { unit: "g/cm^3", description: "baryon mass density rho = n_B m_u" };
  if (name === "temperature") return { unit: "K", description: "temperature T" };
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

function fillQuantities(
  equationOfState: EquationOfState,
  composition: Composition,
  columns: Record<ColumnName, Float64Array>,
  names: readonly ColumnName[],
  onProgress: GridOptions["onProgress"],
): void {
  const rows = columns.density.length;
  for (let start = 0; start < rows; start += chunk) {
    const end = Math.min(start + chunk, rows);
    const part = (name: ColumnName): Float64Array => columns[name].subarray(start, end);
    const output = Object.fromEntries(names.slice(2).map((name) => [name, part(name)]));
    const input = { density: part("density"), temperature: part("temperature"), composition };
    try {
      equationOfState.evaluate(input, output);
    } catch (error) {
      throw located(error, columns, start);
    }
    for (const [name, column] of Object.entries(output)) {
      // -1 unless there is a NaN, which no column may hold whoever wrote the equation of state.
      const bad = column.findIndex(Number.isNaN);
      if (bad < 0) continue;
      const details = { argument: name, given: Number.NaN, allowed: "a number from the equation of state", index: bad };
      throw located(new FermistateError("not-a-number", details), columns, start);
    }
    onProgress?.(end, rows);
  }
}

/** The error of a row of a chunk, with the row of the grid and its point. */
function located(error: unknown, columns: GridColumns, start: number): unknown {
  if (!isFermistateError(error) || error.index === undefined) return error;
  const index = start + error.index;
  const at = `at density ${columns.density[index]} g/cm^3, temperature ${columns.temperature[index]} K`;
  const { code, argument, given, allowed } = error;
  return new FermistateError(code, { argument, given, allowed: `${allowed}; ${at}`, index });
}

const known = ["density", "temperature", "quantities", "maximumPoints", "maximumCells", "onProgress"];

function checkOptions(options: GridOptions): void {
  const allowed = `an object with density, temperature and perhaps ${known.slice(2).join(", ")}`;
  if (typeof options !== "object" || options === null) throw invalid("options", options, allowed);
  for (const name of Object.keys(options)) {
    if (!known.includes(name)) throw invalid("options", name, allowed);
  }
  if (options.onProgress !== undefined && typeof options.onProgress !== "function") {
    throw invalid("onProgress", options.onProgress, "a function of (done, total)");
  }
}

function checkEquationOfState(given: EquationOfState): void {
  const allowed = "an equation of state, such as whiteDwarfMatter() or combine(...)";
  const good = typeof given?.evaluate === "function" && typeof given.state === "function" && Boolean(given.domain);
  if (!good || !Array.isArray(given.contributions)) throw invalid("equationOfState", given, allowed);
}

function checkQuantities(names: readonly QuantityName[] | undefined): readonly QuantityName[] | undefined {
  if (names === undefined) return undefined;
  if (!Array.isArray(names) || names.length === 0) {
    throw invalid("quantities", names, "a list of at least one name of quantityNames");
  }
  const seen = new Set<string>();
  for (const name of names as readonly unknown[]) {
    if (typeof name !== "string" || !Object.hasOwn(quantities, name)) throw unknownQuantity(name);
    if (seen.has(name)) throw invalid("quantities", `${name} twice`, "each quantity once");
    seen.add(name);
  }
  return [...names];
}

function unknownQuantity(name: unknown): FermistateError {
  const near = typeof name === "string" ? nearestWord(name, quantityNames) : undefined;
  const allowed = `${near === undefined ? "" : `perhaps ${near}; `}one of ${quantityNames.join(", ")}`;
  return new FermistateError("unavailable-quantity", { argument: "quantities", given: name, allowed });
}

function checkSize(rows: number, width: number, options: GridOptions): void {
  const points = requireLimit("maximumPoints", options.maximumPoints ?? 1e7);
  const cells = requireLimit("maximumCells", options.maximumCells ?? 1.5e8);
  if (rows > points) {
    const allowed = `at most ${points} (maximumPoints)`;
    throw new FermistateError("too-large", { argument: "points", given: rows, allowed });
  }
  if (rows * width > cells) {
    const allowed = `at most ${cells} numbers in ${width} columns (maximumCells)`;
    throw new FermistateError("too-large", { argument: "points", given: rows, allowed });
  }
}

function requireLimit(argument: string, value: unknown): number {
  const limit = requireFinite(argument, value, "a finite number >= 1");
  if (limit >= 1) return limit;
  throw new FermistateError("out-of-range", { argument, given: limit, allowed: "a finite number >= 1" });
}

/** The domain is a rectangle and perhaps T = 0, so every axis value is checked once, not every point. */
function checkDomain(eos: EquationOfState, densities: readonly number[], temperatures: readonly number[]): void {
  const [density] = densities as readonly [number];
  const temperature = temperatures.at(-1)!;
  for (const rho of densities)
    if (!holds(eos.domain, rho, temperature)) refusePoint(eos.contributions, rho, temperature);
  for (const t of temperatures) if (!holds(eos.domain, density, t)) refusePoint(eos.contributions, density, t);
}

/** Names of the columns; electron quantities are left out of the default, and refused when asked for by name. */
function checkAvailable(
  equationOfState: EquationOfState,
  composition: Composition,
  density: Axis,
  temperature: Axis,
  names: readonly QuantityName[],
  byName: boolean,
): ColumnName[] {
  const probe = equationOfState.state(density.values[0]!, temperature.values[0]!, composition);
  const missing = names.filter((name) => optionalQuantities.includes(name) && probe[name] === undefined);
  const [first] = missing;
  if (byName && first !== undefined) {
    const allowed = "quantities that a contribution provides; this one needs the electron gas";
    throw new FermistateError("unavailable-quantity", { argument: "quantities", given: first, allowed });
  }
  return ["density", "temperature", ...names.filter((name) => !missing.includes(name))];
}

function invalid(argument: string, given: unknown, allowed: string): FermistateError {
  return new FermistateError("invalid-option", { argument, given, allowed });
}
