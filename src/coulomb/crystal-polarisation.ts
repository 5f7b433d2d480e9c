/**
 * Polarisation of the electrons by a crystal of ions.
 *
 *     f_ie = -f_inf(x) Gamma {1 + A(x) [Q(theta)/Gamma]^s}        per ion in kT
 *     Q = {ln[1 + e^y]/ln[e - (e - 2) e^(-y)]}^(1/2),  y = (0.205 theta)^2
 *
 * Potekhin & Chabrier 2000, Phys. Rev. E 62, 8554, with Q of Potekhin & Chabrier 2010, Contrib. Plasma Phys. 50, 82
 * (coefficients from memory; f_inf confirmed to 2-4 % by an independent lattice sum for x_r >= 0.3 and Z <= 30).
 * With Q -> 0.205 theta at low temperature, (Q/Gamma)^s = q^s H, q = 0.205 theta/Gamma a power of density and H -> 1: so
 * the term is a ground state -f_inf E (1 + A q^s), E = Gamma kT, and a thermal part -f_inf E A q^s (H - 1), which vanishes.
 */
import {
  addScaled,
  divideSingle,
  lift,
  multiplyDensity,
  multiplySingle,
  NATURAL_LENGTH,
  raiseSingle,
  SINGLE_LENGTH,
  setSinglePower,
} from "../numerics/natural.js";
import type { Order } from "../thermodynamics/free-energy.js";
import {
  ION_A3,
  ION_B2,
  ION_B3,
  ION_B4,
  ION_F_INF,
  ION_GAMMA,
  ION_LOG_Q,
  ION_S,
  ION_THETA,
  ION_X,
  POINT_CUBE_ROOT,
  POINT_LOG_DENSITY,
  POINT_ROOT,
  POINT_TEMPERATURE,
  POINT_X,
} from "./slots.js";
import type { CoulombSpecies } from "./species.js";

const energy = new Float64Array(SINGLE_LENGTH); // -f_inf E
const ratio = new Float64Array(SINGLE_LENGTH); // A q^s, then -f_inf E A q^s
const under = new Float64Array(SINGLE_LENGTH);
const power = new Float64Array(SINGLE_LENGTH);
const thermal = new Float64Array(SINGLE_LENGTH); // H - 1, in T rho^(-1/2)
const product = new Float64Array(NATURAL_LENGTH);

/** Adds the term of one species to the natural derivatives of F in (rho, T), erg/g. */
export function addCrystalPolarisation(
  out: Float64Array,
  order: Order,
  point: Float64Array,
  ion: Float64Array,
  species: CoulombSpecies,
): void {
  if (order === 2) addSecondOrder(out, point, ion, species);
  else addByAlgebra(out, order, point, ion, species);
}

/**
 * Order 2 written out, a third of the time of the algebra. With D = rho d/drho: D ln of the energy e = -f_inf E is
 * (1 - v)/3, v = w/(1 + w), w = b2/x^2; that of A is (2/3)(m - k), m = a3 x^2/(b3 + a3 x^2), k = b4 x^2/(1 + b4 x^2);
 * that of q^s is s/6; and rho^2 d^2 = D^2 - D.
 */
function addSecondOrder(out: Float64Array, point: Float64Array, ion: Float64Array, species: CoulombSpecies): void {
  const x = point[POINT_X]!;
  const x2 = x * x;
  const w = ion[ION_B2]! / x2;
  const v = w / (1 + w);
  const e =
    -species.ionsBoltzmann *
    ion[ION_X]! *
    ion[ION_GAMMA]! *
    point[POINT_CUBE_ROOT]! *
    ion[ION_F_INF]! *
    Math.sqrt(1 + w);
  const slope = (1 - v) / 3;
  const bend = (2 / 9) * v * (1 - v);
  const over = ion[ION_B3]! + ion[ION_A3]! * x2;
  const below = 1 + ion[ION_B4]! * x2;
  const m = (ion[ION_A3]! * x2) / over;
  const k = (ion[ION_B4]! * x2) / below;
  const s = ion[ION_S]!;
  const g = ((e * over) / below) * Math.exp(s * (ion[ION_LOG_Q]! + point[POINT_LOG_DENSITY]! / 6));
  const slopeG = slope + (2 / 3) * (m - k) + s / 6;
  const bendG = bend + (4 / 9) * (m * (1 - m) - k * (1 - k));
  const g1 = g * slopeG;
  const g2 = g * (slopeG * slopeG + bendG - slopeG);
  out[0]! += e + g;
  out[1]! += e * slope + g1;
  out[3]! += e * (slope * slope + bend - slope) + g2;
  if (point[POINT_TEMPERATURE] === 0) return;
  const theta = point[POINT_ROOT]! * ion[ION_THETA]!;
  if (0.205 * 0.205 * theta * theta > 800) return; // H = 1 to rounding, and 0 times infinity must not arise
  fillThermal(2, point, ion);
  const h0 = thermal[0]!;
  const h1 = thermal[1]!;
  const h2 = thermal[2]!;
  // theta^-1 ~ T rho^(-1/2).
  out[0]! += g * h0;
  out[1]! += g1 * h0 - 0.5 * g * h1;
  out[2]! += g * h1;
  out[3]! += g2 * h0 - g1 * h1 + g * (0.25 * h2 + 0.75 * h1);
  out[4]! += g1 * h1 - 0.5 * g * (h1 + h2);
  out[5]! += g * h2;
}

/** Any order, by the algebra of natural derivatives; exported to test the other against. */
export function addByAlgebra(
  out: Float64Array,
  order: Order,
  point: Float64Array,
  ion: Float64Array,
  species: CoulombSpecies,
): void {
  const x = point[POINT_X]!;
  const x2 = x * x;
  const w = ion[ION_B2]! / x2;
  // Functions of density alone; x ~ rho^(1/3).
  energy[0] = w;
  energy[1] = -2 / 3;
  setSinglePower(energy);
  energy[0]! += 1;
  raiseSingle(energy, order, energy, 0.5, ion[ION_F_INF]! * Math.sqrt(1 + w)); // the factor f_INF scales all members
  const lattice = species.ionsBoltzmann * ion[ION_X]! * ion[ION_GAMMA]! * point[POINT_CUBE_ROOT]!;
  power[0] = -lattice;
  power[1] = 1 / 3;
  setSinglePower(power);
  multiplySingle(energy, order, energy, power);

  ratio[0] = ion[ION_A3]! * x2;
  ratio[1] = 2 / 3;
  setSinglePower(ratio);
  ratio[0]! += ion[ION_B3]!;
  under[0] = ion[ION_B4]! * x2;
  under[1] = 2 / 3;
  setSinglePower(under);
  under[0]! += 1;
  divideSingle(ratio, order, ratio, under);
  const s = ion[ION_S]!;
  power[0] = Math.exp(s * (ion[ION_LOG_Q]! + point[POINT_LOG_DENSITY]! / 6));
  power[1] = s / 6;
  setSinglePower(power);
  multiplySingle(ratio, order, ratio, power);
  multiplySingle(ratio, order, energy, ratio);
  out[0]! += energy[0]! + ratio[0]!;
  out[1]! += energy[1]! + ratio[1]!;
  out[3]! += energy[2]! + ratio[2]!;
  if (order === 3) out[6]! += energy[3]! + ratio[3]!;
  if (point[POINT_TEMPERATURE] === 0) return;
  const theta = point[POINT_ROOT]! * ion[ION_THETA]!;
  if (0.205 * 0.205 * theta * theta > 800) return; // H = 1 to rounding, and 0 times infinity must not arise
  fillThermal(order, point, ion);
  lift(product, order, -0.5, thermal);
  multiplyDensity(product, order, ratio, product);
  addScaled(out, order, 1, product);
}

/** H - 1 and its derivatives in T (theta^-1 ~ T rho^(-1/2)): ln H = (s/2) ln[num/(y den)], y ~ T^-2. */
function fillThermal(order: Order, point: Float64Array, ion: Float64Array): void {
  const theta = point[POINT_ROOT]! * ion[ION_THETA]!;
  const y = 0.205 * 0.205 * theta * theta;
  const q = Math.exp(-y);
  const c = 1 - 2 / Math.E;
  const p = 1 / (1 + q);
  const log1q = Math.log1p(q);
  const num = y + log1q; // ln(1 + e^y)
  const log2 = Math.log1p(-c * q);
  const den = 1 + log2; // ln(e - (e-2) e^-y)
  const b = (c * q) / (1 - c * q);
  // y^k d^k/dy^k of num and den.
  const n2 = y * y * p * (1 - p);
  const d1 = y * b;
  const d2 = -y * y * b * (1 + b);
  // ... of ln(num/y) and ln den. The first starts as a difference that vanishes like e^-y.
  const m1 = -(y * (q * p) + log1q) / num;
  const m2 = n2 / num - m1 * (2 + m1);
  const e1 = d1 / den;
  const e2 = d2 / den - e1 * e1;
  const half = 0.5 * ion[ION_S]!;
  thermal[0] = Math.expm1(half * Math.log1p((log1q / y - log2) / den)); // log2 < 0: nothing cancels
  const h = 1 + thermal[0]!;
  const l1 = half * (m1 - e1);
  const l2 = half * (m2 - e2);
  const k1 = h * l1;
  const k2 = h * (l2 + l1 * l1);
  // From y to T: exponent -2.
  thermal[1] = -2 * k1;
  thermal[2] = 4 * k2 + 6 * k1;
  if (order === 2) return;
  const n3 = y * n2 * (1 - 2 * p);
  const n4 = y * y * n2 * (1 - 6 * p * (1 - p));
  const d3 = y * y * y * b * (1 + b) * (1 + 2 * b);
  const d4 = -y * y * y * y * b * (1 + b) * (1 + 6 * b * (1 + b));
  const g1 = 1 + m1;
  const g2 = n2 / num - g1 * g1;
  const g3 = n3 / num - 2 * g2 * g1 - g1 * (n2 / num);
  const g4 = n4 / num - 3 * g3 * g1 - 3 * g2 * (n2 / num) - g1 * (n3 / num);
  const e3 = d3 / den - 2 * e2 * e1 - e1 * (d2 / den);
  const e4 = d4 / den - 3 * e3 * e1 - 3 * e2 * (d2 / den) - e1 * (d3 / den);
  const l3 = half * (g3 - 2 - e3);
  const l4 = half * (g4 + 6 - e4);
  const k3 = h * (l3 + 3 * l1 * l2 + l1 * l1 * l1);
  const k4 = h * (l4 + 4 * l1 * l3 + 3 * l2 * l2 + 6 * l1 * l1 * l2 + l1 * l1 * l1 * l1);
  thermal[3] = -8 * k3 - 36 * k2 - 24 * k1;
  thermal[4] = 16 * k4 + 144 * k3 + 300 * k2 + 120 * k1;
}
