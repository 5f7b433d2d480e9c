/** Inverse questions on threads: the numbers, refusals and errors of `solveColumns`, to the bit. */
import { afterAll, afterEach, beforeAll, describe, expect, test, vi } from "vitest";
import {
  type Composition,
  composition,
  compositions,
  type FermistateError,
  type SolveInput,
  type SolveOutput,
  solveColumns,
  whiteDwarfMatter,
} from "../../src/index.js";
import type { Answer } from "../../src/parallel/block.js";
import { type ParallelEvaluator, parallelEvaluator } from "../../src/parallel/index.js";
import type * as ThreadsRoom from "../../src/parallel/threads.js";
import { makeWorkshop, type Workshop } from "./threads-from-source.js";

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
let evaluator: ParallelEvaluator;
beforeAll(async () => {
  workshop = await makeWorkshop();
  bench.worker = workshop.worker;
  evaluator = await parallelEvaluator({ whiteDwarfMatter: {} }, { threads: 2 });
});
afterEach(() => {
  bench.asked = 0;
});
afterAll(async () => {
  await evaluator.close();
  workshop.remove();
});

const matter = whiteDwarfMatter();
const core = composition({ C12: 0.5, O16: 0.5 });
const rows = 5_000;
const density = Float64Array.from({ length: rows }, (_, i) => 1e6 * (1 + 0.3 * Math.sin(i / 50)));
const temperature = Float64Array.from({ length: rows }, (_, i) => 5e7 * (1 + 0.3 * Math.sin(i / 37)));
const direct = {
  pressure: new Float64Array(rows),
  specificEnergy: new Float64Array(rows),
  specificEntropy: new Float64Array(rows),
};
matter.evaluate({ density, temperature, composition: core }, direct);

const outputs = (): Record<string, Float64Array> & { refused?: Uint8Array } =>
  Object.fromEntries(
    ["density", "temperature", "evaluations", "temperatureConditionNumber", "gamma1"].map((name) => [
      name,
      new Float64Array(rows).fill(-7),
    ]),
  );

/** Both ways, and whether every column has the same bits. */
async function compare(input: SolveInput, refused: boolean): Promise<Record<string, Float64Array | Uint8Array>> {
  const [serial, parallel] = [0, 1].map(() => ({
    ...outputs(),
    ...(refused ? { refused: new Uint8Array(rows) } : {}),
  })) as [Record<string, Float64Array>, Record<string, Float64Array>];
  solveColumns(matter, input, serial as SolveOutput);
  await evaluator.solve(input, parallel as SolveOutput);
  for (const [name, column] of Object.entries(serial)) {
    expect(Buffer.from(parallel[name]!.buffer).equals(Buffer.from(column.buffer)), name).toBe(true);
  }
  return parallel;
}

describe("the numbers are those of one thread, to the bit", () => {
  const { pressure, specificEnergy, specificEntropy } = direct;
  test.each<[string, SolveInput]>([
    ["density and energy", { density, specificEnergy, composition: core }],
    ["temperature and pressure", { temperature, pressure, composition: core }],
    ["pressure and entropy", { pressure, specificEntropy, composition: core }],
    ["density and temperature", { density, temperature, composition: core }],
    ["with guesses", { density, specificEnergy, composition: core, guess: { temperature: temperature.slice() } }],
  ])("%s", async (_name, input) => {
    const found = await compare(input, false);
    expect(bench.asked).toBeGreaterThan(1);
    for (const i of [0, 1023, 1024, rows - 1]) {
      expect((found["temperature"] as Float64Array)[i]! / temperature[i]!).toBeCloseTo(1, 8);
    }
  });

  test("compositions that change along the model, rows without an answer", async () => {
    const fractions = Float64Array.from({ length: rows }, (_, i) => {
      const carbon = 0.5 + 0.2 * Math.sin((i >> 2) / 500);
      return i % 2 === 0 ? carbon : 1 - (0.5 + 0.2 * Math.sin(((i - 1) >> 2) / 500));
    });
    const made = compositions(["C12", "O16"], fractions);
    const list = Array.from({ length: rows }, (_, i) => made[i >> 1] as Composition);
    const given = specificEnergy.slice();
    for (let i = 5; i < rows; i += 97) given[i] = [1, 1e40, Number.NaN][i % 3] as number;
    const found = await compare({ density, specificEnergy: given, composition: list }, true);
    expect(bench.asked).toBeGreaterThan(1);
    expect(new Set(found["refused"] as Uint8Array)).toEqual(new Set([0, 16, 18, 20]));
    expect((found["temperature"] as Float64Array)[5]).toBe(-7);
  });
});

async function errorOf(call: () => unknown): Promise<FermistateError> {
  try {
    await call();
  } catch (error) {
    return error as FermistateError;
  }
  throw new Error("not refused");
}

test("errors are those of one thread, with row and limit; output stays as it was", async () => {
  const given = direct.specificEnergy.slice();
  given[3_000] = 1;
  given[4_000] = 1;
  const pressure = new Float64Array(rows).fill(7);
  const inputs: readonly SolveInput[] = [
    { density, specificEnergy: given, composition: core },
    { density, specificEnergy: given.subarray(1), composition: core },
    { density, composition: core } as object as SolveInput,
    { density: density.map((value, i) => (i === 17 ? -1 : value)), specificEnergy: given, composition: core },
  ];
  for (const input of inputs) {
    const serial = await errorOf(() => solveColumns(matter, input, {}));
    const parallel = await errorOf(() => evaluator.solve(input, { pressure }));
    for (const field of ["code", "argument", "given", "allowed", "index", "limit", "message"] as const) {
      expect(parallel[field], field).toEqual(serial[field]);
    }
  }
  const first = await errorOf(() => evaluator.solve(inputs[0] as SolveInput, { pressure }));
  expect(first).toMatchObject({ code: "below-cold", index: 3_000, limit: expect.any(Number) });
  expect(pressure.every((value) => value === 7)).toBe(true);
});

test("a small batch stays in the calling thread", async () => {
  const found = new Float64Array(2);
  const two = { density: density.slice(0, 2), specificEnergy: direct.specificEnergy.slice(0, 2), composition: core };
  await evaluator.solve(two, { temperature: found });
  expect(bench.asked).toBe(0);
  expect(found[1]! / temperature[1]!).toBeCloseTo(1, 8);
});
