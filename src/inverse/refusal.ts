/** Why a question has no answer: typed errors with the limiting value. */
import { FermistateError, withIndex } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
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

/** Throws what the end of a search means. */
export function refuseQuestion(
  eos: EquationOfState,
  composition: Composition,
  { searcher }: Solver,
  question: Question,
  end: number,
  index?: number,
): never {
  const { w, f } = searcher;
  const { names, type, first } = question;
  const [density, temperature] = [w[DENSITY_NOW]!, w[TEMPERATURE_NOW]!];
  if (end === LOST || type === BOTH) {
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
  if (type === TEMPERATURE_AT_DENSITY && end === BEYOND_LOWER && first !== ENTROPY_KIND) {
    const cold = coldValue(eos, composition, density, argument);
    if (cold !== undefined && target < cold) {
      throw new FermistateError(
        "below-cold",
        withIndex(
          { argument, given: target, allowed: `>= ${cold}, its value at T = 0 and this density`, limit: cold },
          index,
        ),
      );
    }
  }
  const lowest = end === BEYOND_LOWER;
  const bound = eos.domain[unknown as "density" | "temperature"][lowest ? 0 : 1];
  const relation = target > limit ? "<=" : ">=";
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

/** The quantity at T = 0, where this equation of state answers there. */
function coldValue(
  eos: EquationOfState,
  composition: Composition,
  density: number,
  name: Question["names"][number],
): number | undefined {
  if (!eos.domain.zeroTemperature) return undefined;
  try {
    return eos.state(density, 0, composition)[name];
  } catch {
    return undefined; // a liquid has no state at T = 0
  }
}
