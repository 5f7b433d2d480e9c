/**
 * A barotrope from P as a smooth function of the density of mass-energy E/c^2, the form in which matter of neutron stars is published.
 *
 *     xi = log10(E/c^2), zeta(xi) = log10 P;  q = P/E;  d ln(rho)/d ln(E) = 1/(1 + q)     (first law at T = 0)
 *     y = ln(E/(rho c^2)) = y_0 + int q/(1 + q) d ln E;   e = c^2 (exp(y) - 1),  w = c^2 (exp(y)(1 + q) - 1)
 *
 * y is integrated once between nodes of xi, by Gauss's rule with 3 points from the node below to any xi: the integrand is smooth
 * on the scale of the nodes, so e and P fit each other to rounding. y_0 is the choice of rho at the lowest density.
 */
import { speedOfLight } from "../constants.js";
import { FermistateError } from "../errors.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "./barotrope.js";
import { evaluatePieces } from "./polytropic-pieces.js";
import { type Layer, stacked } from "./stacked.js";

/** zeta and d zeta/d xi at xi, written to slots 0 and 1. */
export type LogPressure = (xi: number, out: Float64Array) => void;

const c2 = speedOfLight * speedOfLight;
/** Nodes per unit of xi. */
const resolution = 500;
/** Gauss's rule on [0, 1]. */
const abscissae = [0.5 - Math.sqrt(0.15), 0.5, 0.5 + Math.sqrt(0.15)] as const;
const weights = [5 / 18, 8 / 18, 5 / 18] as const;

const Y = 0;
const RATIO = 1;
const SLOPE = 2;
const LOG_PRESSURE = 3;

/**
 * The barotrope of zeta(xi) for xi from `lowest` to `highest`, and below that of a polytrope of the same exponent down to P = 0.
 *
 * @param energyAtZeroDensity - e at density 0, erg/g: fixes rho
 */
export function massEnergyFit(
  name: string,
  validity: string,
  logPressure: LogPressure,
  [lowest, highest]: readonly [number, number],
  energyAtZeroDensity: number,
): Barotrope {
  const count = Math.round((highest - lowest) * resolution) + 1;
  const step = (highest - lowest) / (count - 1);
  const out = new Float64Array(2);
  const values = new Float64Array(4);
  const logs = new Float64Array(count); // y
  const densities = new Float64Array(count);
  const pressures = new Float64Array(count);
  const potentials = new Float64Array(count);

  /** q/(1 + q) at xi. */
  function share(xi: number): number {
    logPressure(xi, out);
    const q = 10 ** (out[0]! - xi) / c2;
    return q / (1 + q);
  }

  /** y at xi, from the node below. */
  function enter(xi: number): void {
    const place = Math.max(0, Math.min(count - 1, Math.floor((xi - lowest) / step)));
    const node = lowest + place * step;
    const width = xi - node;
    let sum = 0;
    if (width !== 0) for (let k = 0; k < 3; k++) sum += weights[k]! * share(node + width * abscissae[k]!);
    values[Y] = logs[place]! + sum * width * Math.LN10;
    logPressure(xi, out);
    values[RATIO] = 10 ** (out[0]! - xi) / c2;
    values[SLOPE] = out[1]!;
    values[LOG_PRESSURE] = out[0]!;
  }

  /** Fills the record from xi. */
  function fill(record: Float64Array, xi: number): void {
    enter(xi);
    const q = values[RATIO]!;
    const growth = Math.expm1(values[Y]!);
    record[BAROTROPE_DENSITY] = 10 ** xi / (1 + growth);
    record[BAROTROPE_PRESSURE] = 10 ** values[LOG_PRESSURE]!;
    record[BAROTROPE_ENERGY] = c2 * growth;
    record[BAROTROPE_POTENTIAL] = c2 * (growth + q * (1 + growth));
    record[BAROTROPE_GAMMA] = values[SLOPE]! * (1 + q);
  }

  // At the lowest density: e = e_0 + (P/rho)/(Gamma - 1), rho = E/(c^2 + e) and Gamma = zeta' (1 + q).
  logPressure(lowest, out);
  const ratio = 10 ** (out[0]! - lowest) / c2;
  const gamma = out[1]! * (1 + ratio);
  logs[0] = Math.log1p(energyAtZeroDensity / c2) - Math.log1p(-ratio / (gamma - 1));
  const record = new Float64Array(BAROTROPE_LENGTH);
  for (let i = 0; i < count; i++) {
    if (i > 0) {
      const node = lowest + (i - 1) * step;
      let sum = 0;
      for (let k = 0; k < 3; k++) sum += weights[k]! * share(node + step * abscissae[k]!);
      logs[i] = logs[i - 1]! + sum * step * Math.LN10;
    }
    fill(record, lowest + i * step);
    densities[i] = record[BAROTROPE_DENSITY]!;
    pressures[i] = record[BAROTROPE_PRESSURE]!;
    potentials[i] = record[BAROTROPE_POTENTIAL]!;
    if (i > 0 && !(pressures[i]! > pressures[i - 1]!)) {
      const allowed = "a pressure that rises with density";
      throw new FermistateError("unstable", { argument: "density", given: densities[i], allowed });
    }
  }

  /** Newton in ln E for the xi at which slot `slot` has the value it has now. */
  function invert(record: Float64Array, slot: number, nodes: Float64Array): void {
    const given = record[slot]!;
    let low = 0;
    let high = count - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (nodes[middle]! <= given) low = middle;
      else high = middle;
    }
    const t = (given - nodes[low]!) / (nodes[high]! - nodes[low]!);
    let lower = lowest + low * step;
    let upper = lowest + high * step;
    let xi = lower + Math.max(0, Math.min(1, t)) * step;
    for (let n = 0; n < 40; n++) {
      fill(record, xi);
      const value = record[slot]!;
      const q = values[RATIO]!;
      const rate =
        slot === BAROTROPE_DENSITY
          ? value / (1 + q)
          : slot === BAROTROPE_PRESSURE
            ? value * values[SLOPE]!
            : (record[BAROTROPE_PRESSURE]! / record[BAROTROPE_DENSITY]!) * values[SLOPE]!;
      const move = (given - value) / (rate * Math.LN10);
      if (move > 0) lower = xi;
      else upper = xi;
      const next = xi + move;
      if (Math.abs(move) < 2e-15 * Math.abs(xi)) break;
      xi = next >= lower && next <= upper ? next : 0.5 * (lower + upper);
      if (xi === lower || xi === upper) {
        if (upper - lower < 4e-15) break;
      }
    }
    record[slot] = given;
  }

  const last = count - 1;
  const fit: Layer = {
    density: [densities[0]!, densities[last]!],
    pressure: [pressures[0]!, pressures[last]!],
    potential: [potentials[0]!, potentials[last]!],
    fillAtDensity: (r) => invert(r, BAROTROPE_DENSITY, densities),
    fillAtPressure: (r) => invert(r, BAROTROPE_PRESSURE, pressures),
    fillAtPotential: (r) => invert(r, BAROTROPE_POTENTIAL, potentials),
  };
  const envelope = evaluatePieces([
    { start: 0, anchor: densities[0]!, pressure: pressures[0]!, energy: energyAtZeroDensity, gamma, shift: 0 },
  ]);
  const outer: Layer = {
    density: [0, densities[0]!],
    pressure: [0, pressures[0]!],
    potential: [energyAtZeroDensity, potentials[0]!],
    fillAtDensity: envelope.fillAtDensity,
    fillAtPressure: envelope.fillAtPressure,
    fillAtPotential: envelope.fillAtPotential,
  };
  return stacked(name, validity, [outer, fit]);
}
