/**
 * Exchange and correlation of the electrons: F = -N_e (e^2/a_e) g(t, rho), t = T/T_F with the non-relativistic T_F,
 *
 *     g = (a + b r_s^(1/2) + c r_s)/(1 + d r_s^(1/2) + e r_s) + a(t) [Phi(x) - 1].
 *
 * First part: free energy of the uniform, unpolarised electron gas from quantum Monte Carlo, Groth, Dornheim,
 * Sjostrom, Malone, Foulkes & Bonitz 2017, Phys. Rev. Lett. 119, 135001. Its exchange function a(t): Perrot &
 * Dharma-wardana 1984, Phys. Rev. A 30, 2619. (Both from memory; a(t) is within 0.75 % of the exact integral in the
 * tests; the rest gives the known limits of weak coupling and of T = 0.) Second part: exchange made relativistic by
 * the factor of exchange-relativity.ts, exact in first order at T = 0. Correlation is left non-relativistic.
 *
 * Range: the fit was made for r_s = 0.1 ... 20 and t up to 8, with right limits on either side, except that below r_s =
 * 0.1 its correlation goes like r_s^(-1/2) instead of ln r_s (small beside exchange there). For kT > m c^2 the formula
 * is not derived; exchange is then of order alpha of a non-degenerate gas. Heat capacities of such fits are less
 * certain than energies (Karasiev, Trickey & Dufty 2019, Phys. Rev. B 99, 195134, from memory).
 *
 * The energy carries no T, so members in T are those of g in t: exactly zero at T = 0, and never a difference.
 */
import {
  addScaled,
  divide,
  divideSingle,
  lift,
  multiplyDensity,
  multiplySingle,
  NATURAL_LENGTH,
  SINGLE_LENGTH,
  setSinglePower,
} from "../numerics/natural.js";
import { exchangeRelativity } from "./exchange-relativity.js";
import { addExchangeSecondOrder } from "./exchange-second-order.js";
import { POINT_ELECTRON_ENERGY, POINT_RS, POINT_T } from "./slots.js";

/** Coefficients {n0, n2, n3, n4, d2, d4} of (n0 + n2 t^2 + n3 t^3 + n4 t^4)/(1 + d2 t^2 + d4 t^4). */
const ofA: readonly number[] = [
  0.610887 * 0.75,
  0.610887 * 3.04363,
  0.610887 * -0.09227,
  0.610887 * 1.7035,
  8.31051,
  5.1105,
];
/** The last one makes b the law of Debye & Hueckel at large t: (3/2)^(1/2) n4/lambda, lambda = (4/(9 pi))^(1/3). */
const ofB: readonly number[] = [
  0.3436902,
  7.82159531356,
  0,
  0.300483986662,
  15.8443467125,
  /* @__PURE__ */ debyeHueckelLimit(0.300483986662),
];
const ofD: readonly number[] = [0.72700876, 2.38264734144, 0, 0.30221237251, 4.39347718395, 0.729951339845];
const ofE: readonly number[] = [0.25388214, 0.815795138599, 0, 0.0646844410481, 15.0984620477, 0.230761357474];

/** Functions of t: tanh(1/t), tanh(t^(-1/2)), a, b, c, d, e. */
const tanhInverse = new Float64Array(SINGLE_LENGTH);
const tanhRoot = new Float64Array(SINGLE_LENGTH);
const a = new Float64Array(SINGLE_LENGTH);
const b = new Float64Array(SINGLE_LENGTH);
const c = new Float64Array(SINGLE_LENGTH);
const d = new Float64Array(SINGLE_LENGTH);
const e = new Float64Array(SINGLE_LENGTH);
const top = new Float64Array(SINGLE_LENGTH);
const bottom = new Float64Array(SINGLE_LENGTH);
const density = new Float64Array(SINGLE_LENGTH);
const relativity = new Float64Array(SINGLE_LENGTH);
const exchange = new Float64Array(NATURAL_LENGTH);
const term = new Float64Array(NATURAL_LENGTH);
const numerator = new Float64Array(NATURAL_LENGTH);
const denominator = new Float64Array(NATURAL_LENGTH);

/** Adds exchange and correlation to the natural derivatives of F in (rho, T), erg/g; T = 0 allowed. */
export function addExchangeCorrelation(out: Float64Array, order: 2 | 3, point: Float64Array): void {
  if (order === 3) {
    addByAlgebra(out, order, point);
    return;
  }
  exchangeRelativity(relativity, order, point);
  addExchangeSecondOrder(out, point, relativity, ofB);
}

/** The formula as printed, by the algebra of natural derivatives; order 2 for comparison with the flat form. */
export function addByAlgebra(out: Float64Array, order: 2 | 3, point: Float64Array): void {
  const rs = point[POINT_RS]!;
  const rootRs = Math.sqrt(rs);
  exchangeRelativity(relativity, order, point);
  setTemperatureFunctions(order, point);
  // Functions of t ~ T rho^(-2/3) times powers of density, r_s ~ rho^(-1/3).
  lift(exchange, order, -2 / 3, a);
  density[0] = rootRs;
  density[1] = -1 / 6;
  setSinglePower(density);
  lift(term, order, -2 / 3, b);
  multiplyDensity(numerator, order, density, term);
  lift(term, order, -2 / 3, d);
  multiplyDensity(denominator, order, density, term);
  density[0] = rs;
  density[1] = -1 / 3;
  setSinglePower(density);
  lift(term, order, -2 / 3, c);
  multiplyDensity(term, order, density, term);
  addScaled(numerator, order, 1, term);
  lift(term, order, -2 / 3, e);
  multiplyDensity(term, order, density, term);
  addScaled(denominator, order, 1, term);
  addScaled(numerator, order, 1, exchange);
  denominator[0] = 1 + denominator[0]!;
  divide(term, order, numerator, denominator);
  multiplyDensity(exchange, order, relativity, exchange);
  addScaled(term, order, 1, exchange);
  density[0] = -point[POINT_ELECTRON_ENERGY]!;
  density[1] = 1 / 3;
  setSinglePower(density);
  multiplyDensity(term, order, density, term);
  addScaled(out, order, 1, term);
}

/** a, b, c, d, e with derivatives t^k d^k/dt^k. */
function setTemperatureFunctions(order: 2 | 3, point: Float64Array): void {
  const t = point[POINT_T]!;
  // Beyond 800 tanh is 1 and exp(-2v) v^4 is 0 in doubles: the clamp keeps 0 times infinity away.
  const v = t > 1 / 800 ? 1 / t : 800;
  tanhInverse[0] = v;
  setTanh(tanhInverse, order, -1);
  tanhRoot[0] = t > 1 / 640_000 ? 1 / Math.sqrt(t) : 800;
  setTanh(tanhRoot, order, -0.5);
  setRational(a, order, ofA, point);
  multiplySingle(a, order, a, tanhInverse);
  setRational(b, order, ofB, point);
  multiplySingle(b, order, b, tanhRoot);
  setRational(d, order, ofD, point);
  multiplySingle(d, order, d, tanhRoot);
  setRational(e, order, ofE, point);
  multiplySingle(e, order, e, tanhInverse);
  // c/e = 0.8759442 - 0.230130843551 exp(-1/t).
  const part = -0.230130843551 * Math.exp(-v);
  top[0] = 0.8759442 + part;
  top[1] = part * v;
  top[2] = part * v * (v - 2);
  top[3] = part * v * (v * (v - 6) + 6);
  top[4] = part * v * (v * (v * (v - 12) + 36) - 24);
  multiplySingle(c, order, top, e);
}

/** out[0] = v becomes tanh(v) as a function of t, v = t^p: the chain rule with tanh' = 1 - tanh^2. */
function setTanh(out: Float64Array, order: 2 | 3, p: number): void {
  const v = out[0]!;
  const lost = Math.expm1(-2 * v);
  const sum = 2 + lost; // 1 + exp(-2v)
  const tanh = -lost / sum;
  const square = (4 * Math.exp(-2 * v)) / (sum * sum); // 1 - tanh^2
  // v^k d^k tanh/dv^k.
  const v1 = square * v;
  const v2 = -2 * tanh * v * v1;
  out[0] = tanh;
  out[1] = p * v1;
  out[2] = p * p * v2 + p * (p - 1) * v1;
  if (order === 2) return;
  const v3 = v1 * v * v * (6 * tanh * tanh - 2);
  const v4 = v1 * v * v * v * tanh * (16 - 24 * tanh * tanh);
  const p1 = p * (p - 1);
  out[3] = p * p * p * v3 + 3 * p * p1 * v2 + p1 * (p - 2) * v1;
  out[4] = p * p * p * p * v4 + 6 * p * p * p1 * v3 + p1 * (7 * p - 11) * p * v2 + p1 * (p - 2) * (p - 3) * v1;
}

/** out = rational function of t with the given coefficients (the order as at {@link ofA}). */
function setRational(out: Float64Array, order: 2 | 3, coefficients: readonly number[], point: Float64Array): void {
  const t = point[POINT_T]!;
  const t2 = t * t;
  const n2 = coefficients[1]! * t2;
  const n3 = coefficients[2]! * t2 * t;
  const n4 = coefficients[3]! * t2 * t2;
  const d2 = coefficients[4]! * t2;
  const d4 = coefficients[5]! * t2 * t2;
  top[0] = coefficients[0]! + n2 + n3 + n4;
  top[1] = 2 * n2 + 3 * n3 + 4 * n4;
  top[2] = 2 * n2 + 6 * n3 + 12 * n4;
  top[3] = 6 * n3 + 24 * n4;
  top[4] = 24 * n4;
  bottom[0] = 1 + d2 + d4;
  bottom[1] = 2 * d2 + 4 * d4;
  bottom[2] = 2 * d2 + 12 * d4;
  bottom[3] = 24 * d4;
  bottom[4] = 24 * d4;
  divideSingle(out, order, top, bottom);
}

function debyeHueckelLimit(n4: number): number {
  return (Math.sqrt(1.5) * n4) / Math.cbrt(4 / (9 * Math.PI));
}
