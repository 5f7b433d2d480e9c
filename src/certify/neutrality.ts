/** Charge neutrality n_- - n_+ = n_e by Newton's method in eta, from the double-precision start of start.ts. */
import type { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";
import type { Conditions } from "./conditions.js";
import { type Arithmetic, arithmetic } from "./exact.js";
import { densityAndSlope } from "./moments.js";
import type { Resolution } from "./quadrature.js";

const mostNewtonSteps = 8;

/** eta_+ = -mu/kT - mc^2/kT = -eta - 2/theta */
export function positronEta(eta: Decimal, theta: Decimal): Decimal {
  return theta.pow(-1).times(2).plus(eta).neg();
}

/** Newton on the coarse rule until the next step would not change the digits wanted. */
export function solveNeutrality(
  resolution: Resolution,
  digits: number,
  start: Decimal,
  at: Conditions,
  pairsMatter: boolean,
): Decimal {
  let eta = sketched(start, at, pairsMatter);
  for (let step = 0; step < mostNewtonSteps; step++) {
    const next = newtonStep(resolution, eta, at, pairsMatter, true);
    eta = next.eta;
    // the error left is about the square of the residual before the step
    if (next.residual.lt(new resolution.D(10).pow(-(digits + 10) / 2))) return eta;
  }
  throw new FermistateError("no-convergence", {
    argument: "netElectronDensity",
    given: at.netElectronDensity.toPrecision(17),
    allowed: "densities at which Newton's method for charge neutrality converges (please report)",
  });
}

/** Digits of the first step, and mu/kT above which charge does not cancel there. */
const sketchDigits = 24;
const fewPairs = 3;

/** The first step at few digits: nine digits of eta become some fifteen, at a third of the price. */
function sketched(start: Decimal, { n, theta, ...others }: Conditions, pairsMatter: boolean): Decimal {
  const exact = start.constructor as Arithmetic;
  if (start.plus(theta.pow(-1)).lt(fewPairs)) return start;
  const D = arithmetic(sketchDigits);
  const resolution: Resolution = { D, depth: sketchDigits, refinement: 0 };
  const at = { ...others, n: new D(n), theta: new D(theta) };
  return new exact(newtonStep(resolution, new D(start), at, pairsMatter, true).eta);
}

/** One Newton step and the relative residual before it. */
export function newtonStep(
  resolution: Resolution,
  eta: Decimal,
  { n, theta }: Conditions,
  pairsMatter: boolean,
  coarseOnly: boolean,
): { eta: Decimal; residual: Decimal } {
  const electrons = densityAndSlope(resolution, eta, theta, coarseOnly);
  let missing = n.minus(electrons.n);
  let slope = electrons.slope;
  if (pairsMatter) {
    const positrons = densityAndSlope(resolution, positronEta(eta, theta), theta, coarseOnly);
    missing = missing.plus(positrons.n);
    slope = slope.plus(positrons.slope);
  }
  return { eta: eta.plus(missing.div(slope)), residual: missing.div(n).abs() };
}
