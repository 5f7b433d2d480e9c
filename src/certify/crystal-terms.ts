/**
 * Terms of the Coulomb crystal, per ion in kT, as functions of Gamma_j, theta_j and x.
 *
 * Coefficients stand here a second time, see liquid-terms.ts. The Madelung constants and u_1 are those of independent
 * lattice sums and phonon integrals (test/coulomb computes them again).
 */
import type { Decimal } from "decimal.js";
import type { ExactSpecies, Plasma } from "./plasma.js";
import { type Series, sumOf } from "./series.js";

/** What differs between the two lattices. */
export interface Lattice {
  /** C_M: energy C_M Z^2 e^2/a. */
  readonly madelung: string;
  /** u_1 = <omega/omega_p>. */
  readonly u1: string;
  /** alpha_1, alpha_2, alpha_3 of the thermal fit. */
  readonly alpha: readonly [string, string, string];
  /** a_n by n. */
  readonly a: Readonly<Record<number, string>>;
  /** b_n by n. */
  readonly b: Readonly<Record<number, string>>;
  /** alpha_6 and alpha_8: b_9 = alpha_6 a_6 and b_11 = alpha_8 a_8. */
  readonly alpha6: string;
  readonly alpha8: string;
  /** a_1 ... a_4 of the polarisation. */
  readonly screening: readonly [string, string, string, string];
  /** A_1, A_2, A_3 of the anharmonic part; empty where none are known. */
  readonly anharmonic: readonly string[];
}

/** Thermal fits: Baiko, Potekhin & Yakovlev 2001, Phys. Rev. E 64, 057402, tables of coefficients. */
export const lattices: Readonly<Record<"bcc" | "fcc", Lattice>> = {
  bcc: {
    madelung: "-0.89592925568176528916624546293829",
    u1: "0.51138746358371",
    alpha: ["0.932446", "0.334547", "0.265764"],
    a: { 0: "1", 1: "0.1839", 2: "0.593586", 3: "5.4814e-3", 4: "5.01813e-4", 6: "3.9247e-7", 8: "5.8356e-11" },
    b: { 0: "261.66", 2: "7.07997", 4: "0.0409484", 5: "3.97355e-4", 6: "5.11148e-5", 7: "2.19749e-6" },
    alpha6: "4.757014e-3",
    alpha8: "4.7770935e-3",
    screening: ["1.1866", "0.684", "17.9", "41.5"],
    anharmonic: ["10.9", "247", "1.765e5"],
  },
  fcc: {
    madelung: "-0.89587361519510845989748779611029",
    u1: "0.51319400101425",
    alpha: ["0.916707", "0.365284", "0.257591"],
    a: { 0: "1", 2: "0.532535", 4: "3.76545e-4", 6: "2.63013e-7", 8: "6.6318e-11" },
    b: { 0: "303.20", 2: "7.7255", 4: "0.0439597", 5: "1.14295e-4", 6: "5.63434e-5", 7: "1.36488e-6" },
    alpha6: "4.92387e-3",
    alpha8: "4.37506e-3",
    screening: ["1.1857", "0.663", "17.1", "40"],
    anharmonic: [],
  },
};

/** C_M Gamma. */
export function latticeEnergy({ gamma }: Plasma, one: ExactSpecies, { madelung }: Lattice): Series {
  return gamma(one).times(madelung);
}

/** (3/2) u_1 theta. */
export function zeroPointEnergy({ theta }: Plasma, one: ExactSpecies, { u1 }: Lattice): Series {
  return theta(one).times(u1).times("1.5");
}

/** sum ln(1 - e^(-alpha_n theta)) - A(theta)/B(theta). */
export function phonons({ D, theta }: Plasma, one: ExactSpecies, lattice: Lattice): Series {
  const t = theta(one);
  const polynomial = (coefficients: Readonly<Record<number, string>>): Series =>
    sumOf(Object.entries(coefficients).map(([n, value]) => t.pow(Number(n)).times(value)));
  const b9 = new D(lattice.alpha6).times(lattice.a[6]!);
  const b11 = new D(lattice.alpha8).times(lattice.a[8]!);
  const below = polynomial(lattice.b).plus(t.pow(9).times(b9)).plus(t.pow(11).times(b11));
  const logarithms = lattice.alpha.map((alpha) => t.times(alpha).neg().exp().neg().plus(1).ln());
  return sumOf(logarithms).minus(polynomial(lattice.a).div(below));
}

/** c_1 of the quantum suppression, Potekhin & Chabrier 2010, Contrib. Plasma Phys. 50, 82, section 3. */
const suppression = "0.0112";

/**
 * -sum_k A_k/(k Gamma^k) e^(-c_1 theta^2) - d_1 theta^2/Gamma: Farouki & Hamaguchi 1993, Phys. Rev. E 47, 4330, with the quantum form
 * of Potekhin & Chabrier 2010. d_1 = A_1 c_1, so that the order hbar^2 is exact (they print 0.12). Undefined for a harmonic lattice.
 */
export function anharmonic({ D, gamma, theta }: Plasma, one: ExactSpecies, lattice: Lattice): Series | undefined {
  const [first] = lattice.anharmonic;
  if (first === undefined) return undefined;
  const [coupling, t] = [gamma(one), theta(one)];
  const square = t.times(t);
  const classical = lattice.anharmonic.map((a, i) => coupling.pow(-i - 1).times(new D(a).div(i + 1)));
  const ground = square.div(coupling).times(new D(first).times(suppression));
  return sumOf(classical)
    .times(square.times(new D(suppression).neg()).exp())
    .plus(ground)
    .neg();
}

/**
 * Polarisation of the electrons by the ions of a crystal, Potekhin & Chabrier 2000, Phys. Rev. E 62, 8554, section on the solid,
 * with Q of their paper of 2010:
 *
 *     f = -f_inf(x) Gamma {1 + A(x) [Q(theta)/Gamma]^s}
 *     f_inf = a_TF Z^(2/3) b1 (1 + b2/x^2)^(1/2),   a_TF = (54/175) (12/pi)^(1/3) alpha
 *     b1 = 1 - a1 Z^(-0.267) + 0.27/Z,   b2 = 1 + (2.25/Z^(1/3)) (1 + a2 Z^5 + 0.222 Z^6)/(1 + 0.222 Z^6)
 *     A = (b3 + a3 x^2)/(1 + b4 x^2),   b3 = a4/(1 + ln Z),   b4 = 0.395 ln Z + 0.347 Z^(-3/2)
 *     s = 1/[1 + 0.01 (ln Z)^(3/2) + 0.097/Z^2]
 *     Q^2 = ln(1 + e^y)/ln[e - (e - 2) e^(-y)],   y = (0.205 theta)^2
 *
 * (ln(1 + e^y) is written as y + ln(1 + e^(-y)), and e is taken out of the other logarithm.)
 */
export function crystalPolarisation(
  { D, pi, alpha, gamma, theta, x }: Plasma,
  one: ExactSpecies,
  { screening: [a1, a2, a3, a4] }: Lattice,
): Series {
  const { z } = one;
  const third = new D(1).div(3);
  const log = z.ln();
  const fermi = new D(54).div(175).times(new D(12).div(pi).pow(third)).times(alpha);
  const b1 = z.pow("-0.267").times(a1).neg().plus(1).plus(new D("0.27").div(z));
  const sixth = z.pow(6).times("0.222").plus(1);
  const b2 = z.pow(5).times(a2).plus(sixth).div(sixth).times("2.25").div(z.pow(third)).plus(1);
  const b3 = new D(a4).div(log.plus(1));
  const b4 = log.times("0.395").plus(z.pow("-1.5").times("0.347"));
  // Z >= 1, so the logarithm is not negative; a mean nucleus of less charge has none of this
  const s = power(log, "1.5")
    .times("0.01")
    .plus(1)
    .plus(new D("0.097").div(z.times(z)))
    .pow(-1);
  const x2 = x.times(x);
  const amplitude = x2.times(a3).plus(b3).div(x2.times(b4).plus(1));
  const infinite = x2
    .pow(-1)
    .times(b2)
    .plus(1)
    .sqrt()
    .times(fermi.times(z.pow(third.times(2))).times(b1));
  const coupling = gamma(one);
  const y = theta(one).times("0.205").pow(2);
  const decay = y.neg().exp();
  const inside = new D(1).minus(new D(2).div(new D(1).exp()));
  const q = y.plus(decay.plus(1).ln()).div(decay.times(inside).neg().plus(1).ln().plus(1)).sqrt();
  return infinite
    .neg()
    .times(coupling)
    .times(amplitude.times(q.div(coupling).pow(s)).plus(1));
}

function power(value: Decimal, exponent: string): Decimal {
  return value.isZero() ? value : value.pow(exponent);
}
