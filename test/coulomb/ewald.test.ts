/**
 * Madelung constants: two splittings, 32-digit values of an own sum in 40-digit arithmetic (mpmath 1.3.0), and
 * published ones, all from memory: 0.89593 (bcc), 0.89587 (fcc), 0.88006 (sc) by Fuchs 1935, Proc. R. Soc. A 151, 585,
 * converted to the ion-sphere radius; -1.79186 Ry/r_s = 2 C for bcc by Carr 1961, Phys. Rev. 122, 1437; -0.895929,
 * -0.895874, -0.895838 (bcc, fcc, hcp) as in Baiko, Potekhin & Yakovlev 2001, PRE 64, 057402, table I.
 */
import { expect, test } from "vitest";
import { Measured } from "../measured.js";
import { complementaryError } from "./error-function.js";
import { madelungConstant } from "./ewald.js";
import {
  bodyCentredCubic,
  dot,
  faceCentredCubic,
  hexagonalClosePacked,
  type Lattice,
  reciprocal,
  simpleCubic,
} from "./lattices.js";

const cases: readonly [name: string, lattice: Lattice, exact: number, published: readonly string[]][] = [
  ["bcc", bodyCentredCubic, -0.89592925568176528916624546293829, ["0.89593", "0.895929"]],
  ["fcc", faceCentredCubic, -0.89587361519510845989748779611029, ["0.89587", "0.895874"]],
  ["hcp", hexagonalClosePacked, -0.89583812045927798788409387747145, ["0.895838"]],
  ["sc", simpleCubic, -0.88005944211171631909510405762254, ["0.88006"]],
];

test("Madelung constants do not depend on the splitting and have their published values", () => {
  const measured = new Measured();
  for (const [name, lattice, exact, published] of cases) {
    const [first, second] = [0.8, 1.3].map((splitting) => madelungConstant(lattice, splitting));
    measured.compare("splittings", first!, second!, name);
    measured.compare("32 digits", first!, exact, name);
    measured.compare("32 digits", second!, exact, name);
    for (const printed of published) {
      expect((-first!).toFixed(printed.length - 2), name).toBe(printed);
    }
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  measured.expectBelow("splittings", 3e-15);
  measured.expectBelow("32 digits", 3e-15);
  expect((2 * madelungConstant(bodyCentredCubic, 1)).toFixed(5), "Carr 1961").toBe("-1.79186");
});

test("the lattices hold one ion in 4 pi/3 and their reciprocals are reciprocal", () => {
  for (const [, { primitive, basis }] of cases) {
    const waves = reciprocal(primitive);
    const [p, q, r] = waves;
    const determinant = dot(p, [q[1] * r[2] - q[2] * r[1], q[2] * r[0] - q[0] * r[2], q[0] * r[1] - q[1] * r[0]]);
    expect(Math.abs((2 * Math.PI) ** 3 / determinant / basis.length / ((4 * Math.PI) / 3) - 1)).toBeLessThan(2e-15);
    waves.forEach((wave, i) => {
      primitive.forEach((vector, j) => {
        expect(Math.abs(dot(wave, vector) - (i === j ? 2 * Math.PI : 0))).toBeLessThan(4e-15);
      });
    });
  }
});

/** mpmath 1.3.0, `mp.dps = 30; erfc(x)`; the first digits also in Abramowitz & Stegun 1964, table 7.1. */
test("erfc", () => {
  const measured = new Measured();
  const values: readonly [number, number][] = [
    [0, 1],
    [0.1, 0.8875370839817151078],
    [0.5, 0.47950012218695346232],
    [1, 0.15729920705028513066],
    [1.5, 0.033894853524689272933],
    [1.99, 0.0048885868003830027617],
    [2, 0.0046777349810472658379],
    [2.5, 0.00040695201744495893956],
    [4, 1.5417257900280018852e-8],
    [6, 2.1519736712498913117e-17],
  ];
  for (const [x, value] of values) {
    measured.compare("relative", complementaryError(x), value, `${x}`);
    measured.compare("absolute", complementaryError(x), value, `${x}`, 1);
  }
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
  measured.expectBelow("relative", 1e-13);
  measured.expectBelow("absolute", 3e-16);
});
