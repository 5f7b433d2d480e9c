/** What may be asked of a grid: its options, size, domain and quantities, all checked before the first point. */
import { FermistateError, isFermistateError, requireFinite } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import type { regime } from "../regime/regime.js";
import { holds, refusePoint } from "../thermodynamics/domain.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";
import { optionalQuantities, type QuantityName, quantities, quantityNames } from "../thermodynamics/quantities.js";
import type { Axis } from "./axes.js";
import { nearestWord } from "./nearest.js";

/** Options of `grid`. */
export interface GridOptions {
  /** Baryon mass densities, g/cm^3: an axis, a list of increasing numbers, or one number. */
  readonly density: Axis | ArrayLike<number> | number;
  /** Temperatures, K: an axis, a list of increasing numbers, or one number. */
  readonly temperature: Axis | ArrayLike<number> | number;
  /**
   * Quantities, in the order of the columns.
   * @defaultValue pressure, specificEnergy, specificEntropy, heatCapacityV, densityExponent, temperatureExponent, gamma1, adiabaticGradient,
   * soundSpeed and, where a contribution knows it, electronDegeneracy
   */
  readonly quantities?: readonly QuantityName[];
  /**
   * The function `regime` of the core: judges every point, adds the columns findingsStrained and findingsOutside and the
   * list `findings`. Handed in, so that grids without it stay small in a browser. Costs some 70 microseconds per point.
   * @defaultValue none
   */
  readonly findings?: typeof regime;
  /**
   * "keep": a row without a state (unstable, outside the domain) stays in the grid, without numbers, and a last column `refused` has
   * the number of its reason (`refusalReasons`; 0 for a state). In the columns of the grid its quantities are NaN, the only NaN
   * a grid ever has; files have an empty field (CSV), null (JSON, Parquet) or NaN (.npz). "throw": such a row is an error.
   * @defaultValue "throw"
   */
  readonly refused?: "throw" | "keep";
  /** Most points. @defaultValue 1e7 */
  readonly maximumPoints?: number;
  /** Most numbers in all columns together, 8 bytes each. @defaultValue 1.5e8 (1.2 GB) */
  readonly maximumCells?: number;
  /** Called after every few thousand points with the number of points done and of all; may throw to stop. */
  readonly onProgress?: (done: number, total: number) => void;
}

const known = ["density", "temperature", "quantities", "findings", "refused"].concat([
  "maximumPoints",
  "maximumCells",
  "onProgress",
]);

/** Refuses options that are not there or not what they should be; values are checked by those who read them. */
export function checkOptions(options: GridOptions): void {
  const allowed = `an object with density, temperature and perhaps ${known.slice(2).join(", ")}`;
  if (typeof options !== "object" || options === null) throw invalid("options", options, allowed);
  for (const name of Object.keys(options)) {
    if (!known.includes(name)) throw invalid("options", name, allowed);
  }
  if (options.onProgress !== undefined && typeof options.onProgress !== "function") {
    throw invalid("onProgress", options.onProgress, "a function of (done, total)");
  }
  if (options.findings !== undefined && typeof options.findings !== "function") {
    throw invalid("findings", options.findings, "the function regime of fermistate");
  }
  if (options.refused !== undefined && options.refused !== "throw" && options.refused !== "keep") {
    throw invalid("refused", options.refused, '"throw" or "keep"');
  }
}

/** Refuses what cannot be asked for states. */
export function checkEquationOfState(given: EquationOfState): void {
  const allowed = "an equation of state, such as whiteDwarfMatter() or combine(...)";
  const good = typeof given?.evaluate === "function" && typeof given.state === "function" && Boolean(given.domain);
  if (!good || !Array.isArray(given.contributions)) throw invalid("equationOfState", given, allowed);
}

/** Names that exist, each once. */
export function checkQuantities(names: readonly QuantityName[] | undefined): readonly QuantityName[] | undefined {
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

/** Refuses a grid larger than the limits. */
export function checkSize(rows: number, width: number, options: GridOptions): void {
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
export function checkDomain(eos: EquationOfState, densities: readonly number[], temperatures: readonly number[]): void {
  const [density] = densities as readonly [number];
  const temperature = temperatures.at(-1)!;
  for (const rho of densities)
    if (!holds(eos.domain, rho, temperature)) refusePoint(eos.contributions, rho, temperature);
  for (const t of temperatures) if (!holds(eos.domain, density, t)) refusePoint(eos.contributions, density, t);
}

/** Quantities that exist at the point `at`, the first one with a state; electron quantities are left out of the default, and refused when asked for by name. */
export function checkAvailable(
  equationOfState: EquationOfState,
  composition: Composition,
  at: { readonly density: number; readonly temperature: number } | undefined,
  names: readonly QuantityName[],
  byName: boolean,
): QuantityName[] {
  // Without any state nothing is known: what was asked for stays, its columns are empty.
  const probe = at && firstState(equationOfState, at.density, at.temperature, composition);
  const isMissing = (name: QuantityName): boolean => (probe === undefined ? !byName : probe[name] === undefined);
  const missing = names.filter((name) => optionalQuantities.includes(name) && isMissing(name));
  const [first] = missing;
  if (byName && first !== undefined) {
    const allowed = "quantities that a contribution provides; this one needs the electron gas";
    throw new FermistateError("unavailable-quantity", { argument: "quantities", given: first, allowed });
  }
  return names.filter((name) => !missing.includes(name));
}

function firstState(
  equationOfState: EquationOfState,
  density: number,
  temperature: number,
  composition: Composition,
): State {
  try {
    return equationOfState.state(density, temperature, composition);
  } catch (error) {
    throw isFermistateError(error) ? errorAt(error, 0, density, temperature) : error;
  }
}

/** The error of a point, with its row of the grid and where that lies. */
export function errorAt(error: FermistateError, index: number, density: number, temperature: number): FermistateError {
  const { code, argument, given, allowed } = error;
  const at = `at density ${density} g/cm^3, temperature ${temperature} K`;
  return new FermistateError(code, { argument, given, allowed: `${allowed}; ${at}`, index });
}

function invalid(argument: string, given: unknown, allowed: string): FermistateError {
  return new FermistateError("invalid-option", { argument, given, allowed });
}
