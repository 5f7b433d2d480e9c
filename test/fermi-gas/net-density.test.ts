/** Charge neutrality: how many sweeps it takes, that it never fails, and what happens at the ends of the plane. */
import { describe, expect, test } from "vitest";
import { electronDensityUnit } from "../../src/constants.js";
import { solveDensity } from "../../src/fermi-gas/net-density.js";
import {
  M12,
  N00,
  N01,
  N10,
  NODES,
  P00,
  PSI,
  Q,
  RECORD_LENGTH,
  START_ERROR,
  SWEEPS,
  THETA,
} from "../../src/fermi-gas/record.js";
import { uniform } from "../measured.js";
import { fillRecord } from "./gas-at.js";

const perGram = 6.02214076e23;
const record = new Float64Array(RECORD_LENGTH);

/** All that a state needs is positive and finite. */
function sound(): boolean {
  const heat = record[M12]! - record[N01]! ** 2 / record[N10]!;
  const entropy = record[Q]! - record[N00]! * record[THETA]! * record[PSI]!;
  return record[P00]! > 0 && record[N10]! > 0 && heat > 0 && entropy > 0 && Number.isFinite(record[P00]! + heat);
}

test("exactly one sweep on a grid of 173 604 points, none where the gas is classical; start good to 2e-8", () => {
  let points = 0;
  let classical = 0;
  let unsound = 0;
  let worstStart = 0;
  let mostNodes = 0;
  const sweeps = new Map<number, number>();
  for (let logT = 2; logT <= 13.0001; logT += 0.04) {
    for (let logRho = -15; logRho <= 15.0001; logRho += 0.0477) {
      fillRecord(record, 10 ** logRho * perGram, 10 ** logT);
      solveDensity(record, true, 2);
      points++;
      const count = record[SWEEPS]!;
      if (count === 0) classical++;
      sweeps.set(count, (sweeps.get(count) ?? 0) + 1);
      if (!sound()) unsound++;
      worstStart = Math.max(worstStart, record[START_ERROR]!);
      mostNodes = Math.max(mostNodes, record[NODES]!);
    }
  }
  expect(points).toBe(173_604);
  expect([...sweeps.keys()].sort()).toEqual([0, 1]);
  expect(classical).toBeLessThan(points * 0.25);
  expect(unsound).toBe(0);
  expect(worstStart).toBeLessThan(2.2e-8);
  expect(mostNodes).toBeLessThanOrEqual(45);
});

test("one sweep (order 2) or two (order 3) at 200 000 random points, T = 1 ... 1e13 K, rho Y_e = 1e-20 ... 1e18", () => {
  const random = uniform(20261201);
  const bad: string[] = [];
  for (let i = 0; i < 200_000; i++) {
    const temperature = 10 ** (13 * random());
    const density = 10 ** (-20 + 38 * random());
    const order = i % 2 === 0 ? 2 : 3;
    fillRecord(record, density * perGram, temperature);
    solveDensity(record, true, order);
    const count = record[SWEEPS]!;
    if (!sound() || (count !== 0 && count !== order - 1))
      bad.push(`rhoYe ${density} T ${temperature}: ${count} sweeps`);
  }
  expect(bad).toEqual([]);
});

describe("ends of the plane", () => {
  test("no net electrons: symmetric pairs, one sweep, nothing NaN", () => {
    for (const temperature of [2e8, 1e9, 1e11, 1e13]) {
      fillRecord(record, 0, temperature);
      solveDensity(record, true, 3);
      expect(record[N00]).toBe(0);
      expect(record[P00]).toBeGreaterThan(0);
      expect(record.every((value) => !Number.isNaN(value))).toBe(true);
      expect(record[SWEEPS]).toBeLessThanOrEqual(2);
    }
  });

  test("hardly any net electrons: pressure and slope tend to those of none", () => {
    fillRecord(record, 0, 1e10);
    solveDensity(record, true, 2);
    const pressure = record[P00]!;
    const slope = record[N10]!;
    for (const n of [1e-300, 1e-100, 1, 1e10]) {
      fillRecord(record, n, 1e10);
      solveDensity(record, true, 2);
      expect(record[SWEEPS]).toBe(1);
      expect(Math.abs(record[P00]! / pressure - 1)).toBeLessThan(3e-15);
      expect(Math.abs(record[N10]! / slope - 1)).toBeLessThan(3e-15);
      expect(record[N00]).toBe(n / electronDensityUnit);
    }
  });

  test("a start value that is far off still converges, by the safeguarded steps", () => {
    // kT/mc^2 beyond the table's last temperature: the start is an extrapolation.
    for (const theta of [1e4, 1e5]) {
      for (const n of [1e-6, 1, 1e9, 1e15]) {
        fillRecord(record, n * electronDensityUnit, theta * 5929896583.395526);
        solveDensity(record, true, 2);
        expect(record[SWEEPS]).toBeLessThanOrEqual(12);
        expect(Math.abs(record[N00]! / n - 1)).toBeLessThan(1e-14);
        expect(sound()).toBe(true);
      }
    }
  });

  test("a species without antiparticles needs at most five sweeps", () => {
    const random = uniform(7);
    let most = 0;
    for (let i = 0; i < 20_000; i++) {
      fillRecord(record, 10 ** (-12 + 32 * random()) * 1e20, 10 ** (2 + 9 * random()));
      solveDensity(record, false, 2);
      expect(sound()).toBe(true);
      most = Math.max(most, record[SWEEPS]!);
    }
    expect(most).toBeLessThanOrEqual(5);
  });
});
