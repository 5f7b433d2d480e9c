/**
 * The closed forms against what they stand for: the energy of linearly screened charges, integrated over distance and
 * over the coupling (Debye's charging), and the first cluster integral beyond it.
 */
import { describe, expect, test } from "vitest";
import { Measured } from "../measured.js";
import {
  abe,
  debyeHueckel,
  electronDebyeHueckel,
  type IonShare,
  ionDebyeHueckel,
  ionElectronDebyeHueckel,
  mixingDebyeHueckel,
} from "./debye-hueckel.js";
import { gaussLegendre, integrate } from "./gauss-legendre.js";

const print = (measured: Measured): void => {
  if (process.env["FERMISTATE_PRINT"]) console.info(measured.table());
};
const mixtures: readonly (readonly IonShare[])[] = [
  [{ charge: 1, fraction: 1 }],
  [{ charge: 26, fraction: 1 }],
  [
    { charge: 6, fraction: 0.5 },
    { charge: 8, fraction: 0.5 },
  ],
  [
    { charge: 1, fraction: 0.9 },
    { charge: 2, fraction: 0.0999 },
    { charge: 26, fraction: 0.0001 },
  ],
];

/**
 * Free energy per ion: int_0^1 of the energy at coupling l Gamma_e over l. Lengths in a_e, so that n_e = 3/(4 pi); the
 * energy is (1/2) sum n_i n_j int (Z_i Z_j l Gamma_e/r) h_ij d^3r with h_ij = -Z_i Z_j l Gamma_e e^(-kappa r)/r over
 * ions, and classical electrons as one more kind of charge -1 (response 1). In l = m^2 and r = -ln(y)/kappa both
 * integrands are polynomials.
 */
function charged(ions: readonly IonShare[], gammaE: number, withElectrons: boolean): number {
  const meanCharge = ions.reduce((sum, { charge, fraction }) => sum + fraction * charge, 0);
  const ionDensity = 3 / (4 * Math.PI) / meanCharge;
  const kinds = ions.map(({ charge, fraction }) => ({ charge, density: ionDensity * fraction }));
  if (withElectrons) kinds.push({ charge: -1, density: 3 / (4 * Math.PI) });
  return integrate(gaussLegendre(8), (m) => {
    const coupling = m * m * gammaE;
    const kappa = Math.sqrt(4 * Math.PI * coupling * kinds.reduce((sum, k) => sum + k.density * k.charge ** 2, 0));
    let energy = 0;
    for (const i of kinds) {
      for (const j of kinds) {
        const strength = i.charge * j.charge * coupling;
        energy += integrate(gaussLegendre(8), (y) => {
          const r = -Math.log(y) / kappa;
          return (
            0.5 *
            i.density *
            j.density *
            (strength / r) *
            (-strength * (y / r)) *
            4 *
            Math.PI *
            r *
            r *
            (1 / (y * kappa))
          );
        });
      }
    }
    // dl/l = 2 dm/m.
    return ((energy / ionDensity) * 2) / m;
  });
}

describe("Debye-Hueckel", () => {
  test("is the charging integral of linearly screened charges, rigid and classical electrons", () => {
    const measured = new Measured();
    for (const ions of mixtures) {
      for (const gammaE of [1e-6, 1e-3]) {
        for (const response of [0, 1]) {
          const name = `${ions.map(({ charge }) => charge)}, ${gammaE}, ${response}`;
          measured.compare("f", debyeHueckel(ions, gammaE, response), charged(ions, gammaE, response === 1), name);
        }
      }
    }
    print(measured);
    measured.expectBelow("f", 3e-15);
  });

  test("parts add up to the whole, and mixing to the difference", () => {
    for (const response of [0, 0.3, 1]) {
      for (const gammaE of [1e-6, 1e-3]) {
        for (const charge of [1, 2, 26]) {
          const whole = debyeHueckel([{ charge, fraction: 1 }], gammaE, response);
          const parts =
            ionDebyeHueckel(gammaE * charge ** (5 / 3)) +
            charge * electronDebyeHueckel(gammaE, response) +
            ionElectronDebyeHueckel(charge, gammaE, response);
          expect(Math.abs(parts / whole - 1)).toBeLessThan(2e-15);
        }
        for (const ions of mixtures) {
          const mixed = debyeHueckel(ions, gammaE, response);
          const linear = ions.reduce(
            (sum, { charge, fraction }) => sum + fraction * debyeHueckel([{ charge, fraction: 1 }], gammaE, response),
            0,
          );
          const mixing = mixingDebyeHueckel(ions, gammaE, response);
          expect(Math.abs((mixed - linear - mixing) / linear)).toBeLessThan(2e-15);
          if (ions.length === 1) expect(Math.abs(mixing / linear)).toBeLessThan(1e-15);
          else expect(mixing).toBeGreaterThan(0);
        }
      }
    }
  });

  // Potekhin & Chabrier 2000, PRE 62, 8554, and Potekhin et al. 2009, PRE 80, 047401 (both from memory).
  test("has the forms in which the fits to dense plasmas carry it", () => {
    const gammaE = 0.01;
    for (const charge of [1, 2, 6, 26]) {
      const coefficient = (charge / Math.sqrt(3)) * ((1 + charge) ** 1.5 - 1 - charge ** 1.5);
      expect(ionElectronDebyeHueckel(charge, gammaE, 1) / (-(gammaE ** 1.5) * coefficient)).toBeCloseTo(1, 14);
    }
    for (const ions of mixtures) {
      const average = (of: (charge: number) => number) =>
        ions.reduce((sum, { charge, fraction }) => sum + fraction * of(charge), 0);
      const top = average((z) => z ** 2.5);
      const rigid = 1 - average((z) => z * z) ** 1.5 / (Math.sqrt(average((z) => z)) * top);
      const screened =
        average((z) => z * (z + 1) ** 1.5) / top -
        average((z) => z * z + z) ** 1.5 / (Math.sqrt(average((z) => z)) * top);
      const unit = (gammaE ** 1.5 * top) / Math.sqrt(3);
      expect(Math.abs(mixingDebyeHueckel(ions, gammaE, 0) - unit * rigid)).toBeLessThan(1e-15 * unit);
      expect(Math.abs(mixingDebyeHueckel(ions, gammaE, 1) - unit * screened)).toBeLessThan(4e-15 * unit);
    }
  });
});

describe("Abe's term", () => {
  /**
   * f beyond Debye-Hueckel in lowest order: -(n/2) int [e^(-w) - 1 + w - w^2/2] d^3r, w = Gamma e^(-kappa r)/r, kappa^2
   * = 3 Gamma, lengths in a. In t = ln r, Gauss panels of one unit.
   */
  const cluster = (gamma: number): number => {
    const kappa = Math.sqrt(3 * gamma);
    const [from, to] = [Math.log(gamma) - 30, Math.log(14 / kappa)];
    const panels = Math.ceil(to - from);
    let sum = 0;
    for (let i = 0; i < panels; i++) {
      const [left, right] = [i, i + 1].map((edge) => from + ((to - from) * edge) / panels);
      sum += integrate(gaussLegendre(16, left, right), (t) => {
        const r = Math.exp(t);
        const w = (gamma * Math.exp(-kappa * r)) / r;
        // Below 0.3 the series of the bracket, -w^3/6 + w^4/24 - ..., else the bracket itself.
        let bracket = Math.expm1(-w) + w - (w * w) / 2;
        if (w < 0.3) {
          bracket = 0;
          for (let n = 14, term = 1; n >= 3; n--) {
            term = (-w) ** n;
            for (let k = 2; k <= n; k++) term /= k;
            bracket += term;
          }
        }
        return r ** 3 * bracket;
      });
    }
    // n/2 times 4 pi is 3/2.
    return -1.5 * sum;
  };

  test("is the cluster integral as Gamma -> 0: they differ by 0.64 Gamma^(9/2) ln(1/Gamma)", () => {
    const difference = (gamma: number) => (cluster(gamma) - (abe(gamma).f - ionDebyeHueckel(gamma))) / gamma ** 3;
    for (const gamma of [1e-2, 1e-3, 1e-4, 1e-5]) {
      const scaled = difference(gamma) / (gamma ** 1.5 * Math.log(1 / gamma));
      if (process.env["FERMISTATE_PRINT"]) console.info(gamma, difference(gamma), scaled);
      expect(scaled).toBeGreaterThan(0.5);
      expect(scaled).toBeLessThan(0.75);
    }
  });

  test("u = Gamma df/d Gamma", () => {
    for (const gamma of [1e-3, 0.05]) {
      const step = 1e-4 * gamma;
      const slope = (abe(gamma + step).f - abe(gamma - step).f) / (2 * step);
      expect(Math.abs((gamma * slope) / abe(gamma).u - 1)).toBeLessThan(1e-8);
    }
  });
});
