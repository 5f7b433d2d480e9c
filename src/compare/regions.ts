/** Which physics rules at each point of a comparison. */
import { isFermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { type Regime, regime } from "../regime/regime.js";
import { type Answer, isState } from "./answers.js";
import type { Region } from "./result.js";

/** Regions in plain words, to follow "except". */
export const regionWords: Readonly<Record<Region, string>> = {
  "melting-line": "at the melting line",
  pairs: "where pairs outnumber the other electrons",
  "pair-onset": "at the onset of electron-positron pairs",
  radiation: "where radiation has most of the pressure",
  "partial-ionisation": "where atoms keep some of their electrons",
  crystal: "in the crystal",
  "degenerate-liquid": "in degenerate liquid matter",
  "partially-degenerate": "in partially degenerate matter",
  "non-degenerate": "in non-degenerate matter",
  elsewhere: "outside what the regimes cover",
};

/** What is at a point; undefined beyond the domain of `regime`. */
export function regimeAt(density: number, temperature: number, composition: Composition): Regime | undefined {
  try {
    return regime(density, temperature, composition);
  } catch (error) {
    if (isFermistateError(error)) return undefined;
    throw error;
  }
}

/** Region of a point. */
export function regionOf(found: Regime | undefined, isAtMelting: boolean): Region {
  const { parameters, findings = [], kind = [] } = found ?? {};
  // Before the melting line: where a plasma is no plasma, its melting is not what makes the difference.
  if (findings.some(({ code }) => code === "partial-ionisation")) return "partial-ionisation";
  if (isAtMelting) return "melting-line";
  if (parameters === undefined) return "elsewhere";
  if (parameters.pairFraction > 1) return "pairs";
  if (parameters.pairFraction > 1e-4) return "pair-onset";
  if (parameters.radiationPressureFraction > 0.5) return "radiation";
  if (kind.includes("crystal")) return "crystal";
  if (kind.includes("degenerate")) return "degenerate-liquid";
  if (kind.includes("partially degenerate")) return "partially-degenerate";
  return kind.includes("non-degenerate") ? "non-degenerate" : "elsewhere";
}

/** Whether a neighbour of a point has another phase in one of the two, or the two have different ones there. */
export function meltingFinder(
  answers: readonly [readonly Answer[], readonly Answer[]],
  densities: number,
): (row: number) => boolean {
  const phaseOf = (answer: Answer | undefined): number | undefined =>
    answer !== undefined && isState(answer) ? answer.crystalFraction : undefined;
  // An ideal gas knows no crystal: that it is another phase than the other's says nothing.
  const bothFreeze = answers.every((list) => list.some((answer) => phaseOf(answer) === 1));
  return (row) => {
    const column = row % densities;
    const neighbours = [row - densities, row + densities];
    if (column > 0) neighbours.push(row - 1);
    if (column < densities - 1) neighbours.push(row + 1);
    const differs = (list: readonly Answer[]): boolean => {
      const own = phaseOf(list[row]);
      return own !== undefined && neighbours.some((other) => (phaseOf(list[other]) ?? own) !== own);
    };
    return answers.some(differs) || (bothFreeze && phaseOf(answers[0][row]) !== phaseOf(answers[1][row]));
  };
}
