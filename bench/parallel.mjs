/**
 * One batch of a million points of the full plasma by two threads against one: ratio of the times, and the same for threads
 * that have nothing to do with each other (each its own share of the rows, told to start and nothing else), which is
 * what the machine's cores can give at that moment.
 *
 * node bench/parallel.mjs [threads [rows]]; needs a build.
 */
import { loadavg } from "node:os";
import { fileURLToPath } from "node:url";
import { isMainThread, parentPort, Worker, workerData } from "node:worker_threads";
import { composition, whiteDwarfMatter } from "../dist/index.js";
import { parallelEvaluator } from "../dist/parallel.js";

const names = ["pressure", "specificEnergy", "specificEntropy", "heatCapacityV", "gamma1", "soundSpeed"];

/** A batch of random points, and columns for it. */
function batchOf(rows) {
  let seed = 12345;
  const random = () => {
    seed = (seed * 48271) % 2147483647;
    return seed / 2147483647;
  };
  const density = Float64Array.from({ length: rows }, () => 10 ** (5 + 5 * random()));
  const temperature = Float64Array.from({ length: rows }, () => 10 ** (6 + 3 * random()));
  const columns = () => Object.fromEntries(names.map((name) => [name, new Float64Array(rows)]));
  return { input: { density, temperature, composition: composition({ C12: 0.5, O16: 0.5 }) }, columns };
}

/** A thread of its own: a batch whenever it is told. */
function answerAlone() {
  const { input, columns } = batchOf(workerData);
  const output = columns();
  const eos = whiteDwarfMatter();
  parentPort.on("message", () => {
    eos.evaluate(input, output);
    parentPort.postMessage("done");
  });
}

async function measure() {
  const [threads = 2, rows = 1_000_000] = process.argv.slice(2).map(Number);
  const { input, columns } = batchOf(rows);
  const [one, several] = [columns(), columns()];
  const eos = whiteDwarfMatter();
  const start = performance.now();
  const evaluator = await parallelEvaluator({ whiteDwarfMatter: {} }, { threads });
  const opening = performance.now() - start;
  const alone = Array.from(
    { length: threads },
    () => new Worker(fileURLToPath(import.meta.url), { workerData: Math.ceil(rows / threads) }),
  );
  const apart = () =>
    Promise.all(
      alone.map((worker) => {
        worker.postMessage("go");
        return new Promise((done) => worker.once("message", done));
      }),
    );
  const tasks = [() => eos.evaluate(input, one), () => evaluator.evaluate(input, several), apart];
  for (const task of tasks) await task();
  const median = (list) => list.sort((a, b) => a - b)[list.length >> 1];
  const together = [];
  const possible = [];
  for (let i = 0; i < 9; i++) {
    // In turns, so that a slow moment of a shared machine strikes all.
    const times = [];
    for (const task of tasks) {
      const from = performance.now();
      await task();
      times.push(performance.now() - from);
    }
    together.push(times[0] / times[1]);
    possible.push(times[0] / times[2]);
  }
  for (const name of names) {
    if (!Buffer.from(one[name].buffer).equals(Buffer.from(several[name].buffer))) throw new Error(`${name} differs`);
  }
  await evaluator.close();
  for (const worker of alone) await worker.terminate();
  console.log(
    `${rows} points, ${threads} threads: ${median(together).toFixed(2)} x one thread; ` +
      `unrelated threads ${median(possible).toFixed(2)} x (load ${loadavg()[0].toFixed(1)}); ` +
      `opening ${opening.toFixed(0)} ms; same bits`,
  );
}

if (isMainThread) await measure();
else answerAlone();
