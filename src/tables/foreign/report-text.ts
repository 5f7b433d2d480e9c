/** The report on columns in words. */
import type { ColumnsReport, ErrorSpread, Places, ResidualMap } from "./report.js";

const short = (value: number): string => value.toExponential(1).replace("e+", "e");
const at = ([density, temperature]: readonly [number, number]): string =>
  `${Number(density.toPrecision(4))} g/cm^3, ${Number(temperature.toPrecision(4))} K`;
const spread = ({ max, percentile99, median, worst }: ErrorSpread): string =>
  `${short(max)} at most (${at(worst)}), ${short(percentile99)} for 99 %, ${short(median)} for half`;

/** A report in plain language, one finding a line. */
export function columnsReportText(report: ColumnsReport): string {
  const { residuals, stability, deviations, unstable, densities, temperatures } = report;
  const lines = [
    `${report.rows} rows, ${report.arrangement}: ${densities.length} densities from ${range(densities, "g/cm^3")}, ` +
      `${temperatures.length} temperatures from ${range(temperatures, "K")}.`,
  ];
  if (report.duplicates > 0) lines.push(`${report.duplicates} rows said what another row says and were dropped.`);
  if (report.arrangement !== "rectangular") {
    lines.push(
      "Each density has temperatures of its own: they were resampled along ln T to common ones, between the highest " +
        `of the lowest and the lowest of the highest; ${report.rowsOutside} rows lie outside.`,
    );
  }
  if (report.entropy !== "given") {
    lines.push("Entropy was not given: it follows from energy and pressure, and its zero is a choice.");
  }
  lines.push("How far the columns agree with each other, relative to the largest term of each relation:");
  for (const map of [residuals.maxwell, residuals.energy, residuals.heat]) {
    if (map !== undefined) lines.push(residualLine(map));
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
      ? "It is stable at all nodes and in the middle of all cells and their sides."
      : `It is not stable, and refuses to answer, at ${countOf(unstable, "place")}; first ${first(unstable)}.`,
  );
  return lines.join("\n");
}

function residualLine(map: ResidualMap): string {
  const { resolution } = map;
  const verdict =
    map.median > 3 * resolution.median
      ? "more than the distance of the nodes explains: the columns, or their digits, disagree"
      : "no more than the distance of the nodes explains";
  return (
    `  ${map.relation}: ${spread(map)}. With coarser derivatives it changes by ${short(resolution.percentile99)} ` +
    `for 99 %, ${short(resolution.median)} for half: ${verdict}.`
  );
}

const range = (axis: Float64Array, unit: string): string =>
  `${Number(axis[0]!.toPrecision(4))} to ${Number(axis.at(-1)!.toPrecision(4))} ${unit}`;
const countOf = ({ density }: Places, noun: string): string =>
  `${density.length} ${noun}${density.length === 1 ? "" : "s"}`;
const first = ({ density, temperature }: Places): string => at([density[0]!, temperature[0]!]);
