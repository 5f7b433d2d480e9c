/**
 * Relativistic factor of the exchange energy of a degenerate electron gas: e_x = -(3/4 pi) alpha x Phi(x) m c^2 per
 * electron,
 *
 *     Phi = 1 - (3/2) y^2,    y = [x sqrt(1 + x^2) - asinh x]/x^2,
 *
 * from 1 at x = 0 through 0 at x = 2.533 to -1/2: the transverse (magnetic) part of the interaction wins. Source:
 * Akhiezer & Peletminskii 1960, Sov. Phys. JETP 11, 1316; Salpeter 1961, ApJ 134, 669 (from memory; the tests compare
 * with a double integral of the one-photon exchange). Exact in first order of alpha at T = 0, for every x.
 *
 * With D = x d/dx: D y = 2x/sqrt(1 + x^2) - 2 y.
 */
import { POINT_X } from "./slots.js";

/** y/x in powers of x^2: 2 binomial(-1/2, n)/(2n + 3). At x = 0.25 the first term left out is 1e-17 of the sum. */
const series: readonly number[] = /* @__PURE__ */ seriesOfFactor(14);

/** Phi - 1 as a function of density (x ~ rho^(1/3)): out[i] = rho^i d^i(Phi - 1)/d rho^i, i = 0..2 or 0..3. */
export function exchangeRelativity(out: Float64Array, order: 2 | 3, point: Float64Array): void {
  const x = point[POINT_X]!;
  const x2 = x * x;
  const energy = Math.sqrt(1 + x2);
  const slope = (2 * x) / energy;
  const slope1 = slope / (1 + x2); // D slope
  let y: number;
  let y1: number; // D y, as are y2 and y3 of second and third order
  if (x < 0.25) {
    y = 0;
    for (let n = series.length - 1; n >= 0; n--) y = y * x2 + series[n]!;
    y *= x;
    y1 = slope - 2 * y;
  } else {
    const log = Math.log(x + energy);
    y = (x * energy - log) / x2;
    y1 = 2 * (log / x2 - 1 / (x * energy)); // slope - 2 y, which cancels at large x
  }
  const y2 = slope1 - 2 * y1;
  const phi1 = -3 * y * y1;
  const phi2 = -3 * (y1 * y1 + y * y2);
  out[0] = -1.5 * y * y;
  out[1] = phi1 / 3;
  out[2] = phi2 / 9 - phi1 / 3;
  if (order === 2) return;
  const y3 = slope1 * (1 - (3 * x2) / (1 + x2)) - 2 * y2;
  const phi3 = -3 * (3 * y1 * y2 + y * y3);
  out[3] = phi3 / 27 - phi2 / 3 + (2 / 3) * phi1;
}

function seriesOfFactor(terms: number): number[] {
  const coefficients: number[] = [];
  let binomial = 1;
  for (let n = 0; n < terms; n++) {
    coefficients.push((2 * binomial) / (2 * n + 3));
    binomial *= (-0.5 - n) / (n + 1);
  }
  return coefficients;
}
