/** The batch form allocates nothing per point: heap statistics of the built library in a process of its own. */
import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { expect, test } from "vitest";

const root = fileURLToPath(new URL("../..", import.meta.url));

/** Bytes of heap per point of a batch after warming up; the young generation is large enough to collect nothing. */
function bytesPerPoint(temperature: [number, number], density: [number, number], coulomb: boolean): number {
  const program = `
    import v8 from "node:v8";
    import { composition, whiteDwarfMatter } from "./dist/index.js";
    let seed = 7;
    const random = () => (seed = (seed * 48271) % 2147483647) / 2147483647;
    const count = 100_000;
    const column = ([low, high]) => Float64Array.from({ length: count }, () => 10 ** (low + (high - low) * random()));
    const names = ["pressure", "specificEnergy", "specificEntropy", "heatCapacityV", "gamma1", "soundSpeed", "positronDensity"];
    const output = Object.fromEntries(names.map((name) => [name, new Float64Array(count)]));
    const input = {
      temperature: column(${JSON.stringify(temperature)}),
      density: column(${JSON.stringify(density)}),
      composition: composition({ C12: 0.5, O16: 0.5 }),
    };
    const eos = whiteDwarfMatter({ coulomb: ${coulomb} });
    for (let i = 0; i < 8; i++) eos.evaluate(input, output);
    const least = [];
    for (let i = 0; i < 5; i++) {
      const before = v8.getHeapStatistics().used_heap_size;
      eos.evaluate(input, output);
      least.push((v8.getHeapStatistics().used_heap_size - before) / count);
    }
    console.log(Math.min(...least.filter((bytes) => bytes >= 0)));`;
  const options = ["--max-semi-space-size=64", "--min-semi-space-size=64", "--input-type=module", "-e", program];
  return Number(execFileSync(process.execPath, options, { cwd: root, encoding: "utf8" }));
}

test.each<[string, [number, number], [number, number], boolean]>([
  ["ideal plasma, white dwarf", [6, 9], [2, 10], false],
  ["ideal plasma, hot, pairs", [9, 11], [4, 12], false],
  ["ideal plasma, whole plane", [2, 13], [-15, 15], false],
  ["Coulomb plasma, liquid and crystal", [6, 9], [5, 9], true],
])("%s: less than half a byte per point", (_name, temperature, density, coulomb) => {
  const bytes = bytesPerPoint(temperature, density, coulomb);
  expect(bytes).toBeGreaterThanOrEqual(0);
  expect(bytes).toBeLessThan(0.5); // one boxed number per point would be 16; bookkeeping per call is 0.1
});

test("a star of 1500 evaluations leaves less than five bytes for each: the star itself and its ranges, no boxed numbers", () => {
  const program = `
    import v8 from "node:v8";
    import { polytrope } from "./dist/barotropes.js";
    import { massRadiusSequence } from "./dist/structure.js";
    const matter = polytrope({ constant: 3e12, index: 1.5 });
    const options = { centralDensities: new Float64Array(200).fill(1e5), tolerance: 1e-13, rotation: true, tides: true };
    for (let i = 0; i < 6; i++) massRadiusSequence(matter, options);
    const least = [];
    for (let i = 0; i < 5; i++) {
      const before = v8.getHeapStatistics().used_heap_size;
      massRadiusSequence(matter, options);
      least.push((v8.getHeapStatistics().used_heap_size - before) / 200);
    }
    console.log(Math.min(...least.filter((bytes) => bytes >= 0)));`;
  const options = ["--max-semi-space-size=64", "--min-semi-space-size=64", "--input-type=module", "-e", program];
  const bytes = Number(execFileSync(process.execPath, options, { cwd: root, encoding: "utf8" }));
  expect(bytes).toBeGreaterThan(0);
  expect(bytes).toBeLessThan(7500); // measured 4600; one number per evaluation would add 24 000
});
