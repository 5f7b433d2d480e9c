/**
 * Terms of the Coulomb liquid, per ion in kT, as functions of Gamma_j, theta_j, Gamma_e, r_s and x.
 *
 * Coefficients stand here a second time, from the papers' formulas and not from the code that is judged: a typo in either
 * is a disagreement. Where a coefficient follows from an exact limit it is worked out here.
 */
import type { Decimal } from "decimal.js";
import type { ExactSpecies, Plasma } from "./plasma.js";
import type { Series } from "./series.js";

/**
 * Classical one-component plasma, Potekhin & Chabrier 2000, Phys. Rev. E 62, 8554, section IV (second set of the two there):
 *
 *     f = A1 [(Gamma (A2 + Gamma))^(1/2) - A2 asinh((Gamma/A2)^(1/2))] + 2 A3 [Gamma^(1/2) - atan Gamma^(1/2)]
 *         + B1 [Gamma - B2 ln(1 + Gamma/B2)] + (B3/2) ln(1 + Gamma^2/B4),     A3 = -3^(1/2)/2 - A1/A2^(1/2)
 */
export function classicalLiquid({ D, gamma }: Plasma, one: ExactSpecies): Series {
  const coupling = gamma(one);
  const root = coupling.sqrt();
  const [a1, a2] = [new D("-0.9070"), new D("0.62954")];
  const a3 = new D(3).sqrt().div(-2).minus(a1.div(a2.sqrt()));
  const [b1, b2, b3, b4] = ["0.00456", "211.6", "-1e-4", "0.00462"] as const;
  const first = coupling.times(coupling.plus(a2)).sqrt().minus(root.div(a2.sqrt()).asinh().times(a2));
  return first
    .times(a1)
    .plus(root.minus(root.atan()).times(a3.times(2)))
    .plus(coupling.minus(coupling.div(b2).plus(1).ln().times(b2)).times(b1))
    .plus(coupling.times(coupling).div(b4).plus(1).ln().times(new D(b3).div(2)));
}

/** Order hbar^2 (Wigner 1932, Kirkwood 1933): theta^2/24, exact for point ions. */
export function wignerKirkwood({ theta }: Plasma, one: ExactSpecies): Series {
  return theta(one).pow(2).div(24);
}

/**
 * Two harmonic oscillators, sum g_i [x_i/2 + ln(1 - e^(-x_i)) - ln x_i], x_i = w_i theta. g_1 = 1.17225, w_1 = 0.861406
 * fit Baiko & Yakovlev 2019; the second follows from three degrees of freedom, sum g_i = 3, and from the order hbar^2,
 * sum g_i w_i^2 = 1.
 */
export function twoOscillators({ D, theta }: Plasma, one: ExactSpecies): Series {
  const [g1, w1] = [new D("1.17225"), new D("0.861406")];
  const g2 = g1.minus(3).neg();
  const w2 = g1.times(w1).times(w1).minus(1).neg().div(g2).sqrt();
  const oscillator = (g: Decimal, w: Decimal): Series => {
    const x = theta(one).times(w);
    return x.div(2).plus(x.neg().exp().neg().plus(1).ln()).minus(x.ln()).times(g);
  };
  return oscillator(g1, w1).plus(oscillator(g2, w2));
}

/**
 * Baiko & Yakovlev 2019, MNRAS 490, 5839: Q1 [h - Q2 ln(1 + h/Q2)] + (Q3/2) ln(1 + h^2/Q4), h = theta/3^(1/2), with Q3 such
 * that the order hbar^2 is exact.
 */
export function baikoYakovlev({ D, theta }: Plasma, one: ExactSpecies): Series {
  const [q1, q2, q4] = [new D("5.994"), new D("70.3"), new D("22.7")];
  const q3 = new D("0.25").minus(q1.div(q2)).times(q4);
  const h = theta(one).div(new D(3).sqrt());
  const first = h.minus(h.div(q2).plus(1).ln().times(q2)).times(q1);
  return first.plus(h.times(h).div(q4).plus(1).ln().times(q3.div(2)));
}

/**
 * Polarisation of the electrons by the ions of a liquid, Potekhin & Chabrier 2000, section on the ion-electron term:
 *
 *     f = -Gamma_e [c_DH Gamma_e^(1/2) + c_TF a Gamma_e^nu g1 h1]/{1 + [b Gamma_e^(1/2) + a g2 Gamma_e^nu/r_s] h2}
 *     c_DH = (Z/3^(1/2)) [(1 + Z)^(3/2) - 1 - Z^(3/2)]
 *     c_TF = (18/175) (12/pi)^(2/3) Z^(7/3) (1 - Z^(-1/3) + 0.2 Z^(-1/2))
 *     a = 1.11 Z^0.475,   b = 0.2 + 0.078 (ln Z)^2,   nu = 1.16 + 0.08 ln Z
 *     g1 = 1 + 0.78 (Gamma_e/Z)^(1/2)/[21 + Gamma_e (Z/r_s)^3]
 *     g2 = 1 + ((Z - 1)/9) [1 + 1/(0.001 Z^2 + 2 Gamma_e)] r_s^3/(1 + 6 r_s^2)
 *     h1 = (1 + x^2/5)/(1 + 0.18 Z^(-1/4) x + 0.37 Z^(-1/2) x^2 + x^2/5),   h2 = (1 + x^2)^(-1/2)
 */
export function liquidPolarisation({ D, pi, gammaE, rs, x }: Plasma, { z }: ExactSpecies): Series {
  const third = new D(1).div(3);
  const log = z.ln();
  const debye = z.plus(1).pow("1.5").minus(1).minus(z.pow("1.5")).times(z).div(new D(3).sqrt());
  const shape = z.pow(third.neg()).neg().plus(1).plus(z.pow("-0.5").times("0.2"));
  const fermi = new D(18)
    .div(175)
    .times(new D(12).div(pi).pow(third.times(2)))
    .times(z.pow(third.times(7)))
    .times(shape);
  const a = z.pow("0.475").times("1.11");
  const b = log.times(log).times("0.078").plus("0.2");
  const power = gammaE.pow(log.times("0.08").plus("1.16"));
  const root = gammaE.sqrt();
  const x2 = x.times(x);
  const g1 = root
    .times(new D("0.78").div(z.sqrt()))
    .div(rs.pow(-3).times(z.pow(3)).times(gammaE).plus(21))
    .plus(1);
  const softening = gammaE.times(2).plus(z.times(z).times("0.001")).pow(-1).plus(1);
  const g2 = rs.pow(3).div(rs.times(rs).times(6).plus(1)).times(softening).times(z.minus(1).div(9)).plus(1);
  const h1 = x2
    .div(5)
    .plus(1)
    .div(
      x
        .times(z.pow("-0.25").times("0.18"))
        .plus(x2.times(z.pow("-0.5").times("0.37")))
        .plus(x2.div(5))
        .plus(1),
    );
  const h2 = x2.plus(1).pow("-0.5");
  const above = root.times(debye).plus(power.times(fermi.times(a)).times(g1).times(h1));
  const below = root.times(b).plus(power.times(a).times(g2).div(rs)).times(h2).plus(1);
  return gammaE.neg().times(above).div(below);
}
