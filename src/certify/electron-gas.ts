/**
 * The ideal gas of electrons and positrons at given density and temperature, to any number of digits.
 *
 * The slow, independent evaluation beside the fast one: it shares no code, no constants and no method with it.
 * Double-exponential quadrature of the defining integrals of electrons and of positrons (moments.ts), Newton's method
 * for charge neutrality n_- - n_+ = n_e, implicit differentiation (state-functions.ts), all in decimal.js at a working
 * precision that absorbs the cancellations of those plain formulas. Two quadrature resolutions give the error.
 */
import type { Decimal } from "decimal.js";
import { FermistateError, requireKnown } from "../errors.js";
import { coldElectronGas } from "./cold.js";
import { type Conditions, conditions, type ReferenceElectronGasInput, requireDomain } from "./conditions.js";
import { requireDigits } from "./digits.js";
import { withErrors } from "./errors-of-values.js";
import { arithmetic } from "./exact.js";
import { densityAndSlope, type Species, species } from "./moments.js";
import { newtonStep, positronEta, solveNeutrality } from "./neutrality.js";
import type { Resolution, TwoResolutions } from "./quadrature.js";
import { type DegeneracyStart, startDegeneracy } from "./start.js";
import { type ElectronGasValues, stateFunctions } from "./state-functions.js";

/** Options of {@link referenceElectronGas}. */
export interface ReferenceOptions {
  /**
   * Correct digits wanted, 10 to 60.
   * @defaultValue 25
   */
  readonly digits?: number;
}

/** What {@link referenceElectronGas} returns. */
export interface ReferenceElectronGas extends ElectronGasValues {
  /** n_e = n_- - n_+ [cm^-3] as asked for. */
  readonly netElectronDensity: Decimal;
  /**
   * Absolute error estimates in the units of the values: the difference between two quadrature resolutions, but not
   * less than 10^-(digits + 4) of the value or its natural scale, below which rounding may hide.
   */
  readonly errors: ElectronGasValues;
  /** Largest error estimate relative to its value or natural scale, see {@link referenceElectronGas}. */
  readonly relativeError: number;
  /** |n_- - n_+ - n_e|/n_e of the values returned. */
  readonly residual: number;
  /** Significant digits of the arithmetic. */
  readonly workingPrecision: number;
}

/** Guard digits beyond the losses that {@link expectedLoss} counts. */
const guardDigits = 8;
/** Precisions are rounded up to a multiple of this, so that few sets of nodes and kernels are kept. */
const precisionStep = 6;
const mostAttempts = 3;
/** Beyond this many lost digits a request is refused: it would be a pair plasma with next to no net charge. */
const mostLoss = 60;

/**
 * The ideal electron-positron gas in charge neutrality with n_e, to `digits` digits.
 *
 * @param input temperature [K] and density; doubles are taken as their exact binary value, strings as exact decimals
 * @param options `digits`, default 25
 * @returns values in cgs as decimal.js numbers, with an error estimate for each. The estimates are below 10^-digits of
 * the value or of its natural scale, whichever is larger. Natural scales matter where a quantity vanishes in the ideal
 * limit: P_n/n for d2P/dn2, min(P_n/T, P_T/n) for d2P/dndT (over T for d3P/dndT2), P_T/T for d2P/dT2,
 * c_v/T^2/(1 + eta^2 for eta > 0) for d2s/dT2. Constants: CODATA 2022.
 * @throws FermistateError `not-a-number`, `out-of-range` (negative density or temperature), `outside-domain`,
 * `invalid-option`; `no-convergence` if the promise is not met
 */
export function referenceElectronGas(
  input: ReferenceElectronGasInput,
  options: ReferenceOptions = {},
): ReferenceElectronGas {
  requireKnown("options", options, ["digits"]);
  return electronGas(input, requireDigits(options.digits ?? 25), { thirdOrder: true, rarePositrons: true });
}

/** What of the gas is wanted: the rest costs time. */
export interface Extent {
  /** Without it d2P/dn2, d2P/dndT, d2P/dT2, d2s/dT2 and d3P/dndT2 are NaN. */
  readonly thirdOrder: boolean;
  /** Without it the positron density is 0 where it is too small to count in any other value. */
  readonly rarePositrons: boolean;
}

/** {@link referenceElectronGas} to the extent wanted. */
export function electronGas(input: ReferenceElectronGasInput, digits: number, extent: Extent): ReferenceElectronGas {
  const first = conditions(arithmetic(digits + guardDigits), input);
  requireDomain(input, first);
  if (first.theta.isZero()) return cold(digits, input, first);
  const start = startDegeneracy(first.n.ln().toNumber(), first.theta.toNumber());
  const loss = expectedLoss(start, first.theta.toNumber());
  if (loss > mostLoss) {
    throw new FermistateError("outside-domain", {
      argument: "density",
      given: first.netElectronDensity.toPrecision(6),
      allowed: `at this temperature, net electron densities not below 1e-${mostLoss} of the pairs`,
    });
  }
  const wanted = digits + guardDigits + loss;
  let precision = Math.ceil(wanted / precisionStep) * precisionStep;
  let worst = Number.POSITIVE_INFINITY;
  for (let attempt = 0; attempt < mostAttempts; attempt++, precision += precisionStep) {
    const resolution: Resolution = { D: arithmetic(precision), depth: precision, refinement: attempt === 0 ? 0 : 1 };
    const result = attemptAt(resolution, digits, input, start, extent);
    worst = result.relativeError;
    if (worst <= 10 ** -digits && result.residual <= 10 ** -(digits + 4)) return result;
  }
  throw new FermistateError("no-convergence", {
    argument: "digits",
    given: digits,
    allowed: `two quadrature resolutions within 1e-${digits} (they differ by ${worst.toExponential(1)})`,
  });
}

/** Decimal digits that the plain formulas lose: see the three terms. */
function expectedLoss({ eta, nu }: DegeneracyStart, theta: number): number {
  // n_- - n_+ of a pair plasma: n_+/n_e is about 1/(2 nu)
  const pairs = Math.max(0, -Math.log10(2 * nu));
  // odd kernels cancel at the Fermi surface (one power of eta), c_v and s_TT by two more; far from it z ~ -eta likewise
  const surface = 3 * Math.log10(2 + Math.abs(eta));
  // positrons sit at z = 2 mu/kT
  const pairEnergy = nu < 200 ? 3 * Math.log10(1 + 1 / theta) : 0;
  return Math.ceil(pairs + Math.max(surface, pairEnergy));
}

function attemptAt(
  resolution: Resolution,
  digits: number,
  input: ReferenceElectronGasInput,
  start: DegeneracyStart,
  { thirdOrder, rarePositrons }: Extent,
): ReferenceElectronGas {
  const { D } = resolution;
  const at = conditions(D, input);
  const { n, theta, units } = at;
  const pairsMatter = 2 * start.nu < D.precision * Math.LN10 + 3 * Math.log(3 + 1 / theta.toNumber()) + 10;
  let eta = solveNeutrality(resolution, digits, new D(start.eta), at, pairsMatter);
  let electrons = species(resolution, eta, theta, thirdOrder);
  let positrons = pairsMatter ? species(resolution, positronEta(eta, theta), theta, thirdOrder) : undefined;
  let residual = relativeResidual(at, electrons, positrons);
  if (residual.abs().gt(new D(10).pow(-(digits + 5)))) {
    eta = newtonStep(resolution, eta, at, pairsMatter, false).eta;
    electrons = species(resolution, eta, theta, thirdOrder);
    positrons = pairsMatter ? species(resolution, positronEta(eta, theta), theta, thirdOrder) : undefined;
    residual = relativeResidual(at, electrons, positrons);
  }
  const none = { fine: new D(0), coarse: new D(0) };
  const fewPositrons = positrons === undefined && rarePositrons ? rareDensity(digits, input, start, eta) : none;
  const evaluate = (which: "fine" | "coarse"): ElectronGasValues => {
    const pair = positrons?.[which];
    // the coarse sums stand for a slightly different density, so its eta belongs to the density asked for
    const values = electrons[which];
    const net = pair === undefined ? values.n : values.n.minus(pair.n);
    const slope = (pair === undefined ? values.nm : values.nm.plus(pair.nm)).times(theta);
    const correctedEta = eta.plus(n.minus(net).div(slope));
    return stateFunctions(correctedEta, theta, values, pair, pair?.n ?? fewPositrons[which], units);
  };
  return {
    ...withErrors(digits, evaluate("fine"), evaluate("coarse"), at),
    residual: residual.abs().toNumber(),
    workingPrecision: D.precision,
  };
}

function relativeResidual(
  { n }: Conditions,
  electrons: TwoResolutions<Species>,
  positrons: TwoResolutions<Species> | undefined,
): Decimal {
  const net = positrons === undefined ? electrons.fine.n : electrons.fine.n.minus(positrons.fine.n);
  return n.minus(net).div(n);
}

/** n_+ where it is too small to count in any sum: it needs no more than the digits wanted. */
function rareDensity(
  digits: number,
  input: ReferenceElectronGasInput,
  start: DegeneracyStart,
  eta: Decimal,
): TwoResolutions<Decimal> {
  const inExponent = Math.ceil(Math.log10(1 + start.nu)); // exp(-2 nu) loses the digits before the point of 2 nu
  const D = arithmetic(Math.ceil((digits + guardDigits + inExponent) / precisionStep) * precisionStep);
  const resolution: Resolution = { D, depth: D.precision, refinement: 0 };
  const { theta } = conditions(D, input);
  const positive = positronEta(new D(eta), theta);
  return {
    fine: densityAndSlope(resolution, positive, theta, false).n,
    coarse: densityAndSlope(resolution, positive, theta, true).n,
  };
}

/** Closed forms, evaluated twice: P and e_kin cancel like x^-4, so the precision grows with 1/x. */
function cold(digits: number, input: ReferenceElectronGasInput, first: Conditions): ReferenceElectronGas {
  const loss = Math.max(0, -2 * first.n.e);
  const precision = Math.ceil(digits + guardDigits + loss);
  const at = conditions(arithmetic(precision), input);
  const values = coldElectronGas(arithmetic(precision), at.n, at.units);
  const coarser = conditions(arithmetic(precision - guardDigits / 2), input);
  const coarse = coldElectronGas(arithmetic(precision - guardDigits / 2), coarser.n, coarser.units);
  return {
    ...withErrors(digits, values, coarse, at),
    residual: values.electronDensity.minus(at.netElectronDensity).div(at.netElectronDensity).abs().toNumber(),
    workingPrecision: precision,
  };
}
