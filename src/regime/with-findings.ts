/** States that carry their warnings. */
import type { Composition } from "../matter/composition.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";
import type { Finding } from "./finding.js";
import { regime } from "./regime.js";

/** A state and what is strained there. */
export type StateWithFindings = State & {
  /** As in `regime(...)`, judged for this equation of state; empty where nothing is strained. */
  readonly findings: readonly Finding[];
};

/** An equation of state whose `state` carries findings; `evaluate` and `freeEnergy` are the original ones. */
export interface EquationOfStateWithFindings extends EquationOfState {
  /** As {@link EquationOfState.state}, with the findings. */
  state(density: number, temperature: number, composition: Composition): StateWithFindings;
}

/**
 * The same equation of state, each `state` with the findings of `regime(...)` in it: a solver that keeps the state keeps the
 * warnings. Findings cost more than the state; for many points ask a grid for its findings column.
 *
 * @throws as the equation of state does
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter, withFindings } from "fermistate";
 * const matter = withFindings(whiteDwarfMatter());
 * matter.state(2e9, 1e8, composition({ Fe56: 1 })).findings.map(({ code }) => code); // => ["electron-capture"]
 * ```
 */
export function withFindings(equationOfState: EquationOfState): EquationOfStateWithFindings {
  return Object.freeze({
    ...equationOfState,
    state(density: number, temperature: number, composition: Composition): StateWithFindings {
      const state = equationOfState.state(density, temperature, composition);
      const { crystalFraction } = state;
      const phase = crystalFraction === undefined ? {} : { phase: phaseOf(crystalFraction) };
      const { findings } = regime(density, temperature, composition, { equationOfState, state, ...phase });
      return Object.freeze({ ...state, findings });
    },
  });
}

/** The ions' phase, as the state has it. */
function phaseOf(crystalFraction: number): "liquid" | "crystal" {
  return crystalFraction === 1 ? "crystal" : "liquid";
}
