/**
 * How the departures from linear mixing change with the amount of each species; formulas and sources in mixing.ts.
 *
 * Both departures are N f(fractions) with N charged nuclei, homogeneous of degree one in the amounts Y_a: the derivative by
 * Y_a at fixed electron density is f plus N df/dY_a, and N d<Z^p>/dY_a = Z_a^p - <Z^p>. Species of one charge share it.
 */
import type { Species } from "../matter/composition.js";
import { chargeShares, type LiquidMixture, pairDeviation } from "./mixing.js";
import { POINT_GAMMA_E, POINT_LOG_GAMMA_E, POINT_ROOT_GAMMA_E } from "./slots.js";

/** N d/dY_a of the parameters of {@link LiquidMixture}. */
export interface LiquidMixtureTangent {
  /** Amplitude per charged nucleus, not its derivative. */
  readonly amplitude: number;
  /** d(N amplitude)/dY_a. */
  readonly amplitudeSlope: number;
  /** N d ln a/dY_a. */
  readonly logA: number;
  /** N d ln b/dY_a. */
  readonly logB: number;
  /** N d alpha/dY_a. */
  readonly alpha: number;
  /** N d beta/dY_a. */
  readonly beta: number;
  /** N d ln <Z^(5/3)>/dY_a. */
  readonly logCoupling: number;
}

/** A tangent for each charged species; undefined where all have one charge. `polarisable` as in `liquidMixture`. */
export function liquidMixtureTangents(
  charged: readonly Species[],
  polarisable: boolean,
): readonly LiquidMixtureTangent[] | undefined {
  const { shares } = chargeShares(charged);
  if (shares.length < 2) return undefined;
  const mean = (of: (z: number) => number): number =>
    shares.reduce((sum, { charge, fraction }) => sum + fraction * of(charge), 0);
  const third = (z: number): number => Math.cbrt(z);
  const first = mean((z) => z);
  const second = mean((z) => z * z);
  const coupling = mean((z) => z * third(z) ** 2);
  const five = (z: number): number => z * z * Math.sqrt(z);
  const unit = mean(five);
  const pureOf = polarisable ? (z: number): number => z * (z + 1) ** 1.5 : five;
  const squareOf = polarisable ? (z: number): number => z * z + z : (z: number): number => z * z;
  const square = mean(squareOf);
  const mixed = square ** 1.5 / Math.sqrt(first);
  const delta = (mean(pureOf) - mixed) / unit;
  const alpha = (second / (first * first)) ** -0.2;
  const top = 2.6 + 14 * delta ** 3;
  return charged.map(({ chargeNumber: z }): LiquidMixtureTangent => {
    const relative = z / first;
    const slope = pureOf(z) - mixed * ((1.5 * squareOf(z)) / square - 0.5 * relative); // of N unit delta
    const deltaSlope = (slope - delta * five(z)) / unit;
    const logBreadth = (z * z) / second + 1 - 2 * relative;
    const logA = ((42 * delta * delta) / top + 1 / (1 - delta)) * deltaSlope;
    return Object.freeze({
      amplitude: (unit * delta) / Math.sqrt(3),
      amplitudeSlope: slope / Math.sqrt(3),
      logA,
      logB: 2 * logBreadth + logA,
      alpha: -0.2 * alpha * logBreadth,
      beta: (0.3 * logBreadth) / alpha,
      logCoupling: (z * third(z) ** 2) / coupling - 1,
    });
  });
}

/**
 * Adds d(N f)/dY_a of the liquid's departure at fixed electron density, f as in `addMixture`: u[0] its value, u[1] Gamma_e
 * d/dGamma_e of it, u[5] the second less the first. Per nucleus and kT.
 */
export function addMixtureTangent(
  u: Float64Array,
  point: Float64Array,
  mixture: LiquidMixture,
  tangent: LiquidMixtureTangent,
): void {
  const { alpha, beta } = mixture;
  const logarithm = point[POINT_LOG_GAMMA_E]! + mixture.logCoupling; // ln G
  const power = Math.exp(alpha * logarithm);
  const p = 1 / (1 + mixture.a * power);
  const q = 1 / (1 + mixture.b * power);
  const logQ = Math.log1p(mixture.b * power);
  const weak = point[POINT_GAMMA_E]! * point[POINT_ROOT_GAMMA_E]! * p * Math.exp(-beta * logQ);
  // Changes of ln(a G^alpha), ln(b G^alpha), and of ln f at fixed amplitude; then D = d/d ln Gamma_e of the last.
  const logPower = tangent.alpha * logarithm + alpha * tangent.logCoupling;
  const ofA = tangent.logA + logPower;
  const ofB = tangent.logB + logPower;
  const change = -(1 - p) * ofA - tangent.beta * logQ - beta * (1 - q) * ofB;
  const slope =
    -alpha * p * (1 - p) * ofA -
    (1 - p) * tangent.alpha -
    tangent.beta * alpha * (1 - q) -
    beta * (alpha * q * (1 - q) * ofB + (1 - q) * tangent.alpha);
  const value = weak * (tangent.amplitudeSlope + tangent.amplitude * change);
  const first = alpha * (p + beta * q) * value + weak * tangent.amplitude * slope;
  u[0]! += value;
  u[1]! += first;
  u[5]! += first - value;
}

/** d(N f)/dY_a of the alloy's deviation for each charged species, in e^2/a_e. */
export function alloyTangents(charged: readonly Species[]): Float64Array {
  const { shares } = chargeShares(charged);
  const ofCharge = new Map<number, number>(shares.map(({ charge }) => [charge, 0]));
  const add = (charge: number, value: number): void => {
    ofCharge.set(charge, ofCharge.get(charge)! + value);
  };
  let sum = 0;
  for (let i = 0; i < shares.length; i++) {
    const light = shares[i]!;
    for (let j = i + 1; j < shares.length; j++) {
      const heavy = shares[j]!;
      const y = heavy.fraction / (light.fraction + heavy.fraction);
      const unit = light.charge * Math.cbrt(light.charge) ** 2;
      const { value, slope } = pairDeviation(heavy.charge / light.charge, y);
      sum += unit * light.fraction * heavy.fraction * value;
      add(light.charge, unit * (heavy.fraction * value - light.fraction * y * slope));
      add(heavy.charge, unit * light.fraction * (value + (1 - y) * slope));
    }
  }
  return Float64Array.from(charged, ({ chargeNumber }) => ofCharge.get(chargeNumber)! - sum);
}
