/**
 * How every thermodynamic quantity changes with density and temperature: its gradient, from the same members as its value.
 *
 * A gradient is two numbers, dQ/d ln rho at constant T and dQ/dT at constant rho (not d ln T, which says nothing at
 * T = 0). The members of free-energy.ts differentiate into each other without a difference of large numbers:
 *
 *     member            d/d ln rho                          d/d ln T
 *     e                 P/rho - (T/rho) P_T                 T c_v
 *     T s               -(T/rho) P_T                        T s + T c_v
 *     T c_v             -(T^2/rho) P_TT                     2 T c_v + T^3 s_TT
 *     P/rho             P_rho - P/rho                       (T/rho) P_T
 *     P_rho             rho P_rho,rho                       T P_rho,T
 *     (T/rho) P_T       T P_rho,T - (T/rho) P_T             (T/rho) P_T + (T^2/rho) P_TT
 *
 * Values are read from the record of quantities.ts; here only the chain rule is added.
 */
import { speedOfLight } from "../constants.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import { type StateVariable, stateVariables } from "./brackets.js";
import type { Evaluator } from "./evaluator.js";
import {
  ENERGY,
  HEAT,
  HEAT_T,
  type Order,
  PRESSURE,
  PRESSURE_R,
  PRESSURE_RR,
  PRESSURE_RT,
  PRESSURE_T,
  PRESSURE_TT,
} from "./free-energy.js";

/** A quantity whose derivatives follow from the free energy. */
export type DifferentiableQuantity =
  | StateVariable
  | "specificFreeEnergy"
  | "heatCapacityV"
  | "heatCapacityP"
  | "densityExponent"
  | "temperatureExponent"
  | "gamma1"
  | "gamma2"
  | "gamma3"
  | "adiabaticGradient"
  | "soundSpeed"
  | "bulkModulus"
  | "pressureByDensity"
  | "pressureByTemperature"
  | "energyByDensity"
  | "energyByTemperature"
  | "entropyByDensity"
  | "entropyByTemperature";

/** Names in the order of the record of gradients; the first seven need the members of order 2 only. */
export const differentiable: readonly DifferentiableQuantity[] = [
  ...stateVariables,
  "specificFreeEnergy",
  "heatCapacityV",
  "heatCapacityP",
  "densityExponent",
  "temperatureExponent",
  "gamma1",
  "gamma2",
  "gamma3",
  "adiabaticGradient",
  "soundSpeed",
  "bulkModulus",
  "pressureByDensity",
  "pressureByTemperature",
  "energyByDensity",
  "energyByTemperature",
  "entropyByDensity",
  "entropyByTemperature",
];

/** Number of quantities whose gradient needs no third derivative of the free energy. */
const FIRST_ORDER_COUNT = 7;

/** Length of the record of gradients: two numbers per quantity, dQ/d ln rho and dQ/dT. */
export const GRADIENT_LENGTH: number = 2 * differentiable.length;

/** The order of members that the gradient of the quantity in slot `slot` needs. */
export function orderOf(slot: number): Order {
  return slot < FIRST_ORDER_COUNT ? 2 : 3;
}

const PER_LIGHT_SPEED_SQUARED = 1 / (speedOfLight * speedOfLight);

/**
 * Fills `out` from the records of `at`, after `fillMembers` and `fillThermodynamics`: all of it at order 3, the first
 * seven gradients at order 2.
 *
 * At T = 0 thermal parts are taken to begin with T^2, as a contribution's `addColdSlopes` says. What would need the
 * density derivative of those slopes is NaN there: gamma2, gamma3, the adiabatic gradient, and entropyByTemperature.
 */
export function fillGradients(at: Evaluator, order: Order, out: Float64Array): void {
  const { point, members, quantities: q } = at;
  const density = point[DENSITY]!;
  const temperature = point[TEMPERATURE]!;
  const atZero = temperature === 0;
  const perTemperature = atZero ? 0 : 1 / temperature; // the members it multiplies vanish at T = 0
  const pressure = members[PRESSURE]!;
  const pressureR = members[PRESSURE_R]!;
  const pressureT = members[PRESSURE_T]!;
  const heatCapacity = q[5]!;
  const thermal = pressureT * perTemperature; // dP/dT over rho

  out[0] = density;
  out[1] = 0;
  out[2] = 0;
  out[3] = 1;
  out[4] = density * pressureR;
  out[5] = density * thermal;
  out[6] = pressure - pressureT;
  out[7] = heatCapacity;
  out[8] = -thermal;
  out[9] = q[20]!;
  out[10] = pressureR - pressureT;
  out[11] = heatCapacity + thermal;
  out[12] = pressure;
  out[13] = -q[2]!;
  if (order === 2) return;

  const perPressure = 1 / pressure;
  const perDensity = 1 / density;
  const heat = members[HEAT]!;
  const perHeat = heat > 0 ? 1 / heat : 0; // without thermal part the Grueneisen ratio is zero everywhere
  const heatT = members[HEAT_T]!;
  const pressureRR = members[PRESSURE_RR]!;
  const pressureRT = members[PRESSURE_RT]!;
  const pressureTT = members[PRESSURE_TT]!;
  const gamma1 = q[9]!;
  const gradient = q[12]!;
  const grueneisen = gradient * gamma1; // gamma3 - 1 without its rounding to 1
  const adiabatic = pressureR + pressureT * grueneisen;

  // c_v, and at T = 0 the slope of c_v/T in place of its temperature derivative.
  const heatCapacityR = -pressureTT * perTemperature;
  const heatCapacityT = atZero ? at.cold[0]! : (heat + heatT) * perTemperature * perTemperature;
  out[14] = heatCapacityR;
  out[15] = heatCapacityT;

  // From here on "T" is d/d ln T until it is divided.
  const grueneisenR = (pressureRT - pressureT + grueneisen * pressureTT) * perHeat;
  const grueneisenT = (pressureTT - pressureT - grueneisen * heatT) * perHeat;
  const adiabaticR = pressureRR + (pressureRT - pressureT) * grueneisen + pressureT * grueneisenR;
  const adiabaticT = pressureRT + (pressureT + pressureTT) * grueneisen + pressureT * grueneisenT;

  // c_p = c_v (dP/drho)_s/(dP/drho)_T
  const perPressureR = 1 / pressureR;
  const ratio = adiabatic * perPressureR;
  out[16] = heatCapacityR * ratio + heatCapacity * (adiabaticR - ratio * pressureRR) * perPressureR;
  out[17] = heatCapacityT * ratio + heatCapacity * (adiabaticT - ratio * pressureRT) * perPressureR * perTemperature;

  const densityExponent = q[7]!;
  const temperatureExponent = q[8]!;
  out[18] = (pressureRR + pressureR * (1 - densityExponent)) * perPressure;
  out[19] = (pressureRT - densityExponent * pressureT) * perPressure * perTemperature;
  out[20] = (pressureRT - temperatureExponent * pressureR) * perPressure;
  out[21] = (pressureTT + pressureT * (1 - temperatureExponent)) * perPressure * perTemperature;

  const gamma1R = (adiabaticR - gamma1 * (pressureR - pressure)) * perPressure;
  const gamma1T = (adiabaticT - gamma1 * pressureT) * perPressure * perTemperature;
  const gradientR = (grueneisenR - gradient * gamma1R) / gamma1;
  const gradientT = (grueneisenT * perTemperature - gradient * gamma1T) / gamma1;
  const unknown = atZero && at.cold[0]! > 0 ? Number.NaN : 0;
  const gamma2Squared = q[10]! * q[10]!;
  out[22] = gamma1R;
  out[23] = gamma1T;
  out[24] = gamma2Squared * gradientR + unknown;
  out[25] = gamma2Squared * gradientT + unknown;
  out[26] = grueneisenR + unknown;
  out[27] = grueneisenT * perTemperature + unknown;
  out[28] = gradientR + unknown;
  out[29] = gradientT + unknown;

  // c_s^2 = (dP/drho)_s/(1 + (e + P/rho)/c^2)
  const inertia = 1 / (1 + (members[ENERGY]! + pressure) * PER_LIGHT_SPEED_SQUARED);
  const halfSpeed = q[13]! / 2;
  const perAdiabatic = 1 / adiabatic;
  out[30] = halfSpeed * (adiabaticR * perAdiabatic - out[10]! * PER_LIGHT_SPEED_SQUARED * inertia);
  out[31] = halfSpeed * (adiabaticT * perAdiabatic * perTemperature - out[11]! * PER_LIGHT_SPEED_SQUARED * inertia);
  out[32] = density * (adiabatic + adiabaticR);
  out[33] = density * adiabaticT * perTemperature;

  out[34] = pressureRR;
  out[35] = pressureRT * perTemperature;
  out[36] = density * pressureRT * perTemperature;
  out[37] = atZero ? density * at.cold[1]! : density * pressureTT * perTemperature * perTemperature;
  out[38] = (pressureR - 2 * (pressure - pressureT) - pressureRT) * perDensity;
  out[39] = -pressureTT * perDensity * perTemperature;
  out[40] = heatCapacityR;
  out[41] = heatCapacityT;
  out[42] = (2 * pressureT - pressureRT) * perDensity * perTemperature;
  out[43] = atZero ? -at.cold[1]! * perDensity : -pressureTT * perDensity * perTemperature * perTemperature;
  out[44] = -pressureTT * perTemperature * perTemperature + unknown;
  out[45] = heatT * perTemperature * perTemperature * perTemperature + unknown;
}
