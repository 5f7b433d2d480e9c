/**
 * The ideal gas of electrons and positrons at given density and temperature, to any number of digits.
 *
 * The slow, independent evaluation beside the fast one: it shares no code, no constants and no method with it.
 * Double-exponential quadrature of the defining integrals of electrons and of positrons (moments.ts), Newton's method
 * for charge neutrality n_- - n_+ = n_e, implicit differentiation (state-functions.ts), all in decimal.js at a working
 * precision that absorbs the cancellations of those plain formulas. Two quadrature resolutions give the error.
 */
import { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";
import { coldElectronGas } from "./cold.js";
import * as constants from "./constants.js";
import { requireDigits } from "./digits.js";
import { type Arithmetic, type ExactNumber, arithmetic, exactDecimal } from "./exact.js";
import { type Species, densityAndSlope, species } from "./moments.js";
import type { Resolution, TwoResolutions } from "./quadrature.js";
import { type DegeneracyStart, startDegeneracy } from "./start.js";
import { type ElectronGasValues, type Units, stateFunctions } from "./state-functions.js";

/** Where to evaluate: T and one of three ways to give the net electron density n_e = n_- - n_+. */
export type ReferenceElectronGasInput = { /** T [K], 0 or 1 to 1e14. */ readonly temperature: ExactNumber } & (
  | {
      /** Baryon mass density rho = n_B m_u [g/cm^3]. */
      readonly density: ExactNumber;
      /** Y_e; n_e = rho Y_e/m_u. */
      readonly electronsPerNucleon: ExactNumber;
    }
  | { /** n_e [cm^-3], 1 to 1e42. */ readonly netElectronDensity: ExactNumber }
  | { /** n_e/N_A [mol/cm^3]; n_e = value times 6.02214076e23. */ readonly electronMolarDensity: ExactNumber }
);

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
  /** Absolute error estimates in the units of the values: the difference between two quadrature resolutions. */
  readonly errors: ElectronGasValues;
  /** Largest error estimate relative to its value or natural scale, see {@link referenceElectronGas}. */
  readonly relativeError: number;
  /** |n_- - n_+ - n_e|/n_e of the values returned. */
  readonly residual: number;
  /** Significant digits of the arithmetic. */
  readonly workingPrecision: number;
}

/** Guard digits beyond the losses that {@link expectedLoss} counts. */
const guardDigits = 14;
/** Precisions are rounded up to a multiple of this, so that few sets of nodes and kernels are kept. */
const precisionStep = 8;
const mostNewtonSteps = 8;
const mostAttempts = 3;

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
  const digits = requireDigits(options.digits ?? 25);
  const first = conditions(arithmetic(digits + guardDigits), input);
  requireDomain(input, first);
  if (first.theta.isZero()) return cold(digits, input, first);
  const start = startDegeneracy(first.n.toNumber(), first.theta.toNumber());
  const wanted = digits + guardDigits + expectedLoss(start, first.theta.toNumber());
  let precision = Math.ceil(wanted / precisionStep) * precisionStep;
  let worst = Number.POSITIVE_INFINITY;
  for (let attempt = 0; attempt < mostAttempts; attempt++, precision += precisionStep) {
    const resolution: Resolution = { D: arithmetic(precision), depth: precision, refinement: attempt === 0 ? 0 : 1 };
    const result = attemptAt(resolution, digits, input, start);
    worst = result.relativeError;
    if (worst <= 10 ** -digits && result.residual <= 10 ** -(digits + 4)) return result;
  }
  throw new FermistateError("no-convergence", {
    argument: "digits",
    given: digits,
    allowed: `two quadrature resolutions within 1e-${digits} (they differ by ${worst.toExponential(1)})`,
  });
}

/** n_e and T in internal units at one precision. */
interface Conditions {
  readonly n: Decimal;
  readonly theta: Decimal;
  readonly netElectronDensity: Decimal;
  readonly temperature: Decimal;
  readonly units: Units;
}

function conditions(D: Arithmetic, input: ReferenceElectronGasInput): Conditions {
  const temperature = exactDecimal(D, "temperature", input.temperature);
  const netElectronDensity = netDensity(D, input);
  const energy = new D(constants.electronMass).times(new D(constants.speedOfLight).pow(2));
  const boltzmann = new D(constants.boltzmannConstant);
  const inverseWavelength = new D(constants.electronMass).times(constants.speedOfLight).div(constants.planckConstant);
  const density = inverseWavelength.pow(3).times(8).times(D.acos(-1));
  return {
    n: netElectronDensity.div(density),
    theta: boltzmann.times(temperature).div(energy),
    netElectronDensity,
    temperature,
    units: { density, energy, boltzmann },
  };
}

function netDensity(D: Arithmetic, input: ReferenceElectronGasInput): Decimal {
  if ("netElectronDensity" in input) return exactDecimal(D, "netElectronDensity", input.netElectronDensity);
  if ("electronMolarDensity" in input) {
    return exactDecimal(D, "electronMolarDensity", input.electronMolarDensity).times(constants.avogadroConstant);
  }
  const density = exactDecimal(D, "density", input.density);
  const electronsPerNucleon = exactDecimal(D, "electronsPerNucleon", input.electronsPerNucleon);
  return density.times(electronsPerNucleon).div(constants.atomicMassConstant);
}

function requireDomain(input: ReferenceElectronGasInput, { netElectronDensity, temperature }: Conditions): void {
  if (temperature.isNegative() && !temperature.isZero()) {
    throw new FermistateError("out-of-range", {
      argument: "temperature",
      given: input.temperature,
      allowed: "0 K or 1 K to 1e14 K",
    });
  }
  if (!temperature.isZero() && (temperature.lt(1) || temperature.gt("1e14"))) {
    throw new FermistateError("outside-domain", {
      argument: "temperature",
      given: input.temperature,
      allowed: "0 K or 1 K to 1e14 K",
    });
  }
  const details = {
    argument: "density",
    given: netElectronDensity.toPrecision(6),
    allowed: "net electron densities from 1 to 1e42 cm^-3",
  };
  if (netElectronDensity.lte(0)) throw new FermistateError("out-of-range", details);
  if (netElectronDensity.lt(1) || netElectronDensity.gt("1e42")) {
    throw new FermistateError("outside-domain", details);
  }
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
): ReferenceElectronGas {
  const { D } = resolution;
  const at = conditions(D, input);
  const { n, theta, units } = at;
  const pairsMatter = 2 * start.nu < D.precision * Math.LN10 + 3 * Math.log(3 + 1 / theta.toNumber()) + 10;
  let eta = solveNeutrality(resolution, digits, new D(start.eta), at, pairsMatter);
  let electrons = species(resolution, eta, theta);
  let positrons = pairsMatter ? species(resolution, positronEta(eta, theta), theta) : undefined;
  let residual = relativeResidual(at, electrons, positrons);
  if (residual.abs().gt(new D(10).pow(-(digits + 8)))) {
    eta = newtonStep(resolution, eta, at, pairsMatter, false).eta;
    electrons = species(resolution, eta, theta);
    positrons = pairsMatter ? species(resolution, positronEta(eta, theta), theta) : undefined;
    residual = relativeResidual(at, electrons, positrons);
  }
  const fewPositrons = positrons === undefined ? rarePositrons(digits, input, eta) : undefined;
  const evaluate = (which: "fine" | "coarse"): ElectronGasValues => {
    const pair = positrons?.[which];
    // the coarse sums stand for a slightly different density, so its eta belongs to the density asked for
    const values = electrons[which];
    const net = pair === undefined ? values.n : values.n.minus(pair.n);
    const slope = (pair === undefined ? values.nm : values.nm.plus(pair.nm)).times(theta);
    const correctedEta = eta.plus(n.minus(net).div(slope));
    return stateFunctions(correctedEta, theta, values, pair, pair?.n ?? fewPositrons![which], units);
  };
  const fine = evaluate("fine");
  const errors = difference(fine, evaluate("coarse"));
  return {
    ...mapValues(fine, (value) => value.toSignificantDigits(digits + 5)),
    netElectronDensity: at.netElectronDensity.toSignificantDigits(digits + 5),
    errors: mapValues(errors, (error) => error.toSignificantDigits(3, Decimal.ROUND_UP)),
    relativeError: worstRelativeError(fine, errors, at),
    residual: residual.abs().toNumber(),
    workingPrecision: D.precision,
  };
}

/** eta_+ = -mu/kT - mc^2/kT = -eta - 2/theta */
function positronEta(eta: Decimal, theta: Decimal): Decimal {
  return theta.pow(-1).times(2).plus(eta).neg();
}

function relativeResidual(
  { n }: Conditions,
  electrons: TwoResolutions<Species>,
  positrons: TwoResolutions<Species> | undefined,
): Decimal {
  const net = positrons === undefined ? electrons.fine.n : electrons.fine.n.minus(positrons.fine.n);
  return n.minus(net).div(n);
}

/** Newton on the coarse rule until the next step would not change the digits wanted. */
function solveNeutrality(
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
    if (next.residual.lt(new resolution.D(10).pow(-(digits + guardDigits) / 2))) return eta;
  }
  throw new FermistateError("no-convergence", {
    argument: "netElectronDensity",
    given: at.netElectronDensity.toPrecision(17),
    allowed: "densities at which Newton's method for charge neutrality converges (please report)",
  });
}

function newtonStep(
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

/** n_+ where it is too small to count in any sum: it needs no more than the digits wanted. */
function rarePositrons(digits: number, input: ReferenceElectronGasInput, eta: Decimal): TwoResolutions<Decimal> {
  const D = arithmetic(Math.ceil((digits + guardDigits) / precisionStep) * precisionStep);
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
  const loss = Math.max(0, -2 * Math.log10(first.n.toNumber()));
  const precision = Math.ceil(digits + guardDigits + loss);
  const at = conditions(arithmetic(precision), input);
  const values = coldElectronGas(arithmetic(precision), at.n, at.units);
  const coarser = conditions(arithmetic(precision - guardDigits / 2), input);
  const errors = difference(values, coldElectronGas(arithmetic(precision - guardDigits / 2), coarser.n, coarser.units));
  return {
    ...mapValues(values, (value) => value.toSignificantDigits(digits + 5)),
    netElectronDensity: at.netElectronDensity.toSignificantDigits(digits + 5),
    errors: mapValues(errors, (error) => error.toSignificantDigits(3, Decimal.ROUND_UP)),
    relativeError: worstRelativeError(values, errors, at),
    residual: values.electronDensity.minus(at.netElectronDensity).div(at.netElectronDensity).abs().toNumber(),
    workingPrecision: precision,
  };
}

function mapValues(values: ElectronGasValues, change: (value: Decimal) => Decimal): ElectronGasValues {
  const names = Object.keys(values) as (keyof ElectronGasValues)[];
  return Object.fromEntries(names.map((name) => [name, change(values[name])])) as unknown as ElectronGasValues;
}

function difference(a: ElectronGasValues, b: ElectronGasValues): ElectronGasValues {
  const names = Object.keys(a) as (keyof ElectronGasValues)[];
  return Object.fromEntries(
    names.map((name) => [name, a[name].isFinite() ? a[name].minus(b[name]).abs() : a[name].minus(a[name])]),
  ) as unknown as ElectronGasValues;
}

/** Largest error relative to max(|value|, natural scale). */
function worstRelativeError(values: ElectronGasValues, errors: ElectronGasValues, at: Conditions): number {
  const { netElectronDensity: n, temperature: T } = at;
  const scales: Partial<Record<keyof ElectronGasValues, Decimal>> = {};
  if (!T.isZero()) {
    const { dPdn, dPdT, heatCapacityDensity } = values;
    const mixed = Decimal.min(dPdn.div(T), dPdT.div(n));
    const eta = Decimal.max(values.degeneracyParameter, 0);
    scales.degeneracyParameter = new Decimal(1);
    scales.chemicalPotential = values.chemicalPotential.div(values.degeneracyParameter);
    scales.d2Pdn2 = dPdn.div(n);
    scales.d2PdndT = mixed;
    scales.d3PdndT2 = mixed.div(T);
    scales.d2PdT2 = dPdT.div(T);
    scales.d2sdT2 = heatCapacityDensity.div(T).div(T).div(eta.times(eta).plus(1));
  }
  let worst = 0;
  for (const name of Object.keys(values) as (keyof ElectronGasValues)[]) {
    const scale = Decimal.max(values[name].abs(), scales[name]?.abs() ?? 0);
    if (scale.isZero() || !scale.isFinite()) continue;
    worst = Math.max(worst, errors[name].div(scale).toNumber());
  }
  return worst;
}
