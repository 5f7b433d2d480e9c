/**
 * From derivatives of n(alpha, T) to the members of the free energy at given density and temperature.
 *
 * Inverting n = N(alpha, T): with I = 1/N10, A = n d alpha/dn = n I, B = T d alpha/dT|n = -N01 I and the second
 * derivatives C (nn), D (nT), F (TT), G (nTT) of alpha, all scaled. Then mu/T has the derivatives A, C, D + lambda A,
 * F + 2 lambda B, G + 2 lambda D, and
 *
 *     e = Q + (Ec - 1) n - P      T s = Q - n T psi      T c_v = T (M12 + N01 B)
 *     n dP/dn = n T A             T dP/dT|n = Q + n T B
 *
 * e excludes the rest mass of the net particles and includes the 2 n_+ of pairs. M12 + N01 B is the variance of y about
 * its mean under the weight of the Fermi surface: with the centre near that mean nothing cancels.
 */
import {
  ENERGY,
  ENTROPY,
  HEAT,
  HEAT_T,
  type Order,
  PRESSURE,
  PRESSURE_R,
  PRESSURE_RR,
  PRESSURE_RT,
  PRESSURE_RTT,
  PRESSURE_T,
  PRESSURE_TT,
} from "../thermodynamics/free-energy.js";
import {
  CENTRE,
  LAMBDA,
  M12,
  M23,
  N00,
  N01,
  N02,
  N10,
  N11,
  N12,
  N20,
  N21,
  N30,
  NET_DENSITY,
  P00,
  PSI,
  Q,
  THETA,
} from "./record.js";

/** Adds the gas of the record to `members`, times `scale[0]`: energy per gram of one natural unit of pressure. */
export function addGasMembers(gas: Float64Array, scale: Float64Array, order: Order, members: Float64Array): void {
  const unit = scale[0]!;
  const theta = gas[THETA]!;
  const n = gas[N00]!;
  const q = gas[Q]!;
  const n01 = gas[N01]!;
  const inverse = 1 / gas[N10]!;
  const a = n * inverse;
  const b = -n01 * inverse;
  const heat = gas[M12]! + n01 * b;
  const pressure = gas[P00]!;
  const unitTheta = unit * theta;
  members[ENERGY]! += unit * (q + gas[CENTRE]! * n - pressure);
  members[ENTROPY]! += unit * (q - n * theta * gas[PSI]!);
  members[HEAT]! += unitTheta * heat;
  members[PRESSURE]! += unit * pressure;
  members[PRESSURE_R]! += unitTheta * n * a;
  members[PRESSURE_T]! += unit * (q + n * theta * b);
  if (order === 2) return;

  const lambda = gas[LAMBDA]!;
  const n11 = gas[N11]!;
  const n20 = gas[N20]!;
  const n02 = gas[N02]!;
  const c = -inverse * n20 * a * a;
  const d = -inverse * a * (n20 * b + n11);
  const f = -inverse * (n20 * b * b + 2 * n11 * b + n02);
  const g =
    -inverse * (n20 * (a * f + 2 * b * d) + 2 * n11 * d + a * (gas[N30]! * b * b + 2 * gas[N21]! * b + gas[N12]!));
  members[HEAT_T]! += unitTheta * (gas[M23]! - 3 * gas[M12]! + b * (2 * n02 + 3 * lambda * n01 + n11 * b) + n01 * f);
  members[PRESSURE_RR]! += unitTheta * n * (a + c);
  members[PRESSURE_RT]! += unitTheta * n * (d + lambda * a);
  members[PRESSURE_TT]! += unitTheta * (heat + n * (f + 2 * lambda * b));
  members[PRESSURE_RTT]! += unitTheta * n * (g + 2 * lambda * d);
}

/**
 * Derivatives of the gas by the number density of its particles, in units of m c^2: energy density mu - T mu_T, T times
 * entropy density -T mu_T, pressure n mu_n; into `out`. Not from e, P and s: with many pairs those hardly depend on n.
 */
export function fillParticleMembers(gas: Float64Array, out: Float64Array): void {
  const theta = gas[THETA]!;
  const n = gas[NET_DENSITY]!;
  // Without net particles mu is zero at every temperature, and CENTRE is its zero.
  const inverse = n === 0 ? 0 : 1 / gas[N10]!;
  const b = -gas[N01]! * inverse;
  out[0] = gas[CENTRE]! - theta * b;
  out[1] = -theta * (gas[PSI]! + b);
  out[2] = theta * n * inverse;
}
