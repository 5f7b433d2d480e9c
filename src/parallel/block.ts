/**
 * A block of rows as it travels to a thread and back: columns in shared memory, compositions as plain data, errors as
 * their details. What a task does with the rows is one entry of {@link tasks}.
 */
import { type ErrorCode, FermistateError } from "../errors.js";
import { type Composition, composition, type MeanNucleus, type NucleonFractions } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { asFailure, type PlainSource } from "./matter-source.js";

/** Columns by name. */
export type Columns = Readonly<Record<string, Float64Array>>;

/** What can be done with rows; each writes the output columns it is given and throws errors with the row. */
const tasks = {
  evaluate(matter: EquationOfState, input: Columns, composition: Composition | Composition[], output: Columns): void {
    matter.evaluate({ density: input["density"]!, temperature: input["temperature"]!, composition }, output);
  },
} as const;

/** Name of a task. */
export type TaskName = keyof typeof tasks;

/** Rows `from` to `to` of the columns, and what to do with them. */
export interface Block {
  readonly task: TaskName;
  readonly source: PlainSource;
  readonly from: number;
  readonly to: number;
  /** Whole columns, in shared memory. */
  readonly input: Columns;
  readonly output: Columns;
  /** The compositions of the block, each once. */
  readonly compositions: readonly (NucleonFractions | MeanNucleus)[];
  /** For each row of the block the place of its composition; without it all rows have the first. */
  readonly which?: Uint32Array;
}

/** What a thread is asked: to make its equation of state, and to do a block where there is one. */
export interface Question {
  readonly source: PlainSource;
  readonly block?: Block;
}

/** What a thread answers: nothing but a failure, the numbers are in the columns. */
export interface Answer {
  readonly failure?: PlainError;
}

/** A {@link FermistateError} as plain data. */
export interface PlainError {
  readonly code: ErrorCode;
  readonly argument: string;
  readonly given: unknown;
  readonly allowed: string;
  readonly index: number | undefined;
}

/** Does a block's task in this thread. */
export function run(matter: EquationOfState, block: Block): void {
  const { task, from, to, input, output, compositions, which } = block;
  const rows = (columns: Columns): Columns =>
    Object.fromEntries(Object.entries(columns).map(([name, column]) => [name, column.subarray(from, to)]));
  const made = compositions.map((data) => composition(data));
  const each = which === undefined ? made[0]! : Array.from(which, (place) => made[place]!);
  tasks[task](matter, rows(input), each, rows(output));
}

/** Compositions of rows `from` to `to` as plain data. */
export function packCompositions(
  given: Composition | readonly Composition[],
  from: number,
  to: number,
): Pick<Block, "compositions" | "which"> {
  if (!Array.isArray(given)) return { compositions: [fractionsOf(given as Composition)] };
  const places = new Map<Composition, number>();
  const which = new Uint32Array(to - from);
  for (let i = from; i < to; i++) {
    const one = given[i] as Composition;
    let place = places.get(one);
    if (place === undefined) {
      place = places.size;
      places.set(one, place);
    }
    which[i - from] = place;
  }
  return { compositions: [...places.keys()].map(fractionsOf), which };
}

/** What `composition` makes the same composition of, to the bit. */
function fractionsOf({ species }: Composition): NucleonFractions | MeanNucleus {
  const [first] = species;
  if (first!.label === "mean") return { meanMassNumber: first!.massNumber, meanCharge: first!.chargeNumber };
  return Object.fromEntries(species.map(({ label, nucleonFraction }) => [label, nucleonFraction]));
}

/** An error as data; rows counted from that of the whole batch. */
export function packError(error: unknown, from: number): PlainError {
  const typed = asFailure(error, "worker", "contributions that throw no error of their own") as FermistateError;
  const { code, argument, given, allowed, index } = typed;
  const isPlain =
    given === null || (typeof given !== "object" && typeof given !== "function" && typeof given !== "symbol");
  return {
    code,
    argument,
    given: isPlain ? given : String(given),
    allowed,
    index: index === undefined ? undefined : index + from,
  };
}

/** The error again. */
export function unpackError({ code, index, ...details }: PlainError): FermistateError {
  return new FermistateError(code, index === undefined ? details : { ...details, index });
}
