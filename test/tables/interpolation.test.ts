/**
 * A table against itself in 50-digit arithmetic: the function that its numbers define, F = F_0 - 2^k exp L, evaluated as a
 * polynomial from the numbers of the file alone, differentiated there by differences so small that 30 digits are left.
 */
import { Decimal } from "decimal.js";
import { describe, expect, test } from "vitest";
import { exactDecimal } from "../../src/certify/exact.js";
import { composition } from "../../src/matter/composition.js";
import { buildTable, type FreeEnergyTable, tableEquationOfState } from "../../src/tables/index.js";
import { firstNumbers } from "../../src/tables/surface.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { Measured, uniform } from "../measured.js";

const D = Decimal.clone({ precision: 60, defaults: true });
const exactly = (x: number): Decimal => exactDecimal(D, "x", x);
const core = composition({ C12: 0.5, O16: 0.5 });
const table = buildTable(whiteDwarfMatter({ radiation: false }), core, {
  density: [1e5, 1e8],
  temperature: [1e6, 1e9],
  accuracy: 1e-4,
});
const eos = tableEquationOfState(table);

/** Cuts an axis at a point: number of the part, and the place in it from 0 to 1. */
function cut(axis: { lowest: number; highest: number }, parts: number, x: Decimal): { i: number; t: Decimal } {
  const start = exactly(axis.lowest).ln();
  const place = x.minus(start).times(parts).div(exactly(axis.highest).ln().minus(start));
  const i = Math.min(Math.max(Math.floor(place.toNumber()), 0), parts - 1);
  return { i, t: place.minus(i) };
}

/** The quintic with value, slope and curvature (per unit of the axis, cell of length h) at both ends. */
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

/** F at ln rho, ln T by one sheet of the table. */
function freeEnergy(from: FreeEnergyTable, phase: string, u: Decimal, v: Decimal): Decimal {
  const sheet = from.sheets.find((one) => one.phase === phase)!;
  const size = (axis: { lowest: number; highest: number }): Decimal =>
    exactly(axis.highest).ln().minus(exactly(axis.lowest).ln());
  const intervals = from.cold.nodes.length / 3 - 1;
  const place = cut(from.density, intervals, u);
  const coldNode = (i: number): Decimal[] => [...from.cold.nodes.slice(3 * i, 3 * i + 3)].map(exactly);
  const cold = quintic(coldNode(place.i), coldNode(place.i + 1), size(from.density).div(intervals), place.t);
  const p = cut(from.density, from.density.blocks, u);
  const q = cut(from.temperature, from.temperature.blocks, v);
  const block = p.i * from.temperature.blocks + q.i;
  const m = 2 ** sheet.densityLevels[block]!;
  const n = 2 ** sheet.temperatureLevels[block]!;
  const first = firstNumbers(sheet)[block]!;
  const i = Math.min(Math.floor(p.t.toNumber() * m), m - 1);
  const j = Math.min(Math.floor(q.t.toNumber() * n), n - 1);
  const s = p.t.times(m).minus(i);
  const t = q.t.times(n).minus(j);
  const hu = size(from.density).div(from.density.blocks * m);
  const hv = size(from.temperature).div(from.temperature.blocks * n);
  const node = (a: number, b: number): Decimal[] => {
    const at = first + 9 * ((i + a) * (n + 1) + j + b);
    return [...sheet.nodes.slice(at, at + 9)].map(exactly);
  };
  const rows = [0, 1].map((a) =>
    [0, 1, 2].map((k) => quintic(node(a, 0).slice(3 * k, 3 * k + 3), node(a, 1).slice(3 * k, 3 * k + 3), hv, t)),
  );
  const l = quintic(rows[0]!, rows[1]!, hu, s);
  return cold.minus(l.exp().times(new D(2).pow(sheet.exponents[block]!)));
}

describe("the derivatives belong to the function that the numbers define", () => {
  const random = uniform(7);
  const measured = new Measured();
  const h = new D("1e-14");
  for (let round = 0; round < 25; round++) {
    const density = 1e5 * 10 ** (3 * random());
    const temperature = 1e6 * 10 ** (3 * random());
    const state = eos.state(density, temperature, core);
    const phase = state.crystalFraction === 1 ? "crystal" : "liquid";
    const [rho, t] = [exactly(density), exactly(temperature)];
    const [u, v] = [rho.ln(), t.ln()];
    const f = (i: number, j: number): Decimal => freeEnergy(table, phase, u.plus(h.times(i)), v.plus(h.times(j)));
    const [c, e, w, n, s] = [f(0, 0), f(1, 0), f(-1, 0), f(0, 1), f(0, -1)];
    const fu = e.minus(w).div(h.times(2));
    const fv = n.minus(s).div(h.times(2));
    const fuu = e.plus(w).minus(c.times(2)).div(h.times(h));
    const fvv = n.plus(s).minus(c.times(2)).div(h.times(h));
    const fuv = f(1, 1).minus(f(1, -1)).minus(f(-1, 1)).plus(f(-1, -1)).div(h.times(h).times(4));
    const where = `${density} g/cm^3, ${temperature} K`;
    measured.compare("F", state.specificFreeEnergy, c.toNumber(), where);
    measured.compare("P = rho^2 dF/drho", state.pressure, fu.times(rho).toNumber(), where);
    measured.compare("s = -dF/dT", state.specificEntropy, fv.div(t.neg()).toNumber(), where);
    measured.compare("dP/drho", state.pressureByDensity, fuu.plus(fu).toNumber(), where);
    measured.compare("c_v", state.heatCapacityV, fv.minus(fvv).div(t).toNumber(), where);
    const mixed = fuv.times(rho).div(t).toNumber();
    measured.compare("dP/dT", state.pressureByTemperature, mixed, where);
    measured.compare("Maxwell: -rho^2 ds/drho", -density * density * state.entropyByDensity, mixed, where);
  }
  if (process.env["FERMISTATE_PRINT"]) console.log(measured.table());
  // Measured 2.6e-14 (c_v), 8e-15 and less (all others).
  test.each(measured.names())("%s", (name) => measured.expectBelow(name, 1e-13));
});

test("second derivatives are continuous across cells, blocks of different levels and strips", () => {
  const measured = new Measured();
  const random = uniform(11);
  const across = (axis: FreeEnergyTable["density"], k: number): number =>
    axis.lowest * (axis.highest / axis.lowest) ** (k / (axis.blocks * 16));
  for (let round = 0; round < 400; round++) {
    const isDensity = round % 2 === 0;
    const axis = isDensity ? table.density : table.temperature;
    const edge = across(axis, 1 + Math.floor(random() * (axis.blocks * 16 - 1)));
    const other = isDensity ? 1e6 * 10 ** (3 * random()) : 1e5 * 10 ** (3 * random());
    const step = 1e-9;
    const at = (x: number) => (isDensity ? eos.state(x, other, core) : eos.state(other, x, core));
    const [low, high] = [at(edge * (1 - step)), at(edge * (1 + step))];
    if (low.crystalFraction !== high.crystalFraction) continue;
    for (const name of ["pressureByDensity", "heatCapacityV", "pressureByTemperature"] as const) {
      measured.compare(name, low[name], high[name], `${edge} ${isDensity ? "g/cm^3" : "K"}, ${other}`);
    }
  }
  // A jump would be of the size of the interpolation error, 1e-4; smooth change over 2e-9 of the variable is below 2e-8.
  for (const name of measured.names()) measured.expectBelow(name, 3e-8);
  expect(measured.count("heatCapacityV")).toBeGreaterThan(300);
});
