/**
 * The pressure of one species of fermions and its derivatives, by plain quadrature of the definition: what the nodes of a
 * species table hold. Shares no method with fermi-gas/.
 *
 * With x = (E - 1)/theta, f = 1/(e^(x - eta) + 1), g = f (1 - f) and W(E) = p^3/3, in units of m c^2/(pi^2 lambdabar^3),
 *
 *     P = int K_0 f dx,   K_0 = theta W
 *     K_1 = theta W + theta^2 x W'                         theta d/dtheta of K_0 at fixed x
 *     K_2 = theta W + 3 theta^2 x W' + theta^3 x^2 W''     the same once more
 *
 * and P_ij = d^(i+j)P/(d eta^i d ln theta^j) is the integral of K_j f, of K_j g and, by parts, of (dK_j/dx) g for i = 0, 1, 2.
 * Every kernel is positive: no derivative loses a digit in degenerate matter. The variable of integration is the rapidity w,
 * E = cosh w, where W is entire; panels of 20 Gauss points are short in w and in x, which keeps the poles of f at
 * x = eta +- i pi away.
 */
import { gaussRule } from "./gauss.js";

/** Numbers of {@link fillSpeciesIntegrals}: P_ij in slot 3 i + j, i, j = 0..2. */
export const INTEGRALS_LENGTH = 9;

/** Panels: length in x and in w at most, and points in each. Measured: 7e-15 in every integral. */
const longestX = 4;
const longestW = 1.2;
const rule = gaussRule(20);
/** The integrand at x = max(eta, 0) + this is below 1e-18 of the integral. */
const tail = 58;

/** Writes P_ij at eta <= 1000 and theta > 0 into `out`, in units of the species (m c^2/(pi^2 lambdabar^3) for two spin states). */
export function fillSpeciesIntegrals(eta: number, theta: number, out: Float64Array): void {
  out.fill(0);
  const end = Math.max(eta, 0) + tail;
  for (let w = 0, x = 0; x < end; ) {
    const next = Math.min(w + longestW, rapidity(theta * (x + longestX)));
    addPanel(eta, theta, w, next, out);
    w = next;
    x = kineticEnergy(w) / theta;
  }
}

function addPanel(eta: number, theta: number, low: number, high: number, out: Float64Array): void {
  for (let k = 0; k < rule.nodes.length; k++) {
    const half = Math.sinh(0.5 * (low + (high - low) * rule.nodes[k]!));
    const kinetic = 2 * half * half; // cosh w - 1 without cancellation
    const energy = 1 + kinetic;
    const p2 = kinetic * (energy + 1);
    const p = Math.sqrt(p2);
    const z = kinetic / theta - eta;
    // theta^k x^(k-1) times the (k-1)-th derivative of W, and of their derivatives by x
    const w0 = (theta * p * p2) / 3;
    const w1 = theta * kinetic * p * energy;
    const w2 = (theta * kinetic * kinetic * (2 * p2 + 1)) / p;
    const d1 = theta * theta * p * energy;
    const d2 = (theta * theta * kinetic * (2 * p2 + 1)) / p;
    const d3 = (theta * theta * kinetic * kinetic * energy * (2 * p2 - 1)) / (p * p2);
    const weight = ((high - low) * rule.weights[k]! * p) / theta; // dx = p dw/theta
    const e = Math.exp(-Math.abs(z));
    const wg = (weight * e) / ((1 + e) * (1 + e));
    const wf = (weight * (z > 0 ? e : 1)) / (1 + e);
    const k1 = w0 + w1;
    const k2 = w0 + 3 * w1 + w2;
    out[0]! += wf * w0;
    out[1]! += wf * k1;
    out[2]! += wf * k2;
    out[3]! += wg * w0;
    out[4]! += wg * k1;
    out[5]! += wg * k2;
    out[6]! += wg * d1;
    out[7]! += wg * (2 * d1 + d2);
    out[8]! += wg * (4 * d1 + 5 * d2 + d3);
  }
}

/** E - 1 = cosh w - 1 without cancellation. */
function kineticEnergy(w: number): number {
  const half = Math.sinh(0.5 * w);
  return 2 * half * half;
}

/** w of E - 1. */
const rapidity = (kinetic: number): number => 2 * Math.asinh(Math.sqrt(0.5 * kinetic));

/**
 * Derivatives of L = ln P from those of P, in place: nine numbers L_ij in slot 3 i + j.
 */
export function takeLogarithm(p: Float64Array): void {
  const scale = 1 / p[0]!;
  const value = Math.log(p[0]!);
  const b = p[1]! * scale;
  const bb = p[2]! * scale;
  const a = p[3]! * scale;
  const ab = p[4]! * scale;
  const abb = p[5]! * scale;
  const aa = p[6]! * scale;
  const aab = p[7]! * scale;
  const aabb = p[8]! * scale;
  const l20 = aa - a * a;
  const l11 = ab - a * b;
  const l02 = bb - b * b;
  const l21 = aab - 2 * a * l11 - b * l20 - a * a * b;
  const l12 = abb - 2 * b * l11 - a * l02 - a * b * b;
  const mixed = l20 * l02 + 2 * l11 * l11 + a * a * l02 + b * b * l20 + 4 * a * b * l11 + a * a * b * b;
  p[0] = value;
  p[1] = b;
  p[2] = l02;
  p[3] = a;
  p[4] = l11;
  p[5] = l12;
  p[6] = l20;
  p[7] = l21;
  p[8] = aabb - 2 * a * l12 - 2 * b * l21 - mixed;
}
