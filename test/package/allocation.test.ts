/** The batch form allocates nothing per point: heap statistics of the built library in a process of its own. */
import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { expect, test } from "vitest";

const root = fileURLToPath(new URL("../..", import.meta.url));

/** Bytes of heap per point of a batch after warming up; the young generation is large enough to collect nothing. */
function bytesPerPoint(
  temperature: [number, number],
  density: [number, number],
  coulomb: boolean,
  what: "states" | "derivatives" = "states",
): number {
  const program = `
    import v8 from "node:v8";
    import { composition, derivativesEvaluator, whiteDwarfMatter } from "./dist/index.js";
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
    const jacobian = derivativesEvaluator(eos, {
      of: ["pressure", "temperature", "gamma1", "heatCapacityV", "soundSpeed"],
      by: ["density", "specificEnergy"],
    });
    const slopes = { pressure: { density: new Float64Array(count) }, gamma1: { specificEnergy: new Float64Array(count) } };
    const evaluate = ${what === "states" ? "() => eos.evaluate(input, output)" : "() => jacobian.evaluate(input, slopes)"};
    for (let i = 0; i < 8; i++) evaluate();
    const least = [];
    for (let i = 0; i < 5; i++) {
      const before = v8.getHeapStatistics().used_heap_size;
      evaluate();
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

test("derivatives by two variables, ideal plasma: less than half a byte per point", () => {
  const bytes = bytesPerPoint([6, 9], [2, 10], false, "derivatives");
  expect(bytes).toBeGreaterThanOrEqual(0);
  expect(bytes).toBeLessThan(0.5);
});
