/**
 * The pair gas against arbitrary-precision evaluation of the defining integrals: the accuracy statement of the library.
 *
 * electron-gas-reference.csv: decimal.js, double-exponential quadrature of electrons and positrons separately, 20 digits,
 * made by test/generators/electron-gas.ts from src/certify, which shares nothing with src/fermi-gas.
 * electron-gas-neighbourhood.csv: the same around every internal switch.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { Measured } from "../measured.js";
import { type Gas, gasAt } from "./gas-at.js";

type Row = Readonly<Record<string, string>>;

function rowsOf(name: string): Row[] {
  const text = readFileSync(new URL(`../fixtures/${name}`, import.meta.url), "utf8");
  const lines = text.split("\n").filter((line) => line !== "" && !line.startsWith("#"));
  const names = lines[0]!.split(",");
  return lines.slice(1).map((line) => {
    const cells = line.split(",");
    return Object.fromEntries(names.map((column, i) => [column, cells[i]!]));
  });
}

const first = { P: "P", e: "e_pair", s: "s", dPdn: "dP_dn", dPdT: "dP_dT", cv: "c_v" } as const;
const second = {
  d2Pdn2: "d2P_dn2",
  d2PdndT: "d2P_dndT",
  d2PdT2: "d2P_dT2",
  d2sdT2: "d2s_dT2",
  d3PdndT2: "d3P_dndT2",
} as const;

/** rho Y_e = 1e-15 g/cm^3, the lower end of the accuracy statement. */
const lowestDensity = 1e-15 * 6.02214076e23 * (1 - 1e-12);

/** Measures all columns of a row; third-order members against their natural scale (docs/guide/fermi-gas.md). */
function measure(measured: Measured, row: Row): void {
  const n = Number(row["n_e"]);
  const t = Number(row["T"]);
  const where = `${row["region"]} n_e ${n} T ${t} eta ${Number(row["eta"])}`;
  const two = gasAt(n, t, 2);
  const three = gasAt(n, t, 3);
  const eta = Number(row["eta"]);
  measured.compare("eta", two.eta, eta, where, Math.max(1, Math.abs(eta)));
  for (const [name, column] of Object.entries(first) as [keyof Gas, string][]) {
    const expected = Number(row[column]);
    measured.compare(name, two[name], expected, where);
    measured.compare(`${name} of order 3`, three[name], expected, where);
  }
  // phi_ij: natural derivatives of the free energy per electron; the printed derivatives of P differ from them by multiples
  // of lower ones, so the errors are those of n P_nn, T P_nT ... over the scale of the phi they belong to.
  const p = Number(row["P"]) / n;
  const pn = Number(row["dP_dn"]);
  const phi = {
    d10: Math.abs(p),
    d20: Math.abs(pn - 2 * p),
    d11: Math.abs((t * Number(row["dP_dT"])) / n),
    d02: Math.abs((t * Number(row["c_v"])) / n),
    d12: Math.abs((t * t * Number(row["d2P_dT2"])) / n),
  };
  const thermal = 1.380649e-16 * t; // kT: the ideal-gas value of phi_11
  const scales: Record<keyof typeof second, [strict: number, wide: number]> = {
    d2Pdn2: [(phi.d10 + phi.d20) / n, 0],
    d2PdndT: [phi.d11 / t, Math.max(phi.d11, thermal) / t],
    d2PdT2: [(phi.d11 * n) / t / t, 0],
    d2sdT2: [(phi.d02 * n) / t / t / t, 0],
    d3PdndT2: [(phi.d11 + phi.d12) / t / t, Math.max(phi.d11 + phi.d12, thermal) / t / t],
  };
  for (const [name, column] of Object.entries(second) as [keyof typeof second, string][]) {
    const [strict, wide] = scales[name];
    const expected = Number(row[column]);
    measured.compare(name, three[name], expected, where, Math.max(strict, Math.abs(expected)));
    if (wide > 0) measured.compare(`${name} over kT`, three[name], expected, where, Math.max(wide, Math.abs(expected)));
  }
  const positrons = Number(row["n_plus"]);
  if (positrons > 1e-280) measured.compare("positrons", two.positrons, positrons, where);
}

describe("measured error", () => {
  for (const [file, least, median] of [
    ["electron-gas-reference.csv", 2000, 5e-16],
    ["electron-gas-neighbourhood.csv", 200, 7e-16], // the hard places on purpose
  ] as const) {
    test(file, () => {
      const measured = new Measured();
      const beyond = new Measured();
      const rows = rowsOf(file);
      for (const row of rows) measure(Number(row["n_e"]) >= lowestDensity ? measured : beyond, row);
      if (process.env["FERMISTATE_PRINT"]) console.info(`${measured.table()}\nbelow 1e-15 g/cm^3\n${beyond.table()}`);
      expect(measured.count("P")).toBeGreaterThanOrEqual(least);
      // Measured 8.3e-15, 5.3e-15, 1.1e-15, 2.2e-13, 3.4e-13; the largest are ulps of e^(-1/theta) at the onset of pairs.
      for (const suffix of ["", " of order 3"]) {
        for (const name of ["P", "e", "dPdn", "dPdT", "cv"]) measured.expectBelow(name + suffix, 1.2e-14, median);
        measured.expectBelow(`s${suffix}`, 8e-15, median);
      }
      measured.expectBelow("eta", 1.5e-15, 3e-16);
      measured.expectBelow("d2Pdn2", 1e-14, 1e-15);
      measured.expectBelow("d2PdT2", 5e-14, 2e-15);
      measured.expectBelow("d2sdT2", 1.2e-13, 2e-15);
      measured.expectBelow("d2PdndT", 4e-13, 2e-15);
      measured.expectBelow("d2PdndT over kT", 4e-14);
      measured.expectBelow("d3PdndT2 over kT", 1e-13);
      measured.expectBelow("d3PdndT2", 7e-13, 2e-15);
      measured.expectBelow("positrons", 2e-13);
      if (beyond.count("P") === 0) return;
      // Thinner than that pairs rule down to 1/theta = 600, where an ulp of T moves e^(-1/theta) by 600 ulp, and
      // heat capacity and third-order members carry (1/theta)^2 of it: conditioning of the question.
      for (const name of ["e", "dPdT", "cv"]) beyond.expectBelow(name, 1e-13);
      for (const name of ["P", "s", "dPdn", "eta"]) beyond.expectBelow(name, 1e-15);
    });
  }
});
