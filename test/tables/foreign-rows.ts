/**
 * Columns for the tests. Ideal gas with photons in closed form, written out here: P = N k T rho + a T^4/3, e = 3/2 N k T + a T^4/rho,
 * s = N k ln(T^(3/2)/rho) + s_1 + 4 a T^3/(3 rho), with k = 1.380649e-16 erg/K (SI, exact) and a = 7.565733e-15 erg/(cm^3 K^4)
 * (8 pi^5 k^4/(15 h^3 c^3) from the exact constants of the SI).
 */
import type { Composition } from "../../src/matter/composition.js";
import type { EquationOfState } from "../../src/thermodynamics/equation-of-state.js";

export interface Row {
  density: number;
  temperature: number;
  pressure: number;
  specificEnergy: number;
  specificEntropy: number;
}

/** Particles of the closed form, 1/g. */
const particles = 3e23;
const perParticle = 1.380649e-16 * particles;
/** a, from h = 6.62607015e-27 erg s and c = 2.99792458e10 cm/s. */
const photons = (8 * Math.PI ** 5 * 1.380649e-16 ** 4) / (15 * 6.62607015e-27 ** 3 * 2.99792458e10 ** 3);

/** The closed form, with all that a test compares. `light` 0 leaves the photons out. */
export function idealGas(rho: number, t: number, light: number = 1, entropy: number = 1e9) {
  const a = light * photons;
  return {
    density: rho,
    temperature: t,
    pressure: perParticle * rho * t + (a * t ** 4) / 3,
    specificEnergy: 1.5 * perParticle * t + (a * t ** 4) / rho,
    specificEntropy: perParticle * Math.log(t ** 1.5 / rho) + entropy + (4 * a * t ** 3) / (3 * rho),
    heatCapacityV: 1.5 * perParticle + (4 * a * t ** 3) / rho,
    pressureByDensity: perParticle * t,
    pressureByTemperature: perParticle * rho + (4 * a * t ** 3) / 3,
  };
}

/** Equal steps of the logarithm. */
export function steps(lowest: number, highest: number, count: number): number[] {
  return Array.from({ length: count }, (_, i) => lowest * (highest / lowest) ** (i / (count - 1)));
}

/** Rows on a mesh. */
export function rowsOf(
  densities: readonly number[],
  temperatures: readonly number[],
  at: (rho: number, t: number) => Row,
): Row[] {
  return densities.flatMap((rho) => temperatures.map((t) => at(rho, t)));
}

/** States of an equation of state as rows. */
export const statesOf =
  (equationOfState: EquationOfState, composition: Composition) =>
  (rho: number, t: number): Row =>
    equationOfState.state(rho, t, composition);

/** Rows as columns. */
export function columnsOf(rows: readonly Row[]) {
  const column = (name: keyof Row): number[] => rows.map((row) => row[name]);
  return {
    density: column("density"),
    temperature: column("temperature"),
    pressure: column("pressure"),
    specificEnergy: column("specificEnergy"),
    specificEntropy: column("specificEntropy"),
  };
}
