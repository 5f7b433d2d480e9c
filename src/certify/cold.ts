/**
 * The electron gas at T = 0: closed forms in x = p_F/mc and the exact limits of the temperature derivatives.
 *
 *     n = x^3/3,  P = [x (2 x^2 - 3) sqrt(1 + x^2) + 3 asinh x]/24,  e_kin = n eps_F - P,  eps_F = sqrt(1 + x^2) - 1
 *     d2P/dT2|n -> (pi^2/9) x (x^2 + 2)/E,   d3P/dn dT2 -> (pi^2/9) (2 x^4 + 3 x^2 + 2)/(x^2 E^3),   E = sqrt(1 + x^2)
 *
 * in the units of moments.ts. Sources: S. Chandrasekhar (1939), chapter X, equations (19)-(23), for n, P and e_kin;
 * the limits are the leading term of A. Sommerfeld, Z. Phys. 47, 1 (1928), at fixed density.
 */
import type { Decimal } from "decimal.js";
import * as constants from "./constants.js";
import type { Arithmetic } from "./exact.js";
import type { ElectronGasValues, Units } from "./state-functions.js";

/** All values at T = 0 and density `n` (internal units); the degeneracy parameters are infinite. */
export function coldElectronGas(D: Arithmetic, n: Decimal, units: Units): ElectronGasValues {
  const { density, energy, boltzmann } = units;
  const perKelvin = boltzmann.div(energy);
  const x = n.times(3).cbrt();
  const x2 = x.times(x);
  const E = x2.plus(1).sqrt();
  const fermiEnergy = x2.div(E.plus(1));
  const pressure = coldPressure(x, x2, E);
  const ninthPi2 = D.acos(-1).pow(2).div(9);
  const zero = new D(0);
  const infinite = new D(Number.POSITIVE_INFINITY);
  // P_n = x^2/(3 E), P_nn = dP_n/dx / x^2
  const pn = x2.div(E.times(3));
  const pnn = x2.plus(2).div(E.pow(3).times(x).times(3));
  const ptt = ninthPi2.times(x).times(x2.plus(2)).div(E);
  const pntt = ninthPi2.times(x2.times(x2).times(2).plus(x2.times(3)).plus(2)).div(x2.times(E.pow(3)));
  return {
    degeneracyParameter: infinite,
    reducedChemicalPotential: infinite,
    chemicalPotential: fermiEnergy.times(energy),
    electronDensity: n.times(density),
    positronDensity: zero,
    pressure: pressure.times(density).times(energy),
    energyDensity: n.times(fermiEnergy).minus(pressure).times(density).times(energy),
    entropyDensity: zero,
    pressureByDensity: pn.times(energy),
    pressureByTemperature: zero,
    heatCapacityDensity: zero,
    pressureByDensityTwice: pnn.times(energy).div(density),
    pressureByDensityAndTemperature: zero,
    pressureByTemperatureTwice: ptt.times(density).times(boltzmann).times(perKelvin),
    entropyByTemperatureTwice: zero,
    pressureByDensityAndTemperatureTwice: pntt.times(boltzmann).times(perKelvin),
  };
}

/**
 * Limit of s/T per volume at T = 0 [erg/(K^2 cm^3)] at density `n` [cm^-3]: (pi^2/3) k^2 dn/dE at the Fermi energy, with
 * dn/dE = x E/(pi^2 lambda^3 m c^2) (Sommerfeld 1928). `restEnergy` is m c^2 [erg].
 */
export function coldEntropySlope(D: Arithmetic, n: Decimal, restEnergy: Decimal): Decimal {
  const momentum = new D(constants.planckConstant).times(constants.speedOfLight).div(restEnergy); // h/(m c)
  const unit = D.acos(-1).times(8).div(momentum.pow(3)); // 1/(pi^2 lambda^3)
  const x = n.div(unit).times(3).cbrt();
  const states = x.times(x.times(x).plus(1).sqrt()).times(unit).div(restEnergy);
  return states.times(D.acos(-1).times(constants.boltzmannConstant).pow(2)).div(3);
}

function coldPressure(x: Decimal, x2: Decimal, E: Decimal): Decimal {
  return x.times(x2.times(2).minus(3)).times(E).plus(x.asinh().times(3)).div(24);
}
