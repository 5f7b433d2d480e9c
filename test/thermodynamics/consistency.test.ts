/**
 * Thermodynamic consistency without finite differences: every derivative, integrated along a path, gives the difference
 * of the values at its ends.
 *
 *     F(rho_2) - F(rho_1) = int P/rho^2 drho        F(T_2) - F(T_1) = -int s dT
 *     P(rho_2) - P(rho_1) = int P_rho drho          e(T_2) - e(T_1) = int c_v dT
 *     s(rho_2) - s(rho_1) = -int P_T/rho^2 drho     P(T_2) - P(T_1) = int P_T dT       (the first: Maxwell's relation)
 *
 * Paths are 5 % long, integrals 12-point Gauss-Legendre in ln rho or ln T: exact to rounding even at the pair front.
 */
import { expect, test } from "vitest";
import { composition } from "../../src/matter/composition.js";
import type { State } from "../../src/thermodynamics/equation-of-state.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { Measured, uniform } from "../measured.js";

/** Nodes in (0, 1) and weights of n-point Gauss-Legendre, by Newton's method on Legendre's recurrence. */
function gaussLegendre(n: number): [node: number, weight: number][] {
  return Array.from({ length: n }, (_, i) => {
    let x = Math.cos((Math.PI * (i + 0.75)) / (n + 0.5));
    let slope = 0;
    for (let iteration = 0; iteration < 20; iteration++) {
      let [previous, current] = [1, x];
      for (let k = 2; k <= n; k++)
        [previous, current] = [current, ((2 * k - 1) * x * current - (k - 1) * previous) / k];
      slope = (n * (x * current - previous)) / (x * x - 1);
      x -= current / slope;
    }
    return [(1 + x) / 2, 1 / ((1 - x * x) * slope * slope)];
  });
}

const rule = gaussLegendre(12);
const length = 0.05;

test("10 000 random points: values and derivatives belong to one free energy, to 1e-13 of the largest term", () => {
  const eos = whiteDwarfMatter({ coulomb: false });
  const mixtures = [composition({ C12: 0.5, O16: 0.5 }), composition({ H1: 0.7, He4: 0.3 }), composition({ Fe56: 1 })];
  const random = uniform(31415926);
  const measured = new Measured();

  for (let i = 0; i < 10_000; i++) {
    const density = 10 ** (-15 + 30 * random());
    const temperature = 10 ** (2 + 10.97 * random());
    const matter = mixtures[i % 3]!;
    const where = `rho ${density} T ${temperature}`;
    const at = (r: number, t: number): State => eos.state(density * Math.exp(r), temperature * Math.exp(t), matter);
    const start = at(0, 0);
    const largest = Math.max(
      Math.abs(start.specificFreeEnergy),
      Math.abs(start.specificEnergy),
      Math.abs(start.specificEntropy * temperature),
    );
    measured.compare(
      "e = F + T s",
      start.specificFreeEnergy + temperature * start.specificEntropy,
      start.specificEnergy,
      where,
      largest,
    );
    const compressed = at(length, 0);
    const heated = at(0, length);
    const sums = { work: 0, pressure: 0, maxwell: 0, entropy: 0, heat: 0, thermal: 0 };
    for (const [node, weight] of rule) {
      const r = at(node * length, 0);
      sums.work += weight * (r.pressure / r.density);
      sums.pressure += weight * r.pressureByDensity * r.density;
      sums.maxwell += weight * (r.pressureByTemperature / r.density);
      const t = at(0, node * length);
      sums.entropy += weight * t.specificEntropy * t.temperature;
      sums.heat += weight * t.heatCapacityV * t.temperature;
      sums.thermal += weight * t.pressureByTemperature * t.temperature;
    }
    // Difference over path length: the mean derivative. Its own rounding, ulp of the values / 0.05, is 5e-15.
    const along = (name: string, end: number, begin: number, mean: number, scale: number): void =>
      measured.compare(name, (end - begin) / length, mean, where, scale);
    along("P = rho^2 F_rho", compressed.specificFreeEnergy, start.specificFreeEnergy, sums.work, largest);
    along("s = -F_T", heated.specificFreeEnergy, start.specificFreeEnergy, -sums.entropy, largest * 1.05);
    along("P_rho", compressed.pressure, start.pressure, sums.pressure, compressed.pressure);
    const entropies = Math.abs(start.specificEntropy) + start.heatCapacityV;
    along("Maxwell", compressed.specificEntropy, start.specificEntropy, -sums.maxwell, entropies);
    along("c_v", heated.specificEnergy, start.specificEnergy, sums.heat, Math.abs(heated.specificEnergy));
    along("P_T", heated.pressure, start.pressure, sums.thermal, heated.pressure);
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  for (const name of ["e = F + T s", "P = rho^2 F_rho", "s = -F_T", "P_rho", "Maxwell", "c_v", "P_T"]) {
    measured.expectBelow(name, 1e-13);
    expect(measured.count(name)).toBe(10_000);
  }
});
