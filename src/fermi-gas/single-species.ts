/**
 * Fermi integrals of one species without antiparticles (neutrons; positrons alone), any temperature.
 *
 * The sums and residues of the pair gas, with nodes equally spaced in rapidity (rapidity-nodes.ts). The integrand is
 * analytic up to Im u = pi/2 but for the poles at u_k = ln(E_k + p_k).
 */
import type { Order } from "../thermodynamics/free-energy.js";
import { CUT_DENSITY, CUT_SECOND, CUT_THIRD } from "./accuracy.js";
import { refuseOverflow } from "./momentum-ladder.js";
import { NODE_ENERGY, NODE_NUMBER, NODE_STRIDE } from "./node-layout.js";
import { fillFactors, sumParticles, sumParticlesThird } from "./node-sums.js";
import { addPoleResidues } from "./pole-residues.js";
import { chooseRapidityStep, rapidityNodesOf } from "./rapidity-nodes.js";
import { ANTIPARTICLES, CENTRE, CUT, ETA, LAMBDA, NU, PSI, RECORD_LENGTH, STEP, THETA } from "./record.js";
import { storeMoments } from "./trapezoid.js";

/** Evaluates the record's N_ij, P00, Q, M12 (order 3: all) at its ETA, NU, THETA; |ETA| < 40. */
export function singleSpecies(gas: Float64Array, order: Order): void {
  const eta = gas[ETA]!;
  const theta = gas[THETA]!;
  const degenerate = eta > 0;
  // Re E < 0 (a negative mu with its rest mass): the poles lie above Im u = pi/2, beyond every contour.
  const poles = eta < -4 || eta * theta <= -1 ? 0 : eta < 1 ? 1 : eta < 5 ? 2 : 3;
  gas[CENTRE] = degenerate ? eta * theta : 0;
  gas[PSI] = degenerate ? 0 : eta;
  gas[LAMBDA] = degenerate ? 0 : 1;
  gas[CUT] = order === 3 || theta > 0.1 ? CUT_THIRD : CUT_SECOND;
  const rung = chooseRapidityStep(gas, poles);
  const row = rapidityNodesOf(rung);
  const count = fillFactors(gas, row, false);
  sumParticles(gas, row, count);
  if (order === 3) sumParticlesThird(gas, row, count);
  if (poles > 0) addPoleResidues(gas, poles, "rapidity", order);
  storeMoments(gas, order);
  gas[ANTIPARTICLES] = 0;
}

/** A record for the positrons of a pair gas, seen as a species of its own. */
const positrons = new Float64Array(RECORD_LENGTH);

/**
 * Sets ANTIPARTICLES of a pair gas from its NU and THETA. They are never degenerate, eta = -nu - 1/theta < 0, so
 * one sum of positive terms does.
 */
export function antiparticleDensity(gas: Float64Array): void {
  const theta = gas[THETA]!;
  const inverse = 1 / theta;
  const eta = -gas[NU]! - inverse;
  gas[ANTIPARTICLES] = 0;
  if (eta < -740) return; // e^eta underflows
  positrons[ETA] = eta;
  positrons[THETA] = theta;
  const rung = chooseRapidityStep(positrons, eta < -3 ? -1 : 0);
  const row = rapidityNodesOf(rung);
  const scale = Math.exp(eta);
  let sum = 0;
  for (let node = 0; ; node += NODE_STRIDE) {
    const x = row[node + NODE_ENERGY]! * inverse;
    if (!(x < CUT_DENSITY)) {
      if (x === Number.POSITIVE_INFINITY) refuseOverflow(theta);
      break;
    }
    const a = scale * Math.exp(-x);
    sum += (row[node + NODE_NUMBER]! * a) / (1 + a);
  }
  gas[ANTIPARTICLES] = sum * positrons[STEP]!;
}
