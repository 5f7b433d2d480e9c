/**
 * The terms of the crystal: rows of fixtures/coulomb-terms.json (the cited formulas in 50-digit
 * arithmetic, evaluated before the library was written), the exact phonons of phonons.ts, and limits.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { fineStructureConstant } from "../../src/constants.js";
import { addAnharmonic, addGroundState, addPhonons, phononFit } from "../../src/coulomb/crystal.js";
import { addCrystalPolarisation } from "../../src/coulomb/crystal-polarisation.js";
import { ANHARMONIC_SUPPRESSION, bcc, fcc } from "../../src/coulomb/lattice.js";
import * as slot from "../../src/coulomb/slots.js";
import { type CoulombSpecies, coulombSpecies } from "../../src/coulomb/species.js";
import { composition } from "../../src/matter/composition.js";
import { Measured } from "../measured.js";
import { phononSpectrum, thermalHarmonic } from "./phonons.js";

interface Row {
  readonly term: string;
  readonly args: readonly string[];
  readonly [column: string]: string | readonly string[];
}
const { rows } = JSON.parse(readFileSync(new URL("../fixtures/coulomb-terms.json", import.meta.url), "utf8")) as {
  readonly rows: readonly Row[];
};
const rowsOf = (start: string): readonly Row[] => rows.filter(({ term }) => term.startsWith(start));
const columns = ["f", "u", "cv", "p", "dPdn", "dPdT"] as const;
type Values = Readonly<Record<(typeof columns)[number], number>>;
/** alpha of CODATA 2018, with which the rows were computed: 6.9e-10 above today's. */
const alphaOfRows = 7.2973525693e-3;
const print = (measured: Measured): void => {
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
};

/** rho = 1, T = 1, N_i k = 1: energies are per ion and kT. */
function pointOf(x = 1): Float64Array {
  const point = new Float64Array(slot.POINT_LENGTH);
  point[slot.POINT_DENSITY] = 1;
  point[slot.POINT_TEMPERATURE] = 1;
  point[slot.POINT_CUBE_ROOT] = 1;
  point[slot.POINT_ROOT_DENSITY] = 1;
  point[slot.POINT_ROOT] = 1;
  point[slot.POINT_X] = x;
  return point;
}

function ionOf(gamma: number, theta: number, record: Float64Array = new Float64Array(slot.ION_LENGTH)): Float64Array {
  const ion = Float64Array.from(record);
  ion[slot.ION_X] = 1;
  ion[slot.ION_GAMMA] = gamma;
  ion[slot.ION_THETA] = theta;
  ion[slot.ION_LOG_Q] = Math.log((0.205 * theta) / gamma);
  return ion;
}

const single = (u: Float64Array): Values => ({
  f: u[0]!,
  u: u[1]!,
  cv: -u[2]!,
  p: u[1]! / 2,
  dPdn: u[1]! / 2 + (u[1]! + u[2]!) / 4,
  dPdT: -u[2]! / 2,
});
/** Of natural derivatives in (rho, 1/T) of F/kT. */
const inverse = (f: Float64Array): Values => ({
  f: f[0]!,
  u: f[2]!,
  cv: -f[5]!,
  p: f[1]!,
  dPdn: 2 * f[1]! + f[3]!,
  dPdT: f[1]! - f[4]!,
});
/** Of natural derivatives in (rho, T) of F at kT = 1. */
const direct = (f: Float64Array): Values => ({
  f: f[0]!,
  u: f[0]! - f[2]!,
  cv: -f[5]!,
  p: f[1]!,
  dPdn: 2 * f[1]! + f[3]!,
  dPdT: f[4]!,
});
const sum = (...all: readonly Values[]): Values =>
  Object.fromEntries(columns.map((name) => [name, all.reduce((total, one) => total + one[name], 0)])) as Values;

function phonons(theta: number, lattice: typeof bcc | typeof fcc, order: 2 | 3 = 3): Float64Array {
  const u = new Float64Array(6);
  addPhonons(u, order, pointOf(), ionOf(1, theta), phononFit(lattice));
  return u;
}

function anharmonic(gamma: number, theta: number, order: 2 | 3 = 3): Values {
  const f = new Float64Array(11);
  addAnharmonic(f, order, pointOf(), ionOf(gamma, theta), bcc);
  return inverse(f);
}

function ground(
  gamma: number,
  theta: number,
  terms: Partial<Record<"lattice" | "zeroPoint" | "anharmonic", true>>,
): Values {
  const f = new Float64Array(11);
  const species = {
    madelung: bcc.madelung * gamma,
    zeroPoint: 1.5 * bcc.u1 * theta,
    anharmonicGround: (-bcc.anharmonicQuantum * theta * theta) / gamma,
    alloy: 0,
  } as CoulombSpecies;
  addGroundState(f, 3, pointOf(), species, {
    lattice: false,
    zeroPoint: false,
    anharmonic: false,
    alloy: false,
    ...terms,
  });
  return direct(f);
}

function compare(measured: Measured, name: string, own: Values, row: Row): void {
  const largest = Math.max(...columns.map((column) => Math.abs(Number(row[column]))));
  for (const column of columns)
    measured.compare(`${name} ${column}`, own[column], Number(row[column]), `${row.args}`, largest);
}

function expectAll(measured: Measured, name: string, bound: number): void {
  print(measured);
  for (const column of columns) measured.expectBelow(`${name} ${column}`, bound);
}

describe("rows of 50 digits", () => {
  test("phonons, bcc and fcc", () => {
    const measured = new Measured();
    for (const lattice of [bcc, fcc]) {
      const found = rowsOf(`f_th ${lattice.name}`);
      expect(found.length).toBe(5);
      for (const row of found) compare(measured, "f_th", single(phonons(Number(row.args[0]), lattice)), row);
    }
    // Measured 3.8e-15: c_v at theta = 300, where numerator and denominator of the fit are 1e15.
    expectAll(measured, "f_th", 8e-15);
  });

  test("anharmonic terms, classical and ground state", () => {
    const measured = new Measured();
    const found = rowsOf("f_ah");
    expect(found.length).toBe(5);
    for (const row of found) {
      const [gamma, theta] = row.args.map(Number) as [number, number];
      // Order 2 is written out, order 3 by the algebra.
      for (const order of [2, 3] as const) {
        compare(
          measured,
          "f_ah",
          sum(anharmonic(gamma, theta, order), ground(gamma, theta, { anharmonic: true })),
          row,
        );
      }
    }
    expectAll(measured, "f_ah", 1e-15);
  });

  test("the whole rigid crystal", () => {
    const measured = new Measured();
    const found = rowsOf("f_sol");
    expect(found.length).toBe(5);
    for (const row of found) {
      const [gamma, theta] = row.args.map(Number) as [number, number];
      const all = ground(gamma, theta, { lattice: true, zeroPoint: true, anharmonic: true });
      compare(measured, "f_sol", sum(single(phonons(theta, bcc)), anharmonic(gamma, theta), all), row);
    }
    expectAll(measured, "f_sol", 1e-15);
  });

  test("polarisation", () => {
    const measured = new Measured();
    const found = rowsOf("f_ie bcc");
    expect(found.length).toBe(6);
    for (const row of found) {
      const z = Number(/Z=(\d+)/.exec(row.term)![1]);
      const [gamma, theta, rs] = row.args.map(Number) as [number, number, number];
      const known = coulombSpecies(composition({ meanMassNumber: 2 * z, meanCharge: z }), bcc);
      const ion = ionOf(gamma, theta, known.ions[0]!);
      // alpha of the rows, in x_r and in a_TF.
      ion[slot.ION_F_INF]! *= alphaOfRows / fineStructureConstant;
      const out = new Float64Array(11);
      const x = alphaOfRows / (Math.cbrt(4 / (9 * Math.PI)) * rs);
      addCrystalPolarisation(out, 3, pointOf(x), ion, { ...known, ionsBoltzmann: 1 });
      compare(measured, "f_ie", direct(out), row);
    }
    expectAll(measured, "f_ie", 1e-15);
  });
});

// Measured: f 5.0e-6, u 1.4e-5, c_v 3.7e-5 (bcc) and 4.1e-5 (fcc).
test("the thermal fit follows the exact phonons to its stated 4e-5, theta = 0.1 to 100", () => {
  const measured = new Measured();
  for (const lattice of [bcc, fcc]) {
    const spectrum = phononSpectrum(lattice.name);
    for (let log = -1; log <= 2.0001; log += 0.1) {
      const theta = 10 ** log;
      const u = phonons(theta, lattice);
      const exact = thermalHarmonic(spectrum, theta);
      const where = `theta ${theta.toPrecision(3)}`;
      measured.compare(`${lattice.name} f`, u[0]!, exact.f, where);
      measured.compare(`${lattice.name} u`, u[1]!, exact.u, where);
      measured.compare(`${lattice.name} c_v`, -u[2]!, exact.heat, where);
    }
  }
  print(measured);
  for (const name of ["bcc", "fcc"]) {
    measured.expectBelow(`${name} f`, 1e-5);
    measured.expectBelow(`${name} u`, 2.8e-5);
    measured.expectBelow(`${name} c_v`, 5e-5);
  }
});

describe("limits", () => {
  test("Debye's law: all members follow -1/(alpha_8 theta^3), also where numbers overflow", () => {
    const measured = new Measured();
    for (const theta of [1e5, 1e8, 0.999e9, 1.001e9, 1e15, 1e60]) {
      const u = phonons(theta, bcc);
      const q = 1 / (bcc.alpha8 * theta ** 3);
      [-1, 3, -12, 60, -360, 4].forEach((power, k) => {
        measured.compare(theta < 1e6 ? "1e5" : "beyond", u[k]!, power * q, `theta ${theta} member ${k}`);
      });
    }
    print(measured);
    measured.expectBelow("1e5", 2e-8);
    measured.expectBelow("beyond", 2e-13);
  });

  test("Dulong and Petit: u -> 3, c_v -> 3, with -(3/2) u_1 theta and -theta^2/12", () => {
    const u = phonons(1e-4, bcc);
    expect(Math.abs(u[1]! - 3 + 1.5 * bcc.u1 * 1e-4)).toBeLessThan(1e-7);
    expect(Math.abs(-u[2]! - 3)).toBeLessThan(1e-8);
  });

  test("anharmonic terms vanish without a trace at large theta", () => {
    for (const value of Object.values(anharmonic(1000, 300))) expect(Math.abs(value)).toBe(0);
    const f = new Float64Array(11);
    addAnharmonic(f, 3, pointOf(), ionOf(1000, 250), bcc);
    expect([...f].every(Number.isFinite)).toBe(true);
    expect(Math.abs(f[0]!)).toBeLessThan(Math.exp(-ANHARMONIC_SUPPRESSION * 250 * 250));
  });

  test("order 2 has the same members", () => {
    const [two, three] = [phonons(3, bcc, 2), phonons(3, bcc)];
    for (const k of [0, 1, 2, 5]) expect(two[k]).toBe(three[k]);
    expect([two[3], two[4]]).toEqual([0, 0]);
  });
});
