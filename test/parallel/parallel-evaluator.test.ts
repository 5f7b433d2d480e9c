/** Batches on threads: the numbers and the errors of one thread, and what happens when code or threads fail. */
import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from "vitest";
import type { FermistateError } from "../../src/errors.js";
import { solveColumns } from "../../src/inverse/columns.js";
import { type Composition, composition } from "../../src/matter/composition.js";
import { compositions } from "../../src/matter/composition-rows.js";
import type { Answer } from "../../src/parallel/block.js";
import { type MatterSource, type ParallelEvaluator, parallelEvaluator } from "../../src/parallel/index.js";
import type * as ThreadsRoom from "../../src/parallel/threads.js";
import type { BatchInput, BatchOutput, EquationOfState } from "../../src/thermodynamics/equation-of-state.js";
import { type QuantityName, quantityNames } from "../../src/thermodynamics/quantities.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { uniform } from "../measured.js";
import { makeWorkshop, type Workshop } from "./threads-from-source.js";

/** Where the worker is built, and how many requests reached a thread. */
const bench = vi.hoisted(() => ({ worker: new URL("file:///nowhere"), asked: 0 }));
vi.mock("../../src/parallel/threads.js", async (original) => {
  const { startThreads } = await original<typeof ThreadsRoom>();
  return {
    async startThreads(count: number) {
      const threads = await startThreads<unknown, Answer>(count, bench.worker);
      const ask = (request: unknown) => {
        bench.asked++;
        return threads.ask(request);
      };
      return { ...threads, ask };
    },
  };
});

let workshop: Workshop;
beforeAll(async () => {
  workshop = await makeWorkshop();
  bench.worker = workshop.worker;
});
afterAll(() => workshop.remove());

const open: ParallelEvaluator[] = [];
afterEach(async () => {
  for (const one of open.splice(0)) await one.close();
});
async function evaluatorOf(matter: MatterSource, threads = 2): Promise<ParallelEvaluator> {
  const evaluator = await parallelEvaluator(matter, { threads });
  open.push(evaluator);
  bench.asked = 0;
  return evaluator;
}

const core = composition({ C12: 0.5, O16: 0.5 });

/** Random white-dwarf matter. */
function pointsOf(rows: number, seed = 99): { density: Float64Array; temperature: Float64Array } {
  const random = uniform(seed);
  const density = new Float64Array(rows);
  const temperature = new Float64Array(rows);
  for (let i = 0; i < rows; i++) {
    density[i] = 10 ** (5 + 4 * random());
    temperature[i] = 10 ** (6.5 + 2 * random());
  }
  return { density, temperature };
}

const columnsOf = (names: readonly QuantityName[], rows: number): Record<string, Float64Array> =>
  Object.fromEntries(names.map((name) => [name, new Float64Array(rows)]));

/** Whether two columns have the same bits in their first rows. */
function sameBits(
  actual: Float64Array | undefined,
  expected: Float64Array | undefined,
  rows = expected?.length,
): boolean {
  const bytes = (column: Float64Array): Buffer => Buffer.from(column.buffer, column.byteOffset, 8 * (rows ?? 0));
  return actual !== undefined && expected !== undefined && bytes(actual).equals(bytes(expected));
}

/** The error of a call that must fail. */
async function errorOf(call: () => unknown): Promise<FermistateError> {
  try {
    await call();
  } catch (error) {
    return error as FermistateError;
  }
  throw new Error("did not fail");
}

/** Error of the batch from one thread and from several: the same but for the stack. */
async function sameError(
  evaluator: ParallelEvaluator,
  eos: EquationOfState,
  input: BatchInput,
  output: BatchOutput,
): Promise<FermistateError> {
  const serial = await errorOf(() => eos.evaluate(input, output));
  const parallel = await errorOf(() => evaluator.evaluate(input, output));
  for (const field of ["name", "code", "argument", "given", "allowed", "index", "message"] as const) {
    expect(parallel[field], field).toEqual(serial[field]);
  }
  return parallel;
}

describe("the numbers are those of one thread, to the bit", () => {
  test.each([1, 2, 3])("%i threads, all quantities, a number of rows that fits no block", async (threads) => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} }, threads);
    const rows = 9_973;
    const input = { ...pointsOf(rows), composition: core };
    const [serial, parallel] = [columnsOf(quantityNames, rows), columnsOf(quantityNames, rows)];
    whiteDwarfMatter().evaluate(input, serial);
    await evaluator.evaluate(input, parallel);
    expect(bench.asked).toBeGreaterThanOrEqual(threads);
    for (const name of quantityNames) expect(sameBits(parallel[name], serial[name]), name).toBe(true);
    expect(evaluator.threads).toBe(threads);
  });

  test("a composition per row: mixtures, a mean nucleus, free neutrons, fractions scaled to one", async () => {
    const switches = { coulomb: { polarisation: false }, radiation: false };
    const evaluator = await evaluatorOf({ whiteDwarfMatter: switches });
    const kinds = [
      core,
      composition({ meanMassNumber: 14.25, meanCharge: 7.125 }),
      composition({ He4: 0.2, C12: 0.3, O16: 0.25, Ne22: 0.05, Mg24: 0.2 }),
      composition({ C12: 1, O16: 2, Fe56: 1 / 3 }, { normalise: true }),
      composition({ Fe56: 0.9, n: 0.1 }),
    ];
    const rows = 12_000;
    const list = Array.from({ length: rows }, (_, i) => kinds[(i * i + (i >> 3)) % kinds.length] as Composition);
    const input = { ...pointsOf(rows), composition: list };
    const names = ["pressure", "specificEntropy", "gamma1", "ionCoupling"] as const;
    const [serial, parallel] = [columnsOf(names, rows), columnsOf(names, rows)];
    whiteDwarfMatter(switches).evaluate(input, serial);
    await evaluator.evaluate(input, parallel);
    expect(bench.asked).toBeGreaterThan(1);
    for (const name of names) expect(sameBits(parallel[name], serial[name]), name).toBe(true);
  });

  test("a new composition every second row goes to the threads, as a matrix of fractions", async () => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    const rows = 6_000;
    const random = uniform(5);
    const labels = ["O16", "He4", "n", "C12"];
    const fractions = Float64Array.from({ length: 2 * rows }, (_, i) => (i % 7 === 0 ? 0 : random()));
    const made = compositions(labels, fractions, { normalise: true });
    const list = Array.from({ length: rows }, (_, i) => made[i >> 1] as Composition);
    const input = { ...pointsOf(rows), composition: list };
    const names = ["pressure", "specificEntropy", "gamma1"] as const;
    const [serial, parallel] = [columnsOf(names, rows), columnsOf(names, rows)];
    whiteDwarfMatter().evaluate(input, serial);
    await evaluator.evaluate(input, parallel);
    expect(bench.asked).toBeGreaterThan(1);
    for (const name of names) expect(sameBits(parallel[name], serial[name]), name).toBe(true);
  });

  test("a matrix of fractions is shared, by rows or by columns: every row its own composition", async () => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    const rows = 6_000;
    const random = uniform(6);
    const nuclides = ["O16", "He4", "n", "C12"];
    const fractions = Float64Array.from({ length: 4 * rows }, (_, i) => (i % 7 === 0 ? 0 : random()));
    const columns = nuclides.map((_, j) =>
      Float64Array.from({ length: rows }, (_, i) => fractions[4 * i + j] as number),
    );
    const points = pointsOf(rows);
    const names = ["pressure", "specificEntropy", "gamma1"] as const;
    const serial = columnsOf(names, rows);
    const list = compositions(nuclides, fractions, { normalise: true });
    whiteDwarfMatter().evaluate({ ...points, composition: list }, serial);
    for (const given of [fractions, columns]) {
      const parallel = columnsOf(names, rows);
      const composition = { nuclides, fractions: given, normalise: true };
      await evaluator.evaluate({ ...points, composition }, parallel);
      for (const name of names) expect(sameBits(parallel[name], serial[name]), name).toBe(true);
      const answer = { temperature: new Float64Array(rows) };
      const pressure = parallel["pressure"] as Float64Array;
      await evaluator.solve({ density: points.density, pressure, composition }, answer);
      const alone = { temperature: new Float64Array(rows) };
      solveColumns(whiteDwarfMatter(), { density: points.density, pressure, composition: list }, alone);
      expect(sameBits(answer.temperature, alone.temperature)).toBe(true);
    }
    expect(bench.asked).toBeGreaterThan(8);
    fractions[4 * 4321] = Number.NaN;
    const refused = await errorOf(() =>
      evaluator.evaluate({ ...points, composition: { nuclides, fractions, normalise: true } }, {}),
    );
    expect(refused).toMatchObject({ code: "not-a-number", index: 4321 });
  });

  test("refused rows: the same reasons, and their outputs stay", async () => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    const rows = 9_000;
    const { density, temperature } = pointsOf(rows);
    for (let i = 0; i < rows; i += 13) density[i] = [1e30, -1, Number.NaN, 1][(i / 13) % 4] as number;
    for (let i = 39; i < rows; i += 52) temperature[i] = 1e4; // cold beside 1 g/cm^3: unstable
    const results = [0, 1].map(() => ({ pressure: new Float64Array(rows).fill(-7), refused: new Uint8Array(rows) }));
    const [serial, parallel] = results as [(typeof results)[0], (typeof results)[0]];
    whiteDwarfMatter().evaluate({ density, temperature, composition: core }, serial);
    await evaluator.evaluate({ density, temperature, composition: core }, parallel);
    expect(bench.asked).toBeGreaterThan(1);
    expect(new Set(serial.refused)).toEqual(new Set([0, 1, 3, 6, 10]));
    expect(Buffer.from(parallel.refused).equals(Buffer.from(serial.refused))).toBe(true);
    expect(sameBits(parallel.pressure, serial.pressure)).toBe(true);
    expect(parallel.pressure[13]).toBe(-7);
  });

  test("columns in shared memory are used in place, views of them too; rows beyond the input stay", async () => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    const rows = 6_000;
    const { density, temperature } = pointsOf(rows);
    const memory = new SharedArrayBuffer(8 * (3 * rows + 100));
    const shared = new Float64Array(memory, 80, rows);
    shared.set(density);
    const pressure = new Float64Array(memory, 8 * (rows + 20), rows + 5).fill(-1);
    const gamma1 = new Float64Array(rows + 5).fill(-1);
    const serial = columnsOf(["pressure", "gamma1"], rows);
    const input = { density: shared, temperature, composition: core };
    whiteDwarfMatter().evaluate(input, serial);
    await evaluator.evaluate(input, { pressure, gamma1 });
    expect(bench.asked).toBeGreaterThan(1);
    for (const [column, expected] of [
      [pressure, serial["pressure"]!],
      [gamma1, serial["gamma1"]!],
    ] as const) {
      expect(sameBits(column, expected)).toBe(true);
      expect([...column.subarray(rows)]).toEqual([-1, -1, -1, -1, -1]);
    }
  });

  test("plain input may be changed while the batch runs; two batches may run at once; output may be the input", async () => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    const rows = 8_000;
    const [first, second] = [pointsOf(rows, 1), pointsOf(rows, 2)];
    const serial = [first, second].map((points) => {
      const output = columnsOf(["pressure"], rows);
      whiteDwarfMatter().evaluate({ ...points, composition: core }, output);
      return output["pressure"]!;
    });
    const pressure = new Float64Array(rows);
    const list = new Array<Composition>(rows).fill(core);
    const one = evaluator.evaluate({ ...first, composition: list }, { pressure });
    const two = evaluator.evaluate({ ...second, composition: core }, { pressure: second.density });
    first.density.fill(Number.NaN);
    list.fill(composition({ Fe56: 1 }));
    await Promise.all([one, two]);
    expect(sameBits(pressure, serial[0])).toBe(true);
    expect(sameBits(second.density, serial[1])).toBe(true);
  });

  test("batches of other lengths and columns, one after the other: nothing of one shows in the next", async () => {
    const eos = whiteDwarfMatter();
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    for (const [rows, names] of [
      [9000, ["pressure", "gamma1"]],
      [5000, ["specificEntropy", "pressure", "soundSpeed"]],
      [9000, ["gamma1"]],
    ] as const) {
      const input = { ...pointsOf(rows, rows), composition: core };
      const [one, several] = [columnsOf(names, rows + 3), columnsOf(names, rows + 3)];
      for (const column of [...Object.values(one), ...Object.values(several)]) column.fill(7);
      eos.evaluate(input, one);
      await evaluator.evaluate(input, several);
      for (const name of names) expect(sameBits(several[name], one[name]), name).toBe(true);
    }
  });

  test("a module's equation of state: default or named, a value, a function, a promise, in CommonJS", async () => {
    const make = 'import { whiteDwarfMatter } from "./core.js";';
    const modules: MatterSource[] = [
      { module: workshop.module("a.js", `${make} export default whiteDwarfMatter({ coulomb: false });`) },
      {
        module: workshop.module("b.js", `${make} export const ideal = () => whiteDwarfMatter({ coulomb: false });`)
          .pathname,
        export: "ideal",
      },
      {
        module: workshop.module("c.js", `${make} export default async () => whiteDwarfMatter({ coulomb: false });`)
          .href,
      },
      {
        module: workshop.module(
          "d.cjs",
          'exports.made = () => import("./core.js").then((c) => c.whiteDwarfMatter({ coulomb: false }));',
        ),
        export: "made",
      },
      {
        module: workshop.module(
          "e.cjs",
          'module.exports = () => import("./core.js").then((c) => c.whiteDwarfMatter({ coulomb: false }));',
        ),
      },
      {
        module: workshop.module(
          "f.cjs",
          'const all = {}; all.default = () => import("./core.js").then((c) => c.whiteDwarfMatter({ coulomb: false })); module.exports = all;',
        ),
      },
    ];
    const rows = 4_096;
    const input = { ...pointsOf(rows), composition: core };
    const serial = columnsOf(["gamma1"], rows);
    whiteDwarfMatter({ coulomb: false }).evaluate(input, serial);
    for (const source of modules) {
      const evaluator = await evaluatorOf(source, 1);
      const output = columnsOf(["gamma1"], rows);
      await evaluator.evaluate(input, output);
      expect(bench.asked).toBeGreaterThan(0);
      expect(sameBits(output["gamma1"], serial["gamma1"])).toBe(true);
      expect(evaluator.equationOfState.name).toBe(whiteDwarfMatter({ coulomb: false }).name);
    }
  });

  test("small batches, and those with a new composition every few rows, stay in the calling thread", async () => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    const few = { ...pointsOf(4_095), composition: core };
    const [serial, parallel] = [columnsOf(["pressure"], 4_095), columnsOf(["pressure"], 4_095)];
    whiteDwarfMatter().evaluate(few, serial);
    await evaluator.evaluate(few, parallel);
    expect(sameBits(parallel["pressure"], serial["pressure"])).toBe(true);
    const none = new Float64Array(0);
    await evaluator.evaluate({ density: none, temperature: none, composition: core }, { pressure: none });
    const own = Array.from({ length: 5_000 }, (_, i) => composition({ C12: i / 1e4, O16: 1 - i / 1e4 }));
    await evaluator.evaluate({ ...pointsOf(5_000), composition: own }, {});
    expect(bench.asked).toBe(0);
  });
});

describe("errors are those of one thread", () => {
  test("what is checked before the first row", async () => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    const eos = whiteDwarfMatter();
    const rows = 20_000;
    const good = { ...pointsOf(rows), composition: core };
    const changed = (column: "density" | "temperature", row: number, value: number): BatchInput => {
      const copy = good[column].slice();
      copy[row] = value;
      return { ...good, [column]: copy };
    };
    const pressure = new Float64Array(rows).fill(7);
    const both = changed("density", 19_000, Number.NaN);
    expect((await sameError(evaluator, eos, both, { pressure })).index).toBe(19_000);
    expect((await sameError(evaluator, eos, changed("density", 3, -1), { pressure })).code).toBe("out-of-range");
    expect((await sameError(evaluator, eos, changed("temperature", 9_999, 1e20), { pressure })).code).toBe(
      "outside-domain",
    );
    await sameError(evaluator, eos, { ...good, temperature: new Float64Array(5) }, { pressure });
    await sameError(evaluator, eos, { ...good, composition: [core] }, { pressure });
    await sameError(evaluator, eos, { ...good, composition: { ...core } as Composition }, { pressure });
    await sameError(evaluator, eos, good, { pressure: new Float64Array(5) });
    await sameError(evaluator, eos, good, { entropy: pressure } as BatchOutput);
    await sameError(evaluator, eos, good, { pressure: [] as unknown as Float64Array });
    await sameError(evaluator, eos, undefined as unknown as BatchInput, {});
    await sameError(evaluator, eos, good, null as unknown as BatchOutput);
    expect(pressure.every((value) => value === 7)).toBe(true);
    expect(bench.asked).toBe(0);
  });

  test("the first row that fails, whichever thread meets one first; output stays as it was", async () => {
    // Cold matter too thin to be ionised is unstable.
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    const rows = 30_000;
    const { density, temperature } = pointsOf(rows);
    for (const [row, other] of [
      [29_999, undefined],
      [5, 20_000],
      [17_321, 17_322],
      [9_000, 29_998],
    ] as const) {
      const thin = density.slice();
      const cold = temperature.slice();
      for (const i of [row, other]) {
        if (i === undefined) continue;
        thin[i] = 1;
        cold[i] = 1e5;
      }
      const pressure = new Float64Array(rows).fill(7);
      const input = { density: thin, temperature: cold, composition: core };
      const serial = await errorOf(() => whiteDwarfMatter().evaluate(input, {}));
      expect(serial).toMatchObject({ code: "unstable", index: row });
      const parallel = await errorOf(() => evaluator.evaluate(input, { pressure }));
      expect({ ...parallel, message: parallel.message }).toEqual({ ...serial, message: serial.message });
      expect(parallel).toBeInstanceOf(Error);
      expect(pressure.every((value) => value === 7)).toBe(true);
    }
    // A quantity that nobody provides, and that only a row can tell.
    const source = { whiteDwarfMatter: { ions: false } };
    const bare = await evaluatorOf({
      module: workshop.module(
        "ions.js",
        'import { combine, idealIons } from "./core.js"; export default combine(idealIons());',
      ),
    });
    const unknown = await errorOf(() =>
      bare.evaluate({ density, temperature, composition: core }, { positronDensity: new Float64Array(rows) }),
    );
    expect(unknown).toMatchObject({ code: "unavailable-quantity", index: 0, given: "positronDensity" });
    expect((await evaluatorOf(source)).equationOfState.name).not.toContain("ions");
  });
});

/** A module whose contribution does `code` at density 1234567, in threads only. */
function trap(name: string, code: string): URL {
  return workshop.module(
    name,
    `import { combine, idealIons } from "./core.js";
    import { isMainThread } from "node:worker_threads";
    const ions = idealIons();
    export default combine({ ...ions, add(point, ...rest) {
      if (point[0] === 1234567 && !isMainThread) { ${code} }
      return ions.add(point, ...rest);
    } });`,
  );
}

describe("what fails in a thread fails here, and nothing hangs", () => {
  const rows = 40_000;
  const good = { ...pointsOf(rows), composition: core };
  const bad = { ...good, density: good.density.slice() };
  bad.density[12_345] = 1234567;

  test.each([
    ["an error of the contribution", "throw new TypeError('no such luck');", /TypeError: no such luck/],
    ["a thrown string", "throw 'just words';", /just words/],
    ["an error that cannot be copied", "const e = new Error('odd'); e.self = () => 1; throw e;", /odd/],
    ["the thread exits", "process.exit(3);", /exited with code 3/],
    [
      "an error outside of any task",
      "setImmediate(() => { throw new RangeError('late'); }); const t = Date.now(); while (Date.now() - t < 50);",
      /late|exited/,
    ],
  ])("%s", async (name, code, reason) => {
    const matter = trap(`${name.replaceAll(" ", "-")}.js`, code);
    const evaluator = await evaluatorOf({ module: matter });
    const pressure = new Float64Array(rows);
    // The last may be met after the batch, by the next one.
    const error = await errorOf(async () => {
      for (let i = 0; i < 50; i++) await evaluator.evaluate(bad, { pressure });
    });
    expect(error).toMatchObject({ name: "FermistateError", code: "worker-failed" });
    expect(String(error.given)).toMatch(reason);
    // The next batch has threads again.
    const expected = new Float64Array(rows);
    evaluator.equationOfState.evaluate(good, { pressure: expected });
    await evaluator.evaluate(good, { pressure });
    expect(sameBits(pressure, expected)).toBe(true);
  });

  test("a batch that is under way when the evaluator closes; a closed evaluator", async () => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    const under = errorOf(() => evaluator.evaluate(good, { pressure: new Float64Array(rows) }));
    await new Promise((resolve) => setTimeout(resolve, 5));
    await evaluator.close();
    expect(await under).toMatchObject({ code: "worker-failed", given: "the evaluator was closed" });
    expect(await errorOf(() => evaluator.evaluate(good, {}))).toMatchObject({
      code: "worker-failed",
      given: "a closed evaluator",
    });
    expect(await errorOf(() => evaluator.evaluate({ ...pointsOf(1), composition: core }, {}))).toMatchObject({
      code: "worker-failed",
    });
    await evaluator.close();
  });

  test("Symbol.asyncDispose closes", async () => {
    const evaluator = await evaluatorOf({ whiteDwarfMatter: {} });
    await evaluator[Symbol.asyncDispose]();
    expect(await errorOf(() => evaluator.evaluate(good, {}))).toMatchObject({ given: "a closed evaluator" });
  });

  test("a module that does not load, or gives nothing of use", async () => {
    const given = (name: string, code: string): MatterSource => ({ module: workshop.module(name, code) });
    const cases: readonly (readonly [MatterSource, string, RegExp])[] = [
      [{ module: new URL("./nowhere.js", workshop.worker) }, "worker-failed", /nowhere\.js/],
      [given("syntax.js", "export default ;;;("), "worker-failed", /SyntaxError/],
      [given("throws.js", "throw new Error('at the top');"), "worker-failed", /Error: at the top/],
      [
        given("maker.js", "export default () => { throw new Error('in the function'); };"),
        "worker-failed",
        /in the function/,
      ],
      [
        given("rejects.js", "export default () => Promise.reject(new Error('in the promise'));"),
        "worker-failed",
        /in the promise/,
      ],
      [given("exit.js", "process.exit(4);"), "worker-failed", /exited with code 4/],
      [given("nothing.js", "export const other = 1;"), "invalid-option", /default: no such export/],
      [given("number.js", "export default 42;"), "invalid-option", /42/],
      [given("null.js", "export default null;"), "invalid-option", /null/],
      [given("half.js", "export default { evaluate() {} };"), "invalid-option", /object/],
      [{ module: workshop.module("named.js", "export default {};"), export: "toString" }, "invalid-option", /toString/],
      [
        given(
          "option.js",
          'import { whiteDwarfMatter } from "./core.js"; export default whiteDwarfMatter({ spin: 1 });',
        ),
        "invalid-option",
        /spin/,
      ],
      [
        given(
          "opens.js",
          `import { parallelEvaluator } from "./parallel.js"; export default await parallelEvaluator({ module: import.meta.url });`,
        ),
        "invalid-option",
        /opens threads itself/,
      ],
    ];
    for (const [source, code, reason] of cases) {
      const error = await errorOf(() => parallelEvaluator(source, { threads: 2 }));
      expect(error, String(error)).toMatchObject({ name: "FermistateError", code });
      expect(error.message).toMatch(reason);
    }
  });

  test("no worker file beside the code: a bundled copy says so", async () => {
    const worker = bench.worker;
    bench.worker = new URL("./gone.js", worker);
    const error = await errorOf(() => parallelEvaluator({ whiteDwarfMatter: {} }, { threads: 2 }));
    bench.worker = worker;
    expect(error).toMatchObject({ name: "FermistateError", code: "worker-failed" });
    expect(error.message).toMatch(/gone\.js/);
  });
});

test("options that are none", async () => {
  const matter = { whiteDwarfMatter: {} };
  const cases: readonly (readonly [unknown, unknown, string])[] = [
    [undefined, {}, "matter"],
    [null, {}, "matter"],
    ["matter.js", {}, "matter"],
    [{}, {}, "matter"],
    [{ module: "./matter.js" }, {}, "matter.module"],
    [{ module: 7 }, {}, "matter.module"],
    [{ module: "" }, {}, "matter.module"],
    [{ module: import.meta.url, export: "" }, {}, "matter.export"],
    [{ module: import.meta.url, export: 5 }, {}, "matter.export"],
    [{ module: import.meta.url, exports: "a" }, {}, "matter"],
    [{ module: import.meta.url, whiteDwarfMatter: {} }, {}, "matter"],
    [{ whiteDwarfMatter: null }, {}, "options"],
    [{ whiteDwarfMatter: { radiation: 1 } }, {}, "options.radiation"],
    [{ whiteDwarfMatter: { coulomb: { phase: () => "liquid" } } }, {}, "phase"],
    [matter, { threads: 0 }, "options.threads"],
    [matter, { threads: 1.5 }, "options.threads"],
    [matter, { threads: Number.NaN }, "options.threads"],
    [matter, { threads: 257 }, "options.threads"],
    [matter, { threads: "2" }, "options.threads"],
    [matter, { workers: 2 }, "options"],
    [matter, null, "options"],
    [matter, 2, "options"],
  ];
  for (const [source, options, argument] of cases) {
    // biome-ignore lint/suspicious/noExplicitAny: what a program without types can pass
    const error = await errorOf(() => parallelEvaluator(source as any, options as any));
    expect(error, JSON.stringify([source, options])).toMatchObject({ name: "FermistateError", code: "invalid-option" });
    expect(error.argument, error.message).toContain(argument);
  }
});
