/** A neighbour's state as functions with derivatives, for a prediction. */
import type { State } from "../thermodynamics/equation-of-state.js";
import { BY_U, BY_UU, BY_UV, BY_V, BY_VV, ENERGY_KIND, ENTROPY_KIND, PRESSURE_KIND } from "./slots.js";

/**
 * Writes value and first derivatives of a kind by ln rho and ln T at `f[at]`. Second ones are not in a state: pressure is taken as
 * one power law, energy and enthalpy as cold matter of it with a gas on top. That is near where it counts: in cold matter they are
 * large beside the slope by temperature.
 */
export function fillFromState(f: Float64Array, at: number, kind: number, state: State): void {
  const { density, temperature, pressure } = state;
  const byU = (name: "pressureByDensity" | "energyByDensity" | "entropyByDensity"): number => density * state[name];
  const pressureByV = temperature * state.pressureByTemperature;
  const energyByV = temperature * state.heatCapacityV;
  const stiffness = state.pressureByDensity;
  // d ln(dP/d ln rho)/d ln rho: of cold electrons, else as if P were a power of density.
  const speed2 = state.relativityParameter ** 2 / (1 + state.relativityParameter ** 2);
  const exponent = state.temperatureExponent < 0.1 ? (5 - speed2) / 3 : state.densityExponent;
  f[at + BY_UU] = 0;
  f[at + BY_UV] = 0;
  f[at + BY_VV] = 0;
  if (kind === PRESSURE_KIND) {
    f[at] = pressure;
    f[at + BY_U] = byU("pressureByDensity");
    f[at + BY_V] = pressureByV;
    f[at + BY_UU] = exponent * f[at + BY_U]!;
    f[at + BY_UV] = state.densityExponent * pressureByV;
    f[at + BY_VV] = state.temperatureExponent * pressureByV;
  } else if (kind === ENERGY_KIND) {
    f[at] = state.specificEnergy;
    f[at + BY_U] = byU("energyByDensity");
    f[at + BY_V] = energyByV;
    f[at + BY_UU] = stiffness - pressure / density;
    f[at + BY_VV] = energyByV;
  } else if (kind === ENTROPY_KIND) {
    f[at] = state.specificEntropy;
    f[at + BY_U] = byU("entropyByDensity");
    f[at + BY_V] = energyByV / temperature;
  } else {
    f[at] = state.specificEnthalpy;
    f[at + BY_U] = byU("energyByDensity") + stiffness - pressure / density;
    f[at + BY_V] = energyByV + pressureByV / density;
    f[at + BY_UU] = (exponent - 1) * stiffness;
    f[at + BY_VV] = f[at + BY_V]!;
  }
}
