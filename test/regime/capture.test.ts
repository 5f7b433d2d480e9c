/** Thresholds of electron capture against AME2020 and densities worked out independently (fixtures/electron-capture.json). */
import { readFileSync } from "node:fs";
import { expect, test } from "vitest";
import { electronRestEnergy, electronVolt } from "../../src/constants.js";
import { type Composition, composition } from "../../src/matter/composition.js";
import type { CaptureThreshold } from "../../src/regime/capture.js";
import { regime } from "../../src/regime/regime.js";
import { Measured } from "../measured.js";

const fixture = JSON.parse(readFileSync(new URL("../fixtures/electron-capture.json", import.meta.url), "utf8")) as {
  energy: [string, string, number][];
  density: [string, number][];
  densityWithLattice: [string, number][];
};
const pure = (label: string): Composition => composition({ [label]: 1 });
const of = (label: string, density = 1e6): CaptureThreshold => regime(density, 1e7, pure(label)).captures[0]!;
const MeV = 1e6 * electronVolt;

test("energies and products", () => {
  for (const [label, product, energy] of fixture.energy) {
    const found = of(label);
    expect(found.product).toBe(product);
    // Measured 1.1e-6. AME2020 prints the masses of radioactive atoms to 1e-9 u = 0.93 eV: half a digit of each.
    expect(Math.abs(found.energy / MeV - energy), label).toBeLessThan(1.3e-6);
  }
});

test("cold densities without lattice, to the six digits printed", () => {
  const measured = new Measured();
  for (const [label, density] of fixture.density) measured.compare("density", of(label).density, density, label);
  measured.expectBelow("density", 5e-6);
});

test("cold densities with lattice: one capture in balance against two pure phases in balance", () => {
  const measured = new Measured();
  for (const [label, density] of fixture.densityWithLattice) {
    measured.compare("density", of(label).densityWithLattice, density, label);
  }
  // Measured 6.1e-6: a printed digit is up to 3.4e-6, the rest is the small density jump between the phases.
  measured.expectBelow("density", 9e-6);
});

test("the density with lattice is where the chemical potential of cold electrons meets the shifted threshold", () => {
  for (const label of ["H1", "C12", "Fe56", "U238"]) {
    const { density, densityWithLattice } = of(label);
    const bare = regime(density, 0, pure(label));
    expect(bare.parameters.electronChemicalPotential / bare.captures[0]!.energy, label).toBeCloseTo(1, 12);
    const dressed = regime(densityWithLattice, 0, pure(label));
    const { energy, latticeShift } = dressed.captures[0]!;
    expect(dressed.parameters.electronChemicalPotential / (energy + latticeShift), label).toBeCloseTo(1, 12);
  }
});

test("the lattice shift is the change of the lattice's free energy when one nucleus captures", () => {
  // F = -0.8959 e^2 (4 pi/3)^(1/3) n_e^(1/3) sum n_j Z_j^(5/3) with n_e = sum n_j Z_j, differentiated by differences:
  // moves 1e-5 of the carbon nuclei of C/O to boron. Energies per e^2/a_e.
  const lattice = (boron: number): number => {
    const list = [
      [5, boron],
      [6, 0.5 - boron],
      [8, 0.5],
    ] as const;
    const electrons = list.reduce((sum, [z, n]) => sum + n * z, 0);
    return -0.895929255682 * Math.cbrt(electrons / 7) * list.reduce((sum, [z, n]) => sum + n * z ** (5 / 3), 0);
  };
  const expected = (lattice(1e-5) - lattice(-1e-5)) / 2e-5;
  const matter = composition({ C12: 12 / 28, O16: 16 / 28 });
  const { captures, parameters } = regime(1e9, 1e7, matter);
  // e^2/a_e = alpha^2 m_e c^2/r_s; alpha from CODATA 2022.
  const unit = (7.2973525643e-3 ** 2 * electronRestEnergy) / parameters.densityParameter;
  expect(captures[0]!.latticeShift / unit / expected).toBeCloseTo(1, 9);
});

test("strained from 5 kT below, outside above the shifted threshold, nothing lower", () => {
  const matter = pure("Fe56");
  const severity = (density: number, temperature: number): string | undefined =>
    regime(density, temperature, matter).findings.find(({ code }) => code === "electron-capture")?.severity;
  const { density, densityWithLattice } = of("Fe56");
  expect(severity(density * 0.9999, 0)).toBeUndefined();
  expect(severity(density * 1.0001, 0)).toBe("strained");
  expect(severity(densityWithLattice * 0.9999, 0)).toBe("strained");
  expect(severity(densityWithLattice * 1.0001, 0)).toBe("outside");
  // mu rises by a third of d ln rho: 5 kT of 1e8 K is 43 keV of 4.2 MeV, 3 % in density.
  expect(severity(density * 0.98, 1e8)).toBe("strained");
  expect(severity(density * 0.96, 1e8)).toBeUndefined();
});

test("a nuclide that captures by itself does so at any density", () => {
  const found = regime(1, 1e6, pure("Ni56"));
  expect(found.captures[0]!.density).toBe(0);
  expect(found.findings.map(({ code }) => code)).toContain("electron-capture");
});

test("no threshold for a mean nucleus, none needed for neutrons, none where the table ends", () => {
  const mean = regime(1e10, 1e7, composition({ meanMassNumber: 56, meanCharge: 26 }));
  expect(mean.captureChecked).toBe(false);
  expect(mean.captures).toEqual([]);
  expect(regime(1e10, 1e9, pure("n")).captureChecked).toBe(true);
  expect(regime(1e6, 1e7, pure("H3")).captureChecked).toBe(false); // (0, 3) and (0, 2) are no nuclides
  expect(of("H2").product).toBe("n + n");
});
