/** Tables as equations of state: what they answer, what they refuse, and that solvers find their states. */
import { describe, expect, test } from "vitest";
import { coulombPlasma } from "../../src/coulomb/coulomb-plasma.js";
import { isFermistateError } from "../../src/errors.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { solve } from "../../src/inverse/solve.js";
import { composition } from "../../src/matter/composition.js";
import { buildTable, type TableOptions, tableEquationOfState, tabulated } from "../../src/tables/index.js";
import { tablePlan } from "../../src/tables/plan.js";
import { combine } from "../../src/thermodynamics/combine.js";
import type { Contribution } from "../../src/thermodynamics/contribution.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { uniform } from "../measured.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const matter = whiteDwarfMatter();
const table = buildTable(matter, core, { density: [1e5, 1e8], temperature: [1e6, 1e8], accuracy: 1e-4 });
const eos = tableEquationOfState(table);

describe("inverse questions", () => {
  const pairs = [
    ["density", "specificEnergy"],
    ["density", "pressure"],
    ["density", "specificEntropy"],
    ["density", "specificEnthalpy"],
    ["temperature", "pressure"],
    ["temperature", "specificEntropy"],
    ["pressure", "specificEntropy"],
    ["pressure", "specificEnergy"],
    ["specificEnthalpy", "specificEntropy"],
    ["specificEnergy", "specificEntropy"],
  ] as const;

  test.each(pairs)("%s and %s: states of the table are found again, liquid and crystal", (a, b) => {
    const random = uniform(17);
    let crystals = 0;
    for (let i = 0; i < 60; i++) {
      const [density, temperature] = [1.1e5 * 10 ** (2.9 * random()), 1.2e6 * 10 ** (1.8 * random())];
      const state = eos.state(density, temperature, core);
      crystals += state.crystalFraction ?? 0;
      const found = solve(eos, core, { [a]: state[a], [b]: state[b] } as never);
      const where = `${density} g/cm^3, ${temperature} K`;
      const again = found.state;
      expect(Math.abs(again[a] / state[a] - 1), where).toBeLessThan(1e-13);
      expect(Math.abs(again[b] / state[b] - 1), where).toBeLessThan(1e-13);
    }
    expect(crystals).toBeGreaterThan(5);
  });
});

describe("refusals", () => {
  const region: TableOptions = { density: [1e5, 1e6], temperature: [1e7, 1e8] };
  const wrong: readonly (readonly [unknown, string, string])[] = [
    [{ ...region, density: [1e6, 1e5] }, "out-of-range", "density"],
    [{ ...region, density: [Number.NaN, 1e5] }, "not-a-number", "density"],
    [{ ...region, density: 1e5 }, "invalid-option", "density"],
    [{ ...region, density: [-1, 1e5] }, "out-of-range", "density"],
    [{ ...region, density: [1e-30, 1e5] }, "outside-domain", "density"],
    [{ ...region, temperature: [0, 1e8] }, "out-of-range", "temperature"],
    [{ ...region, temperature: [1e7, 1e14] }, "outside-domain", "temperature"],
    [{ ...region, accuracy: 1e-12 }, "out-of-range", "accuracy"],
    [{ ...region, accuracy: "fine" }, "not-a-number", "accuracy"],
    [{ ...region, finestLevel: 9 }, "invalid-option", "finestLevel"],
    [{ ...region, beside: ["tea"] }, "invalid-option", "beside"],
    [{ ...region, beside: matter.contributions.map((one) => one.name) }, "invalid-option", "beside"],
    [{ ...region, colour: "red" }, "invalid-option", "options"],
    [null, "invalid-option", "density"],
    [undefined, "invalid-option", "options"],
  ];
  test.each(wrong)("options %j", (options, code, argument) => {
    let error: unknown;
    try {
      tablePlan(matter, core, options as TableOptions);
    } catch (one) {
      error = one;
    }
    expect(isFermistateError(error), String(error)).toBe(true);
    expect(error).toMatchObject({ code, argument });
  });

  test("another composition; an equal one made anew passes", () => {
    expect(() => eos.state(1e6, 1e7, composition({ C12: 0.4, O16: 0.6 }))).toThrow(
      /C12 0.4 instead of 0.5.*the one composition of this table/,
    );
    const { pressure } = eos.state(1e6, 1e7, core);
    expect(eos.state(1e6, 1e7, composition({ O16: 0.5, C12: 0.5 })).pressure).toBe(pressure);
    // Ten digits are the table's own, traces below them too.
    const rounded = composition({ C12: 0.5 - 5e-11, O16: 0.5, He4: 5e-11 });
    expect(eos.state(1e6, 1e7, rounded).pressure).toBe(pressure);
    expect(() => eos.state(1e6, 1e7, composition({ C12: 0.5, O16: 0.4999, He4: 0.0001 }))).toThrow(
      /0.4999 instead of 0.5/,
    );
    expect(() => eos.state(1e6, 1e7, composition({ meanMassNumber: 14, meanCharge: 7 }))).toThrow(
      /C12 0 instead of 0.5/,
    );
  });

  test.each([{}, null, [], { layout: 2 }, "core.h5"])("what is no table: %j", (given) => {
    let error: unknown;
    try {
      tableEquationOfState(given as never);
    } catch (one) {
      error = one;
    }
    expect(error).toMatchObject({ code: "invalid-option", argument: "table" });
  });

  test("outside the region", () => {
    expect(() => eos.state(9e4, 1e7, core)).toThrow(/table of electrons and positrons \+ Coulomb plasma/);
    expect(() => eos.state(1e6, 1.1e8, core)).toThrow(/outside|allowed/);
    expect(() => eos.state(1e6, 0, core)).toThrow(/allowed/);
  });

  test("composition derivatives, which a table of one composition does not hold", () => {
    const evaluator = eos.evaluator();
    evaluator.point[0] = 1e6;
    evaluator.point[1] = 1e7;
    evaluator.fillMembers(core, 2);
    expect(() => evaluator.fillSpecies(core, new Float64Array(8))).toThrow(/composition derivatives/);
  });

  test("a contribution beside the table that nobody knows", () => {
    const name = "dark photons";
    const dark: Contribution = { ...matter.contributions.at(-1)!, name };
    const strange = buildTable(combine(electronPositronGas(), coulombPlasma(), dark), core, {
      ...region,
      accuracy: 1e-2,
      beside: [name],
    });
    expect(() => tableEquationOfState(strange)).toThrow(/dark photons/);
    expect(tableEquationOfState(strange, dark).state(3e5, 3e7, core).pressure).toBeGreaterThan(0);
    expect(tabulated(strange).standsFor).toEqual(["electrons and positrons", "Coulomb plasma"]);
  });

  test("matter of its own that has no entropy is refused", () => {
    // A cold gas alone: T s = 0.
    const cold: Contribution = {
      name: "polytropic gas",
      domain: matter.domain,
      add: (point, _, __, members) => {
        members[0]! += 1.5e10 * point[0]! ** (2 / 3);
        members[3]! += 1e10 * point[0]! ** (2 / 3);
        members[4]! += (5 / 3) * 1e10 * point[0]! ** (2 / 3);
      },
    };
    expect(() => buildTable(combine(cold), core, region)).toThrow(/entropy/);
  });
});

test("a region of one phase has one sheet", () => {
  const region = { density: [1e7, 1e8], accuracy: 1e-3 } as const;
  const solid = buildTable(matter, core, { ...region, temperature: [1e5, 1e6] });
  expect(solid.sheets.map((sheet) => sheet.phase)).toEqual(["crystal"]);
  expect(tableEquationOfState(solid).state(3e7, 3e5, core).crystalFraction).toBe(1);
  const liquid = buildTable(matter, core, { ...region, temperature: [1e8, 1e9] });
  expect(liquid.sheets.map((sheet) => sheet.phase)).toEqual(["liquid"]);
  expect(tableEquationOfState(liquid).state(3e7, 3e8, core).crystalFraction).toBe(0);
  expect(solid.freezing ?? liquid.freezing).toBeUndefined();
});

test("a table that asks for its finest mesh says where that was not enough", () => {
  const coarse = buildTable(combine(electronPositronGas()), core, {
    density: [1e2, 1e4],
    temperature: [3e8, 3e9],
    accuracy: 1e-8,
    finestLevel: 2,
  });
  expect(coarse.certificate.blocksAboveTarget).toBeGreaterThan(0);
  expect(coarse.certificate.errors.heatCapacityV.largest).toBeGreaterThan(1e-6);
});
