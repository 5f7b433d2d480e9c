/**
 * Whole states and third-order members of the ideal plasma against values computed independently with 95-112 digit Taylor
 * arithmetic (fixtures state-ideal.json and state-third.json say how).
 */
import { expect, test } from "vitest";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { radiation } from "../../src/radiation.js";
import { combine } from "../../src/thermodynamics/combine.js";
import type { State } from "../../src/thermodynamics/equation-of-state.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { compareDerivatives, compositionOf, derivativeColumns, rowsOf, columns as totals } from "../fixtures/states.js";
import { Measured } from "../measured.js";

/** Totals of the fixture and the plasma parameters beside them. */
const columns: Readonly<Record<string, keyof State>> = {
  ...totals,
  Gamma: "ionCoupling",
  Gamma_e: "electronCoupling",
  r_s: "densityParameter",
  x_r: "relativityParameter",
};

test("112 states of He, C/O, H/He and Fe, rho 1e-8 ... 1e13 g/cm^3, T 1e4 ... 1.5e11 K", () => {
  const measured = new Measured();
  const eos = whiteDwarfMatter({ coulomb: false });
  const parts: Readonly<Record<string, ReturnType<typeof combine>>> = {
    electrons: combine(electronPositronGas()),
    ions: combine(idealIons()),
    radiation: combine(radiation()),
  };
  const rows = rowsOf("state-ideal.json");
  for (const row of rows) {
    const density = Number(row["rho"]);
    const temperature = Number(row["T"]);
    const matter = compositionOf(row["comp"]!);
    const where = `${row["comp"]} rho ${row["rho"]} T ${row["T"]}`;
    const state = eos.state(density, temperature, matter);
    for (const [column, field] of Object.entries(columns)) {
      measured.compare(column, state[field] as number, Number(row[column]), where);
    }
    const eta = Number(row["eta"]);
    // eta of a pair plasma is nu - 1/theta, a difference of order-one numbers.
    measured.compare("eta", state.electronDegeneracy!, eta, where, Math.max(1, Math.abs(eta)));
    const freeEnergyScale = Math.max(Math.abs(state.specificEnergy), temperature * Math.abs(state.specificEntropy));
    measured.compare("F", state.specificFreeEnergy, Number(row["F"]), where, freeEnergyScale);
    const positrons = Number(row["n_positron"]);
    if (positrons > 1e-200) measured.compare("n_positron", state.positronDensity!, positrons, where);

    const whole = { P: state.pressure, e: state.specificEnergy, s: state.specificEntropy, c_v: state.heatCapacityV };
    for (const [name, share] of Object.entries(row.contrib)) {
      const f = parts[name]!.freeEnergy(density, temperature, matter);
      const values = { P: density * f.f10, e: f.f00 - f.f01, s: -f.f01 / temperature, c_v: -f.f02 / temperature };
      for (const [column, value] of Object.entries(values) as [keyof typeof whole, number][]) {
        measured.compare(
          `share of ${column}`,
          value,
          Number(share[column]),
          `${where} ${name}`,
          Math.abs(whole[column]),
        );
      }
    }
  }
  expect(rows.length).toBe(112);
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  // Measured max 2.4e-15 (c_p, chi_T), medians 2e-16: twice that.
  for (const column of Object.keys(columns)) measured.expectBelow(column, 5e-15, 4e-16);
  measured.expectBelow("eta", 1e-15);
  measured.expectBelow("F", 2e-15);
  measured.expectBelow("n_positron", 2e-13); // exp(-2/theta - eta): conditioning
  // Entropy of ions alone can exceed the total in size where it is negative.
  for (const column of ["P", "e", "s", "c_v"]) measured.expectBelow(`share of ${column}`, 4e-15);
});

test("derivatives of the free energy to third order and (2,2)", () => {
  const measured = new Measured();
  const rows = rowsOf("state-third.json").filter((row) => row["set"] === "ideal");
  for (const row of rows) {
    const f = whiteDwarfMatter({ coulomb: false }).freeEnergy(
      Number(row["rho"]),
      Number(row["T"]),
      compositionOf(row["comp"]!),
      3,
    );
    compareDerivatives(measured, f, row);
  }
  expect(rows.length).toBe(12);
  for (const column of derivativeColumns) measured.expectBelow(column, 1e-14); // measured 5.2e-15 (F_03)
});
