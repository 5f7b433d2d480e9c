/**
 * F = F_0 - G, G = 2^k exp L: from the derivatives of F_0 and L in ln rho and ln T to the members of a contribution.
 *
 * With g_ij = (d^(i+j) G)/G in ln rho and ln T, the members are G times short sums: entropy g_01, heat g_02 - g_01, and so
 * on. Heat and entropy never meet F_0, so degenerate matter keeps their digits.
 */
import {
  ENERGY,
  ENTROPY,
  HEAT,
  HEAT_T,
  PRESSURE,
  PRESSURE_R,
  PRESSURE_RR,
  PRESSURE_RT,
  PRESSURE_RTT,
  PRESSURE_T,
  PRESSURE_TT,
} from "../thermodynamics/free-energy.js";
import type { ColdLookUp } from "./cold.js";
import type { Surface } from "./surface.js";

/** Adds the members of F_0 - G to `members`. */
export function addTableMembers(
  cold: Pick<ColdLookUp, "out">,
  surface: Pick<Surface, "out" | "share" | "exponent">,
  order: number,
  members: Float64Array,
): void {
  const { out } = surface;
  const share = surface.share[0]!;
  const g = share * Math.exp(out[0]!) * powersOfTwo[surface.exponent[0]! + powerOffset]!;
  const f0 = share * cold.out[0]!;
  const f1 = share * cold.out[1]!;
  const f2 = share * cold.out[2]!;
  const u = out[1]!;
  const v = out[2]!;
  const uu = out[3]! + u * u;
  const uv = out[4]! + u * v;
  const vv = out[5]! + v * v;
  members[ENERGY]! += f0 + g * (v - 1);
  members[ENTROPY]! += g * v;
  members[HEAT]! += g * (vv - v);
  members[PRESSURE]! += f1 - g * u;
  members[PRESSURE_R]! += f2 + f1 - g * (uu + u);
  members[PRESSURE_T]! -= g * uv;
  if (order === 2) return;
  const luu = out[3]!;
  const luv = out[4]!;
  const lvv = out[5]!;
  const uuv = out[7]!;
  const uvv = out[8]!;
  const g30 = out[6]! + 3 * u * luu + u * u * u;
  const g21 = uuv + v * luu + 2 * u * luv + u * u * v;
  const g12 = uvv + u * lvv + 2 * v * luv + u * v * v;
  const g03 = out[9]! + 3 * v * lvv + v * v * v;
  const pairs = luu * lvv + 2 * luv * luv;
  const g22 = out[10]! + 2 * (u * uvv + v * uuv) + pairs + luu * v * v + u * u * lvv + 4 * u * v * luv + u * u * v * v;
  members[HEAT_T]! += g * (g03 - 3 * vv + 2 * v);
  members[PRESSURE_RR]! += share * cold.out[3]! + f2 - g * (g30 + uu);
  members[PRESSURE_RT]! -= g * (g21 + uv);
  members[PRESSURE_TT]! -= g * (g12 - uv);
  members[PRESSURE_RTT]! -= g * (g22 - g21 + g12 - uv);
}

/** Exponents reach from -powerOffset to powerOffset: G from 1e-301 to 1e301 erg/g. */
export const powerOffset = 1000;
const powersOfTwo: Float64Array = /* @__PURE__ */ Float64Array.from(
  { length: 2 * powerOffset + 1 },
  (_, k) => 2 ** (k - powerOffset),
);
