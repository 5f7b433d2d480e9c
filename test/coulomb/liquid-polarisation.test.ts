/**
 * Ion-electron term of the liquid: reference rows, limits, flat form against algebra, derivatives by integration along
 * paths.
 *
 * Rows: test/fixtures/coulomb-terms.json, the printed formula in 50-digit arithmetic with numerical derivatives there.
 * Weak coupling: debye-hueckel.ts.
 */
import { readFileSync } from "node:fs";
import { expect, test } from "vitest";
import { fineStructureConstant } from "../../src/constants.js";
import { bcc } from "../../src/coulomb/lattice.js";
import { addByAlgebra, addLiquidPolarisation, preparePolarisation } from "../../src/coulomb/liquid-polarisation.js";
import * as slot from "../../src/coulomb/slots.js";
import { coulombSpecies } from "../../src/coulomb/species.js";
import { composition } from "../../src/matter/composition.js";
import { addInverseThermal } from "../../src/numerics/natural.js";
import { Measured, uniform } from "../measured.js";
import { ionElectronDebyeHueckel } from "./debye-hueckel.js";
import { alongDensity, alongOther, pathIdentities } from "./path-identities.js";

const fixture = JSON.parse(readFileSync(new URL("../fixtures/coulomb-terms.json", import.meta.url), "utf8")) as {
  rows: { term: string; args: string[]; [column: string]: string | string[] }[];
};

/** (4/(9 pi))^(1/3); x_r = alpha/(lambda r_s) by definition. */
const lambda = Math.cbrt(4 / (9 * Math.PI));
/** alpha of CODATA 2018, with which the rows were computed: 6.9e-10 above today's. */
const alphaOfRows = 7.2973525693e-3;

const nuclides: Readonly<Record<number, string>> = { 1: "H1", 2: "He4", 6: "C12", 12: "Mg24", 26: "Fe56" };
const ions = new Map(
  Object.entries(nuclides).map(([z, name]) => [Number(z), coulombSpecies(composition({ [name]: 1 }), bcc).ions[0]!]),
);

function pointOf(gamma: number, rs: number, alpha = fineStructureConstant): Float64Array {
  const point = new Float64Array(slot.POINT_LENGTH);
  point[slot.POINT_GAMMA_E] = gamma;
  point[slot.POINT_LOG_GAMMA_E] = Math.log(gamma);
  point[slot.POINT_ROOT_GAMMA_E] = Math.sqrt(gamma);
  point[slot.POINT_RS] = rs;
  point[slot.POINT_X] = alpha / (lambda * rs);
  return point;
}

/** f with natural derivatives in (rho, 1/T). */
function members(order: 2 | 3, point: Float64Array, ion: Float64Array): Float64Array {
  const f = new Float64Array(11);
  preparePolarisation(order, point);
  addLiquidPolarisation(f, order, point, ion);
  return f;
}

test("reference rows: f, u, c_v and pressure with its derivatives", () => {
  const measured = new Measured();
  for (const [z, count] of [
    [2, 2],
    [6, 3],
    [26, 1],
  ] as const) {
    const rows = fixture.rows.filter(({ term }) => term.startsWith(`f_ie liquid Z=${z} `));
    expect(rows.length).toBe(count);
    for (const row of rows) {
      const [gamma, rs] = row.args.map(Number) as [number, number];
      for (const order of [2, 3] as const) {
        const f = new Float64Array(11);
        addInverseThermal(f, order, Float64Array.of(1), members(order, pointOf(gamma, rs, alphaOfRows), ions.get(z)!));
        const values = {
          f: f[0]!,
          u: f[0]! - f[2]!,
          cv: -f[5]!,
          p: f[1]!,
          dPdn: 2 * f[1]! + f[3]!,
          dPdT: f[4]!,
        };
        const largest = Math.max(...Object.keys(values).map((name) => Math.abs(Number(row[name]))));
        for (const [name, value] of Object.entries(values)) {
          measured.compare(name, value, Number(row[name]), `${row.term} ${row.args} order ${order}`, largest);
        }
      }
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  for (const name of ["f", "u", "cv", "p", "dPdn", "dPdT"]) measured.expectBelow(name, 2e-15);
});

test("weak coupling: Debye and Hueckel's law of ions with classical electrons", () => {
  const measured = new Measured();
  for (const [z, ion] of ions) {
    const error = (gamma: number): number => {
      const f = members(2, pointOf(gamma, 1), ion)[0]!;
      return Math.abs(f / ionElectronDebyeHueckel(z, gamma, 1) - 1);
    };
    // First correction: powers Gamma_e^(1/2) and Gamma_e^(nu - 1/2), nu >= 1.16.
    measured.add("Debye-Hueckel", error(1e-14), `Z ${z}`);
    measured.add("approach", error(1e-14) / error(1e-12), `Z ${z}`);
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  measured.expectBelow("Debye-Hueckel", 2e-7);
  measured.expectBelow("approach", 0.11);
});

test("Thomas-Fermi limit of strong coupling and r_s -> 0", () => {
  // Linear response of an ion sphere to degenerate electrons: f = -(162/175) lambda^2 Gamma_e r_s Z^(7/3) for large Z,
  // and the printed correction of small Z; x = 0 keeps the electrons non-relativistic.
  for (const [z, ion] of ions) {
    const gamma = 1e12;
    const rs = 1e-6;
    const point = pointOf(gamma, rs, 0);
    const linear = (162 / 175) * lambda * lambda * z ** (7 / 3) * (1 - z ** (-1 / 3) + 0.2 / Math.sqrt(z));
    expect(Math.abs(members(2, point, ion)[0]! / (-linear * gamma * rs) - 1)).toBeLessThan(2e-6);
  }
});

test("shares add up", () => {
  const mixed = coulombSpecies(composition({ C12: 0.5, O16: 0.5 }), bcc).ions;
  const point = pointOf(0.7, 0.02);
  const both = new Float64Array(11);
  preparePolarisation(3, point);
  for (const ion of mixed) addLiquidPolarisation(both, 3, point, ion);
  const carbon = members(3, point, ions.get(6)!);
  const oxygen = members(3, point, coulombSpecies(composition({ O16: 1 }), bcc).ions[0]!);
  const share = mixed[0]![slot.ION_X]!;
  both.forEach((value, m) => {
    const sum = share * carbon[m]! + (1 - share) * oxygen[m]!;
    expect(Math.abs(value - sum)).toBeLessThanOrEqual(1e-15 * (Math.abs(carbon[m]!) + Math.abs(oxygen[m]!)));
  });
});

test("flat second-order form against the algebra", () => {
  const measured = new Measured();
  for (const [z, ion] of ions) {
    for (let logGamma = -12; logGamma <= 3; logGamma += 0.25) {
      for (let logRs = -6; logRs <= 2; logRs += 0.25) {
        const point = pointOf(10 ** logGamma, 10 ** logRs);
        const flat = members(2, point, ion);
        const algebra = new Float64Array(11);
        addByAlgebra(algebra, 2, point, ion);
        const where = `Z ${z} Gamma_e 1e${logGamma} r_s 1e${logRs}`;
        const largest = Math.max(...Array.from(algebra, Math.abs));
        // A liquid with electrons that screen linearly; outside, members far below the value cancel in both forms.
        const inRange = 10 ** logGamma * z ** (5 / 3) < 200 && 10 ** logRs * z ** (2 / 3) < 1;
        for (let m = 0; m < 6; m++) {
          measured.compare(`of the largest ${m}`, flat[m]!, algebra[m]!, where, largest);
          const scale = Math.max(Math.abs(algebra[m]!), 1e-3);
          if (inRange) measured.compare(`flat ${m}`, flat[m]!, algebra[m]!, where, scale);
        }
      }
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  for (let m = 0; m < 6; m++) {
    measured.expectBelow(`flat ${m}`, 3e-12);
    measured.expectBelow(`of the largest ${m}`, 1e-14);
  }
});

test("every derivative, integrated along a path, gives the difference of the values at its ends", () => {
  const random = uniform(16180339);
  const measured = new Measured();
  const species = [...ions.values()];
  for (let n = 0; n < 400; n++) {
    const gamma = 10 ** (-5 + 6.5 * random());
    const rs = 10 ** (-4 + 4.5 * random());
    const ion = species[n % species.length]!;
    const at = (r: number, y: number): Float64Array =>
      members(3, pointOf(gamma * Math.exp(y + r / 3), rs * Math.exp(-r / 3)), ion);
    const start = at(0, 0);
    const scale = Math.max(...Array.from(start, Math.abs));
    const where = `Z ${ion[slot.ION_Z]} Gamma_e ${gamma} r_s ${rs}`;
    pathIdentities(at, (axis, [, , derivative], difference, mean) =>
      measured.compare(`path ${axis} ${derivative}`, difference, mean, where, scale),
    );
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  for (const [, , m] of alongDensity) measured.expectBelow(`path rho ${m}`, 4e-14);
  for (const [, , m] of alongOther) measured.expectBelow(`path y ${m}`, 4e-14);
});
