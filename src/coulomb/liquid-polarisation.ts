/**
 * Ion-electron term of the liquid: the electrons' response to the ions of one species, Potekhin & Chabrier 2000, Phys.
 * Rev. E 62, 8554, section on the ion-electron term of the liquid (unchanged in their papers of 2010 and 2013). Per
 * ion,
 *
 *     f_ie = -Gamma_e [c_DH Gamma_e^(1/2) + c_TF a Gamma_e^nu g1 h1]
 *            / {1 + [b Gamma_e^(1/2) + a g2 Gamma_e^nu/r_s] h2}
 *     g1 = 1 + 0.78 (Gamma_e/Z)^(1/2)/[21 + Gamma_e (Z/r_s)^3]
 *     g2 = 1 + (Z - 1)/9 [1 + 1/(0.001 Z^2 + 2 Gamma_e)] r_s^3/(1 + 6 r_s^2)
 *     h1 = (1 + x^2/5)/(1 + 0.18 Z^(-1/4) x + 0.37 Z^(-1/2) x^2 + x^2/5),    h2 = (1 + x^2)^(-1/2)
 *
 * with the constants c_DH, c_TF, a, b, nu of species.ts. Weak coupling gives Debye & Hueckel's law of ions with
 * classical electrons, r_s -> 0 the Thomas-Fermi limit.
 *
 * Coefficients from memory, confirmed to 5 % by independent linear response at Gamma_e Z^(5/3) = 10 and 80, Z = 2, 6,
 * 26, x = 0.3, 1, 3, but for 25 % at 10, Z = 26, x = 0.3, where that calculation (degenerate electrons) does not hold.
 * Range: Z <= 30, full ionisation, and Z^(2/3) r_s < 0.25; linear response itself ends near 0.6.
 */
import {
  addScaled,
  divide,
  divideSingle,
  lift,
  multiply,
  multiplyDensity,
  NATURAL_LENGTH,
  SINGLE_LENGTH,
  setPower,
  setSinglePower,
} from "../numerics/natural.js";
import { addLiquidPolarisationSecondOrder } from "./liquid-polarisation-second-order.js";
import * as slot from "./slots.js";

/** h2 as a function of density: rho^i d^i h2/d rho^i, as are the next two. */
const lorentz = new Float64Array(SINGLE_LENGTH);
/** h2/r_s. */
const lorentzByRs = new Float64Array(SINGLE_LENGTH);
/** r_s^3/(1 + 6 r_s^2). */
const dilution = new Float64Array(SINGLE_LENGTH);

const single = new Float64Array(SINGLE_LENGTH);
const density = new Float64Array(SINGLE_LENGTH);
const factor = new Float64Array(NATURAL_LENGTH);
const term = new Float64Array(NATURAL_LENGTH);
const numerator = new Float64Array(NATURAL_LENGTH);
const denominator = new Float64Array(NATURAL_LENGTH);

/** The density functions all species share; once per point, before {@link addLiquidPolarisation}. */
export function preparePolarisation(order: 2 | 3, point: Float64Array): void {
  const x = point[slot.POINT_X]!;
  const rs = point[slot.POINT_RS]!;
  const x2 = x * x;
  const rest = 1 / (1 + x2);
  const w = x2 * rest; // D w = (2/3) w (1 - w), D = d/d ln rho, and 1 - w = rest
  const second = (-2 / 9) * w * rest; // D^2 ln h2; also of ln(h2/r_s)
  const third = (2 / 3) * second * (rest - w);
  lorentz[0] = Math.sqrt(rest);
  lorentz[1] = -w / 3;
  lorentz[2] = second;
  lorentz[3] = third;
  fromLogarithms(lorentz, order);
  lorentzByRs[0] = Math.sqrt(rest) / rs;
  lorentzByRs[1] = rest / 3;
  lorentzByRs[2] = second;
  lorentzByRs[3] = third;
  fromLogarithms(lorentzByRs, order);
  const rs2 = rs * rs;
  const left = 1 / (1 + 6 * rs2);
  const q = 6 * rs2 * left; // D q = -(2/3) q (1 - q), and 1 - q = left
  dilution[0] = rs * rs2 * left;
  dilution[1] = (2 / 3) * q - 1;
  dilution[2] = (-4 / 9) * q * left;
  dilution[3] = (8 / 27) * q * left * (left - q);
  fromLogarithms(dilution, order);
}

/**
 * f += x_j f_ie of one species, natural derivatives in (rho, 1/T). Shared functions as {@link preparePolarisation} of
 * the same point and order left them. T > 0: a liquid has no limit T = 0.
 */
export function addLiquidPolarisation(f: Float64Array, order: 2 | 3, point: Float64Array, ion: Float64Array): void {
  if (order === 2) addLiquidPolarisationSecondOrder(f, point, ion, lorentz, lorentzByRs, dilution);
  else addByAlgebra(f, order, point, ion);
}

/** The formula as printed, by the algebra of natural derivatives; order 2 for comparison with the flat form. */
export function addByAlgebra(f: Float64Array, order: 2 | 3, point: Float64Array, ion: Float64Array): void {
  setNumerator(order, point, ion);
  setDenominator(order, point, ion);
  divide(numerator, order, numerator, denominator);
  const share = -ion[slot.ION_X]!;
  const count = order === 2 ? 6 : NATURAL_LENGTH;
  for (let i = 0; i < count; i++) f[i]! += share * numerator[i]!;
}

/** c_DH Gamma_e^(3/2) + c_TF a h1 Gamma_e^(nu+1) [1 + w Gamma_e^(1/2)/(21 + Gamma_e (Z/r_s)^3)]. */
function setNumerator(order: 2 | 3, point: Float64Array, ion: Float64Array): void {
  const gamma = point[slot.POINT_GAMMA_E]!;
  const root = point[slot.POINT_ROOT_GAMMA_E]!;
  const rs = point[slot.POINT_RS]!;
  const x = point[slot.POINT_X]!;
  const p = ion[slot.ION_NU]! + 1;
  const power = gamma * Math.exp(ion[slot.ION_NU]! * point[slot.POINT_LOG_GAMMA_E]!);
  // 1/(21 + v), v = Gamma_e (Z/r_s)^3 ~ rho^(4/3)/T.
  const v = (gamma * ion[slot.ION_Z3]!) / (rs * rs * rs);
  single[0] = 1 / (21 + v);
  single[1] = -v;
  setReciprocal();
  lift(factor, order, 4 / 3, single);
  term[0] = ion[slot.ION_W]! * power * root;
  term[1] = (p + 0.5) / 3;
  term[2] = p + 0.5;
  setPower(term, order);
  multiply(numerator, order, factor, term);
  term[0] = power;
  term[1] = p / 3;
  term[2] = p;
  setPower(term, order);
  addScaled(numerator, order, 1, term);
  // c_TF a h1.
  const x2 = x * x;
  const linear = ion[slot.ION_H1]! * x;
  const square = ion[slot.ION_H2]! * x2;
  density[0] = 0.2 * x2;
  density[1] = 2 / 3;
  setSinglePower(density);
  density[0] = 1 + density[0]!;
  single[0] = 1 + linear + square;
  single[1] = linear / 3 + (2 / 3) * square;
  single[2] = (-2 / 9) * (linear + square);
  single[3] = (10 / 27) * linear + (8 / 27) * square;
  single[4] = 0; // a density function needs three
  density[4] = 0;
  divideSingle(density, order, density, single);
  const amplitude = ion[slot.ION_C_TF]!;
  for (let i = 0; i < 4; i++) density[i]! *= amplitude;
  multiplyDensity(numerator, order, density, numerator);
  term[0] = ion[slot.ION_C_DH]! * gamma * root;
  term[1] = 0.5;
  term[2] = 1.5;
  setPower(term, order);
  addScaled(numerator, order, 1, term);
}

/** 1 + b h2 Gamma_e^(1/2) + a (h2/r_s) g2 Gamma_e^nu. */
function setDenominator(order: 2 | 3, point: Float64Array, ion: Float64Array): void {
  const gamma = point[slot.POINT_GAMMA_E]!;
  const nu = ion[slot.ION_NU]!;
  const zeta = ion[slot.ION_ZETA]!;
  // g2 = 1 + zeta dilution [1 + 1/(0.001 Z^2 + v)], v = 2 Gamma_e.
  single[0] = 1 / (ion[slot.ION_E0]! + 2 * gamma);
  single[1] = -2 * gamma;
  setReciprocal();
  single[0] = 1 + single[0]!;
  lift(factor, order, 1 / 3, single);
  for (let i = 0; i < 4; i++) density[i] = zeta * dilution[i]!;
  multiplyDensity(factor, order, density, factor);
  factor[0] = 1 + factor[0]!;
  term[0] = ion[slot.ION_A]! * Math.exp(nu * point[slot.POINT_LOG_GAMMA_E]!);
  term[1] = nu / 3;
  term[2] = nu;
  setPower(term, order);
  multiply(factor, order, factor, term);
  multiplyDensity(denominator, order, lorentzByRs, factor);
  term[0] = ion[slot.ION_B]! * point[slot.POINT_ROOT_GAMMA_E]!;
  term[1] = 1 / 6;
  term[2] = 0.5;
  setPower(term, order);
  multiplyDensity(term, order, lorentz, term);
  addScaled(denominator, order, 1, term);
  denominator[0] = 1 + denominator[0]!;
}

/** single = q = 1/(c + v) as a function of v, from q and -v in its first slots: v^k q^(k) = k! (-v q)^k q. */
function setReciprocal(): void {
  const q = single[0]!;
  const z = single[1]! * q;
  single[1] = q * z;
  single[2] = 2 * q * z * z;
  single[3] = 6 * q * z * z * z;
  single[4] = 24 * q * z * z * z * z;
}

/** r = {f, D ln f, D^2 ln f, D^3 ln f}, D = d/d ln rho, becomes {f, rho f', rho^2 f'', rho^3 f'''}. */
function fromLogarithms(r: Float64Array, order: 2 | 3): void {
  const f = r[0]!;
  const l1 = r[1]!;
  const l2 = r[2]!;
  r[1] = l1 * f;
  r[2] = (l1 * (l1 - 1) + l2) * f;
  if (order === 3) r[3] = (l1 * (l1 - 1) * (l1 - 2) + 3 * l2 * (l1 - 1) + r[3]!) * f;
}
