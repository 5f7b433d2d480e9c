/**
 * Departures of ion mixtures from linear mixing at a common electron density: in the liquid a function of Gamma_e, in a
 * random alloy an energy proportional to e^2/a_e.
 *
 * Averages <.> run over charged nuclei; free neutrons share in the number of nuclei, not in the plasma. Both results are
 * per nucleus of every kind, so they carry the number share of charged nuclei.
 */
import type { Composition } from "../matter/composition.js";
import { notesOf, numberFractionsOf } from "../matter/species-list.js";
import { POINT_GAMMA_E, POINT_LOG_GAMMA_E, POINT_ROOT_GAMMA_E } from "./slots.js";

/** Parameters of f = amplitude Gamma_e^(3/2)/[(1 + a G^alpha) (1 + b G^alpha)^beta], G = Gamma_e <Z^(5/3)>. */
export interface LiquidMixture {
  /** Debye-Hueckel departure over Gamma_e^(3/2), per nucleus and kT; 0 for one charge. */
  readonly amplitude: number;
  readonly a: number;
  readonly b: number;
  /** At most 1. */
  readonly alpha: number;
  /** 3/(2 alpha) - 1: f tends to a constant at strong coupling. */
  readonly beta: number;
  /** ln <Z^(5/3)>. */
  readonly logCoupling: number;
}

/**
 * Parameters of the liquid's departure from linear mixing.
 *
 * Potekhin, Chabrier, Chugunov, DeWitt & Rogers 2009, Phys. Rev. E 80, 047401 (from memory; exact at weak coupling by
 * construction; own hypernetted-chain calculations agree to 3 % up to Gamma = 0.1 for H/He and C/O, to 13 % for dilute
 * oxygen in hydrogen and iron in carbon; at Gamma = 3 the fit, tuned to simulations, is 7 % to a factor 2 above them).
 *
 * @param polarisable - true where the ion-electron term is part of the free energy, false for a rigid background
 */
export function liquidMixture(composition: Composition, polarisable: boolean): LiquidMixture {
  fillAverages(averages, composition, polarisable);
  const delta = averages[DELTA]!;
  const alpha = averages[ALPHA]!;
  const breadth = averages[SECOND]! / (averages[FIRST]! * averages[FIRST]!);
  const a = averages[TOP]! / (1 - delta);
  return {
    amplitude: (averages[TOTAL]! * averages[UNIT]! * delta) / Math.sqrt(3),
    a,
    b: 0.0117 * breadth * breadth * a,
    alpha,
    beta: 1.5 / alpha - 1,
    logCoupling: Math.log(averages[COUPLING]!),
  };
}

// Slots of the averages over charged nuclei that the departure is made of.

/** Number fraction of the charged nuclei. */
const TOTAL = 0;
/** <Z>. */
export const FIRST = 1;
/** <Z^2>. */
export const SECOND = 2;
/** <Z^(5/3)>. */
export const COUPLING = 3;
/** <Z^(5/2)>. */
export const UNIT = 4;
/** <Z^2> or, with polarisable background, <Z^2 + Z>. */
export const SQUARE = 5;
/** Debye & Hueckel's term of the mixture. */
export const MIXED = 6;
/** That of linear mixing less it, over UNIT; 0 to the last digit where nothing is mixed. */
export const DELTA = 7;
/** (<Z^2>/<Z>^2)^(-1/5). */
export const ALPHA = 8;
/** a (1 - DELTA). */
export const TOP = 9;
export const AVERAGES_LENGTH = 10;

const averages = new Float64Array(AVERAGES_LENGTH);

/** Fills the averages of a composition with charged nuclei; `polarisable` as in {@link liquidMixture}. */
export function fillAverages(out: Float64Array, composition: Composition, polarisable: boolean): void {
  const { nuclei, firstCharged, charges, powers } = notesOf(composition).list;
  const numbers = numberFractionsOf(composition);
  const pures = polarisable ? powers.screened : powers.fiveHalves;
  let total = 0;
  for (let i = firstCharged; i < nuclei.length; i++) total += numbers[i]!;
  let first = 0;
  let second = 0;
  let coupling = 0;
  let unit = 0;
  let pure = 0;
  for (let i = firstCharged; i < nuclei.length; i++) {
    const fraction = numbers[i]! / total;
    first += fraction * nuclei[i]!.chargeNumber;
    second += fraction * powers.squared[i]!;
    coupling += fraction * powers.fiveThirds[i]!;
    unit += fraction * powers.fiveHalves[i]!;
    pure += fraction * pures[i]!;
  }
  const square = polarisable ? second + first : second;
  const mixed = square * Math.sqrt(square / first);
  const delta = charges > 1 ? (pure - mixed) / unit : 0;
  out[TOTAL] = total;
  out[FIRST] = first;
  out[SECOND] = second;
  out[COUPLING] = coupling;
  out[UNIT] = unit;
  out[SQUARE] = square;
  out[MIXED] = mixed;
  out[DELTA] = delta;
  out[ALPHA] = (second / (first * first)) ** -0.2;
  out[TOP] = 2.6 + 14 * delta * delta * delta;
}

/**
 * Adds the liquid's departure from linear mixing: u[k] += Gamma_e^k f^(k), k = 0..2 (order 2) or 0..4 (order 3), per
 * nucleus and kT, and u[5] += Gamma_e f' - f.
 *
 * With p = 1/(1 + a G^alpha), q = 1/(1 + b G^alpha) and D = d/d ln Gamma_e: D ln f = alpha (p + beta q), which is
 * 3/2 - alpha (1 - p) - alpha beta (1 - q) without its cancellation at strong coupling; D p = -alpha p (1 - p).
 * Rounding: 4e-14 of f in every member, from the amplitude, a difference of averages.
 */
export function addMixture(u: Float64Array, order: 2 | 3, point: Float64Array, mixture: LiquidMixture): void {
  const { alpha, beta } = mixture;
  const power = Math.exp(alpha * (point[POINT_LOG_GAMMA_E]! + mixture.logCoupling));
  const p = 1 / (1 + mixture.a * power);
  const q = 1 / (1 + mixture.b * power);
  const weak = mixture.amplitude * point[POINT_GAMMA_E]! * point[POINT_ROOT_GAMMA_E]!;
  const f = weak * p * Math.exp(beta * Math.log(q)); // the absolute error of the logarithm counts
  const slopeP = p * (1 - p);
  const slopeQ = q * (1 - q);
  // D ln f and its derivatives, then D^k f/f by the rule for exponentials.
  const l = alpha * (p + beta * q);
  const l1 = -alpha * alpha * (slopeP + beta * slopeQ);
  const d2 = l * l + l1;
  u[0]! += f;
  u[1]! += f * l;
  u[2]! += f * (d2 - l);
  u[5]! += f * (l - 1);
  if (order === 2) return;
  const cube = alpha * alpha * alpha;
  const l2 = cube * (slopeP * (1 - 2 * p) + beta * slopeQ * (1 - 2 * q));
  const l3 = -alpha * cube * (slopeP * (1 - 6 * slopeP) + beta * slopeQ * (1 - 6 * slopeQ));
  const d3 = l * l * l + 3 * l * l1 + l2;
  const d4 = l * l * l * l + 6 * l * l * l1 + 3 * l1 * l1 + 4 * l * l2 + l3;
  u[3]! += f * (d3 - 3 * d2 + 2 * l);
  u[4]! += f * (d4 - 6 * d3 + 11 * d2 - 6 * l);
}

/**
 * Energy of a random alloy on a bcc lattice beyond linear mixing, in e^2/a_e per nucleus: sum over pairs Z_i < Z_j of
 * x_i x_j Z_i^(5/3) dg(Z_j/Z_i, x_j/(x_i + x_j)).
 *
 * Ogata, Iyetomi, Ichimaru & Van Horn 1993, Phys. Rev. E 48, 1344, in the sum over pairs of Medin & Cumming 2010, Phys.
 * Rev. E 81, 036107 (both from memory). For charge ratios up to 4.5; continued beyond, where it is a guess. Isotopes
 * count as one charge, as they must; the sum over pairs would not see to that by itself. Proportional to Gamma: an
 * alloy demixes as T -> 0.
 */
export function alloyDeviation(composition: Composition): number {
  const { nuclei, firstCharged, powers } = notesOf(composition).list;
  const numbers = numberFractionsOf(composition);
  const count = nuclei.length;
  let total = 0;
  for (let i = firstCharged; i < count; i++) total += numbers[i]!;
  let sum = 0;
  for (let i = firstCharged, next: number; i < count; i = next) {
    const { chargeNumber } = nuclei[i]!;
    let light = numbers[i]!;
    for (next = i + 1; next < count && nuclei[next]!.chargeNumber === chargeNumber; next++) light += numbers[next]!;
    for (let j = next, after: number; j < count; j = after) {
      const other = nuclei[j]!.chargeNumber;
      let heavy = numbers[j]!;
      for (after = j + 1; after < count && nuclei[after]!.chargeNumber === other; after++) heavy += numbers[after]!;
      const weight = light * heavy * powers.fiveThirds[i]!;
      pair[PAIR_RATIO] = other / chargeNumber;
      pair[PAIR_SHARE] = heavy / (light + heavy);
      fillPairDeviation(pair);
      sum += weight * pair[PAIR_VALUE]!;
    }
  }
  return sum / total;
}

/** Slot of R, in. */
export const PAIR_RATIO = 0;
/** Slot of y, in. */
export const PAIR_SHARE = 1;
/** Slot of dg, out. */
export const PAIR_VALUE = 2;
/** Slot of y d(dg)/dy, out; finite at y = 0. */
export const PAIR_SLOPE = 3;
export const PAIR_LENGTH = 4;

const pair = new Float64Array(PAIR_LENGTH);

/**
 * dg(R, y) = C(R)/{1 + [27 (R - 1)/(1 + 0.1 (R - 1))] s (s - 0.3) (s - 0.7) (s - 1)}, s = sqrt y.
 *
 * The braces reach zero at R = 6.06 (s = 0.12 and 0.88): the printed fit has poles outside its range. So their ratio
 * stays at 4.5 beyond it, which keeps dg positive and continuous (an own continuation, of unknown error); C(R) goes on.
 */
export function fillPairDeviation(pair: Float64Array): void {
  const d = pair[PAIR_RATIO]! - 1;
  const inRange = Math.min(d, 3.5);
  const s = Math.sqrt(pair[PAIR_SHARE]!);
  const size = (0.05 * d * d) / ((1 + 0.64 * d) * (1 + 0.5 * d * d));
  const depth = (27 * inRange) / (1 + 0.1 * inRange);
  const value = size / (1 + depth * s * (s - 0.3) * (s - 0.7) * (s - 1));
  // With w = s^2 - s the quartic is w (w + 0.21).
  const bend = (2 * (s * s - s) + 0.21) * (2 * s - 1);
  pair[PAIR_VALUE] = value;
  pair[PAIR_SLOPE] = (-value * value * depth * bend * s) / (2 * size);
}
