/** The report on columns in words. */
import { outlierFactor } from "./outliers.js";
import { likelyReasons, outliersNamed } from "./refusals.js";
import type { ColumnsOutlier, ColumnsReport, ErrorSpread, Places, ResidualMap } from "./report.js";

/** Rows and places listed one by one. */
const mostListed = 10;

const short = (value: number): string => value.toExponential(1).replace("e+", "e");
const at = ([density, temperature]: readonly [number, number]): string =>
  `${Number(density.toPrecision(4))} g/cm^3, ${Number(temperature.toPrecision(4))} K`;
const spread = ({ max, percentile99, median, worst }: ErrorSpread): string =>
  `${short(max)} at most (${at(worst)}), ${short(percentile99)} for 99 %, ${short(median)} for half`;

/** A report in plain language, one finding a line. */
export function columnsReportText(report: ColumnsReport): string {
  const { residuals, stability, deviations, unstable, densities, temperatures, contradictions, outliers = [] } = report;
  const lines = [
    verdict(report),
    `${report.rows} rows, ${report.arrangement}: ${densities.length} densities from ${range(densities, "g/cm^3")}, ` +
      `${temperatures.length} temperatures from ${range(temperatures, "K")}.`,
  ];
  if (report.duplicates > 0) lines.push(`${report.duplicates} rows said what another row says and were dropped.`);
  if (report.arrangement !== "rectangular") {
    const isScattered = report.arrangement === "scattered in temperature";
    const why = isScattered ? "Each density has temperatures of its own" : gaps(report);
    lines.push(
      `${why}: they were resampled along ln T to ` +
        "common ones, between the highest of the lowest and the lowest of the highest; " +
        `${report.rowsOutside} rows lie outside. Entries that stand out were not looked for.`,
    );
  }
  if (report.entropy !== "given") {
    lines.push("Entropy was not given: it follows from energy and pressure, and its zero is a choice.");
  }
  lines.push("How far the columns agree with each other, relative to the largest term of each relation:");
  for (const map of [residuals.maxwell, residuals.energy, residuals.heat]) {
    if (map !== undefined) lines.push(residualLine(map, outliers.length));
  }
  if (outliers.length > 0) {
    lines.push(
      `Entries off from what their neighbours say by ${outlierFactor} times what lines beside them and digits explain, or more ` +
        "(rows from 0):",
    );
    for (const outlier of outliers.slice(0, mostListed)) lines.push(outlierLine(outlier));
    if (outliers.length > mostListed) lines.push(`  and ${outliers.length - mostListed} more.`);
  }
  const signs: readonly (readonly [Places, string])[] = [
    [stability.densityExponent, "d ln P/d ln rho at constant temperature is not positive"],
    [stability.heatCapacityV, "c_v = de/dT is not positive"],
    [stability.pressureAlongDensity, "pressure does not rise to the next density"],
    [stability.pressureAlongTemperature, "pressure does not rise to the next temperature"],
    [stability.energyAlongTemperature, "energy does not rise to the next temperature"],
    [stability.entropyAlongTemperature, "entropy does not rise to the next temperature"],
  ];
  const wrong = signs.filter(([places]) => places.density.length > 0);
  if (wrong.length === 0) lines.push("Everywhere pressure, energy and entropy rise as in stable matter.");
  for (const [places, text] of wrong) lines.push(`  ${countOf(places, "node")}: ${text}; first ${first(places)}.`);
  lines.push("How far the consistent free energy is from the columns:");
  lines.push(`  pressure: ${spread(deviations.pressure)}.`);
  lines.push(`  specific energy, relative to |e| + P/rho: ${spread(deviations.specificEnergy)}.`);
  if (deviations.specificEntropy !== undefined)
    lines.push(`  specific entropy: ${spread(deviations.specificEntropy)}.`);
  lines.push(
    unstable.density.length === 0
      ? "It is stable at all nodes and in the middle of all cells and their sides" +
          (contradictions.length > 0 ? ", which is worth nothing where the columns contradict each other." : ".")
      : `It is not stable, and refuses to answer, at ${countOf(unstable, "place")}; first ${first(unstable)}.`,
  );
  return lines.join("\n");
}

/** The one thing to know first. */
function verdict({ contradictions, unstable, outliers, residuals }: ColumnsReport): string {
  if (contradictions.length > 0) {
    return (
      `These columns contradict each other by order one over most of the mesh (${contradictions.join("; ")}): what is made of ` +
      `them is no physics. Likely reasons: ${likelyReasons}.`
    );
  }
  const findings: string[] = [];
  if (outliers !== undefined && outliers.length > 0) {
    findings.push(
      `${outliers.length === 1 ? "one entry stands" : `${outliers.length} entries stand`} out from what the neighbours say: ` +
        `${outliersNamed(outliers)}; mend or remove such rows`,
    );
  }
  if (unstable.density.length > 0) findings.push(`the fit is not stable at ${countOf(unstable, "place")}`);
  const maps = [residuals.maxwell, residuals.energy, residuals.heat].filter((map) => map !== undefined);
  if (maps.some((map) => causeOf(map) === "columns")) {
    findings.push("columns disagree by more than the mesh and their digits explain");
  }
  if (findings.length === 0) {
    return (
      `Verdict: ${outliers === undefined ? "" : "no entry stands out, "}at most nodes the columns agree as far as the mesh and ` +
      "their digits tell, and the fit is stable."
    );
  }
  return `Verdict: ${findings.join("; ")}.`;
}

/** What most residuals of a map come from. */
function causeOf({ median, resolution, unexplained }: ResidualMap): "columns" | "digits" | "mesh" {
  if (median <= 3 * resolution.median) return "mesh";
  return unexplained > 0 ? "columns" : "digits";
}

const causes = {
  columns: "more than the distance of the nodes and the digits explain: the columns disagree",
  digits: "more than the distance of the nodes explains, but the columns were printed with no more digits than that",
  mesh: "at most nodes no more than the distance of the nodes explains",
};

function gaps({ missing, strayRows }: ColumnsReport): string {
  const count = missing.density.length;
  const places = Array.from(missing.density.subarray(0, mostListed), (rho, i) => at([rho, missing.temperature[i]!]));
  const findings: string[] = [];
  if (count > 0) {
    const list = places.join("; ") + (count > mostListed ? `; and ${count - mostListed} more` : "");
    findings.push(`${countOf(missing, "row")} of a rectangle ${count === 1 ? "is" : "are"} missing, at ${list}`);
  }
  if (strayRows.length > 0) {
    const list = strayRows.slice(0, mostListed).join(", ") + (strayRows.length > mostListed ? " and more" : "");
    findings.push(`rows at temperatures of their own (rows from 0): ${list}`);
  }
  return `Some densities lack temperatures that others have (${findings.join("; ")})`;
}

function outlierLine({ row, density, temperature, column, deviation, factor }: ColumnsOutlier): string {
  const name = { pressure: "pressure", specificEnergy: "specific energy", specificEntropy: "specific entropy" }[column];
  const percent = `${Number((100 * Math.abs(deviation)).toPrecision(2))} % too ${deviation > 0 ? "high" : "low"}`;
  const times = Number(factor.toPrecision(2));
  return `  row ${row}, ${at([density, temperature])}: ${name} ${percent}, ${times} times what is usual there.`;
}

function residualLine(map: ResidualMap, outliers: number): string {
  const { resolution } = map;
  const exception = outliers > 0 ? ", but for the entries that stand out below" : "";
  return (
    `  ${map.relation}: ${spread(map)}. With coarser derivatives it changes by ${short(resolution.percentile99)} ` +
    `for 99 %, ${short(resolution.median)} for half: ${causes[causeOf(map)]}${exception}.`
  );
}

const range = (axis: Float64Array, unit: string): string =>
  `${Number(axis[0]!.toPrecision(4))} to ${Number(axis.at(-1)!.toPrecision(4))} ${unit}`;
const countOf = ({ density }: Places, noun: string): string =>
  `${density.length} ${noun}${density.length === 1 ? "" : "s"}`;
const first = ({ density, temperature }: Places): string => at([density[0]!, temperature[0]!]);
