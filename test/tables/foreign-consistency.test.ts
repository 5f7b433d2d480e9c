/**
 * The equation of state of given columns against itself in 60-digit arithmetic: the function that its node values define,
 * F = F_0 - exp L + c T, evaluated as polynomials and differentiated there by differences so small that 20 digits are left.
 */
import { Decimal } from "decimal.js";
import { describe, expect, test } from "vitest";
import { exactDecimal } from "../../src/certify/exact.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { composition } from "../../src/matter/composition.js";
import { sortedRows } from "../../src/tables/foreign/columns.js";
import { columnsContribution } from "../../src/tables/foreign/contribution.js";
import { addedEntropy, type ColumnFit, fitColumns } from "../../src/tables/foreign/fit.js";
import { meshOf, type StateMesh } from "../../src/tables/foreign/mesh.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { MEMBER_COUNT, naturalDerivatives, naturalOrder } from "../../src/thermodynamics/free-energy.js";
import { Measured, uniform } from "../measured.js";
import { columnsOf, idealGas, type Row, rowsOf, statesOf, steps } from "./foreign-rows.js";

const D = Decimal.clone({ precision: 80, defaults: true });
const ln2 = new D(2).ln();
const decimals = new Map<number, Decimal>();
/** The exact value of a double, made once: numbers of a fit are asked for many times. */
function exactly(x: number): Decimal {
  let found = decimals.get(x);
  if (found === undefined) {
    found = exactDecimal(D, "x", x);
    decimals.set(x, found);
  }
  return found;
}
const core = composition({ C12: 0.5, O16: 0.5 });

/** The quintic with value, slope and curvature at both ends of a cell of length `h`. */
function quintic(low: readonly Decimal[], high: readonly Decimal[], h: Decimal, t: Decimal): Decimal {
  const [a, b, c] = [low[0]!, low[1]!.times(h), low[2]!.times(h).times(h)];
  const [d, e, f] = [high[0]!, high[1]!.times(h), high[2]!.times(h).times(h)];
  const rise = d.minus(a).minus(b).minus(c.div(2));
  const slope = e.minus(b).minus(c);
  const bend = f.minus(c);
  const p3 = rise.times(10).minus(slope.times(4)).plus(bend.div(2));
  const p4 = rise.times(-15).plus(slope.times(7)).minus(bend);
  const p5 = rise.times(6).minus(slope.times(3)).plus(bend.div(2));
  return p5.times(t).plus(p4).times(t).plus(p3).times(t).plus(c.div(2)).times(t).plus(b).times(t).plus(a);
}

/** F at ln rho, ln T. */
function freeEnergy(mesh: StateMesh, fit: ColumnFit, u: Decimal, v: Decimal): Decimal {
  const n = mesh.v.length;
  const cut = (axis: Float64Array, x: Decimal) => {
    const i = Math.min(axis.filter((node) => x.gte(node)).length - 1, axis.length - 2);
    const start = exactly(axis[i]!);
    const h = exactly(axis[i + 1]!).minus(start);
    return { i, h, t: x.minus(start).div(h) };
  };
  const p = cut(mesh.u, u);
  const q = cut(mesh.v, v);
  const three = (from: Float64Array, at: number): Decimal[] => [...from.slice(at, at + 3)].map(exactly);
  const node = (i: number, j: number, k: number): Decimal[] => {
    const at = i * n + j;
    const values = three(fit.nodes, 9 * at + 3 * k);
    if (k === 0) values[0] = values[0]!.plus(ln2.times(fit.exponents[at]!));
    return values;
  };
  const rows = [0, 1].map((a) =>
    [0, 1, 2].map((k) => quintic(node(p.i + a, q.i, k), node(p.i + a, q.i + 1, k), q.h, q.t)),
  );
  const l = quintic(rows[0]!, rows[1]!, p.h, p.t);
  const cold = quintic(three(fit.cold, 3 * p.i), three(fit.cold, 3 * p.i + 3), p.h, p.t);
  return cold.minus(l.exp()).plus(v.exp().times(exactly(fit.addedEntropy)));
}

const degenerate = combine(electronPositronGas(), idealIons());
const cases: readonly (readonly [string, readonly Row[], (x: number) => number])[] = [
  ["degenerate matter", rowsOf(steps(1e4, 1e8, 41), steps(1e6, 1e9, 31), statesOf(degenerate, core)), (x) => x],
  [
    "negative entropies",
    rowsOf(steps(1e-4, 1e2, 21), steps(1e4, 1e7, 21), (rho, t) => idealGas(rho, t, 0, -7e8)),
    (x) => x,
  ],
  [
    "three digits",
    rowsOf(steps(1e4, 1e7, 21), steps(1e7, 1e9, 21), statesOf(degenerate, core)),
    (x) => Number(x.toPrecision(3)),
  ],
];

describe.each(cases)("%s: the derivatives belong to one function", (_name, rows, round) => {
  const columns = columnsOf(rows);
  const mesh = meshOf(
    sortedRows({
      ...columns,
      pressure: columns.pressure.map(round),
      specificEnergy: columns.specificEnergy.map(round),
      specificEntropy: columns.specificEntropy.map(round),
    }),
  );
  const fit = fitColumns(mesh, mesh.entropy!, addedEntropy(mesh.entropy!));
  const eos = combine(columnsContribution(mesh, fit, core, "given columns", ""));
  const { point, members, fillMembers } = eos.evaluator();
  const natural = new Float64Array(MEMBER_COUNT);
  const random = uniform(19);
  const measured = new Measured();
  const h = new D("1e-12");
  const [low, high] = [eos.domain.density, eos.domain.temperature];
  for (let k = 0; k < 25; k++) {
    point[0] = low[0] * (low[1] / low[0]) ** random();
    point[1] = high[0] * (high[1] / high[0]) ** random();
    const where = `${point[0]} g/cm^3, ${point[1]} K`;
    fillMembers(core, 3);
    naturalDerivatives(members, 3, natural);
    const [u, v] = [exactly(point[0]!).ln(), exactly(point[1]!).ln()];
    const grid = [-2, -1, 0, 1, 2].map((i) =>
      [-2, -1, 0, 1, 2].map((j) => freeEnergy(mesh, fit, u.plus(h.times(i)), v.plus(h.times(j)))),
    );
    const weights = [
      [0, 0, 1, 0, 0],
      [0, -0.5, 0, 0.5, 0],
      [0, 1, -2, 1, 0],
      [-0.5, 1, 0, -1, 0.5],
    ];
    /** d^(i+j) F/(d ln rho^i d ln T^j). */
    const f = (i: number, j: number): Decimal => {
      let sum = new D(0);
      for (let a = 0; a < 5; a++) {
        for (let b = 0; b < 5; b++) sum = sum.plus(grid[a]![b]!.times(weights[i]![a]! * weights[j]![b]!));
      }
      return sum.div(h.pow(i + j));
    };
    const falling = [[1], [0, 1], [0, -1, 1], [0, 2, -3, 1]]; // x^n d^n/dx^n by d/d ln x
    const exact = naturalOrder.map(([i, j]) => {
      let sum = new D(0);
      falling[i]!.forEach((a, p) => {
        falling[j]!.forEach((b, q) => {
          if (a * b !== 0) sum = sum.plus(f(p, q).times(a * b));
        });
      });
      return sum.toNumber();
    });
    // P/rho stands for what third and mixed derivatives may cancel to.
    const scale = (i: number): number => Math.abs(exact[i]!) + (i > 5 ? Math.abs(exact[1]!) : 0);
    exact.forEach((value, i) => {
      const [a, b] = naturalOrder[i]!;
      measured.compare(i < 6 ? "to second order" : "third order", natural[i]!, value, `F_${a}${b}, ${where}`, scale(i));
    });
    const state = eos.state(point[0]!, point[1]!, core);
    const mixed = (exact[4]! * point[0]!) / point[1]!;
    measured.compare("Maxwell: -rho^2 ds/drho", -state.density * state.density * state.entropyByDensity, mixed, where);
    measured.compare("P = rho^2 dF/drho", state.pressure, exact[1]! * point[0]!, where);
    measured.compare("s = -dF/dT", state.specificEntropy, -exact[2]! / point[1]!, where);
  }
  if (process.env["FERMISTATE_PRINT"]) console.log(measured.table());
  test("to rounding", () => {
    for (const name of ["P = rho^2 dF/drho", "s = -dF/dT", "Maxwell: -rho^2 ds/drho"])
      measured.expectBelow(name, 8e-14); // measured 2.9e-14
    measured.expectBelow("to second order", 1.2e-13, 4e-15); // 3.7e-14, median 1.3e-15
    measured.expectBelow("third order", 2.5e-12, 3e-14); // 8.2e-13, median 1.0e-14
  });
});

test("second derivatives are continuous across cells", () => {
  const rows = rowsOf(steps(1e4, 1e8, 21), steps(1e6, 1e9, 16), statesOf(degenerate, core));
  const mesh = meshOf(sortedRows(columnsOf(rows)));
  const eos = combine(columnsContribution(mesh, fitColumns(mesh, mesh.entropy!, 0), core, "given columns", ""));
  const measured = new Measured();
  for (let i = 1; i < 20; i++) {
    for (let j = 1; j < 15; j++) {
      const [rho, t] = [mesh.density[i]!, mesh.temperature[j]!];
      for (const [a, b] of [
        [1e-9, 0],
        [0, 1e-9],
      ] as const) {
        const [low, high] = [eos.state(rho * (1 - a), t * (1 - b), core), eos.state(rho * (1 + a), t * (1 + b), core)];
        for (const name of ["pressureByDensity", "heatCapacityV", "pressureByTemperature"] as const) {
          measured.compare(name, low[name], high[name], `${rho} g/cm^3, ${t} K`);
        }
      }
    }
  }
  // Smooth change over 2e-9 of a variable; a jump would be of the size of the error of interpolation, 1e-4.
  for (const name of measured.names()) measured.expectBelow(name, 3e-8);
  expect(measured.count("heatCapacityV")).toBe(19 * 14 * 2);
});
