/**
 * One species at (eta, theta): the defining integrals and their derivatives in (mu, T), as plain kernel moments.
 *
 * Units m = c = hbar = k = 1 and every density without the factor 1/pi^2; theta = kT/mc^2, E = 1 + theta x,
 * p = sqrt(E^2 - 1):
 *
 *     n = int p E f dE,   P = int (p^3/3) f dE,   e_kin = int p E (E - 1) f dE
 *
 * Differentiating under the integral sign, with z = (E - mu)/T, dz/dmu = -1/T, dz/dT = -z/T, replaces f by g, t, u
 * and powers of z (kernels.ts). Source of the integrals: S. Chandrasekhar, An Introduction to the Study of Stellar
 * Structure (1939), chapter X; the derivatives are elementary.
 */
import type { Decimal } from "decimal.js";
import { sweepKernels, sweepOccupation } from "./energy-axis.js";
import { type Arithmetic, squareRoot } from "./exact.js";
import type { Resolution, TwoResolutions } from "./quadrature.js";

/** Density and pressure of one species with their derivatives; suffix m: d/dmu at fixed T, suffix t: d/dT at fixed mu. */
export interface Species {
  readonly n: Decimal;
  readonly p: Decimal;
  readonly kinetic: Decimal;
  readonly nm: Decimal;
  readonly nt: Decimal;
  readonly nmm: Decimal;
  readonly nmt: Decimal;
  readonly ntt: Decimal;
  readonly nmmm: Decimal;
  readonly nmmt: Decimal;
  readonly nmtt: Decimal;
  readonly pt: Decimal;
  readonly ptt: Decimal;
  readonly pttt: Decimal;
}

/** Density of one species and its derivative with respect to eta at fixed temperature. */
export interface DensityAndSlope {
  readonly n: Decimal;
  readonly slope: Decimal;
}

/** Kernels that meet the weight p E, as positions in `Kernels`: all but z^3 u. */
const densityKernels = [0, 1, 2, 3, 4, 5, 6, 7, 8] as const;
/** Kernels that meet the weight p^3/3: f, z g, z^2 t, z^3 u. */
const pressureKernels = [0, 2, 5, 9] as const;
const kineticSum = densityKernels.length + pressureKernels.length;

/** Kernels of second order that meet p E: f, g, z g. */
const secondOrderKernels = [0, 1, 2] as const;

/** All moments of one species at two quadrature resolutions; those of third order only on request, else NaN. */
export function species(
  resolution: Resolution,
  eta: Decimal,
  theta: Decimal,
  thirdOrder = true,
): TwoResolutions<Species> {
  const { D } = resolution;
  const ofDensity = thirdOrder ? densityKernels : secondOrderKernels;
  const ofPressure = thirdOrder ? pressureKernels : pressureKernels.slice(0, 3);
  const sums = new TwoSums(D, kineticSum + 1);
  const third = new D(1).div(3);
  sweepKernels(resolution, eta, (weight, x, coarse, at) => {
    const kineticEnergy = theta.times(x);
    const p2 = kineticEnergy.times(kineticEnergy.plus(2));
    const weightedP = squareRoot(p2).times(weight);
    const w = weightedP.times(kineticEnergy.plus(1));
    const pressureWeight = weightedP.times(p2).times(third);
    const part = coarse ? sums.even : sums.odd;
    if (at === undefined) {
      part[0] = part[0]!.plus(w);
      part[densityKernels.length] = part[densityKernels.length]!.plus(pressureWeight);
      part[kineticSum] = part[kineticSum]!.plus(w.times(kineticEnergy));
      return;
    }
    for (const k of ofDensity) part[k] = part[k]!.plus(w.times(at[k]));
    let target: number = densityKernels.length;
    for (const k of ofPressure) {
      part[target] = part[target]!.plus(pressureWeight.times(at[k]));
      target += 1;
    }
    part[kineticSum] = part[kineticSum]!.plus(w.times(kineticEnergy).times(at[0]));
  });
  const unknown = new D(Number.NaN);
  return sums.map((values) => {
    const all = derivatives(theta, values);
    if (thirdOrder) return all;
    const third = { nmm: unknown, nmt: unknown, ntt: unknown, nmmm: unknown, nmmt: unknown, nmtt: unknown };
    return { ...all, ...third, pttt: unknown };
  });
}

/** Density of one species and dn/deta: what the charge-neutrality iteration needs. From the coarse rule on request. */
export function densityAndSlope(
  resolution: Resolution,
  eta: Decimal,
  theta: Decimal,
  coarseOnly: boolean,
): DensityAndSlope {
  let n = new resolution.D(0);
  let slope = n;
  sweepOccupation(resolution, eta, coarseOnly, (weight, x, _coarse, at) => {
    const kineticEnergy = theta.times(x);
    const w = squareRoot(kineticEnergy.times(kineticEnergy.plus(2)))
      .times(kineticEnergy.plus(1))
      .times(weight);
    n = n.plus(at === undefined ? w : w.times(at[0]));
    if (at !== undefined) slope = slope.plus(w.times(at[1]));
  });
  const scale = coarseOnly ? theta.times(2) : theta;
  return { n: n.times(scale), slope: slope.times(scale) };
}

/** The chain rule, with dE = T dx: (w f) is sum over nodes of weight w f, and so on. */
function derivatives(T: Decimal, sums: readonly Decimal[]): Species {
  const [wf, wg, wzg, wt, wzt, wzzt, wu, wzu, wzzu, Pf, Pzg, Pzzt, Pzzzu, kinetic] = sums as MomentSums;
  const T2 = T.times(T);
  return {
    n: wf.times(T),
    p: Pf.times(T),
    kinetic: kinetic.times(T),
    nm: wg,
    nt: wzg,
    nmm: wt.div(T),
    nmt: wzt.minus(wg).div(T),
    ntt: wzzt.minus(wzg.times(2)).div(T),
    nmmm: wu.div(T2),
    nmmt: wzu.minus(wt.times(2)).div(T2),
    nmtt: wzzu.minus(wzt.times(4)).plus(wg.times(2)).div(T2),
    pt: Pzg,
    ptt: Pzzt.minus(Pzg.times(2)).div(T),
    pttt: Pzzzu.minus(Pzzt.times(6)).plus(Pzg.times(6)).div(T2),
  };
}

type MomentSums = readonly [
  ...[Decimal, Decimal, Decimal, Decimal, Decimal, Decimal, Decimal, Decimal, Decimal],
  ...[Decimal, Decimal, Decimal, Decimal],
  Decimal,
];

/** Running sums over the coarse rule's nodes and over the nodes only the fine rule has. */
class TwoSums {
  readonly even: Decimal[];
  readonly odd: Decimal[];

  constructor(D: Arithmetic, count: number) {
    this.even = Array.from({ length: count }, () => new D(0));
    this.odd = Array.from({ length: count }, () => new D(0));
  }

  map<T>(finish: (values: readonly Decimal[]) => T): TwoResolutions<T> {
    return {
      fine: finish(this.even.map((value, index) => value.plus(this.odd[index]!))),
      coarse: finish(this.even.map((value) => value.times(2))),
    };
  }
}
