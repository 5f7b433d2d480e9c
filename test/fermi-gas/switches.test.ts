/**
 * No jump at any switch of method: every member evaluated on both sides of every internal boundary.
 *
 * Where two methods overlap (trapezoid and Sommerfeld series, trapezoid and classical gas) both are evaluated at the very
 * same point. Where a choice flips (number of poles, frame, positrons in or out) the two sides are one part in 1e15
 * apart, so that what is left is the jump.
 */
import { describe, expect, test } from "vitest";
import { electronDensityUnit, electronRestTemperature } from "../../src/constants.js";
import { boltzmann } from "../../src/fermi-gas/boltzmann.js";
import { addGasMembers } from "../../src/fermi-gas/density-derivatives.js";
import { ETA, KINETIC_MU, N00, NET_DENSITY, NU, RECORD_LENGTH, THETA } from "../../src/fermi-gas/record.js";
import { singleSpecies } from "../../src/fermi-gas/single-species.js";
import { sommerfeld } from "../../src/fermi-gas/sommerfeld.js";
import { trapezoid } from "../../src/fermi-gas/trapezoid.js";
import { MEMBER_COUNT, type Order } from "../../src/thermodynamics/free-energy.js";
import { Measured } from "../measured.js";
import { type Gas, gasAt } from "./gas-at.js";

const one = new Float64Array([1]);
type Method = (gas: Float64Array, order: Order) => void;

function recordFor(eta: number, theta: number, nu: number): Float64Array {
  const gas = new Float64Array(RECORD_LENGTH);
  gas[ETA] = eta;
  gas[THETA] = theta;
  gas[NU] = nu;
  gas[KINETIC_MU] = eta * theta;
  return gas;
}

/** Members per volume, and n. */
function membersOf(gas: Float64Array, method: Method, order: Order): Float64Array {
  method(gas, order);
  const members = new Float64Array(MEMBER_COUNT);
  addGasMembers(gas, one, order, members);
  return members;
}

/** Natural scales: third-order members vanish in limits, then the member they derive from is the scale. */
function compare(measured: Measured, a: Float64Array, b: Float64Array, where: string, order: Order): void {
  const names = ["e", "Ts", "Tcv", "P", "P_r", "P_t"];
  for (const [i, name] of names.entries()) measured.compare(name, a[i]!, b[i]!, where);
  if (order === 2) return;
  const scale = Math.max(...[2, 3, 4, 5].map((i) => Math.abs(b[i]!)));
  for (const [i, name] of ["Ts_tt", "P_rr", "P_rt", "P_tt", "P_rtt"].entries()) {
    measured.compare(name, a[6 + i]!, b[6 + i]!, where, scale);
  }
}

const temperatures = Array.from({ length: 120 }, (_, i) => 10 ** (-7.5 + (10.7 * i) / 119));

describe("two methods at the same point", () => {
  for (const [order, eta] of [
    [2, 38],
    [3, 39.5],
  ] as const) {
    test(`trapezoid and Sommerfeld series, order ${order}, eta ${eta}`, () => {
      const measured = new Measured();
      for (const theta of temperatures) {
        for (const shift of [-0.1, 0, 0.1]) {
          const at = eta + shift;
          const a = membersOf(recordFor(at, theta, at + 1 / theta), trapezoid, order);
          const b = membersOf(recordFor(at, theta, at + 1 / theta), sommerfeld, order);
          compare(measured, a, b, `theta ${theta}`, order);
        }
      }
      for (const name of ["e", "P", "P_r", "P_t", "Tcv", "Ts"]) measured.expectBelow(name, 3e-14, 3e-15);
      if (order === 3) for (const name of ["Ts_tt", "P_rr", "P_rt", "P_tt", "P_rtt"]) measured.expectBelow(name, 1e-13);
    });
  }

  test("trapezoid and classical gas at X = 2 e^(-1/theta) cosh nu = e^(-38)", () => {
    const measured = new Measured();
    for (const theta of temperatures.filter((t) => t < 1 / 39)) {
      const eta = -38 - Math.LN2;
      for (const nu of [eta + 1 / theta, 1e-3, 0.5, 2]) {
        const pairRich = nu <= 2;
        if (pairRich && 1 / theta > 60) continue; // there is nothing then: the net density is below e^(-60)
        const gas = recordFor(pairRich ? nu - 1 / theta : eta, theta, nu);
        const a = membersOf(gas, trapezoid, 3);
        const classical = new Float64Array(RECORD_LENGTH);
        classical[THETA] = theta;
        classical[NET_DENSITY] = gas[N00]!;
        const b = membersOf(classical, (record, order) => boltzmann(record, true, order), 3);
        compare(measured, a, b, `theta ${theta} nu ${nu}`, 3);
      }
    }
    for (const name of ["e", "P", "P_r", "P_t", "Tcv", "Ts"]) measured.expectBelow(name, 1e-13);
    // T^3 d2s/dT2 carries (1/theta)^2 ulp where pairs rule; measured 1.8e-13 at 1/theta = 45.
    for (const name of ["Ts_tt", "P_rr", "P_rt", "P_tt", "P_rtt"]) measured.expectBelow(name, 3e-13);
  });

  test("pairs in momentum, and particles and antiparticles each in rapidity", () => {
    // The two node variables share neither nodes nor residues: P = P_- + P_+, n = n_- - n_+.
    const measured = new Measured();
    for (const theta of temperatures.filter((t) => t > 0.02)) {
      for (const eta of [-30, -9, -2, 0.5, 3, 12, 30]) {
        const nu = eta + 1 / theta;
        if (nu < 0) continue;
        const pairs = recordFor(eta, theta, nu);
        const a = membersOf(pairs, trapezoid, 2);
        const minus = membersOf(recordFor(eta, theta, nu), singleSpecies, 2);
        const etaPlus = -nu - 1 / theta;
        const plus =
          etaPlus < -300 ? new Float64Array(MEMBER_COUNT) : membersOf(recordFor(etaPlus, theta, -nu), singleSpecies, 2);
        measured.compare("P", a[3]!, minus[3]! + plus[3]!, `theta ${theta} eta ${eta}`);
      }
    }
    measured.expectBelow("P", 3e-15, 1e-15);
  });
});

describe("a fine sweep in density across a choice that flips", () => {
  // Second differences of 41 densities a part in 1e10 apart: a smooth member gives its rounding, a jump gives itself.
  const half = 20;
  const spacing = 1e-10;

  function sweepAcross(measured: Measured, n: number, theta: number, where: string): void {
    const rows: Gas[] = [];
    for (let k = -half; k <= half; k++) rows.push(gasAt(n * (1 + k * spacing), theta * electronRestTemperature, 3));
    const temperature = theta * electronRestTemperature;
    for (const name of ["P", "e", "s", "dPdn", "dPdT", "cv"] as const) {
      for (let k = 1; k < 2 * half; k++) {
        const bend = rows[k - 1]![name] - 2 * rows[k]![name] + rows[k + 1]![name];
        measured.compare(name, bend, 0, where, Math.abs(rows[k]![name]));
      }
    }
    const scales: [keyof Gas, (gas: Gas) => number][] = [
      ["d2Pdn2", (gas) => gas.dPdn / n + gas.P / n / n],
      ["d2PdndT", (gas) => (gas.dPdT + gas.cv) / n],
      ["d2PdT2", (gas) => (gas.dPdT + gas.cv) / temperature],
      ["d2sdT2", (gas) => gas.cv / temperature / temperature],
      ["d3PdndT2", (gas) => (gas.dPdT + gas.cv) / n / temperature],
    ];
    for (const [name, scale] of scales) {
      for (let k = 1; k < 2 * half; k++) {
        const bend = rows[k - 1]![name] - 2 * rows[k]![name] + rows[k + 1]![name];
        measured.compare(name, bend, 0, where, scale(rows[k]!));
      }
    }
  }

  const etas = [38, 39.5, 0, 1, 5, 14, 10, -4, -5, -9].map((eta): [string, (theta: number) => [number, number]] => [
    `eta ${eta}`,
    (theta) => [eta, eta + 1 / theta],
  ]);
  const nus = [26, 46, 1].map((nu): [string, (theta: number) => [number, number]] => [
    `nu ${nu}`,
    (theta) => [nu - 1 / theta, nu],
  ]);
  const classical: [string, (theta: number) => [number, number]] = ["classical gas", (theta) => [-38, -38 + 1 / theta]];
  for (const [name, place] of [...etas, ...nus, classical]) {
    test(name, () => {
      const measured = new Measured();
      for (const theta of temperatures) {
        const [eta, nu] = place(theta);
        if (eta < -38.5 || eta > 40 || nu <= 0) continue;
        const gas = recordFor(eta, theta, nu);
        trapezoid(gas, 2);
        sweepAcross(measured, gas[N00]! * electronDensityUnit, theta, `theta ${theta} ${name}`);
      }
      expect(measured.count("P")).toBeGreaterThan(200);
      // Measured 2e-15 (P) to 3e-14 (s): up to four times the rounding of one value.
      for (const member of ["P", "e", "s", "dPdn", "dPdT", "cv"]) measured.expectBelow(member, 6e-14);
      for (const member of ["d2Pdn2", "d2PdndT", "d2PdT2", "d2sdT2"]) measured.expectBelow(member, 1e-12);
      // A second difference is up to four times the rounding; at eta 39.5 that of this member is 7e-13.
      measured.expectBelow("d3PdndT2", 4e-12);
    });
  }

  test("kT/mc^2 0.035, 0.05, 0.1", () => {
    const measured = new Measured();
    for (const switchAt of [0.035, 0.05, 0.1]) {
      for (const eta of [-30, -9.5, -6, -4.5, -1, 0.5, 3, 8, 11, 13, 20, 37]) {
        if (eta + 1 / switchAt <= 0) continue;
        const gas = recordFor(eta, switchAt, eta + 1 / switchAt);
        trapezoid(gas, 2);
        const n = gas[N00]! * electronDensityUnit;
        const at = (side: number): Gas => gasAt(n, switchAt * electronRestTemperature * (1 + side * 1e-14), 2);
        const [below, above] = [at(-1), at(1)];
        // 2e-14 in T moves what goes like e^(-1/theta) or e^eta by 12 times as much: at these temperatures e and c_v most.
        for (const name of ["P", "e", "dPdn", "dPdT", "cv", "s"] as const) {
          measured.compare(name, below[name], above[name], `theta ${switchAt} eta ${eta}`);
        }
      }
    }
    for (const name of ["P", "e", "dPdn", "dPdT", "cv", "s"]) measured.expectBelow(name, 1e-13 + 2e-14 * 12);
    expect(measured.count("P")).toBeGreaterThan(20);
  });
});
