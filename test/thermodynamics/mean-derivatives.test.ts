/**
 * Derivatives by the means of an ideal plasma: integrated along A or Z they give the difference of the states of mean
 * nuclei (no difference quotient; no source needed).
 */
import { describe, expect, test } from "vitest";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { type Composition, composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { compositionDerivatives } from "../../src/thermodynamics/composition-derivatives.js";
import { meanDerivatives } from "../../src/thermodynamics/mean-derivatives.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { gaussLegendre } from "../coulomb/gauss-legendre.js";
import { Measured } from "../measured.js";

const ideal = whiteDwarfMatter({ coulomb: false });
const full = whiteDwarfMatter();

const print = (measured: Measured): void => {
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
};
const rule = gaussLegendre(10);
const integral = (at: (node: number) => number): number =>
  rule.nodes.reduce((sum, node, i) => sum + rule.weights[i]! * at(node), 0);

describe("means of an ideal plasma", () => {
  test("integrate to differences in A and in Z", () => {
    const measured = new Measured();
    const eos = combine(electronPositronGas(), idealIons(), radiation());
    const matter = (a: number, z: number): Composition => composition({ meanMassNumber: a, meanCharge: z });
    for (const [density, temperature] of [
      [1e6, 1e8],
      [1e-4, 1e6],
      [1e9, 1e10],
    ] as const) {
      for (const [key, at, length] of [
        ["meanMassNumber", (s: number) => matter(14 + s, 7), 1],
        ["meanCharge", (s: number) => matter(14, 6.5 + s), 1],
      ] as const) {
        for (const name of ["pressure", "specificEnergy"] as const) {
          const end = eos.state(density, temperature, at(length));
          const begin = eos.state(density, temperature, at(0));
          const mean = integral((s) => meanDerivatives(eos, density, temperature, at(s * length))[key][name]);
          measured.compare(
            `${key} ${name}`,
            end[name] - begin[name],
            mean,
            `rho ${density} T ${temperature}`,
            begin[name],
          );
        }
      }
      const { electronsPerNucleon, ionsPerNucleon } = meanDerivatives(eos, density, temperature, matter(14, 7));
      const both = compositionDerivatives(eos, density, temperature, matter(14, 7)).species[0]!;
      // X by one species: dY_i = dX/A, dY_e = Z dX/A.
      const sum = (ionsPerNucleon.pressure + 7 * electronsPerNucleon.pressure) / 14;
      expect(both.pressure / sum).toBeCloseTo(1, 14);
    }
    print(measured);
    for (const key of ["meanMassNumber", "meanCharge"]) {
      for (const name of ["pressure", "specificEnergy"]) measured.expectBelow(`${key} ${name}`, 5e-15);
    }
  });

  test("are refused where they do not exist", () => {
    const matter = composition({ C12: 1 });
    const refused = (call: () => unknown, code: string): void => {
      expect(call).toThrow(expect.objectContaining({ code }));
    };
    refused(() => meanDerivatives(full, 1e6, 1e7, matter), "unavailable-quantity");
    refused(() => meanDerivatives(ideal, -1, 1e7, matter), "out-of-range");
    refused(() => meanDerivatives(ideal, 1e6, 1e7, composition({ n: 1 })), "invalid-composition");
    refused(() => meanDerivatives(ideal, 1e6, 1e7, {} as Composition), "invalid-composition");
  });
});
