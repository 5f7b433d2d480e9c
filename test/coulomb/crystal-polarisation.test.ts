/** Polarisation of the crystal: the flat second-order form against the algebra, and its limits; melting of the rigid plasma. */
import { expect, test } from "vitest";
import { addByAlgebra, addCrystalPolarisation } from "../../src/coulomb/crystal-polarisation.js";
import { bcc, fcc } from "../../src/coulomb/lattice.js";
import { rigidPlasmaMelting } from "../../src/coulomb/rigid-melting.js";
import {
  ION_THETA,
  POINT_CUBE_ROOT,
  POINT_LENGTH,
  POINT_LOG_DENSITY,
  POINT_ROOT,
  POINT_TEMPERATURE,
  POINT_X,
} from "../../src/coulomb/slots.js";
import { coulombSpecies } from "../../src/coulomb/species.js";
import { composition } from "../../src/matter/composition.js";
import { NATURAL_LENGTH } from "../../src/numerics/natural.js";
import { Measured } from "../measured.js";

test("order 2 written out equals the algebra, T = 0 included", () => {
  const measured = new Measured();
  for (const lattice of [bcc, fcc]) {
    for (const label of ["He4", "C12", "O16", "Fe56"]) {
      const species = coulombSpecies(composition({ [label]: 1 }), lattice);
      const ion = species.ions[0]!;
      for (let logRho = 3; logRho <= 11; logRho += 0.5) {
        for (const theta of [0.01, 0.1, 0.5, 1, 3, 10, 30, 100, 137, 1e4, Number.POSITIVE_INFINITY]) {
          const density = 10 ** logRho;
          const point = new Float64Array(POINT_LENGTH);
          point[POINT_TEMPERATURE] = (ion[ION_THETA]! * Math.sqrt(density)) / theta;
          point[POINT_CUBE_ROOT] = Math.cbrt(density);
          point[POINT_X] = species.x * Math.cbrt(density);
          point[POINT_ROOT] = Math.sqrt(density) / point[POINT_TEMPERATURE]!;
          point[POINT_LOG_DENSITY] = Math.log(density);
          const flat = new Float64Array(NATURAL_LENGTH);
          const algebra = new Float64Array(NATURAL_LENGTH);
          addCrystalPolarisation(flat, 2, point, ion, species);
          addByAlgebra(algebra, 2, point, ion, species);
          const energy = Math.abs(algebra[0]!);
          for (const [i, member] of ["F", "F_10", "F_01", "F_20", "F_11", "F_02"].entries()) {
            const where = `${lattice.name} ${label} ${density} theta ${theta}`;
            // Density derivatives may cross zero: they are compared in terms of F and F_01.
            const scale =
              i === 0 || i === 1 || i === 3
                ? energy
                : i === 4
                  ? Math.max(...[2, 4, 5].map((j) => Math.abs(algebra[j]!)))
                  : Math.abs(algebra[i]!);
            measured.compare(member, flat[i]!, algebra[i]!, where, scale);
          }
          expect(flat[0]).toBeLessThan(0);
          if (theta === Number.POSITIVE_INFINITY) expect([flat[2], flat[4], flat[5]]).toEqual([0, 0, 0]);
        }
      }
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  for (const member of ["F", "F_10", "F_20", "F_01", "F_11", "F_02"]) measured.expectBelow(member, 2e-15);
});

test("the rigid classical plasma melts at Gamma = 175.17286250995 with an entropy jump of 0.75075 k", () => {
  // Own evaluation of the same published fits with 30-digit arithmetic; Potekhin & Chabrier 2000, Phys. Rev. E 62, 8554, give
  // 175.0 +- 0.4. One ulp of f (166) is 3e-14 and the slope of the difference 0.0043: 1e-11 is what doubles can do.
  const { coupling, entropyJump } = rigidPlasmaMelting();
  expect(Math.abs(coupling - 175.17286250995)).toBeLessThan(2e-11);
  expect(entropyJump).toBeCloseTo(0.75075, 5);
});
