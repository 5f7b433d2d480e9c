/** From the place that a search has found to the full record of quantities there. */
import type { Composition } from "../matter/composition.js";
import { CRYSTAL_FRACTION, DENSITY, TEMPERATURE } from "../matter/plasma.js";
import type { Evaluator } from "../thermodynamics/evaluator.js";
import { SECOND_ORDER_COUNT } from "../thermodynamics/free-energy.js";
import type { Searcher } from "./sides.js";
import { COEXISTENCE, DENSITY_NOW, EVALUATIONS, STEP_U, STEP_V, TEMPERATURE_NOW } from "./slots.js";

/**
 * Fills members and point of the side where the result lies, with the last step of the search made through the
 * third-order members; `detail` says whether to compute what only some callers want. Returns that side's evaluator,
 * ready
 * for its quantities.
 */
export function finish(searcher: Searcher, composition: Composition, detail: boolean): Evaluator {
  const { w, place } = searcher;
  const ev = searcher.evaluator();
  if (place[0] === COEXISTENCE) mix(searcher, composition);
  else if (w[TEMPERATURE_NOW] === 0) {
    w[DENSITY_NOW]! *= 1 + w[STEP_U]!;
    ev.point[DENSITY] = w[DENSITY_NOW]!;
    ev.point[TEMPERATURE] = 0;
    ev.fillMembers(composition, 2);
    w[EVALUATIONS]! += 1;
  } else if (w[STEP_U] !== 0 || w[STEP_V] !== 0) {
    ev.step[0] = w[STEP_U]!;
    ev.step[1] = w[STEP_V]!;
    ev.move(composition);
  }
  if (detail) ev.fillDetail(composition);
  return ev;
}

/**
 * Coexisting phases: members by mass fraction. First-order quantities follow the lever rule; second-order ones are those
 * of a mixture whose solid fraction is held fixed.
 */
function mix({ w, share, liquid, crystal }: Searcher, composition: Composition): void {
  const frozen = share[0]!;
  fillAt(liquid!, composition, share[1]!, w);
  fillAt(crystal!, composition, share[2]!, w);
  const mixed = liquid!.members;
  const solid = crystal!.members;
  w[EVALUATIONS]! += 2;
  for (let i = 0; i < SECOND_ORDER_COUNT; i++) mixed[i] = (1 - frozen) * mixed[i]! + frozen * solid[i]!;
  const { point } = liquid!;
  point.set(crystal!.point); // what the electrons told: theirs are the last evaluated
  point[DENSITY] = w[DENSITY_NOW]!;
  point[CRYSTAL_FRACTION] = frozen;
}

function fillAt(side: Evaluator, composition: Composition, density: number, w: Float64Array): void {
  side.point[DENSITY] = density;
  side.point[TEMPERATURE] = w[TEMPERATURE_NOW]!;
  side.fillMembers(composition, 2);
}
