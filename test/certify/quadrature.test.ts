/** The double-exponential rule on integrals known in closed form (elementary calculus). */
import type { Decimal } from "decimal.js";
import { expect, test } from "vitest";
import { arithmetic } from "../../src/certify/exact.js";
import { quadratureNodes } from "../../src/certify/quadrature.js";

const D = arithmetic(48);
const pi = D.acos(-1);
const cases: readonly [name: string, from: Decimal, to: Decimal, exact: Decimal, f: (x: Decimal) => Decimal][] = [
  ["1", new D(-1), new D(2), new D(3), (x) => x.minus(x).plus(1)],
  ["sqrt(x)", new D(0), new D(1), new D(2).div(3), (x) => x.sqrt()],
  ["1/(1 + x^2)", new D(0), new D(1), pi.div(4), (x) => new D(1).div(x.times(x).plus(1))],
  ["sqrt(1 - x^2)", new D(0), new D(1), pi.div(4), (x) => new D(1).minus(x.times(x)).sqrt()],
  ["ln(x)", new D(0), new D(1), new D(-1), (x) => x.ln()],
  ["e^-x", new D(0), new D(30), new D(1).minus(new D(-30).exp()), (x) => x.neg().exp()],
];

test.each(cases)("integral of %s", (_name, from, to, exact, f) => {
  let fine = new D(0);
  let coarse = new D(0);
  for (const { position, weight, coarse: shared } of quadratureNodes({ D, depth: 48, refinement: 0 }, from, to)) {
    const term = weight.times(f(position));
    fine = fine.plus(term);
    if (shared) coarse = coarse.plus(term.times(2));
  }
  // Measured: fine 1e-46 or better, coarse 2e-35 or better
  expect(fine.div(exact).minus(1).abs().toNumber()).toBeLessThan(5e-46);
  expect(coarse.div(exact).minus(1).abs().toNumber()).toBeLessThan(1e-34);
});
