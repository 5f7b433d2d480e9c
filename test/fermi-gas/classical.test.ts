/**
 * The classical relativistic gas against Bessel functions (Juettner 1911, Ann. Phys. 339, 856):
 *
 *     n = theta K_2(1/theta) e^(mu/theta) (in units of 1/pi^2),   e_kin/(n theta) = 3 + [K_1(1/theta)/K_2(1/theta) - 1]/theta
 *
 * Values of e^x K_1(x), e^x K_2(x): mpmath 1.3.0, `mp.dps = 30; besselk(1, x) * exp(x)`; Abramowitz & Stegun 1964, table 9.8
 * has K_1(1) = 0.60190 72302, K_2(1) = 1.62483 8899 (from memory).
 */
import { expect, test } from "vitest";
import { boltzmann } from "../../src/fermi-gas/boltzmann.js";
import { addGasMembers } from "../../src/fermi-gas/density-derivatives.js";
import { ETA, N00, NET_DENSITY, P00, RECORD_LENGTH, THETA } from "../../src/fermi-gas/record.js";
import { singleSpecies } from "../../src/fermi-gas/single-species.js";
import { ENERGY, HEAT, MEMBER_COUNT } from "../../src/thermodynamics/free-energy.js";

const scaledBessel: readonly [x: number, k1: number, k2: number][] = [
  [0.01, 100.978648458240051, 20200.4983856765547],
  [0.1, 10.8901826830496966, 220.485979763256826],
  [1, 1.63615348626325825, 4.41677005233341151],
  [10, 0.410766570595788751, 0.473785248555756416],
  [100, 0.125799950479578529, 0.127691620668718149],
];

for (const [x, k1, k2] of scaledBessel) {
  test(`1/theta = ${x}`, () => {
    const gas = new Float64Array(RECORD_LENGTH);
    gas[THETA] = 1 / x;
    gas[NET_DENSITY] = 1e-20;
    boltzmann(gas, false, 2);
    const theta = gas[THETA]!;
    // e^eta = n/(theta e^x K_2), up to |eta| ulp.
    expect(Math.abs(gas[ETA]! - Math.log(1e-20 / (theta * k2)))).toBeLessThan(2e-14);
    expect(Math.abs(gas[P00]! / (1e-20 * theta) - 1)).toBeLessThan(5e-16);
    const members = new Float64Array(MEMBER_COUNT);
    addGasMembers(gas, Float64Array.of(1), 2, members);
    const energy = 3 + x * (k1 / k2 - 1);
    expect(Math.abs(members[ENERGY]! / (1e-20 * theta) / energy - 1)).toBeLessThan(3e-15 * Math.max(1, x / 3));
    // c_v/n = d(3 theta + r)/d theta with r = K_1/K_2 and r' = r^2 + 3 r/x - 1 from the recurrences of K.
    const r = k1 / k2;
    const heat = 3 + x * x - 3 * x * r - x * x * r * r;
    expect(Math.abs(members[HEAT]! / (1e-20 * theta) / heat - 1)).toBeLessThan(1e-14 * Math.max(1, x * x));
  });
}

test("far from degeneracy the Fermi integrals tend to it: first correction -2^(-3/2) e^eta for a non-relativistic gas", () => {
  const gas = new Float64Array(RECORD_LENGTH);
  for (const eta of [-12, -9, -6]) {
    gas[ETA] = eta;
    gas[THETA] = 1e-6;
    singleSpecies(gas, 2);
    const n = gas[N00]!;
    const classical = Math.sqrt(Math.PI / 2) * 1e-9 * Math.exp(eta) * (1 + (15 / 8) * 1e-6);
    const correction = n / classical - 1;
    expect(Math.abs(correction / (-(2 ** -1.5) * Math.exp(eta)) - 1)).toBeLessThan(2 * Math.exp(eta) + 1e-6);
  }
});
