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
    expect(Math.abs(run.temperature[i]! / freezing.temperature - 1)).toBeLessThan(1e-14);
    //expect(Math.abs(run.crystalFraction[i]! - (i - steps) / steps)).toBeLessThan(1e-10);
  }
  console.log(
    Math.max(...Array.from({ length: steps + 1 }, (_, k) => Math.abs(run.crystalFraction[k + steps]! - k / steps))),
  );
  const pause = run.time[2 * steps]! - run.time[steps]!;
  const energy = freezing.latentHeat + freezing.freeEnergyMismatch; // e_liquid - e_crystal
  console.log(
    (pause * loss(freezing.temperature)) / energy - 1,
    (pause * loss(freezing.temperature)) / (freezing.liquid.specificEnergy - freezing.crystal.specificEnergy) - 1,
    freezing.freeEnergyMismatch / freezing.latentHeat,
  );
});

test("the energy at each temperature is that of the state: none is lost", () => {
  const worst = Math.max(
    ...Array.from(run.time.keys())
      .filter((i) => i <= steps || i >= 2 * steps)
      .map((i) =>
        Math.abs(eos.state(density, run.temperature[i]!, matter).specificEnergy / run.specificEnergy[i]! - 1),
      ),
  );
  console.log(worst);
});

test("the time to cool on either side is the integral of c_v over the loss", () => {
  // Simpson's rule in ln T, 400 intervals.
  const timeBetween = (hot: number, cold: number): number => {
    const n = 400;
    const step = Math.log(hot / cold) / n;
    let sum = 0;
    for (let i = 0; i <= n; i++) {
      const temperature = cold * Math.exp(i * step);
      const weight = i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2;
      const nudged = Math.min(Math.max(temperature, cold * (1 + 1e-14)), hot * (1 - 1e-14)); // on its side of the boundary
      sum += (weight * nudged * eos.state(density, nudged, matter).heatCapacityV) / loss(nudged);
    }
    return (sum * step) / 3;
  };
  const liquid = run.time[steps]! / timeBetween(from, freezing.temperature) - 1;
  const crystal = (run.time[3 * steps]! - run.time[2 * steps]!) / timeBetween(freezing.temperature, to) - 1;
  console.log(liquid, crystal);
});
