/** How far interpolated members are from true ones: six relative errors, each against the scale that a solver feels. */
import { ENERGY, ENTROPY, HEAT, PRESSURE, PRESSURE_R, PRESSURE_T } from "../thermodynamics/free-energy.js";
import type { CertifiedQuantity } from "./table.js";

/** The quantities, in the order of {@link fillErrors}. */
export const certifiedQuantities: readonly CertifiedQuantity[] = [
  "pressure",
  "specificEnergy",
  "specificEntropy",
  "heatCapacityV",
  "pressureByDensity",
  "pressureByTemperature",
];

/**
 * Errors of `members` against `exact`, six numbers. Scales are of the whole matter, `whole`, where something stands beside
 * the table; members of second order suffice.
 */
export function fillErrors(members: Float64Array, exact: Float64Array, whole: Float64Array, out: Float64Array): void {
  const pressure = whole[PRESSURE]!;
  const stiffness = Math.max(Math.abs(pressure), Math.abs(whole[PRESSURE_R]!));
  const off = (slot: number, scale: number): number => Math.abs(members[slot]! - exact[slot]!) / scale;
  out[0] = off(PRESSURE, stiffness);
  out[1] = off(ENERGY, Math.abs(whole[ENERGY]!) + Math.abs(pressure));
  out[2] = off(ENTROPY, whole[ENTROPY]!);
  out[3] = off(HEAT, whole[HEAT]!);
  out[4] = off(PRESSURE_R, stiffness);
  out[5] = off(PRESSURE_T, Math.abs(whole[PRESSURE_T]!) + whole[HEAT]!);
}
