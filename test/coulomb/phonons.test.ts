/**
 * Phonons of the bcc and fcc Coulomb crystal: exact rules, published values, the convergence of the grid, and the
 * tables of fixtures/phonons.json (another own program; see there).
 *
 * Published values, all from memory: moments of Baiko, Potekhin & Yakovlev 2001, PRE 64, 057402, table I; long-wave
 * elastic constants in n Z^2 e^2/a, bcc b11 = (c11 - c12)/2 = 0.0245 and c44 = 0.1827, fcc 0.0207 and 0.185, of Fuchs
 * 1936, Proc. R. Soc. A 153, 622, as in Ogata & Ichimaru 1990, PRA 42, 4867.
 */
import { readFileSync } from "node:fs";
import { describe, expect, test } from "vitest";
import { Measured } from "../measured.js";
import { bodyCentredCubic, faceCentredCubic, type Vector } from "./lattices.js";
import {
  type Crystal,
  gridSize,
  meanLogFrequency,
  modeAverage,
  phononSpectrum,
  type Spectrum,
  squaredFrequencies,
  thermalHarmonic,
} from "./phonons.js";

type ThermalRow = readonly [theta: number, f: number, u: number, heat: number, ...gridDifferences: number[]];
const fixture = JSON.parse(readFileSync(new URL("../fixtures/phonons.json", import.meta.url), "utf8")) as Readonly<
  Record<Crystal, readonly ThermalRow[]>
> & { readonly moments: Readonly<Record<Crystal, Readonly<Record<string, number>>>> };

const crystals: readonly Crystal[] = ["bcc", "fcc"];
const spectra: Readonly<Record<Crystal, Spectrum>> = { bcc: phononSpectrum("bcc"), fcc: phononSpectrum("fcc") };
/** 2 pi over the side of the cube, in 1/a. */
const zone = { bcc: (2 * Math.PI) / bodyCentredCubic.side, fcc: (2 * Math.PI) / faceCentredCubic.side };
const moment = (crystal: Crystal, power: string): number =>
  power === "log"
    ? meanLogFrequency(spectra[crystal])
    : modeAverage(spectra[crystal], (omega) => omega ** Number(power));
const print = (measured: Measured): void => {
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
};

describe("exact rules", () => {
  test("the squares of the three frequencies add up to 1 (Kohn), <omega^2> = 1/3, and the weights to 1", () => {
    for (const crystal of crystals) {
      expect(spectra[crystal].traceError).toBeLessThan(1e-14);
      expect(Math.abs(moment(crystal, "2") - 1 / 3)).toBeLessThan(1e-14);
      expect(Math.abs(spectra[crystal].weights.reduce((sum, weight) => sum + weight, 0) - 1)).toBeLessThan(3e-14);
    }
  });

  test("frequencies do not depend on the splitting nor on a reciprocal vector added to k", () => {
    const measured = new Measured();
    for (const crystal of crystals) {
      // In units of 2 pi/side: (1, 1, 0) is a reciprocal vector of bcc and (1, 1, 1) of fcc; the sums reach |k| = 1.
      const waves: Vector[] = [
        [0.6, 0.5, 0.4],
        [0.3, 0.7, 0.45],
        [0.5, 0.4, 0.6],
      ];
      for (const [x, y, z] of waves) {
        const unit = zone[crystal];
        const here = squaredFrequencies(crystal, [x * unit, y * unit, z * unit], 0.8);
        const other = squaredFrequencies(crystal, [x * unit, y * unit, z * unit], 1.2);
        const shifted: Vector = [x - 1, y - 1, crystal === "bcc" ? z : z - 1];
        const there = squaredFrequencies(crystal, [shifted[0] * unit, shifted[1] * unit, shifted[2] * unit], 0.8);
        here.forEach((square, mode) => {
          measured.compare("splitting", other[mode]!, square, `${crystal} ${x}`, 1);
          measured.compare("shift", there[mode]!, square, `${crystal} ${x}`, 1);
        });
      }
    }
    print(measured);
    measured.expectBelow("splitting", 4e-15);
    measured.expectBelow("shift", 4e-15);
  });

  test("at H and P of the bcc zone symmetry makes all three modes equal, omega^2 = 1/3", () => {
    const h = zone.bcc;
    for (const wave of [
      [h, 0, 0],
      [h / 2, h / 2, h / 2],
    ] as const) {
      for (const square of squaredFrequencies("bcc", wave)) expect(Math.abs(square - 1 / 3)).toBeLessThan(2e-15);
    }
  });
});

describe("published values", () => {
  test("elastic constants of long waves, to one unit of the last printed digit", () => {
    const k = 0.01;
    const diagonal = k / Math.SQRT2;
    for (const [crystal, b11, c44, unit] of [
      ["bcc", 0.0245, 0.1827, 1e-4],
      ["fcc", 0.0207, 0.185, 1e-3],
    ] as const) {
      // omega^2 = (c/3) k^2 in units of omega_p^2 and 1/a: c44 for k || [100], b11 for k || [110] polarised [1-10].
      expect(Math.abs((3 * squaredFrequencies(crystal, [k, 0, 0])[0]) / k ** 2 - c44)).toBeLessThan(unit);
      const slow = squaredFrequencies(crystal, [diagonal, diagonal, 0])[0];
      expect(Math.abs((3 * slow) / k ** 2 - b11)).toBeLessThan(1e-4);
    }
  });

  test("moments, to one unit of the last printed digit", () => {
    for (const [crystal, power, printed] of [
      ["bcc", "1", "0.5113875"],
      ["bcc", "-1", "2.79855"],
      ["bcc", "-2", "12.972"],
      ["bcc", "log", "-0.831298"],
      ["fcc", "1", "0.513194"],
      ["fcc", "-1", "2.71982"],
      ["fcc", "-2", "12.143"],
      ["fcc", "log", "-0.817908"],
    ] as const) {
      const unit = 10 ** -printed.split(".")[1]!.length;
      expect(Math.abs(moment(crystal, power) - Number(printed)), `${crystal} ${power}`).toBeLessThan(unit);
    }
  });
});

describe("convergence and the tables", () => {
  test("moments against a coarser grid and against the 14-digit table", () => {
    const measured = new Measured();
    for (const crystal of crystals) {
      const { across, along, panels } = gridSize[crystal];
      const coarser = phononSpectrum(crystal, { across: across - 4, along, panels }, 1.1);
      for (const [power, exact] of Object.entries(fixture.moments[crystal])) {
        const value = moment(crystal, power);
        // u_-2: the table is 3e-9 off in both lattices. The values here stay within 6e-11 of 12.9728932381 and
        // 12.1431497071 for 3 to 7 panels, splittings 0.8 and 1.1 and finer grids.
        const kind = power === "-2" ? "-2" : power === "-1" ? "-1" : power === "log" ? "log" : "positive";
        measured.compare(`${crystal} table ${kind}`, value, exact, power);
        const coarse =
          power === "log" ? meanLogFrequency(coarser) : modeAverage(coarser, (omega) => omega ** Number(power));
        measured.compare(`${crystal} coarser ${kind}`, coarse, value, power);
      }
    }
    print(measured);
    for (const [name, positive, log, inverse] of [
      ["bcc", 3e-13, 4e-13, 1.5e-12],
      ["fcc", 3e-13, 1e-12, 6e-13],
    ] as const) {
      measured.expectBelow(`${name} table positive`, positive);
      measured.expectBelow(`${name} table log`, log);
      measured.expectBelow(`${name} table -1`, inverse);
      measured.expectBelow(`${name} table -2`, 5e-9);
    }
    // Four points fewer across: the error of the grid grows 100-fold or more and is still this small.
    measured.expectBelow("bcc coarser positive", 2.5e-11);
    measured.expectBelow("bcc coarser log", 3e-10);
    measured.expectBelow("bcc coarser -1", 1e-9);
    measured.expectBelow("bcc coarser -2", 5e-9);
    measured.expectBelow("fcc coarser positive", 1.5e-10);
    measured.expectBelow("fcc coarser log", 1.5e-9);
    measured.expectBelow("fcc coarser -1", 5e-9);
    measured.expectBelow("fcc coarser -2", 2e-8);
  });

  test("<1/omega^2> does not depend on how the zone centre is approached", () => {
    for (const [crystal, value] of [
      ["bcc", 12.9728932381],
      ["fcc", 12.1431497071],
    ] as const) {
      const { across } = gridSize[crystal];
      for (const [panels, splitting] of [
        [3, 1.1],
        [5, 0.8],
      ] as const) {
        const spectrum = phononSpectrum(crystal, { across, along: 10, panels }, splitting);
        const inverseSquare = modeAverage(spectrum, (omega) => omega ** -2);
        if (process.env["FERMISTATE_PRINT"]) console.info(crystal, panels, inverseSquare);
        expect(Math.abs(inverseSquare / value - 1)).toBeLessThan(1e-10);
      }
    }
  });

  test("thermal functions for theta = 0.01 ... 300", () => {
    const measured = new Measured();
    for (const crystal of crystals) {
      for (const [theta, f, u, heat] of fixture[crystal].filter(([at]) => at <= 300)) {
        const own = thermalHarmonic(spectra[crystal], theta);
        const range = theta < 10.5 ? "theta <= 10" : "theta > 10";
        measured.compare(`${crystal} f, ${range}`, own.f, f, `${theta}`);
        measured.compare(`${crystal} u, ${range}`, own.u, u, `${theta}`);
        measured.compare(`${crystal} c, ${range}`, own.heat, heat, `${theta}`);
      }
    }
    print(measured);
    for (const name of ["bcc f", "bcc u", "bcc c", "fcc f", "fcc u", "fcc c"]) {
      measured.expectBelow(`${name}, theta <= 10`, 6e-12);
      measured.expectBelow(`${name}, theta > 10`, 4e-10);
    }
  });

  // f = 3 ln theta + 3 <ln omega> - (3/2) u_1 theta + theta^2/24 - <omega^4> theta^4/960 + ...
  test("high-temperature expansion", () => {
    for (const crystal of crystals) {
      for (const theta of [0.01, 0.1]) {
        const expansion =
          3 * Math.log(theta) +
          3 * moment(crystal, "log") -
          1.5 * moment(crystal, "1") * theta +
          theta ** 2 / 24 -
          (moment(crystal, "4") * theta ** 4) / 960;
        const { f } = thermalHarmonic(spectra[crystal], theta);
        // Next term: 3 <omega^6> theta^6/181440 = 2.5e-6 theta^6.
        expect(Math.abs(f - expansion)).toBeLessThan(1e-13 + 2.6e-6 * theta ** 6);
      }
    }
  });
});
