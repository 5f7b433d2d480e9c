/**
 * The (n_e, T) at which electron-gas.ts computes: random with a fixed seed, by region of the density-temperature plane.
 *
 * Limits: n_e/N_A from 1e-15 to 1e15 mol/cm^3 and T from 1e2 to 1e13 K, except `far-nondegenerate`, where a degeneracy
 * parameter down to -600 means densities far below (n_e down to 1e-230 cm^-3).
 */
import { arithmetic } from "../../src/certify/exact.js";
import { densityAndSlope } from "../../src/certify/moments.js";

export interface Point {
  readonly region: string;
  readonly n: number;
  readonly T: number;
}

const avogadro = 6.02214076e23;
/** kT/mc^2 = T/temperatureUnit; 8 pi (mc/h)^3. Only the points hang on these roundings, not the values at them. */
const temperatureUnit = 5.92989657e9;
const densityUnit = 1.75957e30;

/** 2450 points over the whole plane and in regions of their own. */
export function referencePoints(): Point[] {
  const random = generator(20240607);
  const anyT = (): number => logUniform(random, 1e2, 1e13);
  return [
    ...repeat(1200, () => ({ region: "plane", n: logUniform(random, 1e-15, 1e15) * avogadro, T: anyT() })),
    ...repeat(300, () => fromEta("degenerate", logUniform(random, 1e2, 1e8), anyT())),
    ...repeat(400, () => fromEta("transition", uniform(random, -10, 45), anyT())),
    ...repeat(200, () => ({
      region: "pair-onset",
      n: logUniform(random, 1e-15, 1e2) * avogadro,
      T: logUniform(random, 2e8, 2e9),
    })),
    ...repeat(150, () => fromNu("pair-plasma", logUniform(random, 1e-12, 1), logUniform(random, 1e10, 1e13))),
    ...repeat(200, () => fromEta("far-nondegenerate", uniform(random, -600, -40), logUniform(random, 1e2, 1e8), 0)),
  ];
}

/** 300 points close to values of eta, nu and theta at which an evaluator may change its method. */
export function neighbourhoodPoints(): Point[] {
  const random = generator(31415926);
  const anyT = (): number => logUniform(random, 1e2, 1e13);
  const near = (centre: number, width: number): number => centre + uniform(random, -width, width);
  const points: Point[] = [];
  for (const [eta, width] of [
    ...[38, 39.5].map((value) => [value, 0.3] as const),
    ...[0, 1, 5, 14, -4, -9].map((value) => [value, 0.05] as const),
  ]) {
    points.push(...repeat(20, () => fromEta(`eta=${eta}`, near(eta, width), anyT())));
  }
  for (const nu of [26, 46, 1]) {
    points.push(...repeat(20, () => fromNu(`nu=${nu}`, near(nu, 0.3), logUniform(random, 1e8, 1e13))));
  }
  for (const theta of [0.05, 0.1, 0.035]) {
    points.push(
      ...repeat(20, () => ({
        region: `theta=${theta}`,
        n: logUniform(random, 1e-15, 1e15) * avogadro,
        T: theta * temperatureUnit * near(1, 0.01),
      })),
    );
  }
  // 2 e^(-1/theta) cosh(nu) = e^-38, the sum of both fugacities
  points.push(
    ...repeat(20, () => {
      const T = logUniform(random, 1e6, 1.5e8);
      const inverseTheta = temperatureUnit / T;
      const nu = inverseTheta - 38 + Math.log((1 + Math.sqrt(1 - 4 * Math.exp(2 * (38 - inverseTheta)))) / 2);
      return fromNu("boltzmann", near(nu, 0.05), T);
    }),
  );
  return points;
}

/** The double nearest to the net density at (eta, T); undefined where it leaves the plane (nu <= 0 included). */
function fromEta(region: string, eta: number, T: number, lowest = 1e-15): Point | undefined {
  const inverseTheta = temperatureUnit / T;
  if (!(eta + inverseTheta > 0)) return undefined;
  return inPlane({ region, n: netDensity(eta, -eta - 2 * inverseTheta, T), T }, lowest);
}

function fromNu(region: string, nu: number, T: number): Point | undefined {
  if (!(nu > 0)) return undefined;
  const inverseTheta = temperatureUnit / T;
  // n is odd in nu and nearly linear below 1e-3; the difference of the two species would lose nu there
  const step = Math.max(nu, 1e-3);
  const n = netDensity(step - inverseTheta, -step - inverseTheta, T) * (nu / step);
  return inPlane({ region, n, T }, 1e-15);
}

/** Eight digits are plenty for a place to compute at. */
function netDensity(eta: number, positronEta: number, T: number): number {
  const D = arithmetic(20);
  const resolution = { D, depth: D.precision, refinement: 0 };
  const theta = new D(T / temperatureUnit);
  const electrons = densityAndSlope(resolution, new D(eta), theta, true).n;
  if (eta - positronEta > 100) return electrons.times(densityUnit).toNumber();
  const positrons = densityAndSlope(resolution, new D(positronEta), theta, true).n;
  return electrons.minus(positrons).times(densityUnit).toNumber();
}

function inPlane(point: Point, lowest: number): Point | undefined {
  const { n } = point;
  return n > 0 && n >= lowest * avogadro && n <= 1e15 * avogadro ? point : undefined;
}

function repeat(count: number, draw: () => Point | undefined): Point[] {
  const points: Point[] = [];
  while (points.length < count) {
    const point = draw();
    if (point !== undefined) points.push(point);
  }
  return points;
}

function uniform(random: () => number, from: number, to: number): number {
  return from + (to - from) * random();
}

function logUniform(random: () => number, from: number, to: number): number {
  return Math.exp(uniform(random, Math.log(from), Math.log(to)));
}

/** A small generator with a 32-bit state (G. Marsaglia, J. Stat. Softw. 8(14), 2003: xorshift), 53 bits a draw. */
function generator(seed: number): () => number {
  let state = seed;
  const next = (): number => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return state >>> 0;
  };
  return () => (next() * 2 ** 21 + (next() >>> 11)) / 2 ** 53;
}
