/** Inverse questions by the column: the answers of `solve`, two evaluations a row along a model, guesses, compositions. */
import { describe, expect, test } from "vitest";
import * as library from "../../src/index.js";
import {
  combine,
  composition,
  electronPositronGas,
  idealIons,
  radiation,
  type SolveInput,
  solve,
  solveColumns,
  whiteDwarfMatter,
} from "../../src/index.js";
import { compositionsOf, generator } from "./domain.js";
import { pairs } from "./pairs.js";

const matter = whiteDwarfMatter();
const compositions = compositionsOf(library);
const carbonOxygen = compositions[0] as ReturnType<typeof composition>;
const rows = 500;
const names = ["pressure", "specificEnergy", "specificEntropy", "specificEnthalpy"] as const;

/** A walk through the plane in steps of a per cent, with the quantities along it. */
function walk(density0: number, temperature0: number) {
  const random = generator(5);
  const density = new Float64Array(rows);
  const temperature = new Float64Array(rows);
  let [rho, t] = [density0, temperature0];
  for (let i = 0; i < rows; i++) {
    rho *= 1 + 0.02 * (random() - 0.5);
    t *= 1 + 0.02 * (random() - 0.5);
    density[i] = rho;
    temperature[i] = t;
  }
  const [pressure, specificEnergy, specificEntropy, specificEnthalpy] = names.map(() => new Float64Array(rows)) as [
    Float64Array,
    Float64Array,
    Float64Array,
    Float64Array,
  ];
  const state = { pressure, specificEnergy, specificEntropy, specificEnthalpy };
  matter.evaluate({ density, temperature, composition: carbonOxygen }, state);
  return { density, temperature, ...state };
}

// The last number: evaluations a row measured for the worst pair, rounded up. Above 2 are rows of cold matter, where the values
// scatter.
describe.each([
  ["degenerate liquid", 1e6, 5e7, 2.02],
  ["relativistic liquid", 1e9, 1e8, 2.07],
  ["gas", 10, 1e7, 2.01],
  ["pairs", 1e5, 3e9, 2.01],
  ["crystal", 1e7, 3e6, 2.03],
] as const)("a walk in steps of a per cent: %s", (_name, density0, temperature0, evaluations) => {
  const along = walk(density0, temperature0);

  test.each(pairs)("%s and %s: two evaluations a row, to the conditioning limit", (first, second) => {
    const output = {
      density: new Float64Array(rows),
      temperature: new Float64Array(rows),
      evaluations: new Float64Array(rows),
      densityConditionNumber: new Float64Array(rows),
      temperatureConditionNumber: new Float64Array(rows),
      heatCapacityV: new Float64Array(rows),
      temperatureExponent: new Float64Array(rows),
    };
    const input = { composition: carbonOxygen, [first]: along[first], [second]: along[second] } as object as SolveInput;
    solveColumns(matter, input, output);
    const mean = output.evaluations.reduce((a, b) => a + b) / rows;
    if (process.env["FERMISTATE_PRINT"]) console.log(first, second, mean);
    expect(mean).toBeLessThanOrEqual(evaluations);
    for (let i = 0; i < rows; i++) {
      for (const name of ["density", "temperature"] as const) {
        const limit = 8 * 2 ** -52 * (output[`${name}ConditionNumber`][i] as number);
        expect(Math.abs((output[name][i] as number) / (along[name][i] as number) - 1)).toBeLessThanOrEqual(limit);
      }
    }
    // The last step moves second-order quantities by members that may be a neighbour's: they must be those of the answer.
    const { density, temperature } = output;
    const there = { heatCapacityV: new Float64Array(rows), temperatureExponent: new Float64Array(rows) };
    matter.evaluate({ density, temperature, composition: carbonOxygen }, there);
    for (const name of ["heatCapacityV", "temperatureExponent"] as const) {
      for (let i = 0; i < rows; i++) expect(Math.abs(output[name][i]! / there[name][i]! - 1)).toBeLessThan(1e-13);
    }
  });
});

test("the quantities of a row are those of the state at its density and temperature, to rounding", () => {
  const along = walk(1e6, 1e9);
  const quantities = {
    heatCapacityV: new Float64Array(rows),
    gamma1: new Float64Array(rows),
    soundSpeed: new Float64Array(rows),
    electronDegeneracy: new Float64Array(rows),
    positronDensity: new Float64Array(rows),
    radiationPressureFraction: new Float64Array(rows),
    electronChemicalPotential: new Float64Array(rows),
  };
  const place = { density: new Float64Array(rows), temperature: new Float64Array(rows) };
  const { pressure, specificEntropy } = along;
  solveColumns(matter, { composition: carbonOxygen, pressure, specificEntropy }, { ...place, ...quantities });
  for (let i = 0; i < rows; i++) {
    const state = matter.state(place.density[i] as number, place.temperature[i] as number, carbonOxygen);
    for (const [name, column] of Object.entries(quantities)) {
      const expected = state[name as keyof typeof quantities] as number;
      // Positrons go like e^(-1/theta), 5.9 at 1e9 K: their error is that of the temperature times as much.
      expect(Math.abs((column[i] as number) - expected)).toBeLessThan(2e-14 * Math.abs(expected));
    }
  }
});

test("single questions have the same answers", () => {
  const along = walk(1e6, 5e7);
  const temperature = new Float64Array(rows);
  const { density, specificEnergy } = along;
  solveColumns(matter, { composition: carbonOxygen, density, specificEnergy }, { temperature });
  for (let i = 0; i < rows; i += 25) {
    const given = { density: density[i] as number, specificEnergy: specificEnergy[i] as number };
    const { state, uncertainty } = solve(matter, carbonOxygen, given);
    expect(Math.abs(state.temperature / (temperature[i] as number) - 1)).toBeLessThan(uncertainty.temperature);
  }
});

test("each row may have its composition, columns may be overwritten, guesses may be far off", () => {
  const density = new Float64Array(compositions.length).fill(1e5);
  const temperature = new Float64Array(compositions.length).fill(2e7);
  const pressure = new Float64Array(compositions.length);
  matter.evaluate({ density, temperature, composition: compositions }, { pressure });
  const found = temperature.slice();
  const guess = { temperature: Float64Array.of(1, 1e12, 1e3, 5e7, 2e7) };
  solveColumns(matter, { composition: compositions, density, pressure, guess }, { temperature: found, pressure });
  for (const one of found) expect(one / 2e7).toBeCloseTo(1, 9);
});

test("rows of a column of guesses without a number have none: the answer is that without guesses", () => {
  const density = new Float64Array(7).fill(1e5);
  const temperature = Float64Array.of(1e7, 2e7, 3e7, 4e7, 5e7, 6e7, 7e7);
  const specificEnergy = new Float64Array(7);
  matter.evaluate({ density, temperature, composition: carbonOxygen }, { specificEnergy });
  const input = { composition: carbonOxygen, density, specificEnergy };
  const found = new Float64Array(7);
  const guess = { temperature: Float64Array.of(Number.NaN, 2e7, -1, Number.POSITIVE_INFINITY, 0, 6e7, Number.NaN) };
  solveColumns(matter, { ...input, guess }, { temperature: found });
  for (const [i, one] of found.entries()) expect(Math.abs(one / temperature[i]! - 1)).toBeLessThan(1e-13);
  const none = { temperature: new Float64Array(7).fill(Number.NaN) };
  const [without, empty] = [new Float64Array(7), new Float64Array(7)];
  solveColumns(matter, input, { temperature: without });
  solveColumns(matter, { ...input, guess: none }, { temperature: empty });
  expect(empty).toEqual(without);
});

test("density and temperature given: an ordinary batch", () => {
  const density = Float64Array.of(1e6);
  const temperature = Float64Array.of(1e7);
  const output = { pressure: new Float64Array(1), evaluations: new Float64Array(1), temperature: new Float64Array(1) };
  solveColumns(matter, { composition: carbonOxygen, density, temperature }, output);
  expect(output.pressure[0]).toBe(matter.state(1e6, 1e7, carbonOxygen).pressure);
  expect([output.evaluations[0], output.temperature[0]]).toEqual([1, 1e7]);
});

test("any sum can be asked: the ideal plasma, a gas of nuclei and photons", () => {
  for (const eos of [combine(electronPositronGas(), idealIons(), radiation()), combine(idealIons(), radiation())]) {
    const state = eos.state(1e-3, 3e6, composition({ He4: 1 }));
    const { pressure, specificEntropy } = state;
    const found = solve(eos, state.composition, { pressure, specificEntropy });
    expect(found.state.density / 1e-3).toBeCloseTo(1, 12);
    expect(found.state.temperature / 3e6).toBeCloseTo(1, 12);
  }
});
