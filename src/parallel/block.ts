/**
 * A block of rows as it travels to a thread and back: columns in shared memory, compositions as plain data, errors as
 * their details. What a task does with the rows is one entry of {@link tasks}.
 */
import { type ErrorCode, FermistateError } from "../errors.js";
import { type SolveInput, type SolveOutput, solveColumns } from "../inverse/columns.js";
import { type Composition, composition, type MeanNucleus, type NucleonFractions } from "../matter/composition.js";
import { areRows, type CompositionInput, type CompositionRows } from "../matter/composition-rows.js";
import { notesOf, speciesOf } from "../matter/species-list.js";
import { compositionOf } from "../matter/summed-composition.js";
import type { BatchInput, BatchOutput, EquationOfState } from "../thermodynamics/equation-of-state.js";
import { asFailure, type PlainSource } from "./matter-source.js";

/** Columns by name; those of a guess are called "guess.density" and "guess.temperature". */
export type Columns = Readonly<Record<string, Float64Array | Uint8Array>>;

/** What can be done with rows; each writes the output columns it is given and throws errors with the row. */
const tasks = {
  evaluate(matter: EquationOfState, input: Columns, composition: CompositionInput, output: Columns): void {
    matter.evaluate({ ...input, composition } as BatchInput, output as BatchOutput);
  },
  solve(matter: EquationOfState, input: Columns, composition: CompositionInput, output: Columns): void {
    const { "guess.density": density, "guess.temperature": temperature, ...given } = input;
    const guess = { ...(density && { density }), ...(temperature && { temperature }) };
    solveColumns(matter, { ...given, composition, guess } as object as SolveInput, output as SolveOutput);
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
  readonly compositions: PackedCompositions;
  /** For each row of the block the place of its composition; without it all rows have the first. */
  readonly which?: Uint32Array;
}

/** Compositions as plain data: nucleon fractions row by row over the labels, or mean nuclei; or those of the whole batch. */
type PackedCompositions =
  | { readonly matrix: CompositionRows }
  | { readonly labels: readonly string[]; readonly fractions: Float64Array }
  | { readonly single: readonly (NucleonFractions | MeanNucleus)[] };

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
  readonly limit: number | undefined;
}

/** Does a block's task in this thread. */
export function run(matter: EquationOfState, block: Block): void {
  const { task, from, to, input, output } = block;
  const rows = (columns: Columns): Columns =>
    Object.fromEntries(Object.entries(columns).map(([name, column]) => [name, column.subarray(from, to)]));
  tasks[task](matter, rows(input), compositionsOf(block), rows(output));
}

function compositionsOf({ compositions, which, from, to }: Block): CompositionInput {
  if ("matrix" in compositions) return slice(compositions.matrix, from, to);
  const made = unpackCompositions(compositions);
  return which === undefined ? made[0]! : Array.from(which, (place) => made[place]!);
}

/** Some rows of a matrix of fractions. */
function slice({ nuclides, fractions, ...options }: CompositionRows, from: number, to: number): CompositionRows {
  const rows =
    fractions instanceof Float64Array
      ? fractions.subarray(from * nuclides.length, to * nuclides.length)
      : fractions.map((column) => column.subarray(from, to));
  return { nuclides, fractions: rows, ...options };
}

/** Compositions of rows `from` to `to` as plain data. */
export function packCompositions(
  given: CompositionInput,
  from: number,
  to: number,
): Pick<Block, "compositions" | "which"> {
  if (areRows(given)) return { compositions: { matrix: given } };
  if (!Array.isArray(given)) return { compositions: packed([given as Composition]) };
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
  return { compositions: packed([...places.keys()]), which };
}

/** A matrix over all labels that occur: sending and reading objects would cost more than the rows. */
function packed(compositions: readonly Composition[]): PackedCompositions {
  const places = new Map<string, number>();
  const made = compositions.map(notesOf);
  for (const list of new Set(made.map((one) => one.list))) {
    for (const { label } of list.nuclei) if (!places.has(label)) places.set(label, places.size);
  }
  if (places.has("mean")) return { single: compositions.map(fractionsOf) };
  const fractions = new Float64Array(compositions.length * places.size);
  for (const [row, { list, fractions: given }] of made.entries()) {
    for (let i = 0; i < given.length; i++)
      fractions[row * places.size + places.get(list.nuclei[i]!.label)!] = given[i]!;
  }
  return { labels: [...places.keys()], fractions };
}

/** The same compositions, to the bit: what was checked once is not checked again. */
function unpackCompositions(given: Exclude<PackedCompositions, { readonly matrix: CompositionRows }>): Composition[] {
  if ("single" in given) return given.single.map((data) => composition(data));
  const list = speciesOf(given.labels);
  const count = given.labels.length;
  const fractions = new Float64Array(count);
  return Array.from({ length: given.fractions.length / count }, (_, row) => {
    for (let i = 0; i < count; i++) fractions[i] = given.fractions[row * count + list.order[i]!]!;
    return compositionOf(list, fractions);
  });
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
  const { code, argument, given, allowed, index, limit } = typed;
  const isPlain =
    given === null || (typeof given !== "object" && typeof given !== "function" && typeof given !== "symbol");
  return {
    code,
    argument,
    given: isPlain ? given : String(given),
    allowed,
    index: index === undefined ? undefined : index + from,
    limit,
  };
}

/** The error again. */
export function unpackError({ code, index, limit, ...details }: PlainError): FermistateError {
  const place = { ...(index === undefined ? {} : { index }), ...(limit === undefined ? {} : { limit }) };
  return new FermistateError(code, { ...details, ...place });
}
