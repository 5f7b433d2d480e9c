/** Inverse questions, one at a time: the state that has two given quantities. */
import { FermistateError, requireKnown } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import { holds, refusePoint } from "../thermodynamics/domain.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";
import { quantityNames } from "../thermodynamics/quantities.js";
import { stateFrom } from "../thermodynamics/state.js";
import { finish } from "./finish.js";
import { fillFromState } from "./neighbour.js";
import { type GivenName, type GivenPair, type Question, questionOf, requireGiven } from "./questions.js";
import { refuseQuestion } from "./refusal.js";
import {
  BOTH,
  COEXISTENCE,
  DENSITY_NOW,
  EVALUATIONS,
  FIRST_TARGET,
  FOLLOWS,
  FOUND,
  FUNCTION_LENGTH,
  GUESSED,
  SECOND_TARGET,
  SIZE,
  TEMPERATURE_AT_DENSITY,
  TEMPERATURE_NOW,
} from "./slots.js";
import { type Solver, solverFor } from "./solver.js";

/**
 * Two given quantities, in the units of a state: one of the pairs that {@link solve} lists. TypeScript
 * refuses others; an object whose names are known at run time alone needs `as object as Given`;
 * `solve` checks it all the same.
 */
export type Given = GivenPair<number>;

/** Where to begin: numbers, or the state of a neighbour, whose derivatives then lead to the answer. */
export interface Guess {
  /** g/cm^3. */
  readonly density?: number;
  /** K. */
  readonly temperature?: number;
}

/** Options of {@link solve}. */
export interface SolveOptions {
  /** A start: finite numbers; what is missing in it, or far off, is made up for. */
  readonly guess?: Guess | State;
}

/** What {@link solve} returns. */
export interface Solution {
  /**
   * The state. Its given quantities are those asked for up to `residual`. Where liquid and crystal coexist its
   * `crystalFraction` lies between 0 and 1, first-order quantities follow the lever rule, and second-order ones are those at fixed
   * solid fraction.
   */
  readonly state: State;
  /** Evaluations of the free energy it took. */
  readonly evaluations: number;
  /** Largest deviation of a given quantity from the state's, relative to the size of its terms. */
  readonly residual: number;
  /**
   * By how much relative errors of the two given quantities (energies relative to |e| + P/rho, an entropy to |s| + c_v) are
   * amplified in density and temperature, and 1 for the rounding of the answer itself; 0 for what was given. In degenerate matter energy and pressure hardly depend on temperature, and this is
   * large.
   */
  readonly conditionNumber: { readonly density: number; readonly temperature: number };
  /**
   * Relative uncertainty of density and temperature that rounding of the given quantities and of the equation of state leaves: 8 x 2^-52 times the condition
   * number. Where it is not small the temperature is noise.
   */
  readonly uncertainty: { readonly density: number; readonly temperature: number };
}

/**
 * The state of matter that has two given quantities.
 *
 * Pairs: density with temperature, pressure, specificEnergy, specificEntropy or specificEnthalpy; temperature with pressure or
 * specificEntropy; pressure with specificEntropy, specificEnergy or specificEnthalpy; specificEntropy with specificEnthalpy or
 * specificEnergy. (At given temperature energy and enthalpy are not one-valued in density.)
 *
 * Steps of third order in the logarithms, bracketed; see docs/guide/solving.md for the method, its measured cost and
 * the rules at the freezing boundary. Energy, pressure or enthalpy below the cold value of a density is refused with
 * that value; equal to it to rounding the answer is T = 0, where that is legal, with an infinite condition number of
 * the temperature.
 *
 * @throws `invalid-option` (no such pair), `not-a-number`, `out-of-range`, `outside-domain`, `invalid-composition`;
 * `below-cold` and `no-solution`, which carry the limiting value as `limit`; `unstable`
 * @example
 * ```ts
 * import { composition, solve, whiteDwarfMatter } from "fermistate";
 * const matter = whiteDwarfMatter();
 * const core = composition({ C12: 0.5, O16: 0.5 });
 * const { pressure, specificEnergy } = matter.state(2e6, 1e7, core);
 * solve(matter, core, { density: 2e6, specificEnergy }).state.temperature; // => 1e7
 * solve(matter, core, { pressure, temperature: 1e7 }).state.density; // => 2e6
 * ```
 */
export function solve(
  equationOfState: EquationOfState,
  composition: Composition,
  given: Given,
  options: SolveOptions = {},
): Solution {
  requireComposition(composition);
  requireKnown("options", options, ["guess"]);
  const question = questionOf("given", given);
  for (const name of question.names) requireGiven(name, given[name]);
  const [first, second] = question.names.map((name) => given[name] as number) as [number, number];
  requireInside(equationOfState, question, first, second);
  if (question.type < 0) return direct(equationOfState.state(first, second, composition));
  const solver = solverFor(equationOfState);
  const { w } = solver.searcher;
  place(solver, question, first, second);
  w[FOLLOWS] = 0;
  w[GUESSED] = guess(solver, question, options) ? 1 : 0;
  const end = solver.find(composition, question);
  if (end !== FOUND) {
    if (question.type === TEMPERATURE_AT_DENSITY) w[DENSITY_NOW] = first;
    refuseQuestion(equationOfState, composition, solver, question, end);
  }
  return solutionOf(solver, composition, question, first, second);
}

/** Writes the given values where the search reads them. */
function place({ searcher: { w } }: Solver, { type }: Question, first: number, second: number): void {
  const density = type === TEMPERATURE_AT_DENSITY;
  w[FIRST_TARGET] = type === BOTH ? first : second;
  w[SECOND_TARGET] = second;
  w[DENSITY_NOW] = density ? first : 1;
  w[TEMPERATURE_NOW] = density || type === BOTH ? 1 : first;
}

/** Refuses a known density or temperature outside the domain. */
function requireInside(eos: EquationOfState, { names, type }: Question, first: number, second: number): void {
  const density = names[0] === "density" ? first : eos.domain.density[0];
  const temperature = names[0] === "temperature" ? first : type < 0 ? second : eos.domain.temperature[0];
  if (!holds(eos.domain, density, temperature)) refusePoint(eos.contributions, density, temperature);
}

/** Writes the start that a guess gives; false where it gives none. */
function guess(solver: Solver, { names, type, first, second }: Question, options: SolveOptions): boolean {
  const { guess: start } = options;
  if (start === undefined) return false;
  if (typeof start !== "object" || start === null) {
    throw new FermistateError("invalid-option", {
      argument: "options.guess",
      given: start,
      allowed: "an object with density, temperature or both, such as the state of a neighbour",
    });
  }
  const isState = "pressureByDensity" in start;
  if (!isState) requireKnown("options.guess", start, ["density", "temperature"]);
  const { w, f } = solver.searcher;
  const density = names[0] === "density" ? w[DENSITY_NOW]! : start.density;
  const temperature = names[0] === "temperature" ? w[TEMPERATURE_NOW]! : start.temperature;
  for (const [name, value] of [
    ["density", density],
    ["temperature", temperature],
  ] as const) {
    if (value === undefined) return false;
    requireGiven(name, value, undefined, `guess.${name}`);
  }
  if (isState && start.temperature > 0) {
    solver.at[0] = Math.log(density! / start.density);
    solver.at[1] = Math.log(temperature! / start.temperature);
    fillFromState(f, 0, first, start);
    if (second >= 0) fillFromState(f, FUNCTION_LENGTH, second, start);
    w[DENSITY_NOW] = density!;
    w[TEMPERATURE_NOW] = temperature!;
    solver.follow({ names, type, first, second });
    w[FOLLOWS] = 0; // the evaluator was elsewhere
    return true;
  }
  w[DENSITY_NOW] = density!;
  w[TEMPERATURE_NOW] = temperature!;
  return true;
}

const slotOf = (name: GivenName): number => quantityNames.indexOf(name as (typeof quantityNames)[number]);

function solutionOf(
  solver: Solver,
  composition: Composition,
  question: Question,
  first: number,
  second: number,
): Solution {
  const { searcher, conditions } = solver;
  const { w, f } = searcher;
  const sizes = [Math.abs(f[SIZE]!), Math.abs(f[FUNCTION_LENGTH + SIZE]!)];
  solver.fillConditions(question);
  const [byDensity, byTemperature] = [conditions[0]!, conditions[1]!];
  const ev = finish(searcher, composition, true);
  ev.fillThermodynamics(composition, -1);
  ev.fillPlasma();
  const { quantities, point } = ev;
  let residual = 0;
  const targets = question.type === BOTH ? [first, second] : [second];
  const names = question.type === BOTH ? question.names : [question.names[1]];
  for (const [i, name] of names.entries()) {
    const size = searcher.place[0] === COEXISTENCE ? Math.abs(targets[i]!) : sizes[i]!;
    residual = Math.max(residual, Math.abs(quantities[slotOf(name)]! - targets[i]!) / size);
  }
  const density = question.names[0] === "density" ? first : point[0]!;
  const temperature = question.names[0] === "temperature" ? first : point[1]!;
  const rounding = 8 * 2 ** -52;
  return Object.freeze({
    state: stateFrom(density, temperature, composition, quantities),
    evaluations: w[EVALUATIONS]!,
    residual,
    conditionNumber: Object.freeze({ density: byDensity, temperature: byTemperature }),
    uncertainty: Object.freeze({ density: rounding * byDensity, temperature: rounding * byTemperature }),
  });
}

/** Density and temperature are given: nothing to search. */
function direct(state: State): Solution {
  const nothing = Object.freeze({ density: 0, temperature: 0 });
  return Object.freeze({ state, evaluations: 1, residual: 0, conditionNumber: nothing, uncertainty: nothing });
}
