/**
 * Generalised Fermi-Dirac integrals to any number of digits, by quadrature of the definition.
 *
 *     F_k(eta, beta) = int_0^inf x^k sqrt(1 + beta x/2) / (exp(x - eta) + 1) dx
 *
 * Source of the definition: J. P. Cox and R. T. Giuli, Principles of Stellar Structure (1968), chapter 24;
 * NIST Digital Library of Mathematical Functions, section 25.12(iii), for beta = 0 (which divides by Gamma(k + 1)).
 */
import type { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";
import { requireDigits } from "./digits.js";
import { sweepOccupation } from "./energy-axis.js";
import { arithmetic, type ExactNumber, exactDecimal } from "./exact.js";
import type { Resolution, TwoResolutions } from "./quadrature.js";

/** A value and the difference between two quadrature resolutions, relative to it. */
export interface ReferenceFermiDirac {
  /** F_k, dimensionless. */
  readonly value: Decimal;
  /** Difference of two resolutions over the value. */
  readonly relativeError: number;
}

/** Guard digits: rounding of a few thousand terms and of exp(x - eta) at |eta| up to 1e12. */
const guardDigits = 14;
/** For beta above 1000 the branch point x = -2/beta comes close to x = 0, where x^(-1/2) feels it. */
const mostRefinements = 3;

/**
 * F_k(eta, beta) = int_0^inf x^k sqrt(1 + beta x/2) / (exp(x - eta) + 1) dx, dimensionless.
 *
 * @param k order, a multiple of 1/2 from -1/2 to 20
 * @param eta degeneracy parameter, |eta| <= 1e12
 * @param beta kT/(m c^2), 0 to 1e12
 * @param digits correct digits wanted, 10 to 60
 * @returns the value and its measured relative error (below 10^-digits; the value is usually far better)
 * @throws FermistateError `not-a-number`, `out-of-range`, `invalid-option`; `no-convergence` if the two resolutions
 * disagree by more than 10^-digits
 */
export function referenceFermiDirac(k: number, eta: ExactNumber, beta: ExactNumber, digits = 25): ReferenceFermiDirac {
  requireDigits(digits);
  if (!(Number.isInteger(2 * k) && k >= -0.5 && k <= 20)) {
    throw new FermistateError("out-of-range", { argument: "k", given: k, allowed: "multiples of 1/2 from -1/2 to 20" });
  }
  const D = arithmetic(digits + guardDigits);
  const degeneracy = exactDecimal(D, "eta", eta);
  const halfBeta = exactDecimal(D, "beta", beta).div(2);
  if (degeneracy.abs().gt("1e12")) {
    throw new FermistateError("out-of-range", { argument: "eta", given: eta, allowed: "-1e12 to 1e12" });
  }
  if (halfBeta.isNegative() || halfBeta.gt("5e11")) {
    throw new FermistateError("out-of-range", { argument: "beta", given: beta, allowed: "0 to 1e12" });
  }
  // x^(-1/2) lifts the end point's share to the square root of the cut, so the nodes must go twice as deep.
  const depth = k < 0 ? 2 * D.precision : D.precision;
  let relativeError = Number.POSITIVE_INFINITY;
  for (let refinement = 0; refinement <= mostRefinements; refinement++) {
    const { fine, coarse } = integral(k, degeneracy, halfBeta, { D, depth, refinement });
    relativeError = fine.minus(coarse).div(fine).abs().toNumber();
    if (relativeError <= 10 ** -digits) return { value: fine.toSignificantDigits(digits + 5), relativeError };
  }
  throw new FermistateError("no-convergence", {
    argument: "digits",
    given: digits,
    allowed: `two quadrature resolutions within 1e-${digits} (they differ by ${relativeError.toExponential(1)})`,
  });
}

function integral(k: number, eta: Decimal, halfBeta: Decimal, resolution: Resolution): TwoResolutions<Decimal> {
  let even = new resolution.D(0);
  let odd = even;
  const isHalf = !Number.isInteger(k);
  sweepOccupation(resolution, eta, false, (weight, x, coarse, at) => {
    const relativistic = halfBeta.times(x).plus(1);
    const root = (isHalf ? x.times(relativistic) : relativistic).sqrt();
    const power = x.pow(isHalf ? k - 0.5 : k);
    const term = weight.times(root).times(power);
    const value = at === undefined ? term : term.times(at[0]);
    if (coarse) even = even.plus(value);
    else odd = odd.plus(value);
  });
  return { fine: even.plus(odd), coarse: even.times(2) };
}
