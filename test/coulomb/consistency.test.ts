/**
 * Thermodynamic consistency of electrons, Coulomb plasma and photons, without finite differences: every derivative,
 * integrated along a path, gives the difference of the values at its ends (identities in
 * test/thermodynamics/consistency.test.ts; they follow from one free energy, no source needed). Then stability and
 * smoothness: c_v > 0, P > 0, and no kink where formulas change.
 *
 * Points are drawn from where no finding is "outside"; paths are 5 % long, in one phase, forced.
 */
import { describe, expect, test } from "vitest";
import { coulombPlasma } from "../../src/coulomb/coulomb-plasma.js";
import { meltingTemperature, type Phase } from "../../src/coulomb/phase.js";
import { withPhase } from "../../src/coulomb/transition.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { type Composition, composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { regime } from "../../src/regime/regime.js";
import { combine } from "../../src/thermodynamics/combine.js";
import type { EquationOfState, State } from "../../src/thermodynamics/equation-of-state.js";
import { Measured, uniform } from "../measured.js";
import { gaussLegendre } from "./gauss-legendre.js";

const matters: readonly Composition[] = [
  composition({ C12: 0.5, O16: 0.5 }),
  composition({ He4: 1 }),
  composition({ Fe56: 1 }),
  composition({ O16: 1 }),
  composition({ C12: 0.4, O16: 0.55, Ne20: 0.05 }),
];
const equilibrium = combine(electronPositronGas(), coulombPlasma(), radiation());
const sides: Readonly<Record<Phase, EquationOfState>> = {
  liquid: withPhase(equilibrium, "liquid"),
  crystal: withPhase(equilibrium, "crystal"),
};
const print = (measured: Measured): void => {
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
};

interface Place {
  readonly density: number;
  readonly temperature: number;
  readonly matter: Composition;
  readonly phase: Phase;
}

/** Coupling, of the ions together, by the melting rule. */
const coupling = (density: number, temperature: number, matter: Composition): number =>
  (175 * meltingTemperature(density, matter)) / temperature;

/** Of a path, in ln rho or ln T. */
const length = 0.05;

/** A random point without a finding "outside"; either phase where both fits hold, Gamma = 100 to 190. */
function draw(random: () => number, matter: Composition): Place {
  for (;;) {
    const density = 10 ** (1.9 + 8.7 * random());
    const temperature = 10 ** (3 + 6.7 * random());
    const gamma = coupling(density, temperature, matter);
    // Atoms are not ionised below about 10 A Z g/cm^3 unless hot: no need to ask.
    if (gamma > 30 && density < 9 * matter.meanMassNumber * matter.meanCharge) continue;
    const either = random() < 0.5 ? "liquid" : "crystal";
    const phase: Phase = gamma > 190 ? "crystal" : gamma < 101 ? "liquid" : either;
    const outside = (densityFactor: number, temperatureFactor: number): boolean => {
      const options = { phase, equationOfState: sides[phase] };
      const { findings } = regime(density * densityFactor, temperature * temperatureFactor, matter, options);
      quantum = findings.some(({ code }) => code === "liquid-quantum-range");
      return findings.some(({ severity }) => severity === "outside");
    };
    let quantum = false;
    if (outside(1, 1)) continue;
    // Liquid helium of theta > 11 turns unstable along some paths: their ends are judged too.
    const grown = Math.exp(length);
    if (quantum && (outside(grown, 1) || outside(1, grown))) continue;
    return { density, temperature, matter, phase };
  }
}

const rule = gaussLegendre(8);
const identities = ["e = F + T s", "P = rho^2 F_rho", "s = -F_T", "P_rho", "Maxwell", "c_v", "P_T"] as const;

function checkIdentities(measured: Measured, { density, temperature, matter, phase }: Place): void {
  const where = `${phase} ${matter.name} rho ${density} T ${temperature}`;
  const eos = sides[phase];
  const at = (r: number, t: number): State => eos.state(density * Math.exp(r), temperature * Math.exp(t), matter);
  const start = at(0, 0);
  const largest = Math.max(
    Math.abs(start.specificFreeEnergy),
    Math.abs(start.specificEnergy),
    Math.abs(start.specificEntropy * temperature),
  );
  const sum = start.specificFreeEnergy + temperature * start.specificEntropy;
  measured.compare(`${phase}: e = F + T s`, sum, start.specificEnergy, where, largest);
  const compressed = at(length, 0);
  const heated = at(0, length);
  const sums = { work: 0, pressure: 0, maxwell: 0, entropy: 0, heat: 0, thermal: 0 };
  rule.nodes.forEach((node, i) => {
    const weight = rule.weights[i]!;
    const r = at(node * length, 0);
    sums.work += weight * (r.pressure / r.density);
    sums.pressure += weight * r.pressureByDensity * r.density;
    sums.maxwell += weight * (r.pressureByTemperature / r.density);
    const t = at(0, node * length);
    sums.entropy += weight * t.specificEntropy * t.temperature;
    sums.heat += weight * t.heatCapacityV * t.temperature;
    sums.thermal += weight * t.pressureByTemperature * t.temperature;
  });
  // Difference over path length: the mean derivative. Its own rounding, ulp of the values / 0.05, is 5e-15.
  const along = (name: string, end: number, begin: number, mean: number, scale: number): void =>
    measured.compare(`${phase}: ${name}`, (end - begin) / length, mean, where, scale);
  along("P = rho^2 F_rho", compressed.specificFreeEnergy, start.specificFreeEnergy, sums.work, largest);
  along("s = -F_T", heated.specificFreeEnergy, start.specificFreeEnergy, -sums.entropy, largest);
  along("P_rho", compressed.pressure, start.pressure, sums.pressure, compressed.pressure);
  const entropies = Math.abs(start.specificEntropy) + start.heatCapacityV;
  along("Maxwell", compressed.specificEntropy, start.specificEntropy, -sums.maxwell, entropies);
  along("c_v", heated.specificEnergy, start.specificEnergy, sums.heat, largest);
  along("P_T", heated.pressure, start.pressure, sums.thermal, heated.pressure);
}

test("10 000 random points: values and derivatives belong to one free energy, to 1e-13 of the largest term", () => {
  const random = uniform(16180339);
  const measured = new Measured();
  for (let i = 0; i < 10_000; i++) checkIdentities(measured, draw(random, matters[i % matters.length]!));
  print(measured);
  for (const name of identities) {
    const counts = (["liquid", "crystal"] as const).map((phase) => {
      measured.expectBelow(`${phase}: ${name}`, 1e-13, 1e-14);
      return measured.count(`${phase}: ${name}`);
    });
    expect(counts[0]! + counts[1]!).toBe(10_000);
    expect(Math.min(...counts)).toBeGreaterThan(2000);
  }
});

test("matter without any finding is stable: P > 0, c_v > 0, compressible, gamma_1 near 4/3 or above", () => {
  let points = 0;
  let least = { gamma1: Number.POSITIVE_INFINITY, place: "" };
  for (const matter of matters) {
    for (let logRho = 2; logRho <= 10; logRho += 0.1) {
      for (let logT = 3; logT <= 9.5; logT += 0.2) {
        const [density, temperature] = [10 ** logRho, 10 ** logT];
        if (regime(density, temperature, matter, { equationOfState: equilibrium }).findings.length > 0) continue;
        points++;
        const state = equilibrium.state(density, temperature, matter);
        const place = `${matter.name} rho 1e${logRho.toFixed(1)} T 1e${logT.toFixed(1)}`;
        expect(state.pressure, place).toBeGreaterThan(0);
        expect(state.heatCapacityV, place).toBeGreaterThan(0);
        expect(state.densityExponent, place).toBeGreaterThan(0);
        if (state.gamma1 < least.gamma1) least = { gamma1: state.gamma1, place };
      }
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(points, least);
  expect(points).toBeGreaterThan(5000);
  // Measured: 1.33566, oxygen at 1e10 g/cm^3. The adiabatic exponent of a Coulomb liquid there is near 4/3 itself.
  expect(least.gamma1, least.place).toBeGreaterThan(1.3355);
});

describe("no kink along an isochore", () => {
  // Where a formula changes into another (a series, an asymptote), a step of relative size d in c_v would show in its
  // sixth difference as 10 d: what is seen bounds d by 3e-10 in the liquid and 3e-8 in the crystal.
  const step = 0.02;
  const isochore = (phase: Phase, matter: Composition, density: number, temperatures: readonly [number, number]) => {
    const values: { heat: number; entropy: number; at: number }[] = [];
    for (let logT = Math.log(temperatures[0]); logT <= Math.log(temperatures[1]); logT += step) {
      const state = sides[phase].state(density, Math.exp(logT), matter);
      values.push({ heat: state.heatCapacityV, entropy: state.specificEntropy, at: Math.exp(logT) });
    }
    return values;
  };
  const binomials = [1, -6, 15, -20, 15, -6, 1];

  for (const [phase, matter, density] of [
    ["liquid", matters[3]!, 1e7],
    ["liquid", matters[0]!, 1e7],
    ["crystal", matters[3]!, 1e7],
    ["crystal", matters[0]!, 1e7],
    ["crystal", matters[2]!, 1e8],
  ] as const) {
    test(`${phase} ${matter.name}: c_v and s over theta = 0.01 to 1000`, () => {
      const plasmaTemperature = regime(density, 1e8, matter).parameters.ionPlasmaTemperature;
      const values = isochore(phase, matter, density, [plasmaTemperature / 1000, plasmaTemperature * 100]);
      const measured = new Measured();
      for (let i = 3; i < values.length - 3; i++) {
        const window = values.slice(i - 3, i + 4);
        const theta = `theta ${(plasmaTemperature / values[i]!.at).toPrecision(3)}`;
        for (const name of ["heat", "entropy"] as const) {
          const difference = window.reduce((sum, value, j) => sum + binomials[j]! * value[name], 0);
          const scale = Math.max(...window.map((value) => Math.abs(value[name]) + Math.abs(value.heat)));
          measured.add(name, Math.abs(difference) / scale, theta);
        }
      }
      print(measured);
      expect(values.length).toBeGreaterThan(500);
      // Measured: liquid 3.4e-9 and 1.0e-9 (the change at theta = 1 and photons), crystal 2.9e-7 and 3.9e-8 (the phonon fit itself).
      measured.expectBelow("heat", phase === "liquid" ? 7e-9 : 6e-7);
      measured.expectBelow("entropy", phase === "liquid" ? 2e-9 : 8e-8);
    });
  }
});
