/**
 * Fermi integrals of one species without antiparticles (neutrons; positrons alone), any temperature.
 *
 * The sums and residues of the pair gas, with nodes equally spaced in rapidity (rapidity-nodes.ts). The integrand is
 * analytic up to Im u = pi/2 but for the poles at u_k = ln(E_k + p_k).
 */
import type { Order } from "../thermodynamics/free-energy.js";
import { NODE_ENERGY, NODE_NUMBER, NODE_STRIDE, refuseOverflow, rungBelow, stepOf } from "./momentum-ladder.js";
import { fillFactors, sumParticles, sumParticlesThird } from "./node-sums.js";
import { addPoleResidues } from "./pole-residues.js";
import { rapidityNodesOf } from "./rapidity-nodes.js";
import { ANTIPARTICLES, CENTRE, CONTOUR, CUT, ETA, LAMBDA, NU, PSI, RECORD_LENGTH, STEP, THETA } from "./record.js";
import { DIGITS, GAUSSIAN_HEIGHT, storeMoments } from "./trapezoid.js";

/** Height in u below which no cut or zero of cosh u disturbs (pi/2 less a margin). */
const CLEAR_HEIGHT = 1.35;
/** The weights grow with cosh u: three digits more than in momentum. */
const EXTRA_DIGITS = 3;
const NO_POLES = -1;

/** Evaluates the record's N_ij, P00, Q, M12 (order 3: all) at its ETA, NU, THETA; |ETA| < 40. */
export function singleSpecies(gas: Float64Array, order: Order): void {
  const eta = gas[ETA]!;
  const theta = gas[THETA]!;
  const degenerate = eta > 0;
  const poles = eta < -4 ? 0 : eta < 1 ? 1 : eta < 5 ? 2 : 3;
  gas[CENTRE] = degenerate ? eta * theta : 0;
  gas[PSI] = degenerate ? 0 : eta;
  gas[LAMBDA] = degenerate ? 0 : 1;
  gas[CUT] = order === 3 ? 57 : theta > 0.1 ? 56 : 52; // x^(7/2) e^(-x), relativistic x^4 e^(-x), below 1e-17
  const rung = chooseRapidityStep(gas, poles);
  gas[STEP] = stepOf(rung);
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
  const rung = chooseRapidityStep(positrons, eta < -3 ? NO_POLES : 0);
  const row = rapidityNodesOf(rung);
  const scale = Math.exp(eta);
  let sum = 0;
  for (let node = 0; ; node += NODE_STRIDE) {
    const x = row[node + NODE_ENERGY]! * inverse;
    if (!(x < 46)) {
      if (x === Number.POSITIVE_INFINITY) refuseOverflow(theta);
      break;
    }
    const a = scale * Math.exp(-x);
    sum += (row[node + NODE_NUMBER]! * a) / (1 + a);
  }
  gas[ANTIPARTICLES] = sum * stepOf(rung);
}

/** As chooseStep of trapezoid.ts, in rapidity; `poles` corrected for, or NO_POLES where none comes near. */
function chooseRapidityStep(gas: Float64Array, poles: number): number {
  const theta = gas[THETA]!;
  const eta = gas[ETA]!;
  const kinetic = eta * theta;
  let y = CLEAR_HEIGHT;
  if (poles !== NO_POLES && kinetic > -1) {
    const frequency = Math.PI * theta * (2 * poles + 1);
    const re = kinetic * (kinetic + 2) - frequency * frequency;
    const im = 2 * (1 + kinetic) * frequency;
    const modulus = Math.sqrt(re * re + im * im);
    const larger = Math.sqrt(0.5 * (modulus + Math.abs(re)));
    const smaller = (0.5 * im) / larger;
    const pRe = re > 0 ? larger : smaller;
    const pIm = re > 0 ? smaller : larger;
    const height = Math.atan2(frequency + pIm, 1 + kinetic + pRe);
    if (height < y) y = height;
  }
  const gaussian = Math.sqrt(GAUSSIAN_HEIGHT * theta);
  if (y > gaussian) y = gaussian;
  let growth = (1 - Math.cos(y)) / theta;
  const bound = eta < 0 ? 1 - eta : 1;
  if (growth > bound) growth = bound;
  gas[CONTOUR] = y;
  return rungBelow((2 * Math.PI * y) / (DIGITS + EXTRA_DIGITS + growth));
}
