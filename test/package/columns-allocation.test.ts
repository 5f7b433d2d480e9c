/** The equation of state of given columns allocates nothing per point, to third order: heap statistics of the built library. */
import { expect, test } from "vitest";
import { numbersOf } from "./heap-growth.js";

const limit = 0.5; // bytes; one boxed number per point would be 16

test.each([2, 3])("order %i: less than half a byte per point", (order) => {
  const program = `
    import { combine, composition, idealIons } from "./dist/index.js";
    import { equationOfStateFromColumns } from "./dist/tables.js";
    const helium = composition({ He4: 1 });
    const gas = combine(idealIons());
    const columns = { density: [], temperature: [], pressure: [], specificEnergy: [], specificEntropy: [] };
    for (let i = 0; i <= 20; i++) {
      for (let j = 0; j <= 20; j++) {
        const state = gas.state(10 ** (i / 10), 10 ** (6 + j / 10), helium);
        for (const name of Object.keys(columns)) columns[name].push(state[name]);
      }
    }
    const { point, fillMembers } = equationOfStateFromColumns(columns, { composition: helium }).equationOfState.evaluator();
    let seed = 7;
    const random = () => (seed = (seed * 48271) % 2147483647) / 2147483647;
    const count = 100_000;
    const density = Float64Array.from({ length: count }, () => 10 ** (2 * random()));
    const temperature = Float64Array.from({ length: count }, () => 10 ** (6 + 2 * random()));
    const evaluate = () => {
      for (let i = 0; i < count; i++) {
        point[0] = density[i];
        point[1] = temperature[i];
        fillMembers(helium, ${order});
      }
    };
    console.log(bytesPerItem(evaluate, count, ${limit}));`;
  const bytes = numbersOf<number>(program);
  expect(bytes).toBeGreaterThanOrEqual(0);
  expect(bytes).toBeLessThan(limit);
});
