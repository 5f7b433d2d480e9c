/** Ideal neutrons, protons and electrons; ideal neutrons. */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
} from "../../src/barotropes/barotrope.js";
import { barotrope } from "../../src/barotropes/from-equation-of-state.js";
import { neutronGas, neutronProtonElectronGas } from "../../src/barotropes/nucleon-gas.js";
import { atomicMassConstant, neutronMass, speedOfLight } from "../../src/constants.js";
import { isFermistateError } from "../../src/errors.js";
import { fermionGas } from "../../src/fermi-gas/fermion-gas.js";
import { composition } from "../../src/matter/composition.js";
import { findRoot } from "../../src/numerics/roots.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { Measured } from "../measured.js";

const fixture = JSON.parse(readFileSync(new URL("../fixtures/nucleon-gas.json", import.meta.url), "utf8")) as {
  rows: [number, "P" | "Yp", number][];
};
const c2 = speedOfLight ** 2;
const gas = neutronProtonElectronGas();

test("pressure and proton fraction at given mass-energy, to the seven digits printed", () => {
  const measured = new Measured();
  for (const [massEnergy, quantity, expected] of fixture.rows) {
    const rho = findRoot((x) => x * (1 + gas.state(x).specificEnergy / c2) - massEnergy, massEnergy / 10, massEnergy).x;
    const found = quantity === "P" ? gas.state(rho).pressure : gas.protonFraction(rho);
    measured.compare(quantity, found, expected, `${massEnergy}`);
  }
  measured.expectBelow("P", 2.5e-7); // half a unit of the last digit printed
  measured.expectBelow("Yp", 5e-7);
});

describe("figures of the trade", () => {
  // Shapiro & Teukolsky 1983, section 8.2, from memory (1.2e7 g/cm^3; n_p/n_n = 1.4e-4 at 7.8e11 g/cm^3); more digits by an
  // independent calculation.
  test("the onset of neutrons", () => {
    const state = gas.state(gas.neutronOnset);
    expect((gas.neutronOnset / atomicMassConstant / 7.356732e30).toFixed(6)).toBe("1.000000");
    expect(Math.abs((gas.neutronOnset * (1 + state.specificEnergy / c2)) / 1.23186e7 - 1)).toBeLessThan(4e-6);
    expect(gas.protonFraction(gas.neutronOnset * (1 - 1e-13))).toBe(1);
    expect(gas.protonFraction(gas.neutronOnset * 1.001)).toBeLessThan(1);
  });

  test("the least ratio of protons to neutrons", () => {
    const ratio = (rho: number): number => gas.protonFraction(rho) / (1 - gas.protonFraction(rho));
    const densities = Array.from({ length: 401 }, (_, i) => 10 ** (11 + i / 200));
    const lowest = densities.reduce((best, rho) => (ratio(rho) < ratio(best) ? rho : best));
    expect(Math.abs(ratio(lowest) / 1.35061e-4 - 1)).toBeLessThan(5e-5); // the grid is 1 % wide in density
    expect(lowest / 7.8275e11).toBeCloseTo(1, 1);
  });

  test("one proton for eight neutrons at the highest densities", () => {
    expect(gas.protonFraction(1e20)).toBeGreaterThan(0.1);
    expect(gas.protonFraction(1e20)).toBeLessThan(1 / 9);
  });
});

test("neutrons alone: the fermion gas of this library at T = 0, with the rest mass of neutrons put in", () => {
  const cold = barotrope(combine(fermionGas({ species: "n", mass: neutronMass })), composition({ n: 1 }), {
    temperature: 0,
  });
  const excess = ((neutronMass - atomicMassConstant) / atomicMassConstant) * c2;
  const measured = new Measured();
  for (let log = 2; log <= 18; log += 0.43) {
    const [a, b] = [neutronGas().state(10 ** log), cold.state(10 ** log)];
    measured.compare("P", a.pressure, b.pressure, `${log}`);
    measured.compare("e", a.specificEnergy, b.specificEnergy + excess, `${log}`);
    measured.compare("gamma", a.gamma1, b.gamma1, `${log}`);
  }
  // Measured 3e-14 where the pressure is 1 % of mu n: a rounding of mu, which is what the gas is solved in.
  measured.expectBelow("P", 4e-15); // measured 2e-15
  measured.expectBelow("e", 4e-15);
  measured.expectBelow("gamma", 4e-15);
});

test.each([
  ["neutrons, protons and electrons", gas],
  ["neutrons", neutronGas()],
])("inversion and the first law: %s", (_, matter) => {
  const measured = new Measured();
  const record = new Float64Array(BAROTROPE_LENGTH);
  const back = new Float64Array(BAROTROPE_LENGTH);
  for (let log = -9; log <= 19.5; log += 0.173) {
    record[BAROTROPE_DENSITY] = 10 ** log;
    matter.fillAtDensity(record);
    const slope = (matter.state(10 ** log).gamma1 * record[BAROTROPE_PRESSURE]!) / 10 ** log;
    back[BAROTROPE_PRESSURE] = record[BAROTROPE_PRESSURE]!;
    matter.fillAtPressure(back);
    measured.add("P", Math.abs(back[BAROTROPE_DENSITY]! / 10 ** log - 1) * matter.state(10 ** log).gamma1, `${log}`);
    back[BAROTROPE_POTENTIAL] = record[BAROTROPE_POTENTIAL]!;
    matter.fillAtPotential(back);
    const error = Math.abs(back[BAROTROPE_DENSITY]! / 10 ** log - 1) * slope;
    measured.add("w", error / Math.max(Math.abs(record[BAROTROPE_POTENTIAL]!), slope), `${log}`);
    const [a, b, c] = [1, Math.sqrt(1.001), 1.001].map((factor) => matter.state(factor * 10 ** log));
    const g = (s: typeof a): number => (s!.gamma1 * s!.pressure) / s!.density;
    const step = (Math.log(1.001) * (g(a) + 4 * g(b) + g(c))) / 6;
    const noise = 2e-16 * Math.abs(a!.potential);
    // The steps next to the onset have a kink in them.
    if (Math.abs(10 ** log / 1.2216e7 - 1) > 0.5) {
      measured.add("dw", Math.max(0, Math.abs(c!.potential - a!.potential - step) - noise) / step, `${log}`);
    }
  }
  // Measured 3e-14 where P is 1 % of mu n: a rounding of mu, the variable that the gas is solved in.
  measured.expectBelow("P", 1e-13);
  measured.expectBelow("w", 3e-15);
  measured.expectBelow("dw", 1e-8);
});

test("densities outside are refused", () => {
  for (const density of [1e-11, 1e21]) {
    try {
      gas.protonFraction(density);
      expect.fail("it answered");
    } catch (error) {
      expect(isFermistateError(error) && error.code).toBe("outside-domain");
    }
  }
});
