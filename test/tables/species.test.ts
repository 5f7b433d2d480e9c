/**
 * The table of one species: its nodes against the decimal reference, its certificate against the direct gas and the reference at
 * fresh places, its consistency, its size.
 */
import { Decimal } from "decimal.js";
import { describe, expect, test } from "vitest";
import { exactDecimal } from "../../src/certify/exact.js";
import { referenceElectronGas, referenceFermiDirac } from "../../src/certify/index.js";
import { electronDensityUnit, electronRestEnergy, electronRestTemperature } from "../../src/constants.js";
import { coulombPlasma } from "../../src/coulomb/coulomb-plasma.js";
import { isFermistateError } from "../../src/errors.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { buildSpeciesTable, speciesTableBytes, speciesTableContribution } from "../../src/tables/index.js";
import { fillSpeciesIntegrals, INTEGRALS_LENGTH, takeLogarithm } from "../../src/tables/species-integrals.js";
import { fillSpeciesSurface, L00, speciesSurface } from "../../src/tables/species-surface.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { Measured, uniform } from "../measured.js";

const D = Decimal.clone({ precision: 70 });
const core = composition({ C12: 0.5, O16: 0.5 });
const table = buildSpeciesTable();
const gas = combine(speciesTableContribution(table));
const exact = combine(electronPositronGas());
const print = process.env["FERMISTATE_PRINT"] !== undefined;

describe("node values against the defining integrals in decimal arithmetic (certify)", () => {
  /** P and dP/d eta in natural units from generalised Fermi-Dirac integrals. */
  let digits = 20;
  const integral = (k: number, eta: Decimal, theta: Decimal): Decimal =>
    new D(referenceFermiDirac(k, eta, theta, digits).value);
  const root = (theta: Decimal): Decimal => theta.times(2).sqrt();
  const pressure = (eta: Decimal, theta: Decimal): Decimal =>
    integral(1.5, eta, theta)
      .plus(theta.div(2).times(integral(2.5, eta, theta)))
      .times(root(theta).pow(3).times(theta).div(3));
  const byEta = (eta: Decimal, theta: Decimal): Decimal =>
    integral(0.5, eta, theta)
      .plus(theta.times(integral(1.5, eta, theta)))
      .times(root(theta).times(theta).times(theta));
  test.each([
    [-20, 1e-4],
    [26.5, 1e-4],
    [5, 0.7],
    [26.5, 1],
    [-3, 1686],
  ])("eta %d, theta %d: P and its first derivative by eta to 5e-15", (eta, theta) => {
    const out = new Float64Array(INTEGRALS_LENGTH);
    fillSpeciesIntegrals(eta, theta, out);
    const [e, t] = [new D(eta), new D(theta)];
    expect(Math.abs(out[0]! / pressure(e, t).toNumber() - 1)).toBeLessThan(5e-15); // measured: 1.3e-15
    expect(Math.abs(out[3]! / byEta(e, t).toNumber() - 1)).toBeLessThan(5e-15);
  });

  test("eta 4.5, theta 0.5: all nine derivatives to 5e-15, by differences of 34 digits", () => {
    digits = 34;
    const h = new D("1e-8"); // truncation 1e-16, and 24 digits lost where three are divided by
    const out = new Float64Array(INTEGRALS_LENGTH);
    fillSpeciesIntegrals(4.5, 0.5, out);
    const [e, t] = [new D(4.5), new D(0.5)];
    const ts = [t.times(h.neg().exp()), t, t.times(h.exp())] as const;
    const along = (f: (theta: Decimal) => Decimal): [Decimal, Decimal, Decimal] => {
      const [a, b, c] = [f(ts[0]), f(ts[1]), f(ts[2])];
      return [b, c.minus(a).div(h.times(2)), c.minus(b.times(2)).plus(a).div(h.times(h))];
    };
    const p = along((theta) => pressure(e, theta));
    const n = along((theta) => byEta(e, theta));
    const slope = along((theta) =>
      byEta(e.plus(h), theta)
        .minus(byEta(e.minus(h), theta))
        .div(h.times(2)),
    );
    const measured = new Measured();
    [...p, ...n, ...slope].forEach((value, k) => {
      measured.compare("P_ij", out[k]!, value.toNumber(), `slot ${k}`);
    });
    if (print) console.log(measured.table());
    measured.expectBelow("P_ij", 5e-15); // measured: 1.3e-15
  });
});

test("derivatives of the logarithm: those of exp(L) = P for a product of powers and for a sum (elementary)", () => {
  // P = e^(2 eta + 3 y) + e^(eta y) at eta = 0.5, y = 0.25: derivatives of P by hand, L by differences in decimals.
  const [x, y] = [0.5, 0.25];
  const value = (eta: Decimal, z: Decimal): Decimal =>
    eta.times(2).plus(z.times(3)).exp().plus(eta.times(z).exp()).ln();
  const u = Math.exp(2 * x + 3 * y);
  const v = Math.exp(x * y);
  const p = Float64Array.of(
    u + v,
    3 * u + x * v,
    9 * u + x * x * v,
    2 * u + y * v,
    6 * u + (1 + x * y) * v,
    18 * u + (2 * x + x * x * y) * v,
    4 * u + y * y * v,
    12 * u + (2 * y + x * y * y) * v,
    36 * u + (2 + 4 * x * y + x * x * y * y) * v,
  );
  takeLogarithm(p);
  const h = new D("1e-10");
  const steps = [
    [0, 1, 0],
    [-0.5, 0, 0.5],
    [1, -2, 1],
  ];
  for (let k = 0; k < 9; k++) {
    const [i, j] = [Math.floor(k / 3), k % 3];
    let sum = new D(0);
    for (let a = 0; a < 3; a++) {
      for (let b = 0; b < 3; b++) {
        const factor = steps[i]![a]! * steps[j]![b]!;
        if (factor === 0) continue;
        sum = sum.plus(value(h.times(a - 1).plus(x), h.times(b - 1).plus(y)).times(factor));
      }
    }
    expect(Math.abs(p[k]! - sum.div(h.pow(i + j)).toNumber()), `L_${i}${j}`).toBeLessThan(2e-14);
  }
});

test("below the table the gas is classical: ln P at eta -24 and -33", () => {
  const surface = speciesSurface(table);
  const out = new Float64Array(INTEGRALS_LENGTH);
  for (const eta of [-24, -33]) {
    for (const theta of [1e-4, 0.3, 1000]) {
      fillSpeciesIntegrals(eta, theta, out);
      surface.at.set([eta, Math.log(theta)]);
      fillSpeciesSurface(surface, 2);
      const cell = 2e-11; // of the interpolation along temperature at the edge
      expect(Math.abs(surface.out[L00]! - Math.log(out[0]!))).toBeLessThan(cell);
    }
  }
});

const columns = [
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "heatCapacityV",
  "pressureByDensity",
  "pressureByTemperature",
] as const;

test("both signs, 20 000 places from 1e-15 to 1e13 g/cm^3 and 1e5 to 1e13 K: as a solver sees it", () => {
  const random = uniform(61);
  const count = 20_000;
  const density = Float64Array.from({ length: count }, () => 10 ** (-15 + 28 * random()));
  const temperature = Float64Array.from({ length: count }, () => 10 ** (5.001 + 7.998 * random()));
  const output = () =>
    Object.fromEntries([...columns, "positronDensity" as const].map((name) => [name, new Float64Array(count)]));
  const [mine, true_] = [output(), output()];
  gas.evaluate({ density, temperature, composition: core }, mine);
  exact.evaluate({ density, temperature, composition: core }, true_);
  const measured = new Measured();
  for (let i = 0; i < count; i++) {
    const of = (name: (typeof columns)[number]): number => true_[name]![i]!;
    const specific = of("pressure") / density[i]!;
    const scales = {
      pressure: of("pressure"),
      specificEnergy: Math.abs(of("specificEnergy")) + specific,
      specificEntropy: of("specificEntropy"),
      heatCapacityV: of("heatCapacityV"),
      pressureByDensity: Math.max(specific, of("pressureByDensity")),
      pressureByTemperature: Math.abs(of("pressureByTemperature")),
    };
    const where = `${density[i]} g/cm^3, ${temperature[i]} K`;
    for (const name of columns) measured.compare(name, mine[name]![i]!, of(name), where, scales[name]);
    const pairs = true_["positronDensity"]![i]!;
    if (pairs > 1e-200) measured.compare("positronDensity", mine["positronDensity"]![i]!, pairs, where);
  }
  if (print) console.log(speciesTableBytes(table), measured.table(), table.certificate);
  measured.expectBelow("pressure", 1e-9, 1e-12);
  measured.expectBelow("specificEnergy", 1e-9, 2e-12);
  measured.expectBelow("specificEntropy", 1e-8, 2e-12);
  measured.expectBelow("heatCapacityV", 1e-7, 1e-10);
  measured.expectBelow("pressureByDensity", 1e-7, 1e-9);
  measured.expectBelow("pressureByTemperature", 1e-7, 1e-10);
  measured.expectBelow("positronDensity", 1e-8, 1e-10);
});

test("onset of pairs against 25-digit arithmetic: 100 g/cm^3, 3e8 and 1e9 K", () => {
  for (const temperature of [3e8, 1e9]) {
    const state = gas.state(100, temperature, core);
    const truth = referenceElectronGas({ temperature, netElectronDensity: state.electronDensity! });
    const off = (mine: number, value: Decimal): number => Math.abs(new D(mine).div(value).minus(1).toNumber());
    expect(off(state.pressure, truth.pressure)).toBeLessThan(1e-10);
    expect(off(state.positronDensity!, truth.positronDensity)).toBeLessThan(1e-9);
  }
});

describe("consistency", () => {
  // The function that the numbers of the table define, in 70-digit arithmetic: P(mu, T) of both signs, then F(n, T) = mu n - P.
  const exactly = (x: number): Decimal => exactDecimal(D, "x", x);
  const theta = (y: Decimal): Decimal => y.exp();
  const quintic = (low: readonly Decimal[], high: readonly Decimal[], h: Decimal, t: Decimal): Decimal => {
    const [a, b, c] = [low[0]!, low[1]!.times(h), low[2]!.times(h).times(h)];
    const [d, e, f] = [high[0]!, high[1]!.times(h), high[2]!.times(h).times(h)];
    const rise = d.minus(a).minus(b).minus(c.div(2));
    const slope = e.minus(b).minus(c);
    const bend = f.minus(c);
    const p3 = rise.times(10).minus(slope.times(4)).plus(bend.div(2));
    const p4 = rise.times(-15).plus(slope.times(7)).minus(bend);
    const p5 = rise.times(6).minus(slope.times(3)).plus(bend.div(2));
    return p5.times(t).plus(p4).times(t).plus(p3).times(t).plus(c.div(2)).times(t).plus(b).times(t).plus(a);
  };
  const cellOf = (nodes: Float64Array, x: Decimal): number => {
    let cell = 0;
    while (cell < nodes.length - 2 && x.gte(exactly(nodes[cell + 1]!))) cell++;
    return cell;
  };
  /** Rows L, L_eta, L_eta,eta at a node of eta, along ln theta. */
  const rowsAt = (i: number, y: Decimal): Decimal[] => {
    const j = cellOf(table.logTheta, y);
    const h = exactly(table.logTheta[j + 1]!).minus(exactly(table.logTheta[j]!));
    const t = y.minus(exactly(table.logTheta[j]!)).div(h);
    return [0, 1, 2].map((k) => {
      const at = (m: number): Decimal[] => {
        const first = 9 * (i * table.logTheta.length + m) + 3 * k;
        return [...table.nodes.slice(first, first + 3)].map(exactly);
      };
      return quintic(at(j), at(j + 1), h, t);
    });
  };
  const onePressure = (eta: Decimal, y: Decimal): Decimal => {
    const lowest = table.degeneracy[0]!;
    if (eta.lt(lowest)) {
      const [l, slope] = rowsAt(0, y) as [Decimal, Decimal, Decimal];
      const below = eta.minus(lowest);
      return l
        .plus(below)
        .plus(slope.minus(1).times(below.exp().minus(1)))
        .exp();
    }
    const i = cellOf(table.degeneracy, eta);
    const h = exactly(table.degeneracy[i + 1]!).minus(exactly(table.degeneracy[i]!));
    return quintic(rowsAt(i, y), rowsAt(i + 1, y), h, eta.minus(exactly(table.degeneracy[i]!)).div(h)).exp();
  };
  const pressureAt = (nu: Decimal, y: Decimal): Decimal => {
    const inverse = theta(y).pow(-1);
    return onePressure(nu.minus(inverse), y).plus(onePressure(nu.neg().minus(inverse), y));
  };
  const freeEnergyAt = (n: Decimal, y: Decimal, start: Decimal): Decimal => {
    let nu = start;
    const d = new D("1e-20");
    for (let round = 0; ; round++) {
      const [low, mid, high] = [pressureAt(nu.minus(d), y), pressureAt(nu, y), pressureAt(nu.plus(d), y)];
      const slope = high.minus(low).div(d.times(2));
      const bend = high.minus(mid.times(2)).plus(low).div(d.times(d));
      const step = n.times(theta(y)).minus(slope).div(bend);
      nu = nu.plus(step);
      if (step.abs().lt("1e-26")) return nu.times(theta(y)).minus(1).times(n).minus(pressureAt(nu, y));
      if (round > 20) throw new Error("no convergence");
    }
  };

  test("members are derivatives of the one function that the numbers define: Maxwell to rounding", () => {
    const measured = new Measured();
    const h = new D("1e-8");
    // Classical, degenerate (eta 8), weakly degenerate, pairs beside electrons, pairs alone.
    const places = [
      [1.3, 1.06e6],
      [60_090, 3.41e7],
      [81_354, 1.99e8],
      [100, 9e8],
      [1e-3, 6e9],
    ] as const;
    for (const [density, temperature] of places) {
      const state = gas.state(density, temperature, core);
      const f = gas.freeEnergy(density, temperature, core, 3);
      const y = exactly(temperature / electronRestTemperature).ln();
      const n = exactly(state.electronDensity / electronDensityUnit);
      const start = theta(y).pow(-1).plus(state.electronDegeneracy!);
      const grid = [-1, 0, 1].map((a) =>
        [-1, 0, 1].map((b) => {
          const moved = n.times(h.times(a).exp());
          return freeEnergyAt(moved, y.plus(h.times(b)), start).div(moved);
        }),
      );
      const weights = [
        [new D(0), new D(1), new D(0)],
        [h.times(-2).pow(-1), new D(0), h.times(2).pow(-1)],
        [h.pow(-2), h.pow(-2).times(-2), h.pow(-2)],
      ];
      const log = (i: number, j: number): Decimal =>
        grid.reduce(
          (sum, row, a) =>
            row.reduce((s, value, b) => s.plus(value.times(weights[i]![a]!).times(weights[j]![b]!)), sum),
          new D(0),
        );
      // Scaled derivatives from logarithmic ones: x^2 d2/dx2 = D^2 - D.
      const unit = new D(electronRestEnergy).times(core.electronsPerGram);
      const natural = (i: number, j: number): number => {
        const inner = (a: number): Decimal => (j === 2 ? log(a, 2).minus(log(a, 1)) : log(a, j));
        return unit.times(i === 2 ? inner(2).minus(inner(1)) : inner(i)).toNumber();
      };
      const where = `${density} g/cm^3, ${temperature} K, eta ${state.electronDegeneracy}`;
      const pressure = Math.abs(f.fR);
      measured.compare("F", f.f, natural(0, 0), where, Math.abs(f.f) + pressure);
      measured.compare("P", f.fR, natural(1, 0), where);
      measured.compare("s", f.fT, natural(0, 1), where);
      measured.compare("dP/drho", f.fRR, natural(2, 0), where, pressure + Math.abs(f.fRR));
      measured.compare("dP/dT = ds/drho", f.fRT, natural(1, 1), where);
      measured.compare("c_v", f.fTT, natural(0, 2), where);
      measured.compare("third", f.fRRT!, natural(2, 1), where, Math.abs(f.fRT) + Math.abs(f.fRRT!));
      measured.compare("third", f.fRTT!, natural(1, 2), where, Math.abs(f.fTT) + Math.abs(f.fRTT!));
      measured.compare("(2,2)", f.fRRTT!, natural(2, 2), where, Math.abs(f.fTT) + Math.abs(f.fRRTT!));
    }
    if (print) console.log(measured.table());
    // Rounding grows with eta^4 in degenerate matter (c_v is a small difference there) and with 1/h from order to order.
    measured.expectBelow("F", 3e-15, 1e-15);
    measured.expectBelow("P", 5e-15, 1e-15);
    measured.expectBelow("s", 3e-14, 2e-15);
    for (const name of ["dP/drho", "dP/dT = ds/drho", "c_v"]) measured.expectBelow(name, 5e-13, 1e-14);
    measured.expectBelow("third", 2e-10, 3e-12);
    measured.expectBelow("(2,2)", 1e-9, 2e-11);
  });

  test("a full equation of state beside Coulomb terms and photons", () => {
    const full = combine(speciesTableContribution(table), coulombPlasma(), radiation());
    const truth = combine(electronPositronGas(), coulombPlasma(), radiation());
    const [mine, other] = [full.state(1e7, 3e7, core), truth.state(1e7, 3e7, core)];
    expect(Math.abs(mine.gamma1 / other.gamma1 - 1)).toBeLessThan(1e-9);
    expect(Math.abs(mine.electronDegeneracy! / other.electronDegeneracy! - 1)).toBeLessThan(1e-10);
  });
});

test("size and certificate: 4 MB, bounds twice what was measured", () => {
  expect(speciesTableBytes(table)).toBeLessThan(4e6);
  const { errors } = table.certificate;
  expect(errors.pressure.largest).toBeLessThan(1e-9);
  expect(errors.pressure.median).toBeLessThan(1e-12);
  expect(errors.numberDensity.largest).toBeLessThan(1e-8);
  expect(errors.entropy.largest).toBeLessThan(1e-8);
  for (const { largest, bound, median } of Object.values(errors)) {
    expect(largest).toBeLessThan(1e-7);
    expect(bound).toBe(2 * largest);
    expect(median).toBeLessThan(1e-8);
  }
  expect(table.densityUnit).toBe(electronDensityUnit);
});

test("the certificate at 20 000 fresh places is never optimistic", () => {
  const random = uniform(99);
  const surface = speciesSurface(table);
  const out = new Float64Array(INTEGRALS_LENGTH);
  let worst = 0;
  for (let k = 0; k < 20_000; k++) {
    const eta = -20 + 47 * random();
    const y = table.logTheta[0]! + (table.logTheta.at(-1)! - table.logTheta[0]!) * random();
    fillSpeciesIntegrals(eta, Math.exp(y), out);
    surface.at.set([eta, y]);
    fillSpeciesSurface(surface, 2);
    worst = Math.max(worst, Math.abs(Math.expm1(surface.out[L00]! - Math.log(out[0]!))));
  }
  expect(worst).toBeLessThan(table.certificate.errors.pressure.bound);
});

test.each([
  [{ temperature: [1e3, 1e9] }, "out-of-range"],
  [{ temperature: [1e9, 1e8] }, "out-of-range"],
  [{ temperature: [Number.NaN, 1e8] }, "not-a-number"],
  [{ coarseness: 0.1 }, "out-of-range"],
  [{ fineness: 1 }, "invalid-option"],
  [{ temperature: 5 }, "invalid-option"],
  [null, "invalid-option"],
])("options %j: %s", (options, code) => {
  try {
    buildSpeciesTable(options as never);
    expect.unreachable();
  } catch (error) {
    expect(isFermistateError(error) && error.code).toBe(code);
  }
});

test("outside its temperatures the table refuses", () => {
  expect(() => gas.state(1, 9e4, core)).toThrow(/temperature/);
  expect(gas.domain.temperature[1] / electronRestTemperature).toBeGreaterThan(1686);
});
