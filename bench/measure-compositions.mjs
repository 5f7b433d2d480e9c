/**
 * One process of the benchmark of compositions: a batch in which every row brings a new composition of the same
 * species, as in a reaction network, against the same batch with one composition; what making them costs; and the
 * derivatives by every species.
 * Prints JSON, times in units of a row of the batch with one composition.
 */
import { composition, compositions, whiteDwarfMatter } from "../dist/index.js";

const networks = [
  ["C12", "O16"],
  ["He4", "C12", "O16", "Ne20", "Ne22", "Mg24", "Si28"],
  "H1 He3 He4 C12 C13 N13 N14 N15 O15 O16 O17 F18 F19 Ne20 Ne21 Ne22 Na23 Mg24 Al27 Si28 S32".split(" "),
];
const rows = 1024; // zones of a model
let seed = 12345;
const random = () => {
  seed = (seed * 48271) % 2147483647;
  return seed / 2147483647;
};
const median = (values) => values.sort((a, b) => a - b)[values.length >> 1];
const time = (task) => {
  const start = performance.now();
  task();
  return ((performance.now() - start) * 1e6) / rows;
};

const matter = whiteDwarfMatter();
const density = Float64Array.from({ length: rows }, () => 10 ** (5 + 4 * random()));
const temperature = Float64Array.from({ length: rows }, () => 10 ** (6.5 + 2 * random()));
const output = { pressure: new Float64Array(rows), specificEnergy: new Float64Array(rows) };

const found = networks.map((labels) => {
  const fractions = new Float64Array(rows * labels.length);
  for (let row = 0; row < rows; row++) {
    const shares = labels.map(random);
    const sum = shares.reduce((a, b) => a + b);
    for (const [i, share] of shares.entries()) fractions[row * labels.length + i] = share / sum;
  }
  const fractionsOf = (row) =>
    Object.fromEntries(labels.map((label, i) => [label, fractions[row * labels.length + i]]));
  const objects = Array.from({ length: rows }, (_, row) => fractionsOf(row));
  const one = composition(objects[0]);
  const ratios = { single: [], objects: [], first: [], again: [], matrix: [], species: [] };
  const evaluator = matter.evaluator();
  const derivatives = new Float64Array(4 * labels.length);
  const directs = [];
  for (let i = 0; i < 41; i++) {
    const direct = time(() => matter.evaluate({ density, temperature, composition: one }, output));
    ratios.single.push(time(() => objects.map((object) => composition(object))) / direct);
    let made = [];
    const making = time(() => {
      made = compositions(labels, fractions);
    });
    ratios.objects.push(making / direct);
    const evaluate = () => matter.evaluate({ density, temperature, composition: made }, output);
    ratios.first.push(time(evaluate) / direct);
    ratios.again.push(time(evaluate) / direct);
    const zones = { nuclides: labels, fractions };
    ratios.matrix.push(time(() => matter.evaluate({ density, temperature, composition: zones }, output)) / direct);
    made = compositions(labels, fractions);
    const bySpecies = time(() => {
      for (let row = 0; row < rows; row++) {
        evaluator.point[0] = density[row];
        evaluator.point[1] = temperature[row];
        evaluator.fillMembers(made[row], 2);
        evaluator.fillSpecies(made[row], derivatives);
      }
    });
    ratios.species.push(bySpecies / direct);
    directs.push(direct);
  }
  const medians = Object.fromEntries(Object.entries(ratios).map(([name, values]) => [name, median(values)]));
  return { nuclides: labels.length, direct: median(directs), ...medians };
});
process.stdout.write(JSON.stringify(found));
