/**
 * Exchange and correlation of the electrons, erg per electron.
 *
 *     F = -(e^2/a_e) {[a + b r_s^(1/2) + c r_s]/[1 + d r_s^(1/2) + e r_s] + a [Phi(x) - 1]},   t = kT/E_F (non-relativistic)
 *
 * a ... e(t): Groth, Dornheim, Sjostrom, Malone, Foulkes & Bonitz 2017, Phys. Rev. Lett. 119, 135001, unpolarised; a(t) is
 * the exchange function of Perrot & Dharma-wardana 1984, Phys. Rev. A 30, 2619. Phi = 1 - (3/2) {[x (1 + x^2)^(1/2) - asinh
 * x]/x^2}^2: Salpeter 1961, ApJ 134, 669. Coefficients stand here a second time, see liquid-terms.ts.
 */
import type { Decimal } from "decimal.js";
import type { Plasma } from "./plasma.js";
import { type Series, sumOf } from "./series.js";

/** [sum of n_k t^k]/[1 + sum of d_k t^k]. */
function rational(
  t: Series,
  above: Readonly<Record<number, string>>,
  below: Readonly<Record<number, Decimal | string>>,
): Series {
  const polynomial = (coefficients: Readonly<Record<number, Decimal | string>>): Series =>
    sumOf(Object.entries(coefficients).map(([k, value]) => t.pow(Number(k)).times(value)));
  return polynomial(above).div(polynomial(below).plus(1));
}

/** Phi(x). */
export function relativisticExchange(x: Series): Series {
  const x2 = x.times(x);
  const y = x.times(x2.plus(1).sqrt()).minus(x.asinh()).div(x2);
  return y.times(y).times("-1.5").plus(1);
}

/** Free energy per electron, erg. */
export function exchangeCorrelation({ D, pi, electronEnergy, gammaE, rs, x }: Plasma): Series {
  const lambda = new D(4).div(pi.times(9)).cbrt();
  const t = rs.div(gammaE).times(lambda.times(lambda).times(2));
  const [cold, root] = [t.pow(-1).tanh(), t.pow("-0.5").tanh()];
  const leading = "0.300483986662";
  const a = rational(t, { 0: "0.75", 2: "3.04363", 3: "-0.09227", 4: "1.7035" }, { 2: "8.31051", 4: "5.1105" })
    .times("0.610887")
    .times(cold);
  const b = rational(
    t,
    { 0: "0.3436902", 2: "7.82159531356", 4: leading },
    { 2: "15.8443467125", 4: new D("1.5").sqrt().times(leading).div(lambda) },
  ).times(root);
  const d = rational(
    t,
    { 0: "0.72700876", 2: "2.38264734144", 4: "0.30221237251" },
    { 2: "4.39347718395", 4: "0.729951339845" },
  ).times(root);
  const e = rational(
    t,
    { 0: "0.25388214", 2: "0.815795138599", 4: "0.0646844410481" },
    { 2: "15.0984620477", 4: "0.230761357474" },
  ).times(cold);
  const c = t.pow(-1).neg().exp().times("-0.230130843551").plus("0.8759442").times(e);
  const rootRs = rs.sqrt();
  const above = a.plus(b.times(rootRs)).plus(c.times(rs));
  const below = d.times(rootRs).plus(e.times(rs)).plus(1);
  const shape = above.div(below).plus(a.times(relativisticExchange(x).minus(1)));
  return electronEnergy.neg().times(shape);
}
