/** Black-body radiation against the Stefan-Boltzmann constant, and its exact relations. */
import { expect, test } from "vitest";
import { speedOfLight } from "../src/constants.js";
import { composition } from "../src/matter/composition.js";
import { radiation } from "../src/radiation.js";
import { combine } from "../src/thermodynamics/combine.js";

const photons = combine(radiation());
const hydrogen = composition({ H1: 1 });

test("energy density is 4 sigma T^4/c with sigma = 5.670374419184429e-5 erg/(cm^2 s K^4)", () => {
  // CODATA 2022: sigma = 5.670 374 419... e-8 W m^-2 K^-4, exact; the further digits follow from exact h, k, c.
  const state = photons.state(2.5, 1e7, hydrogen);
  const expected = ((4 * 5.670374419184429e-5) / speedOfLight) * 1e28;
  expect(Math.abs((state.specificEnergy * 2.5) / expected - 1)).toBeLessThan(1e-15);
});

test("P = e/3, s = 4 e/(3 T), gamma_1 = 4/3, nabla_ad = 1/4, F = -P/rho, nothing depends on density but through 1/rho", () => {
  const state = photons.state(1e-3, 3e6, hydrogen);
  const energyDensity = state.specificEnergy * 1e-3;
  expect(Math.abs((3 * state.pressure) / energyDensity - 1)).toBeLessThan(5e-16);
  expect(Math.abs((0.75 * state.specificEntropy * 3e6) / state.specificEnergy - 1)).toBeLessThan(5e-16);
  expect(Math.abs((-state.specificFreeEnergy * 1e-3) / state.pressure - 1)).toBeLessThan(1e-15);
  expect(state.gamma1).toBeCloseTo(4 / 3, 15);
  expect(state.adiabaticGradient).toBeCloseTo(0.25, 15);
  expect(state.densityExponent).toBe(0);
  expect(state.radiationPressureFraction).toBe(1);
  const f = photons.freeEnergy(1e-3, 3e6, hydrogen, 3);
  // F = -a T^4/(3 rho): scaled derivatives are falling factorials, (-1)(-2)... times 4*3*2....
  const value = -f.f00;
  const factors = [f.f10, f.f01, f.f20, f.f11, f.f02, f.f30!, f.f21!, f.f12!, f.f03!, f.f22!].map((x) => x / value);
  const expected = [1, -4, -2, 4, -12, 6, -8, 12, -24, -24];
  for (const [i, factor] of factors.entries()) expect(factor).toBeCloseTo(expected[i]!, 13);
});

test("T = 0: no photons, and alone they then exert no pressure, which is refused", () => {
  expect(() => photons.state(1, 0, hydrogen)).toThrow(/contributions that act on this matter/);
});
