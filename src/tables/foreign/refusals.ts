/** Columns of which no equation of state should be made: what is found in them, and what it may come from. */
import { FermistateError } from "../../errors.js";
import type { ColumnsOutlier, ColumnsReport, ColumnsResiduals } from "./report.js";

/** What columns that contradict each other by order one come from mostly. */
export const likelyReasons =
  "units other than g/cm^3, K, dyn/cm^2, erg/g and erg/(g K), logarithms in place of values, or columns in another order";

/** Outliers named in a message. */
const named = 3;

/** Rows and columns of the first outliers: "row 12 (pressure)". */
export function outliersNamed(outliers: readonly ColumnsOutlier[]): string {
  const first = outliers.slice(0, named).map(({ row, column }) => `row ${row} (${column})`);
  const rest = outliers.length - first.length;
  return first.join(", ") + (rest > 0 ? ` and ${rest} more` : "");
}

/** @throws `invalid-option` where there are contradictions */
export function refuseContradictory(contradictions: readonly string[], residuals: ColumnsResiduals): void {
  if (contradictions.length === 0) return;
  const maps = [residuals.maxwell, residuals.energy, residuals.heat].filter((map) => map !== undefined);
  const found = maps
    .filter(({ relation }) => contradictions.includes(relation))
    .map(({ relation, median }) => `${relation} fails by ${Number(median.toPrecision(2))} of its largest term`);
  throw new FermistateError("invalid-option", {
    argument: "columns",
    given: "columns that contradict each other by order one",
    allowed:
      `columns of one matter (over most of the mesh ${found.join("; ")}); likely reasons: ` +
      `${likelyReasons}; ` +
      'contradictory: "report" makes the report all the same',
  });
}

/** @throws `unstable` where the fit refuses to answer somewhere */
export function refuseUnstable({ unstable, stability, outliers = [] }: ColumnsReport): void {
  const count = unstable.density.length;
  if (count === 0) return;
  const [rho, kelvin] = [unstable.density[0]!, unstable.temperature[0]!].map((x) => Number(x.toPrecision(6)));
  const place = `${rho} g/cm^3, ${kelvin} K`;
  const falls = stability.pressureAlongDensity.density.length + stability.energyAlongTemperature.density.length;
  const reason =
    falls > 0
      ? `(they do not at ${falls} nodes)`
      : "(they do at the nodes: a wrong entry in the row of that place or one near it, or a mesh that is too coarse)";
  const suspects =
    outliers.length > 0
      ? `; likely wrong, for they stand out from their neighbours: ${outliersNamed(outliers)}`
      : falls > 0
        ? "; a wrong entry in the row of that place or one near it does that too"
        : "";
  throw new FermistateError("unstable", {
    argument: "columns",
    given: `${count} places where their fit is unstable, first ${place}`,
    allowed:
      `pressure that rises with density and energy that rises with temperature ${reason}${suspects}; ` +
      'photons in the columns are better taken out with beside: [radiation()]; unstable: "report" lists the places',
  });
}
