/**
 * What the trapezoidal rule misses: the residues at the poles of the Fermi function.
 *
 * The rule's error, written as a contour integral with q = v/(1 - v), v = e^(2 pi i w/h), is 2 pi i times the residues
 * of the integrand times q at E_k = mu + i pi theta (2k + 1) (and their mirror images, which double the result). With
 * H = E p q for number and F = p^3 q/3 for pressure, D = theta d/dE, and y = psi + i pi (2k + 1) at the pole,
 *
 *     M_(m,k)  +=  -4 pi theta Im D^m(H y^k)          P  +=  -4 pi theta Im F          Q  +=  -4 pi theta Im D(F y)
 *
 * The derivatives follow from logarithmic ones: D H = H L, D^2 H = H (L^2 + DL), D^3 H = H (L^3 + 3 L DL + D^2 L), with
 *
 *     L = theta (1/E + E/p^2 + G),    G = kappa w' (1 + q),    kappa = 2 pi i/h,    dG/dE = G (kappa w' q - r)
 *
 * and r = -d ln w'/dE. The nodes lie at equal steps of w: either w = p (w' = E/p, r = 1/(E p^2)), for particles and
 * antiparticles together; or w = ln(E + p) (w' = 1/p, r = E/p^2), for one kind alone.
 *
 * Complex numbers are written out as Re, Im pairs. Re E_k = nu theta carries its full relative accuracy when nu -> 0
 * and only products are taken, so the imaginary parts that make up n keep theirs.
 * Published roots: residue-corrected trapezoid for Fermi-Dirac integrals, Mohankumar & Natarajan 1995, Astrophys. J.
 * 458, 233 (from memory); Gautschi 1993, Comput. Phys. Commun. 74, 233.
 */
import { squareErrors } from "../numerics/exact-product.js";
import { COSINE, cosineAndSine, SINE, TURN } from "../numerics/turn.js";
import type { Order } from "../thermodynamics/free-energy.js";
import { CONTOUR_MARGIN } from "./accuracy.js";
import {
  CONTOUR,
  ETA,
  NU,
  PSI,
  STEP,
  SUM_M00,
  SUM_M10,
  SUM_M11,
  SUM_M12,
  SUM_M20,
  SUM_M21,
  SUM_M22,
  SUM_M23,
  SUM_M30,
  SUM_M31,
  SUM_M32,
  SUM_P,
  SUM_Q,
  THETA,
} from "./record.js";

/** Variable in which the nodes are equally spaced: momentum p, or rapidity ln(E + p). */
export type NodeVariable = "momentum" | "rapidity";

const phase = new Float64Array(3);
const squares = new Float64Array(4);

/** Adds the residues of the first `count` poles to the sums of `gas`. */
export function addPoleResidues(gas: Float64Array, count: number, variable: NodeVariable, order: Order): void {
  const rapidity = variable === "rapidity";
  const theta = gas[THETA]!;
  const psi = gas[PSI]!;
  const h = gas[STEP]!;
  const inverseStep = 1 / h;
  const kappa = 2 * Math.PI * inverseStep;
  const weight = -4 * Math.PI * theta;
  const contour = gas[CONTOUR]! * CONTOUR_MARGIN;
  const kinetic = gas[ETA]! * theta; // mu - 1
  const eRe = gas[NU]! < 1 ? gas[NU]! * theta : 1 + kinetic;

  // p_F^2 = (mu - 1)^2 + 2 (mu - 1) as a rounded sum and what it lost.
  const kinetic2 = kinetic * kinetic;
  const larger = Math.abs(2 * kinetic) > kinetic2 ? 2 * kinetic : kinetic2;
  const smaller = Math.abs(2 * kinetic) > kinetic2 ? kinetic2 : 2 * kinetic;
  const fermi2 = kinetic2 + 2 * kinetic;
  squares[0] = kinetic;
  squareErrors(squares, 1);
  const fermi2Low = larger - fermi2 + smaller + squares[1]!;

  for (let k = 0; k < count; k++) {
    const omega = Math.PI * (2 * k + 1); // Im y
    const eIm = omega * theta;
    const eIm2 = eIm * eIm;

    // p^2 = E^2 - 1 and its root in the upper half plane, the larger part first.
    const p2Re = fermi2 - eIm2;
    const p2Im = 2 * eRe * eIm;
    const modulus = Math.sqrt(p2Re * p2Re + p2Im * p2Im);
    const inverseModulus = 1 / modulus;
    let pRe: number;
    let pIm: number;
    if (p2Re > 0) {
      pRe = Math.sqrt(0.5 * (modulus + p2Re));
      pIm = (0.5 * p2Im) / pRe;
    } else {
      pIm = Math.sqrt(0.5 * (modulus - p2Re));
      pRe = (0.5 * p2Im) / pIm;
    }

    // The phase of v in turns. Re p/h reaches 25, so half an ulp of p would cost 3e-14: p is corrected by the residual
    // of its square, and the whole turns n h are subtracted exactly (h has 20 bits).
    let decayHeight: number;
    if (rapidity) {
      const re = kinetic + pRe;
      const im = eIm + pIm;
      decayHeight = Math.atan2(im, 1 + re);
      const turns = 0.5 * Math.log1p(re * (2 + re) + im * im) * inverseStep;
      phase[TURN] = turns - Math.round(turns);
    } else {
      const re2 = pRe * pRe;
      const im2 = pIm * pIm;
      const p2Low = fermi2 - p2Re - eIm2 + fermi2Low;
      squares[0] = pRe;
      squares[1] = pIm;
      squareErrors(squares, 2);
      const residual = p2Re - re2 + im2 - squares[2]! + squares[3]! + p2Low; // in this order: the first is exact
      const correction = 0.5 * inverseModulus * residual;
      decayHeight = pIm - correction * pIm;
      const turns = Math.round(pRe * inverseStep);
      phase[TURN] = (pRe - turns * h + correction * pRe) * inverseStep;
    }
    // Above the contour the pole is already beyond the rule's own error, and its "correction" would explode.
    if (decayHeight > contour) break;
    cosineAndSine(phase);
    const decay = Math.exp(-kappa * decayHeight);
    const vRe = decay * phase[COSINE]!;
    const vIm = decay * phase[SINE]!;

    // q = v/(1 - v)
    const rest = 1 - vRe;
    const qScale = 1 / (rest * rest + vIm * vIm);
    const qRe = (vRe * rest - vIm * vIm) * qScale;
    const qIm = vIm * qScale;

    // 1/p, e = E/p, b = E/p^2, a = 1/E
    const ipRe = pRe * inverseModulus;
    const ipIm = -pIm * inverseModulus;
    const eOverPRe = eRe * ipRe - eIm * ipIm;
    const eOverPIm = eRe * ipIm + eIm * ipRe;
    const bRe = eOverPRe * ipRe - eOverPIm * ipIm;
    const bIm = eOverPRe * ipIm + eOverPIm * ipRe;
    const energyScale = 1 / (eRe * eRe + eIm2);
    const aRe = eRe * energyScale;
    const aIm = -eIm * energyScale;

    // kappa w', kappa w' q and G
    const rateRe = rapidity ? -kappa * ipIm : -kappa * eOverPIm;
    const rateIm = rapidity ? kappa * ipRe : kappa * eOverPRe;
    const rqRe = rateRe * qRe - rateIm * qIm;
    const rqIm = rateRe * qIm + rateIm * qRe;
    const gRe = rateRe + rqRe;
    const gIm = rateIm + rqIm;

    // L, and DL = theta^2 [-1/E^2 - (E^2 + 1)/p^4 + G (kappa w' q - r)]
    const lRe = theta * (aRe + bRe + gRe);
    const lIm = theta * (aIm + bIm + gIm);
    const ip2Re = bRe * aRe - bIm * aIm;
    const ip2Im = bRe * aIm + bIm * aRe;
    const ip4Re = ip2Re * ip2Re - ip2Im * ip2Im;
    const ip4Im = 2 * ip2Re * ip2Im;
    const rRe = rapidity ? bRe : ip2Re * aRe - ip2Im * aIm;
    const rIm = rapidity ? bIm : ip2Re * aIm + ip2Im * aRe;
    const xRe = rqRe - rRe;
    const xIm = rqIm - rIm;
    const theta2 = theta * theta;
    const e2Re = 2 + p2Re; // E^2 + 1
    const a2Re = aRe * aRe - aIm * aIm;
    const a2Im = 2 * aRe * aIm;
    const dlRe = theta2 * (-a2Re - (e2Re * ip4Re - p2Im * ip4Im) + gRe * xRe - gIm * xIm);
    const dlIm = theta2 * (-a2Im - (e2Re * ip4Im + p2Im * ip4Re) + gRe * xIm + gIm * xRe);

    // H = E p q and its derivatives
    const epRe = eRe * pRe - eIm * pIm;
    const epIm = eRe * pIm + eIm * pRe;
    const hRe = epRe * qRe - epIm * qIm;
    const hIm = epRe * qIm + epIm * qRe;
    const h1Re = hRe * lRe - hIm * lIm;
    const h1Im = hRe * lIm + hIm * lRe;
    const kRe = lRe * lRe - lIm * lIm + dlRe;
    const kIm = 2 * lRe * lIm + dlIm;
    const h2Re = hRe * kRe - hIm * kIm;
    const h2Im = hRe * kIm + hIm * kRe;

    // F = H p^2/(3E) and DF = F theta (3b + G)
    const ratioRe = (p2Re * aRe - p2Im * aIm) / 3;
    const ratioIm = (p2Re * aIm + p2Im * aRe) / 3;
    const fRe = hRe * ratioRe - hIm * ratioIm;
    const fIm = hRe * ratioIm + hIm * ratioRe;
    const mRe = theta * (3 * bRe + gRe);
    const mIm = theta * (3 * bIm + gIm);
    const f1Re = fRe * mRe - fIm * mIm;
    const f1Im = fRe * mIm + fIm * mRe;

    const y2Re = psi * psi - omega * omega;
    const y2Im = 2 * psi * omega;
    const hyIm = hRe * omega + hIm * psi;
    const h1yIm = h1Re * omega + h1Im * psi;
    gas[SUM_P]! += weight * fIm;
    gas[SUM_Q]! += weight * (f1Re * omega + f1Im * psi + fIm);
    gas[SUM_M00]! += weight * hIm;
    gas[SUM_M10]! += weight * h1Im;
    gas[SUM_M20]! += weight * h2Im;
    gas[SUM_M11]! += weight * (h1yIm + hIm);
    gas[SUM_M21]! += weight * (h2Re * omega + h2Im * psi + 2 * h1Im);
    gas[SUM_M12]! += weight * (h1Re * y2Im + h1Im * y2Re + 2 * hyIm);
    gas[SUM_M22]! += weight * (h2Re * y2Im + h2Im * y2Re + 4 * h1yIm + 2 * hIm);
    if (order === 2) continue;

    // D^2 L = theta^3 [2/E^3 + 2b (E^2 + 3)/p^4 + G x^2 + G (d(kappa w' q)/dE - dr/dE)], x = kappa w' q - r
    const gxRe = gRe * xRe - gIm * xIm;
    const gxIm = gRe * xIm + gIm * xRe;
    const cRe = gRe - rRe;
    const cIm = gIm - rIm;
    const rq1Re = rqRe * cRe - rqIm * cIm;
    const rq1Im = rqRe * cIm + rqIm * cRe;
    const sRe = rapidity ? 2 * bRe - aRe : aRe + 2 * bRe; // -d ln r/dE
    const sIm = rapidity ? 2 * bIm - aIm : aIm + 2 * bIm;
    const x1Re = rq1Re + (rRe * sRe - rIm * sIm);
    const x1Im = rq1Im + (rRe * sIm + rIm * sRe);
    const a3Re = a2Re * aRe - a2Im * aIm;
    const a3Im = a2Re * aIm + a2Im * aRe;
    const b5Re = bRe * ip4Re - bIm * ip4Im;
    const b5Im = bRe * ip4Im + bIm * ip4Re;
    const e23Re = e2Re + 2; // E^2 + 3
    const theta3 = theta2 * theta;
    const ddlRe =
      theta3 * (2 * a3Re + 2 * (b5Re * e23Re - b5Im * p2Im) + gxRe * xRe - gxIm * xIm + gRe * x1Re - gIm * x1Im);
    const ddlIm =
      theta3 * (2 * a3Im + 2 * (b5Re * p2Im + b5Im * e23Re) + gxRe * xIm + gxIm * xRe + gRe * x1Im + gIm * x1Re);

    // D^3 H = H [L (L^2 + 3 DL) + D^2 L]
    const tRe = kRe + 2 * dlRe;
    const tIm = kIm + 2 * dlIm;
    const nRe = lRe * tRe - lIm * tIm + ddlRe;
    const nIm = lRe * tIm + lIm * tRe + ddlIm;
    const h3Re = hRe * nRe - hIm * nIm;
    const h3Im = hRe * nIm + hIm * nRe;
    const y3Re = psi * y2Re - omega * y2Im;
    const y3Im = psi * y2Im + omega * y2Re;
    const h2yIm = h2Re * omega + h2Im * psi;
    const h1y2Im = h1Re * y2Im + h1Im * y2Re;
    gas[SUM_M30]! += weight * h3Im;
    gas[SUM_M31]! += weight * (h3Re * omega + h3Im * psi + 3 * h2Im);
    gas[SUM_M32]! += weight * (h3Re * y2Im + h3Im * y2Re + 6 * h2yIm + 6 * h1Im);
    gas[SUM_M23]! += weight * (h2Re * y3Im + h2Im * y3Re + 6 * h1y2Im + 6 * hyIm);
  }
}
