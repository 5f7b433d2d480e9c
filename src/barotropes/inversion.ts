/**
 * Inversion of a barotrope from P and from w, by a table to start from and Newton's method on the barotrope itself.
 *
 * Nodes by rising density hold P, w and C = dP/drho. Since d ln rho/dw = 1/C and d ln rho/dP = 1/(rho C) are finite
 * even where P = 0, cubic Hermite interpolation of ln rho starts a Newton iteration that ends after one or two
 * evaluations at rounding; the bracket of two nodes safeguards it. Doubles travel in a scratch record, so that none is
 * boxed.
 */
import { BAROTROPE_DENSITY, BAROTROPE_ENERGY, BAROTROPE_POTENTIAL, BAROTROPE_PRESSURE } from "./barotrope.js";

/** Scratch slot: added to w; the nodes are without it. */
export const OFFSET = 0;
/** Scratch slot: C = dP/drho, written by every evaluation. */
export const SLOPE = 1;
/** Scratch slot: de/d ln rho, written by every evaluation. */
export const ENERGY_SLOPE = 2;
/** Scratch slot: ln rho at which a cell is looked up. */
export const LOG = 3;
/** Scratch slot: P or w that is looked up. */
const TARGET = 4;
/** Slots in use here; those from this one on are the caller's. */
export const INVERSION_SLOTS = 5;

/** A Newton step in ln rho below this changes nothing but the last digit: it is applied without another evaluation. */
const lastStep = 1e-12;

/** Nodes by rising density; two at least. */
export interface InversionNodes {
  /** Densities of the first and the last node. */
  readonly density: readonly [number, number];
  /** ln rho. */
  readonly logs: Float64Array;
  /** P. */
  readonly pressures: Float64Array;
  /** w without offset. */
  readonly potentials: Float64Array;
  /** C. */
  readonly slopes: Float64Array;
}

/** Inversions; beyond the ends they give the nearest end. */
export interface Inversion {
  /** Index of the cell that holds LOG. */
  cellOfLog(): number;
  /** Fills the record from its pressure. */
  fillAtPressure(record: Float64Array): void;
  /** Fills the record from its potential. */
  fillAtPotential(record: Float64Array): void;
}

/**
 * Inversions of `fillAtDensity`, which fills the record and the slots SLOPE and ENERGY_SLOPE.
 *
 * @param startCell - called before the first evaluation in a cell, with its index and LOG set: for what the evaluation starts from
 */
export function inversionOf(
  nodes: InversionNodes,
  fillAtDensity: (record: Float64Array) => void,
  scratch: Float64Array,
  startCell: ((cell: number) => void) | undefined,
): Inversion {
  const { logs, pressures, potentials, slopes } = nodes;
  const last = logs.length - 1;

  /** Index of the node at or below the value in the slot TARGET or, for the nodes themselves, LOG. */
  function nodeBelow(values: Float64Array): number {
    const value = scratch[values === logs ? LOG : TARGET]!;
    let lower = 0;
    let upper = last;
    while (upper - lower > 1) {
      const middle = (lower + upper) >> 1;
      if (values[middle]! <= value) lower = middle;
      else upper = middle;
    }
    return lower;
  }

  /** Newton for the density at which slot `slot` has the value it has now. */
  function invert(record: Float64Array, slot: number): void {
    const given = record[slot]!;
    const byPressure = slot === BAROTROPE_PRESSURE;
    const values = byPressure ? pressures : potentials;
    const offset = byPressure ? 0 : scratch[OFFSET]!;
    const target = given - offset;
    if (!(target > values[0]! && target < values[last]!)) {
      record[BAROTROPE_DENSITY] = target >= values[last]! ? nodes.density[1] : nodes.density[0];
      scratch[LOG] = target >= values[last]! ? logs[last]! : logs[0]!;
      startCell?.(target >= values[last]! ? last - 1 : 0);
      fillAtDensity(record);
      return;
    }
    scratch[TARGET] = target;
    const i = nodeBelow(values);
    const width = values[i + 1]! - values[i]!;
    const step = logs[i + 1]! - logs[i]!;
    const t = (target - values[i]!) / width;
    const unit = byPressure ? Math.exp(logs[i]!) : 1;
    const lowSlope = width / (slopes[i]! * unit);
    const highSlope = width / (slopes[i + 1]! * (byPressure ? unit * Math.exp(step) : 1));
    const s = 1 - t;
    let log = logs[i]! + t * t * (3 - 2 * t) * step + t * s * (s * lowSlope - t * highSlope);
    let lower = logs[i]!;
    let upper = logs[i + 1]!;
    if (!(log >= lower && log <= upper)) log = lower + t * step;
    scratch[LOG] = log;
    startCell?.(i);
    let density = Math.exp(log);
    for (let n = 0; n < 60; n++) {
      record[BAROTROPE_DENSITY] = density;
      fillAtDensity(record);
      const residual = record[slot]! - given;
      if (residual > 0) upper = log;
      else lower = log;
      const move = -residual / (byPressure ? scratch[SLOPE]! * density : scratch[SLOPE]!);
      if (Math.abs(move) < lastStep) {
        record[BAROTROPE_DENSITY] = density * (1 + move);
        record[BAROTROPE_PRESSURE]! += scratch[SLOPE]! * density * move;
        record[BAROTROPE_ENERGY]! += scratch[ENERGY_SLOPE]! * move;
        record[BAROTROPE_POTENTIAL]! += scratch[SLOPE]! * move;
        record[slot] = given;
        return;
      }
      // The step in rho itself while it is small: exp(log) would round ln rho first.
      const next = log + move;
      if (next > lower && next < upper) {
        log = next;
        density = Math.abs(move) < 1e-3 ? density * (1 + move * (1 + move * (0.5 + move / 6))) : Math.exp(log);
      } else {
        log = 0.5 * (lower + upper);
        density = Math.exp(log);
      }
      if (upper - lower < 4e-16 * Math.abs(upper)) break;
    }
    record[slot] = given;
  }

  return {
    cellOfLog: () => nodeBelow(logs),
    fillAtPressure: (record) => invert(record, BAROTROPE_PRESSURE),
    fillAtPotential: (record) => invert(record, BAROTROPE_POTENTIAL),
  };
}
