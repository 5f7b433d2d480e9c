/** The outer crust against calculations outside this library (fixtures/outer-crust.json). */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { joinBarotropes } from "../../src/barotropes/joined.js";
import { type OuterCrust, type OuterCrustOptions, outerCrust } from "../../src/barotropes/outer-crust.js";
import { publishedBarotrope } from "../../src/barotropes/published.js";
import { electronVolt, speedOfLight } from "../../src/constants.js";
import { coldCorrections } from "../../src/coulomb/cold-corrections.js";
import { isFermistateError } from "../../src/errors.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { Measured } from "../measured.js";

type Layers = readonly [string, number, number, number][];
type Printed = readonly [string, "density" | "pressure", number][];
const fixture = JSON.parse(readFileSync(new URL("../fixtures/outer-crust.json", import.meta.url), "utf8")) as {
  readonly [Name in "binding" | "noBinding" | "extrapolated"]: Layers;
} & { readonly [Name in "printedBinding" | "printedNoBinding" | "printedExtrapolated"]: Printed };

const c2 = speedOfLight ** 2;
const megaElectronVoltPerCubicFermi = 1e6 * electronVolt * 1e39;

describe.each<[string, OuterCrustOptions, Layers, Printed]>([
  ["with electron binding", {}, fixture.binding, fixture.printedBinding],
  ["without electron binding", { electronBinding: false }, fixture.noBinding, fixture.printedNoBinding],
  ["with extrapolated masses", { extrapolatedMasses: true }, fixture.extrapolated, fixture.printedExtrapolated],
])("%s", (_name, options, expected, printed) => {
  const crust = outerCrust(options);
  const massEnergy = (density: number): number => density * (1 + crust.state(density).specificEnergy / c2);

  test("the sequence, every transition and the drip, against 40-digit arithmetic", () => {
    expect(crust.layers.map((layer) => layer.nuclide)).toEqual(expected.map(([label]) => label));
    const measured = new Measured();
    for (const [i, [label, pressure, density, energy]] of expected.entries()) {
      const layer = crust.layers[i]!;
      measured.compare("pressure", layer.pressure[1], pressure, label);
      measured.compare("density", layer.density[1], density, label);
      measured.compare("mass-energy", massEnergy(layer.density[1]), energy, label);
    }
    // Measured 3.7e-11 between Ni62 and Fe58, 0.6 % apart in density, where a rounding of the masses (7e-15 u) moves the crossing
    // by 7e-11; 1e-12 at the others.
    measured.expectBelow("pressure", 1e-10);
    measured.expectBelow("density", 1e-10);
    measured.expectBelow("mass-energy", 1e-10);
  });

  test("a printed recomputation, to 1e-4", () => {
    const measured = new Measured();
    for (const [label, quantity, value] of printed) {
      // That calculation looked at pressures one by one and passed over the layer of Fe58, which is 0.1 % of the pressure here.
      if (options.electronBinding === false && label === "Ni62") continue;
      const layer = crust.layers.find(({ nuclide }) => nuclide === label)!;
      const found =
        quantity === "density" ? massEnergy(layer.density[1]) : layer.pressure[1] / megaElectronVoltPerCubicFermi;
      measured.compare(quantity, found, value, label);
    }
    expect(measured.count("density") + measured.count("pressure")).toBeGreaterThan(8);
    measured.expectBelow("density", 1e-4);
    measured.expectBelow("pressure", 1e-4);
  });

  test("P and w are equal on both sides of each jump, and the density rises", () => {
    expect(crust.jumps).toHaveLength(expected.length - 1);
    for (const { pressure, potential, densities } of crust.jumps) {
      const [below, above] = [crust.state(densities[0]), crust.state(densities[1])];
      expect(densities[1]).toBeGreaterThan(densities[0]);
      for (const side of [below, above]) {
        expect(Math.abs(side.pressure / pressure - 1)).toBeLessThan(4e-15);
        expect(Math.abs(side.potential - potential)).toBeLessThan(1e-15 * c2);
      }
    }
  });
});

describe("the crust as matter", () => {
  const crust = outerCrust();

  test("neutrons drip where a baryon costs as much as a free neutron", () => {
    const last = crust.layers.at(-1)!;
    // (1.00866491590 - 1) c^2 per atomic mass unit, AME2020.
    expect(Math.abs(last.potential / (0.0086649159 * c2) - 1)).toBeLessThan(1e-12);
    // About 4.3e11 g/cm^3 with theoretical masses (Baym, Pethick & Sutherland 1971); measured masses alone stop short of it.
    expect(crust.density[1]).toBeGreaterThan(3e11);
    expect(crust.density[1]).toBeLessThan(4.4e11);
  });

  test("masses that are extrapolated are flagged", () => {
    expect(crust.layers.some((layer) => layer.extrapolated)).toBe(false);
    const flagged = outerCrust({ extrapolatedMasses: true }).layers.filter((layer) => layer.extrapolated);
    // AME2020 marks Ni80 and Ni82 with "#" and Ni78 too.
    expect(flagged.map((layer) => layer.nuclide)).toEqual(["Ni78", "Ni80", "Ni82"]);
  });

  test("another equation of state of the electrons moves the transitions by a little", () => {
    const exchange = outerCrust({
      equationOfState: combine(electronPositronGas(), coldCorrections({ correlation: false })),
    });
    const moved = (label: string): number => {
      const of = (one: OuterCrust): number => one.layers.find((layer) => layer.nuclide === label)!.pressure[1];
      return of(exchange) / of(crust) - 1;
    };
    expect(Math.abs(moved("Fe56"))).toBeGreaterThan(1e-4);
    expect(Math.abs(moved("Fe56"))).toBeLessThan(0.05);
  });

  test("refuses options it does not know", () => {
    expect(() => outerCrust({ electronBinding: 1 } as never)).toThrow(/true or false/);
    expect(() => outerCrust({ masses: true } as never)).toThrow(/electronBinding/);
  });
});

describe("a crust on a core", () => {
  const crust = outerCrust();
  test.each(["SLy", "FPS", "BSk19", "BSk20", "BSk21", "SLy piecewise"])(
    "%s: P and w continuous, mass-energy at given pressure as published",
    (name) => {
      const core = publishedBarotrope(name);
      const whole = joinBarotropes(crust, core);
      expect(whole.density[0]).toBe(crust.density[0]);
      const r = new Float64Array(5);
      const massEnergyAt = (matter: typeof core, pressure: number): number => {
        r[1] = pressure;
        matter.fillAtPressure(r);
        return r[0]! * (1 + r[2]! / c2);
      };
      for (const pressure of [1e30, 1e32, 1e34, 5e35]) {
        expect(Math.abs(massEnergyAt(whole, pressure) / massEnergyAt(core, pressure) - 1)).toBeLessThan(1e-14);
      }
      for (const pressure of [1e22, 1e24]) {
        expect(Math.abs(massEnergyAt(whole, pressure) / massEnergyAt(crust, pressure) - 1)).toBeLessThan(1e-14);
      }
      // Across the join, by small steps in w: P rises, and by dP = rho dw within the bounds of both densities.
      r[3] = whole.state(1e9).potential;
      whole.fillAtPotential(r);
      let [density, pressure, potential] = [r[0]!, r[1]!, r[3]!];
      for (let i = 0; i < 2000; i++) {
        r[3] = potential + 5e15;
        whole.fillAtPotential(r);
        const mean = (r[1]! - pressure) / 5e15;
        expect(mean).toBeGreaterThan(density * (1 - 1e-9));
        expect(mean).toBeLessThan(r[0]! * (1 + 1e-9));
        [density, pressure, potential] = [r[0]!, r[1]!, r[3]!];
      }
    },
  );

  test("at a pressure given: a jump up is kept, a jump down and a pressure that only one has are refused", () => {
    const core = publishedBarotrope("BSk21");
    const codeAt = (pressure: number): string => {
      try {
        const { jumps } = joinBarotropes(crust, core, { pressure });
        return jumps.some((jump) => jump.pressure === pressure) ? "a jump" : "no jump";
      } catch (error) {
        return isFermistateError(error) ? error.code : String(error);
      }
    };
    const seen = new Set([1e25, 1e26, 1e28, 1e29, 5e29].map(codeAt));
    expect([...seen].sort()).toEqual(["a jump", "unstable"]);
    expect(codeAt(2 * crust.layers.at(-1)!.pressure[1])).toBe("outside-domain");
  });
});
