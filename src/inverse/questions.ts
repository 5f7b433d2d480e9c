/** Which two quantities determine a state, and what kind of question a pair is. */
import { FermistateError, requireFinite, withIndex } from "../errors.js";
import {
  BOTH,
  DENSITY_AT_TEMPERATURE,
  ENERGY_KIND,
  ENTHALPY_KIND,
  ENTROPY_KIND,
  PRESSURE_KIND,
  TEMPERATURE_AT_DENSITY,
} from "./slots.js";

/** A quantity that can be given. */
export type GivenName =
  | "density"
  | "temperature"
  | "pressure"
  | "specificEnergy"
  | "specificEntropy"
  | "specificEnthalpy";

/** Values of `First` and one of `Second`, and of no other quantity. */
export type PairOf<Value, First extends GivenName, Second extends GivenName> = Second extends GivenName
  ? { readonly [Name in First | Second]: Value } & {
      readonly [Name in Exclude<GivenName, First | Second>]?: undefined;
    }
  : never;

/**
 * Values of one of the pairs that determine a state: what is not here is refused when it compiles, and when it runs.
 */
export type GivenPair<Value> =
  | PairOf<Value, "density", "temperature" | "pressure" | "specificEnergy" | "specificEntropy" | "specificEnthalpy">
  | PairOf<Value, "temperature", "pressure" | "specificEntropy">
  | PairOf<Value, "pressure", "specificEntropy" | "specificEnergy" | "specificEnthalpy">
  | PairOf<Value, "specificEntropy", "specificEnergy" | "specificEnthalpy">;

/** A pair of given quantities as a search sees it. */
export interface Question {
  /** The names, in the order of the search: what is solved for first comes first. */
  readonly names: readonly [GivenName, GivenName];
  /** TEMPERATURE_AT_DENSITY, DENSITY_AT_TEMPERATURE, BOTH; -1 where density and temperature themselves are given. */
  readonly type: number;
  /** Kind of the first target. */
  readonly first: number;
  /** Kind of the second target where both are unknown. */
  readonly second: number;
}

const question = (names: readonly [GivenName, GivenName], type: number, first: number, second: number = -1): Question =>
  Object.freeze({ names: Object.freeze(names), type, first, second });

/** Every pair that determines a state. At given temperature energy and enthalpy are not monotonic in density. */
const questions: readonly Question[] = [
  question(["density", "temperature"], -1, -1),
  question(["density", "pressure"], TEMPERATURE_AT_DENSITY, PRESSURE_KIND),
  question(["density", "specificEnergy"], TEMPERATURE_AT_DENSITY, ENERGY_KIND),
  question(["density", "specificEntropy"], TEMPERATURE_AT_DENSITY, ENTROPY_KIND),
  question(["density", "specificEnthalpy"], TEMPERATURE_AT_DENSITY, ENTHALPY_KIND),
  question(["temperature", "pressure"], DENSITY_AT_TEMPERATURE, PRESSURE_KIND),
  question(["temperature", "specificEntropy"], DENSITY_AT_TEMPERATURE, ENTROPY_KIND),
  question(["pressure", "specificEntropy"], BOTH, PRESSURE_KIND, ENTROPY_KIND),
  question(["pressure", "specificEnergy"], BOTH, PRESSURE_KIND, ENERGY_KIND),
  question(["pressure", "specificEnthalpy"], BOTH, PRESSURE_KIND, ENTHALPY_KIND),
  question(["specificEnthalpy", "specificEntropy"], BOTH, ENTHALPY_KIND, ENTROPY_KIND),
  question(["specificEnergy", "specificEntropy"], BOTH, ENERGY_KIND, ENTROPY_KIND),
];

/** The question that an object with two of the names asks. @throws `invalid-option` */
export function questionOf(argument: string, given: unknown, others: readonly string[] = []): Question {
  const pairs = questions.map((one) => one.names.join(" + "));
  const refuse = (what: unknown): never => {
    throw new FermistateError("invalid-option", { argument, given: what, allowed: `one pair of ${pairs.join(", ")}` });
  };
  if (typeof given !== "object" || given === null) return refuse(given);
  const keys = Object.entries(given)
    .filter(([key, value]) => value !== undefined && !others.includes(key))
    .map(([key]) => key);
  const found = questions.find((one) => keys.length === 2 && one.names.every((name) => keys.includes(name)));
  return found ?? refuse(keys.length === 0 ? "nothing" : keys.join(" + "));
}

/** Units and signs of what is given. */
const allowed: Readonly<Record<GivenName, string>> = {
  density: "a finite number > 0, g/cm^3",
  temperature: "a finite number >= 0, K",
  pressure: "a finite number > 0, dyn/cm^2",
  specificEnergy: "a finite number, erg/g",
  specificEntropy: "a finite number, erg/(g K)",
  specificEnthalpy: "a finite number, erg/g",
};

/** Refuses a given value that no matter has. @throws `not-a-number`, `out-of-range` */
export function requireGiven(name: GivenName, value: unknown, index?: number, argument: string = name): void {
  const number = requireFinite(argument, value, allowed[name], index);
  const wrong = name === "temperature" ? number < 0 : (name === "density" || name === "pressure") && number <= 0;
  if (wrong) {
    throw new FermistateError("out-of-range", withIndex({ argument, given: number, allowed: allowed[name] }, index));
  }
}
