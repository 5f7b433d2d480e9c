/** Start, search, second attempt: what `solve` and `solveColumns` share. Allocates nothing per question. */
import type { Composition } from "../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { quantityNames } from "../thermodynamics/quantities.js";
import { ANSWERED } from "../thermodynamics/refusal-numbers.js";
import { reasonOf } from "../thermodynamics/refusal-reasons.js";
import { fillFunction } from "./functions.js";
import { predict } from "./predict.js";
import type { Question } from "./questions.js";
import { ROUNDING } from "./search.js";
import { type Searcher, searcherOf } from "./sides.js";
import {
  BEYOND_LOWER,
  BY_U,
  BY_V,
  COEXISTENCE,
  DENSITY_AT_TEMPERATURE,
  DENSITY_NOW,
  ENTROPY_KIND,
  EVALUATIONS,
  FIRST_TARGET,
  FOLLOWS,
  FOUND,
  FUNCTION_LENGTH,
  GUESSED,
  PRESSURE_KIND,
  SIZE,
  STEP_U,
  STEP_V,
  TEMPERATURE_AT_DENSITY,
  TEMPERATURE_NOW,
  WHOLE,
} from "./slots.js";
import { type Starter, starterOf } from "./start.js";

/** A searcher with its starts. */
export interface Solver {
  /** Targets, start and result are in its records. */
  readonly searcher: Searcher;
  /** Condition numbers of density and temperature after {@link Solver.fillConditions}. */
  readonly conditions: Float64Array;
  /** ln of the given density, temperature over the neighbour's: read by {@link Solver.follow}. */
  readonly at: Float64Array;
  /** Answers a question whose targets, known variable and (where guessed) start are in the record; see slots.ts. */
  find(composition: Composition, question: Question): number;
  /** Moves the start from a neighbour's place to where the answer should be. */
  follow(question: Question): void;
  /** Writes the condition numbers of the last result. */
  fillConditions(question: Question): void;
  /**
   * Value of a quantity at T = 0 and the density of the record, after {@link Solver.fillCold}; NaN where there is
   * none.
   */
  readonly cold: Float64Array;
  /** Writes the value of a kind of quantity at T = 0. */
  fillCold(composition: Composition, kind: number): void;
}

/** Slots of quantities by kind. */
const coldSlots: readonly number[] = (
  ["pressure", "specificEnergy", "specificEntropy", "specificEnthalpy"] as const
).map((name) => quantityNames.indexOf(name));

function solverOf(eos: EquationOfState): Solver {
  const searcher = searcherOf(eos);
  const starter: Starter = starterOf(eos);
  const first = eos.evaluator();
  const { w, f, place } = searcher;
  const conditions = new Float64Array(2);
  const at = new Float64Array(2);
  const cold = new Float64Array(FUNCTION_LENGTH);

  function fillCold(composition: Composition, kind: number): void {
    cold[0] = Number.NaN;
    if (!eos.domain.zeroTemperature) return;
    first.point[DENSITY] = w[DENSITY_NOW]!;
    first.point[TEMPERATURE] = 0;
    w[EVALUATIONS]! += 1;
    try {
      first.fillMembers(composition, 2);
      if (first.fillWhereStable(composition) !== ANSWERED) return;
      cold[0] = first.quantities[coldSlots[kind]!]!;
    } catch (error) {
      reasonOf(error); // a liquid has no state at T = 0
    }
  }

  function begin(composition: Composition, { type, first: kind, second }: Question): void {
    if (type === TEMPERATURE_AT_DENSITY) {
      starter.temperature(composition, kind, w);
      return;
    }
    if (type === DENSITY_AT_TEMPERATURE) {
      starter.density(composition, kind, w);
      if (kind !== PRESSURE_KIND || !starter.isRemainder(composition, kind, DENSITY, w)) return;
      evaluate(composition, kind, second);
      starter.againDensity(composition, kind, w, f);
      return;
    }
    starter.both(composition, kind, second, w);
    if (second === ENTROPY_KIND || !starter.isRemainder(composition, second, TEMPERATURE, w)) return;
    evaluate(composition, kind, second);
    starter.again(composition, kind, second, w, f);
  }

  function evaluate(composition: Composition, kind: number, second: number): void {
    first.point[DENSITY] = w[DENSITY_NOW]!;
    first.point[TEMPERATURE] = w[TEMPERATURE_NOW]!;
    first.fillMembers(composition, 3);
    w[EVALUATIONS]! += 1;
    fillFunction(f, 0, kind, first.point, first.members);
    if (second >= 0) fillFunction(f, FUNCTION_LENGTH, second, first.point, first.members);
  }

  function find(composition: Composition, question: Question): number {
    const density = w[DENSITY_NOW]!;
    const temperature = w[TEMPERATURE_NOW]!;
    w[EVALUATIONS] = 0;
    const guessed = w[GUESSED] === 1;
    if (!guessed) begin(composition, question);
    const end = searcher.search(composition, question.type, question.first, question.second);
    if (end === FOUND || !guessed) return orCold(composition, question, end);
    // A bad guess must not cost the answer.
    w[GUESSED] = 0;
    w[FOLLOWS] = 0;
    w[DENSITY_NOW] = density;
    w[TEMPERATURE_NOW] = temperature;
    begin(composition, question);
    const last = searcher.search(composition, question.type, question.first, question.second);
    return orCold(composition, question, last);
  }

  /**
   * T = 0 where the target is the cold value of the density: there the temperature that a search finds is noise (what
   * rounding leaves of it is all of it), or the target lies below that of the lowest temperature, by rounding.
   */
  function orCold(composition: Composition, { type, first: kind }: Question, end: number): number {
    if (type !== TEMPERATURE_AT_DENSITY || kind === ENTROPY_KIND || !eos.domain.zeroTemperature) return end;
    const isNoise = end === FOUND && place[0] !== COEXISTENCE && 8 * 2 ** -52 * f[SIZE]! >= Math.abs(f[BY_V]!);
    if (!isNoise && end !== BEYOND_LOWER) return end;
    fillCold(composition, kind);
    const excess = w[FIRST_TARGET]! - cold[0]!;
    const rounding = ROUNDING * Math.abs(f[SIZE]!);
    if (!(Math.abs(excess) <= rounding && (end === BEYOND_LOWER || excess <= 0))) {
      return isNoise && excess < -rounding ? BEYOND_LOWER : end;
    }
    place[0] = WHOLE;
    w[TEMPERATURE_NOW] = 0;
    w[STEP_U] = 0;
    w[STEP_V] = 0;
    return FOUND;
  }

  function fillConditions({ type }: Question): void {
    conditions.fill(0);
    if (type === TEMPERATURE_AT_DENSITY && w[TEMPERATURE_NOW] === 0) {
      conditions[1] = Number.POSITIVE_INFINITY; // no quantity but entropy has a slope there
      return;
    }
    // 1 for the rounding of the answer itself, and the amplified errors of both given quantities.
    if (place[0] === COEXISTENCE) conditions.fill(1);
    else if (type === TEMPERATURE_AT_DENSITY) conditions[1] = 1 + (f[SIZE]! + Math.abs(f[BY_U]!)) / Math.abs(f[BY_V]!);
    else if (type === DENSITY_AT_TEMPERATURE) conditions[0] = 1 + (f[SIZE]! + Math.abs(f[BY_V]!)) / Math.abs(f[BY_U]!);
    else {
      const sizeA = f[SIZE]!;
      const sizeB = f[FUNCTION_LENGTH + SIZE]!;
      const bU = f[FUNCTION_LENGTH + BY_U]!;
      const bV = f[FUNCTION_LENGTH + BY_V]!;
      const inverse = 1 / Math.abs(f[BY_U]! * bV - f[BY_V]! * bU);
      conditions[0] = 1 + (Math.abs(bV) * sizeA + Math.abs(f[BY_V]!) * sizeB) * inverse;
      conditions[1] = 1 + (Math.abs(bU) * sizeA + Math.abs(f[BY_U]!) * sizeB) * inverse;
    }
  }

  const follow = ({ type }: Question): void => predict(type, w, f, at);
  return { searcher, conditions, at, cold, find, follow, fillConditions, fillCold };
}

const known = new WeakMap<EquationOfState, Solver>();

/** The solver of an equation of state; made at the first question. */
export function solverFor(eos: EquationOfState): Solver {
  let solver = known.get(eos);
  if (solver === undefined) {
    solver = solverOf(eos);
    known.set(eos, solver);
  }
  return solver;
}
