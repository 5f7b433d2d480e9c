/**
 * The source of a table along one density: heat function G = F_0 - F and its derivatives in ln rho and ln T at nodes of ln T.
 *
 * G of degenerate matter is a difference of nearly equal energies, so it is not computed as one: dG/d ln T = T s, which
 * has all its digits, is integrated upwards from the coldest node, and likewise T s by ln rho. Where the sheet starts
 * above the cold curve (a liquid that freezes below) the difference gives the constant of integration: its rounding is the
 * same for all temperatures of a density, and neither entropy nor heat knows it.
 */
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../matter/point.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import { type Evaluator, evaluatorOf } from "../thermodynamics/evaluator.js";
import {
  ENERGY,
  ENTROPY,
  HEAT,
  type Order,
  PRESSURE,
  PRESSURE_R,
  PRESSURE_RT,
  PRESSURE_RTT,
  PRESSURE_T,
  PRESSURE_TT,
} from "../thermodynamics/free-energy.js";
import { gaussRule } from "./gauss.js";

/** Members of one sheet's matter, and what a table needs of them. */
export interface Sampler {
  /** Evaluates at ln rho, ln T, to third order unless second is said to be enough; members stand in `members`. */
  sample(u: number, v: number, order?: Order): void;
  /** The same at a density, g/cm^3, and temperature, K, which may be 0. */
  sampleAt(density: number, temperature: number, order?: Order): void;
  /** Members at the last point. */
  readonly members: Float64Array;
}

/** Members of a sum of contributions at one composition. */
export function samplerOf(parts: readonly Contribution[], composition: Composition): Sampler {
  const own: Evaluator = evaluatorOf(parts);
  function sampleAt(density: number, temperature: number, order: Order = 3): void {
    own.point[DENSITY] = density;
    own.point[TEMPERATURE] = temperature;
    own.fillMembers(composition, order);
  }
  return { sample: (u, v, order) => sampleAt(Math.exp(u), Math.exp(v), order), sampleAt, members: own.members };
}

/** F_0 = e and its first two derivatives in ln rho at the last point of a sampler. */
export function coldNode({ members }: Sampler): readonly [number, number, number] {
  const byT = members[PRESSURE_T]!;
  const first = members[PRESSURE]! - byT;
  return [members[ENERGY]!, first, members[PRESSURE_R]! - members[PRESSURE]! - (members[PRESSURE_RT]! - byT)];
}

/** dG/d ln T and its first two derivatives in ln rho at the last point. */
function slopes({ members }: Sampler): readonly [number, number, number] {
  const byT = members[PRESSURE_T]!;
  return [members[ENTROPY]!, -byT, byT - members[PRESSURE_RT]!];
}

const long = /* @__PURE__ */ gaussRule(8);
const short = /* @__PURE__ */ gaussRule(5);
const fromZero = /* @__PURE__ */ gaussRule(24);
/** Widest panel in ln T of each rule: the fastest change of matter, the onset of pairs, has poles at 0.16 from the real axis. */
const longPanel = 0.1;
const shortPanel = 0.025;

/** One density of a sheet: the heat function at the ends of its blocks, found as far up as asked. */
export interface Column {
  /** ln rho. */
  readonly u: number;
  /** G, G_u, G_uu at the lower end of block `q`. */
  at(q: number): readonly [number, number, number];
  /**
   * Writes the nine derivatives of ln(G/2^k) at the 2^level + 1 nodes of block `q` to `out`.
   * @throws `unstable` where G or T s is not positive
   */
  fillNodes(q: number, level: number, exponent: number, out: Float64Array, from: number): void;
}

/** Where blocks of ln T begin. */
export interface Rungs {
  /** ln T at the lower end of block q; its count is one more than that of the blocks. */
  readonly ends: readonly number[];
}

/**
 * A column of a sheet whose lowest block is `bottom`.
 *
 * @param start - G, G_u, G_uu at the lower end of that block
 */
export function columnOf(
  sampler: Sampler,
  u: number,
  rungs: Rungs,
  bottom: number,
  start: readonly [number, number, number],
): Column {
  const known: (readonly [number, number, number])[] = [start];

  function at(q: number): readonly [number, number, number] {
    while (known.length <= q - bottom) {
      const last = bottom + known.length - 1;
      known.push(integrate(sampler, u, rungs.ends[last]!, rungs.ends[last + 1]!, known[known.length - 1]!));
    }
    return known[q - bottom]!;
  }

  function fillNodes(q: number, level: number, exponent: number, out: Float64Array, from: number): void {
    const cells = 2 ** level;
    const [low, high] = [rungs.ends[q]!, rungs.ends[q + 1]!];
    const position = (j: number): number => (j === cells ? high : low + ((high - low) * j) / cells);
    let g = at(q);
    for (let j = 0; j <= cells; j++) {
      if (j === cells) g = at(q + 1);
      else if (j > 0) g = integrate(sampler, u, position(j - 1), position(j), g);
      sampler.sample(u, position(j));
      writeNode(sampler, g, exponent, out, from + 9 * j, u, position(j));
    }
  }
  return { u, at, fillNodes };
}

/** G and its two derivatives at the end of an interval of ln T. */
function integrate(
  sampler: Sampler,
  u: number,
  from: number,
  to: number,
  start: readonly [number, number, number],
): readonly [number, number, number] {
  const width = to - from;
  const rule = width <= shortPanel ? short : long;
  const panels = Math.max(1, Math.ceil(width / longPanel));
  const sum = [0, 0, 0];
  for (let k = 0; k < panels; k++) {
    for (let i = 0; i < rule.nodes.length; i++) {
      sampler.sample(u, from + (width * (k + rule.nodes[i]!)) / panels);
      const slope = slopes(sampler);
      const weight = rule.weights[i]!;
      for (let c = 0; c < 3; c++) sum[c]! += weight * slope[c]!;
    }
  }
  return add(start, sum, width / panels);
}

/** G and its derivatives at (u, T) from T = 0: the integral of s over T. */
export function heatFromZero(sampler: Sampler, u: number, temperature: number): readonly [number, number, number] {
  const sum = [0, 0, 0];
  const density = Math.exp(u);
  fromZero.nodes.forEach((node, i) => {
    sampler.sampleAt(density, temperature * node);
    const slope = slopes(sampler);
    for (let c = 0; c < 3; c++) sum[c]! += (fromZero.weights[i]! * slope[c]!) / node;
  });
  return add([0, 0, 0], sum, 1);
}

/** G and its derivatives where F_0 is the energy at the same point: T s. */
export function heatAt(sampler: Sampler, u: number, temperature: number): readonly [number, number, number] {
  sampler.sampleAt(Math.exp(u), temperature);
  return slopes(sampler);
}

/** G and its derivatives as the difference of F_0 and F. */
export function heatFromDifference(
  sampler: Sampler,
  u: number,
  temperature: number,
  cold: readonly [number, number, number],
): readonly [number, number, number] {
  sampler.sampleAt(Math.exp(u), temperature);
  const { members } = sampler;
  const free = members[ENERGY]! - members[ENTROPY]!;
  return [cold[0] - free, cold[1] - members[PRESSURE]!, cold[2] - (members[PRESSURE_R]! - members[PRESSURE]!)];
}

function add(
  start: readonly [number, number, number],
  sum: readonly number[],
  scale: number,
): readonly [number, number, number] {
  return [start[0] + scale * sum[0]!, start[1] + scale * sum[1]!, start[2] + scale * sum[2]!];
}

/** The nine derivatives of L = ln(G/2^k) from those of G: the quotient rule, solved from the lowest up. */
function writeNode(
  { members }: Sampler,
  [g, gu, guu]: readonly [number, number, number],
  exponent: number,
  out: Float64Array,
  at: number,
  u: number,
  v: number,
): void {
  const entropy = members[ENTROPY]!;
  if (!(g > 0 && entropy > 0 && Number.isFinite(g))) refuse(g, entropy, u, v);
  const r = 1 / g;
  const byT = members[PRESSURE_T]!;
  const byRT = members[PRESSURE_RT]! - byT;
  const byTT = members[PRESSURE_TT]! + byT;
  const a = gu * r;
  const b = entropy * r;
  const aa = guu * r;
  const ab = -byT * r;
  const bb = (members[HEAT]! + entropy) * r;
  const aab = -byRT * r;
  const abb = -byTT * r;
  const aabb = -(members[PRESSURE_RTT]! + byRT - byTT + byT) * r;
  const luu = aa - a * a;
  const luv = ab - a * b;
  const lvv = bb - b * b;
  const luuv = aab - b * luu - 2 * a * luv - a * a * b;
  const luvv = abb - a * lvv - 2 * b * luv - a * b * b;
  out[at] = Math.log(g * 2 ** -exponent);
  out[at + 1] = b;
  out[at + 2] = lvv;
  out[at + 3] = a;
  out[at + 4] = luv;
  out[at + 5] = luvv;
  out[at + 6] = luu;
  out[at + 7] = luuv;
  out[at + 8] =
    aabb -
    2 * (a * luvv + b * luuv) -
    luu * lvv -
    2 * luv * luv -
    luu * b * b -
    a * a * lvv -
    4 * a * b * luv -
    a * a * b * b;
  for (let k = 0; k < 9; k++) if (!Number.isFinite(out[at + k])) refuse(out[at + k]!, entropy, u, v);
}

function refuse(g: number, entropy: number, u: number, v: number): never {
  throw new FermistateError("unstable", {
    argument: "entropy and heat function",
    given: `T s = ${entropy}, F_0 - F = ${g} erg/g at ${Math.exp(u)} g/cm^3, ${Math.exp(v)} K`,
    allowed: "> 0: a table holds the logarithm of what heat does",
  });
}
