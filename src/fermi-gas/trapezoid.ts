/**
 * Fermi integrals of particles and antiparticles by the trapezoidal rule in momentum, corrected by pole residues.
 *
 * n = int p^2 (f - fb) dp and P = int p^4/(3E) (f + fb) dp have even integrands, for which the rule h sum G(jh)
 * converges like e^(-2 pi d/h), d the distance of the nearest singularity. The branch points of E = sqrt(1 + p^2) at
 * p = +-i are absent: f - fb and its kin depend on p^2 only (f(-E) = 1 - fb(E)). What is left are the poles, whose
 * first few residues are added in closed form (pole-residues.ts), and a known constant in P (momentum-ladder.ts).
 * About 25 nodes and 3 poles then give 1e-14 where 300 nodes of Gauss-Legendre would.
 * For particles alone the cut costs e^(-nu - 2 pi/h): antiparticles are left out only where that is below 1e-17.
 */
import type { Order } from "../thermodynamics/free-energy.js";
import { CUT_SECOND, CUT_THIRD, DIGITS, GAUSSIAN_HEIGHT, PAIRS_NU, PAIRS_NU_HOT, PAIRS_THETA } from "./accuracy.js";
import { chooseRung, nodesOf, subtractVacuumTerm } from "./momentum-ladder.js";
import { fillFactors, sumPairs, sumPairsThird, sumParticles, sumParticlesThird } from "./node-sums.js";
import { addPoleResidues } from "./pole-residues.js";
import {
  ANTIPARTICLES,
  CENTRE,
  CONTOUR,
  CUT,
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
  NU,
  P00,
  PSI,
  Q,
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

/** Evaluates the record's N_ij, P00, Q, M12 (order 3: all) at its ETA, NU, THETA; |ETA| < 40. */
export function trapezoid(gas: Float64Array, order: Order): void {
  const eta = gas[ETA]!;
  const nu = gas[NU]!;
  const theta = gas[THETA]!;
  const pairs = nu < PAIRS_NU || (nu < PAIRS_NU_HOT && theta > PAIRS_THETA);
  const poles = poleCount(gas, pairs, order);
  const degenerate = eta > 0;
  // Pairs in the majority: a centre at E = 0 makes n and its like odd in nu, and no digit is lost at nu -> 0.
  const symmetric = !degenerate && nu < 1;
  gas[CENTRE] = degenerate ? eta * theta : symmetric ? -1 : 0;
  gas[PSI] = degenerate ? 0 : symmetric ? nu : eta;
  gas[LAMBDA] = degenerate ? 0 : 1;
  gas[CUT] = (order === 3 ? CUT_THIRD : CUT_SECOND) + (symmetric ? 1 / theta : 0);
  const rung = chooseStep(gas, poles);
  const row = nodesOf(rung);
  const count = fillFactors(gas, row, symmetric);
  if (pairs) {
    sumPairs(gas, row, count);
    if (order === 3) sumPairsThird(gas, row, count);
  } else {
    sumParticles(gas, row, count);
    if (order === 3) sumParticlesThird(gas, row, count);
  }
  subtractVacuumTerm(gas, rung);
  if (poles > 0) addPoleResidues(gas, poles, "momentum", order);
  storeMoments(gas, order);
}

/** Poles to correct for. Only the time depends on it, and the optimum is flat: node 10 ns, pair node 21, pole 60. */
function poleCount(gas: Float64Array, pairs: boolean, order: Order): number {
  const eta = gas[ETA]!;
  const theta = gas[THETA]!;
  if (!pairs) return eta < -4 ? 0 : eta < 1 ? 1 : eta < 5 ? 2 : eta < 14 || order === 3 ? 3 : 4;
  if (theta < 0.035) return eta < -9 ? 0 : eta < -5 ? 1 : 3;
  if (theta < 0.1) return eta > 10 ? 4 : 3;
  return eta < 14 ? 4 : 5;
}

/**
 * The largest step whose error, e^(-2 pi y/h) times the integrand's growth at height y, is below rounding; y is the
 * height of the first pole left out. Writes CONTOUR and STEP, returns the rung of the ladder.
 */
function chooseStep(gas: Float64Array, poles: number): number {
  const theta = gas[THETA]!;
  const eta = gas[ETA]!;
  // Im p of the first pole left out, at E = mu + i frequency.
  const kinetic = eta * theta;
  const frequency = Math.PI * theta * (2 * poles + 1);
  const re = kinetic * (kinetic + 2) - frequency * frequency;
  const im = 2 * (1 + kinetic) * frequency;
  const modulus = Math.sqrt(re * re + im * im);
  let y = re > 0 ? im / Math.sqrt(2 * (modulus + re)) : Math.sqrt(0.5 * (modulus - re));
  const gaussian = Math.sqrt(GAUSSIAN_HEIGHT * theta);
  if (gaussian < 1 && y > gaussian) y = gaussian;
  let growth = (y < 1 ? 1 - Math.sqrt(1 - y * y) : 1) / theta;
  const bound = eta < 0 ? 1 - eta : 1;
  if (growth > bound) growth = bound;
  if (y >= 1 && theta < 1 && eta < 0) growth += 1 - 3 * Math.log(theta);
  gas[CONTOUR] = y;
  // Relativistic amplitudes grow like (2K + 1)^3: one digit more per pole.
  gas[STEP] = (2 * Math.PI * y) / (DIGITS + growth + (theta > 0.1 ? poles : 0));
  return chooseRung(gas);
}

/** From moments to scaled derivatives in the frame of the record (psi or mu, see record.ts). */
export function storeMoments(gas: Float64Array, order: Order): void {
  const fixedMu = gas[LAMBDA] === 0;
  const m10 = gas[SUM_M10]!;
  const m11 = gas[SUM_M11]!;
  const m20 = gas[SUM_M20]!;
  const m21 = gas[SUM_M21]!;
  gas[N00] = gas[SUM_M00]!;
  gas[P00] = gas[SUM_P]!;
  gas[Q] = gas[SUM_Q]!;
  gas[N10] = m10;
  gas[N01] = m11;
  gas[M12] = gas[SUM_M12]!;
  gas[N20] = m20;
  gas[N11] = fixedMu ? m21 - m10 : m21;
  gas[N02] = gas[SUM_M22]! - 2 * m11;
  gas[ANTIPARTICLES] = -1;
  if (order === 2) return;
  const m31 = gas[SUM_M31]!;
  const m32 = gas[SUM_M32]!;
  gas[M23] = gas[SUM_M23]!;
  gas[N30] = gas[SUM_M30]!;
  gas[N21] = fixedMu ? m31 - 2 * m20 : m31;
  gas[N12] = fixedMu ? m32 - 4 * m21 + 2 * m10 : m32 - 2 * m21;
}
