/**
 * The Fermi gas against integrals computed independently.
 *
 * fermi-dirac-and-pair-gas.json: float128 tanh-sinh quadrature, 30 random integrals confirmed by mpmath at 40 digits;
 * generalised integrals as defined by Gong et al. 2001, Comput. Phys. Commun. 136, 294.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { SOMMERFELD_ETA } from "../../src/fermi-gas/accuracy.js";
import { ETA, KINETIC_MU, N00, NU, P00, RECORD_LENGTH, THETA } from "../../src/fermi-gas/record.js";
import { singleSpecies } from "../../src/fermi-gas/single-species.js";
import { sommerfeld } from "../../src/fermi-gas/sommerfeld.js";
import { Measured } from "../measured.js";
import { gasAt } from "./gas-at.js";

interface Fixture {
  readonly F: readonly Record<string, string>[];
  readonly gas: readonly Record<string, string>[];
}
const fixture = JSON.parse(
  readFileSync(new URL("../fixtures/fermi-dirac-and-pair-gas.json", import.meta.url), "utf8"),
) as Fixture;

test("one species: n and P are sums of generalised Fermi-Dirac integrals", () => {
  const measured = new Measured();
  const gas = new Float64Array(RECORD_LENGTH);
  for (const row of fixture.F) {
    const eta = Number(row["eta"]);
    const beta = Number(row["beta"]);
    if (beta === 0) continue; // theta = 0 with finite eta: not a temperature
    gas[ETA] = eta;
    gas[THETA] = beta;
    gas[NU] = eta + 1 / beta;
    gas[KINETIC_MU] = eta * beta;
    if (eta > SOMMERFELD_ETA) sommerfeld(gas, 2);
    else singleSpecies(gas, 2);
    const half = Number(row["F_1/2"]);
    const threeHalves = Number(row["F_3/2"]);
    const fiveHalves = Number(row["F_5/2"]);
    const n = Math.SQRT2 * beta ** 1.5 * (half + beta * threeHalves);
    const p = ((2 * Math.SQRT2) / 3) * beta ** 2.5 * (threeHalves + (beta / 2) * fiveHalves);
    // e^eta itself loses |eta| ulp.
    const conditioning = Math.max(1, Math.abs(Math.min(0, eta)) / 16);
    measured.compare("n", gas[N00]!, n, `eta ${eta} beta ${beta}`, n * conditioning);
    measured.compare("P", gas[P00]!, p, `eta ${eta} beta ${beta}`, p * conditioning);
  }
  expect(measured.count("n")).toBeGreaterThanOrEqual(50);
  // Measured 2.4e-15 and 2.5e-15 (the formulas for the expected values add some ulp of their own).
  measured.expectBelow("n", 5e-15, 5e-16);
  measured.expectBelow("P", 5e-15, 5e-16);
});

describe("pair gas at 102 points of rho Y_e = 1e-15 ... 1e15 g/cm^3, T = 1e2 ... 1e13 K", () => {
  const columns = {
    P: "P",
    s: "s",
    e: "e_pair",
    dPdn: "dP_dn_T",
    dPdT: "dP_dT_n",
    cv: "de_dT_n",
    positrons: "n_plus",
    d2Pdn2: "d2P_dn2",
    d2PdndT: "d2P_dndT",
    d2PdT2: "d2P_dT2",
  } as const;
  for (const order of [2, 3] as const) {
    test(`order ${order}`, () => {
      const measured = new Measured();
      for (const row of fixture.gas) {
        const n = Number(row["n_e"]);
        const t = Number(row["T"]);
        const where = `rhoYe ${row["rhoYe"]} T ${row["T"]}`;
        const gas = gasAt(n, t, order);
        // Third-order members vanish in limits: their natural scale is that of the members they are derivatives of.
        const scales: Record<string, number> = {
          d2Pdn2: gas.dPdn / n + gas.P / n / n,
          d2PdndT: gas.dPdT / n,
          d2PdT2: gas.cv / t + gas.dPdT / t,
        };
        measured.compare("eta", gas.eta, Number(row["eta"]), where, Math.max(1, Math.abs(Number(row["eta"]))));
        for (const [name, column] of Object.entries(columns) as [keyof typeof columns, string][]) {
          const expected = row[column];
          if (expected === undefined || (order === 2 && name.startsWith("d2"))) continue;
          if (name === "positrons" && Number(expected) < 1e-290) continue;
          measured.compare(name, gas[name], Number(expected), where, scales[name]);
        }
      }
      expect(measured.count("P")).toBe(102);
      for (const name of ["P", "s", "e", "dPdn"]) measured.expectBelow(name, 4e-15, 5e-16);
      measured.expectBelow("dPdT", 6e-15, 8e-16); // s - n n_T/n_mu: a difference with a factor 2 in the degenerate gas
      measured.expectBelow("cv", 8e-15, 5e-16);
      measured.expectBelow("eta", 2e-15, 3e-16);
      measured.expectBelow("positrons", 2e-13); // exp(-2/theta) at 1/theta = 560: conditioning
      if (order === 3) {
        for (const name of ["d2Pdn2", "d2PdndT", "d2PdT2"]) measured.expectBelow(name, 2e-14, 1e-15);
      }
    });
  }
});
