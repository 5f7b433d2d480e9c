/**
 * Inverse questions at the freezing boundary: coexistence by the lever rule, one value of density for given pressure and
 * temperature, and no search across the jump. Lever rule and latent heat: common practice.
 */
import { describe, expect, test } from "vitest";
import {
  composition,
  type Given,
  type GivenName,
  meltingDensity,
  meltingTemperature,
  solve,
  solveColumns,
  type Transition,
  transition,
  whiteDwarfMatter,
  withPhase,
} from "../../src/index.js";

const matter = whiteDwarfMatter();
const carbonOxygen = composition({ C12: 0.5, O16: 0.5 });
const density = 2e6;
const both = transition(matter, density, carbonOxygen) as Transition;
const lever = (name: Exclude<GivenName, "density" | "temperature">, frozen: number): number =>
  (1 - frozen) * both.liquid[name] + frozen * both.crystal[name];

describe("the gap of latent heat at given density", () => {
  test.each(["specificEntropy", "specificEnergy", "specificEnthalpy", "pressure"] as const)("%s", (name) => {
    for (const frozen of [0.001, 0.25, 0.7, 0.999]) {
      const { state } = solve(matter, carbonOxygen, { density, [name]: lever(name, frozen) } as object as Given);
      expect(state.temperature).toBe(both.temperature);
      // The pressure jumps by 1e-4 only, so that its fraction has four digits less.
      expect(state.crystalFraction).toBeCloseTo(frozen, name === "pressure" ? 9 : 10);
      expect(state.specificEntropy).toBeCloseTo(lever("specificEntropy", state.crystalFraction as number), 3);
      expect(state.pressure / lever("pressure", state.crystalFraction as number)).toBeCloseTo(1, 14);
    }
  });

  test("the ends of the gap belong to one phase", () => {
    const liquid = solve(matter, carbonOxygen, { density, specificEntropy: both.liquid.specificEntropy * (1 + 1e-12) });
    const crystal = solve(matter, carbonOxygen, {
      density,
      specificEntropy: both.crystal.specificEntropy * (1 - 1e-12),
    });
    expect(liquid.state.crystalFraction).toBe(0);
    expect(crystal.state.crystalFraction).toBe(1);
    expect(liquid.state.temperature / both.temperature).toBeCloseTo(1, 11);
    expect(crystal.state.temperature / both.temperature).toBeCloseTo(1, 11);
  });

  test("the temperature rises with entropy and energy through the boundary and stands still inside the gap", () => {
    const rows = 400;
    const [least, most] = [both.crystal.specificEntropy * 0.97, both.liquid.specificEntropy * 1.03];
    const specificEntropy = Float64Array.from({ length: rows }, (_, i) => least + ((most - least) * i) / (rows - 1));
    const columns = { temperature: new Float64Array(rows), crystalFraction: new Float64Array(rows) };
    const given = new Float64Array(rows).fill(density);
    solveColumns(matter, { composition: carbonOxygen, density: given, specificEntropy }, columns);
    let inside = 0;
    for (let i = 0; i < rows; i++) {
      const frozen = columns.crystalFraction[i] as number;
      if (frozen > 0 && frozen < 1) {
        inside++;
        expect(columns.temperature[i]).toBe(both.temperature);
      }
      if (i > 0) {
        expect(columns.temperature[i]).toBeGreaterThanOrEqual(columns.temperature[i - 1] as number);
        expect(frozen).toBeLessThanOrEqual(columns.crystalFraction[i - 1] as number);
      }
    }
    expect(inside).toBeGreaterThan(50);
  });
});

describe("given pressure and temperature", () => {
  const temperature = both.temperature;

  test("liquid up to the pressure of the liquid on the boundary, crystal above, density rising on freezing", () => {
    const edge = withPhase(matter, "liquid").state(
      meltingDensity(temperature, carbonOxygen),
      temperature,
      carbonOxygen,
    ).pressure;
    const below = solve(matter, carbonOxygen, { temperature, pressure: edge * (1 - 1e-9) });
    const above = solve(matter, carbonOxygen, { temperature, pressure: edge * (1 + 1e-9) });
    expect(below.state.crystalFraction).toBe(0);
    expect(above.state.crystalFraction).toBe(1);
    const jump = above.state.density / below.state.density - 1;
    expect(jump).toBeGreaterThan(3e-5); // 4e-5 to 3e-4: the physical sign and size
    expect(jump).toBeLessThan(3e-4);
  });

  test("density rises with pressure, one density for each, within the overlap of the two sides too", () => {
    let before = 0;
    for (let i = -60; i <= 60; i++) {
      const pressure = both.liquid.pressure * (1 + i * 5e-6);
      const { state } = solve(matter, carbonOxygen, { temperature, pressure });
      expect(state.density).toBeGreaterThan(before);
      before = state.density;
    }
  });

  test("iron at 1e4 g/cc, where the crystal's pressure is the higher one", () => {
    const iron = composition({ Fe56: 1 });
    const melting = meltingTemperature(1e4, iron);
    for (const factor of [0.99, 0.9999, 1.0001, 1.01]) {
      const edge = withPhase(matter, "liquid").state(1e4, melting, iron).pressure;
      const { state } = solve(matter, iron, { temperature: melting, pressure: edge * factor });
      expect(state.pressure / (edge * factor)).toBeCloseTo(1, 13);
      expect(state.crystalFraction).toBe(factor > 1 ? 1 : 0);
    }
  });
});

describe("coexistence with two quantities given", () => {
  const temperature = both.temperature;
  const pressure = both.liquid.pressure;
  // Freezing at constant pressure: the crystal at the boundary's pressure and temperature.
  const crystal = solve(withPhase(matter, "crystal"), carbonOxygen, { temperature, pressure }).state;

  test.each(["specificEntropy", "specificEnthalpy", "specificEnergy"] as const)("pressure and %s", (name) => {
    const frozen = 0.4;
    const value = (1 - frozen) * both.liquid[name] + frozen * crystal[name];
    const { state } = solve(matter, carbonOxygen, { pressure, [name]: value } as object as Given);
    expect(state.temperature / temperature).toBeCloseTo(1, 13);
    expect(state.crystalFraction).toBeCloseTo(frozen, 8);
    expect(state.density).toBeGreaterThan(both.liquid.density);
    expect(state.density).toBeLessThan(crystal.density);
    expect(state.pressure / pressure).toBeCloseTo(1, 14);
  });

  test.each(["specificEnergy", "specificEnthalpy"] as const)("entropy and %s: at one density", (name) => {
    const given = { specificEntropy: lever("specificEntropy", 0.4), [name]: lever(name, 0.4) };
    const { state } = solve(matter, carbonOxygen, given as object as Given);
    expect(state.temperature / temperature).toBeCloseTo(1, 12);
    expect(state.density / density).toBeCloseTo(1, 12);
    expect(state.crystalFraction).toBeCloseTo(0.4, 9);
  });

  test("temperature and entropy", () => {
    const { state } = solve(matter, carbonOxygen, { temperature, specificEntropy: lever("specificEntropy", 0.4) });
    expect(state.density / density).toBeCloseTo(1, 13);
    expect(state.crystalFraction).toBeCloseTo(0.4, 10);
  });
});

test("helium beyond quantum melting stays liquid, and no search looks for a crystal there", () => {
  const helium = composition({ He4: 1 });
  const state = matter.state(1e8, 2e7, helium);
  const found = solve(matter, helium, { density: 1e8, specificEnergy: state.specificEnergy });
  expect(found.state.crystalFraction).toBe(0);
  expect(Math.abs(found.state.temperature / 2e7 - 1)).toBeLessThan(found.uncertainty.temperature);
});

test("a zero temperature is a legal one: density from pressure, lattice and all", () => {
  const cold = matter.state(1e6, 0, carbonOxygen);
  const { state } = solve(matter, carbonOxygen, { temperature: 0, pressure: cold.pressure });
  expect(state.density / 1e6).toBeCloseTo(1, 14);
  expect(state.temperature).toBe(0);
  expect(state.gamma1).toBeCloseTo(cold.gamma1, 13);
});
