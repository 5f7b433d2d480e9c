/**
 * The trapezoidal rule's steps in momentum, and what its nodes p = j h need, computed once per step.
 *
 * Steps lie on the ladder 2^(k/8), rounded to 20 bits: p = j h and p/h are then exact, 4 % of the nodes are wasted,
 * and the hot loop has no square root.
 */
import { FermistateError } from "../errors.js";
import { squareErrors } from "../numerics/exact-product.js";
import { NODE_ENERGY, NODE_ENERGY_LOW, NODE_NUMBER, NODE_PRESSURE, NODE_STRIDE } from "./node-layout.js";
import { STEP, SUM_P } from "./record.js";

const LOWEST = -240;
const HIGHEST = 136;
/** Nodes kept per step; 45 is the most seen in 300 000 random states. The row ends with a sentinel. */
const CAPACITY = 96;

const steps = /* @__PURE__ */ Float64Array.from({ length: HIGHEST - LOWEST + 1 }, (_, i) => {
  const exponent = (i + LOWEST) / 8;
  const whole = Math.floor(exponent);
  return (Math.round(2 ** (exponent - whole) * 2 ** 19) / 2 ** 19) * 2 ** whole;
});
const rows: Float64Array[] = [];
const square = new Float64Array(2);
const vacuumTerms = new Float64Array(HIGHEST - LOWEST + 1);

/**
 * Rounds the record's STEP down to the ladder (2^-30 ... 2^17, far beyond the domain on both sides); returns the rung.
 */
export function chooseRung(gas: Float64Array): number {
  let rung = Math.floor(8 * Math.log2(gas[STEP]!)) - LOWEST;
  if (!(rung >= 0)) rung = 0; // NaN too: the iteration then ends with an error
  if (rung > HIGHEST - LOWEST) rung = HIGHEST - LOWEST;
  gas[STEP] = steps[rung]!;
  return rung;
}

/** Step of a rung. */
export function stepOf(rung: number): number {
  return steps[rung]!;
}

/** Nodes of a rung, {@link NODE_STRIDE} numbers each, ended by a sentinel of infinite energy. */
export function nodesOf(rung: number): Float64Array {
  return rows[rung] ?? buildRow(rung);
}

/**
 * Subtracts from SUM_P the error of the rule in the pressure of the sea,
 * (2/3) int_1^inf t^4/sqrt(t^2 - 1) / (e^(2 pi t/h) - 1) dt.
 *
 * f_- + f_+ = 1 - (an odd function of E); the 1 leaves p^4/(3E), whose trapezoid error, wrapped round the cut of E
 * at p = i t, is this number. It depends on the step alone, so it is exact for every temperature. The rung's nodes must
 * have been asked for before.
 */
export function subtractVacuumTerm(gas: Float64Array, rung: number): void {
  gas[SUM_P]! -= vacuumTerms[rung]!;
}

/** Called when a sum met the sentinel: it would be silently short. */
export function refuseOverflow(theta: number): never {
  throw new FermistateError("no-convergence", {
    argument: "temperature",
    given: theta,
    allowed: `kT/mc^2 for which ${CAPACITY} nodes are enough (a defect of the library: please report)`,
  });
}

function buildRow(rung: number): Float64Array {
  const h = steps[rung]!;
  const row = new Float64Array(NODE_STRIDE * (CAPACITY + 1));
  for (let j = 0; j < CAPACITY; j++) {
    const p = (j + 1) * h;
    const p2 = p * p;
    const total = Math.sqrt(1 + p2);
    const energy = p2 / (1 + total); // E - 1 without cancellation
    const energy2 = energy * energy;
    square[0] = energy;
    squareErrors(square, 1);
    // Residual of p^2 = e^2 + 2e: the larger term first, then the difference is exact (Sterbenz).
    const rest = energy < 2 ? p2 - 2 * energy - energy2 : p2 - energy2 - 2 * energy;
    const residual = rest - square[1]!;
    const node = NODE_STRIDE * j;
    row[node + NODE_ENERGY] = energy;
    row[node + NODE_ENERGY_LOW] = residual / (2 * total);
    row[node + NODE_NUMBER] = p2;
    row[node + NODE_PRESSURE] = (p2 * p2) / (3 * total);
  }
  row[NODE_STRIDE * CAPACITY + NODE_ENERGY] = Number.POSITIVE_INFINITY;
  vacuumTerms[rung] = vacuumTerm(h);
  rows[rung] = row;
  return row;
}

/** With t = cosh w the integrand is smooth and its own trapezoidal rule of step 1/64 exact to rounding. */
function vacuumTerm(h: number): number {
  const decay = (2 * Math.PI) / h;
  let sum = 0;
  for (let i = 0; ; i++) {
    const t = Math.cosh(i / 64);
    // Cut off relative to the first term: an absolute cut would cost 3e-14 in the pressure of cold pairs.
    if (decay * t >= decay + 45 || decay * t > 740) break;
    sum += ((i === 0 ? 0.5 : 1) * t ** 4) / Math.expm1(decay * t);
  }
  return ((2 / 3) * sum) / 64;
}
