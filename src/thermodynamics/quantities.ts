/**
 * Every thermodynamic quantity, from the summed members of the free energy: the one place where that happens.
 *
 * With P/rho, dP/drho, (T/rho) dP/dT, T s, T c_v and e as members (free-energy.ts), each quantity is one or two
 * operations on numbers that are accurate on their own; no two formulas lead to the same quantity.
 * Definitions as in Cox & Giuli 1968, Principles of Stellar Structure, chapter 9.
 */
import { electronRestTemperature, speedOfLight } from "../constants.js";
import {
  CRYSTAL_FRACTION,
  DENSITY,
  ELECTRON_CHEMICAL_POTENTIAL,
  ELECTRON_COUPLING,
  ELECTRON_DEGENERACY,
  ELECTRON_DENSITY,
  FERMI_ENERGY,
  ION_COUPLING,
  PLASMA_TEMPERATURE_SQUARED,
  POSITRON_DENSITY,
  RADIATION_PRESSURE,
  RELATIVITY,
  radiusFactor,
  TEMPERATURE,
} from "../matter/plasma.js";
import { ENERGY, ENTROPY, HEAT, PRESSURE, PRESSURE_R, PRESSURE_T } from "./free-energy.js";
import {
  ANSWERED,
  NEGATIVE_HEAT_CAPACITY,
  NO_ADIABATIC_RESISTANCE,
  NO_NUMBER_ADDED,
  NO_PRESSURE,
  NO_RESISTANCE,
} from "./refusal-numbers.js";

/** What a quantity is called, measured in, and means. */
export interface Quantity {
  /** Unit in cgs, "1" for a pure number. */
  readonly unit: string;
  /** Meaning in one line. */
  readonly description: string;
}

/** Name of a quantity of a state. */
export type QuantityName =
  | "pressure"
  | "specificEnergy"
  | "specificEntropy"
  | "specificFreeEnergy"
  | "specificEnthalpy"
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
  | "entropyByTemperature"
  | "electronDensity"
  | "electronChemicalPotential"
  | "electronDegeneracy"
  | "positronDensity"
  | "radiationPressureFraction"
  | "relativityParameter"
  | "densityParameter"
  | "electronCoupling"
  | "ionCoupling"
  | "fermiTemperature"
  | "ionPlasmaTemperature"
  | "crystalFraction";

/** All quantities of a state, in the order of its fields and of the columns of a grid. */
export const quantities: Readonly<Record<QuantityName, Quantity>> = {
  pressure: { unit: "dyn/cm^2", description: "pressure P" },
  specificEnergy: {
    unit: "erg/g",
    description: "specific internal energy e, without rest mass of ions and net electrons",
  },
  specificEntropy: { unit: "erg/(g K)", description: "specific entropy s" },
  specificFreeEnergy: { unit: "erg/g", description: "specific Helmholtz free energy F = e - T s" },
  specificEnthalpy: { unit: "erg/g", description: "specific enthalpy e + P/rho" },
  heatCapacityV: { unit: "erg/(g K)", description: "heat capacity at constant volume c_v" },
  heatCapacityP: { unit: "erg/(g K)", description: "heat capacity at constant pressure c_p" },
  densityExponent: { unit: "1", description: "density exponent chi_rho = (d ln P/d ln rho) at constant T" },
  temperatureExponent: { unit: "1", description: "temperature exponent chi_T = (d ln P/d ln T) at constant density" },
  gamma1: { unit: "1", description: "adiabatic exponent (d ln P/d ln rho) at constant entropy" },
  gamma2: { unit: "1", description: "adiabatic exponent: (gamma2 - 1)/gamma2 = (d ln T/d ln P) at constant entropy" },
  gamma3: { unit: "1", description: "adiabatic exponent: gamma3 - 1 = (d ln T/d ln rho) at constant entropy" },
  adiabaticGradient: { unit: "1", description: "(d ln T/d ln P) at constant entropy" },
  soundSpeed: { unit: "cm/s", description: "relativistic sound speed c (gamma1 P/(rho c^2 + rho e + P))^(1/2)" },
  bulkModulus: { unit: "dyn/cm^2", description: "adiabatic bulk modulus gamma1 P" },
  pressureByDensity: { unit: "erg/g", description: "(dP/drho) at constant T" },
  pressureByTemperature: { unit: "dyn/(cm^2 K)", description: "(dP/dT) at constant density" },
  energyByDensity: { unit: "erg cm^3/g^2", description: "(de/drho) at constant T" },
  energyByTemperature: { unit: "erg/(g K)", description: "(de/dT) at constant density, equal to c_v" },
  entropyByDensity: { unit: "erg cm^3/(g^2 K)", description: "(ds/drho) at constant T" },
  entropyByTemperature: { unit: "erg/(g K^2)", description: "(ds/dT) at constant density" },
  electronDensity: { unit: "cm^-3", description: "net electron density n_- - n_+" },
  electronChemicalPotential: { unit: "erg", description: "chemical potential of the electrons without rest energy" },
  electronDegeneracy: { unit: "1", description: "electron chemical potential over kT; Infinity at T = 0" },
  positronDensity: { unit: "cm^-3", description: "density of positrons, which is that of pairs" },
  radiationPressureFraction: { unit: "1", description: "pressure of photons over total pressure" },
  relativityParameter: { unit: "1", description: "x_r = p_F/(m_e c) of the net electrons" },
  densityParameter: { unit: "1", description: "r_s, electron sphere radius over Bohr radius" },
  electronCoupling: { unit: "1", description: "Gamma_e = e^2/(a_e kT)" },
  ionCoupling: { unit: "1", description: "Gamma = Gamma_e <Z^(5/3)>" },
  fermiTemperature: { unit: "K", description: "Fermi energy of the net electrons over k, rest mass left out" },
  ionPlasmaTemperature: { unit: "K", description: "hbar omega_p/k of the ions" },
  crystalFraction: { unit: "1", description: "1 where the ions are a crystal, 0 where they are a liquid or gas" },
};

/** The names in the order of the record. */
export const quantityNames: readonly QuantityName[] = Object.keys(quantities) as QuantityName[];

/** Length of the record of quantities. */
export const QUANTITY_COUNT: number = quantityNames.length;

/** Quantities that only some equations of state know: NaN in the record means "no contribution says". */
export const optionalQuantities: readonly QuantityName[] = [
  "electronChemicalPotential",
  "electronDegeneracy",
  "positronDensity",
];

const PER_LIGHT_SPEED_SQUARED = 1 / (speedOfLight * speedOfLight);

/**
 * Fills the first part of `out` (order of {@link quantities}) from the summed members.
 * `cold[0]`, `cold[1]`: limits of c_v/T and (dP/dT)/(rho T) at T = 0; `cold[2]`: residual entropy. Read only at T = 0.
 * Returns 0, or the number of the reason (refusal-reasons.ts) where the sum exerts no pressure or resists neither
 * compression nor heating: `out[0]` then holds what broke the limit.
 */
export function fillQuantities(
  point: Float64Array,
  members: Float64Array,
  cold: Float64Array,
  out: Float64Array,
): number {
  const density = point[DENSITY]!;
  const temperature = point[TEMPERATURE]!;
  const specificPressure = members[PRESSURE]!;
  const pressureByDensity = members[PRESSURE_R]!;
  const thermal = members[PRESSURE_T]!;
  const heat = members[HEAT]!;
  const energy = members[ENERGY]!;
  const atZero = temperature === 0;

  // d ln T/d ln rho at constant entropy. A sum without thermal part does not know its temperature: there it is zero.
  const grueneisen = atZero ? (cold[0]! > 0 ? cold[1]! / cold[0]! : 0) : heat > 0 ? thermal / heat : 0;
  const adiabatic = pressureByDensity + thermal * grueneisen; // (dP/drho) at constant entropy
  if (!(specificPressure > 0 && pressureByDensity >= 0 && adiabatic > 0 && heat >= 0 && Number.isFinite(energy))) {
    return instability(members, adiabatic, out);
  }
  const pressure = specificPressure * density;
  const perPressure = 1 / specificPressure;
  const perDensity = 1 / density;
  const perTemperature = atZero ? 0 : 1 / temperature; // the members it multiplies vanish at T = 0
  const gamma1 = adiabatic * perPressure;
  const gradient = grueneisen / gamma1;
  const heatCapacity = heat * perTemperature;

  out[0] = pressure;
  out[1] = energy;
  out[2] = atZero ? cold[2]! : members[ENTROPY]! * perTemperature;
  out[3] = energy - members[ENTROPY]!;
  out[4] = energy + specificPressure;
  out[5] = heatCapacity;
  out[6] = (heatCapacity * adiabatic) / pressureByDensity;
  out[7] = pressureByDensity * perPressure;
  out[8] = thermal * perPressure;
  out[9] = gamma1;
  out[10] = 1 / (1 - gradient);
  out[11] = 1 + grueneisen;
  out[12] = gradient;
  out[13] = Math.sqrt(adiabatic / (1 + (energy + specificPressure) * PER_LIGHT_SPEED_SQUARED));
  out[14] = adiabatic * density;
  out[15] = pressureByDensity;
  out[16] = thermal * density * perTemperature;
  out[17] = (specificPressure - thermal) * perDensity;
  out[18] = heatCapacity;
  out[19] = -thermal * perDensity * perTemperature;
  out[20] = atZero ? cold[0]! : heatCapacity * perTemperature;
  return ANSWERED;
}

/** First slot of the quantities that do not come from the free energy but from the record of the point. */
export const FIRST_PLASMA_QUANTITY = 21;

/** Fills the rest of `out`: what the record of the point holds; after {@link fillQuantities}. */
export function fillPlasmaQuantities(point: Float64Array, out: Float64Array): void {
  const x = point[RELATIVITY]!;
  out[21] = point[ELECTRON_DENSITY]!;
  out[22] = point[ELECTRON_CHEMICAL_POTENTIAL]!;
  out[23] = point[ELECTRON_DEGENERACY]!;
  out[24] = point[POSITRON_DENSITY]!;
  out[25] = point[RADIATION_PRESSURE]! / out[0]!;
  out[26] = x;
  out[27] = radiusFactor / x;
  out[28] = point[ELECTRON_COUPLING]!;
  out[29] = point[ION_COUPLING]!;
  out[30] = point[FERMI_ENERGY]! * electronRestTemperature;
  out[31] = Math.sqrt(point[PLASMA_TEMPERATURE_SQUARED]!);
  out[32] = point[CRYSTAL_FRACTION]!;
}

/** The number of the reason (refusal-reasons.ts); writes what broke the limit to `out[0]`. */
function instability(members: Float64Array, adiabatic: number, out: Float64Array): number {
  const worst = (value: number, reason: number): number => {
    out[0] = value;
    return reason;
  };
  if (!(members[PRESSURE]! > 0)) return worst(members[PRESSURE]!, NO_PRESSURE);
  if (!(members[PRESSURE_R]! >= 0)) return worst(members[PRESSURE_R]!, NO_RESISTANCE);
  if (!(adiabatic > 0)) return worst(adiabatic, NO_ADIABATIC_RESISTANCE);
  if (!(members[HEAT]! >= 0)) return worst(members[HEAT]!, NEGATIVE_HEAT_CAPACITY);
  return worst(members[ENERGY]!, NO_NUMBER_ADDED);
}
