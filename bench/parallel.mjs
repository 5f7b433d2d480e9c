/**
 * One batch of a million points of the full plasma by two threads against one: ratio of the times, and what two idle cores
 * would give: time of the processor used by one thread over that of the calling thread plus the busier of the two.
 *
 * node bench/parallel.mjs [threads [rows]]; needs a build. Where /proc is not there, times of the clock only.
 */
import { existsSync, readdirSync, readFileSync } from "node:fs";
import { loadavg } from "node:os";
import { composition, whiteDwarfMatter } from "../dist/index.js";
import { parallelEvaluator } from "../dist/parallel.js";

const [threads = 2, rows = 1_000_000] = process.argv.slice(2).map(Number);
const names = ["pressure", "specificEnergy", "specificEntropy", "heatCapacityV", "gamma1", "soundSpeed"];

/** Processor time of each thread of this process, ms (a tick of Linux is 10 ms). */
function threadTimes() {
  const folder = "/proc/self/task";
  if (!existsSync(folder)) return undefined;
  return new Map(
    readdirSync(folder).map((id) => {
      const fields = readFileSync(`${folder}/${id}/stat`, "utf8").split(") ")[1].split(" ");
      return [id, 10 * (Number(fields[11]) + Number(fields[12]))];
    }),
  );
}

/** Milliseconds by the clock, and of the processor by thread, the calling thread first. */
async function timesOf(task) {
  const before = threadTimes();
  const start = performance.now();
  await task();
  const clock = performance.now() - start;
  const after = threadTimes();
  if (before === undefined || after === undefined) return { clock, caller: Number.NaN, busiest: Number.NaN };
  const used = (id) => after.get(id) - (before.get(id) ?? 0);
  const caller = used(String(process.pid));
  const others = [...after.keys()].filter((id) => id !== String(process.pid));
  return { clock, caller, busiest: Math.max(0, ...others.map(used)) };
}

let seed = 12345;
const random = () => {
  seed = (seed * 48271) % 2147483647;
  return seed / 2147483647;
};
const density = Float64Array.from({ length: rows }, () => 10 ** (5 + 5 * random()));
const temperature = Float64Array.from({ length: rows }, () => 10 ** (6 + 3 * random()));
const matter = composition({ C12: 0.5, O16: 0.5 });
const input = { density, temperature, composition: matter };
const columns = () => Object.fromEntries(names.map((name) => [name, new Float64Array(rows)]));
const [one, several] = [columns(), columns()];

const eos = whiteDwarfMatter();
const start = performance.now();
const evaluator = await parallelEvaluator({ whiteDwarfMatter: {} }, { threads });
const opening = performance.now() - start;
eos.evaluate(input, one);
await evaluator.evaluate(input, several);
const median = (list) => list.sort((a, b) => a - b)[list.length >> 1];
const clock = [];
const processor = [];
for (let i = 0; i < 5; i++) {
  // In turns, so that a slow moment of a shared machine strikes both.
  const serial = await timesOf(() => eos.evaluate(input, one));
  const parallel = await timesOf(() => evaluator.evaluate(input, several));
  clock.push(serial.clock / parallel.clock);
  processor.push(serial.caller / (parallel.caller + parallel.busiest));
}
for (const name of names) {
  if (!Buffer.from(one[name].buffer).equals(Buffer.from(several[name].buffer))) throw new Error(`${name} differs`);
}
await evaluator.close();
console.log(
  `${rows} points, ${threads} threads: ${median(clock).toFixed(2)} x by the clock (load ${loadavg()[0].toFixed(1)}), ` +
    `${median(processor).toFixed(2)} x by processor times; opening ${opening.toFixed(0)} ms; same bits`,
);
