/**
 * The pressure of one species of fermions and its derivatives, by plain quadrature of the definition: what the nodes of
 * a species table hold. Shares no method with fermi-gas/.
 *
 * With x = (E - 1)/theta, f = 1/(e^(x - eta) + 1) and W(E) = p^3/3, in units of m c^2/(pi^2 lambdabar^3),
 *
 *     P = int K_0 f dx,   K_0 = theta W
 *
 * and P_ij = d^(i+j)P/(d eta^i d ln theta^j) = int K_j d^i f/d eta^i dx, K_j = (theta d/d theta)^j K_0 at fixed x.
 *
 * Kernels: with u = theta x = E - 1 and c = u/(u + 2), u dW/du = 3/2 (1 + c) W and u dc/du = c (1 - c), so that K_j =
 * theta W q_j(c),
 *
 *     q_0 = 1,   q_(j+1) = q_j + 3/2 (1 + c) q_j + c (1 - c) q_j',
 *     x dK_j/dx = theta W (q_(j+1) - q_j),   x^2 d2K_j/dx2 = theta W (q_(j+2) - 3 q_(j+1) + 2 q_j).
 *
 * Up to two derivatives by eta are moved to the kernel by parts: the kernels are positive, and up to i = 3 so is every
 * integrand, so that no derivative loses a digit in degenerate matter. The others act on g = df/d eta = f (1 - f) = (1
 * - r^2)/4, r = tanh((x - eta)/2):
 *
 *     d^k f/d eta^k = g R_k(r),   R_1 = 1,   R_(k+1) = r R_k - (1 - r^2) R_k'/2.
 *
 * The variable of integration is the rapidity w, E = cosh w, where W is entire; panels of Gauss points are short in w
 * and in x, which keeps the poles of f at x = eta +- i pi away.
 */
import { gaussRule } from "./gauss.js";
import { NODE_LENGTH, NODE_ORDER } from "./species-table.js";

/** Panels: length in x and in w at most, and points in each. */
const longestX = 3;
const longestW = 1.2;
const rule = /* @__PURE__ */ gaussRule(20);
/** The integrand at x = max(eta, 0) + this is below 1e-18 of the integral. */
const tail = 58;

const width = NODE_ORDER + 1;
/** Coefficients of x^s d^s K_j/dx^s over theta W in c, s = 0, 1, 2: ascending, `width + 2` each, in row s width + j. */
const kernels = /* @__PURE__ */ kernelCoefficients();
const kernelLength = width + 2;
/** Coefficients of R_k in r, ascending, `width` each, in row k - 1. */
const statistics = /* @__PURE__ */ statisticsCoefficients();

function kernelCoefficients(): Float64Array {
  const q = [[1]];
  for (let j = 0; j <= width; j++) {
    const now = q[j]!;
    const at = (k: number): number => now[k] ?? 0;
    // coefficient of c^k: q_j (5/2 + 3/2 c) + c (1 - c) q_j'
    q.push(Array.from({ length: j + 2 }, (_, k) => (2.5 + k) * at(k) + (1.5 - (k - 1)) * at(k - 1)));
  }
  const out = new Float64Array(3 * width * (width + 2));
  for (let j = 0; j < width; j++) {
    for (let k = 0; k < width + 2; k++) {
      const [a, b, c] = [0, 1, 2].map((s) => q[j + s]![k] ?? 0) as [number, number, number];
      for (const [s, value] of [a, b - a, c - 3 * b + 2 * a].entries()) out[(s * width + j) * (width + 2) + k] = value;
    }
  }
  return out;
}

function statisticsCoefficients(): Float64Array {
  const out = new Float64Array(width * width);
  out[0] = 1;
  for (let row = 1; row < width; row++) {
    const before = out.subarray((row - 1) * width, row * width);
    for (let k = 0; k < width; k++) {
      const up = k + 1 < width ? (k + 1) * before[k + 1]! : 0;
      const down = k > 0 ? (1 + 0.5 * (k - 1)) * before[k - 1]! : 0;
      out[row * width + k] = down - 0.5 * up;
    }
  }
  return out;
}

/** What the sum of each P_ij has lost to rounding (Kahan 1965, Commun. ACM 8, 40). */
const lost = new Float64Array(NODE_LENGTH);
const kernelValues = new Float64Array(3 * width);
const statisticsValues = new Float64Array(width);

/**
 * Writes P_ij, i, j = 0..NODE_ORDER, into slots (NODE_ORDER + 1) i + j of `out`, at eta <= 1000 and theta > 0, in units
 * of the species (m c^2/(pi^2 lambdabar^3) for two spin states).
 */
export function fillSpeciesIntegrals(eta: number, theta: number, out: Float64Array): void {
  out.fill(0);
  lost.fill(0);
  const end = Math.max(eta, 0) + tail;
  for (let w = 0, x = 0; x < end; ) {
    const next = Math.min(w + longestW, rapidity(theta * (x + longestX)));
    addPanel(eta, theta, w, next, out);
    w = next;
    x = kineticEnergy(w) / theta;
  }
}

function addPanel(eta: number, theta: number, low: number, high: number, out: Float64Array): void {
  for (let n = 0; n < rule.nodes.length; n++) {
    const half = Math.sinh(0.5 * (low + (high - low) * rule.nodes[n]!));
    const u = 2 * half * half; // cosh w - 1 without cancellation
    const p2 = u * (u + 2);
    const x = u / theta;
    const z = x - eta;
    const weight = ((high - low) * rule.weights[n]! * p2 * p2) / 3; // theta W dx = p^4/3 dw
    fillPolynomials(kernels, kernelLength, u / (u + 2), kernelValues);
    const e = Math.exp(-Math.abs(z));
    const f = (z > 0 ? e : 1) / (1 + e);
    const g = e / ((1 + e) * (1 + e));
    fillPolynomials(statistics, width, ((z > 0 ? 1 : -1) * (1 - e)) / (1 + e), statisticsValues);
    for (let i = 0, at = 0; i < width; i++) {
      const s = i < 2 ? 0 : i === 2 ? 1 : 2;
      const factor = (weight * (i === 0 ? f : g * statisticsValues[i - s - 1]!)) / (s === 0 ? 1 : s === 1 ? x : x * x);
      for (let j = 0; j < width; j++, at++) {
        const term = factor * kernelValues[s * width + j]! - lost[at]!;
        const sum = out[at]! + term;
        lost[at] = sum - out[at]! - term;
        out[at] = sum;
      }
    }
  }
}

/** Values at `at` of polynomials of `length` ascending coefficients each. */
function fillPolynomials(coefficients: Float64Array, length: number, at: number, values: Float64Array): void {
  for (let row = 0; row < values.length; row++) {
    let value = 0;
    for (let k = length - 1; k >= 0; k--) value = value * at + coefficients[row * length + k]!;
    values[row] = value;
  }
}

/** E - 1 = cosh w - 1 without cancellation. */
function kineticEnergy(w: number): number {
  const half = Math.sinh(0.5 * w);
  return 2 * half * half;
}

/** w of E - 1. */
const rapidity = (kinetic: number): number => 2 * Math.asinh(Math.sqrt(0.5 * kinetic));

/** Binomial coefficients C(n, k) in slot n width + k. */
const binomials = /* @__PURE__ */ binomialCoefficients();

function binomialCoefficients(): Float64Array {
  const out = new Float64Array(width * width);
  for (let n = 0; n < width; n++) {
    out[n * width] = 1;
    for (let k = 1; k <= n; k++) out[n * width + k] = out[(n - 1) * width + k - 1]! + out[(n - 1) * width + k]!;
  }
  return out;
}

/** What is differentiated, while it is overwritten. */
const pressures = new Float64Array(NODE_LENGTH);

/** Derivatives of L = ln P from those of P, in place: dP = P dL, differentiated by Leibniz's rule. */
export function takeLogarithm(p: Float64Array): void {
  pressures.set(p);
  for (let k = 1; k < NODE_LENGTH; k++) pressures[k]! /= p[0]!;
  p[0] = Math.log(p[0]!);
  for (let i = 0; i < width; i++) {
    for (let j = 0; j < width; j++) {
      if (i + j === 0) continue;
      // one derivative, by eta if there is one, is that of dL; the others are spread over P and dL
      const [n, m] = i > 0 ? [i - 1, j] : [0, j - 1];
      let value = pressures[width * i + j]!;
      for (let a = 0; a <= n; a++) {
        for (let b = a === 0 ? 1 : 0; b <= m; b++) {
          value -=
            binomials[n * width + a]! *
            binomials[m * width + b]! *
            pressures[width * a + b]! *
            p[width * (i - a) + j - b]!;
        }
      }
      p[width * i + j] = value;
    }
  }
}
