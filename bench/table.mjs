/**
 * node bench/table.mjs: a look-up of a table beside Math.exp, the direct evaluation, and the same look-up in C; needs a build.
 *
 * A look-up is the six members of the free energy up to second order at random places; "state" is twelve columns of
 * `evaluate`, which adds what every equation of state does. Shortest times of many slices, the two sides in turns.
 */
import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { composition, whiteDwarfMatter } from "../dist/index.js";
import { buildTable, tableBytes, tableEquationOfState, tabulated } from "../dist/tables.js";
import { startProgram } from "./native/program.mjs";

const matter = composition({ C12: 0.5, O16: 0.5 });
const direct = whiteDwarfMatter();
const table = buildTable(direct, matter, { density: [1e4, 1e9], temperature: [1e6, 1e9], accuracy: 1e-6 });
const interpolated = tableEquationOfState(table);
const part = tabulated(table);
const count = 4096;
const slices = 400;

/** The same random places in every run: the multiplicative congruential generator of Park & Miller 1988. */
let seed = 1;
function random() {
  seed = (48271 * seed) % 2147483647;
  return seed / 2147483647;
}
const density = Float64Array.from({ length: count }, () => 1e4 * 10 ** (5 * random()));
const { factor } = table.freezing;
// The C program knows one sheet: places where the matter is liquid.
const temperature = density.map((rho) => {
  const low = Math.max(1e6, 1.001 * factor * Math.cbrt(rho));
  return low * (1e9 / low) ** random();
});
const names = [
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "heatCapacityV",
  "heatCapacityP",
  "densityExponent",
  "temperatureExponent",
];
names.push("gamma1", "adiabaticGradient", "soundSpeed", "pressureByDensity", "pressureByTemperature");
const output = Object.fromEntries(names.map((name) => [name, new Float64Array(count)]));
const point = new Float64Array(16);
const members = new Float64Array(6);
const own = new Float64Array(6 * count);

/** One pass over all points by what is timed. */
const passes = {
  exp: () => {
    let sum = 0;
    for (let i = 0; i < count; i++) sum += Math.exp(-1e-9 * density[i]);
    own[0] = sum;
  },
  "look-up": () => {
    for (let i = 0; i < count; i++) {
      point[0] = density[i];
      point[1] = temperature[i];
      for (let k = 0; k < 6; k++) members[k] = 0;
      part.add(point, matter, 2, members);
      for (let k = 0; k < 6; k++) own[6 * i + k] = members[k];
    }
  },
  state: () => interpolated.evaluate({ density, temperature, composition: matter }, output),
  "direct state": () => direct.evaluate({ density, temperature, composition: matter }, output),
};

const folder = mkdtempSync(join(tmpdir(), "table-bench-"));
try {
  const child = startNative(folder);
  const best = {};
  const keep = (name, time) => {
    best[name] = Math.min(best[name] ?? Number.POSITIVE_INFINITY, time);
  };
  for (let slice = 0; slice < slices; slice++) {
    for (const [name, pass] of Object.entries(passes)) {
      if (name === "direct state" && slice % 8 !== 0) continue;
      const start = performance.now();
      pass();
      keep(name, ((performance.now() - start) * 1e6) / count);
    }
    if (child !== undefined) keep("look-up in C", (await child.ask("t", 1))[0]);
  }
  if (child !== undefined) {
    passes["look-up"]();
    const theirs = await child.ask("?", 6 * count);
    let worst = 0;
    for (let i = 0; i < 6 * count; i++) worst = Math.max(worst, Math.abs(theirs[i] / own[i] - 1));
    if (!(worst < 1e-10)) throw new Error(`the two sides differ by ${worst}`);
    process.stdout.write(`largest difference of the two sides: ${worst.toExponential(1)}\n`);
    child.stop();
  }
  process.stdout.write(`table of ${(tableBytes(table) / 1e6).toFixed(2)} MB, ${count} random places\n`);
  for (const [name, time] of Object.entries(best)) {
    const cells = [`${time.toFixed(1)} ns`, `${(time / best.exp).toFixed(1)} x exp`];
    if (best["look-up in C"] !== undefined) cells.push(`${(time / best["look-up in C"]).toFixed(2)} x C`);
    process.stdout.write(`${name.padEnd(14)}${cells.map((cell) => cell.padStart(12)).join("")}\n`);
  }
} finally {
  rmSync(folder, { recursive: true });
}

/** Compiles and starts the C program; undefined where there is no compiler. */
function startNative(place) {
  const source = fileURLToPath(new URL("./native/table.c", import.meta.url));
  const program = join(place, "table");
  try {
    execFileSync("cc", ["-O3", "-march=native", "-ffp-contract=off", "-o", program, source, "-lm"]);
  } catch {
    process.stdout.write("no C compiler: without the comparison\n");
    return undefined;
  }
  const sheet = table.sheets.find(({ phase }) => phase === "liquid");
  const unitsOf = ({ lowest, highest, blocks }) => [Math.log(lowest), blocks / Math.log(highest / lowest), blocks];
  const u = unitsOf(table.density);
  const v = unitsOf(table.temperature);
  const intervals = table.cold.nodes.length / 3 - 1;
  const coldPerUnit = intervals / Math.log(table.density.highest / table.density.lowest);
  const blocks = [];
  const nodes = Float64Array.from(sheet.nodes);
  let first = 0;
  for (const [k, level] of sheet.densityLevels.entries()) {
    const [m, n] = [2 ** level, 2 ** sheet.temperatureLevels[k]];
    blocks.push(level < 0 ? [-1, 0, 0, 0] : [first, m, n, sheet.exponents[k]]);
    if (level < 0) continue;
    const end = first + 9 * (m + 1) * (n + 1);
    for (let at = first; at < end; at++) {
      const order = (at - first) % 9;
      nodes[at] /= (u[1] * m) ** Math.floor(order / 3) * (v[1] * n) ** (order % 3);
    }
    first = end;
  }
  const cold = table.cold.nodes.map((value, at) => value / coldPerUnit ** (at % 3));
  const head = [...u, ...v, u[0], coldPerUnit, intervals, count, nodes.length];
  const file = join(place, "data");
  writeFileSync(
    file,
    new Uint8Array(Float64Array.of(...head, ...cold, ...blocks.flat(), ...nodes, ...density, ...temperature).buffer),
  );
  return startProgram(program, [file]);
}
