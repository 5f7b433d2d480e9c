/**
 * Nodes for one kind of particle alone: the trapezoidal rule in rapidity u = asinh p.
 *
 * Without antiparticles the cut of E = sqrt(1 + p^2) at p = +-i does not cancel; in u every integrand is free of it:
 * n = int sinh^2 u cosh u f du, P = int (sinh^4 u)/3 f du. Rows have the layout of momentum-ladder.ts.
 */
import { CLEAR_HEIGHT, GAUSSIAN_HEIGHT, RAPIDITY_DIGITS } from "./accuracy.js";
import { chooseRung, stepOf } from "./momentum-ladder.js";
import { NODE_ENERGY, NODE_NUMBER, NODE_PRESSURE, NODE_STRIDE } from "./node-layout.js";
import { CONTOUR, ETA, STEP, THETA } from "./record.js";

const CAPACITY = 256;
const rows: Float64Array[] = [];

/** Nodes of a rung of the common ladder of steps, ended by a sentinel of infinite energy. */
export function rapidityNodesOf(rung: number): Float64Array {
  return rows[rung] ?? buildRow(rung);
}

function buildRow(rung: number): Float64Array {
  const h = stepOf(rung);
  const row = new Float64Array(NODE_STRIDE * (CAPACITY + 1));
  for (let j = 0; j < CAPACITY; j++) {
    const u = (j + 1) * h;
    const half = Math.sinh(0.5 * u);
    const energy = 2 * half * half; // cosh u - 1 without cancellation
    const p = Math.sinh(u);
    const node = NODE_STRIDE * j;
    row[node + NODE_ENERGY] = energy;
    row[node + NODE_NUMBER] = p * p * (1 + energy);
    row[node + NODE_PRESSURE] = (p * p * p * p) / 3;
  }
  row[NODE_STRIDE * CAPACITY + NODE_ENERGY] = Number.POSITIVE_INFINITY;
  rows[rung] = row;
  return row;
}

/**
 * The rung of the largest sufficient step, as in trapezoid.ts, for the record's ETA and THETA; writes CONTOUR and STEP.
 * `poles`: how many are corrected for; negative where none comes near (the classical gas, rare positrons).
 */
export function chooseRapidityStep(gas: Float64Array, poles: number): number {
  const theta = gas[THETA]!;
  const eta = gas[ETA]!;
  const kinetic = eta * theta;
  let y = CLEAR_HEIGHT;
  if (poles >= 0 && kinetic > -1) {
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
  gas[STEP] = (2 * Math.PI * y) / (RAPIDITY_DIGITS + growth);
  return chooseRung(gas);
}
