/** Charge neutrality n_- - n_+ = n_e by Newton's method in eta, from the double-precision start of start.ts. */
import type { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";
import type { Conditions } from "./conditions.js";
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
  let eta = start;
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
