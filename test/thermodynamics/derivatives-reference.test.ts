/**
 * Derivatives by every pair of variables against free energies computed independently with 95-112 digit Taylor arithmetic
 * (fixture state-third.json says how): their cubic Taylor polynomial has the exact first derivatives of every
 * quantity that is made of F and its first and second derivatives. Quantities here are the textbook's (Cox & Giuli 1968,
 * chapter 9) in 100-digit decimal numbers, differentiated by central differences of relative step 1e-25 (error 1e-50).
 */
import { Decimal } from "decimal.js";
import { expect, test } from "vitest";
import { coulombPlasma } from "../../src/coulomb/coulomb-plasma.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { radiation } from "../../src/radiation.js";
import { stateVariables } from "../../src/thermodynamics/brackets.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { derivatives } from "../../src/thermodynamics/derivatives.js";
import type { EquationOfState, State } from "../../src/thermodynamics/equation-of-state.js";
import { type DifferentiableQuantity, differentiable } from "../../src/thermodynamics/gradients.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { compositionOf, type Row, rowsOf } from "../fixtures/states.js";
import { Measured } from "../measured.js";

const Exact: typeof Decimal = Decimal.clone({ precision: 100, defaults: true });
const lightSpeedSquared = new Exact("29979245800").pow(2);

/** Columns of the fixture: scaled derivatives of order (i, j). */
const orders: readonly (readonly [column: string, i: number, j: number])[] = [
  ["F", 0, 0],
  ["F_10", 1, 0],
  ["F_01", 0, 1],
  ["F_20", 2, 0],
  ["F_11", 1, 1],
  ["F_02", 0, 2],
  ["F_30", 3, 0],
  ["F_21", 2, 1],
  ["F_12", 1, 2],
  ["F_03", 0, 3],
];

/** Every quantity at rho (1 + x), T (1 + y), from the polynomial with coefficients `f`. */
function quantitiesOf(f: readonly Decimal[], rho: Decimal, kelvin: Decimal, x: Decimal, y: Decimal): Decimal[] {
  const factorial = [1, 1, 2, 6];
  /** d^(a+b)F/(dx^a dy^b) of the polynomial. */
  const slope = (a: number, b: number): Decimal =>
    orders.reduce((sum, [, i, j], n) => {
      if (i < a || j < b) return sum;
      const scale = factorial[i - a]! * factorial[j - b]!;
      return sum.plus(
        f[n]!.times(x.pow(i - a))
          .times(y.pow(j - b))
          .div(scale),
      );
    }, new Exact(0));
  const density = x.plus(1).times(rho);
  const temperature = y.plus(1).times(kelvin);
  const free = slope(0, 0);
  const f10 = slope(1, 0).div(rho);
  const f01 = slope(0, 1).div(kelvin);
  const f20 = slope(2, 0).div(rho.pow(2));
  const f11 = slope(1, 1).div(rho).div(kelvin);
  const f02 = slope(0, 2).div(kelvin.pow(2));
  const pressure = density.pow(2).times(f10);
  const entropy = f01.neg();
  const energy = free.plus(temperature.times(entropy));
  const enthalpy = energy.plus(pressure.div(density));
  const pressureR = density.times(f10).times(2).plus(density.pow(2).times(f20));
  const pressureT = density.pow(2).times(f11);
  const cv = temperature.times(f02).neg();
  const densityExponent = pressureR.times(density).div(pressure);
  const temperatureExponent = pressureT.times(temperature).div(pressure);
  const gamma3 = pressureT.div(density.times(cv)).plus(1);
  const gamma1 = densityExponent.plus(temperatureExponent.times(gamma3.minus(1)));
  const gradient = gamma3.minus(1).div(gamma1);
  const gamma2 = new Exact(1).div(new Exact(1).minus(gradient));
  const cp = cv.times(gamma1).div(densityExponent);
  const inertia = density.times(lightSpeedSquared).plus(density.times(energy)).plus(pressure);
  const sound = gamma1.times(pressure).div(inertia).sqrt().times(new Exact("29979245800"));
  const all: Record<DifferentiableQuantity, Decimal> = {
    density,
    temperature,
    pressure,
    specificEnergy: energy,
    specificEntropy: entropy,
    specificEnthalpy: enthalpy,
    specificFreeEnergy: free,
    heatCapacityV: cv,
    heatCapacityP: cp,
    densityExponent,
    temperatureExponent,
    gamma1,
    gamma2,
    gamma3,
    adiabaticGradient: gradient,
    soundSpeed: sound,
    bulkModulus: gamma1.times(pressure),
    pressureByDensity: pressureR,
    pressureByTemperature: pressureT,
    energyByDensity: f10.plus(temperature.times(f11).neg()),
    energyByTemperature: cv,
    entropyByDensity: f11.neg(),
    entropyByTemperature: f02.neg(),
  };
  return differentiable.map((name) => all[name]);
}

/** dQ/dx and dQ/dy of every quantity at the point. */
function slopesOf(f: readonly Decimal[], rho: Decimal, kelvin: Decimal): (readonly [Decimal, Decimal])[] {
  const step = new Exact("1e-25");
  const zero = new Exact(0);
  const difference = (x: Decimal, y: Decimal): Decimal[] => {
    const ahead = quantitiesOf(f, rho, kelvin, x, y);
    const behind = quantitiesOf(f, rho, kelvin, x.neg(), y.neg());
    return ahead.map((value, i) => value.minus(behind[i]!).div(step.times(2)));
  };
  const byX = difference(step, zero);
  const byY = difference(zero, step);
  return byX.map((value, i) => [value, byY[i]!] as const);
}

/** Jacobian determinant of two quantities. */
function bracket(slopes: readonly (readonly [Decimal, Decimal])[], i: number, j: number): Decimal {
  return slopes[i]![0].times(slopes[j]![1]).minus(slopes[i]![1].times(slopes[j]![0]));
}

/** (dQ/da) at constant b. */
function ratio(slopes: readonly (readonly [Decimal, Decimal])[], q: number, a: number, b: number): Decimal {
  return bracket(slopes, q, b).div(bracket(slopes, a, b));
}

/** The fixture's point for each set. */
function matterOf(row: Row): EquationOfState {
  if (row["set"] === "ideal") return whiteDwarfMatter({ coulomb: false });
  const phase = row["set"] as "liquid" | "crystal";
  return combine(electronPositronGas(), radiation(), coulombPlasma({ phase }));
}

test("21 points of ideal plasma, liquid and crystal: all quantities by all pairs", () => {
  const measured = new Measured();
  for (const row of rowsOf("state-third.json")) {
    const rho = new Exact(row["rho"]!);
    const kelvin = new Exact(row["T"]!);
    const f = orders.map(([column]) => new Exact(row[column]!));
    const slopes = slopesOf(f, rho, kelvin);
    // The fixture's numbers have 20 digits: what half a unit of the last one changes is no error of the library.
    const shifted = f.map((value, n) =>
      slopesOf(
        f.map((one, m) => (m === n ? value.times(new Exact(1).plus("5e-20")) : one)),
        rho,
        kelvin,
      ),
    );
    const eos = matterOf(row);
    const matter = compositionOf(row["comp"]!);
    const state = eos.state(Number(row["rho"]), Number(row["T"]), matter);
    for (let a = 0; a < stateVariables.length; a++) {
      for (let b = a + 1; b < stateVariables.length; b++) {
        const by = [stateVariables[a]!, stateVariables[b]!] as const;
        const found = derivatives(eos, state.density, state.temperature, matter, { of: differentiable, by });
        for (const [q, name] of differentiable.entries()) {
          for (const [one, other] of [
            [a, b],
            [b, a],
          ] as const) {
            const variable = stateVariables[one]!;
            const actual = found[name][variable as (typeof by)[number]];
            const expected = ratio(slopes, q, one, other);
            const uncertain = shifted
              .reduce((sum, each) => sum.plus(ratio(each, q, one, other).minus(expected).abs()), new Exact(0))
              .toNumber();
            const error = Math.max(0, Math.abs(actual - expected.toNumber()) - uncertain);
            // Its terms: the quantity and its slopes, each times the way of the other variable.
            const [qx, qy] = slopes[q]!.map((value) => Math.abs(value.toNumber())) as [number, number];
            const [bx, by_] = slopes[other]!.map((value) => Math.abs(value.toNumber())) as [number, number];
            const size = q < stateVariables.length ? 0 : Math.abs(state[name as keyof State] as number);
            const terms = ((qx + size) * by_ + (qy + size) * bx) / Math.abs(bracket(slopes, a, b).toNumber());
            const where = `${row["set"]} ${row["comp"]} ${row["rho"]} ${row["T"]}: d${name}/d${variable} at ${stateVariables[other]}`;
            measured.add(
              q < stateVariables.length ? "of variables" : name,
              error === 0 ? 0 : error / (terms * found.conditioning),
              `${where}: ${actual} for ${expected.toPrecision(17)}`,
            );
          }
        }
      }
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  expect(measured.count("of variables")).toBe(21 * 15 * 2 * 6);
  measured.expectBelow("of variables", 4e-15); // measured 1.8e-15
  // Measured 6.3e-15 (entropyByTemperature of a crystal whose phonons are nearly extinct); medians 3e-16.
  for (const name of differentiable.slice(stateVariables.length)) {
    expect(measured.count(name)).toBe(21 * 15 * 2);
    measured.expectBelow(name, 1.3e-14, 4e-16);
  }
});
