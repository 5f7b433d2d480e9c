/** Inverse questions by the column: each row starts from its neighbour's answer, nothing is allocated per row. */
import { FermistateError, requireKnown } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { type CompositionInput, type CompositionSource, compositionSource } from "../matter/composition-rows.js";
import { DENSITY, POINT_LENGTH, TEMPERATURE } from "../matter/point.js";
import { checkRefused, refuseQuantity, requireColumn, requireObject, requireRows } from "../thermodynamics/columns.js";
import type { Domain } from "../thermodynamics/contribution.js";
import { holds, refusePoint } from "../thermodynamics/domain.js";
import type { EquationOfState, RefusedRows } from "../thermodynamics/equation-of-state.js";
import { type QuantityName, quantities, quantityNames } from "../thermodynamics/quantities.js";
import { ANSWERED, DENSITY_TOO_LOW, GIVEN_NO_NUMBER, GIVEN_NOT_POSITIVE } from "../thermodynamics/refusal-numbers.js";
import { reasonOf, reasonOutside } from "../thermodynamics/refusal-reasons.js";
import { finish } from "./finish.js";
import { type GivenPair, type Question, questionOf, requireGiven } from "./questions.js";
import { reasonOfEnd, refuseQuestion } from "./refusal.js";
import {
  BOTH,
  COEXISTENCE,
  DENSITY_AT_TEMPERATURE,
  DENSITY_NOW,
  EVALUATIONS,
  FIRST_TARGET,
  FOLLOWS,
  FOUND,
  GUESSED,
  SECOND_TARGET,
  TEMPERATURE_AT_DENSITY,
  TEMPERATURE_NOW,
} from "./slots.js";
import { solverFor } from "./solver.js";

/** Input of {@link solveColumns}: two columns of given quantities, composition, and guesses. */
export type SolveInput = GivenPair<Float64Array> & {
  /** One composition for all rows, one per row, or a matrix of nucleon fractions with a row for each. */
  readonly composition: CompositionInput;
  /**
   * Columns of starts (density, temperature). A row whose start is no positive number has none, and starts as all do without these
   * columns: from the answer of the row before.
   */
  readonly guess?: { readonly density?: Float64Array; readonly temperature?: Float64Array };
};

/** What a search tells beside the quantities of the state. */
export type SearchColumn =
  | "density"
  | "temperature"
  | "evaluations"
  | "densityConditionNumber"
  | "temperatureConditionNumber";

/** Output of {@link solveColumns}: columns of the caller; only those given are written. */
export type SolveOutput = { readonly [Name in QuantityName | SearchColumn]?: Float64Array } & RefusedRows;

const searchColumns: readonly SearchColumn[] = [
  "density",
  "temperature",
  "evaluations",
  "densityConditionNumber",
  "temperatureConditionNumber",
];

/**
 * After so many rows one starts afresh instead of from its neighbour: blocks of a batch can then be answered apart, by
 * several threads, with the same bits.
 */
export const ROWS_IN_A_CHAIN = 1024;

/**
 * The states that have two given quantities, row by row; see {@link solve}.
 *
 * Rows that are neighbours in a model are worth keeping in order: a row starts from the third-order expansion about the
 * one before, and where they differ by a per cent it takes two evaluations, often one. The columns of the output may be those
 * of the input. Without a column `refused` in the output, values that no matter has (NaN, a negative density) are refused
 * before the first row is written, and where a row has no answer the error names it; rows before it are written, those after it not.
 *
 * @throws as {@link solve}, with the row; `length-mismatch`, `unavailable-quantity`
 */
export function solveColumns(equationOfState: EquationOfState, input: SolveInput, output: SolveOutput): void {
  const checked = checkSolve(equationOfState, input, output);
  const { question, first, second, count, compositions, guessed, slots, columns, detail } = checked;
  const { refused } = output;
  if (question.type < 0) {
    direct(equationOfState, { density: first, temperature: second, composition: input.composition }, output);
    return;
  }

  const solver = solverFor(equationOfState);
  const { searcher, at, conditions } = solver;
  const { w, place } = searcher;
  const wantsConditions =
    output.densityConditionNumber !== undefined || output.temperatureConditionNumber !== undefined;
  const knowsDensity = question.type === TEMPERATURE_AT_DENSITY;
  const knowsTemperature = question.type === DENSITY_AT_TEMPERATURE;
  let neighbour: Composition | undefined;

  /** Answers a row; the number of the reason where there is no answer and a column for it. */
  function answer(i: number): number {
    const matter = compositions.one ?? compositions.at(i);
    const starts = guessed !== undefined && isStart(guessed.density, i) && isStart(guessed.temperature, i);
    const follows = !starts && isNear(neighbour, matter) && w[TEMPERATURE_NOW]! > 0;
    if (follows) {
      at[0] = knowsDensity ? Math.log(first[i]! / w[DENSITY_NOW]!) : 0;
      at[1] = knowsTemperature ? Math.log(first[i]! / w[TEMPERATURE_NOW]!) : 0;
    }
    w[FIRST_TARGET] = question.type === BOTH ? first[i]! : second[i]!;
    w[SECOND_TARGET] = second[i]!;
    w[GUESSED] = follows || starts ? 1 : 0;
    if (knowsDensity) w[DENSITY_NOW] = first[i]!;
    else if (starts && guessed?.density !== undefined) w[DENSITY_NOW] = guessed.density[i]!;
    else if (!follows) w[DENSITY_NOW] = 1;
    if (knowsTemperature) w[TEMPERATURE_NOW] = first[i]!;
    else if (starts && guessed?.temperature !== undefined) w[TEMPERATURE_NOW] = guessed.temperature[i]!;
    else if (!follows) w[TEMPERATURE_NOW] = 1;
    w[FOLLOWS] = 0;
    if (follows) solver.follow(question);
    if (neighbour !== matter) w[FOLLOWS] = 0;
    const end = solver.find(matter, question);
    if (end !== FOUND) {
      if (knowsDensity) w[DENSITY_NOW] = first[i]!;
      if (refused !== undefined) return reasonOfEnd(matter, solver, question, end);
      refuseQuestion(equationOfState, matter, solver, question, end, i);
    }
    if (wantsConditions) solver.fillConditions(question);
    const ev = finish(searcher, matter, detail);
    if (refused === undefined) ev.fillThermodynamics(matter, i);
    else {
      const reason = ev.fillWhereStable(matter);
      if (reason !== ANSWERED) return reason;
    }
    ev.fillPlasma();
    const { quantities: record, point } = ev;
    neighbour = place[0] === COEXISTENCE ? undefined : matter;
    if (output.density !== undefined) output.density[i] = knowsDensity ? first[i]! : point[0]!;
    if (output.temperature !== undefined) output.temperature[i] = knowsTemperature ? first[i]! : point[1]!;
    if (output.evaluations !== undefined) output.evaluations[i] = w[EVALUATIONS]!;
    if (wantsConditions) {
      if (output.densityConditionNumber !== undefined) output.densityConditionNumber[i] = conditions[0]!;
      if (output.temperatureConditionNumber !== undefined) output.temperatureConditionNumber[i] = conditions[1]!;
    }
    for (let j = 0; j < columns.length; j++) {
      const value = record[slots[j]!]!;
      if (Number.isNaN(value)) refuseQuantity(quantityNames[slots[j]!]!, i);
      columns[j]![i] = value;
    }
    return ANSWERED;
  }

  /** As `answer`, with what contributions throw. */
  function attempt(i: number): number {
    try {
      return answer(i);
    } catch (error) {
      return reasonOf(error);
    }
  }

  for (let i = 0; i < count; i++) {
    if (i % ROWS_IN_A_CHAIN === 0) neighbour = undefined;
    if (refused === undefined) answer(i);
    else {
      refused[i] = reasonOfGiven(equationOfState.domain, question, first, second, i) || attempt(i);
      if (refused[i] !== ANSWERED) neighbour = undefined;
    }
  }
}

const probe = new Float64Array(POINT_LENGTH);

/** As {@link checkGiven}, but returns the number of the reason. */
function reasonOfGiven(
  domain: Domain,
  { names: [one, other], type }: Question,
  first: Float64Array,
  second: Float64Array,
  i: number,
): number {
  probe[DENSITY] = one === "density" ? first[i]! : domain.density[0];
  probe[TEMPERATURE] = one === "temperature" ? first[i]! : domain.temperature[0];
  const outside = reasonOutside(domain, probe);
  if (outside !== ANSWERED && outside < DENSITY_TOO_LOW) return outside;
  if (!Number.isFinite(second[i]) || (type === BOTH && !Number.isFinite(first[i]))) return GIVEN_NO_NUMBER;
  const pressure = one === "pressure" ? first[i]! : other === "pressure" ? second[i]! : 1;
  return pressure > 0 ? outside : GIVEN_NOT_POSITIVE; // as in `solve`: what no matter has before what this one has not
}

/** All that is checked before the first row is written. */
interface CheckedSolve {
  readonly question: Question;
  readonly first: Float64Array;
  readonly second: Float64Array;
  /** Number of rows. */
  readonly count: number;
  readonly compositions: CompositionSource;
  readonly guessed: SolveInput["guess"];
  /** Slots and columns of the quantities wanted, and whether the costly one is among them. */
  readonly slots: readonly number[];
  readonly columns: readonly Float64Array[];
  readonly detail: boolean;
}

/** Checks a batch of questions as `solveColumns` does before the first row. */
export function checkSolve(equationOfState: EquationOfState, input: SolveInput, output: SolveOutput): CheckedSolve {
  const question = questionOf("input", input, ["composition", "guess"]);
  const [a, b] = question.names.map((name) => input[name]) as [unknown, unknown];
  const first = column(question.names[0], a);
  const second = column(question.names[1], b, first.length);
  const count = first.length;
  const compositions = compositionSource(input.composition);
  if (compositions.rows !== undefined && compositions.rows !== count) {
    const details = { argument: "composition", given: compositions.rows, allowed: `${count} rows` };
    throw new FermistateError("length-mismatch", details);
  }
  const guessed = guesses(input, count);
  const wanted = outputs(output, count);
  if (output.refused === undefined) {
    for (let i = 0; i < count; i++) checkGiven(equationOfState, question, first, second, i);
  }
  return { question, first, second, count, compositions, guessed, ...wanted };
}

/** Compositions near enough for the answer of one to lead to that of the other: matter that burns differs from zone to zone. */
function isNear(a: Composition | undefined, b: Composition): boolean {
  if (a === undefined || a === b) return a !== undefined;
  const electrons = a.electronsPerGram - b.electronsPerGram;
  const ions = a.ionsPerGram - b.ionsPerGram;
  return Math.abs(electrons) <= 0.02 * b.electronsPerGram && Math.abs(ions) <= 0.05 * b.ionsPerGram;
}

function column(name: string, value: unknown, rows?: number): Float64Array {
  requireColumn(name, value);
  const found = value as Float64Array;
  if (rows === undefined || found.length === rows) return found;
  throw new FermistateError("length-mismatch", { argument: name, given: found.length, allowed: `${rows} rows` });
}

/** A given value must be one that matter can have, and lie inside the domain. */
function checkGiven(
  eos: EquationOfState,
  { names, type }: Question,
  first: Float64Array,
  second: Float64Array,
  i: number,
): void {
  requireGiven(names[0], first[i], i);
  requireGiven(names[1], second[i], i);
  const density = names[0] === "density" ? first[i]! : eos.domain.density[0];
  const temperature = names[0] === "temperature" ? first[i]! : type < 0 ? second[i]! : eos.domain.temperature[0];
  if (!holds(eos.domain, density, temperature)) refusePoint(eos.contributions, density, temperature, i);
}

/** Whether a column of starts, where there is one, has one for this row. */
const isStart = (starts: Float64Array | undefined, i: number): boolean =>
  starts === undefined || (starts[i]! > 0 && starts[i]! < Number.POSITIVE_INFINITY);

function guesses(input: SolveInput, count: number): SolveInput["guess"] {
  const { guess } = input;
  if (guess === undefined) return undefined;
  if (typeof guess !== "object" || guess === null) {
    const allowed = "an object with columns density, temperature or both";
    throw new FermistateError("invalid-option", { argument: "guess", given: guess, allowed });
  }
  requireKnown("guess", guess, ["density", "temperature"]);
  for (const name of ["density", "temperature"] as const) {
    const starts = guess[name];
    if (starts === undefined) continue;
    column(`guess.${name}`, starts, count);
  }
  return guess.density === undefined && guess.temperature === undefined ? undefined : guess;
}

/** Slots and columns of the quantities wanted, and whether the costly ones are among them. */
function outputs(output: SolveOutput, count: number): { slots: number[]; columns: Float64Array[]; detail: boolean } {
  requireObject("output", output);
  const slots: number[] = [];
  const columns: Float64Array[] = [];
  checkRefused(output.refused, count);
  for (const [name, values] of Object.entries(output)) {
    if (values === undefined || name === "refused") continue;
    const own = (searchColumns as readonly string[]).includes(name);
    if (!own && !Object.hasOwn(quantities, name)) {
      const allowed = `one of ${[...searchColumns, ...quantityNames].join(", ")}`;
      throw new FermistateError("unavailable-quantity", { argument: "output", given: name, allowed });
    }
    requireRows(name, values, count);
    if (own) continue;
    slots.push(quantityNames.indexOf(name as QuantityName));
    columns.push(values as Float64Array);
  }
  return { slots, columns, detail: output.positronDensity !== undefined };
}

/** Density and temperature given: an ordinary batch, and no search to tell of. */
function direct(
  eos: EquationOfState,
  input: { density: Float64Array; temperature: Float64Array; composition: SolveInput["composition"] },
  output: SolveOutput,
): void {
  const { density, temperature, evaluations, densityConditionNumber, temperatureConditionNumber, refused, ...state } =
    output;
  eos.evaluate(input, refused === undefined ? state : { ...state, refused });
  for (let i = 0; i < input.density.length; i++) {
    if (refused !== undefined && refused[i] !== ANSWERED) continue;
    if (density !== undefined) density[i] = input.density[i]!;
    if (temperature !== undefined) temperature[i] = input.temperature[i]!;
    if (evaluations !== undefined) evaluations[i] = 1;
    if (densityConditionNumber !== undefined) densityConditionNumber[i] = 0;
    if (temperatureConditionNumber !== undefined) temperatureConditionNumber[i] = 0;
  }
}
