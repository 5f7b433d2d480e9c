/**
 * One process of the native benchmark: the built library and the C program in turns, in slices of a few batches.
 *
 * node bench/native/measure.mjs <program> <folder>: checks that both sides agree, prints JSON: for each sum the median over
 * slices of the ratio of times and of either time per point in nanoseconds, the ratio of the shortest times (a busy neighbour
 * slows the two by different factors), and the time of one Math.exp.
 */
import { writeFileSync } from "node:fs";
import { join } from "node:path";
import { combine, composition, electronPositronGas, quantityNames, whiteDwarfMatter } from "../../dist/index.js";
import { pointsOf, regions, usual } from "../regions.mjs";
import { startProgram } from "./program.mjs";

const [, , program, folder] = process.argv;
/** Points per slice, about a millisecond: shorter than a slice of the scheduler. */
const count = 1024;
const slices = 401;
/** Largest difference allowed, relative to the quantity or to the terms it is the difference of. */
const tolerance = 1e-13;

// Cold matter too thin to be ionised is refused: the region's densities, moved to 1e5 to 1e10 g/cm^3.
const points = pointsOf(regions[0]);
const temperature = points.temperature.slice(0, count);
const density = points.density.slice(0, count).map((value) => 1e5 * (value / 2e2) ** (5 / 8));
const input = { density, temperature, composition: composition({ C12: 0.5, O16: 0.5 }) };
/** The sums, by the letter the program knows them by. */
const sums = [
  { letter: "g", name: "electron gas", eos: combine(electronPositronGas()), columns: usual },
  { letter: "w", name: "full plasma", eos: whiteDwarfMatter(), columns: usual },
  { letter: "a", name: "all columns", eos: whiteDwarfMatter(), columns: quantityNames },
];

const file = join(folder, `points-${process.pid}`);
writeFileSync(file, new Uint8Array(Float64Array.of(...density, ...temperature).buffer));
const { ask, stop } = startProgram(program, [file, String(count)]);

/** The size of the terms whose sum a quantity is; what is not listed is no difference, or harmless as one. */
const scales = {
  specificFreeEnergy: (of) => Math.abs(of.specificEnergy) + Math.abs(of.specificEnergy - of.specificFreeEnergy),
  energyByDensity: (of) =>
    (Math.abs(of.pressure) / of.density + Math.abs(of.temperatureExponent * of.pressure) / of.density) / of.density,
  // An exponential of -(eta + 2 m c^2/kT): the rounding of its argument counts.
  positronDensity: (of) =>
    of.positronDensity * Math.max(1, (of.electronDegeneracy + (2 * 5.93e9) / of.temperature) / 100),
};

/** Largest difference of the two sides over all points and columns. */
async function disagreement(sum, output) {
  await ask(sum.letter, 1);
  const all = await ask("?", count * sum.columns.length);
  let worst = { difference: 0 };
  for (const [j, name] of sum.columns.entries()) {
    for (let i = 0; i < count; i++) {
      const row = Object.fromEntries(Object.entries(output).map(([key, column]) => [key, column[i]]));
      const ours = output[name][i];
      const scale =
        sum.columns === usual
          ? Math.abs(ours)
          : Math.abs(scales[name]?.({ ...row, density: density[i], temperature: temperature[i] }) ?? ours);
      const gap = Math.abs(all[j * count + i] - ours);
      const difference = gap === 0 ? 0 : gap / scale;
      if (!(difference <= worst.difference))
        worst = { difference, name, density: density[i], temperature: temperature[i] };
    }
  }
  return worst;
}

function exponentials() {
  let sum = 0;
  for (let i = 0; i < count; i++) sum += Math.exp(-i / count);
  return sum;
}

/** Processor time, as the program tells its own: on a busy machine the clock would count the neighbours. */
const time = (task) => {
  const start = process.cpuUsage();
  task();
  const { user, system } = process.cpuUsage(start);
  return (user + system) * 1e3;
};
const median = (values) => Float64Array.from(values).sort()[values.length >> 1];

const results = [];
for (const sum of sums) {
  const output = Object.fromEntries(sum.columns.map((name) => [name, new Float64Array(count)]));
  const run = () => sum.eos.evaluate(input, output);
  run();
  const worst = await disagreement(sum, output);
  if (!(worst.difference <= tolerance)) {
    throw new Error(`library and native program disagree (${sum.name}): ${JSON.stringify(worst)}`);
  }
  const ours = [];
  const native = [];
  const units = [];
  for (let i = 0; i < slices; i++) {
    ours.push(time(run));
    native.push((await ask(sum.letter, 1))[0]);
    units.push(time(exponentials));
  }
  const settled = (list) => list.slice(slices >> 2); // compiled by then
  const ratios = ours.map((value, i) => value / native[i]);
  results.push({
    name: sum.name,
    ratio: median(settled(ratios)),
    time: median(settled(ours)) / count,
    native: median(settled(native)) / count,
    quietest: Math.min(...ours) / Math.min(...native),
    exponential: median(settled(units)) / count,
    difference: worst.difference,
  });
}
stop();
process.stdout.write(JSON.stringify(results));
