/** Columns from elsewhere: how far their equation of state is from what they were sampled from, and what the report finds in them. */
import { describe, expect, test } from "vitest";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { solve } from "../../src/inverse/solve.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { columnsReportText, equationOfStateFromColumns } from "../../src/tables/index.js";
import { combine } from "../../src/thermodynamics/combine.js";
import type { EquationOfState } from "../../src/thermodynamics/equation-of-state.js";
import { Measured, uniform } from "../measured.js";
import { columnsOf, idealGas, type Row, rowsOf, statesOf, steps } from "./foreign-rows.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const names = [
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "heatCapacityV",
  "pressureByDensity",
  "pressureByTemperature",
] as const;
type Region = readonly [number, number, number, number];

/** Errors at fresh places: of pressures and energies over P, |e| + P/rho and so on, as certificates have them. */
function errors(
  eos: EquationOfState,
  truth: (rho: number, t: number) => Row & Record<(typeof names)[number], number>,
  [lowRho, highRho, lowT, highT]: Region,
  count = 1000,
): Measured {
  const random = uniform(41);
  const measured = new Measured();
  for (let i = 0; i < count; i++) {
    const [rho, t] = [lowRho * (highRho / lowRho) ** random(), lowT * (highT / lowT) ** random()];
    const [mine, exact] = [eos.state(rho, t, core), truth(rho, t)];
    const scales: Partial<Record<(typeof names)[number], number>> = {
      specificEnergy: Math.abs(exact.specificEnergy) + exact.pressure / rho,
      pressureByDensity: Math.max(exact.pressureByDensity, exact.pressure / rho),
      pressureByTemperature: Math.abs(exact.pressureByTemperature) + rho * exact.heatCapacityV,
    };
    for (const name of names) measured.compare(name, mine[name], exact[name], `${rho} g/cm^3, ${t} K`, scales[name]);
  }
  if (process.env["FERMISTATE_PRINT"]) console.log(measured.table());
  return measured;
}

describe("ideal gas and photons, closed form", () => {
  const region: Region = [1e-6, 1e2, 1e4, 1e7];
  const mesh = (m: number, n: number): Row[] => rowsOf(steps(1e-6, 1e2, m), steps(1e4, 1e7, n), idealGas);

  test("photons within the columns: sixth order in the distance of nodes", () => {
    const of = (n: number) =>
      errors(
        equationOfStateFromColumns(columnsOf(mesh(2 * n - 1, n)), { composition: core, unstable: "report" })
          .equationOfState,
        idealGas,
        [1e-5, 1e2, 1e4, 3e6],
      );
    const [coarse, fine] = [of(21), of(41)];
    fine.expectBelow("pressure", 2e-5, 6e-9);
    fine.expectBelow("specificEntropy", 3e-5, 5e-8);
    fine.expectBelow("heatCapacityV", 1e-3, 6e-6);
    for (const name of ["pressure", "specificEntropy"]) {
      const gain = coarse.median(name) / fine.median(name);
      expect(gain, name).toBeGreaterThan(2 ** 5.5);
    }
  });

  test("photons beside", () => {
    const { equationOfState, report } = equationOfStateFromColumns(columnsOf(mesh(41, 31)), {
      composition: core,
      beside: [radiation()],
    });
    const measured = errors(equationOfState, idealGas, region);
    measured.expectBelow("pressure", 2e-9, 6e-12);
    measured.expectBelow("specificEntropy", 2e-8, 7e-11);
    measured.expectBelow("pressureByDensity", 7e-9, 7e-11);
    expect(report.deviations.pressure.max).toBeLessThan(2e-9);
    expect(equationOfState.state(1e-5, 3e6, core).radiationPressureFraction).toBeGreaterThan(0.9);
  });

  test("unequal steps, rows in any order, entropies of both signs", () => {
    const random = uniform(5);
    const uneven = (low: number, high: number, count: number) =>
      steps(low, high, count).map((x, i) =>
        i === 0 || i === count - 1 ? x : x * (high / low) ** ((random() - 0.5) / (2 * count)),
      );
    const at = (rho: number, t: number) => idealGas(rho, t, 0, -7e8);
    const rows = rowsOf(uneven(1e-2, 1e2, 41), uneven(1e4, 1e7, 31), at);
    expect(rows.some((row) => row.specificEntropy < 0) && rows.some((row) => row.specificEntropy > 0)).toBe(true);
    rows.sort(() => random() - 0.5);
    const columns = columnsOf(rows);
    const typed = Object.fromEntries(
      Object.entries(columns).map(([name, column]) => [name, Float64Array.from(column)]),
    );
    const { equationOfState, report } = equationOfStateFromColumns(typed as unknown as typeof columns, {
      composition: core,
    });
    const measured = errors(equationOfState, at, [1e-2, 1e2, 1e4, 1e7]);
    measured.expectBelow("pressure", 1e-7, 2e-10);
    measured.expectBelow("heatCapacityV", 1e-4, 1.2e-7);
    expect(report.arrangement).toBe("rectangular");
    // Entropy over k per particle, so that its zero does not count.
    const random2 = uniform(9);
    for (let i = 0; i < 100; i++) {
      const [rho, t] = [1e-2 * 1e4 ** random2(), 1e4 * 1e3 ** random2()];
      const off = equationOfState.state(rho, t, core).specificEntropy - at(rho, t).specificEntropy;
      expect(Math.abs(off) / (1.380649e-16 * 3e23)).toBeLessThan(1e-6);
    }
  });

  test("scattered in temperature: resampled, and said so", () => {
    const random = uniform(3);
    const rows = steps(1e-6, 1e2, 41).flatMap((rho) => {
      const [low, high] = [1e4 * 2 ** random(), 1e7 / 2 ** random()];
      return steps(low, high, 40 + Math.floor(5 * random())).map((t) => idealGas(rho, t, 0));
    });
    const { equationOfState, report } = equationOfStateFromColumns(columnsOf(rows), { composition: core });
    expect(report.arrangement).toBe("scattered in temperature");
    expect(report.rowsOutside).toBeGreaterThan(50);
    const { temperature } = equationOfState.domain;
    errors(equationOfState, (rho, t) => idealGas(rho, t, 0), [1e-6, 1e2, ...temperature]).expectBelow(
      "pressure",
      1e-6,
      1e-8,
    );
    expect(columnsReportText(report)).toMatch(/resampled along ln T/);
  });

  test("no column of entropy: found from energy and pressure, its zero given or chosen", () => {
    const { specificEntropy, ...columns } = columnsOf(mesh(61, 41));
    const first = specificEntropy[0]!;
    const bare = idealGas(1e-6, 1e4, 0).specificEntropy;
    const options = { composition: core, beside: [radiation()] };
    const { equationOfState, report } = equationOfStateFromColumns(columns, { ...options, entropyAtLowestNode: bare });
    expect(report.entropy).toBe("from pressure and energy");
    const measured = errors(equationOfState, idealGas, region);
    measured.expectBelow("specificEntropy", 4e-9, 3e-11);
    measured.expectBelow("pressure", 4e-10, 4e-12);
    const zero = equationOfStateFromColumns(columns, options).equationOfState;
    const [a, b] = [zero, equationOfState].map((eos) => eos.state(1e-6, 1e4, core).specificEntropy);
    expect(b! / first).toBeCloseTo(1, 9);
    // The lowest entropy of the gas, at high density and low temperature, is the zero.
    const lowest =
      zero.state(1e2, 1e4, core).specificEntropy -
      idealGas(1e2, 1e4).specificEntropy +
      idealGas(1e2, 1e4, 0).specificEntropy;
    expect(Math.abs(lowest) / a!).toBeLessThan(1e-5);
  });
});

describe("matter of this library, degenerate to hot", () => {
  const matter = combine(electronPositronGas(), idealIons(), radiation());
  const at = statesOf(matter, core);
  const region: Region = [1e4, 1e8, 1e6, 3e8];
  const rows = rowsOf(steps(1e4, 1e8, 61), steps(1e6, 3e8, 41), at);
  const { equationOfState, report } = equationOfStateFromColumns(columnsOf(rows), { composition: core });

  test("fresh places; heat keeps its digits where it is a millionth of the energy", () => {
    const measured = errors(equationOfState, (rho, t) => matter.state(rho, t, core), region);
    measured.expectBelow("pressure", 5e-7, 3e-9);
    measured.expectBelow("specificEntropy", 8e-7, 1.1e-9);
    measured.expectBelow("heatCapacityV", 1e-4, 2.5e-7);
    measured.expectBelow("pressureByDensity", 1.4e-5, 8e-9);
    const cold = matter.state(1e8, 1e6, core);
    expect((1e6 * cold.specificEntropy) / cold.specificEnergy).toBeLessThan(1e-3);
  });

  test("the report tells the same", () => {
    expect(report.unstable.density.length).toBe(0);
    expect(report.residuals.maxwell!.median).toBeLessThan(1e-5);
    expect(report.deviations.specificEntropy!.percentile99).toBeLessThan(1e-6);
    expect(columnsReportText(report)).toMatch(/2501 rows, rectangular: 61 densities/);
  });

  test.each([
    ["density", "specificEnergy"],
    ["temperature", "pressure"],
    ["pressure", "specificEntropy"],
    ["specificEnthalpy", "specificEntropy"],
  ] as const)("solve finds its states from %s and %s", (a, b) => {
    const random = uniform(23);
    for (let i = 0; i < 30; i++) {
      const state = equationOfState.state(1.2e4 * 10 ** (3.8 * random()), 1.2e6 * 10 ** (2.2 * random()), core);
      const found = solve(equationOfState, core, { [a]: state[a], [b]: state[b] } as never).state;
      expect(Math.abs(found[b] / state[b] - 1)).toBeLessThan(1e-13);
      expect(Math.abs(found.pressure / state.pressure - 1)).toBeLessThan(1e-9);
    }
  });

  test("columns of six digits: errors stay those of the sixth digit", () => {
    const round = (x: number): number => Number(x.toPrecision(6));
    const short = rows.map((row) => ({
      ...row,
      pressure: round(row.pressure),
      specificEnergy: round(row.specificEnergy),
      specificEntropy: round(row.specificEntropy),
    }));
    const rounded = equationOfStateFromColumns(columnsOf(short), { composition: core });
    const measured = errors(rounded.equationOfState, (rho, t) => matter.state(rho, t, core), region);
    measured.expectBelow("pressure", 1.5e-5, 6e-7);
    measured.expectBelow("specificEntropy", 1e-5, 8e-7);
    measured.expectBelow("heatCapacityV", 1.3e-3, 5e-5);
  });
});

describe("columns that disagree", () => {
  const rows = rowsOf(steps(1e-6, 1e2, 41), steps(1e4, 1e7, 41), (rho, t) => idealGas(rho, t, 0));

  test("pressure times 1.001: found to the digit, everywhere, and met halfway", () => {
    const wrong = rows.map((row) => ({ ...row, pressure: 1.001 * row.pressure }));
    const { equationOfState, report } = equationOfStateFromColumns(columnsOf(wrong), { composition: core });
    const { maxwell, energy, heat } = report.residuals;
    // T ds/d ln rho = -N k T; (T/rho) dP/dT = 1.001 N k T.
    const expected = 1e-3 / 1.001;
    expect(maxwell!.median).toBeCloseTo(expected, 7);
    for (const value of maxwell!.residual) expect(Math.abs(value - expected)).toBeLessThan(2e-5);
    // Of the same gas P/rho - (T/rho) dP/dT is still zero, and c_v was not touched.
    expect(energy.max).toBeLessThan(2e-5);
    expect(heat!.median).toBeLessThan(1e-5);
    expect(report.deviations.pressure.max).toBeLessThan(1.1e-3);
    expect(report.deviations.specificEntropy!.max).toBeLessThan(1.5e-3);
    expect(columnsReportText(report)).toMatch(/the columns disagree/);
    // No waves from cell to cell: derivatives deviate as little.
    errors(equationOfState, (rho, t) => idealGas(rho, t, 0), [1e-5, 1e1, 2e4, 5e6]).expectBelow(
      "pressureByDensity",
      2e-3,
    );
  });

  test("one wrong entropy: the map shows where", () => {
    const index = 20 * 41 + 20;
    const wrong = rows.map((row, k) => (k === index ? { ...row, specificEntropy: 1.001 * row.specificEntropy } : row));
    const { report } = equationOfStateFromColumns(columnsOf(wrong), { composition: core });
    const [density, temperature] = report.residuals.maxwell!.worst;
    expect(Math.abs(Math.log(density / rows[index]!.density))).toBeLessThan(1);
    expect(temperature).toBeCloseTo(rows[index]!.temperature, 6);
    expect(report.residuals.maxwell!.median).toBeLessThan(1e-4);
  });

  test("rows said twice are dropped", () => {
    const { report } = equationOfStateFromColumns(columnsOf([...rows, ...rows.slice(0, 7)]), { composition: core });
    expect(report.duplicates).toBe(7);
    expect(report.densities.length).toBe(41);
  });
});
