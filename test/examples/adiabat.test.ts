/** The adiabat through freezing: entropy, phases, and where the latent heat goes. */
import { composition, meltingTemperature, type Transition, transition, whiteDwarfMatter } from "fermistate";
import { Solver } from "odex";
import { describe, expect, test } from "vitest";
import { adiabat, latentHeatAlong } from "../../docs/examples/adiabat.js";

const eos = whiteDwarfMatter();
const matter = composition({ C12: 0.5, O16: 0.5 });
const density = Float64Array.from({ length: 241 }, (_, i) => 3e7 * 10 ** (-i / 200));
const along = adiabat(eos, matter, 8.6e6, density);
const isMixed = (i: number): boolean => along.crystalFraction[i]! > 0 && along.crystalFraction[i]! < 1;
const all = [...density.keys()];
const mixed = all.filter(isMixed);
const boundary = new Map<number, Transition>(mixed.map((i) => [i, transition(eos, density[i]!, matter)!]));
const mean = (i: number, of: (side: Transition["liquid"]) => number): number => {
  const { liquid, crystal } = boundary.get(i)!;
  return of(liquid) + along.crystalFraction[i]! * (of(crystal) - of(liquid));
};

test("entropy is the same everywhere, to rounding", () => {
  const worst = Math.max(
    ...all.map((i) => {
      const s = isMixed(i)
        ? mean(i, (side) => side.specificEntropy)
        : eos.state(density[i]!, along.temperature[i]!, matter).specificEntropy;
      return Math.abs(s / along.entropy - 1);
    }),
  );
  expect(worst).toBeLessThan(4e-15);
});

test("liquid, then more and more crystal at the melting temperature, then crystal", () => {
  expect(along.crystalFraction[0]).toBe(0);
  expect(along.crystalFraction.at(-1)).toBe(1);
  expect([...along.crystalFraction]).toEqual([...along.crystalFraction].sort((a, b) => a - b));
  expect(mixed.length).toBeGreaterThan(100);
  for (const i of mixed)
    expect(Math.abs(along.temperature[i]! / meltingTemperature(density[i]!, matter) - 1)).toBeLessThan(1e-14);
});

test("within one phase the temperature is what an integrator finds from gamma3", () => {
  for (const [from, to] of [
    [0, mixed[0]! - 1],
    [mixed.at(-1)! + 1, all.length - 1],
  ] as const) {
    const integrator = new Solver(1);
    integrator.relativeTolerance = 1e-13;
    integrator.absoluteTolerance = 1e-13;
    const { y } = integrator.solve(
      (lnDensity, [lnT]) => [eos.state(Math.exp(lnDensity), Math.exp(lnT!), matter).gamma3 - 1],
      Math.log(density[from]!),
      [Math.log(along.temperature[from]!)],
      Math.log(density[to]!),
    );
    expect(Math.abs(Math.exp(y[0]!) / along.temperature[to]! - 1)).toBeLessThan(3e-14);
  }
});

describe("across freezing", () => {
  /** Simpson's rule over an odd number of points of the mixed stretch, equal steps of ln rho. */
  const points = mixed.slice(0, mixed.length - ((mixed.length + 1) % 2));
  const simpson = (of: (i: number) => number): number => {
    const step = Math.log(density[points[1]!]! / density[points[0]!]!);
    const weight = (k: number): number => (k === 0 || k === points.length - 1 ? 1 : k % 2 === 1 ? 4 : 2);
    return (step / 3) * points.reduce((sum, i, k) => sum + weight(k) * of(i), 0);
  };
  const [start, end] = [points[0]!, points.at(-1)!];

  /** ds/d ln rho of one phase along the boundary. */
  const slopeOnBoundary = (side: Transition["liquid"]): number =>
    side.density * side.entropyByDensity + (side.temperature / 3) * side.entropyByTemperature; // T_m goes like rho^(1/3)

  test("the latent heat set free is what the matter of both phases takes up", () => {
    const taken = simpson((i) => boundary.get(i)!.temperature * mean(i, slopeOnBoundary));
    const heat = latentHeatAlong(eos, matter, along);
    expect(Math.abs((heat[end]! - heat[start]!) / taken - 1)).toBeLessThan(5e-6); // trapezoidal rule
  });

  test("work accounts for the energy, but for what the two free energies differ by at the conventional boundary", () => {
    const work = simpson((i) => along.pressure[i]! / density[i]!);
    const change = along.specificEnergy[end]! - along.specificEnergy[start]!;
    let mismatch = 0;
    for (let i = start + 1; i <= end; i++) {
      const step = along.crystalFraction[i]! - along.crystalFraction[i - 1]!;
      mismatch -= 0.5 * step * (boundary.get(i)!.freeEnergyMismatch + boundary.get(i - 1)!.freeEnergyMismatch);
    }
    const heat = latentHeatAlong(eos, matter, along)[end]!;
    expect(Math.abs((change - work) / mismatch - 1)).toBeLessThan(1e-7);
    expect(mismatch / heat).toBeCloseTo(0.1625, 4); // the first law is off by this share of the latent heat
  });
});
