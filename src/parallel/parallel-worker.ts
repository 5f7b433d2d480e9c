/** What runs in a thread: makes the equation of state once, then answers blocks. Never throws. */
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { type Answer, packError, type Question, run } from "./block.js";
import { loadMatter, refuseNesting } from "./matter-source.js";
import { hasAskedForThreads, markThread } from "./thread-mark.js";

markThread();

let matter: Promise<EquationOfState> | undefined;

/** Answers a block; without one, makes the equation of state. */
export async function answer({ source, block }: Question): Promise<Answer> {
  try {
    matter ??= loadMatter(source);
    const made = await matter;
    if (hasAskedForThreads()) refuseNesting(); // also where the module has caught the error that told it
    if (block !== undefined) run(made, block);
    return {};
  } catch (error) {
    return { failure: packError(error, block?.from ?? 0) };
  }
}
