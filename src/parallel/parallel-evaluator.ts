/** A batch on several cores: checks in the calling thread as the serial batch does, blocks of rows to the threads. */
import { availableParallelism } from "node:os";
import { FermistateError } from "../errors.js";
import { checkSolve, ROWS_IN_A_CHAIN, type SolveInput, type SolveOutput, solveColumns } from "../inverse/columns.js";
import { areRows, type CompositionInput } from "../matter/composition-rows.js";
import { checkBatch } from "../thermodynamics/columns.js";
import type { BatchInput, BatchOutput, EquationOfState } from "../thermodynamics/equation-of-state.js";
import {
  type Answer,
  type Columns,
  type PlainError,
  packCompositions,
  type Question,
  type TaskName,
  unpackError,
} from "./block.js";
import { asFailure, loadMatter, type MatterSource, plainSource, refuseNesting } from "./matter-source.js";
import { type SharedColumns, sharedMemory } from "./shared-columns.js";
import { isThread } from "./thread-mark.js";
import { startThreads, type Threads } from "./threads.js";

/** Options of {@link parallelEvaluator}. */
export interface ParallelOptions {
  /**
   * Number of threads, 1 to 256.
   * @defaultValue the number of cores that the system grants
   */
  readonly threads?: number;
}

/**
 * The method that `await using` calls, where the caller's TypeScript knows `Symbol.asyncDispose`; nothing elsewhere, so
 * that these types compile with any `lib`.
 */
export type AsyncClosing = {
  readonly [Key in SymbolConstructor extends { readonly asyncDispose: infer Name extends symbol }
    ? Name
    : never]: () => Promise<void>;
};

/** An equation of state that spreads large batches over threads; closes itself at the end of an `await using`. */
export type ParallelEvaluator = BatchThreads & AsyncClosing;

/** What a {@link ParallelEvaluator} offers beside that. */
export interface BatchThreads {
  /** Number of threads. */
  readonly threads: number;
  /** The calling thread's own copy of the equation of state. */
  readonly equationOfState: EquationOfState;
  /**
   * The batch of `EquationOfState.evaluate`, with the same numbers to the bit and the same errors.
   *
   * Plain columns are copied to the threads and back: what the caller does to the input while the batch runs has no effect,
   * and a refused batch leaves the output as it was. The memory of the copies is kept for the next batch, until
   * {@link BatchThreads.close}. Columns over a `SharedArrayBuffer` are used in place: leave them alone
   * until the promise is settled; a refused batch leaves some rows written. Fewer than 4096 rows,
   * or rows that bring a new composition object more often than every second, are done in the calling thread, which is
   * faster there: give the compositions of a network as a matrix (`CompositionRows`).
   *
   * @throws (rejects with) the errors of `EquationOfState.evaluate`, the first row that one thread would have refused;
   * `worker-failed` where a thread dies or a contribution throws an error that is not the library's. The threads are
   * started anew by the next call.
   */
  evaluate(input: BatchInput, output: BatchOutput): Promise<void>;
  /**
   * The batch of `solveColumns`, with the same numbers to the bit and the same errors; columns as in {@link
   * BatchThreads.evaluate}.
   *
   * @throws (rejects with) the errors of `solveColumns`, the first row that one thread would have refused;
   * `worker-failed`
   */
  solve(input: SolveInput, output: SolveOutput): Promise<void>;
  /** Ends the threads and gives their memory back; a batch under way is refused. A program may also end without it. */
  close(): Promise<void>;
}

/**
 * Below this many rows (some 4 ms of the full plasma) the calling thread is nearly as fast: waking threads and messages
 * to and fro cost 0.1 to 1 ms, by how busy the machine is.
 */
const smallestBatch = 4096;
/**
 * Composition objects must be packed here and made again in a thread: where every second row brings a new one, two threads
 * gain nothing. A matrix of fractions is shared.
 */
const rowsPerObject = 2;
/** Rows of a block: long against a message, short enough that threads end together. */
const blockRows: readonly [fewest: number, most: number] = [1024, 16384];

/** The built file of parallel-worker.ts stands beside the file this code is built into. */
const workerFile: URL = new URL(
  import.meta.url.endsWith(".cjs") ? "./parallel-worker.cjs" : "./parallel-worker.js",
  import.meta.url,
);

/**
 * Opens threads for large batches of one equation of state. Every thread makes its own copy of it, so the caller says how.
 *
 * Resolves when all threads have loaded. Threads do not keep a program from ending.
 *
 * @param matter - `{ module, export }`, or `{ whiteDwarfMatter: options }`
 * @throws (rejects with) `invalid-option`; `worker-failed` with the reason where the module does not load in a thread
 * @example
 * ```ts
 * import { composition } from "fermistate";
 * import { parallelEvaluator } from "fermistate/parallel";
 *
 * const evaluator = await parallelEvaluator({ whiteDwarfMatter: {} }, { threads: 2 });
 * const density = new Float64Array(10_000).fill(1e6);
 * const temperature = Float64Array.from(density, (_, i) => 1e7 + 1e3 * i);
 * const pressure = new Float64Array(10_000);
 * await evaluator.evaluate({ density, temperature, composition: composition({ C12: 1 }) }, { pressure });
 * await evaluator.close();
 * pressure[9_999]; // => 2.5715212973866e22
 * ```
 */
export async function parallelEvaluator(
  matter: MatterSource,
  options: ParallelOptions = {},
): Promise<ParallelEvaluator> {
  if (isThread()) refuseNesting();
  const source = plainSource(matter);
  const count = readThreads(options);
  const memory = sharedMemory();
  let closed = false;

  /** Threads that have all loaded. */
  async function open(): Promise<Threads<Question, Answer>> {
    const threads = await startThreads<Question, Answer>(count, workerFile);
    const answers = await Promise.all(Array.from({ length: count }, () => threads.ask({ source })));
    const failure = answers.find((answer) => answer.failure !== undefined)?.failure;
    if (failure === undefined) return threads;
    await threads.end("the equation of state could not be made");
    throw unpackError(failure);
  }

  let threads = open();
  // A module that would wait for itself in this thread is refused in the others first.
  await threads;
  const own = await loadMatter(source);

  async function living(): Promise<Threads<Question, Answer>> {
    const current = threads;
    const isAlive = await current.then(
      (one) => one.isAlive(),
      () => false,
    );
    // Whoever comes first replaces them.
    if (!isAlive && threads === current && !closed) threads = open();
    return threads;
  }

  /** Spreads rows over the threads; rejects with the error of the first row that has one. */
  async function spread(
    task: TaskName,
    rows: number,
    input: Columns,
    composition: CompositionInput,
    output: Columns,
  ): Promise<void> {
    const [fewest, most] = blockRows;
    const even = Math.min(most, Math.max(fewest, Math.ceil(rows / (8 * count))));
    const size = ROWS_IN_A_CHAIN * Math.ceil(even / ROWS_IN_A_CHAIN);
    const workers = await living();
    let next = 0;
    let first: PlainError | undefined;
    // Blocks are handed out in order, so those before a failed one are done or under way: they are waited for.
    async function lane(): Promise<void> {
      while (next < rows && first === undefined) {
        const from = next;
        next = Math.min(rows, from + size);
        const packed = packCompositions(composition, from, next);
        const block = { task, source, from, to: next, input, output, ...packed };
        const { failure } = await workers.ask({ source, block });
        if (failure !== undefined && (first === undefined || before(failure, first))) first = failure;
      }
    }
    await Promise.all(Array.from({ length: count }, lane));
    if (first !== undefined) throw unpackError(first);
  }

  /**
   * Answers in this thread where that is faster, else spreads the rows; the output is written when all have their
   * answer.
   */
  async function run(
    task: TaskName,
    rows: number,
    input: Columns,
    composition: CompositionInput,
    output: Columns,
    serial: () => void,
  ): Promise<void> {
    if (rows < smallestBatch || areManyObjects(composition)) {
      try {
        serial();
      } catch (error) {
        throw asFailure(error, "worker", "contributions that throw no error of their own");
      }
      return;
    }
    // Where rows may be refused, with the values they have: such a row keeps them.
    const keeps = output["refused"] !== undefined;
    const shared = memory.open();
    try {
      const answers = mapped(output, (column) => shared.share(column, rows, keeps));
      const inputs = mapped(input, (column) => shared.share(column, rows, true));
      await spread(task, rows, inputs, copied(composition, rows, shared), answers);
      for (const [name, column] of Object.entries(output)) {
        const answer = answers[name]!;
        if (answer !== column) column.set(answer); // a longer column keeps the rest
      }
    } finally {
      shared.release();
    }
  }

  async function evaluate(input: BatchInput, output: BatchOutput): Promise<void> {
    if (closed) throw closedError();
    const { count: rows } = checkBatch(own, input, output);
    const { density, temperature, composition } = input;
    await run("evaluate", rows, { density, temperature }, composition, asColumns(output), () =>
      own.evaluate(input, output),
    );
  }

  async function solve(input: SolveInput, output: SolveOutput): Promise<void> {
    if (closed) throw closedError();
    const { question, first, second, count, guessed } = checkSolve(own, input, output);
    const columns: Record<string, Float64Array> = { [question.names[0]]: first, [question.names[1]]: second };
    if (guessed?.density !== undefined) columns["guess.density"] = guessed.density;
    if (guessed?.temperature !== undefined) columns["guess.temperature"] = guessed.temperature;
    await run("solve", count, columns, input.composition, asColumns(output), () => solveColumns(own, input, output));
  }

  async function close(): Promise<void> {
    closed = true;
    const current = await threads.catch(() => undefined);
    memory.close();
    await current?.end("the evaluator was closed");
  }

  const evaluator = { threads: count, equationOfState: own, evaluate, solve, close };
  const dispose: symbol | undefined = Symbol.asyncDispose;
  return Object.freeze(dispose === undefined ? evaluator : { ...evaluator, [dispose]: close }) as ParallelEvaluator;
}

/** True where `a` comes before `b` in a batch; an error without row is the thread's and comes last. */
function before(a: PlainError, b: PlainError): boolean {
  return (a.index ?? Number.POSITIVE_INFINITY) < (b.index ?? Number.POSITIVE_INFINITY);
}

function areManyObjects(composition: CompositionInput): boolean {
  return Array.isArray(composition) && new Set(composition).size * rowsPerObject > composition.length;
}

/** Compositions that the caller cannot change any more, a matrix in shared memory. */
function copied(composition: CompositionInput, rows: number, shared: SharedColumns): CompositionInput {
  if (Array.isArray(composition)) return [...composition];
  if (!areRows(composition)) return composition;
  const { nuclides, fractions, ...options } = composition;
  const copy =
    fractions instanceof Float64Array
      ? shared.share(fractions, rows * nuclides.length, true)
      : fractions.map((column) => shared.share(column, rows, true));
  return { nuclides: [...nuclides], fractions: copy, ...options };
}

/** The columns of an output that are there. */
function asColumns(output: BatchOutput | SolveOutput): Columns {
  return Object.fromEntries(Object.entries(output).filter((entry) => entry[1] !== undefined));
}

function mapped(columns: Columns, change: (column: Float64Array | Uint8Array) => Float64Array | Uint8Array): Columns {
  return Object.fromEntries(Object.entries(columns).map(([name, column]) => [name, change(column)]));
}

function readThreads(options: ParallelOptions): number {
  const given: Readonly<Record<string, unknown>> =
    typeof options === "object" && options !== null ? { ...options } : { options };
  const { threads = availableParallelism(), ...others } = given;
  const [stranger] = Object.keys(others);
  if (stranger !== undefined) {
    throw new FermistateError("invalid-option", { argument: "options", given: stranger, allowed: "{ threads }" });
  }
  if (typeof threads === "number" && Number.isInteger(threads) && threads >= 1 && threads <= 256) return threads;
  const allowed = "a whole number from 1 to 256";
  throw new FermistateError("invalid-option", { argument: "options.threads", given: threads, allowed });
}

function closedError(): FermistateError {
  const allowed = "an evaluator that is open";
  return new FermistateError("worker-failed", { argument: "evaluator", given: "a closed evaluator", allowed });
}
