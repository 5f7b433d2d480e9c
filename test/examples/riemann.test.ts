/** The exact Riemann solution: published figures of a perfect gas, and the laws across each wave of degenerate matter. */
import { combine, composition, type EquationOfState, whiteDwarfMatter } from "fermistate";
import { addNaturalDerivatives, type Contribution, DENSITY, TEMPERATURE } from "fermistate/contributions";
import { Solver } from "odex";
import { describe, expect, test } from "vitest";
import { exactRiemann, type Half, sound } from "../../docs/examples/riemann.js";
import { Measured } from "../measured.js";

/** F = T (ln rho - T-term + constant): P = rho T, c_v = 1/(gamma - 1). The constant keeps the entropy positive. */
function perfectGas(gamma: number): EquationOfState {
  const cv = 1 / (gamma - 1);
  const derivatives = new Float64Array(11);
  const gas: Contribution = {
    name: "perfect gas",
    domain: { density: [1e-10, 1e10], temperature: [1e-10, 1e10], zeroTemperature: false },
    add(point, _composition, order, members) {
      const T = point[TEMPERATURE]!;
      const f = Math.log(point[DENSITY]!) - cv * Math.log(T) - 100;
      derivatives.set([f, 1, f - cv, -1, 1, -cv, 2, -1, 0, cv, 0].map((one) => one * T));
      addNaturalDerivatives(members, order, derivatives);
    },
  };
  return combine(gas);
}

describe("a perfect gas", () => {
  // Toro 2009, Riemann Solvers and Numerical Methods for Fluid Dynamics, 3rd ed., tables 4.1 to 4.3, gamma = 1.4: tests 1 to 4
  // (from memory; confirmed by the closed form below). Density, velocity, pressure of each side; pressure, velocity and
  // densities between the waves.
  test.each([
    { left: [1, 0, 1], right: [0.125, 0, 0.1], between: ["0.30313", "0.92745", "0.42632", "0.26557"] },
    { left: [1, -2, 0.4], right: [1, 2, 0.4], between: ["0.00189", "0", "0.02185", "0.02185"] },
    { left: [1, 0, 1000], right: [1, 0, 0.01], between: ["460.894", "19.5975", "0.57506", "5.99924"] },
    { left: [1, 0, 0.01], right: [1, 0, 100], between: ["46.0950", "-6.19633", "5.99242", "0.57511"] },
  ] as const)("$left | $right", ({ left, right, between }) => {
    const gamma = 1.4;
    const half = ([density, velocity, pressure]: readonly [number, number, number]): Half => {
      return { density, velocity, temperature: pressure / density };
    };
    const solution = exactRiemann(perfectGas(gamma), composition({ H1: 1 }), half(left), half(right));
    const found = [solution.pressure, solution.velocity, ...solution.contact.map(({ density }) => density)];
    found.forEach((one, i) => {
      const decimals = between[i]!.split(".")[1]?.length ?? 0;
      expect(Math.abs(one - Number(between[i]))).toBeLessThan(10 ** -decimals); // some are cut, not rounded
    });

    // Velocity changes of both waves at that pressure in closed form: ibid., equations 4.6 and 4.7.
    const change = ([density, , p]: readonly [number, number, number]): number => {
      const P = solution.pressure;
      if (P > p) return (P - p) * Math.sqrt(2 / density / ((gamma + 1) * P + (gamma - 1) * p));
      return ((2 * Math.sqrt((gamma * p) / density)) / (gamma - 1)) * ((P / p) ** ((gamma - 1) / (2 * gamma)) - 1);
    };
    const [toLeft, toRight] = [change(left), change(right)];
    const scale = Math.abs(toLeft) + Math.abs(toRight) + Math.abs(left[1]) + Math.abs(right[1]);
    expect(Math.abs(toLeft + toRight + right[1] - left[1]) / scale).toBeLessThan(2e-13);
  });
});

describe("carbon and oxygen", () => {
  const eos = whiteDwarfMatter();
  const matter = composition({ C12: 0.5, O16: 0.5 });
  const scenarios: readonly (readonly [Half, Half])[] = [
    [
      { density: 1e7, velocity: 0, temperature: 1e8 },
      { density: 1e6, velocity: 0, temperature: 1e8 },
    ],
    [
      { density: 2e8, velocity: 1e8, temperature: 3e7 },
      { density: 5e7, velocity: -4e8, temperature: 2e9 },
    ],
    [
      { density: 1e5, velocity: 5e8, temperature: 5e7 },
      { density: 3e9, velocity: -2e8, temperature: 1e9 },
    ],
    [
      { density: 3e6, velocity: -2e8, temperature: 1e9 },
      { density: 2e6, velocity: 2e8, temperature: 3e8 },
    ],
  ];

  test("mass, momentum and energy pass each shock, entropy rises; a rarefaction keeps it", () => {
    const measured = new Measured();
    let [shocks, rarefactions] = [0, 0];
    for (const [left, right] of scenarios) {
      const solution = exactRiemann(eos, matter, left, right);
      const [head, tail] = [solution.speeds[0]!, solution.speeds[1]!];
      [left, right].forEach((half, i) => {
        const ahead = eos.state(half.density, half.temperature, matter);
        const behind = solution.contact[i]!;
        const where = `${half.density} ${half.temperature}`;
        measured.compare("pressures at the contact", behind.pressure, solution.pressure, where);
        const front = i === 0 ? head : solution.speeds[4]!;
        if (behind.pressure > ahead.pressure) {
          shocks += 1;
          const [u, v] = [half.velocity - front, solution.velocity - front];
          const [flow, after] = [ahead.density * u, behind.density * v];
          measured.compare("mass", after, flow, where);
          measured.compare("momentum", behind.pressure + after * v, ahead.pressure + flow * u, where);
          const energy = ahead.specificEnthalpy + 0.5 * u * u;
          measured.compare("energy", behind.specificEnthalpy + 0.5 * v * v, energy, where);
          expect(behind.specificEntropy).toBeGreaterThan(ahead.specificEntropy);
        } else {
          rarefactions += 1;
          measured.compare("entropy of a rarefaction", behind.specificEntropy, ahead.specificEntropy, where);
        }
      });
      expect(solution.speeds).toEqual([...solution.speeds].sort((a, b) => a - b));
      if (tail > head) {
        for (const share of [0, 0.2, 0.7, 1]) {
          const ray = head + share * (tail - head);
          const { velocity, state } = solution.at(ray);
          measured.compare("rays of a fan are characteristics", velocity - sound(state), ray, `${ray}`, sound(state));
        }
      }
    }
    expect([shocks, rarefactions]).toEqual([3, 5]);
    measured.expectBelow("pressures at the contact", 2e-15);
    measured.expectBelow("entropy of a rarefaction", 1e-15);
    for (const law of ["mass", "momentum", "energy"]) measured.expectBelow(law, 2e-14);
    measured.expectBelow("rays of a fan are characteristics", 2e-14);
  });

  test("the fan is what an integrator finds along the isentrope", () => {
    const [left, right] = scenarios[0]!;
    const solution = exactRiemann(eos, matter, left, right);
    const from = eos.state(left.density, left.temperature, matter);
    const end = solution.contact[0];
    // d ln P = gamma1 d ln rho, d ln T = (gamma3 - 1) d ln rho, du = -c d ln rho
    const integrator = new Solver(3);
    integrator.relativeTolerance = 1e-13;
    integrator.absoluteTolerance = 1e-13;
    const { y } = integrator.solve(
      (lnDensity, [, lnT]) => {
        const state = eos.state(Math.exp(lnDensity), Math.exp(lnT!), matter);
        return [state.gamma1, state.gamma3 - 1, -sound(state) / 1e8];
      },
      Math.log(left.density),
      [Math.log(from.pressure), Math.log(left.temperature), 0],
      Math.log(end.density),
    );
    expect(Math.abs(Math.exp(y[0]!) / end.pressure - 1)).toBeLessThan(3e-13);
    expect(Math.abs(Math.exp(y[1]!) / end.temperature - 1)).toBeLessThan(3e-13);
    expect(Math.abs((y[2]! * 1e8) / solution.velocity - 1)).toBeLessThan(3e-13);
  });
});
