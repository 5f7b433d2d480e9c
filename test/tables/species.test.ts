/**
 * The table of one species: its nodes against the decimal reference, its certificate against the direct gas and the
 * reference at fresh places, its consistency, its size.
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
import {
  buildSpeciesTable,
  type SpeciesTable,
  speciesTableBytes,
  speciesTableContribution,
} from "../../src/tables/index.js";
import { certifySpecies } from "../../src/tables/species-certificate.js";
import { fillSpeciesIntegrals, takeLogarithm } from "../../src/tables/species-integrals.js";
import { fillSpeciesSurface, L00, speciesSurface } from "../../src/tables/species-surface.js";
import { NODE_LENGTH, NODE_ORDER } from "../../src/tables/species-table.js";
import { combine } from "../../src/thermodynamics/combine.js";
import type { FreeEnergyDerivatives } from "../../src/thermodynamics/equation-of-state.js";
import { Measured, uniform } from "../measured.js";
import { referenceDerivatives } from "./species-reference.js";

const D = Decimal.clone({ precision: 70 });
const core = composition({ C12: 0.5, O16: 0.5 });
const table = buildSpeciesTable();
const gas = combine(speciesTableContribution(table));
const exact = combine(electronPositronGas());
const print = process.env["FERMISTATE_PRINT"] !== undefined;

describe("node values", () => {
  test.each([
    [-20, 1e-4],
    [32, 1e-4],
    [4.5, 0.5],
    [0.3, 1.7e-5],
    [-3, 1686],
  ])("eta %d, theta %d: all 49 integrals against decimal arithmetic (species-reference.ts)", (eta, theta) => {
    const out = new Float64Array(NODE_LENGTH);
    fillSpeciesIntegrals(eta, theta, out);
    const reference = referenceDerivatives(eta, theta, NODE_ORDER);
    const measured = new Measured();
    reference.forEach((row, i) => {
      row.forEach((value, j) => {
        const exactly = value.toNumber();
        // From i = 4 on integrands change sign: small beside the third derivative in degenerate matter, and so is their
        // weight.
        const scale = Math.abs(exactly) + (i > 3 ? Math.abs(reference[3]![j]!.toNumber()) : 0);
        measured.compare(i > 3 ? "beyond" : "P_ij", out[7 * i + j]!, exactly, `i ${i}, j ${j}`, scale);
      });
    });
    if (print) console.log(measured.table());
    measured.expectBelow("P_ij", 1e-15); // measured: 5e-16
    measured.expectBelow("beyond", 5e-15); // measured: 2e-15
  });

  test("the reference: generalised Fermi-Dirac integrals of fermistate/certify, which are another quadrature", () => {
    const [eta, theta] = [new D(4.5), new D(0.5)];
    const integral = (k: number): Decimal => new D(referenceFermiDirac(k, eta, theta, 25).value);
    const root = theta.times(2).sqrt();
    const [half, three, five] = [integral(0.5), integral(1.5), integral(2.5)];
    const pressure = three.plus(theta.div(2).times(five)).times(root.pow(3).times(theta).div(3));
    const byEta = half.plus(theta.times(three)).times(root.times(theta).times(theta));
    const reference = referenceDerivatives(4.5, 0.5, 1);
    expect(reference[0]![0]!.div(pressure).minus(1).abs().toNumber()).toBeLessThan(1e-23);
    expect(reference[1]![0]!.div(byEta).minus(1).abs().toNumber()).toBeLessThan(1e-23);
  });

  test("derivatives of the logarithm: of a sum of two exponentials, linear plus ln(1 + e^z)", () => {
    // P = e^(2 eta + 3 y) + e^(eta/2 + y/4): L = eta/2 + y/4 + ln(1 + e^z), z = 3/2 eta + 11/4 y. At z = ln 3 the
    // derivatives of ln(1 + e^z) are polynomials in q = e^z/(1 + e^z) = 3/4: q, q (1 - q), and each is the derivative
    // by q times q (1 - q).
    const eta = Math.log(3) / 1.5;
    const [u, v] = [Math.exp(2 * eta), Math.exp(eta / 2)];
    const p = new Float64Array(NODE_LENGTH);
    for (let i = 0; i <= NODE_ORDER; i++) {
      for (let j = 0; j <= NODE_ORDER; j++) p[7 * i + j] = 2 ** i * 3 ** j * u + 0.5 ** i * 0.25 ** j * v;
    }
    takeLogarithm(p);
    let polynomial = [0, 1];
    const derivatives = [Math.log(4)];
    const factorial = (n: number): number => (n < 2 ? 1 : n * factorial(n - 1));
    const measured = new Measured();
    for (let k = 1; k <= 2 * NODE_ORDER; k++) {
      derivatives.push(polynomial.reduce((sum, c, n) => sum + c * 0.75 ** n, 0));
      const slope = polynomial.map((c, n) => n * c); // q times the derivative
      polynomial = [...slope, 0].map((c, n) => c - (slope[n - 1] ?? 0));
    }
    for (let i = 0; i <= NODE_ORDER; i++) {
      for (let j = 0; j <= NODE_ORDER; j++) {
        const linear = j === 0 && i < 2 ? [eta / 2, 0.5][i]! : i === 0 && j === 1 ? 0.25 : 0;
        const expected = linear + 1.5 ** i * 2.75 ** j * derivatives[i + j]!;
        measured.compare("L_ij", p[7 * i + j]!, expected, `L_${i}${j}`, 2 ** i * 3 ** j * factorial(Math.max(i, j)));
      }
    }
    if (print) console.log(measured.table());
    measured.expectBelow("L_ij", 4e-16); // measured: 2e-16
  });
});

test("below the table the gas is classical: ln P at eta -24 and -33", () => {
  const surface = speciesSurface(table);
  const out = new Float64Array(NODE_LENGTH);
  for (const eta of [-24, -33]) {
    for (const theta of [1e-4, 0.3, 1000]) {
      fillSpeciesIntegrals(eta, theta, out);
      surface.at.set([eta, Math.log(theta)]);
      fillSpeciesSurface(surface, 2);
      expect(Math.abs(surface.out[L00]! - Math.log(out[0]!))).toBeLessThan(3e-14); // rounding of values up to 60
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
  // Measured: half of each. Heat capacity and dP/dT of degenerate matter are differences of parts eta^2 and more
  // larger.
  measured.expectBelow("pressure", 4e-14, 1e-15);
  measured.expectBelow("specificEnergy", 3e-14, 1e-15);
  measured.expectBelow("specificEntropy", 3e-12, 1e-15);
  measured.expectBelow("heatCapacityV", 2e-10, 4e-15);
  measured.expectBelow("pressureByDensity", 6e-13, 1e-15);
  measured.expectBelow("pressureByTemperature", 2e-10, 2e-15);
  measured.expectBelow("positronDensity", 2e-13, 4e-15);
});

test("third derivatives and (2,2) at given density, 4000 places", () => {
  const random = uniform(7);
  const measured = new Measured();
  for (let k = 0; k < 4000; k++) {
    const density = 10 ** (-15 + 28 * random());
    const temperature = 10 ** (5.001 + 7.998 * random());
    const [mine, true_] = [gas, exact].map((one) => one.freeEnergy(density, temperature, core, 3)) as [
      FreeEnergyDerivatives,
      FreeEnergyDerivatives,
    ];
    const where = `${density} g/cm^3, ${temperature} K`;
    const [p, mixed, thermal] = [true_.f10, true_.f11, true_.f02].map(Math.abs) as [number, number, number];
    const compare = (name: "f30" | "f21" | "f12" | "f03" | "f22", scale: number): void =>
      measured.compare(name, mine[name]!, true_[name]!, where, scale + Math.abs(true_[name]!));
    compare("f30", p);
    compare("f21", mixed);
    compare("f12", thermal);
    compare("f03", thermal);
    compare("f22", thermal);
  }
  if (print) console.log(measured.table());
  measured.expectBelow("f30", 2e-11, 2e-15);
  measured.expectBelow("f21", 2e-9, 2e-15);
  measured.expectBelow("f12", 3e-9, 2e-15);
  measured.expectBelow("f03", 7e-9, 1e-14);
  measured.expectBelow("f22", 1e-7, 3e-15);
});

test("onset of pairs against 25-digit arithmetic: 100 g/cm^3, 3e8 and 1e9 K", () => {
  for (const temperature of [3e8, 1e9]) {
    const state = gas.state(100, temperature, core);
    const truth = referenceElectronGas({ temperature, netElectronDensity: state.electronDensity! });
    const off = (mine: number, value: Decimal): number => Math.abs(new D(mine).div(value).minus(1).toNumber());
    expect(off(state.pressure, truth.pressure)).toBeLessThan(3e-15);
    expect(off(state.positronDensity!, truth.positronDensity)).toBeLessThan(3e-14);
  }
});

describe("consistency", () => {
  // The function that the numbers of the table define, in 70-digit arithmetic: P(mu, T) of both signs, then F(n, T) =
  // mu n - P.
  const exactly = (x: number): Decimal => exactDecimal(D, "x", x);
  const theta = (y: Decimal): Decimal => y.exp();
  /** The polynomial of all derivatives at 0 and h, by Newton's confluent divided differences. */
  const hermite = (low: readonly Decimal[], high: readonly Decimal[], h: Decimal, x: Decimal): Decimal => {
    const count = 2 * low.length;
    const place = (k: number): Decimal => (k < low.length ? new D(0) : h);
    let column = Array.from({ length: count }, (_, k) => (k < low.length ? low[0]! : high[0]!));
    let factorial = 1;
    let [value, product] = [column[0]!, new D(1)];
    for (let order = 1; order < count; order++) {
      factorial *= order;
      column = Array.from({ length: count - order }, (_, k) => {
        const width = place(k + order).minus(place(k));
        if (!width.isZero()) return column[k + 1]!.minus(column[k]!).div(width);
        return (k < low.length ? low : high)[order]!.div(factorial);
      });
      product = product.times(x.minus(place(order - 1)));
      value = value.plus(column[0]!.times(product));
    }
    return value;
  };
  const cellOf = (nodes: Float64Array, x: Decimal): number => {
    let cell = 0;
    while (cell < nodes.length - 2 && x.gte(exactly(nodes[cell + 1]!))) cell++;
    return cell;
  };
  /** L and its derivatives by eta at a node of eta, along ln theta. */
  const rowsAt = (i: number, y: Decimal): Decimal[] => {
    const j = cellOf(table.logTheta, y);
    const h = exactly(table.logTheta[j + 1]!).minus(exactly(table.logTheta[j]!));
    const x = y.minus(exactly(table.logTheta[j]!));
    return Array.from({ length: NODE_ORDER + 1 }, (_, k) => {
      const at = (m: number): Decimal[] => {
        const first = NODE_LENGTH * (i * table.logTheta.length + m) + (NODE_ORDER + 1) * k;
        return [...table.nodes.slice(first, first + NODE_ORDER + 1)].map(exactly);
      };
      return hermite(at(j), at(j + 1), h, x);
    });
  };
  const onePressure = (eta: Decimal, y: Decimal): Decimal => {
    const lowest = table.degeneracy[0]!;
    if (eta.lt(lowest)) {
      const [l, slope] = rowsAt(0, y) as [Decimal, Decimal];
      const below = eta.minus(lowest);
      return l
        .plus(below)
        .plus(slope.minus(1).times(below.exp().minus(1)))
        .exp();
    }
    const i = cellOf(table.degeneracy, eta);
    const h = exactly(table.degeneracy[i + 1]!).minus(exactly(table.degeneracy[i]!));
    return hermite(rowsAt(i, y), rowsAt(i + 1, y), h, eta.minus(exactly(table.degeneracy[i]!))).exp();
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
      const pressure = Math.abs(f.f10);
      measured.compare("F", f.f00, natural(0, 0), where, Math.abs(f.f00) + pressure);
      measured.compare("P", f.f10, natural(1, 0), where);
      measured.compare("s", f.f01, natural(0, 1), where);
      measured.compare("dP/drho", f.f20, natural(2, 0), where, pressure + Math.abs(f.f20));
      measured.compare("dP/dT = ds/drho", f.f11, natural(1, 1), where);
      measured.compare("c_v", f.f02, natural(0, 2), where);
      measured.compare("third", f.f21!, natural(2, 1), where, Math.abs(f.f11) + Math.abs(f.f21!));
      measured.compare("third", f.f12!, natural(1, 2), where, Math.abs(f.f02) + Math.abs(f.f12!));
      measured.compare("(2,2)", f.f22!, natural(2, 2), where, Math.abs(f.f02) + Math.abs(f.f22!));
    }
    if (print) console.log(measured.table());
    // Rounding grows with eta^4 in degenerate matter (c_v is a small difference there) and with 1/h from order to
    // order.
    measured.expectBelow("F", 2e-15, 1e-15);
    measured.expectBelow("P", 2e-15, 1e-15);
    measured.expectBelow("s", 2e-14, 2e-15);
    for (const name of ["dP/drho", "dP/dT = ds/drho", "c_v"]) measured.expectBelow(name, 4e-13, 2e-14);
    measured.expectBelow("third", 4e-12, 5e-14);
    measured.expectBelow("(2,2)", 2e-10, 3e-12);
  });

  test("a full equation of state beside Coulomb terms and photons", () => {
    const full = combine(speciesTableContribution(table), coulombPlasma(), radiation());
    const truth = combine(electronPositronGas(), coulombPlasma(), radiation());
    const [mine, other] = [full.state(1e7, 3e7, core), truth.state(1e7, 3e7, core)];
    expect(Math.abs(mine.gamma1 / other.gamma1 - 1)).toBeLessThan(1e-13);
    expect(Math.abs(mine.electronDegeneracy! / other.electronDegeneracy! - 1)).toBeLessThan(1e-13);
  });
});

test("size and certificate: 0.3 MB, medians below 1e-12, bounds twice what was measured", () => {
  expect(speciesTableBytes(table)).toBeLessThan(300_000);
  const { errors } = table.certificate;
  // measured, largest and median
  const expected = {
    pressure: [8e-15, 7e-16],
    numberDensity: [3e-14, 2e-15],
    entropy: [3e-12, 5e-15],
    densityByDegeneracy: [4e-13, 5e-15],
    heatCapacity: [1e-10, 2e-13],
    pressureByDensity: [4e-13, 5e-15],
    pressureByTemperature: [1e-10, 2e-13],
  } as const;
  for (const [name, [largest, median]] of Object.entries(expected)) {
    const error = errors[name as keyof typeof expected];
    expect(error.largest, name).toBeLessThan(2 * largest);
    expect(error.median, name).toBeLessThan(2 * median);
    expect(error.bound).toBe(2 * error.largest);
  }
});

test("the certificate sees a wrong node", () => {
  const nodes = table.nodes.slice();
  nodes[NODE_LENGTH * (12 * table.logTheta.length + 9) + 8]! += 1e-9; // L_11
  expect(certifySpecies({ ...table, nodes }).errors.pressureByTemperature.largest).toBeGreaterThan(1e-10);
});

test("the certificate at 20 000 fresh places is never optimistic", () => {
  const random = uniform(99);
  const surface = speciesSurface(table);
  const out = new Float64Array(NODE_LENGTH);
  let worst = 0;
  for (let k = 0; k < 20_000; k++) {
    const eta = -20 + 53 * random();
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

test.each([
  ["layout", { layout: 1 }],
  ["layout", { nodes: new Float64Array(9) }],
  ["restTemperature", { restTemperature: 5.9299e9 }],
  ["pressureUnit", { pressureUnit: 1.44e24 }],
  ["densityUnit", { densityUnit: 1.76e30 }],
])("a table of another %s is refused: its temperatures or units would be silently off", (name, change) => {
  const other = { ...table, ...change } as SpeciesTable;
  try {
    speciesTableContribution(other);
    expect.unreachable();
  } catch (error) {
    expect(isFermistateError(error) && [error.code, error.argument]).toEqual(["invalid-option", `table.${name}`]);
  }
});

test("outside its temperatures the table refuses", () => {
  expect(() => gas.state(1, 9e4, core)).toThrow(/temperature/);
  expect(gas.domain.temperature[1] / electronRestTemperature).toBeGreaterThan(1686);
});
