/**
 * How the departures from linear mixing change with the amount of each species; formulas and sources in mixing.ts.
 *
 * Both departures are N f(fractions) with N charged nuclei, homogeneous of degree one in the amounts Y_a: the derivative by
 * Y_a at fixed electron density is f plus N df/dY_a, and N d<Z^p>/dY_a = Z_a^p - <Z^p>. Species of one charge share it.
 *
 * Results go into a record with {@link TANGENT_LENGTH} slots per charged species (slots.ts), in their order.
 */
import type { Composition } from "../matter/composition.js";
import { notesOf, numberFractionsOf } from "../matter/species-list.js";
import {
  ALPHA,
  AVERAGES_LENGTH,
  COUPLING,
  DELTA,
  FIRST,
  fillAverages,
  fillPairDeviation,
  type LiquidMixture,
  MIXED,
  PAIR_LENGTH,
  PAIR_RATIO,
  PAIR_SHARE,
  PAIR_SLOPE,
  PAIR_VALUE,
  SECOND,
  SQUARE,
  TOP,
  UNIT,
} from "./mixing.js";
import {
  ION_X,
  POINT_GAMMA_E,
  POINT_LOG_GAMMA_E,
  POINT_ROOT_GAMMA_E,
  TANGENT_ALLOY,
  TANGENT_ALPHA,
  TANGENT_AMPLITUDE,
  TANGENT_BETA,
  TANGENT_LENGTH,
  TANGENT_LOG_A,
  TANGENT_LOG_B,
  TANGENT_LOG_COUPLING,
} from "./slots.js";

const averages = new Float64Array(AVERAGES_LENGTH);

/** Fills the slots of the liquid's departure, for a composition of more than one charge. `polarisable` as in `liquidMixture`. */
export function fillLiquidTangents(tangents: Float64Array, composition: Composition, polarisable: boolean): void {
  const { nuclei, firstCharged, powers } = notesOf(composition).list;
  const pures = polarisable ? powers.screened : powers.fiveHalves;
  fillAverages(averages, composition, polarisable);
  const first = averages[FIRST]!;
  const second = averages[SECOND]!;
  const coupling = averages[COUPLING]!;
  const unit = averages[UNIT]!;
  const square = averages[SQUARE]!;
  const mixed = averages[MIXED]!;
  const delta = averages[DELTA]!;
  const alpha = averages[ALPHA]!;
  const ofDelta = (42 * delta * delta) / averages[TOP]! + 1 / (1 - delta);
  for (let i = firstCharged, at = 0; i < nuclei.length; i++, at += TANGENT_LENGTH) {
    const z = nuclei[i]!.chargeNumber;
    const relative = z / first;
    const ownSquare = polarisable ? powers.squared[i]! + z : powers.squared[i]!;
    const slope = pures[i]! - mixed * ((1.5 * ownSquare) / square - 0.5 * relative); // of N unit delta
    const logBreadth = powers.squared[i]! / second + 1 - 2 * relative;
    const logA = (ofDelta * (slope - delta * powers.fiveHalves[i]!)) / unit;
    tangents[at + TANGENT_AMPLITUDE] = slope / Math.sqrt(3);
    tangents[at + TANGENT_LOG_A] = logA;
    tangents[at + TANGENT_LOG_B] = 2 * logBreadth + logA;
    tangents[at + TANGENT_ALPHA] = -0.2 * alpha * logBreadth;
    tangents[at + TANGENT_BETA] = (0.3 * logBreadth) / alpha;
    tangents[at + TANGENT_LOG_COUPLING] = powers.fiveThirds[i]! / coupling - 1;
  }
}

/** What all species share of the liquid's departure at a point. */
const shared = new Float64Array(8);

/** Prepares {@link addLiquidTangent} at a point. `ions`: records of the charged species. */
export function prepareLiquidTangents(
  point: Float64Array,
  mixture: LiquidMixture,
  ions: readonly Float64Array[],
): void {
  let share = 0;
  for (let i = 0; i < ions.length; i++) share += ions[i]![ION_X]!;
  const { alpha, beta } = mixture;
  const logarithm = point[POINT_LOG_GAMMA_E]! + mixture.logCoupling; // ln G
  const power = Math.exp(alpha * logarithm);
  const p = 1 / (1 + mixture.a * power);
  const q = 1 / (1 + mixture.b * power);
  const logQ = Math.log1p(mixture.b * power);
  shared[0] = point[POINT_GAMMA_E]! * point[POINT_ROOT_GAMMA_E]! * p * Math.exp(-beta * logQ);
  shared[1] = logarithm;
  shared[2] = p;
  shared[3] = q;
  shared[4] = logQ;
  shared[5] = alpha;
  shared[6] = beta;
  shared[7] = mixture.amplitude / share; // per charged nucleus
}

/**
 * Adds d(N f)/dY_a of the liquid's departure at fixed electron density, f as in `addMixture`: u[0] its value, u[1] Gamma_e
 * d/dGamma_e of it, u[5] the second less the first. Per nucleus and kT. `at`: first slot of the species in `tangents`.
 */
export function addLiquidTangent(u: Float64Array, tangents: Float64Array, at: number): void {
  const weak = shared[0]!;
  const logarithm = shared[1]!;
  const p = shared[2]!;
  const q = shared[3]!;
  const logQ = shared[4]!;
  const alpha = shared[5]!;
  const beta = shared[6]!;
  const amplitude = shared[7]!;
  const ofAlpha = tangents[at + TANGENT_ALPHA]!;
  const ofBeta = tangents[at + TANGENT_BETA]!;
  // Changes of ln(a G^alpha), ln(b G^alpha), and of ln f at fixed amplitude; then D = d/d ln Gamma_e of the last.
  const logPower = ofAlpha * logarithm + alpha * tangents[at + TANGENT_LOG_COUPLING]!;
  const ofA = tangents[at + TANGENT_LOG_A]! + logPower;
  const ofB = tangents[at + TANGENT_LOG_B]! + logPower;
  const change = -(1 - p) * ofA - ofBeta * logQ - beta * (1 - q) * ofB;
  const slope =
    -alpha * p * (1 - p) * ofA -
    (1 - p) * ofAlpha -
    ofBeta * alpha * (1 - q) -
    beta * (alpha * q * (1 - q) * ofB + (1 - q) * ofAlpha);
  const value = weak * (tangents[at + TANGENT_AMPLITUDE]! + amplitude * change);
  const first = alpha * (p + beta * q) * value + weak * amplitude * slope;
  u[0]! += value;
  u[1]! += first;
  u[5]! += first - value;
}

const pair = new Float64Array(PAIR_LENGTH);

/** Fills the slot of the alloy's deviation with d(N f)/dY_a, f in e^2/a_e. */
export function fillAlloyTangents(tangents: Float64Array, composition: Composition): void {
  const { nuclei, firstCharged, powers } = notesOf(composition).list;
  const numbers = numberFractionsOf(composition);
  const count = nuclei.length;
  let total = 0;
  for (let i = firstCharged; i < count; i++) {
    total += numbers[i]!;
    tangents[slotOf(i, firstCharged)] = 0;
  }
  // Isotopes are neighbours: the first of a charge stands for all.
  let sum = 0;
  for (let i = firstCharged, next: number; i < count; i = next) {
    const { chargeNumber } = nuclei[i]!;
    let light = numbers[i]! / total;
    for (next = i + 1; next < count && nuclei[next]!.chargeNumber === chargeNumber; next++)
      light += numbers[next]! / total;
    for (let j = next, after: number; j < count; j = after) {
      const other = nuclei[j]!.chargeNumber;
      let heavy = numbers[j]! / total;
      for (after = j + 1; after < count && nuclei[after]!.chargeNumber === other; after++)
        heavy += numbers[after]! / total;
      const y = heavy / (light + heavy);
      pair[PAIR_RATIO] = other / chargeNumber;
      pair[PAIR_SHARE] = y;
      fillPairDeviation(pair);
      const value = pair[PAIR_VALUE]!;
      const slope = pair[PAIR_SLOPE]!;
      const unit = powers.fiveThirds[i]!;
      sum += unit * light * heavy * value;
      tangents[slotOf(i, firstCharged)]! += unit * (heavy * value - light * y * slope);
      tangents[slotOf(j, firstCharged)]! += unit * light * (value + (1 - y) * slope);
    }
  }
  for (let i = firstCharged, next: number; i < count; i = next) {
    const value = tangents[slotOf(i, firstCharged)]! - sum;
    for (next = i; next < count && nuclei[next]!.chargeNumber === nuclei[i]!.chargeNumber; next++) {
      tangents[slotOf(next, firstCharged)] = value;
    }
  }
}

function slotOf(place: number, firstCharged: number): number {
  return (place - firstCharged) * TANGENT_LENGTH + TANGENT_ALLOY;
}
