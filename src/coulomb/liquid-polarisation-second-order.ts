/**
 * Ion-electron term of the liquid, first and second derivatives written out: a quarter of the time of the algebra in
 * liquid-polarisation.ts, whose head has formula and source, and which the tests compare with it.
 *
 * Numerator N and denominator D are functions of G = Gamma_e and density: G-derivatives natural (suffix G, GG), density
 * derivatives d/d ln rho at constant G (R, RR), and the mixed one (GR).
 */
import * as slot from "./slots.js";

/**
 * f += x_j f_ie, six natural derivatives in (rho, 1/T); h2, h2/r_s and r_s^3/(1 + 6 r_s^2) with natural derivatives in
 * rho.
 */
export function addLiquidPolarisationSecondOrder(
  f: Float64Array,
  point: Float64Array,
  ion: Float64Array,
  lorentz: Float64Array,
  lorentzByRs: Float64Array,
  dilution: Float64Array,
): void {
  const gamma = point[slot.POINT_GAMMA_E]!;
  const root = point[slot.POINT_ROOT_GAMMA_E]!;
  const x = point[slot.POINT_X]!;
  const rs = point[slot.POINT_RS]!;
  const nu = ion[slot.ION_NU]!;
  const power = Math.exp(nu * point[slot.POINT_LOG_GAMMA_E]!);

  // c_TF a h1: h and its logarithmic derivatives hR, hRR, a quotient of polynomials in x ~ rho^(1/3).
  const x2 = x * x;
  const linear = ion[slot.ION_H1]! * x;
  const square = ion[slot.ION_H2]! * x2;
  const inverse = 1 / (1 + linear + square);
  const below = (linear + 2 * square) / 3;
  const h = (1 + 0.2 * x2) * inverse;
  const hR = ((2 / 15) * x2 - h * below) * inverse;
  const hRR = ((4 / 45) * x2 - 2 * hR * below - (h * (linear + 4 * square)) / 9) * inverse;

  // N = c_DH G^(3/2) + c h G^p (1 + m), c h G^p m ~ G^(p+1/2)/(21 + v) with v ~ G rho and D_G 1/(21 + v) = -z/(21 + v).
  const v = (gamma * ion[slot.ION_Z3]!) / (rs * rs * rs);
  const reciprocal = 1 / (21 + v);
  const z = v * reciprocal;
  const p = nu + 1;
  const q = nu + 1.5;
  const m = ion[slot.ION_W]! * root * reciprocal;
  const c = ion[slot.ION_C_TF]! * power * gamma;
  const debye = ion[slot.ION_C_DH]! * gamma * root;
  const g1 = 1 + m;
  const g1R = -m * z;
  const g1RR = m * z * (2 * z - 1);
  const pG = p + m * (q - z);
  const nG0 = p * (p - 1) + m * (q * (q - 1) - 2 * q * z + 2 * z * z);
  const n = debye + c * h * g1;
  const nG = 1.5 * debye + c * h * pG;
  const nGG = 0.75 * debye + c * h * nG0;
  const nR = c * (hR * g1 + h * g1R);
  const nRR = c * (hRR * g1 + 2 * hR * g1R + h * g1RR);
  const nGR = c * (hR * pG + h * g1R * (q + 1 - 2 * z));

  // D = 1 + b h2 G^(1/2) + s g2, s = a (h2/r_s) G^nu, g2 = 1 + r (1 + e), e = 1/(e0 + 2 G), D_G e = -e y.
  const e = 1 / (ion[slot.ION_E0]! + 2 * gamma);
  const y = 2 * gamma * e;
  const zeta = ion[slot.ION_ZETA]!;
  const r = zeta * dilution[0]!;
  const rR = zeta * dilution[1]!;
  const rRR = zeta * (dilution[2]! + dilution[1]!);
  const amplitude = ion[slot.ION_A]! * power;
  const s = amplitude * lorentzByRs[0]!;
  const sR = amplitude * lorentzByRs[1]!;
  const sRR = amplitude * (lorentzByRs[2]! + lorentzByRs[1]!);
  const b = ion[slot.ION_B]! * root;
  const l = b * lorentz[0]!;
  const lR = b * lorentz[1]!;
  const lRR = b * (lorentz[2]! + lorentz[1]!);
  const g2 = 1 + r * (1 + e);
  const g2R = rR * (1 + e);
  const nuG = nu * g2 - r * e * y;
  const d = 1 + l + s * g2;
  const dG = 0.5 * l + s * nuG;
  const dGG = -0.25 * l + s * (nu * (nu - 1) * g2 + 2 * r * e * y * (y - nu));
  const dR = lR + sR * g2 + s * g2R;
  const dRR = lRR + sRR * g2 + 2 * sR * g2R + s * rRR * (1 + e);
  const dGR = 0.5 * lR + sR * nuG + s * (nu * g2R - rR * e * y);

  // N/D, then G ~ rho^(1/3)/T.
  const over = 1 / d;
  const u = n * over;
  const uG = (nG - u * dG) * over;
  const uR = (nR - u * dR) * over;
  const uGG = (nGG - 2 * uG * dG - u * dGG) * over;
  const uRR = (nRR - 2 * uR * dR - u * dRR) * over;
  const uGR = (nGR - uG * dR - uR * dG - u * dGR) * over;
  const first = uR + uG / 3;
  const share = -ion[slot.ION_X]!;
  f[0]! += share * u;
  f[1]! += share * first;
  f[2]! += share * uG;
  f[3]! += share * (uRR + (2 / 3) * uGR + (uGG + uG) / 9 - first);
  f[4]! += share * (uGR + (uG + uGG) / 3);
  f[5]! += share * uGG;
}
