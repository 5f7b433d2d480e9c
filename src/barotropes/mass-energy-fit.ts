/**
 * A barotrope from P as a smooth function of the density of mass-energy E/c^2, the form in which matter of neutron
 * stars is published.
 *
 *     xi = log10(E/c^2), zeta(xi) = log10 P;  q = P/E;  d ln(rho)/d ln(E) = 1/(1 + q)     (first law at T = 0)
 *     y = ln(E/(rho c^2)) = y_0 + int q/(1 + q) d ln E;   e = c^2 (exp(y) - 1),  w = c^2 (exp(y)(1 + q) - 1)
 *
 * y is integrated once between nodes of xi, by Gauss's rule with 3 points from the node below to any xi: the integrand
 * is smooth on the scale of the nodes, so e and P fit each other to rounding. y_0 is the choice of rho at the lowest
 * density.
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

/** Writes zeta and d zeta/d xi to slots 0 and 1 of a record whose slot 2 is xi. */
export type LogPressure = (record: Float64Array) => void;

const c2 = speedOfLight * speedOfLight;
/** Nodes per unit of xi. */
const resolution = 500;
/**
 * Every so many nodes from this xi on a solver should end a step: the formulas have features a tenth of a decade wide there, which long
 * steps do not notice (errors of stars of up to a thousand tolerances, below ten with these ends).
 */
const stops = 0.1 * resolution;
const stopsFrom = 11;
/** Gauss's rule on [0, 1]. */
const abscissae = [0.5 - Math.sqrt(0.15), 0.5, 0.5 + Math.sqrt(0.15)] as const;
const weights = [5 / 18, 8 / 18, 5 / 18] as const;

/** Slots of the scratch record: xi to evaluate at, y there, q there, width of the integral in ln E. */
const XI = 0;
const Y = 1;
const RATIO = 2;
const WIDTH = 3;
const PER_LIGHT_SPEED_SQUARED = 1 / c2;

/**
 * The barotrope of zeta(xi) for xi from `lowest` to `highest`, and below that of a polytrope of the same exponent down
 * to P = 0.
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
  const out = new Float64Array(3);
  const values = new Float64Array(4);
  const logs = new Float64Array(count); // y
  const densities = new Float64Array(count);
  const pressures = new Float64Array(count);
  const potentials = new Float64Array(count);

  /** Adds q/(1 + q) at the xi of `out`, times a weight, to Y. */
  function addShare(k: number): void {
    logPressure(out);
    const q = Math.exp((out[0]! - out[2]!) * Math.LN10) * PER_LIGHT_SPEED_SQUARED;
    values[Y]! += (weights[k]! * values[WIDTH]! * q) / (1 + q);
  }

  /** Sets Y to the integral from node `place` over WIDTH in ln E, plus y at the node. */
  function integrate(place: number): void {
    values[Y] = logs[place]!;
    if (values[WIDTH] === 0) return;
    const node = lowest + place * step;
    const width = values[WIDTH]! / Math.LN10;
    for (let k = 0; k < 3; k++) {
      out[2] = node + width * abscissae[k]!;
      addShare(k);
    }
  }

  /** Fills the record from XI. */
  function fill(record: Float64Array): void {
    const xi = values[XI]!;
    const place = Math.max(0, Math.min(count - 1, Math.floor((xi - lowest) / step)));
    values[WIDTH] = (xi - (lowest + place * step)) * Math.LN10;
    integrate(place);
    out[2] = xi;
    logPressure(out);
    const massEnergy = 10 ** xi;
    const pressure = 10 ** out[0]!;
    const q = (pressure / massEnergy) * PER_LIGHT_SPEED_SQUARED;
    const growth = Math.expm1(values[Y]!);
    values[RATIO] = q;
    record[BAROTROPE_DENSITY] = massEnergy / (1 + growth);
    record[BAROTROPE_PRESSURE] = pressure;
    record[BAROTROPE_ENERGY] = c2 * growth;
    record[BAROTROPE_POTENTIAL] = c2 * (growth + q * (1 + growth));
    record[BAROTROPE_GAMMA] = out[1]! * (1 + q);
  }

  // At the lowest density: e = e_0 + (P/rho)/(Gamma - 1), rho = E/(c^2 + e) and Gamma = zeta' (1 + q).
  out[2] = lowest;
  logPressure(out);
  const ratio = 10 ** (out[0]! - lowest) / c2;
  const gamma = out[1]! * (1 + ratio);
  logs[0] = Math.log1p(energyAtZeroDensity / c2) - Math.log1p(-ratio / (gamma - 1));
  const record = new Float64Array(BAROTROPE_LENGTH);
  for (let i = 0; i < count; i++) {
    if (i > 0) {
      values[WIDTH] = step * Math.LN10;
      integrate(i - 1);
      logs[i] = values[Y]!;
    }
    values[XI] = lowest + i * step;
    fill(record);
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
      values[XI] = xi;
      fill(record);
      const value = record[slot]!;
      const q = values[RATIO]!;
      const slope = out[1]!;
      const rate =
        slot === BAROTROPE_DENSITY
          ? value / (1 + q)
          : slot === BAROTROPE_PRESSURE
            ? value * slope
            : (record[BAROTROPE_PRESSURE]! / record[BAROTROPE_DENSITY]!) * slope;
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
    kinks: Array.from(potentials).filter((_, i) => i > stopsFrom * resolution - lowest * resolution && i % stops === 0),
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
