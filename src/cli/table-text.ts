/** What a table is and how wrong, as printed. */
import { type FreeEnergyTable, tableBytes } from "../tables/table.js";
import { bytesText, shortText, table, wrapped } from "./print.js";

/** A table in words and numbers. */
export function tableText(given: FreeEnergyTable): string {
  const { density, temperature, composition, holdsFor, sheets, freezing, source, certificate } = given;
  const cells = sheets.map(({ phase, densityLevels, temperatureLevels }) => {
    const count = densityLevels.reduce((sum, m, i) => (m < 0 ? sum : sum + 2 ** (m + temperatureLevels[i]!)), 0);
    return phase === "single" ? `${count} cells` : `${count} cells of ${phase}`;
  });
  const facts = [
    ["holds for", holdsFor === "electron density" ? "any composition" : composition.name],
    ["density", `${shortText(density.lowest)} to ${shortText(density.highest)} g/cm^3`],
    ["temperature", `${shortText(temperature.lowest)} to ${shortText(temperature.highest)} K`],
    ["tabulated", source.tabulated.join(", ")],
    ["beside it", source.beside.join(", ") || "nothing"],
    ["mesh", `${cells.join(", ")}, ${bytesText(tableBytes(given))}`],
    ...(freezing === undefined
      ? []
      : [["freezes at", `${freezing.factor.toPrecision(6)} K x (density/(g/cm^3))^(1/3)`]]),
    ["made by", `fermistate ${source.version}`],
  ];
  if (holdsFor === "electron density") facts[1]![1] += ` at ${composition.name}, by its electrons`;
  const errors = Object.entries(certificate.errors).map(([name, { largest, percentile99, median, bound, worst }]) => [
    name,
    ...[largest, percentile99, median, bound].map((error) => error.toExponential(1)),
    `${worst[0].toPrecision(3)} g/cm^3, ${worst[1].toPrecision(3)} K`,
  ]);
  const short =
    certificate.blocksAboveTarget === 0
      ? ""
      : `${certificate.blocksAboveTarget} blocks are above it: their finest mesh does not suffice.`;
  return [
    table(facts, "ll"),
    "",
    `Error of interpolation, measured at ${certificate.places} places; ${certificate.target} was asked for. ${short}`.trim(),
    table([["", "largest", "99 %", "median", "bound", "largest at"], ...errors], "lrrrrl"),
    "",
    wrapped(
      "Relative: of pressure and pressureByDensity to the larger of P/rho and dP/drho, of energy to |e| + P/rho, of " +
        "pressureByTemperature to itself plus rho c_v. What the physics is worth: fermistate regime.",
    ),
    "",
  ].join("\n");
}
