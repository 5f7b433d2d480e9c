/**
 * Exchange and correlation of the electrons, first and second derivatives written out: a third of the time of the
 * algebra in exchange.ts, whose head has formula and sources, and which the tests compare with it.
 *
 * A function of t = T/T_F and s = r_s^(1/2): derivatives in t natural (suffix T, TT), in s logarithmic (S, SS), mixed
 * TS.
 */
import { POINT_ELECTRON_ENERGY, POINT_RS, POINT_T } from "./slots.js";

/**
 * Adds the six natural derivatives of F in (rho, T). `relativity` is Phi - 1 with natural derivatives in rho, `ofB`
 * the coefficients of b as in exchange.ts.
 */
export function addExchangeSecondOrder(
  out: Float64Array,
  point: Float64Array,
  relativity: Float64Array,
  ofB: readonly number[],
): void {
  const t = point[POINT_T]!;
  const rs = point[POINT_RS]!;
  const s = Math.sqrt(rs);
  const t2 = t * t;
  const t4 = t2 * t2;

  // tau = tanh(v), v = 1/t, and exp(-v); beyond v = 60 their T-members are below rounding and skipped.
  const v = t > 1 / 60 ? 1 / t : 60;
  let exponential = 0;
  let tau = 1;
  let tauT = 0;
  let tauTT = 0;
  if (t > 1 / 60) {
    exponential = Math.exp(-v);
    const square = exponential * exponential;
    const lost = v < 0.4 ? Math.expm1(-2 * v) : square - 1;
    const over = 1 / (2 + lost);
    const slope = 4 * square * over * over * v;
    tau = -lost * over;
    tauT = -slope;
    tauTT = 2 * slope * (1 - tau * v);
  }
  // sigma = tanh(w), w = t^(-1/2); beyond w = 27 likewise.
  let sigma = 1;
  let sigmaT = 0;
  let sigmaTT = 0;
  if (t > 1 / 729) {
    const w = 1 / Math.sqrt(t);
    const square = Math.exp(-2 * w);
    const lost = w < 0.4 ? Math.expm1(-2 * w) : square - 1;
    const over = 1 / (2 + lost);
    const slope = 4 * square * over * over * w;
    sigma = -lost * over;
    sigmaT = -0.5 * slope;
    sigmaTT = slope * (0.75 - 0.5 * sigma * w);
  }

  // a = 0.610887 q tau, q a quotient of polynomials; n, m its terms above and below.
  let n2 = 3.04363 * t2;
  const n3 = -0.09227 * t2 * t;
  let n4 = 1.7035 * t4;
  let m2 = 8.31051 * t2;
  let m4 = 5.1105 * t4;
  let r = 1 / (1 + m2 + m4);
  let mT = 2 * m2 + 4 * m4;
  let q = (0.75 + n2 + n3 + n4) * r;
  let qT = (2 * n2 + 3 * n3 + 4 * n4 - q * mT) * r;
  let qTT = (2 * n2 + 6 * n3 + 12 * n4 - 2 * qT * mT - q * (2 * m2 + 12 * m4)) * r;
  const a = 0.610887 * q * tau;
  const aT = 0.610887 * (qT * tau + q * tauT);
  const aTT = 0.610887 * (qTT * tau + 2 * qT * tauT + q * tauTT);

  // b s, d s: q sigma.
  n2 = 7.82159531356 * t2;
  n4 = 0.300483986662 * t4;
  m2 = 15.8443467125 * t2;
  m4 = ofB[5]! * t4;
  r = 1 / (1 + m2 + m4);
  mT = 2 * m2 + 4 * m4;
  q = (0.3436902 + n2 + n4) * r;
  qT = (2 * n2 + 4 * n4 - q * mT) * r;
  qTT = (2 * n2 + 12 * n4 - 2 * qT * mT - q * (2 * m2 + 12 * m4)) * r;
  const b = s * q * sigma;
  const bT = s * (qT * sigma + q * sigmaT);
  const bTT = s * (qTT * sigma + 2 * qT * sigmaT + q * sigmaTT);
  n2 = 2.38264734144 * t2;
  n4 = 0.30221237251 * t4;
  m2 = 4.39347718395 * t2;
  m4 = 0.729951339845 * t4;
  r = 1 / (1 + m2 + m4);
  mT = 2 * m2 + 4 * m4;
  q = (0.72700876 + n2 + n4) * r;
  qT = (2 * n2 + 4 * n4 - q * mT) * r;
  qTT = (2 * n2 + 12 * n4 - 2 * qT * mT - q * (2 * m2 + 12 * m4)) * r;
  const d = s * q * sigma;
  const dT = s * (qT * sigma + q * sigmaT);
  const dTT = s * (qTT * sigma + 2 * qT * sigmaT + q * sigmaTT);

  // e r_s = q tau r_s and c r_s = x e r_s, x = 0.8759442 - 0.230130843551 exp(-1/t).
  n2 = 0.815795138599 * t2;
  n4 = 0.0646844410481 * t4;
  m2 = 15.0984620477 * t2;
  m4 = 0.230761357474 * t4;
  r = 1 / (1 + m2 + m4);
  mT = 2 * m2 + 4 * m4;
  q = (0.25388214 + n2 + n4) * r;
  qT = (2 * n2 + 4 * n4 - q * mT) * r;
  qTT = (2 * n2 + 12 * n4 - 2 * qT * mT - q * (2 * m2 + 12 * m4)) * r;
  const e = rs * q * tau;
  const eT = rs * (qT * tau + q * tauT);
  const eTT = rs * (qTT * tau + 2 * qT * tauT + q * tauTT);
  const x = 0.8759442 - 0.230130843551 * exponential;
  const xT = -0.230130843551 * exponential * v;
  const c = x * e;
  const cT = xT * e + x * eT;
  const cTT = xT * (v - 2) * e + 2 * xT * eT + x * eTT;

  // g = N/D with N = a + b s + c s^2, D = 1 + d s + e s^2.
  const dS = d + 2 * e;
  const dTS = dT + 2 * eT;
  const i = 1 / (1 + d + e);
  const g = (a + b + c) * i;
  const gT = (aT + bT + cT - g * (dT + eT)) * i;
  const gS = (b + 2 * c - g * dS) * i;
  const gTT = (aTT + bTT + cTT - 2 * gT * (dT + eT) - g * (dTT + eTT)) * i;
  const gSS = (b + 4 * c - 2 * gS * dS - g * (d + 4 * e)) * i;
  const gTS = (bT + 2 * cT - gT * dS - gS * (dT + eT) - g * dTS) * i;

  // Relativistic exchange, and d/d ln rho at constant t (R): s ~ rho^(-1/6).
  const phi = relativity[0]!;
  const phiR = relativity[1]!;
  const f = g + a * phi;
  const fT = gT + aT * phi;
  const fTT = gTT + aTT * phi;
  const fR = a * phiR - gS / 6;
  const fRR = gSS / 36 + a * (relativity[2]! + phiR);
  const fTR = aT * phiR - gTS / 6;

  // F = -energy f with energy ~ rho^(1/3), t ~ T rho^(-2/3): d/d ln rho = 1/3 + R - (2/3) t d/dt.
  const energy = point[POINT_ELECTRON_ENERGY]!;
  const first = f / 3 + fR - (2 / 3) * fT;
  const second = f / 9 + (2 / 3) * fR + fRR - (4 / 9) * fT - (4 / 3) * fTR + (4 / 9) * (fTT + fT);
  out[0]! -= energy * f;
  out[1]! -= energy * first;
  out[2]! -= energy * fT;
  out[3]! -= energy * (second - first);
  out[4]! -= energy * (fT / 3 + fTR - (2 / 3) * (fT + fTT));
  out[5]! -= energy * fTT;
}
