/** The certificate against the equation of state itself, at places of its own: never optimistic. */
import { describe, expect, test } from "vitest";
import { coulombPlasma } from "../../src/coulomb/coulomb-plasma.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import {
  buildTable,
  type CertifiedQuantity,
  tableBytes,
  tableEquationOfState,
  tabulated,
} from "../../src/tables/index.js";
import { combine } from "../../src/thermodynamics/combine.js";
import type { EquationOfState } from "../../src/thermodynamics/equation-of-state.js";
import type { QuantityName } from "../../src/thermodynamics/quantities.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { Measured, uniform } from "../measured.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const columns = [
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "heatCapacityV",
  "pressureByDensity",
  "pressureByTemperature",
] as const satisfies readonly (CertifiedQuantity & QuantityName)[];

/** Errors at random places, with the scales that a certificate states. */
function errorsOf(table: EquationOfState, truth: EquationOfState, count: number, region: readonly number[]): Measured {
  const random = uniform(2026);
  const [lowRho, highRho, lowT, highT] = region as [number, number, number, number];
  const density = Float64Array.from({ length: count }, () => lowRho * (highRho / lowRho) ** random());
  const temperature = Float64Array.from({ length: count }, () => lowT * (highT / lowT) ** random());
  const output = () => Object.fromEntries(columns.map((name) => [name, new Float64Array(count)]));
  const [mine, exact] = [output(), output()];
  table.evaluate({ density, temperature, composition: core }, mine);
  truth.evaluate({ density, temperature, composition: core }, exact);
  const measured = new Measured();
  for (let i = 0; i < count; i++) {
    const of = (name: (typeof columns)[number]): number => exact[name]![i]!;
    const specific = of("pressure") / density[i]!;
    const stiffness = Math.max(specific, of("pressureByDensity"));
    const scales = {
      pressure: stiffness * density[i]!,
      specificEnergy: Math.abs(of("specificEnergy")) + specific,
      specificEntropy: of("specificEntropy"),
      heatCapacityV: of("heatCapacityV"),
      pressureByDensity: stiffness,
      pressureByTemperature: Math.abs(of("pressureByTemperature")) + density[i]! * of("heatCapacityV"),
    };
    for (const name of columns) {
      measured.compare(name, mine[name]![i]!, of(name), `${density[i]} g/cm^3, ${temperature[i]} K`, scales[name]);
    }
  }
  return measured;
}

describe("carbon and oxygen, liquid and crystal, 1e4 to 1e9 g/cm^3 and 1e6 to 1e9 K", () => {
  const truth = whiteDwarfMatter();
  const table = buildTable(truth, core, { density: [1e4, 1e9], temperature: [1e6, 1e9], accuracy: 1e-6 });
  const eos = tableEquationOfState(table);
  const measured = errorsOf(eos, truth, 100_000, [1e4, 1e9, 1e6, 1e9]);
  if (process.env["FERMISTATE_PRINT"]) console.log(tableBytes(table), measured.table(), table.certificate);

  test.each(columns)(
    "%s: 100 000 fresh places are within the bound, and half of them within 1.2 times the median",
    (name) => {
      const { bound, median } = table.certificate.errors[name];
      measured.expectBelow(name, bound, 1.2 * median);
    },
  );

  test("the accuracy asked for is reached, in half a megabyte", () => {
    expect(table.certificate.blocksAboveTarget).toBe(0);
    for (const name of columns) expect(table.certificate.errors[name].largest).toBeLessThan(1e-6);
    // Pressure, energy and entropy are better by far: medians of 4e-12 and 2e-10.
    expect(table.certificate.errors.pressure.median).toBeLessThan(4e-12);
    expect(table.certificate.errors.specificEntropy.median).toBeLessThan(2e-10);
    expect(tableBytes(table)).toBeLessThan(0.55e6);
  });

  test("phases are those of the matter", () => {
    const random = uniform(5);
    for (let i = 0; i < 2000; i++) {
      const [rho, t] = [1e4 * 10 ** (5 * random()), 1e6 * 10 ** (3 * random())];
      expect(eos.state(rho, t, core).crystalFraction).toBe(truth.state(rho, t, core).crystalFraction);
    }
  });

  test("what a table does not hold is undefined, not zero", () => {
    expect(eos.state(1e6, 1e7, core).electronChemicalPotential).toBeUndefined();
  });
});

describe("electrons and positrons alone, through the onset of pairs", () => {
  const gas = combine(electronPositronGas());
  const table = buildTable(gas, composition({ C12: 1 }), {
    density: [1e2, 1e7],
    temperature: [1e8, 1e10],
    accuracy: 1e-5,
  });

  test("hold for any composition, with the chemical potential", () => {
    expect(table.holdsFor).toBe("electron density");
    const interpolated = combine(tabulated(table), coulombPlasma(), radiation());
    const truth = whiteDwarfMatter();
    const random = uniform(3);
    const measured = new Measured();
    for (let i = 0; i < 500; i++) {
      const x = random();
      const mixture = composition({ H1: x, Ne22: 1 - x });
      const share = mixture.electronsPerNucleon / 0.5;
      const [rho, t] = [(1e2 * 10 ** (5 * random())) / share, 1e8 * 10 ** (2 * random())];
      if (rho < 1e2 || rho > 1e7) continue;
      const [a, b] = [interpolated.state(rho, t, mixture), truth.state(rho, t, mixture)];
      const where = `${rho} g/cm^3, ${t} K, ${mixture.name}`;
      for (const name of ["pressure", "specificEnergy", "specificEntropy"] as const) {
        measured.compare(name, a[name], b[name], where);
      }
      const pairs = Math.max(1, b.pressure / (b.electronDensity * 1.380649e-16 * t));
      measured.compare(
        "degeneracy",
        a.electronDegeneracy!,
        b.electronDegeneracy!,
        where,
        pairs * Math.max(1, Math.abs(b.electronDegeneracy!)),
      );
    }
    if (process.env["FERMISTATE_PRINT"]) console.log(measured.table(), table.certificate.errors);
    const { errors } = table.certificate;
    // Energy and entropy of the whole matter stay close to those of its electrons here.
    measured.expectBelow("pressure", errors.pressure.bound);
    measured.expectBelow("specificEntropy", 2 * errors.specificEntropy.bound);
    measured.expectBelow("degeneracy", 4 * errors.pressure.bound);
  });

  test("a table within a sum refuses the gas it stands for", () => {
    expect(() => combine(tabulated(table), electronPositronGas())).toThrow(/electrons and positrons/);
  });
});
