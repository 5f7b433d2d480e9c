/**
 * Findings over a grid: how many assumptions are strained at each point, and which are met where.
 *
 * The function `regime` is handed in: it brings the table of nuclides and the electron gas with it.
 */
import type { Phase } from "../coulomb/phase.js";
import type { Composition } from "../matter/composition.js";
import type { FindingCode } from "../regime/finding.js";
import type { Regime, regime } from "../regime/regime.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";

/** Columns of a grid that count findings. */
export type FindingsColumn = "findingsStrained" | "findingsOutside";

/** The columns in their order. */
export const findingsColumns: readonly FindingsColumn[] = ["findingsStrained", "findingsOutside"];

/** One finding over a whole grid; frozen. */
export interface FindingCount {
  /** Which assumption. */
  readonly code: FindingCode;
  /** Points where it is strained. */
  readonly strained: number;
  /** Points where it does not hold. */
  readonly outside: number;
}

/** Judges the rows of a grid. */
export interface FindingsCounter {
  /** Fills both columns from row `start` to before `end`. */
  readonly count: (columns: Readonly<Record<string, Float64Array>>, start: number, end: number) => void;
  /** What was met so far. */
  readonly met: () => readonly FindingCount[];
}

/** A counter for points of one equation of state and composition. */
export function findingsCounter(
  judge: typeof regime,
  equationOfState: EquationOfState,
  composition: Composition,
): FindingsCounter {
  const points = new Map<FindingCode, { strained: number; outside: number }>();
  return {
    count(columns, start, end) {
      for (let row = start; row < end; row++) {
        if ((columns["refused"]?.[row] ?? 0) !== 0) {
          for (const name of findingsColumns) columns[name]![row] = Number.NaN;
          continue;
        }
        const state = equationOfState.state(columns["density"]![row]!, columns["temperature"]![row]!, composition);
        const { findings } = regimeOfState(judge, equationOfState, state);
        columns["findingsStrained"]![row] = findings.filter(({ severity }) => severity === "strained").length;
        columns["findingsOutside"]![row] = findings.filter(({ severity }) => severity === "outside").length;
        // A code that several nuclides share is one point, of the worst severity.
        for (const code of new Set(findings.map((one) => one.code))) {
          const isOutside = findings.some((one) => one.code === code && one.severity === "outside");
          const known = points.get(code) ?? { strained: 0, outside: 0 };
          known[isOutside ? "outside" : "strained"] += 1;
          points.set(code, known);
        }
      }
    },
    met: () => Object.freeze([...points].map(([code, counts]) => Object.freeze({ code, ...counts }))),
  };
}

/** The regime of a state of an equation of state: its sum and, where that has Coulomb terms, its phase. */
export function regimeOfState(judge: typeof regime, equationOfState: EquationOfState, state: State): Regime {
  const { density, temperature, composition, crystalFraction } = state;
  // Without Coulomb terms there is no phase in the numbers, and the rule decides.
  const interacting = equationOfState.contributions.some(({ name }) => name === "Coulomb plasma");
  const phase: Phase = crystalFraction === 1 ? "crystal" : "liquid";
  return judge(density, temperature, composition, { equationOfState, state, ...(interacting ? { phase } : {}) });
}
