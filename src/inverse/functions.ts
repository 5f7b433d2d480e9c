/**
 * Pressure, energy, entropy and enthalpy as functions of u = ln rho and v = ln T, with first and second derivatives,
 * from the members of third order. One place for all inverse questions.
 */
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import {
  ENERGY,
  ENTROPY,
  HEAT,
  HEAT_T,
  PRESSURE,
  PRESSURE_R,
  PRESSURE_RR,
  PRESSURE_RT,
  PRESSURE_T,
  PRESSURE_TT,
} from "../thermodynamics/free-energy.js";
import {
  BY_U,
  BY_UU,
  BY_UV,
  BY_V,
  BY_VV,
  ENERGY_KIND,
  ENTHALPY_KIND,
  ENTROPY_KIND,
  PRESSURE_KIND,
  SIZE,
} from "./slots.js";

/** Writes the function of a kind at `out[at]` and behind; members of order 3. */
export function fillFunction(
  out: Float64Array,
  at: number,
  kind: number,
  point: Float64Array,
  members: Float64Array,
): void {
  const p = members[PRESSURE]!;
  const pR = members[PRESSURE_R]!;
  const pT = members[PRESSURE_T]!;
  const pRR = members[PRESSURE_RR]!;
  const pRT = members[PRESSURE_RT]!;
  const pTT = members[PRESSURE_TT]!;
  const energy = members[ENERGY]!;
  const heat = members[HEAT]!;
  const curvature = 2 * heat + members[HEAT_T]!;
  if (kind === PRESSURE_KIND) {
    const density = point[DENSITY]!;
    out[at] = density * p;
    out[at + BY_U] = density * pR;
    out[at + BY_V] = density * pT;
    out[at + BY_UU] = density * (pRR + pR);
    out[at + BY_UV] = density * pRT;
    out[at + BY_VV] = density * (pTT + pT);
    out[at + SIZE] = density * p;
  } else if (kind === ENERGY_KIND) {
    out[at] = energy;
    out[at + BY_U] = p - pT;
    out[at + BY_V] = heat;
    out[at + BY_UU] = pR - pRT - p + pT;
    out[at + BY_UV] = -pTT;
    out[at + BY_VV] = curvature;
    out[at + SIZE] = Math.abs(energy) + p;
  } else if (kind === ENTROPY_KIND) {
    const perTemperature = 1 / point[TEMPERATURE]!;
    out[at] = members[ENTROPY]! * perTemperature;
    out[at + BY_U] = -pT * perTemperature;
    out[at + BY_V] = heat * perTemperature;
    out[at + BY_UU] = (pT - pRT) * perTemperature;
    out[at + BY_UV] = -pTT * perTemperature;
    out[at + BY_VV] = (curvature - heat) * perTemperature;
    out[at + SIZE] = (Math.abs(members[ENTROPY]!) + heat) * perTemperature;
  } else if (kind === ENTHALPY_KIND) {
    out[at] = energy + p;
    out[at + BY_U] = pR - pT;
    out[at + BY_V] = heat + pT;
    out[at + BY_UU] = pRR - pRT + pT;
    out[at + BY_UV] = pRT - pT - pTT;
    out[at + BY_VV] = curvature + pTT + pT;
    out[at + SIZE] = Math.abs(energy) + p;
  }
}
