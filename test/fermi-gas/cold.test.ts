/**
 * T = 0: closed forms against textbook figures and limits, and the join with finite temperature.
 *
 * Limits of P with A = pi m^4 c^5/(3 h^3): P -> (8/5) A x^5 and 2 A x^4 (Chandrasekhar 1935, MNRAS 95, 207).
 * Textbook figures in cgs: Shapiro & Teukolsky 1983, Black Holes, White Dwarfs and Neutron Stars, section 2.3, quoted from
 * memory to the digits they print; recomputed with CODATA 2022.
 */
import { describe, expect, test } from "vitest";
import { atomicMassConstant, electronMass, planckConstant, speedOfLight } from "../../src/constants.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { composition } from "../../src/matter/composition.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { Measured } from "../measured.js";

const gas = combine(electronPositronGas());
const helium = composition({ He4: 1 }); // Y_e = 1/2, mu_e = 2
const a = (Math.PI * electronMass ** 4 * speedOfLight ** 5) / (3 * planckConstant ** 3);

describe("closed forms", () => {
  test("rho/mu_e = 9.739e5 x^3 g/cm^3", () => {
    const state = gas.state(2 * 973932.1720105553, 0, helium);
    expect(state.relativityParameter).toBeCloseTo(1, 14);
  });

  test("P = 1.0036e13 (rho/mu_e)^(5/3) and 1.2435e15 (rho/mu_e)^(4/3) dyn/cm^2 in the limits", () => {
    // First corrections to the limits: -(5/14) x^2 and -1/x^2.
    const low = gas.state(2e-6, 0, helium);
    const below = 1 - (5 / 14) * low.relativityParameter ** 2;
    expect(Math.abs(low.pressure / (1.003595776288213e13 * 1e-10 * below) - 1)).toBeLessThan(1e-14);
    const high = gas.state(2e15, 0, helium);
    const correction = 1 - 1 / high.relativityParameter ** 2;
    expect(Math.abs(high.pressure / (1.243497954702101e15 * 1e20 * correction) - 1)).toBeLessThan(1e-10);
  });

  test("P -> (8/5) A x^5 and 2 A x^4; Gamma_1 5/3 -> 4/3; against the closed form where that does not cancel", () => {
    for (const density of [1e-18, 1e-12, 1e-6]) {
      const { pressure, relativityParameter: x, gamma1 } = gas.state(density, 0, helium);
      expect(Math.abs(pressure / (1.6 * a * x ** 5 * (1 - (5 / 14) * x * x)) - 1)).toBeLessThan(3e-15 + x ** 4);
      expect(Math.abs(gamma1 - 5 / 3)).toBeLessThan(x * x + 1e-15);
    }
    for (const density of [1e8, 1e10, 1e12, 1e15]) {
      const { pressure, relativityParameter: x, gamma1 } = gas.state(density, 0, helium);
      const closed = a * (x * (2 * x * x - 3) * Math.sqrt(x * x + 1) + 3 * Math.asinh(x));
      expect(Math.abs(pressure / closed - 1)).toBeLessThan(3e-15);
      expect(Math.abs(gamma1 - 4 / 3)).toBeLessThan(1 / x ** 2);
    }
  });

  test("across the borders of the three forms of P the adiabatic exponent and dP/drho agree with their closed forms", () => {
    // dP/dn = x^2/(3E) mc^2 is a closed form of its own; P must have it as its slope, by a central difference.
    const measured = new Measured();
    for (let logX = -4; logX <= 3.8; logX += 0.01) {
      const x = 10 ** logX;
      const state = gas.state(2 * 973932.1720105553 * x ** 3, 0, helium);
      const at = state.relativityParameter;
      const slope = (at * at) / (3 * Math.sqrt(1 + at * at));
      const expected = (slope * electronMass * speedOfLight ** 2 * 0.5) / atomicMassConstant;
      measured.compare("dP/drho", state.pressureByDensity, expected, `x ${x}`);
      // Thermodynamic identity e + P/rho = mu n/rho at T = 0, relative to the largest term.
      const mu = (state.electronChemicalPotential! * state.electronDensity) / state.density;
      measured.compare("Gibbs", state.specificEnthalpy, mu, `x ${x}`);
      // d(P)/d(x) by the 8-point central difference in ln x is blind to borders only if P has none.
      const step = 1e-2;
      const p = (k: number): number => gas.state(state.density * Math.exp(3 * step * k), 0, helium).pressure;
      const difference =
        (4 / 5) * (p(1) - p(-1)) - (1 / 5) * (p(2) - p(-2)) + (4 / 105) * (p(3) - p(-3)) - (1 / 280) * (p(4) - p(-4));
      measured.compare("Gamma_1", difference / (3 * step) / state.pressure, state.gamma1, `x ${x}`);
    }
    measured.expectBelow("dP/drho", 3e-15);
    measured.expectBelow("Gibbs", 2e-15);
    measured.expectBelow("Gamma_1", 2e-13); // rounding of P over the step 0.03
  });
});

describe("join with finite temperature", () => {
  for (const x of [0.7, 1, 30]) {
    test(`x = ${x}: the difference falls as T^2, and is 2e-15 once pi^2 (kT/E_F)^2 < 1e-16`, () => {
      const density = 2 * 973932.1720105553 * x ** 3;
      const cold = gas.state(density, 0, helium);
      const fields = [
        "pressure",
        "specificEnergy",
        "pressureByDensity",
        "soundSpeed",
        "gamma1",
        "specificFreeEnergy",
      ] as const;
      const differences = [1e-2, 1e-3, 1e-4].map((ratio) => {
        const warm = gas.state(density, ratio * cold.fermiTemperature, helium);
        return Math.abs(warm.pressure / cold.pressure - 1) / ratio ** 2;
      });
      // The same coefficient at three temperatures: the next term is a hundred times smaller per decade.
      expect(differences[1]! / differences[0]!).toBeCloseTo(1, 2);
      expect(differences[2]! / differences[1]!).toBeCloseTo(1, 4);
      let compared = 0;
      for (const ratio of [1e-9, 3e-9]) {
        const temperature = Math.max(1, ratio * cold.fermiTemperature); // 1 K is the coldest but 0
        if (temperature / cold.fermiTemperature > 3e-9) continue;
        compared++;
        const warm = gas.state(density, temperature, helium);
        for (const field of fields) expect(Math.abs(warm[field] / cold[field] - 1), field).toBeLessThan(2e-15);
        // Ratios of two vanishing quantities join too.
        for (const field of ["gamma3", "adiabaticGradient", "gamma2", "entropyByTemperature"] as const) {
          expect(Math.abs(warm[field] / cold[field] - 1), field).toBeLessThan(3e-15);
        }
      }
      expect(compared).toBe(2);
    });
  }

  test("T = 0 itself: no entropy, no heat capacity, infinite degeneracy, no positrons, nothing NaN", () => {
    const state = gas.state(1e6, 0, helium);
    expect(state.specificEntropy).toBe(0);
    expect(state.heatCapacityV).toBe(0);
    expect(state.temperatureExponent).toBe(0);
    expect(state.electronDegeneracy).toBe(Number.POSITIVE_INFINITY);
    expect(state.positronDensity).toBe(0);
    expect(state.gamma3 - 1).toBeCloseTo((2 - 1 / (1 + 1 / state.relativityParameter ** 2)) / 3, 14);
    for (const value of Object.values(state)) expect(value).not.toBeNaN();
  });
});
