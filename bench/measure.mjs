/**
 * One process of the benchmark: times one region with one method on the built library, prints JSON.
 *
 * node bench/measure.mjs <region number> <method> [<module>]: median time of repeated batches in nanoseconds per point, and
 * its ratio to one Math.exp (the unit that makes machines comparable) and to the other module's, in the same process.
 */
import { combine, composition, electronPositronGas, quantityNames, whiteDwarfMatter } from "../dist/index.js";
import { count, pointsOf, regions, usual } from "./regions.mjs";

const [, , regionNumber, method, baseline] = process.argv;
const region = regions[Number(regionNumber)];
const points = pointsOf(region);
const matter = composition({ C12: 0.5, O16: 0.5 });
const columns = (names) => Object.fromEntries(names.map((name) => [name, new Float64Array(count)]));

/** A function that evaluates all points once, and a number that depends on all of them. */
function methodFor(name) {
  const input = { ...points, composition: matter };
  if (name === "gas" || name === "ideal") {
    const eos = name === "gas" ? combine(electronPositronGas()) : whiteDwarfMatter({ coulomb: false });
    const output = columns(usual);
    return () => {
      eos.evaluate(input, output);
      return output.pressure[count - 1];
    };
  }
  if (name === "Coulomb") {
    // Cold matter too thin to be ionised is refused: the region's densities, moved to 1e5 to 1e10 g/cm^3.
    const density = points.density.map((value) => 1e5 * (value / 2e2) ** (5 / 8));
    const eos = whiteDwarfMatter();
    const output = columns(usual);
    return () => {
      eos.evaluate({ ...points, density, composition: matter }, output);
      return output.pressure[count - 1];
    };
  }
  if (name === "all columns") {
    const eos = whiteDwarfMatter({ coulomb: false });
    const output = columns(quantityNames);
    return () => {
      eos.evaluate(input, output);
      return output.pressure[count - 1];
    };
  }
  if (name === "state") {
    const eos = whiteDwarfMatter({ coulomb: false });
    return () => {
      let sum = 0;
      for (let i = 0; i < count; i++) sum += eos.state(points.density[i], points.temperature[i], matter).gamma1;
      return sum;
    };
  }
  if (name === "order 3") {
    const eos = combine(electronPositronGas());
    return () => {
      let sum = 0;
      for (let i = 0; i < count; i++) sum += eos.freeEnergy(points.density[i], points.temperature[i], matter, 3).f03;
      return sum;
    };
  }
  throw new Error(`unknown method ${name}`);
}

const run = methodFor(method);
const other = baseline === undefined ? undefined : (await import(baseline)).prepare(points, matter);

function exponentials() {
  let sum = 0;
  for (let i = 0; i < count; i++) sum += Math.exp(-i / count);
  return sum;
}

const time = (task) => {
  const start = performance.now();
  const result = task();
  if (!(result !== undefined && !Number.isNaN(result))) throw new Error("no result");
  return ((performance.now() - start) * 1e6) / count;
};
const median = (values) => values.sort((a, b) => a - b)[values.length >> 1];
const times = [];
const units = [];
const others = [];
// Taken in turns, so that a slow moment of a shared machine strikes all alike.
for (let i = 0; i < 41; i++) {
  times.push(time(run));
  units.push(time(exponentials));
  if (other !== undefined) others.push(time(other));
}
const ratio = (list) => median(times.map((one, i) => one / list[i]));
process.stdout.write(
  JSON.stringify({
    time: median([...times]),
    exponentials: ratio(units),
    ...(other === undefined ? {} : { baseline: ratio(others) }),
  }),
);
