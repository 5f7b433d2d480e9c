/** Barotropes allocate nothing per evaluation or inversion: heap statistics of the built library in a process of its own. */
import { expect, test } from "vitest";
import { numbersOf } from "./heap-growth.js";

const limit = 0.5; // bytes; one boxed number would be 16

const makers: Readonly<Record<string, string>> = {
  "a polytrope": "b.polytrope({ constant: 1e13, gamma: 5 / 3 })",
  pieces: 'b.publishedBarotrope("SLy piecewise")',
  "cold matter": "b.barotrope(whiteDwarfMatter(), core, { temperature: 0 })",
  "an isotherm": "b.barotrope(whiteDwarfMatter(), core, { temperature: 1e7, density: [1, 1e10] })",
  "an adiabat": "b.barotrope(whiteDwarfMatter(), core, { specificEntropy: 2e8, density: [1, 1e9] })",
  "neutrons, protons and electrons": "b.neutronProtonElectronGas()",
  "crust and core": 'b.joinBarotropes(b.outerCrust(), b.publishedBarotrope("BSk21"))',
};

/** Bytes of heap per call for each barotrope and each way to fill the record, after warming up. */
function bytesPerCall(): Record<string, Record<string, number>> {
  const program = `
    import { composition, whiteDwarfMatter } from "./dist/index.js";
    import * as b from "./dist/barotropes.js";
    const core = composition({ C12: 0.5, O16: 0.5 });
    const all = { ${Object.entries(makers)
      .map(([name, code]) => `${JSON.stringify(name)}: ${code}`)
      .join(", ")} };
    const count = 10_000;
    const result = {};
    for (const [name, matter] of Object.entries(all)) {
      const record = new Float64Array(b.BAROTROPE_LENGTH);
      const columns = Array.from({ length: 4 }, () => new Float64Array(count));
      const [low, high] = [Math.max(matter.density[0] * 1.01, 100), matter.density[1]];
      for (let i = 0; i < count; i++) {
        record[0] = low * (high / low) ** ((i * 0.6180339887498949) % 1);
        matter.fillAtDensity(record);
        for (let slot = 0; slot < 4; slot++) columns[slot][i] = record[slot];
      }
      const ways = {
        density: () => { for (let i = 0; i < count; i++) { record[0] = columns[0][i]; matter.fillAtDensity(record); } },
        pressure: () => { for (let i = 0; i < count; i++) { record[1] = columns[1][i]; matter.fillAtPressure(record); } },
        potential: () => { for (let i = 0; i < count; i++) { record[3] = columns[3][i]; matter.fillAtPotential(record); } },
      };
      result[name] = {};
      for (const [way, run] of Object.entries(ways)) result[name][way] = bytesPerItem(run, count, ${limit});
    }
    console.log(JSON.stringify(result));`;
  return numbersOf(program);
}

test("less than half a byte per call", () => {
  const all = bytesPerCall();
  expect(Object.keys(all)).toEqual(Object.keys(makers));
  for (const [name, ways] of Object.entries(all)) {
    for (const [way, bytes] of Object.entries(ways)) {
      expect(bytes, `${name} from its ${way}`).toBeGreaterThanOrEqual(0);
      expect(bytes, `${name} from its ${way}`).toBeLessThan(limit);
    }
  }
});
