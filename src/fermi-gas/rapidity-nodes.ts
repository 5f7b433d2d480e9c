/**
 * Nodes for one kind of particle alone: the trapezoidal rule in rapidity u = asinh p.
 *
 * Without antiparticles the cut of E = sqrt(1 + p^2) at p = +-i does not cancel; in u every integrand is free of it:
 * n = int sinh^2 u cosh u f du, P = int (sinh^4 u)/3 f du. Rows have the layout of momentum-ladder.ts.
 */
import {
  NODE_ENERGY,
  NODE_NUMBER,
  NODE_PRESSURE,
  NODE_STRIDE,
  stepOf,
} from "./momentum-ladder.js";

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
