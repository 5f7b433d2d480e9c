/**
 * The Fermi gas at T = 0 in closed form, free of cancellation; x = p_F/mc, natural units of record.ts.
 *
 * n = x^3/3,  e_F = sqrt(1 + x^2) - 1,  P = (1/3) int_0^x p^4/sqrt(1 + p^2) dp = [x(2x^2-3)sqrt(1+x^2) + 3 asinh x]/24
 * (Frenkel 1928, Z. Phys. 50, 234; Chandrasekhar 1935, MNRAS 95, 207). The closed form cancels like x^-4 for small x,
 * so three forms: binomial series for x^2 < 0.03, entire series in asinh x for x^2 < 1, closed form above. Measured:
 * 1.3e-15.
 */

import { ENERGY, type Order, PRESSURE, PRESSURE_R, PRESSURE_RR } from "../thermodynamics/free-energy.js";
import { CENTRE, FERMI_MOMENTUM, KINETIC_MU, NET_DENSITY, P00, PSI } from "./record.js";

/** Fermi energy without rest mass, e_F = x^2/(1 + sqrt(1 + x^2)), in mc^2. */
export function fermiEnergy(x: number): number {
  const x2 = x * x;
  return x2 / (1 + Math.sqrt(1 + x2));
}

const BINOMIAL_TERMS = 14;
const ENTIRE_TERMS = 15;
/** binom(-1/2, k)/(3(2k + 5)): P = x^5 sum c_k x^(2k). */
const binomial = new Float64Array(BINOMIAL_TERMS);
/** (4^m/32 - 2^m/4)/(3 m!), m = 2k + 5: P = sum c_k asinh(x)^m, the Taylor series of (1/3) int sinh^4. */
const entire = new Float64Array(ENTIRE_TERMS);
{
  let coefficient = 1;
  for (let k = 0; k < BINOMIAL_TERMS; k++) {
    binomial[k] = coefficient / (3 * (2 * k + 5));
    coefficient *= -(k + 0.5) / (k + 1);
  }
  let factorial = 120;
  for (let k = 0; k < ENTIRE_TERMS; k++) {
    const m = 2 * k + 5;
    entire[k] = (4 ** m / 32 - 2 ** m / 4) / (3 * factorial);
    factorial *= (m + 1) * (m + 2);
  }
}

/** Sets P00 to the pressure at T = 0 of a gas with Fermi energy KINETIC_MU (which carries more digits than x does). */
export function coldPressure(gas: Float64Array): void {
  const energy = gas[KINETIC_MU]!;
  const x2 = energy * (energy + 2);
  const x = Math.sqrt(x2);
  if (x2 < 0.03) {
    let sum = 0;
    for (let k = x2 < 1e-5 ? 3 : x2 < 1e-3 ? 6 : BINOMIAL_TERMS - 1; k >= 0; k--) sum = sum * x2 + binomial[k]!;
    gas[P00] = sum * x2 * x2 * x;
    return;
  }
  const rapidity = Math.log1p(energy + x);
  if (x2 < 1) {
    const square = rapidity * rapidity;
    let sum = 0;
    for (let k = x2 < 0.2 ? 10 : ENTIRE_TERMS - 1; k >= 0; k--) sum = sum * square + entire[k]!;
    gas[P00] = sum * square * square * rapidity;
    return;
  }
  gas[P00] = (x * (1 + energy) * (2 * x2 - 3) + 3 * rapidity) / 24;
}

/**
 * Adds the gas at T = 0 to `members`, times `scale[0]` as in density-derivatives.ts; sets CENTRE (e_F) and PSI (0).
 * e = n e_F - P, n dP/dn = n x^2/(3E), n^2 P_nn = n x^2/(9E) (2 - x^2/E^2); every derivative in T vanishes.
 */
export function addColdMembers(gas: Float64Array, scale: Float64Array, order: Order, members: Float64Array): void {
  const unit = scale[0]!;
  const n = gas[NET_DENSITY]!;
  const x = gas[FERMI_MOMENTUM]!;
  const energy = gas[KINETIC_MU]!;
  const total = 1 + energy;
  gas[CENTRE] = energy;
  gas[PSI] = 0;
  coldPressure(gas);
  members[ENERGY]! += unit * (n * energy - gas[P00]!);
  members[PRESSURE]! += unit * gas[P00]!;
  members[PRESSURE_R]! += (unit * n * x * x) / (3 * total);
  if (order === 3) members[PRESSURE_RR]! += ((unit * n * x * x) / (9 * total)) * (2 - (x / total) ** 2);
}

/**
 * Limits at T = 0: adds c_v/theta = (pi^2/3) x E and (dP/dtheta)/theta = (gamma_3 - 1) c_v/theta to `slopes`, times
 * `scale[0]`; gamma_3 - 1 = (2 - x^2/E^2)/3 since c_v is proportional to n^(-1) E/x^2 per particle.
 */
export function addColdGasSlopes(gas: Float64Array, scale: Float64Array, slopes: Float64Array): void {
  const x = gas[FERMI_MOMENTUM]!;
  const total = Math.sqrt(1 + x * x);
  const heat = ((scale[0]! * Math.PI * Math.PI) / 3) * x * total;
  slopes[0]! += heat;
  slopes[1]! += (heat * (2 - (x / total) ** 2)) / 3;
}

/** The three numbers of `fillParticleMembers` at T = 0: e_F, 0, n de_F/dn. */
export function fillColdParticleMembers(gas: Float64Array, out: Float64Array): void {
  const x = gas[FERMI_MOMENTUM]!;
  out[0] = gas[KINETIC_MU]!;
  out[1] = 0;
  out[2] = (x * x) / (3 * (1 + gas[KINETIC_MU]!));
}
