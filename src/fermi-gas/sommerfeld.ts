/**
 * The degenerate gas, eta > 38: Sommerfeld's series to all orders, by a three-term recurrence.
 *
 * int f W'(E) dE = W(mu) + sum_k B_k theta^(2k) W^(2k)(mu), B_k = 2 (1 - 2^(1-2k)) zeta(2k) (Sommerfeld 1928, Z. Phys.
 * 47, 1). With W = p^3/3, the number of states, W(mu + t) = W(mu) (1 + 2 (E/p)(t/p) + (t/p)^2)^(3/2) generates Gegenbauer
 * polynomials, so the scaled derivatives a_k = theta^k W^(k)/W follow from
 *
 *     a_k = X (5/2 - k) a_(k-1) + S (5 - k)(k - 1) a_(k-2),      X = 2 E theta/p^2,  S = theta^2/p^2
 *
 * Every member is one sum of a_k times a power of its index; those of entropy and heat capacity are thermal sums that
 * start at B_1, so nothing is subtracted. The series is asymptotic with error e^(-eta) times its amplitudes: below
 * eta = 38 (39.5 for third order) the trapezoidal rule is the better one. At theta = 0 the sums vanish term by term and
 * the closed forms of the cold gas remain: T = 0 needs no other code.
 */
import type { Order } from "../thermodynamics/free-energy.js";
import { SERIES_END, SOMMERFELD_TERMS } from "./accuracy.js";
import { coldPressure } from "./cold.js";
import {
  ANTIPARTICLES,
  CENTRE,
  KINETIC_MU,
  LAMBDA,
  M12,
  M23,
  N00,
  N01,
  N02,
  N10,
  N11,
  N12,
  N20,
  N21,
  N30,
  NODES,
  P00,
  PSI,
  Q,
  THETA,
} from "./record.js";

const ZETA_EVEN = [
  1.6449340668482264, 1.0823232337111382, 1.0173430619844491, 1.0040773561979443, 1.0009945751278181,
  1.0002460865533081, 1.000061248135059, 1.0000152822594086, 1.0000038172932648, 1.0000009539620338, 1.0000002384505027,
  1.0000000596081891,
];
/** B_k = 2 (1 - 2^(1 - 2k)) zeta(2k). */
const coefficients = new Float64Array(SOMMERFELD_TERMS);
for (let k = 1; k < SOMMERFELD_TERMS; k++) {
  const zeta = ZETA_EVEN[k - 1] ?? 1 + 2 ** (-2 * k) + 3 ** (-2 * k);
  coefficients[k] = 2 * (1 - 2 ** (1 - 2 * k)) * zeta;
}

/** Evaluates the record's N_ij, P00, Q, M12 (order 3: all) at its KINETIC_MU and THETA, in the frame of fixed mu. */
export function sommerfeld(gas: Float64Array, order: Order): void {
  const theta = gas[THETA]!;
  const kinetic = gas[KINETIC_MU]!;
  const p2 = kinetic * (kinetic + 2);
  const states = (p2 * Math.sqrt(p2)) / 3;
  const part = theta / p2;
  const x = 2 * (1 + kinetic) * part;
  const s = theta * part;

  let a = 1.5 * x; // a_(2k-1)
  let b = 0.5 * x * a + 3 * s; // a_(2k)
  let c = -0.5 * x * b + 4 * s * a; // a_(2k+1)
  let n00 = 1;
  let n10 = a;
  let n20 = b;
  let n30 = c;
  let n01 = 0;
  let n11 = 0;
  let n02 = 0;
  let n21 = 0;
  let n12 = 0;
  let pressure = 0;
  let q = 0;
  let m12 = 0;
  let m23 = 0;
  for (let k = 1; k < SOMMERFELD_TERMS; k++) {
    const i = 2 * k;
    const ii = i * (i - 1);
    const coefficient = coefficients[k]!;
    const d = x * (0.5 - i) * c + s * (3 - i) * (i + 1) * b; // a_(2k+2)
    const ta = coefficient * a;
    const tb = coefficient * b;
    const tc = coefficient * c;
    const td = coefficient * d;
    pressure += ta;
    q += i * ta;
    m12 += ii * ta;
    n00 += tb;
    n01 += i * tb;
    n02 += ii * tb;
    n10 += tc;
    n11 += i * tc;
    n20 += td;
    const e = x * (-0.5 - i) * d + s * (2 - i) * (i + 2) * c; // a_(2k+3)
    if (order === 3) {
      m23 += ii * (i + 1) * ta;
      n12 += ii * tc;
      n21 += i * td;
      n30 += coefficient * e;
    }
    if (Math.abs(tc) * i * i <= SERIES_END * Math.abs(n10) && Math.abs(ta) * i * i * i <= SERIES_END * Math.abs(m12))
      break;
    a = c;
    b = d;
    c = e;
  }
  const energy = states * theta;
  gas[CENTRE] = kinetic;
  gas[PSI] = 0;
  gas[LAMBDA] = 0;
  gas[NODES] = 0;
  gas[ANTIPARTICLES] = -1;
  gas[N00] = states * n00;
  coldPressure(gas);
  gas[P00]! += energy * pressure;
  gas[Q] = energy * q;
  gas[M12] = states * m12;
  gas[N10] = states * n10;
  gas[N01] = states * n01;
  gas[N20] = states * n20;
  gas[N11] = states * n11;
  gas[N02] = states * n02;
  if (order === 2) return;
  gas[M23] = states * m23;
  gas[N30] = states * n30;
  gas[N21] = states * n21;
  gas[N12] = states * n12;
}
