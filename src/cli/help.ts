/** What `fermistate help` says: the program, its commands, and the topics behind them. */
import { conventions } from "../grids/description.js";
import { validityOf } from "../grids/validity.js";
import { quantities, quantityNames } from "../thermodynamics/quantities.js";
import { libraryVersion } from "../version.js";
import { whiteDwarfMatter } from "../white-dwarf-matter.js";
import type { Command } from "./command.js";
import { table, wrapped, wrappedCommand } from "./print.js";

const axisText = [
  "How to write an axis",
  table(
    [
      ["2e6", "one value"],
      ["1e5,1e6,3e7", "these values, increasing"],
      ["1e2..1e10,10-per-decade", "equal ratios, ten steps per factor of ten"],
      ["1e2..1e10,81-points", "equal ratios, 81 values"],
      ["0..1e9,5-linear-points", "equal distances, 5 values"],
    ],
    "ll",
  ),
  "Both ends are included and exact.",
].join("\n");

const exitCodes = [
  "Exit codes",
  table(
    [
      ["0", "done"],
      ["1", "refused or failed: outside the domain, unstable, too large, not written"],
      ["2", "the request itself is wrong: an option, a number, a nuclide, a composition"],
    ],
    "ll",
  ),
].join("\n");

const unstable =
  "Cold thin matter is not ionised, and cold dense hydrogen and helium are quantum liquids beyond the fits: where the sum " +
  "of all terms is no stable matter the point is refused (unstable). Near there, and wherever another assumption is " +
  "strained, fermistate regime says which and by how much.";

/** The help of the program. */
export function programHelp(commands: readonly Command[]): string {
  const topics = [
    ["help COMMAND", "options and examples of a command"],
    ["help quantities", "every quantity, its unit and meaning"],
    ["help conventions", "units, density, zero of energy, where the numbers hold"],
    ["help axes", "how to write the densities and temperatures of a grid"],
  ];
  return [
    `fermistate ${libraryVersion}: the equation of state of dense, degenerate stellar matter.`,
    "",
    wrapped(
      "Pressure, energy, entropy and all their derivatives at a density, a temperature and a composition, from one " +
        "Helmholtz free energy: electrons and positrons at any degeneracy, ions as a Coulomb liquid or crystal, radiation.",
    ),
    "",
    "Commands",
    table([...commands.map(({ name, summary }) => [name, summary]), ...topics], "ll"),
    "",
    "Try",
    "  fermistate demo",
    ...commands.slice(0, 2).map(({ examples }) => wrappedCommand(`fermistate ${examples[0]![0]}`, "  ")),
    "",
    wrapped(
      "Units are cgs. density is baryon mass density. Energies leave out the rest mass of ions and net electrons. " +
        "More, and where the numbers hold: fermistate help conventions.",
    ),
    "",
    exitCodes,
    "",
  ].join("\n");
}

/** The help of one command. */
export function commandHelp(command: Command): string {
  const options = Object.entries(command.options).map(([name, { value, help }]) => {
    const head = `  --${name}${value === undefined ? "" : ` ${value}`}`;
    return `${head}\n${wrapped(help, 78, "      ")}`;
  });
  const takesAxes = Object.values(command.options).some(({ value }) => value === "AXIS");
  return [
    `fermistate ${command.name}: ${command.summary}`,
    "",
    wrapped(`fermistate ${command.usage}`, 78, "  ", "    "),
    "",
    "Options",
    ...options,
    "  --help",
    "      this text",
    "",
    ...(takesAxes ? [axisText, ""] : []),
    "Examples",
    ...command.examples.map(([line, meaning]) => `  ${meaning}:\n${wrappedCommand(`fermistate ${line}`, "    ")}`),
    "",
    wrapped(command.remarks),
    "",
  ].join("\n");
}

/** Topics beside the commands, by name. */
export const topics: Readonly<Record<string, () => string>> = {
  quantities: () => {
    const rows = quantityNames.map((name) => [name, quantities[name].unit, quantities[name].description]);
    return `Quantities: name, unit (1 for a pure number), meaning\n\n${table(rows, "lll")}\n`;
  },
  conventions: () => {
    const limits = validityOf(whiteDwarfMatter());
    const ideal = validityOf(whiteDwarfMatter({ coulomb: false })).filter((one) => !limits.includes(one));
    const list = (lines: readonly string[]): string => lines.map((one) => wrapped(one, 78, "  ")).join("\n\n");
    return [
      `Conventions\n\n${list(conventions)}`,
      `Where the numbers hold\n\n${list([...limits, unstable])}`,
      `Where they hold with --without coulomb\n\n${list(ideal)}\n`,
    ].join("\n\n");
  },
  axes: () => `${axisText}\n`,
};
