/**
 * The reference gas against values computed by others' arithmetic.
 *
 * - fermi-dirac-and-pair-gas.json: float128 tanh-sinh quadrature, 30 printed digits
 * - state-third.json: 95-112 digit Taylor arithmetic, 20 digits, derivatives to third order and (2,2)
 * - electron-gas-mpmath.csv: mpmath 1.3.0, Gauss-Legendre at 45 digits and central differences
 */
import { readFileSync } from "node:fs";
import { Decimal } from "decimal.js";
import { describe, expect, test } from "vitest";
import {
  type ReferenceElectronGas,
  type ReferenceElectronGasInput,
  referenceElectronGas,
} from "../../src/certify/index.js";
import { isFermistateError } from "../../src/errors.js";
import { Measured } from "../measured.js";
import { readRows } from "./rows.js";

const D = Decimal.clone({ precision: 50 });
/** The fixture gives densities in mol/cm^3: SI 2019, exact. */
const avogadro = "6.02214076e23";
const json = (name: string): unknown =>
  JSON.parse(readFileSync(new URL(`../fixtures/${name}`, import.meta.url), "utf8"));

test("six points of the float128 file: eta -27 to 1.9e9, nu down to 2e-25", () => {
  const { gas } = json("fermi-dirac-and-pair-gas.json") as { gas: readonly Record<string, string>[] };
  const measured = new Measured();
  for (const index of [1, 5, 14, 45, 98, 101]) {
    const row = gas[index]!;
    const result = referenceElectronGas({
      netElectronDensity: new D(row["rhoYe"]!).times(avogadro),
      temperature: row["T"]!,
    });
    const compare = (column: string, value: Decimal, scale: Decimal): void => {
      const expected = row[column];
      if (expected === undefined || Number(expected) === 0) return;
      const error = new D(value).minus(expected).div(scale).abs().toNumber();
      measured.add(column, error, `rhoYe ${row["rhoYe"]} T ${row["T"]}: ${value} for ${expected}`);
    };
    compare("eta", result.degeneracyParameter, result.degeneracyParameter);
    compare("nu", result.reducedChemicalPotential, result.reducedChemicalPotential);
    compare("n_minus", result.electronDensity, result.electronDensity);
    compare("n_plus", result.positronDensity, result.positronDensity);
    compare("P", result.pressure, result.pressure);
    compare("e_pair", result.energyDensity, result.energyDensity);
    compare("s", result.entropyDensity, result.entropyDensity);
    compare("dP_dn_T", result.pressureByDensity, result.pressureByDensity);
    // From here on float128 lost digits: eta^2 in first order, eta^3 in second, and e^-eta in a classical gas.
    const T = row["T"]!;
    const eta = Decimal.max(result.degeneracyParameter, 0);
    const first = eta.pow(2).times(1e-5).plus(1);
    const second = eta.pow(3).times(1e-5).plus(1);
    const mixed = Decimal.min(
      result.pressureByDensity.div(T),
      result.pressureByTemperature.div(result.netElectronDensity),
    );
    compare("dP_dT_n", result.pressureByTemperature, result.pressureByTemperature.times(first));
    compare("de_dT_n", result.heatCapacityDensity, result.heatCapacityDensity.times(first));
    compare(
      "d2P_dn2",
      result.pressureByDensityTwice,
      result.pressureByDensity.div(result.netElectronDensity).times(first),
    );
    compare("d2P_dndT", result.pressureByDensityAndTemperature, mixed.times(second));
    compare("d2P_dT2", result.pressureByTemperatureTwice, result.pressureByTemperature.div(T).times(second));
  }
  // Measured over all 102 rows: 0 (all 30 digits), dP_dn_T 4.5e-29, s 1.1e-28, then as the comment beside each bound
  for (const column of ["eta", "nu", "n_minus", "n_plus", "P", "e_pair"]) measured.expectBelow(column, 5e-30);
  measured.expectBelow("dP_dn_T", 1e-28);
  measured.expectBelow("s", 2e-28);
  measured.expectBelow("dP_dT_n", 3e-28); // 1.4e-28
  measured.expectBelow("de_dT_n", 4e-28); // 1.9e-28
  measured.expectBelow("d2P_dn2", 2e-31); // 7.3e-32
  measured.expectBelow("d2P_dndT", 3e-29); // 1.2e-29
  measured.expectBelow("d2P_dT2", 7e-29); // 3.2e-29
});

describe("third-order derivatives of the free energy, ideal matter (electrons, ions, radiation)", () => {
  const { rows, constants } = json("state-third.json") as {
    rows: readonly Record<string, string>[];
    constants: { k: string; m_u: string; a_rad: string };
  };
  /** Z, A and the electrons per nucleon as an exact fraction; nuclei per nucleon. */
  const matter: Record<string, { electrons: string; nuclei: Decimal }> = {
    He4: { electrons: "1/2", nuclei: new D(1).div(4) },
    "C12:O16=0.5:0.5": { electrons: "1/2", nuclei: new D(1).div(24).plus(new D(1).div(32)) },
    Fe56: { electrons: "26/56", nuclei: new D(1).div(56) },
    "H1:He4=0.7:0.3": { electrons: "17/20", nuclei: new D("0.7").plus(new D("0.3").div(4)) },
  };
  const places = ["He4 1e0 10e9", "Fe56 5e2 4e8", "C12:O16=0.5:0.5 2e11 15e5", "H1:He4=0.7:0.3 3e11 20e7"];

  test.each(places)("%s", (place) => {
    const [comp, rhoText, tText] = place.split(" ") as [string, string, string];
    const row = rows.find((r) => r["comp"] === comp && r["rho"] === rhoText && r["T"] === tText)!;
    const { electrons, nuclei } = matter[comp]!;
    // every rho and T of these rows is a whole number, so the double is exact
    const gas = referenceElectronGas({ density: rhoText, electronsPerNucleon: electrons, temperature: tText });
    const rho = new D(rhoText);
    const T = new D(tText);
    const n = gas.netElectronDensity;
    const per = (value: Decimal, inDensity: number, inTemperature: number): Decimal =>
      new D(value).times(n.pow(inDensity)).times(T.pow(inTemperature)).div(rho);
    const p = per(gas.pressure, 0, 0);
    const pn = per(gas.pressureByDensity, 1, 0);
    const pt = per(gas.pressureByTemperature, 0, 1);
    const ptt = per(gas.pressureByTemperatureTwice, 0, 2);
    const electron: Record<string, Decimal> = {
      F_10: p,
      F_20: pn.minus(p.times(2)),
      F_30: per(gas.pressureByDensityTwice, 2, 0).minus(pn.times(4)).plus(p.times(6)),
      F_11: pt,
      F_21: per(gas.pressureByDensityAndTemperature, 1, 1).minus(pt.times(2)),
      F_12: ptt,
      F_22: per(gas.pressureByDensityAndTemperatureTwice, 1, 2).minus(ptt.times(2)),
      F_02: per(gas.heatCapacityDensity, 0, 1).neg(),
      F_03: per(gas.entropyByTemperatureTwice, 0, 3).neg(),
    };
    // ions: N kT (ln rho - (3/2) ln T + const); radiation: -a T^4/(3 rho)
    const ions = nuclei.div(constants.m_u).times(constants.k).times(T);
    const ionShare: Record<string, number> = { F_10: 1, F_20: -1, F_30: 2, F_11: 1, F_21: -1, F_02: -1.5, F_03: 1.5 };
    const falling = (power: number, times: number): number =>
      times === 0 ? 1 : (power - times + 1) * falling(power, times - 1);
    // a_rad is printed to 20 digits there
    const radiation = new D(constants.a_rad).times(T.pow(4)).div(rho.times(-3));
    for (const [name, value] of Object.entries(electron)) {
      const [r, t] = [Number(name[2]), Number(name[3])];
      const total = value.plus(ions.times(ionShare[name] ?? 0)).plus(radiation.times(falling(-1, r) * falling(4, t)));
      // Measured over the 12 rows: 3.7e-20, half a unit of the 20th digit
      expect(total.div(row[name]!).minus(1).abs().toNumber(), name).toBeLessThan(5.1e-20);
    }
  });
});

test("seven points of mpmath: 28 digits, derivatives by differences", () => {
  const measured = new Measured();
  const columns: readonly [string, keyof ReferenceElectronGas, number][] = [
    ["eta", "degeneracyParameter", 28],
    ["n_plus", "positronDensity", 28],
    ["P", "pressure", 28],
    ["e_pair", "energyDensity", 28],
    ["s", "entropyDensity", 28],
    ["dP_dn", "pressureByDensity", 13],
    ["dP_dT", "pressureByTemperature", 13],
    ["c_v", "heatCapacityDensity", 13],
    ["d2P_dn2", "pressureByDensityTwice", 13],
    ["d2P_dndT", "pressureByDensityAndTemperature", 13],
    ["d2P_dT2", "pressureByTemperatureTwice", 13],
    ["d2s_dT2", "entropyByTemperatureTwice", 13],
    ["d3P_dndT2", "pressureByDensityAndTemperatureTwice", 12],
  ];
  for (const row of readRows("electron-gas-mpmath.csv")) {
    const [n, T] = [Number(row["n_e"]), Number(row["T"])];
    const gas = referenceElectronGas({ netElectronDensity: n, temperature: T });
    for (const [column, name] of columns) {
      if (row[column] === "") continue;
      const value = gas[name] as Decimal;
      measured.add(column, value.div(row[column]!).minus(1).abs().toNumber(), `n ${n} T ${T}`);
    }
  }
  for (const [column, , digits] of columns) measured.expectBelow(column, digits === 28 ? 5e-28 : 5 * 10 ** -digits);
});

/** n_e [cm^-3] and P [erg/cm^3] at T = 0. */
const COLD_PRESSURE = [
  ["6e8", "9.974536846466258345804178054581e-13"],
  ["1e24", "23367837285529.589631258929221403"],
  ["1e30", "166059450594153385971117.28271021"],
  ["6e38", "1.2374047499773077385284741063122e+35"],
] as const;

describe("T = 0", () => {
  const cold = referenceElectronGas({ netElectronDensity: 1e30, temperature: 0 });

  test("P is the integral of p^4/(3 E) over the filled sea: mpmath 1.3.0, 30 digits", () => {
    // python3: mp.dps = 45; unit = 8*pi*(m*c/h)**3; x = (3*n/unit)**(mpf(1)/3);
    // quad(lambda q: q**4/3/sqrt(1 + (x*q)**2), [0, 0.25, 0.5, 1])*x**5*unit*m*c*c
    for (const [n, pressure] of COLD_PRESSURE) {
      const { pressure: value, residual } = referenceElectronGas({ netElectronDensity: n, temperature: 0 });
      expect(value.div(pressure).minus(1).abs().toNumber(), n).toBeLessThan(1e-29);
      expect(residual).toBeLessThan(1e-29);
    }
  });

  test("limits of the temperature derivatives are those of 1 K and 2 K, to (kT/E_F)^2", () => {
    const [one, two] = [1, 2].map((T) => referenceElectronGas({ netElectronDensity: 1e30, temperature: T })) as [
      ReferenceElectronGas,
      ReferenceElectronGas,
    ];
    for (const name of [
      "pressureByTemperatureTwice",
      "pressureByDensityAndTemperatureTwice",
      "pressure",
      "pressureByDensity",
      "pressureByDensityTwice",
    ] as const) {
      // a law a + b T^2, so the limit is (4 a(1) - a(2))/3 up to T^4
      const limit = new D(one[name]).times(4).minus(two[name]).div(3);
      expect(limit.div(cold[name]).minus(1).abs().toNumber(), name).toBeLessThan(1e-24);
    }
    const { pressureByTemperatureTwice, pressure } = cold;
    const rise = new D(one.pressure).minus(pressure).times(2);
    expect(rise.div(pressureByTemperatureTwice).minus(1).abs().toNumber()).toBeLessThan(1e-9);
  });

  test("what vanishes is zero, what diverges is infinite", () => {
    const {
      positronDensity,
      entropyDensity,
      heatCapacityDensity,
      pressureByTemperature,
      pressureByDensityAndTemperature,
      entropyByTemperatureTwice,
    } = cold;
    for (const value of [
      positronDensity,
      entropyDensity,
      heatCapacityDensity,
      pressureByTemperature,
      pressureByDensityAndTemperature,
      entropyByTemperatureTwice,
    ]) {
      expect(value.isZero()).toBe(true);
    }
    expect(cold.degeneracyParameter.toString()).toBe("Infinity");
  });
});

test("errors returned cover the difference to a run at 30 digits", () => {
  const names = [
    "degeneracyParameter",
    "positronDensity",
    "pressure",
    "entropyDensity",
    "pressureByDensityTwice",
    "entropyByTemperatureTwice",
    "pressureByDensityAndTemperatureTwice",
  ] as const;
  for (const [n, T] of [
    [1e25, 3e5],
    [1e10, 2e9],
  ] as const) {
    const usual = referenceElectronGas({ netElectronDensity: n, temperature: T }, { digits: 20 });
    const better = referenceElectronGas({ netElectronDensity: n, temperature: T }, { digits: 30 });
    for (const name of names) {
      const difference = new D(usual[name]).minus(better[name]).abs();
      expect(difference.lte(usual.errors[name]), name).toBe(true);
    }
    expect(usual.relativeError).toBeLessThan(1e-20);
  }
});

test("the two ways to give a density agree", () => {
  const temperature = "1e7";
  const byMass = referenceElectronGas({ density: "1.66053906892e6", electronsPerNucleon: "1/2", temperature });
  const byNumber = referenceElectronGas({ netElectronDensity: "5e29", temperature });
  expect(byMass.pressure.eq(byNumber.pressure)).toBe(true);
});

test.each<[string, ReferenceElectronGasInput, string]>([
  ["negative density", { density: -1, electronsPerNucleon: "0.5", temperature: 1e6 }, "out-of-range"],
  ["no electrons", { density: 1, electronsPerNucleon: 0, temperature: 1e6 }, "out-of-range"],
  ["negative temperature", { netElectronDensity: 1e20, temperature: -1 }, "out-of-range"],
  ["NaN", { netElectronDensity: 1e20, temperature: Number.NaN }, "not-a-number"],
  ["too hot", { netElectronDensity: 1e20, temperature: 1e15 }, "outside-domain"],
  ["too cold", { netElectronDensity: 1e20, temperature: 0.5 }, "outside-domain"],
  ["too dense", { netElectronDensity: 1e43, temperature: 0 }, "outside-domain"],
  ["two densities", { density: 1, electronsPerNucleon: 1, netElectronDensity: 1, temperature: 1e6 }, "invalid-option"],
  ["next to no net charge", { netElectronDensity: 1e-60, temperature: 1e11 }, "outside-domain"],
])("%s is refused: %s", (_name, input, code) => {
  try {
    referenceElectronGas(input);
    expect.unreachable();
  } catch (error) {
    expect(isFermistateError(error) && error.code).toBe(code);
  }
});
