/**
 * The classical gas of particles and antiparticles, exact for any temperature: no equation is solved.
 *
 * Where the Fermi correction 2^(-3/2) e^eta is below 1e-17, every phi_m is e^(-z) and each moment is a density times a
 * moment of x = (E - 1)/theta over p^2 e^(-x):
 *
 *     B_k = int p^2 e^(-x) x^k dp,   n_- - n_+ = n,   n_- n_+ = (B_0 e^(-1/theta))^2,   P = theta (n_- + n_+)
 *
 * The B_k come from the trapezoidal rule in rapidity (no poles here; four sums, no division). The net
 * density enters exactly, so eta = -500 and the cold pair plasma lose only the ulp of e^(-1/theta).
 */
import { EXPONENTIAL_OFFSET, EXPONENTIAL_STEPS, exponentialTable } from "../numerics/exponential.js";
import type { Order } from "../thermodynamics/free-energy.js";
import { CUT_CLASSICAL } from "./accuracy.js";
import { refuseOverflow } from "./momentum-ladder.js";
import { NODE_ENERGY, NODE_NUMBER, NODE_STRIDE } from "./node-layout.js";
import { chooseRapidityStep, rapidityNodesOf } from "./rapidity-nodes.js";
import {
  ANTIPARTICLES,
  CENTRE,
  ETA,
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
  NET_DENSITY,
  NODES,
  NU,
  P00,
  PSI,
  Q,
  STEP,
  THETA,
} from "./record.js";

/** B_0 and the mean values B_1/B_0, B_2/B_0, B_3/B_0. */
const moments = new Float64Array(4);

/** Fills the record at its NET_DENSITY and THETA; `antiparticles` false for a species that has none. */
export function boltzmann(gas: Float64Array, antiparticles: boolean, order: Order): void {
  const theta = gas[THETA]!;
  const n = gas[NET_DENSITY]!;
  fillMoments(gas);
  const b0 = moments[0]!;
  const b1 = moments[1]!;
  const b2 = moments[2]!;
  const b3 = moments[3]!;
  const inverse = 1 / theta;
  const half = (0.5 * n) / b0;
  const logarithm = Math.log(2 * half) + inverse; // nu where particles outnumber antiparticles by far
  const farApart = !antiparticles || logarithm > 20;
  let nu = logarithm;
  let rare = 0;
  if (antiparticles) {
    if (farApart) {
      rare = b0 * Math.exp(-nu - inverse);
    } else {
      const threshold = Math.exp(-inverse);
      nu = n === 0 ? 0 : Math.asinh(half / threshold);
      rare = b0 * threshold * Math.exp(-nu);
    }
  }
  const symmetric = nu < 1 && antiparticles;
  const psi = symmetric ? nu : farApart ? Math.log(2 * half) : nu - inverse;
  const many = n + rare;
  const total = many + rare;

  // Mean powers of y = x + shift (particles) and yb = x + shiftB, from those of x.
  const shift = symmetric ? inverse : 0;
  const shiftB = symmetric ? inverse : 2 * inverse;
  const y1 = b1 + shift;
  const y2 = b2 + shift * (2 * b1 + shift);
  const y3 = b3 + shift * (3 * b2 + shift * (3 * b1 + shift));
  const yb1 = b1 + shiftB;
  const yb2 = b2 + shiftB * (2 * b1 + shiftB);
  const yb3 = b3 + shiftB * (3 * b2 + shiftB * (3 * b1 + shiftB));
  // In the symmetric frame y = yb, and the difference of the two kinds is n exactly.
  const oddFirst = symmetric ? n * y1 : many * y1 - rare * yb1;
  const evenFirst = many * y1 + rare * yb1;
  const oddSecond = symmetric ? n * y2 : many * y2 - rare * yb2;
  const evenSecond = many * y2 + rare * yb2;

  gas[CENTRE] = symmetric ? -1 : 0;
  gas[PSI] = psi;
  gas[LAMBDA] = 1;
  gas[NODES] = 0;
  gas[NU] = nu;
  gas[ETA] = symmetric ? nu - inverse : psi;
  gas[ANTIPARTICLES] = rare;
  gas[N00] = n;
  gas[P00] = theta * total;
  gas[Q] = theta * (total + evenFirst);
  gas[N10] = total;
  gas[N20] = n;
  gas[N01] = oddFirst;
  gas[M12] = evenSecond;
  gas[N11] = evenFirst;
  gas[N02] = oddSecond - 2 * oddFirst;
  if (order === 2) return;
  gas[M23] = many * y3 + rare * yb3;
  gas[N30] = total;
  gas[N21] = oddFirst;
  gas[N12] = evenSecond - 2 * evenFirst;
}

function fillMoments(gas: Float64Array): void {
  const theta = gas[THETA]!;
  gas[ETA] = Number.NEGATIVE_INFINITY; // classical: the growth of e^(-x) alone limits the step
  const rung = chooseRapidityStep(gas, -1);
  const row = rapidityNodesOf(rung);
  const inverse = 1 / theta;
  let b0 = 0;
  let b1 = 0;
  let b2 = 0;
  let b3 = 0;
  for (let node = 0; ; node += NODE_STRIDE) {
    const x = row[node + NODE_ENERGY]! * inverse;
    if (!(x < CUT_CLASSICAL)) {
      if (x === Number.POSITIVE_INFINITY) refuseOverflow(theta);
      break;
    }
    const k = (x * EXPONENTIAL_STEPS + (EXPONENTIAL_OFFSET + 0.5)) | 0;
    const r = (k - EXPONENTIAL_OFFSET) * (1 / EXPONENTIAL_STEPS) - x;
    const r2 = r * r;
    const polynomial =
      1 + r + r2 * (0.5 + r * (1 / 6)) + r2 * r2 * (1 / 24 + r * (1 / 120) + r2 * (1 / 720 + r * (1 / 5040)));
    const term0 = row[node + NODE_NUMBER]! * exponentialTable[k]! * polynomial;
    const term1 = term0 * x;
    const term2 = term1 * x;
    b0 += term0;
    b1 += term1;
    b2 += term2;
    b3 += term2 * x;
  }
  moments[0] = b0 * gas[STEP]!;
  moments[1] = b1 / b0;
  moments[2] = b2 / b0;
  moments[3] = b3 / b0;
}
