/**
 * Exchange and correlation of the electrons: reference rows, the exact exchange integrals, limits, T = 0, and
 * derivatives by integration along paths.
 *
 * Rows: test/fixtures/coulomb-terms.json, the printed formulas in 50-digit arithmetic with numerical derivatives
 * there. Exact exchange: exchange.ts, beside its own sources. Weak coupling: debye-hueckel.ts.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { fineStructureConstant } from "../../src/constants.js";
import { addByAlgebra, addExchangeCorrelation } from "../../src/coulomb/exchange.js";
import { exchangeRelativity } from "../../src/coulomb/exchange-relativity.js";
import * as slot from "../../src/coulomb/slots.js";
import { Measured, uniform } from "../measured.js";
import { electronDebyeHueckel } from "./debye-hueckel.js";
import { exchangeFactor, thermalExchange } from "./exchange.js";
import { alongDensity, alongOther, pathIdentities } from "./path-identities.js";

const fixture = JSON.parse(readFileSync(new URL("../fixtures/coulomb-terms.json", import.meta.url), "utf8")) as {
  rows: { term: string; args: string[]; [column: string]: string | string[] }[];
};
const rowsOf = (term: string) => fixture.rows.filter((row) => row.term === term);

/** (4/(9 pi))^(1/3); x_r = alpha/(lambda r_s), T/T_F = 2 lambda^2 r_s/Gamma_e (definitions). */
const lambda = Math.cbrt(4 / (9 * Math.PI));
const xOf = (rs: number, alpha = fineStructureConstant): number => alpha / (lambda * rs);
/** alpha of CODATA 2018, with which the rows were computed: 6.9e-10 above today's. */
const alphaOfRows = 7.2973525693e-3;

/** A point in units of N_e e^2/a_e at the given values: energy 1 or as given. */
function pointOf(rs: number, t: number, x = xOf(rs), energy = 1): Float64Array {
  const point = new Float64Array(slot.POINT_LENGTH);
  point[slot.POINT_RS] = rs;
  point[slot.POINT_X] = x;
  point[slot.POINT_T] = t;
  point[slot.POINT_ELECTRON_ENERGY] = energy;
  return point;
}

function members(order: 2 | 3, point: Float64Array): Float64Array {
  const out = new Float64Array(11);
  addExchangeCorrelation(out, order, point);
  return out;
}

/** Phi at x. */
function factor(x: number): number {
  const out = new Float64Array(6);
  exchangeRelativity(out, 2, pointOf(1, 0, x));
  return 1 + out[0]!;
}

/** Members that carry at least one derivative in T. */
const thermal = [2, 4, 5, 7, 8, 9, 10];
const ground = [0, 1, 3, 6];

test("reference rows: f, u, c_v and pressure with its derivatives", () => {
  const measured = new Measured();
  for (const term of ["f_xc joined Groth 2017 (per electron)", "f_xc Groth 2017 (per electron)"]) {
    const rows = rowsOf(term);
    expect(rows.length).toBe(5);
    for (const row of rows) {
      const [gamma, rs] = row.args.map(Number) as [number, number];
      const t = (2 * lambda * lambda * rs) / gamma;
      for (const order of [2, 3] as const) {
        const m = members(order, pointOf(rs, t, term.includes("joined") ? xOf(rs, alphaOfRows) : 0, gamma));
        const values = {
          f: m[0]!,
          u: m[0]! - m[2]!,
          cv: -m[5]!,
          p: m[1]!,
          dPdn: 2 * m[1]! + m[3]!,
          dPdT: m[4]!,
        };
        for (const [name, value] of Object.entries(values)) {
          measured.compare(`row ${name}`, value, Number(row[name]), `${term} ${row.args} order ${order}`);
        }
      }
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  for (const name of ["f", "u", "cv", "p", "dPdn", "dPdT"]) measured.expectBelow(`row ${name}`, 1e-14);
});

describe("relativistic exchange at T = 0", () => {
  test("rows of the closed form in 50 digits", () => {
    const measured = new Measured();
    const rows = rowsOf("exchange T=0");
    expect(rows.length).toBe(5);
    const out = new Float64Array(6);
    for (const row of rows) {
      const x = Number(row.args[0]);
      exchangeRelativity(out, 2, pointOf(1, 0, x));
      const unit = (-3 / (4 * Math.PI)) * alphaOfRows * x;
      measured.compare("Phi", 1 + out[0]!, Number(row["Phi"]), `x ${x}`);
      measured.compare("e_x", unit * (1 + out[0]!), Number(row["ex"]), `x ${x}`);
      // D Phi = 3 rho dPhi/drho.
      measured.compare("x de_x/dx", unit * (1 + out[0]! + 3 * out[1]!), Number(row["xdex"]), `x ${x}`, Math.abs(unit));
    }
    if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
    for (const name of ["Phi", "e_x", "x de_x/dx"]) measured.expectBelow(name, 2e-15);
  });

  test("the double integral of the one-photon exchange", () => {
    const measured = new Measured();
    for (const x of [1e-3, 0.01, 0.1, 0.2, 0.249, 0.251, 0.3, 0.6, 1, 1.7, 2.5, 4, 7, 12, 20]) {
      measured.compare("Phi", factor(x), exchangeFactor(x), `x ${x}`, 1);
    }
    if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
    measured.expectBelow("Phi", 4e-15);
  });

  test("limits 1 and -1/2, zero at x = 2.533", () => {
    expect(factor(0)).toBe(1);
    // Phi = 1 - (2/3) x^2 and -1/2 + 3 l/x^2 - (3/2) l^2/x^4, l = ln(2 x) - 1/2, by expansion of the closed form.
    expect(Math.abs((factor(1e-4) - 1) / 1e-8 + 2 / 3)).toBeLessThan(1e-7);
    const x = 1e4;
    const l = Math.log(2 * x) - 0.5;
    expect(Math.abs((factor(x) + 0.5) * x * x - 3 * l + (1.5 * l * l) / (x * x))).toBeLessThan(5e-8);
    expect(Math.abs(factor(1e12) + 0.5)).toBeLessThan(2e-16);
    // Root in 50 digits: 2.53324488659205; the slope there is -0.26.
    expect(Math.abs(factor(2.53324488659205))).toBeLessThan(4e-15);
  });

  test("Phi - 1 keeps relative accuracy and derivatives at small x and across the change of formula", () => {
    const measured = new Measured();
    const out = new Float64Array(6);
    for (const x of [1e-8, 1e-6, 1e-5]) {
      // -(2/3) x^2 ~ rho^(2/3); the next term is 3/5 x^2 smaller.
      exchangeRelativity(out, 3, pointOf(1, 0, x));
      const law = (-2 / 3) * x * x;
      [1, 2 / 3, -2 / 9, 8 / 27].forEach((power, i) => {
        measured.compare("small x", out[i]!, law * power, `x ${x} order ${i}`);
      });
    }
    const [below, above] = [new Float64Array(6), new Float64Array(6)];
    exchangeRelativity(below, 3, pointOf(1, 0, 0.25 * (1 - 2 ** -53)));
    exchangeRelativity(above, 3, pointOf(1, 0, 0.25));
    for (let i = 0; i < 4; i++) measured.compare("at 0.25", above[i]!, below[i]!, `order ${i}`);
    if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
    measured.expectBelow("small x", 1.5e-10);
    measured.expectBelow("at 0.25", 2e-14);
  });
});

test("finite temperature: the exact non-relativistic exchange integral, to the stated error of the fit", () => {
  const measured = new Measured();
  for (const t of [0.02, 0.05, 0.08, 0.1, 0.15, 0.2, 0.3, 0.5, 0.7, 1, 1.5, 2, 3, 5, 10, 30, 100]) {
    // At r_s -> 0 with x = 0 only a(t) is left.
    measured.compare("a(t)", -members(2, pointOf(1e-34, t, 0))[0]!, thermalExchange(t), `t ${t}`);
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  measured.expectBelow("a(t)", 0.0075);
});

test("weak coupling: Debye and Hueckel's law, correction proportional to Gamma_e^(1/2)", () => {
  // The exchange left at t = 1e12 is 3e-13 Gamma_e^(-1/2) of it.
  const error = (gamma: number): number => {
    const t = 1e12;
    const f = members(2, pointOf((gamma * t) / (2 * lambda * lambda), t, 0, gamma))[0]!;
    return Math.abs(f / electronDebyeHueckel(gamma, 1) - 1);
  };
  expect(error(1e-8)).toBeLessThan(2e-6);
  const growth = error(1e-6) / error(1e-8);
  expect(growth).toBeGreaterThan(9.5);
  expect(growth).toBeLessThan(10.5);
});

describe("extreme temperatures", () => {
  test("T = 0: members in T are zero, the rest is reached continuously", () => {
    const measured = new Measured();
    for (const rs of [1e-5, 1e-3, 0.014, 0.1, 1, 5]) {
      const zero = members(3, pointOf(rs, 0));
      // T_F = 1/(2 lambda^2 r_s^2) Hartree, 1 Hartree = 3.15775e5 K.
      const cold = members(3, pointOf(rs, (1e-3 * 2 * lambda * lambda * rs * rs) / 3.15775e5));
      for (const m of thermal) expect(Math.abs(zero[m]!)).toBe(0);
      for (const m of ground) measured.compare("F from T = 1e-3 K", cold[m]!, zero[m]!, `r_s ${rs} member ${m}`);
      for (const m of thermal) measured.compare("T-members", cold[m]!, 0, `r_s ${rs} member ${m}`, Math.abs(zero[0]!));
      const flat = members(2, pointOf(rs, 0));
      for (const m of [2, 4, 5]) expect(Math.abs(flat[m]!)).toBe(0);
      for (const m of [0, 1, 3]) measured.compare("flat", flat[m]!, zero[m]!, `r_s ${rs} member ${m}`);
    }
    if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
    measured.expectBelow("F from T = 1e-3 K", 5e-15);
    measured.expectBelow("T-members", 2e-15);
    measured.expectBelow("flat", 1e-15);
  });

  test("members in T follow a(t) to leading order on both sides", () => {
    const measured = new Measured();
    for (const order of [2, 3] as const) {
      for (const t of [1e-12, 1e-8, 1e-6]) {
        // a = 0.610887 [3/4 + (3.04363 - 3/4 8.31051) t^2] (the published coefficients); F = -a, t ~ T rho^(-2/3).
        const m = members(order, pointOf(1e-60, t, 0));
        const law = -0.610887 * (3.04363 - 0.75 * 8.31051) * t * t;
        // rho^(1/3 - 4/3) T^2.
        const powers = [2, 2, 4, -2, 5, 2].concat(order === 3 ? [7, 4, 8, -2, 9, 0, 10, 4] : []);
        for (let i = 0; i < powers.length; i += 2) {
          measured.compare("cold", m[powers[i]!]!, law * powers[i + 1]!, `t ${t} member ${powers[i]}`, Math.abs(law));
        }
      }
      for (const t of [1e9, 1e10, 1e12]) {
        // a -> 0.610887/3 /t: 1.7035/5.1105 = 1/3, F ~ rho/T.
        const m = members(order, pointOf(1e-60, t, 0));
        const law = -0.610887 / (3 * t);
        const powers = [1, 1, -1, 0, -1, 2].concat(order === 3 ? [0, 0, 2, -6, 0] : []);
        powers.forEach((power, i) => {
          measured.compare("hot", m[i]!, law * power, `t ${t} member ${i}`, Math.abs(law));
        });
      }
    }
    if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
    measured.expectBelow("cold", 1e-6);
    measured.expectBelow("hot", 2e-9);
  });
});

test("flat second-order form against the algebra", () => {
  const measured = new Measured();
  const places: [number, number][] = [];
  for (let logRs = -6; logRs <= 2; logRs += 0.25) {
    for (let logT = -12; logT <= 12; logT += 0.25) places.push([10 ** logRs, 10 ** logT]);
    places.push([10 ** logRs, 0]);
  }
  for (const [rs, t] of places) {
    const point = pointOf(rs, t);
    const algebra = new Float64Array(11);
    addByAlgebra(algebra, 2, point);
    const flat = members(2, point);
    // kT N_e in units of N_e e^2/a_e.
    const floor = (1e-3 * t) / (2 * lambda * lambda * rs);
    for (let m = 0; m < 6; m++) {
      const scale = Math.max(Math.abs(algebra[m]!), floor);
      measured.compare(`flat ${m}`, flat[m]!, algebra[m]!, `r_s ${rs} t ${t}`, scale);
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  for (let m = 0; m < 6; m++) measured.expectBelow(`flat ${m}`, 3e-12);
});

test("every derivative, integrated along a path, gives the difference of the values at its ends", () => {
  const sameT: readonly (readonly number[])[] = [[0, 1, 3, 6], [2, 4, 7], [5, 8, 10], [9]];
  const random = uniform(27182818);
  const measured = new Measured();
  for (let n = 0; n < 400; n++) {
    const rs = 10 ** (-4 + 5 * random());
    const t = 10 ** (-5 + 10 * random());
    const at = (r: number, y: number): Float64Array =>
      members(
        3,
        pointOf(rs * Math.exp(-r / 3), t * Math.exp(y - (2 / 3) * r), xOf(rs) * Math.exp(r / 3), Math.exp(r / 3)),
      );
    const start = at(0, 0);
    pathIdentities(at, (axis, [value, , derivative], difference, mean) => {
      // Largest member with as many derivatives in T as value or derivative.
      const alike = sameT.filter((list) => list.includes(value) || list.includes(derivative)).flat();
      const scale = Math.max(...alike.map((m) => Math.abs(start[m]!)));
      measured.compare(`path ${axis} ${derivative}`, difference, mean, `r_s ${rs} t ${t}`, scale);
    });
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  // Worst at t > 100, where the quotients of polynomials in t are constants by cancellation, and F is small.
  const bounds: Readonly<Record<number, number>> = { 1: 5e-14, 2: 5e-14, 3: 1e-13, 4: 5e-13, 6: 2e-13, 10: 3e-12 };
  for (const [, , m] of alongDensity) measured.expectBelow(`path rho ${m}`, bounds[m] ?? 1e-12, 5e-14);
  for (const [, , m] of alongOther) measured.expectBelow(`path y ${m}`, bounds[m] ?? 1e-12, 5e-14);
});
