/**
 * Quantum correction of the ions in the liquid: free energy per ion and kT beyond the classical one, by theta =
 * hbar omega_p/kT alone. All three forms begin with theta^2/24, which is exact (Wigner 1932, Phys. Rev. 40, 749; the
 * Laplacian of the Coulomb energy in a uniform background is constant). What depends on Gamma besides is left out:
 * 0.5 % of the kinetic energy at Gamma = 170, 1 to 4 % at Gamma = 20 to 100 (path-integral Monte Carlo,
 * test/coulomb/liquid-quantum.test.ts). Nuclei are distinguishable: no exchange.
 */
import { horner } from "../numerics/natural.js";
import { logarithmEntropy } from "./liquid.js";
import { ION_THETA, ION_X, POINT_ROOT } from "./slots.js";

/**
 * Adds x_j f(theta_j) of one species, f = sum g_i [x_i/2 + ln(1 - exp(-x_i)) - ln x_i], x_i = w_i theta, i = 1, 2.
 *
 * Own form: two oscillators per ion, three in number (g_1 + g_2 = 3) and with g_1 w_1^2 + g_2 w_2^2 = 1, so theta^2/24 is
 * exact; fitted to {@link addBaikoYakovlev}, whose energy it follows to 0.17 % for theta <= 11 and 0.5 % at 12. Its
 * heat capacity falls to -3 k and never below, so the liquid's stays positive where the classical ions have 3 k (Gamma
 * above about 100) and turns negative in weakly coupled matter beyond theta = 15, which is refused as unstable. The
 * zero-point energy is 0.749 hbar omega_p, 2.4 % below that of the bcc crystal. Beyond theta = 12 it extrapolates.
 * Rounding, worst at theta = 1: 8e-15 of each member up to the second, third 2e-13, fourth 1e-12.
 *
 * @param u - natural members in theta, u[k] += x_j theta^k f^(k), and the entropy u[5] += x_j (theta f' - f)
 * @param order - 2 leaves u[3] and u[4] alone
 * @param point - record of the point, rho^(1/2)/T in it
 * @param ion - record of the species, x_j and theta_j T/rho^(1/2) in it
 */
export function addTwoOscillators(u: Float64Array, order: 2 | 3, point: Float64Array, ion: Float64Array): void {
  const theta = point[POINT_ROOT]! * ion[ION_THETA]!;
  const x = ion[ION_X]!;
  if (theta < 1) {
    // One series in y = theta^2 for both: the closed form loses theta^2 of its digits. Value V and V', V''/2 by Horner's
    // scheme; theta d/dtheta is 2 y d/dy.
    const y = theta * theta;
    const c = x * y;
    const coefficients = series.value;
    let value = 0;
    let slope = 0;
    let bend = 0;
    for (let n = (y < 0.1 ? SHORT_SERIES : coefficients.length) - 1; n >= 0; n--) {
      bend = bend * y + slope;
      slope = slope * y + value;
      value = value * y + coefficients[n]!;
    }
    const first = 2 * y * slope;
    u[0]! += c * value;
    u[1]! += c * (2 * value + first);
    u[2]! += c * (2 * value + 5 * first + 8 * y * y * bend);
    u[5]! += c * (value + first);
    if (order === 2) return;
    at[0] = y;
    horner(series.third, at);
    u[3]! += c * at[1]!;
    horner(series.fourth, at);
    u[4]! += c * at[1]!;
    return;
  }
  for (let i = 0; i < 4; i += 2) {
    const g = x * oscillators[i]!;
    const frequency = oscillators[i + 1]! * theta;
    const decay = Math.exp(-frequency);
    const lost = frequency < 0.7 ? -Math.expm1(-frequency) : 1 - decay;
    const n = decay / lost; // Bose occupation
    const logarithm = Math.log(lost / frequency);
    const energy = frequency * n;
    const heat = energy * (frequency + energy);
    u[0]! += g * (0.5 * frequency + logarithm);
    u[1]! += g * (0.5 * frequency + energy - 1);
    u[2]! += g * (1 - heat);
    u[5]! += g * (energy - 1 - logarithm);
    if (order === 2) continue;
    // Factors in this order: heat vanishes before frequency^2 can overflow.
    u[3]! += g * (heat * frequency * (1 + 2 * n) - 2);
    u[4]! += g * (6 - heat * frequency * (1 + 6 * n * (1 + n)) * frequency);
  }
}

/**
 * Adds x_j theta_j^2/24 of one species: first order in hbar^2 alone, exact as theta -> 0 (Wigner 1932, Phys. Rev. 40,
 * 749). For theta < 1: the energy is 1.0 % high at theta = 1 against harmonic lattice dynamics, 4 % at 2; the heat
 * capacity of the ions turns negative at theta = 6.4 (Gamma = 175). Parameters as {@link addTwoOscillators}.
 */
export function addWignerKirkwood(u: Float64Array, _order: 2 | 3, point: Float64Array, ion: Float64Array): void {
  const theta = point[POINT_ROOT]! * ion[ION_THETA]!;
  const value = (ion[ION_X]! * theta * theta) / 24;
  u[0]! += value;
  u[1]! += 2 * value;
  u[2]! += 2 * value; // third and fourth member: zero
  u[5]! += value;
}

/**
 * Adds x_j f(theta_j) of one species, f = Q1 [h - Q2 ln(1 + h/Q2)] + (Q3/2) ln(1 + h^2/Q4), h = theta/sqrt 3, with
 * Q3 = (1/4 - Q1/Q2) Q4, which makes theta^2/24 exact.
 *
 * Baiko & Yakovlev 2019, Mon. Not. R. Astron. Soc. 490, 5839, a fit to path-integral Monte Carlo (coefficients from
 * memory; own path-integral values confirm them to 0.5 % at Gamma = 170). For theta <= 12: beyond, its heat capacity falls
 * without stop and that of the ions turns negative at theta = 14.65 (Gamma = 175). Parameters as
 * {@link addTwoOscillators}. Rounding: 3e-15 of each member.
 */
export function addBaikoYakovlev(u: Float64Array, order: 2 | 3, point: Float64Array, ion: Float64Array): void {
  const q1 = 5.994;
  const q2 = 70.3;
  const q4 = 22.7;
  const q3 = (0.25 - q1 / q2) * q4;
  const h = (point[POINT_ROOT]! * ion[ION_THETA]!) / Math.sqrt(3);
  const x = ion[ION_X]!;
  // The same two shapes as in the third and fourth part of the classical liquid.
  const y = h / q2;
  const saturation = 1 / (q2 + h);
  const zA = h * saturation;
  const zB = (h * h) / (q4 + h * h);
  const eA = q1 * h * zA;
  const eB = q3 * zB;
  at[0] = y;
  if (y < 0.05) horner(logarithmEntropy, at);
  const sA = q1 * q2 * (y < 0.05 ? y * y * at[1]! : Math.log1p(y) - zA);
  const sB = eB - 0.5 * q3 * Math.log1p((h * h) / q4);
  const dA = eA * q2 * saturation;
  u[0]! += x * (eA - sA + (eB - sB));
  u[1]! += x * (eA + eB);
  u[2]! += x * (dA + eB * (1 - 2 * zB));
  u[5]! += x * (sA + sB);
  if (order === 2) return;
  u[3]! += x * (2 * eB * zB * (4 * zB - 3) - 2 * zA * dA);
  u[4]! += x * (6 * zA * zA * dA + 6 * eB * zB * (8 * zB * (1 - zB) - 1));
}

/** Argument and value of a series. */
const at = new Float64Array(2);

/** g_1, w_1, g_2, w_2 of the two oscillators. */
const oscillators: Float64Array = /* @__PURE__ */ twoOscillators(1.17225, 0.861406);

function twoOscillators(g1: number, w1: number): Float64Array {
  const g2 = 3 - g1;
  return Float64Array.of(g1, w1, g2, Math.sqrt((1 - g1 * w1 * w1) / g2));
}

/** Terms that leave 1e-19 of the second member at theta^2 = 0.1. */
const SHORT_SERIES = 8;

/** Coefficients of theta^2, theta^4, ... over theta^2, of the value and of its third and fourth derivatives. */
interface Series {
  readonly value: readonly number[];
  readonly third: readonly number[];
  readonly fourth: readonly number[];
}

/**
 * ln[2 sinh(x/2)/x] = sum B_n x^n/(n n!), n = 2, 4, ... (Abramowitz & Stegun 1964, 4.5.64 integrated; from memory). 13
 * terms leave 1e-17 of the fourth member at theta = 1.
 */
const series: Series = /* @__PURE__ */ seriesOf(oscillators);

function seriesOf(pair: Float64Array): Series {
  const bernoulli = [
    1 / 6,
    -1 / 30,
    1 / 42,
    -1 / 30,
    5 / 66,
    -691 / 2730,
    7 / 6,
    -3617 / 510,
    43867 / 798,
    -174611 / 330,
    854513 / 138,
    -236364091 / 2730,
    8553103 / 6,
  ];
  let factorial = 1;
  const value = bernoulli.map((b, i) => {
    const n = 2 * i + 2;
    factorial *= n * (n - 1);
    return (b / (n * factorial)) * (pair[0]! * pair[1]! ** n + pair[2]! * pair[3]! ** n);
  });
  const times = (factor: (n: number) => number): readonly number[] => value.map((c, i) => c * factor(2 * i + 2));
  return {
    value,
    third: times((n) => n * (n - 1) * (n - 2)),
    fourth: times((n) => n * (n - 1) * (n - 2) * (n - 3)),
  };
}
