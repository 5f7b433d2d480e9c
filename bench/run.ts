/**
 * npm run bench: time per point beside accuracy, by region.
 *
 * Every figure is the median over several processes (a fresh process compiles afresh; on a shared machine one process in
 * twenty is slow throughout). Times as ratios to Math.exp in the same process, and in nanoseconds. Accuracy: the
 * library's answer at the fixture's points of the region against arbitrary-precision integrals.
 *
 * npm run bench -- --processes 9
 * npm run bench -- --baseline file:///path/to/module.mjs    another implementation in the same run: the module exports
 *     prepare({ density, temperature }, composition) and returns a function that evaluates all points once
 * npm run bench -- --native                                 the comparison with C alone (native/)
 */
import { execFileSync } from "node:child_process";
import { readFileSync } from "node:fs";
import { cpus } from "node:os";
import { fileURLToPath } from "node:url";
import { parseArgs } from "node:util";
import { combine, composition, electronPositronGas } from "../src/index.js";
import { nativeRows } from "./native/native.js";
import { regions } from "./regions.mjs";

const { values } = parseArgs({
  options: { processes: { type: "string", default: "5" }, baseline: { type: "string" }, native: { type: "boolean" } },
});
const processes = Number(values.processes);
const here = fileURLToPath(new URL(".", import.meta.url));
const median = (list: number[]): number => list.sort((a, b) => a - b)[list.length >> 1] ?? Number.NaN;

interface Timing {
  readonly time: number;
  readonly exponentials: number;
  readonly baseline?: number;
}

function timingsOf(region: number, method: string): Timing[] {
  return Array.from({ length: processes }, () => {
    const other = values.baseline === undefined ? [] : [values.baseline];
    const args = [`${here}measure.mjs`, String(region), method, ...other];
    return JSON.parse(execFileSync(process.execPath, args, { encoding: "utf8" })) as Timing;
  });
}

/** Largest and median relative error of pressure and entropy of the electron gas within a region. */
function accuracyOf(region: { temperature: number[]; density: number[] }): string {
  const [head, ...lines] = readFileSync(`${here}../test/fixtures/electron-gas-reference.csv`, "utf8")
    .split("\n")
    .filter((line) => line !== "" && !line.startsWith("#"));
  const column = (name: string): number => head!.split(",").indexOf(name);
  const gas = combine(electronPositronGas());
  const helium = composition({ He4: 1 });
  const inside = ([low, high]: number[], value: number): boolean => value >= 10 ** low! && value <= 10 ** high!;
  const errors: { pressure: number[]; entropy: number[] } = { pressure: [], entropy: [] };
  for (const line of lines) {
    const cells = line.split(",");
    const n = Number(cells[column("n_e")]);
    const temperature = Number(cells[column("T")]);
    if (!inside(region.density, n / 6.02214076e23) || !inside(region.temperature, temperature)) continue;
    const density = n / helium.electronsPerGram;
    const state = gas.state(density, temperature, helium);
    errors.pressure.push(Math.abs(state.pressure / Number(cells[column("P")]) - 1));
    errors.entropy.push(Math.abs((state.specificEntropy * density) / Number(cells[column("s")]) - 1));
  }
  const show = (list: number[]): string =>
    `${Math.max(...list).toExponential(1)} (median ${median(list).toExponential(0)})`;
  return `P ${show(errors.pressure)}, s ${show(errors.entropy)}, ${errors.pressure.length} points`;
}

if (values.native) {
  console.log(nativeRows(processes).join("\n"));
  process.exit(0);
}

const load = Array.from({ length: processes }, () => {
  const program =
    'await import("./bench/regions.mjs"); const t=performance.now(); await import("./dist/index.js"); ' +
    "process.stdout.write(String(performance.now()-t))"; // Node's own loader is warm by then
  return Number(
    execFileSync(process.execPath, ["--input-type=module", "-e", program], { cwd: `${here}..`, encoding: "utf8" }),
  );
});

const rows = ["gas", "ideal", "all columns", "state", "order 3"];
console.log(`node ${process.version}, ${cpus()[0]?.model.trim() ?? "unknown processor"}, ${processes} processes each`);
console.log(`loading the core: ${median(load).toFixed(1)} ms\n`);
for (const [number, region] of regions.entries()) {
  console.log(
    `${region.name}: T 1e${region.temperature.join("..1e")} K, rho Y_e 1e${region.density.join("..1e")} g/cm^3`,
  );
  console.log(`  measured error of the electron gas: ${accuracyOf(region)}`);
  for (const method of number === 0 ? ["gas", "ideal", "Coulomb", ...rows.slice(2)] : rows) {
    const timings = timingsOf(number, method);
    const time = median(timings.map((timing) => timing.time));
    const ratio = median(timings.map((timing) => timing.exponentials));
    const other = median(timings.map((timing) => timing.baseline ?? Number.NaN));
    const beside = values.baseline === undefined ? "" : `, ${other.toFixed(2)} x baseline`;
    console.log(
      `  ${method.padEnd(12)} ${time.toFixed(0).padStart(6)} ns  ${ratio.toFixed(0).padStart(4)} x Math.exp${beside}`,
    );
  }
}
console.log(
  "\ngas: electrons and positrons, batch, 8 columns; ideal: with ideal ions and photons; Coulomb: full plasma of C/O, 1e5 to 1e10 g/cm^3; all columns: every quantity,",
);
console.log(
  "positron density included; state: one object per call; order 3: all eleven derivatives of the electron gas.",
);
console.log(`\n${nativeRows(processes).join("\n")}`);

interface InverseTiming {
  readonly density: number;
  readonly temperature: number;
  readonly ratio: number;
  readonly direct: number;
  readonly evaluations: number;
}
const inverses = Array.from(
  { length: processes },
  () =>
    JSON.parse(execFileSync(process.execPath, [`${here}measure-inverse.mjs`], { encoding: "utf8" })) as InverseTiming[],
);
console.log("\ntemperature from density and energy along a model, each zone from its neighbour, C/O:");
for (const [i, { density, temperature, evaluations }] of inverses[0]!.entries()) {
  const show = (key: "ratio" | "direct", digits: number): string =>
    median(inverses.map((rows) => rows[i]![key])).toFixed(digits);
  console.log(
    `  about ${density} g/cm^3, ${temperature} K: ${show("ratio", 2)} x the direct state (${show("direct", 0)} ns),`,
    `${evaluations.toFixed(2)} evaluations`,
  );
}

interface CompositionTiming {
  readonly nuclides: number;
  readonly single: number;
  readonly objects: number;
  readonly first: number;
  readonly again: number;
  readonly matrix: number;
  readonly species: number;
}
const networks = Array.from(
  { length: processes },
  () =>
    JSON.parse(
      execFileSync(process.execPath, [`${here}measure-compositions.mjs`], { encoding: "utf8" }),
    ) as CompositionTiming[],
);
console.log(
  "\na new composition in each of 1024 zones, in units of an evaluation of the full plasma with one composition:",
);
for (const [i, { nuclides }] of networks[0]!.entries()) {
  const show = (key: keyof CompositionTiming): string => median(networks.map((rows) => rows[i]![key])).toFixed(2);
  console.log(
    `  ${nuclides} nuclides: from a matrix of fractions ${show("matrix")}; as objects: making it ${show("objects")}`,
    `(${show("single")} one by one), its first evaluation ${show("first")}, each further one ${show("again")};`,
    `evaluation and derivatives by all species ${show("species")}`,
  );
}

interface StarTiming {
  readonly name: string;
  readonly first: number;
  readonly star: number;
  readonly everything: number;
  readonly sequence: number;
  readonly maximum: number;
  readonly error: number;
}
const stars = Array.from(
  { length: processes },
  () => JSON.parse(execFileSync(process.execPath, [`${here}measure-stars.mjs`], { encoding: "utf8" })) as StarTiming[],
);
console.log("\nstars in general relativity at the default tolerance, milliseconds:");
for (const [i, { name, error }] of stars[0]!.entries()) {
  const show = (key: "first" | "star" | "everything" | "sequence" | "maximum", digits: number): string =>
    median(stars.map((rows) => rows[i]![key])).toFixed(digits);
  console.log(
    `  ${name.padEnd(24)} a star ${show("star", 2)} (the third one made ${show("first", 2)}; with rotation and tide ${show("everything", 2)}),`,
    `200 stars ${show("sequence", 0)}, largest mass ${show("maximum", 0)}; mass against tolerance 1e-14: ${error.toExponential(1)}`,
  );
}
