/**
 * What a contribution carries: the specific Helmholtz free energy F(rho, T) and its derivatives, as members.
 *
 * Members are derivatives of F in the combinations that a state reads, all in erg/g, each a slot of one Float64Array:
 *
 *     slot                 meaning                         in derivatives F_ij = rho^i T^j d^(i+j)F/(d rho^i d T^j)
 *     ENERGY               e                               F - F_01
 *     ENTROPY              T s                             -F_01
 *     HEAT                 T c_v                           -F_02
 *     PRESSURE             P/rho                           F_10
 *     PRESSURE_R           dP/drho                         F_20 + 2 F_10
 *     PRESSURE_T           (T/rho) dP/dT                   F_11
 *     HEAT_T               T^3 d2s/dT2                     -F_03
 *     PRESSURE_RR          rho d2P/drho2                   F_30 + 4 F_20 + 2 F_10
 *     PRESSURE_RT          T d2P/(drho dT)                 F_21 + 2 F_11
 *     PRESSURE_TT          (T^2/rho) d2P/dT2               F_12
 *     PRESSURE_RTT         T^2 d3P/(drho dT2)              F_22 + 2 F_12
 *
 * Why not the F_ij themselves: where photons or pairs rule, P hardly depends on density and dP/drho is a difference of
 * two large F_ij; in thin gas F = kT ln(...) swamps e. As members of their own neither loses a digit. The two forms
 * are linear in each other: {@link addNaturalDerivatives} and {@link naturalDerivatives} convert.
 * Contributions add, so members add.
 */

/** Order of the derivatives asked for: 2 is what a state needs (6 members), 3 adds third order and (2,2): 11. */
export type Order = 2 | 3;

/** Slot of e, erg/g. */
export const ENERGY = 0;
/** Slot of T s, erg/g. */
export const ENTROPY = 1;
/** Slot of T c_v, erg/g. */
export const HEAT = 2;
/** Slot of P/rho, erg/g. */
export const PRESSURE = 3;
/** Slot of dP/drho at constant T, erg/g. */
export const PRESSURE_R = 4;
/** Slot of (T/rho) dP/dT, erg/g. */
export const PRESSURE_T = 5;
/** Slot of T^3 d2s/dT2, erg/g. */
export const HEAT_T = 6;
/** Slot of rho d2P/drho2, erg/g. */
export const PRESSURE_RR = 7;
/** Slot of T d2P/(drho dT), erg/g. */
export const PRESSURE_RT = 8;
/** Slot of (T^2/rho) d2P/dT2, erg/g. */
export const PRESSURE_TT = 9;
/** Slot of T^2 d3P/(drho dT2), erg/g. */
export const PRESSURE_RTT = 10;

/** Members in use at order 2: the first ones. */
export const SECOND_ORDER_COUNT = 6;
/** Length of a member array. */
export const MEMBER_COUNT = 11;

/** Orders (i, j) of the natural scaled derivatives F_ij, in the order of their arrays. */
export const naturalOrder: readonly (readonly [number, number])[] = [
  [0, 0],
  [1, 0],
  [0, 1],
  [2, 0],
  [1, 1],
  [0, 2],
  [3, 0],
  [2, 1],
  [1, 2],
  [0, 3],
  [2, 2],
];

/**
 * Members -> natural derivatives F_ij = rho^i T^j d^(i+j)F/(d rho^i d T^j), erg/g, in the order of
 * {@link naturalOrder}: 00 10 01 20 11 02, and for order 3 also 30 21 12 03 22.
 */
export function naturalDerivatives(members: Float64Array, order: Order, out: Float64Array): Float64Array {
  const pressure = members[PRESSURE]!;
  const pressureR = members[PRESSURE_R]!;
  const pressureT = members[PRESSURE_T]!;
  out[0] = members[ENERGY]! - members[ENTROPY]!;
  out[1] = pressure;
  out[2] = -members[ENTROPY]!;
  out[3] = pressureR - 2 * pressure;
  out[4] = pressureT;
  out[5] = -members[HEAT]!;
  if (order === 3) {
    const pressureTT = members[PRESSURE_TT]!;
    out[6] = members[PRESSURE_RR]! - 4 * pressureR + 6 * pressure;
    out[7] = members[PRESSURE_RT]! - 2 * pressureT;
    out[8] = pressureTT;
    out[9] = -members[HEAT_T]!;
    out[10] = members[PRESSURE_RTT]! - 2 * pressureTT;
  }
  return out;
}

/** Adds a contribution given as natural derivatives F_ij (order of {@link naturalOrder}) to `members`. */
export function addNaturalDerivatives(members: Float64Array, order: Order, f: Float64Array): void {
  members[ENERGY]! += f[0]! - f[2]!;
  members[ENTROPY]! -= f[2]!;
  members[HEAT]! -= f[5]!;
  members[PRESSURE]! += f[1]!;
  members[PRESSURE_R]! += f[3]! + 2 * f[1]!;
  members[PRESSURE_T]! += f[4]!;
  if (order === 2) return;
  members[HEAT_T]! -= f[9]!;
  members[PRESSURE_RR]! += f[6]! + 4 * f[3]! + 2 * f[1]!;
  members[PRESSURE_RT]! += f[7]! + 2 * f[4]!;
  members[PRESSURE_TT]! += f[8]!;
  members[PRESSURE_RTT]! += f[10]! + 2 * f[8]!;
}

/**
 * Moves the second-order members by steps in ln rho and ln T (`step[0]`, `step[1]`) so small that their squares do not
 * count: the third-order members are their exact derivatives.
 */
export function moveMembers(members: Float64Array, step: Float64Array): void {
  const du = step[0]!;
  const dv = step[1]!;
  const entropy = members[ENTROPY]!;
  const heat = members[HEAT]!;
  const p = members[PRESSURE]!;
  const pR = members[PRESSURE_R]!;
  const pT = members[PRESSURE_T]!;
  const pRT = members[PRESSURE_RT]!;
  const pTT = members[PRESSURE_TT]!;
  members[ENERGY]! += (p - pT) * du + heat * dv;
  members[ENTROPY] = entropy - pT * du + (entropy + heat) * dv;
  members[HEAT] = heat - pTT * du + (2 * heat + members[HEAT_T]!) * dv;
  members[PRESSURE] = p + (pR - p) * du + pT * dv;
  members[PRESSURE_R] = pR + members[PRESSURE_RR]! * du + pRT * dv;
  members[PRESSURE_T] = pT + (pRT - pT) * du + (pT + pTT) * dv;
}
