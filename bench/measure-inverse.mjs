/**
 * One process of the benchmark of inverse questions: temperature from density and energy along a model whose zones differ by
 * some 0.6 %, against the direct batch of the same zones, in turns; prints JSON.
 */
import { composition, solveColumns, whiteDwarfMatter } from "../dist/index.js";

const matter = whiteDwarfMatter();
const core = composition({ C12: 0.5, O16: 0.5 });
const zones = 4096;
const places = [
  { density: 1e3, temperature: 1e7 },
  { density: 1e6, temperature: 5e7 },
  { density: 1e7, temperature: 1e8 },
  { density: 1e9, temperature: 1e8 },
  { density: 1e6, temperature: 1e9 },
];
const column = (fill = () => 0) => Float64Array.from({ length: zones }, (_, i) => fill(i));
const median = (values) => values.sort((a, b) => a - b)[values.length >> 1];
const time = (task) => {
  const start = performance.now();
  task();
  return ((performance.now() - start) * 1e6) / zones;
};

const rows = places.map((place) => {
  const density = column((i) => place.density * (1 + 0.3 * Math.sin(i / 50)));
  const temperature = column((i) => place.temperature * (1 + 0.3 * Math.sin(i / 37)));
  const direct = { pressure: column(), specificEnergy: column(), soundSpeed: column() };
  const found = { temperature: column(), pressure: column(), soundSpeed: column(), evaluations: column() };
  const state = () => matter.evaluate({ density, temperature, composition: core }, direct);
  state();
  const specificEnergy = direct.specificEnergy.slice();
  const inverse = () => solveColumns(matter, { density, specificEnergy, composition: core }, found);
  const ratios = [];
  const directs = [];
  for (let i = 0; i < 31; i++) {
    const one = time(state);
    ratios.push(time(inverse) / one);
    directs.push(one);
  }
  const evaluations = found.evaluations.reduce((a, b) => a + b) / zones;
  return { ...place, ratio: median(ratios), direct: median(directs), evaluations };
});
process.stdout.write(JSON.stringify(rows));
