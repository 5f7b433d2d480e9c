/** One zone that cools: the pause at freezing, and the time of the rest from heat capacities. */
import { composition, transition, whiteDwarfMatter } from "fermistate";
import { expect, test } from "vitest";
import { cool } from "../../docs/examples/cooling.js";

const eos = whiteDwarfMatter();
const matter = composition({ C12: 0.5, O16: 0.5 });
const density = 1e7;
const loss = (temperature: number): number => 4e-3 * (temperature / 1e7) ** 3.5;
const [from, to] = [3e7, 3e6];
const steps = 100;
const run = cool({ eos, matter, density, temperatures: [from, to], loss, steps });
const freezing = transition(eos, density, matter)!;

test("temperature pauses while the crystal grows", () => {
  for (let i = steps; i <= 2 * steps; i++) {
    const isEnd = i % steps === 0; // of a single phase by rounding, and the temperature then has its condition
    expect(Math.abs(run.temperature[i]! / freezing.temperature - 1)).toBeLessThan(isEnd ? 5e-12 : 1e-15);
    expect(Math.abs(run.crystalFraction[i]! - (i - steps) / steps)).toBeLessThan(3e-12);
  }
});

test("the pause lasts as long as the loss takes for the energy between liquid and crystal", () => {
  const pause = run.time[2 * steps]! - run.time[steps]!;
  const energy = freezing.liquid.specificEnergy - freezing.crystal.specificEnergy;
  expect(Math.abs((pause * loss(freezing.temperature)) / energy - 1)).toBeLessThan(1e-11);
  // It is the latent heat up to the mismatch of the free energies at the conventional boundary: 16 % here.
  const { latentHeat, freeEnergyMismatch } = freezing;
  expect(Math.abs((latentHeat + freeEnergyMismatch) / energy - 1)).toBeLessThan(1e-11);
  expect(freeEnergyMismatch / latentHeat).toBeCloseTo(-0.163, 3);
});

test("no energy is lost: at each temperature it is that of the state", () => {
  for (const [i, energy] of run.specificEnergy.entries()) {
    if (i > steps && i < 2 * steps) continue; // there two states share it
    const { specificEnergy } = eos.state(density, run.temperature[i]!, matter);
    if (i % steps !== 0) expect(Math.abs(specificEnergy / energy - 1)).toBeLessThan(2e-15);
  }
});

test("the time to cool on either side is the integral of c_v over the loss", () => {
  /** Simpson's rule in ln T. */
  const timeBetween = (hot: number, cold: number): number => {
    const n = 200;
    const step = Math.log(hot / cold) / n;
    let sum = 0;
    for (let i = 0; i <= n; i++) {
      const temperature = cold * Math.exp(i * step);
      const nudged = Math.min(Math.max(temperature, cold * (1 + 1e-14)), hot * (1 - 1e-14)); // on its side of freezing
      const weight = i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2;
      sum += (weight * nudged * eos.state(density, nudged, matter).heatCapacityV) / loss(nudged);
    }
    return (sum * step) / 3;
  };
  // The trapezoidal rule of the example: its error is a quarter with twice the steps.
  const errors = [run, cool({ eos, matter, density, temperatures: [from, to], loss, steps: 2 * steps })].map(
    ({ time }) => {
      const n = (time.length - 1) / 3;
      const liquid = time[n]! / timeBetween(from, freezing.temperature) - 1;
      const crystal = (time[3 * n]! - time[2 * n]!) / timeBetween(freezing.temperature, to) - 1;
      return [liquid, crystal] as const;
    },
  );
  const [coarse, fine] = errors as [(typeof errors)[0], (typeof errors)[0]];
  expect(Math.abs(fine[0])).toBeLessThan(4e-4);
  expect(Math.abs(fine[1])).toBeLessThan(3e-5);
  for (const k of [0, 1] as const) expect(Math.abs(coarse[k] / fine[k] - 4)).toBeLessThan(0.1);
});
