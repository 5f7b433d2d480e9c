/**
 * The fixtures of the fast code are what src/certify computes: rows drawn at random are computed again.
 *
 * The draw has a fixed seed. The last printed digit must be right to 0.6 units.
 */
import { Decimal } from "decimal.js";
import { describe, expect, test } from "vitest";
import { type ReferenceElectronGas, referenceElectronGas } from "../../src/certify/index.js";
import { uniform } from "../measured.js";
import { readRows } from "./rows.js";

const D = Decimal.clone({ precision: 60 });
const columns: Readonly<Record<string, keyof ReferenceElectronGas>> = {
  eta: "degeneracyParameter",
  nu: "reducedChemicalPotential",
  n_plus: "positronDensity",
  P: "pressure",
  e_pair: "energyDensity",
  s: "entropyDensity",
  dP_dn: "pressureByDensity",
  dP_dT: "pressureByTemperature",
  c_v: "heatCapacityDensity",
  d2P_dn2: "pressureByDensityTwice",
  d2P_dndT: "pressureByDensityAndTemperature",
  d2P_dT2: "pressureByTemperatureTwice",
  d2s_dT2: "entropyByTemperatureTwice",
  d3P_dndT2: "pressureByDensityAndTemperatureTwice",
};

describe.each([
  ["electron-gas-reference.csv", 2450, 9],
  ["electron-gas-neighbourhood.csv", 300, 3],
])("%s", (name, size, draws) => {
  const rows = readRows(name);
  const random = uniform(20);
  const drawn = Array.from({ length: draws }, () => rows[Math.floor(random() * rows.length)]!);

  test("is whole", () => {
    expect(rows.length).toBe(size);
    for (const row of rows) {
      for (const cell of ["n_e", "T", ...Object.keys(columns)]) expect(row[cell]).toMatch(/^-?\d/);
    }
  });

  test.each(drawn)("$region, n_e $n_e, T $T", (row) => {
    const gas = referenceElectronGas({ netElectronDensity: Number(row["n_e"]), temperature: Number(row["T"]) });
    for (const [column, key] of Object.entries(columns)) {
      const value = gas[key] as Decimal;
      // 20 digits, or down to a hundred times the error's leading place; trailing zeros are not printed
      const error = gas.errors[key as keyof typeof gas.errors];
      const lastPlace = Decimal.max(new D(10).pow(value.e - 19), new D(10).pow(error.e + 2));
      const difference = new D(value).minus(row[column]!).abs();
      expect(difference.div(lastPlace).toNumber(), `${column} ${row[column]} for ${value}`).toBeLessThan(0.6);
    }
  });
});
