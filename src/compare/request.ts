/** What may be asked of a comparison; all checked before the first point. */
import { FermistateError, requireFinite } from "../errors.js";
import { type Axis, axisOf } from "../grids/axes.js";
import { checkEquationOfState, checkQuantities } from "../grids/request.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import type { QuantityName } from "../thermodynamics/quantities.js";

/** Options of {@link compare}. */
export interface CompareOptions {
  /** One composition for both, or one for each. */
  readonly composition: Composition | readonly [a: Composition, b: Composition];
  /** Baryon mass densities, g/cm^3: an axis, a list of increasing numbers, or one number. */
  readonly density: Axis | ArrayLike<number> | number;
  /** Temperatures, K: an axis, a list of increasing numbers, or one number. */
  readonly temperature: Axis | ArrayLike<number> | number;
  /**
   * Quantities to compare.
   * @defaultValue pressure, specificEnergy, specificEntropy, heatCapacityV, densityExponent, temperatureExponent, gamma1, adiabaticGradient, soundSpeed
   */
  readonly quantities?: readonly QuantityName[];
  /** What the two are called in texts and maps. @defaultValue "first" and "second" */
  readonly names?: readonly [a: string, b: string];
  /** Measure the thermodynamic inconsistency of each; half of the time. @defaultValue true */
  readonly consistency?: boolean;
  /** Most points. @defaultValue 1e5 */
  readonly maximumPoints?: number;
  /** Called after every row with the number of points done and of all; may throw to stop. */
  readonly onProgress?: (done: number, total: number) => void;
}

/** The options, read. */
export interface Request {
  readonly compositions: readonly [Composition, Composition];
  readonly density: Axis;
  readonly temperature: Axis;
  readonly quantities: readonly QuantityName[];
  readonly names: readonly [string, string];
  readonly consistency: boolean;
  readonly onProgress: (done: number, total: number) => void;
}

const known = [
  "composition",
  "density",
  "temperature",
  "quantities",
  "names",
  "consistency",
  "maximumPoints",
  "onProgress",
];

/** Quantities where none are named. */
export const standardQuantities: readonly QuantityName[] = [
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "heatCapacityV",
  "densityExponent",
  "temperatureExponent",
  "gamma1",
  "adiabaticGradient",
  "soundSpeed",
];

/** Checks both equations of state and the options. */
export function readRequest(a: EquationOfState, b: EquationOfState, options: CompareOptions): Request {
  checkEquationOfState(a);
  checkEquationOfState(b);
  if (typeof options !== "object" || options === null) {
    throw invalid("options", options, `an object of ${known.join(", ")}`);
  }
  for (const name of Object.keys(options)) if (!known.includes(name)) throw invalid("options", name, known.join(", "));
  const { composition, names = ["first", "second"], consistency = true, onProgress = () => {} } = options;
  const pair = (Array.isArray(composition) ? composition : [composition, composition]) as readonly Composition[];
  if (pair.length !== 2) throw invalid("composition", composition, "one composition, or one for each");
  for (const one of pair) requireComposition(one);
  const isPair = Array.isArray(names) && names.length === 2;
  if (!isPair || !names.every((one) => typeof one === "string" && one !== "") || names[0] === names[1]) {
    throw invalid("names", names, "two different names");
  }
  if (typeof consistency !== "boolean") throw invalid("consistency", consistency, "true or false");
  if (typeof onProgress !== "function") throw invalid("onProgress", onProgress, "a function of (done, total)");
  const density = axisOf("density", options.density);
  const temperature = axisOf("temperature", options.temperature);
  if (!(density.values[0]! > 0)) {
    throw new FermistateError("out-of-range", { argument: "density", given: density.values[0], allowed: "> 0 g/cm^3" });
  }
  const limit = requireFinite("maximumPoints", options.maximumPoints ?? 1e5, "a finite number >= 1");
  const points = density.values.length * temperature.values.length;
  if (points > limit) {
    const allowed = `at most ${limit} (maximumPoints)`;
    throw new FermistateError("too-large", { argument: "points", given: points, allowed });
  }
  return {
    compositions: [pair[0]!, pair[1]!],
    density,
    temperature,
    quantities: checkQuantities(options.quantities) ?? standardQuantities,
    names: [names[0], names[1]],
    consistency,
    onProgress,
  };
}

function invalid(argument: string, given: unknown, allowed: string): FermistateError {
  return new FermistateError("invalid-option", { argument, given, allowed });
}
