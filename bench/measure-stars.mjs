/** One process of the benchmark of stars: milliseconds per star on the built library, prints JSON. */
import { barotrope, polytrope, publishedBarotrope } from "../dist/barotropes.js";
import { composition, whiteDwarfMatter } from "../dist/index.js";
import { hydrostaticStar, massRadiusSequence, maximumMass } from "../dist/structure.js";

const cold = barotrope(whiteDwarfMatter(), composition({ C12: 0.5, O16: 0.5 }), { temperature: 0 });
const matter = {
  "polytrope of index 3/2": [polytrope({ constant: 3e12, index: 1.5 }), 1e5, [1e4, 1e7]],
  "piecewise neutron star": [publishedBarotrope("SLy piecewise"), 1e15, [3e14, 2e15]],
  "cold C/O, full physics": [cold, 1e8, [1e5, 1e10]],
};
const median = (values) => values.sort((a, b) => a - b)[values.length >> 1];

function milliseconds(repeats, task) {
  const times = [];
  for (let i = 0; i < repeats; i++) {
    const start = performance.now();
    if (!(task() > 0)) throw new Error("no result");
    times.push(performance.now() - start);
  }
  return median(times);
}

const rows = Object.entries(matter).map(([name, [barotropeOf, centralDensity, range]]) => {
  const tight = hydrostaticStar(barotropeOf, { centralDensity, tolerance: 1e-14 });
  const star = hydrostaticStar(barotropeOf, { centralDensity });
  return {
    name,
    first: milliseconds(1, () => hydrostaticStar(barotropeOf, { centralDensity: 1.1 * centralDensity }).mass),
    star: milliseconds(61, () => hydrostaticStar(barotropeOf, { centralDensity }).mass),
    everything: milliseconds(
      31,
      () => hydrostaticStar(barotropeOf, { centralDensity, rotation: true, tides: true }).mass,
    ),
    sequence: milliseconds(5, () => massRadiusSequence(barotropeOf, { range, count: 200 }).mass[199]),
    maximum: milliseconds(3, () => maximumMass(barotropeOf, { range }).mass),
    error: Math.abs(star.mass / tight.mass - 1),
  };
});
process.stdout.write(JSON.stringify(rows));
