/**
 * Constants of the two lattices against independent sums: Ewald's (ewald.ts) and the phonon spectrum (phonons.ts).
 */
import { describe, expect, test } from "vitest";
import { ANHARMONIC_SUPPRESSION, bcc, fcc } from "../../src/coulomb/lattice.js";
import { madelungConstant } from "./ewald.js";
import { bodyCentredCubic, faceCentredCubic } from "./lattices.js";
import { meanLogFrequency, modeAverage, phononSpectrum } from "./phonons.js";

for (const { name, lattice, structure } of [
  { name: "bcc", lattice: bcc, structure: bodyCentredCubic },
  { name: "fcc", lattice: fcc, structure: faceCentredCubic },
] as const) {
  describe(name, () => {
    const spectrum = phononSpectrum(name);

    test("Madelung constant and u_1", () => {
      const madelung = madelungConstant(structure, 1);
      const u1 = modeAverage(spectrum, (omega) => omega);
      if (process.env["FERMISTATE_PRINT"]) console.info(name, lattice.madelung / madelung - 1, lattice.u1 / u1 - 1);
      expect(Math.abs(lattice.madelung / madelung - 1)).toBeLessThan(4e-15);
      expect(Math.abs(lattice.u1 / u1 - 1)).toBeLessThan(1e-12);
    });

    // As theta -> 0 the fit is 3 ln theta + ln(a1 a2 a3) - A(0)/B(0); the exact constant is 3 <ln omega>.
    test("the thermal fit has the classical limit to 1e-5", () => {
      const [a1, a2, a3] = lattice.exponents;
      const fitted = Math.log(a1 * a2 * a3) - lattice.numerator[0]! / lattice.denominator[0]!;
      const difference = fitted - 3 * meanLogFrequency(spectrum);
      if (process.env["FERMISTATE_PRINT"]) console.info(name, "classical limit", difference);
      expect(Math.abs(difference)).toBeLessThan(1e-5);
    });

    test("the thermal fit ends with alpha_8 theta^3", () => {
      const a = lattice.numerator.at(-1)!;
      const b = lattice.denominator.at(-1)!;
      expect(lattice.numerator.length + 3).toBe(lattice.denominator.length);
      expect(Math.abs(b / a / lattice.alpha8 - 1)).toBeLessThan(1e-15);
    });
  });
}

// Free energy per order hbar^2: quantum suppression of the classical term and the ground state cancel at order 1/Gamma.
test("the anharmonic terms leave the order hbar^2 exact", () => {
  expect(bcc.anharmonicQuantum).toBe(bcc.anharmonic[0] * ANHARMONIC_SUPPRESSION);
  expect([fcc.anharmonicQuantum, ...fcc.anharmonic]).toEqual([0, 0, 0, 0]);
});
