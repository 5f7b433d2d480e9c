/**
 * Analytic representations of the pressure of neutron-star matter, crust and core in one formula.
 *
 * zeta = log10 P (dyn/cm^2), xi = log10 of the density of mass-energy over c^2 (g/cm^3), f(x) = 1/(e^x + 1):
 *
 *     2004   zeta = (a1 + a2 xi + a3 xi^3)/(1 + a4 xi) f(a5(xi-a6)) + (a7 + a8 xi) f(a9(a10-xi))
 *                   + (a11 + a12 xi) f(a13(a14-xi)) + (a15 + a16 xi) f(a17(a18-xi))
 *     2013   zeta = (a1 + a2 xi + a3 xi^3)/(1 + a4 xi) f(a5(xi-a6)) + (a7 + a8 xi) f(a9(a6-xi))
 *                   + (a10 + a11 xi) f(a12(a13-xi)) + (a14 + a15 xi) f(a16(a17-xi))
 *                   + a18/(1 + [a19(xi-a20)]^2) + a21/(1 + [a22(xi-a23)]^2)
 *
 * Haensel & Potekhin 2004, Astron. Astrophys. 428, 191, table 1; Potekhin, Fantina, Chamel, Pearson & Goriely 2013,
 * Astron. Astrophys. 560, A48, table 2. The coefficients are from memory; the maximum masses they give are the
 * published ones.
 */
import type { LogPressure } from "./mass-energy-fit.js";

/** One representation. */
export interface PublishedFit {
  /** Which of the two formulas. */
  readonly form: 2004 | 2013;
  /** a1, a2, ... */
  readonly coefficients: readonly number[];
}

/** By the usual name of the equation of state. */
export const publishedFits: Readonly<Record<"SLy" | "FPS" | "BSk19" | "BSk20" | "BSk21", PublishedFit>> = {
  SLy: {
    form: 2004,
    coefficients: [
      6.22, 6.121, 0.005925, 0.16326, 6.48, 11.4971, 19.105, 0.8938, 6.54, 11.495, -22.775, 1.5707, 4.3, 14.08, 27.8,
      -1.653, 1.5, 14.67,
    ],
  },
  FPS: {
    form: 2004,
    coefficients: [
      6.22, 6.121, 0.006004, 0.16345, 6.5, 11.844, 17.24, 1.065, 6.54, 11.8421, -22.003, 1.5552, 9.3, 14.19, 23.73,
      -1.508, 1.79, 15.13,
    ],
  },
  BSk19: {
    form: 2013,
    coefficients: [
      3.916, 7.701, 0.00858, 0.22114, 3.269, 11.964, 13.349, 1.3683, 3.254, -12.953, 0.9237, 6.2, 14.383, 16.693,
      -1.0514, 2.486, 15.362, 0.085, 6.23, 11.68, -0.029, 20.1, 14.19,
    ],
  },
  BSk20: {
    form: 2013,
    coefficients: [
      4.078, 7.587, 0.00839, 0.21695, 3.614, 11.942, 13.751, 1.3373, 3.606, -22.996, 1.6229, 4.88, 14.274, 23.56,
      -1.5564, 2.095, 15.294, 0.084, 6.36, 11.67, -0.042, 14.8, 14.18,
    ],
  },
  BSk21: {
    form: 2013,
    coefficients: [
      4.857, 6.981, 0.00706, 0.19351, 4.085, 12.065, 10.521, 1.5905, 4.104, -28.726, 2.0845, 4.89, 14.302, 22.881,
      -1.769, 0.989, 15.313, 0.091, 4.68, 11.65, -0.086, 10, 14.15,
    ],
  },
};

/** zeta and its derivative as a function of xi. */
export function logPressureOf({ form, coefficients }: PublishedFit): LogPressure {
  const a = Float64Array.from(coefficients);
  // Places of (a + b xi) f(c(d - xi)): a, then d.
  const straight = form === 2004 ? [6, 9, 10, 13, 14, 17] : [6, 5, 9, 12, 13, 16];
  const bumps = form === 2004 ? [] : [17, 20];
  return (out) => {
    const xi = out[2]!;
    const numerator = a[0]! + xi * (a[1]! + a[2]! * xi * xi);
    const denominator = 1 + a[3]! * xi;
    const crust = numerator / denominator;
    const slope = (a[1]! + 3 * a[2]! * xi * xi - crust * a[3]!) / denominator;
    const f = 1 / (Math.exp(a[4]! * (xi - a[5]!)) + 1);
    let value = crust * f;
    let derivative = slope * f - crust * a[4]! * f * (1 - f);
    for (let k = 0; k < straight.length; k += 2) {
      const i = straight[k]!;
      const line = a[i]! + a[i + 1]! * xi;
      const g = 1 / (Math.exp(a[i + 2]! * (a[straight[k + 1]!]! - xi)) + 1);
      value += line * g;
      derivative += a[i + 1]! * g + line * a[i + 2]! * g * (1 - g);
    }
    for (const i of bumps) {
      const distance = a[i + 1]! * (xi - a[i + 2]!);
      const bump = a[i]! / (1 + distance * distance);
      value += bump;
      derivative -= (2 * bump * distance * a[i + 1]!) / (1 + distance * distance);
    }
    out[0] = value;
    out[1] = derivative;
  };
}
