/**
 * Classical one-component plasma in the liquid: excess free energy per ion and kT, a function of Gamma alone.
 *
 *     f = A1 [sqrt(G (A2 + G)) - A2 asinh sqrt(G/A2)] + 2 A3 [sqrt G - atan sqrt G]
 *       + B1 [G - B2 ln(1 + G/B2)] + (B3/2) ln(1 + G^2/B4),          A3 = -sqrt(3)/2 - A1/sqrt(A2)
 *
 * Potekhin & Chabrier 2000, Phys. Rev. E 62, 8554, section IV, second of its two sets of coefficients (form and
 * coefficients from memory; Monte Carlo and weak coupling confirm them, test/coulomb/liquid.test.ts). A3 makes the
 * Debye-Hueckel limit exact.
 *
 * Each part is a power of G times a sigmoid z = G/(A + G), whose derivative G z' = z (1 - z) closes all the higher ones.
 */
import { horner } from "../numerics/natural.js";
import { ION_X, ION_Z53, POINT_GAMMA_E } from "./slots.js";

/**
 * Adds x_j f(Gamma_j) of one species: u[k] += x_j G^k f^(k), k = 0..2 (order 2) or 0..4 (order 3), per nucleus and kT,
 * and u[5] += x_j (G f' - f), the entropy over k.
 *
 * Valid for 0 < Gamma < 200, the range of the fit (smooth in the supercooled liquid above 175); within 0.2 % below
 * Gamma = 1, 5e-4 at 1, 1e-4 from 10 on. Finite beyond 200, but without meaning: the slope falls below that of the crystal.
 * Rounding: 1e-15 of each member; f 5e-15 and the entropy 1e-14 just above Gamma = 0.06, where the series end.
 *
 * @param u - natural members in Gamma, {@link SINGLE_LENGTH} numbers
 * @param order - 2 leaves u[3] and u[4] alone
 * @param point - record of the point, Gamma_e in it
 * @param ion - record of the species, x_j and Z^(5/3) in it
 */
export function addLiquidCorrelation(u: Float64Array, order: 2 | 3, point: Float64Array, ion: Float64Array): void {
  const a1 = -0.907;
  const a2 = 0.62954;
  const a3 = -Math.sqrt(3) / 2 - a1 / Math.sqrt(a2);
  const b1 = 0.00456;
  const b2 = 211.6;
  const b3 = -1e-4;
  const b4 = 0.00462;
  const gamma = point[POINT_GAMMA_E]! * ion[ION_Z53]!;
  const x = ion[ION_X]!;
  const square = gamma * gamma;
  const root = Math.sqrt(gamma);

  // Sigmoids; where 1 - z is a factor it is a quotient of its own, not a difference.
  const reciprocal = 1 / (a2 + gamma);
  const z1 = gamma * reciprocal;
  const rootZ1 = Math.sqrt(z1);
  const z2 = gamma / (1 + gamma);
  const saturation = 1 / (b2 + gamma);
  const z3 = gamma * saturation;
  const z4 = square / (b4 + square);

  // Parts of the energy G f'.
  const e1 = a1 * gamma * rootZ1;
  const e2 = a3 * root * z2;
  const e3 = b1 * gamma * z3;
  const e4 = b3 * z4;

  // Parts of the entropy G f' - f. The first and third vanish faster than their two terms as G -> 0.
  let s1: number;
  let s2: number;
  let s3: number;
  if (gamma < 0.06) {
    const y1 = gamma / a2;
    const y3 = gamma / b2;
    at[0] = y1;
    horner(arsinhEntropy, at);
    s1 = a1 * a2 * y1 * Math.sqrt(y1) * at[1]!;
    at[0] = gamma;
    horner(arctangentDeficit, at);
    s2 = e2 - 2 * a3 * gamma * root * at[1]!;
    at[0] = y3;
    horner(logarithmEntropy, at);
    s3 = b1 * b2 * y3 * y3 * at[1]!;
  } else {
    const y1 = gamma / a2;
    const rootY1 = Math.sqrt(y1);
    const rootOf1 = Math.sqrt(1 + y1);
    // asinh sqrt y; below 1 by ln(1 + ...), whose argument is not rounded against 1.
    const asinh = y1 < 1 ? Math.log1p(rootY1 + y1 / (1 + rootOf1)) : Math.log(rootY1 + rootOf1);
    s1 = a1 * a2 * (asinh - rootZ1);
    s2 = e2 - 2 * a3 * (root - Math.atan(root));
    s3 = b1 * b2 * (Math.log1p(gamma / b2) - z3);
  }
  const ratio = square / b4;
  const s4 = e4 - 0.5 * b3 * (ratio < 0.5 ? Math.log1p(ratio) : Math.log(1 + ratio));
  const energy = e1 + e2 + e3 + e4;
  const entropy = s1 + s2 + s3 + s4;

  // Parts of G^2 f''.
  const d1 = 0.5 * e1 * a2 * reciprocal;
  const d3 = e3 * b2 * saturation;
  u[0]! += x * (energy - entropy);
  u[1]! += x * energy;
  u[2]! += x * (d1 + e2 * (0.5 - z2) + d3 + e4 * (1 - 2 * z4));
  u[5]! += x * entropy;
  if (order === 2) return;
  u[3]! += x * (-0.5 * d1 * (1 + 3 * z1) + e2 * (z2 * (2 * z2 - 1) - 0.25) - 2 * z3 * d3 + 2 * e4 * z4 * (4 * z4 - 3));
  u[4]! +=
    x *
    (d1 * (0.75 + z1 * (1.5 + 3.75 * z1)) +
      e2 * (0.375 + z2 * (0.75 + z2 * (3 - 6 * z2))) +
      6 * z3 * z3 * d3 +
      6 * e4 * z4 * (8 * z4 * (1 - z4) - 1));
}

/** Argument and value of a series. */
const at = new Float64Array(2);

/** [asinh sqrt y - sqrt(y/(1 + y))]/y^(3/2) by powers of y: -c_n 2n/(2n + 1), c_n = (-1/2 over n), n = 1..17. */
const arsinhEntropy: readonly number[] = /* @__PURE__ */ binomials(17).map((c, i) => (-c * (2 * i + 2)) / (2 * i + 3));

/** [sqrt G - atan sqrt G]/G^(3/2) by powers of G: 13 terms leave 1e-17 below 0.06. */
const arctangentDeficit: readonly number[] = /* @__PURE__ */ Array.from(
  { length: 13 },
  (_, i) => (i % 2 ? -1 : 1) / (2 * i + 3),
);

/** [ln(1 + y) - y/(1 + y)]/y^2 by powers of y: 13 terms leave 1e-17 below y = 0.05. */
export const logarithmEntropy: readonly number[] = /* @__PURE__ */ Array.from(
  { length: 13 },
  (_, i) => ((i % 2 ? -1 : 1) * (i + 1)) / (i + 2),
);

/** (-1/2 over n), n = 1..count. */
function binomials(count: number): number[] {
  const all: number[] = [];
  let c = 1;
  for (let n = 1; n <= count; n++) {
    c *= (0.5 - n) / n;
    all.push(c);
  }
  return all;
}
