/** Why a question has no answer: typed errors with the limiting value. */
import { FermistateError, withIndex } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { BELOW_COLD, GIVEN_TOO_HIGH, GIVEN_TOO_LOW, NO_STATE } from "../thermodynamics/refusal-numbers.js";
import type { Question } from "./questions.js";
import {
  BEYOND_LOWER,
  BOTH,
  DENSITY_NOW,
  ENTROPY_KIND,
  EVALUATIONS,
  FIRST_TARGET,
  LOST,
  SECOND_TARGET,
  TEMPERATURE_AT_DENSITY,
  TEMPERATURE_NOW,
} from "./slots.js";
import type { Solver } from "./solver.js";

/**
 * The number of the reason (refusal-reasons.ts) that the end of a search means; at given density that is in the
 * record.
 */
export function reasonOfEnd(composition: Composition, solver: Solver, { type, first }: Question, end: number): number {
  if (end === LOST || type === BOTH) return NO_STATE;
  const { w, f } = solver.searcher;
  const target = w[FIRST_TARGET]!;
  if (type === TEMPERATURE_AT_DENSITY && end === BEYOND_LOWER && first !== ENTROPY_KIND) {
    solver.fillCold(composition, first);
    if (target < solver.cold[0]!) return BELOW_COLD; // NaN without a state at T = 0
  }
  return target > f[0]! ? GIVEN_TOO_HIGH : GIVEN_TOO_LOW;
}

/** Throws what the end of a search means. */
export function refuseQuestion(
  eos: EquationOfState,
  composition: Composition,
  solver: Solver,
  question: Question,
  end: number,
  index?: number,
): never {
  const { w, f } = solver.searcher;
  const { names, type } = question;
  const [density, temperature] = [w[DENSITY_NOW]!, w[TEMPERATURE_NOW]!];
  const reason = reasonOfEnd(composition, solver, question, end);
  if (reason === NO_STATE) {
    const given = `${names[0]} ${w[FIRST_TARGET]}, ${names[1]} ${w[SECOND_TARGET]}`;
    const what = type === BOTH ? given : w[FIRST_TARGET];
    throw new FermistateError(
      "no-solution",
      withIndex(
        {
          argument: type === BOTH ? names.join(" + ") : names[1],
          given: what,
          allowed: `values that one stable state of this matter has; none found in ${w[EVALUATIONS]} evaluations`,
        },
        index,
      ),
    );
  }
  const target = w[FIRST_TARGET]!;
  const argument = names[1];
  const [known, unknown] = type === TEMPERATURE_AT_DENSITY ? ["density", "temperature"] : ["temperature", "density"];
  const value = known === "density" ? density : temperature;
  const limit = f[0]!;
  if (reason === BELOW_COLD) {
    const cold = solver.cold[0]!;
    throw new FermistateError(
      "below-cold",
      withIndex(
        { argument, given: target, allowed: `>= ${cold}, its value at T = 0 and this density`, limit: cold },
        index,
      ),
    );
  }
  const lowest = end === BEYOND_LOWER;
  const bound = eos.domain[unknown as "density" | "temperature"][lowest ? 0 : 1];
  const relation = reason === GIVEN_TOO_HIGH ? "<=" : ">=";
  throw new FermistateError(
    "no-solution",
    withIndex(
      {
        argument,
        given: target,
        allowed: `${relation} ${limit}, its value at ${known} ${value} and the ${lowest ? "lowest" : "highest"} ${unknown}, ${bound}`,
        limit,
      },
      index,
    ),
  );
}
