/** Signs that no stable matter has, as an equation of state claims them and as its values show them. */
import type { State } from "../thermodynamics/equation-of-state.js";
import type { Measured } from "./derivative.js";
import type { Place, SignCount } from "./result.js";

type Sign = SignCount["quantity"];

/** Counts points with a wrong sign of one of the two. */
export interface SignCounter {
  readonly count: (
    state: State,
    measured: { readonly stiffness: Measured; readonly heat: Measured } | undefined,
    place: Place,
  ) => void;
  readonly found: () => SignCount[];
}

/** A counter for the first (0) or the second (1). */
export function signCounter(of: 0 | 1): SignCounter {
  const met = new Map<Sign, { points: number; value: number; worst: Place }>();
  const add = (quantity: Sign, value: number, place: Place): void => {
    const known = met.get(quantity);
    if (known === undefined) met.set(quantity, { points: 1, value, worst: place });
    else {
      known.points += 1;
      if (value < known.value) {
        known.value = value;
        known.worst = place;
      }
    }
  };
  return {
    count(state, measured, place) {
      const { pressure, heatCapacityV, pressureByDensity, gamma1 } = state;
      for (const [name, value] of Object.entries({ pressure, pressureByDensity, gamma1 })) {
        // Flat is unstable too for gamma1 and the pressure; dP/drho may vanish where only photons press.
        if (value < 0 || (value === 0 && name !== "pressureByDensity")) add(name as Sign, value, place);
      }
      if (heatCapacityV < 0) add("heatCapacityV", heatCapacityV, place);
      if (measured === undefined) return;
      const { stiffness, heat } = measured;
      if (stiffness.value < -3 * stiffness.error) add("measuredPressureByDensity", stiffness.value, place);
      if (heat.value < -3 * heat.error) add("measuredHeatCapacity", heat.value, place);
    },
    found: () => [...met].map(([quantity, one]) => ({ of, quantity, ...one })),
  };
}
