/** A neighbour's state as functions with first derivatives, for a prediction. */
import type { State } from "../thermodynamics/equation-of-state.js";
import { BY_U, BY_UU, BY_UV, BY_V, BY_VV, ENERGY_KIND, ENTROPY_KIND, PRESSURE_KIND } from "./slots.js";

/** Writes value and first derivatives of a kind by ln rho and ln T at `f[at]`; second ones are not in a state. */
export function fillFromState(f: Float64Array, at: number, kind: number, state: State): void {
  const { density, temperature, pressure } = state;
  const byU = (name: "pressureByDensity" | "energyByDensity" | "entropyByDensity"): number => density * state[name];
  const pressureByV = temperature * state.pressureByTemperature;
  const energyByV = temperature * state.heatCapacityV;
  f[at + BY_UU] = 0;
  f[at + BY_UV] = 0;
  f[at + BY_VV] = 0;
  if (kind === PRESSURE_KIND) {
    f[at] = pressure;
    f[at + BY_U] = byU("pressureByDensity");
    f[at + BY_V] = pressureByV;
  } else if (kind === ENERGY_KIND) {
    f[at] = state.specificEnergy;
    f[at + BY_U] = byU("energyByDensity");
    f[at + BY_V] = energyByV;
  } else if (kind === ENTROPY_KIND) {
    f[at] = state.specificEntropy;
    f[at + BY_U] = byU("entropyByDensity");
    f[at + BY_V] = energyByV / temperature;
  } else {
    f[at] = state.specificEnthalpy;
    f[at + BY_U] = byU("energyByDensity") + state.pressureByDensity - pressure / density;
    f[at + BY_V] = energyByV + pressureByV / density;
  }
}
