/**
 * Points that are nodes of a table: found where the layout of the table puts them (equal steps of the logarithm, 2^level a block), and
 * told by comparisons and certificates, because agreement there is no merit.
 */
import { combine, composition, electronPositronGas, radiation, whiteDwarfMatter } from "fermistate";
import {
  certificateCsv,
  certificateMap,
  certificateText,
  certify,
  certifyState,
  stateCertificateText,
} from "fermistate/certify";
import {
  compare,
  comparisonCsv,
  comparisonJson,
  comparisonMap,
  comparisonSummary,
  comparisonText,
} from "fermistate/compare";
import { logarithmicAxis } from "fermistate/grids";
import { buildTable, equationOfStateFromColumns, type FreeEnergyTable, tableEquationOfState } from "fermistate/tables";
import { describe, expect, test } from "vitest";
import { columnsOf, idealGas, rowsOf, steps } from "./foreign-rows.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const matter = whiteDwarfMatter();
const table = buildTable(matter, core, { density: [1e5, 1e8], temperature: [1e6, 1e9], accuracy: 1e-4 });
const tabular = tableEquationOfState(table);

/** Every node of a sheet, or every point a share of a cell further along one axis or both. */
function* places({ density, temperature, sheets }: FreeEnergyTable, sheet: number, du = 0, dv = 0) {
  const { densityLevels, temperatureLevels } = sheets[sheet]!;
  const at = ({ lowest, highest, blocks }: typeof density, x: number): number =>
    Math.min(lowest * (highest / lowest) ** (x / blocks), highest);
  for (let p = 0; p < density.blocks; p++) {
    for (let q = 0; q < temperature.blocks; q++) {
      const block = p * temperature.blocks + q;
      const [m, n] = [2 ** densityLevels[block]!, 2 ** temperatureLevels[block]!];
      if (m < 1) continue;
      for (let i = 0; i < m; i++) {
        for (let j = 0; j < n; j++) {
          const place = [at(density, p + (i + du) / m), at(temperature, q + (j + dv) / n)] as const;
          yield { place, isOnEdge: (i === 0) !== (j === 0) };
        }
      }
    }
  }
}

const axis = (from: number, to: number, points: number) => logarithmicAxis({ from, to, points });
const onNodes = { density: axis(1e6, 1e8, 9), temperature: axis(1e7, 1e9, 9) };
const between = { density: axis(1.2e6, 9e7, 9), temperature: axis(1.2e7, 9e8, 9) };
const options = { composition: core, consistency: false, quantities: ["pressure", "heatCapacityV"] } as const;

describe("which points are nodes", () => {
  const isNode = tabular.contributions[0]!.isNode!;

  test("those of the sheet that answers, and no others", () => {
    const errors: Record<"nodes" | "ruled", number[]> = { nodes: [], ruled: [] };
    const shifts = [
      [0, 0],
      [1e-8, 1e-8],
      [0.5, 0.5],
      [0.5, 0],
      [0, 1e-3],
    ] as const;
    const count = { nodes: 0, ruled: 0 };
    for (const [sheet, { phase }] of table.sheets.entries()) {
      for (const [du, dv] of shifts) {
        const isExpected = du < 1e-6 && dv < 1e-6;
        for (const { place, isOnEdge } of places(table, sheet, du, dv)) {
          const state = tabular.state(...place, core);
          if ((state.crystalFraction === 1) !== (phase === "crystal")) continue;
          // Along an edge the coarser of two blocks rules: what it has no node for is interpolated.
          const isRuled = isExpected && isOnEdge && !isNode(...place, core);
          expect([place, isNode(...place, core)]).toEqual([place, isExpected && !isRuled]);
          if (!isExpected || du > 0) continue;
          count[isRuled ? "ruled" : "nodes"] += 1;
          const exact = matter.state(...place, core).heatCapacityV;
          const error = Math.abs(state.heatCapacityV / exact - 1);
          errors[isRuled ? "ruled" : "nodes"].push(error);
        }
      }
    }
    expect(count.nodes).toBeGreaterThan(300);
    expect(count.ruled).toBeGreaterThan(10);
    expect(Math.max(...errors.nodes)).toBeLessThan(1.5e-14); // measured: 5.2e-15
    expect(Math.min(...errors.ruled)).toBeGreaterThan(3e-7); // measured: 6.7e-7 to 4.9e-5
  });

  test("of a table of electrons, at the density that has the electrons of the node", () => {
    const electrons = buildTable(combine(electronPositronGas()), composition({ He4: 1 }), {
      density: [1e5, 1e6],
      temperature: [1e7, 1e8],
      accuracy: 1e-2,
    });
    const gas = tableEquationOfState(electrons).contributions[0]!;
    const hydrogen = composition({ H1: 1 });
    for (const { place, isOnEdge } of places(electrons, 0)) {
      if (isOnEdge) continue;
      const [rho, t] = place;
      const same = (rho * composition({ He4: 1 }).electronsPerNucleon) / hydrogen.electronsPerNucleon;
      expect(gas.isNode!(same, t, hydrogen)).toBe(true);
      expect(gas.isNode!(1.01 * same, t, hydrogen)).toBe(false);
    }
  });

  test("refuses a composition that the table does not hold", () => {
    expect(() => isNode(1e6, 1e7, composition({ He4: 1 }))).toThrow(/the one composition of this table/);
  });
});

describe("a comparison", () => {
  test("on nodes alone gives no verdict and says why, first of all", () => {
    const found = compare(matter, tabular, { ...options, ...onNodes });
    expect(found.nodes).toEqual({ first: 0, second: 81, any: 81, points: new Uint8Array(81).fill(2) });
    expect(found.quantities[0]!.largest).toBeLessThan(1e-14); // measured: 2.1e-15, and yet no agreement of the table
    const [first, second] = comparisonSummary(found);
    expect(first).toMatch(/^81 of 81 points are nodes of the table in .*Choose other points\.$/);
    expect(second).toMatch(/^pressure: no verdict, since only nodes of a table were compared \(.*\)\.$/);
    const text = comparisonText(found);
    expect(text).not.toContain("agrees to rounding");
    expect(text.indexOf("81 of 81 points are nodes")).toBeLessThan(text.indexOf("Differences, relative"));
    expect(text.split("are nodes of the table")).toHaveLength(2);
    const read = JSON.parse(comparisonJson(found));
    expect([read.nodes.second, read.summary[0]]).toEqual([81, first]);
    const [head, row] = comparisonCsv(found).split("\r\n");
    expect([head!.split(",").at(-1), row!.split(",").at(-1)]).toEqual(["node of a table [1]", "2"]);
    expect(comparisonMap(found, "pressure")).toContain("81 of 81 points are nodes of a table");
  });

  test("of the table first, and of two tables", () => {
    expect(compare(tabular, matter, { ...options, ...onNodes }).nodes).toMatchObject({ first: 81, second: 0, any: 81 });
    const both = compare(tabular, tabular, { ...options, ...onNodes });
    expect(both.nodes).toMatchObject({ first: 81, second: 81, any: 81 });
    expect(both.nodes.points[0]).toBe(3);
    expect(comparisonSummary(both).filter((one) => one.includes("81 of 81"))).toHaveLength(2);
  });

  test("off nodes says nothing of them and sees the error", () => {
    const found = compare(matter, tabular, { ...options, ...between });
    expect(found.nodes.any).toBe(0);
    expect(found.quantities[1]!.largest).toBeGreaterThan(1e-6); // c_v; measured: 6.7e-6
    expect(comparisonText(found)).not.toContain("node");
    expect(comparisonCsv(found)).not.toContain("node");
    expect(comparisonMap(found, "pressure")).not.toContain("node");
  });

  test("of some nodes counts them and judges by the others", () => {
    const found = compare(matter, tabular, { ...options, density: [1e6, 2e6, 1e7], temperature: [1e7, 1e8] });
    expect(found.nodes).toMatchObject({ second: 4, any: 4 });
    expect(comparisonSummary(found)[0]).toMatch(/^4 of 6 points are nodes/);
    expect(comparisonText(found)).toContain("pressure differs by up to");
  });

  test("without tables has none; points that one refuses do not count", () => {
    expect(compare(matter, whiteDwarfMatter(), { ...options, ...onNodes }).nodes.any).toBe(0);
    const beyond = compare(matter, tabular, { ...options, density: [1e4, 1e6], temperature: [1e7] });
    expect(beyond.nodes).toEqual({ first: 0, second: 1, any: 1, points: Uint8Array.of(0, 2) });
    expect(comparisonSummary(beyond)[0]).toMatch(/^The point is a node of the table in .*Choose other values\.$/);
  });
});

test("columns from elsewhere: nodes are the states that were given", () => {
  const densities = steps(1e-3, 1, 9);
  const temperatures = steps(1e5, 1e6, 9);
  const rows = rowsOf(densities, temperatures, (rho, t) => idealGas(rho, t));
  const { equationOfState } = equationOfStateFromColumns(columnsOf(rows), { composition: core, unstable: "report" });
  const { isNode } = equationOfState.contributions[0]!;
  for (const { density, temperature } of rows) {
    expect(isNode!(density, temperature, core)).toBe(true);
    expect(isNode!(1.01 * density, temperature, core)).toBe(false);
    expect(isNode!(density, 1.01 * temperature, core)).toBe(false);
  }
  const found = compare(combine(radiation()), equationOfState, {
    ...options,
    quantities: ["pressure"],
    density: densities.slice(2, 5),
    temperature: temperatures.slice(2, 4),
  });
  expect(found.nodes).toMatchObject({ second: 6, any: 6 });
});

describe("a certificate", () => {
  const quantities = ["pressure", "heatCapacityV"] as const;

  test("counts nodes and says so in every form", () => {
    const points = { density: [1e6, 2e6, 1e7], temperature: [1e7, 1e7, 1e8] };
    const made = certify(tabular, core, { points, quantities });
    expect(made.nodes).toBe(2);
    expect(made.columns.isNode).toEqual([true, false, true]);
    const errors = made.columns.relative[0]!;
    expect(Math.max(errors[0]!, errors[2]!)).toBeLessThan(1e-14); // measured: 4e-16
    expect(errors[1]).toBeGreaterThan(1e-11); // measured: 2.3e-11
    const text = certificateText(made);
    expect(text).toContain("2 of 3 points are nodes of the table");
    for (const line of text.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
    const csv = certificateCsv(made).trimEnd().split("\n");
    expect(csv.map((line) => line.split(",").at(-1))).toEqual(["node of a table", "1", "0", "1"]);
    expect(certificateMap(made, "pressure")).toContain("2 of them are nodes of a table");
  });

  test("off nodes says nothing of them", () => {
    const region = { density: [1e5, 1e8], temperature: [1e7, 1e9], points: 3 } as const;
    const made = certify(tabular, core, { region, quantities });
    expect([made.nodes, made.compared]).toEqual([0, 3]);
    expect(certificateText(made)).not.toContain("node");
    expect(certificateCsv(made)).not.toContain("node");
  });

  test("of one state", () => {
    const audit = certifyState(tabular, core, 1e6, 1e7, { quantities });
    expect(audit.isNode).toBe(true);
    expect(stateCertificateText(audit)).toContain("The point is a node of the table");
    const other = certifyState(tabular, core, 2e6, 1e7, { quantities });
    expect(other.isNode).toBe(false);
    expect(stateCertificateText(other)).not.toContain("node");
    expect(certifyState(matter, core, 1e6, 1e7, { quantities }).isNode).toBe(false);
  });
});
