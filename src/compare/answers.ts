/** What an equation of state says at each point: a state, or why it refuses. */
import { isFermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";

/** A state, or the code of the refusal. */
export type Answer = State | string;

/** What an equation of state answers at a point; a state with NaN in its thermodynamics is a refusal "not-a-number". */
export function answerAt(
  equationOfState: EquationOfState,
  density: number,
  temperature: number,
  composition: Composition,
): Answer {
  try {
    const state = equationOfState.state(density, temperature, composition);
    const { pressure, specificEnergy, specificEntropy } = state;
    return Number.isFinite(pressure + specificEnergy + specificEntropy) ? state : "not-a-number";
  } catch (error) {
    // A foreign equation of state may throw anything; what is no refusal of ours is named as such.
    return isFermistateError(error) ? error.code : "other-error";
  }
}

/** True for a state. */
export function isState(answer: Answer): answer is State {
  return typeof answer === "object";
}
