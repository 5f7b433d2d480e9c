/**
 * The decimal terms of src/certify against figures made outside this library: test/fixtures/coulomb-terms.json and
 * state-*.json, whose heads say how (the cited formulas in 50-digit arithmetic, evaluated before the library was written).
 */
import { readFileSync } from "node:fs";
import type { Decimal } from "decimal.js";
import { describe, expect, test } from "vitest";
import {
  anharmonic,
  crystalPolarisation,
  latticeEnergy,
  lattices,
  phonons,
  zeroPointEnergy,
} from "../../src/certify/crystal-terms.js";
import { arithmetic } from "../../src/certify/exact.js";
import { exchangeCorrelation } from "../../src/certify/exchange-terms.js";
import {
  baikoYakovlev,
  classicalLiquid,
  liquidPolarisation,
  twoOscillators,
  wignerKirkwood,
} from "../../src/certify/liquid-terms.js";
import { alloy, liquidMixture, mixingAndSpin } from "../../src/certify/mixture-terms.js";
import type { ExactSpecies, Plasma } from "../../src/certify/plasma.js";
import { referenceState, total } from "../../src/certify/reference-state.js";
import { referenceTerms } from "../../src/certify/reference-terms.js";
import { naturalDerivatives, type Series, variables } from "../../src/certify/series.js";
import { compositionOf, type Row, rowsOf } from "../fixtures/states.js";
import { Measured } from "../measured.js";

const D = arithmetic(60);
const { bcc, fcc } = lattices;
const decimal = (value: Decimal.Value): Decimal => new D(value);

/** Plasma variables chosen freely: each the value given times its power of density and temperature. */
function plasmaWith(given: { gamma?: string; theta?: string; gammaE?: string; rs?: string }): Plasma {
  const [density, temperature] = variables(D, 6, decimal(1), decimal(1));
  const third = decimal(1).div(3);
  const gamma = density.pow(third).div(temperature);
  const theta = density.sqrt().div(temperature);
  const pi = D.acos(-1);
  const alpha = decimal("7.2973525693e-3"); // CODATA 2018, as in coulomb-terms.json
  const rs = density.pow(third.neg()).times(given.rs ?? 1);
  const gammaE = gamma.times(given.gammaE ?? 1);
  const made = {
    ...{ D, density, temperature, pi, alpha, rs, gammaE },
    x: rs.pow(-1).times(pi.times(9).div(4).pow(third).times(alpha)),
    electronEnergy: gammaE.times(temperature), // kT = temperature: F is F/kT
    gamma: () => gamma.times(given.gamma ?? 1),
    theta: () => theta.times(given.theta ?? 1),
  };
  return made as unknown as Plasma;
}

const ion = (z: number): ExactSpecies => ({ z: decimal(z) }) as ExactSpecies;
type Made = (args: readonly string[]) => Series | undefined;

/** Terms of the fixture by name: f/kT from the arguments. */
const terms: Readonly<Record<string, Made>> = {
  "f_ii second set": ([gamma]) => classicalLiquid(plasmaWith({ gamma: gamma! }), ion(1)),
  fq_wk: ([theta]) => wignerKirkwood(plasmaWith({ theta: theta! }), ion(1)),
  fq_by19: ([theta]) => baikoYakovlev(plasmaWith({ theta: theta! }), ion(1)),
  fq_2osc: ([theta]) => twoOscillators(plasmaWith({ theta: theta! }), ion(1)),
  "f_th bcc": ([theta]) => phonons(plasmaWith({ theta: theta! }), ion(1), bcc),
  "f_th fcc": ([theta]) => phonons(plasmaWith({ theta: theta! }), ion(1), fcc),
  "f_ah (c1=0.0112,d1=A1*c1)": ([gamma, theta]) =>
    anharmonic(plasmaWith({ gamma: gamma!, theta: theta! }), ion(1), bcc),
  "f_sol bcc = f_harm+f_ah": ([gamma, theta]) => {
    const plasma = plasmaWith({ gamma: gamma!, theta: theta! });
    return latticeEnergy(plasma, ion(1), bcc)
      .plus(zeroPointEnergy(plasma, ion(1), bcc))
      .plus(phonons(plasma, ion(1), bcc))
      .plus(anharmonic(plasma, ion(1), bcc)!);
  },
  "f_xc joined Groth 2017 (per electron)": ([gammaE, rs]) =>
    exchangeCorrelation(plasmaWith({ gammaE: gammaE!, rs: rs! })),
};

/** The charge is part of the name: "f_ie liquid Z=6 (6,)". */
function madeBy(term: string): Made | undefined {
  const [, phase, charge] = /^f_ie (liquid|bcc) Z=(\d+)/.exec(term) ?? [];
  const z = ion(Number(charge));
  if (phase === "liquid") {
    return ([gammaE, rs]) => liquidPolarisation(plasmaWith({ gammaE: gammaE!, rs: rs! }), z);
  }
  if (phase === "bcc") {
    return ([gamma, theta, rs]) => crystalPolarisation(plasmaWith({ gamma: gamma!, theta: theta!, rs: rs! }), z, bcc);
  }
  return terms[term];
}

test("terms as functions of Gamma, theta, r_s: 20 digits of all six numbers", () => {
  const { rows } = JSON.parse(readFileSync(new URL("../fixtures/coulomb-terms.json", import.meta.url), "utf8")) as {
    rows: Readonly<Record<string, string>>[];
  };
  const measured = new Measured();
  const [, temperature] = variables(D, 6, decimal(1), decimal(1));
  for (const row of rows) {
    const args = row["args"] as unknown as readonly string[];
    const f = madeBy(row["term"]!)?.(args);
    if (f === undefined) continue;
    // exchange is per electron and has its kT already
    const isEnergy = row["term"]!.includes("xc");
    const [F, f10, f01, f20, f11, f02] = naturalDerivatives(isEnergy ? f : f.times(temperature)) as Decimal[];
    const values: Readonly<Record<string, Decimal>> = {
      f: F!,
      u: F!.minus(f01!),
      cv: f02!.neg(),
      p: f10!,
      dPdn: f10!.times(2).plus(f20!),
      dPdT: f11!,
    };
    for (const [name, value] of Object.entries(values)) {
      const error = value.minus(row[name]!).div(row[name]!).abs().toNumber();
      measured.add(name, error, `${row["term"]} ${args.join(" ")}`);
    }
  }
  expect(measured.count("f")).toBe(58);
  for (const name of measured.names()) measured.expectBelow(name, 5.1e-20); // half a unit of the 20th digit
});

test("mixtures over number fractions, charges and Gamma_e: 18 digits", () => {
  const { rows } = JSON.parse(readFileSync(new URL("../fixtures/coulomb-terms.json", import.meta.url), "utf8")) as {
    rows: Readonly<Record<string, unknown>>[];
  };
  const measured = new Measured();
  for (const row of rows.filter(({ term }) => term === "mix")) {
    const [fractions, charges, gammaE] = row["args"] as [readonly string[], readonly number[], string];
    const charged = charges.map((z, i) => ({
      ...{ z: decimal(z), perGram: decimal(fractions[i]!), g: 1 },
      coupling: decimal(z).pow(decimal(5).div(3)),
    }));
    const plasma = { ...plasmaWith({ gammaE }), matter: { charged, chargedPerGram: decimal(1) } } as unknown as Plasma;
    const values: Readonly<Record<string, Decimal>> = {
      liq: liquidMixture(plasma, false)!.c[0]!,
      liqpol: liquidMixture(plasma, true)!.c[0]!,
      sol: alloy(plasma)!.c[0]!,
      smix: mixingAndSpin(plasma),
    };
    for (const [name, value] of Object.entries(values)) {
      const printed = row[name] as string | undefined;
      if (printed === undefined) continue;
      measured.add(name, value.minus(printed).div(printed).abs().toNumber(), `${charges} ${fractions} ${gammaE}`);
    }
  }
  expect(measured.count("liq")).toBe(8);
  for (const name of measured.names()) measured.expectBelow(name, 5e-18);
});

const shares: Readonly<Record<string, string>> = {
  ...{ ions: "ideal ions", radiation: "radiation", fii: "ion correlation", fq: "quantum correction" },
  ...{ fie: "electron polarisation", mix: "mixture correction", xc: "exchange and correlation" },
  ...{ madelung: "lattice energy", zp: "zero-point energy", th: "phonons", ah: "anharmonic lattice" },
  ...{ smix: "mixing and spin entropy", dmix: "alloy deviation" },
};

/** The model whose terms a row has. */
function physicsOf(row: Row) {
  const names = Object.keys(row.contrib);
  const options = {
    phase: names.includes("madelung") ? "crystal" : "liquid",
    quantum: names.includes("fq") ? "two-oscillators" : false,
    polarisation: names.includes("fie"),
    exchange: names.includes("xc"),
    anharmonic: names.includes("ah"),
    mixture: names.includes("mix") || names.includes("dmix"),
    ...{ lattice: "bcc", freeNeutrons: true, meltingCoupling: 175 },
  };
  return [
    { model: "Coulomb plasma", options },
    { model: "radiation", options: {} },
  ];
}

const at = (row: Row) => ({
  composition: compositionOf(row["comp"]!),
  density: Number(row["rho"]),
  temperature: Number(row["T"]),
  digits: 22,
  phaseAtBoundary: false,
  positrons: false,
});

// Compositions of 0.7 and 0.3 are decimals there and doubles here.
const isExact = (row: Row): boolean => !row["comp"]!.includes("0.7");

describe.each(["state-liquid.json", "state-crystal.json"])("%s", (name) => {
  const rows = rowsOf(`../fixtures/${name}`).filter(isExact);

  test("every term of every row: 20 digits of F, P, e, s and c_v", () => {
    const measured = new Measured();
    for (const row of rows) {
      // the fixtures print what is down to 1e-40 of the sum, so the terms need more digits than the sum
      const made = referenceTerms({ ...at(row), physics: physicsOf(row), length: 6, guard: 50 });
      const rho = decimal(Number(row["rho"]));
      const T = decimal(Number(row["T"]));
      for (const [share, columns] of Object.entries(row.contrib)) {
        if (share === "electrons") continue;
        const term = made.terms.find((one) => one.name === shares[share]);
        expect(term, `${share} in ${row["comp"]}`).toBeDefined();
        const [F, f10, f01, , , f02] = term!.derivatives.map((one) => decimal(one));
        const values = { F: F!, P: f10!.times(rho), e: F!.minus(f01!), s: f01!.neg().div(T), c_v: f02!.neg().div(T) };
        for (const [column, value] of Object.entries(values)) {
          // what a term has none of is printed as 0; here it is rounding of the reference's digits
          const scale = columns[column] === "0" ? decimal(row[column]!).abs() : decimal(columns[column]!).abs();
          const error = value.minus(columns[column]!).div(scale).abs().toNumber();
          measured.add(column, error, `${share} ${row["comp"]} ${row["rho"]} ${row["T"]}`);
        }
      }
    }
    for (const column of measured.names()) measured.expectBelow(column, 5.1e-20);
  });
});

test("sums with electrons to third order: 20 digits of all derivatives", () => {
  const names = ["F", "F_10", "F_01", "F_20", "F_11", "F_02", "F_30", "F_21", "F_12", "F_03", "F_22"];
  const measured = new Measured();
  const rows = rowsOf("../fixtures/state-third.json").filter((row) => isExact(row) && row["set"] !== "ideal");
  for (const row of rows.filter((_, i) => i % 2 === 0)) {
    const contrib =
      row["set"] === "liquid"
        ? { fq: {}, fie: {}, xc: {}, mix: {} }
        : { madelung: {}, fie: {}, xc: {}, ah: {}, dmix: {} };
    const physics = [
      { model: "electrons and positrons", options: {} },
      ...physicsOf({ ...row, contrib } as unknown as Row),
    ];
    const derivatives = total(referenceState({ ...at(row), physics, length: 11 }));
    for (const [k, name] of names.entries()) {
      const error = derivatives[k]!.minus(row[name]!).div(row[name]!).abs().toNumber();
      measured.add(name, error, `${row["comp"]} ${row["rho"]} ${row["T"]}`);
    }
  }
  for (const name of names) measured.expectBelow(name, 6e-20);
});
