/**
 * The pressure of one species of fermions and its derivatives by eta and ln theta in decimal arithmetic, from the
 * definition alone: P = theta int W(1 + theta x) f(x - eta) dx, W = p^3/3.
 *
 * Derivatives by power series: the integrand is expanded in d eta and in d ln theta with truncated series of decimals,
 * so that no formula of src/tables/species-integrals.ts (kernels, integration by parts) is used. Quadrature by the
 * trapezoidal rule over the rapidity w, E = cosh w at the point of expansion, where the integrand is even and analytic:
 * it converges faster than any power (Trefethen & Weideman 2014, SIAM Rev. 56, 385). Steps are halved until the sums
 * agree.
 */
import { Decimal } from "decimal.js";

const D = Decimal.clone({ precision: 45 });
type Series = readonly Decimal[];

const factorial = (n: number): Decimal => (n < 2 ? new D(1) : factorial(n - 1).times(n));
const times = (a: Series, b: Series): Decimal[] =>
  a.map((_, n) => a.slice(0, n + 1).reduce((sum, one, k) => sum.plus(one.times(b[n - k]!)), new D(0)));
const reciprocal = (a: Series): Decimal[] => {
  const out: Decimal[] = [];
  for (let n = 0; n < a.length; n++) {
    const sum = out.reduce((total, one, k) => total.minus(one.times(a[n - k]!)), new D(n === 0 ? 1 : 0));
    out.push(sum.div(a[0]!));
  }
  return out;
};
/** a^(3/2), from a b' = 3/2 a' b. */
const threeHalves = (a: Series): Decimal[] => {
  const out = [a[0]!.times(a[0]!.sqrt())];
  for (let n = 1; n < a.length; n++) {
    const sum = out.reduce((total, one, k) => total.plus(one.times(a[n - k]!).times(1.5 * (n - k) - k)), new D(0));
    out.push(sum.div(a[0]!.times(n)));
  }
  return out;
};

/** P_ij, i, j = 0..order, to some 30 digits. */
export function referenceDerivatives(eta: number, theta: number, order: number): Decimal[][] {
  const orders = Array.from({ length: order + 1 }, (_, n) => n);
  const growth = orders.map((n) => factorial(n).pow(-1)); // e^d
  const decay = growth.map((one, n) => (n % 2 === 0 ? one : one.neg())); // e^(-d)
  const end = new D(Math.max(eta, 0) + 110).times(theta).plus(1).acosh();
  const addAt = (w: Decimal, sums: Decimal[][]): void => {
    const u = w.cosh().minus(1);
    const x = u.div(theta);
    const momentum2 = growth.map((one, n) => one.times(u).times(u.times(2 ** n).plus(2))); // u^2 e^(2d) + 2 u e^d
    const kernel = times(growth, threeHalves(momentum2)).map((one) => one.times(w.sinh()).div(3));
    const boltzmann = x.minus(eta).exp();
    const fermi = reciprocal(decay.map((one, n) => one.times(boltzmann).plus(n === 0 ? 1 : 0)));
    for (const i of orders) for (const j of orders) sums[i]![j] = sums[i]![j]!.plus(fermi[i]!.times(kernel[j]!));
  };
  const sums = orders.map(() => orders.map(() => new D(0)));
  for (let count = 32; ; count *= 2) {
    const before = sums[order]![order]!.times(2);
    // of the points k end/count those that are new
    for (let k = 1; k < count; k += count === 32 ? 1 : 2) addAt(end.times(k).div(count), sums);
    const change = sums[order]![order]!.minus(before).div(sums[0]![0]!).abs();
    if (count > 32 && change.lt("1e-28")) {
      return sums.map((row, i) =>
        row.map((sum, j) => sum.times(end).div(count).times(factorial(i)).times(factorial(j))),
      );
    }
    if (count > 1e5) throw new Error("no convergence");
  }
}
