/** Objects from records: literals with a fixed shape, an order of magnitude faster than a loop over names. */
import type { Composition } from "../matter/composition.js";
import type { FreeEnergyDerivatives, State } from "./equation-of-state.js";
import type { Order } from "./free-energy.js";

/** An immutable state; `r` holds the quantities in the order of quantities.ts (a test holds the two together). */
export function stateFrom(density: number, temperature: number, composition: Composition, r: Float64Array): State {
  return Object.freeze({
    density,
    temperature,
    composition,
    pressure: r[0]!,
    specificEnergy: r[1]!,
    specificEntropy: r[2]!,
    specificFreeEnergy: r[3]!,
    specificEnthalpy: r[4]!,
    heatCapacityV: r[5]!,
    heatCapacityP: r[6]!,
    densityExponent: r[7]!,
    temperatureExponent: r[8]!,
    gamma1: r[9]!,
    gamma2: r[10]!,
    gamma3: r[11]!,
    adiabaticGradient: r[12]!,
    soundSpeed: r[13]!,
    bulkModulus: r[14]!,
    pressureByDensity: r[15]!,
    pressureByTemperature: r[16]!,
    energyByDensity: r[17]!,
    energyByTemperature: r[18]!,
    entropyByDensity: r[19]!,
    entropyByTemperature: r[20]!,
    electronDensity: r[21]!,
    electronChemicalPotential: known(r[22]!),
    electronDegeneracy: known(r[23]!),
    positronDensity: known(r[24]!),
    radiationPressureFraction: r[25]!,
    relativityParameter: r[26]!,
    densityParameter: r[27]!,
    electronCoupling: r[28]!,
    ionCoupling: r[29]!,
    fermiTemperature: r[30]!,
    ionPlasmaTemperature: r[31]!,
    crystalFraction: r[32]!,
  });
}

/** The natural derivatives as an object; `f` in the order of free-energy.ts. */
export function freeEnergyFrom(f: Float64Array, order: Order): FreeEnergyDerivatives {
  if (order === 2) {
    return Object.freeze({ f00: f[0]!, f10: f[1]!, f01: f[2]!, f20: f[3]!, f11: f[4]!, f02: f[5]! });
  }
  return Object.freeze({
    f00: f[0]!,
    f10: f[1]!,
    f01: f[2]!,
    f20: f[3]!,
    f11: f[4]!,
    f02: f[5]!,
    f30: f[6]!,
    f21: f[7]!,
    f12: f[8]!,
    f03: f[9]!,
    f22: f[10]!,
  });
}

/** NaN in the record means that no contribution provides the quantity. */
function known(value: number): number | undefined {
  return Number.isNaN(value) ? undefined : value;
}
