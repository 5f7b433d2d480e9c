/**
 * An adiabat through freezing: entropy is held while density changes, from liquid through a mixture of both phases to the
 * crystal.
 *
 * Between the entropies of liquid and crystal matter is at the melting temperature and the share of the crystal follows
 * from the lever rule; the inverse question with entropy answers that by itself, so the loop below knows of no phases.
 */
import { type Composition, type EquationOfState, solveColumns, transition } from "fermistate";

/** Columns along an adiabat. */
export interface Adiabat {
  /** Of all points, erg/(g K). */
  readonly entropy: number;
  readonly density: Float64Array;
  readonly temperature: Float64Array;
  readonly pressure: Float64Array;
  readonly specificEnergy: Float64Array;
  readonly crystalFraction: Float64Array;
}

/** The adiabat from matter at a temperature through given densities, the first of which is where it starts. */
export function adiabat(
  eos: EquationOfState,
  matter: Composition,
  temperatureAtStart: number,
  density: Float64Array,
): Adiabat {
  const entropy = eos.state(density[0]!, temperatureAtStart, matter).specificEntropy;
  const specificEntropy = new Float64Array(density.length).fill(entropy);
  const [temperature, pressure, specificEnergy, crystalFraction] = Array.from(
    { length: 4 },
    () => new Float64Array(density.length),
  ) as [Float64Array, Float64Array, Float64Array, Float64Array];
  solveColumns(
    eos,
    { composition: matter, density, specificEntropy },
    { temperature, pressure, specificEnergy, crystalFraction },
  );
  return { entropy, density, temperature, pressure, specificEnergy, crystalFraction };
}

/**
 * Latent heat set free along an adiabat up to each point, erg/g: the integral of T (s_liquid - s_crystal) over the crystal
 * fraction. It does not leave the matter: it warms what is there, so that T falls less than it would.
 */
export function latentHeatAlong(eos: EquationOfState, matter: Composition, along: Adiabat): Float64Array {
  const heat = new Float64Array(along.density.length);
  const jump = Float64Array.from(along.density, (density) => transition(eos, density, matter)?.latentHeat ?? 0);
  for (let i = 1; i < heat.length; i++) {
    const frozen = along.crystalFraction[i]! - along.crystalFraction[i - 1]!;
    heat[i] = heat[i - 1]! + 0.5 * (jump[i]! + jump[i - 1]!) * frozen;
  }
  return heat;
}
