/**
 * One zone that cools and freezes: matter of fixed density loses energy at a rate that depends on its temperature.
 *
 * Energy is what the zone keeps account of, and its temperature is a question to the equation of state. So no energy is
 * lost, and the pause at the melting temperature needs no special case: there the temperature stays while energy goes.
 */
import { type Composition, type EquationOfState, solveColumns, transition } from "fermistate";

/** A zone and how it cools. */
export interface CoolingZone {
  readonly eos: EquationOfState;
  readonly matter: Composition;
  /** g/cm^3. */
  readonly density: number;
  /** First and last temperature, K. */
  readonly temperatures: readonly [from: number, to: number];
  /** Energy lost at a temperature, erg/(g s). */
  readonly loss: (temperature: number) => number;
  /** Steps in each of the stretches: liquid, freezing, crystal. */
  readonly steps: number;
}

/** What happens to the zone, one row per step. */
export interface Cooling {
  /** s. */
  readonly time: Float64Array;
  readonly specificEnergy: Float64Array;
  readonly temperature: Float64Array;
  readonly crystalFraction: Float64Array;
}

/** Cools a zone. Steps are equal in energy, so that the time of each is the energy over the mean of 1/loss. */
export function cool({ eos, matter, density, temperatures, loss, steps }: CoolingZone): Cooling {
  const [first, last] = temperatures.map((one) => eos.state(density, one, matter));
  const stations = [first!, last!];
  if (first!.crystalFraction === 0 && last!.crystalFraction === 1) {
    const { liquid, crystal } = transition(eos, density, matter)!;
    stations.splice(1, 0, liquid, crystal); // steps of their own: dT/de jumps there
  }
  const ends = stations.map((state) => state.specificEnergy);

  const specificEnergy = Float64Array.from({ length: steps * (ends.length - 1) + 1 }, (_, i) => {
    const stretch = Math.min(Math.floor(i / steps), ends.length - 2);
    const share = (i - stretch * steps) / steps;
    return ends[stretch]! + share * (ends[stretch + 1]! - ends[stretch]!);
  });
  const [temperature, crystalFraction, time] = Array.from(
    { length: 3 },
    () => new Float64Array(specificEnergy.length),
  ) as [Float64Array, Float64Array, Float64Array];
  const densities = new Float64Array(specificEnergy.length).fill(density);
  solveColumns(eos, { composition: matter, density: densities, specificEnergy }, { temperature, crystalFraction });
  for (let i = 1; i < time.length; i++) {
    const lost = specificEnergy[i - 1]! - specificEnergy[i]!;
    time[i] = time[i - 1]! + 0.5 * lost * (1 / loss(temperature[i - 1]!) + 1 / loss(temperature[i]!));
  }
  return { time, specificEnergy, temperature, crystalFraction };
}
