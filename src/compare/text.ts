/** A comparison in plain sentences. */

import { nodeWarning } from "../thermodynamics/interpolation-nodes.js";
import { regionWords } from "./regions.js";
import type { Comparison, ConsistencyCheck, Jump, Place, QuantityDifference, SignCount } from "./result.js";
import { findingWords, numberWords, sizeWords } from "./words.js";

/** Below, two numbers agree to rounding. */
const roundingSize = 1e-13;

/**
 * A comparison as text of at most 80 columns (but for long names): what agrees and how well, where it does not, refusals, other zeros of energy,
 * inconsistent derivatives, wrong signs and jumps.
 */
export function comparisonText(found: Comparison): string {
  const { names, equationsOfState, compositions, axes, shape, refusals } = found;
  const ends = (values: readonly number[], unit: string): string =>
    values.length === 1
      ? `${numberWords(values[0]!)} ${unit}`
      : `${numberWords(values[0]!)} to ${numberWords(values.at(-1)!)} ${unit}`;
  const width = Math.max(names[0].length, names[1].length);
  return [
    `Comparison of ${names[0]} (a) and ${names[1]} (b)`,
    ...[0, 1].map((k) => `  ${names[k]!.padEnd(width)}  ${equationsOfState[k]}; ${compositions[k]}`),
    ...wrapped(
      `density ${ends(axes.density.values, "g/cm^3")}, temperature ${ends(axes.temperature.values, "K")}: ` +
        `${shape[1]} x ${shape[0]} points, ${refusals.both} of them answered by both`,
      "  ",
    ),
    ...nodeSentences(found).flatMap((one) => wrapped(one, "  ")),
    "",
    "Differences, relative",
    ...table(found),
    "",
    "In words",
    ...findingSentences(found).flatMap((one) => wrapped(one, "  ")),
    "",
    ...found.quantities.flatMap((one) => worstLines(one)),
    ...consistencyLines(found),
  ].join("\n");
}

/** What matters, one sentence each: the text of {@link comparisonText} without its tables. */
export function comparisonSummary(found: Comparison): string[] {
  return [...nodeSentences(found), ...findingSentences(found)];
}

/** How many of the points are nodes of a table: before anything that is said of them. */
export function nodeSentences({ names, nodes, refusals }: Comparison): string[] {
  return [nodes.first, nodes.second].flatMap((count, k) => nodeWarning(count, refusals.both, names[k]!) ?? []);
}

function findingSentences(found: Comparison): string[] {
  return [
    ...refusalSentences(found),
    ...(found.refusals.both === 0 ? [] : found.quantities.map((one) => verdict(found, one))),
    ...found.quantities.flatMap(({ name, points }) => {
      const without = found.refusals.both - points;
      return without === 0
        ? []
        : [`${name} is no number, or not known to one of the two, at ${without} points that both answer.`];
    }),
    ...offsetSentences(found),
    ...consistencySentences(found),
    ...found.signs.map((one) => signSentence(found, one)),
    ...jumpSentences(found),
  ];
}

/** The sentence of a quantity, unless all of its points are nodes of a table: these allow no verdict. */
function verdict({ nodes }: Comparison, one: QuantityDifference): string {
  const isBetween = one.difference.some((value, row) => !Number.isNaN(value) && nodes.points[row] === 0);
  if (isBetween || one.points === 0) return quantitySentence(one);
  return `${one.name}: no verdict, since only nodes of a table were compared (largest difference there ${sizeWords(one.largest)}).`;
}

/** "pressure differs by less than 1e-4, except at the onset of pairs (up to 0.03)". */
function quantitySentence({ name, largest, median, regions, worst }: QuantityDifference): string {
  if (largest === 0) return `${name} is identical at every point.`;
  if (largest < roundingSize) return `${name} agrees to rounding (${sizeWords(largest)}).`;
  const [top] = worst;
  const at = top === undefined ? "" : ` (worst ${placeWords(top)})`;
  // Leave out one or two regions if that makes the rest at least ten times as good.
  for (const count of [1, 2]) {
    const rest = regions[count];
    if (rest === undefined || !(rest.largest <= 0.1 * largest)) continue;
    const outside = rest.largest === 0 ? "is identical" : `differs by at most ${sizeWords(rest.largest)}`;
    const exceptions = regions
      .slice(0, count)
      .map((one) => `${regionWords[one.region]} (up to ${sizeWords(one.largest)})`);
    return `${name} ${outside}, except ${exceptions.join(" and ")}${at}.`;
  }
  const where = top === undefined ? "" : `, most ${regionWords[top.region]} (${placeWords(top)})`;
  return `${name} differs by up to ${sizeWords(largest)}${where}; by ${sizeWords(median)} at half of the points.`;
}

function refusalSentences({ names, refusals, rows }: Comparison): string[] {
  const { both, onlyFirst, onlySecond, none, codes } = refusals;
  const words = (k: 0 | 1): string =>
    codes[k].map(({ code, points, example }) => `${code} ${points}, such as ${placeWords(example)}`).join("; ");
  const found: string[] = [];
  if (both === rows) return found;
  if (both === 0) found.push("There is no point where both answer: nothing can be compared.");
  if (onlyFirst > 0)
    found.push(`${onlyFirst} of ${rows} points: ${names[0]} answers, ${names[1]} refuses (${words(1)}).`);
  if (onlySecond > 0)
    found.push(`${onlySecond} of ${rows} points: ${names[1]} answers, ${names[0]} refuses (${words(0)}).`);
  if (none > 0) found.push(`${none} of ${rows} points: both refuse.`);
  return found;
}

function offsetSentences({ names, offsets }: Comparison): string[] {
  return offsets.map(({ name, value, unit, before, after }) => {
    return (
      `${name} of ${names[1]} has another zero: ${numberWords(value)} ${unit} above that of ${names[0]}. This constant is taken ` +
      `out of all differences here; with it the mean difference would be ${sizeWords(before)}, without ${sizeWords(after)}.`
    );
  });
}

function consistencySentences({ names, consistency }: Comparison): string[] {
  return consistency.flatMap((checks, k) => {
    if (checks.length === 0) return [];
    const bad = checks.filter(({ missed }) => missed > 0);
    const measured = Math.max(...checks.map((one) => one.measured));
    if (measured === 0) return [`${names[k]}: thermodynamic consistency could not be measured at any point.`];
    if (bad.length === 0) {
      const limit = Math.max(...checks.map(({ resolution }) => resolution));
      return [
        `${names[k]} is thermodynamically consistent as far as values show (to ${sizeWords(limit)} at a typical point).`,
      ];
    }
    return bad.map(
      ({ relation, missed, largest, worst }) =>
        `${names[k]} misses ${relation} at ${missed} of ${measured} points, by up to ${sizeWords(largest)}` +
        `${worst === undefined ? "" : ` (${placeWords(worst)})`}.`,
    );
  });
}

const signWords: Readonly<Record<SignCount["quantity"], string>> = {
  pressure: "pressure that is not positive",
  heatCapacityV: "a negative heat capacity at constant volume",
  pressureByDensity: "dP/drho below 0 at constant temperature",
  gamma1: "an adiabatic exponent that is not positive",
  measuredHeatCapacity: "energy that falls with temperature, whatever c_v it claims",
  measuredPressureByDensity: "pressure that falls with density, whatever derivative it claims",
};

function signSentence({ names }: Comparison, { of, quantity, points, worst }: SignCount): string {
  const many = points === 1 ? "1 point" : `${points} points`;
  return `${names[of]} has ${signWords[quantity]} at ${many} (worst ${placeWords(worst)}).`;
}

/** One sentence for each way of jumping: the quantities jump together, where the phase does. */
function jumpSentences({ names, jumps }: Comparison): string[] {
  return (["first", "second", "both"] as const).flatMap((of) => {
    const some = jumps.filter((one) => one.of === of);
    if (some.length === 0) return [];
    const other = of === "both" ? "" : ` where ${names[of === "first" ? 1 : 0]} is smooth`;
    const who =
      of === "both" ? `${names[0]} and ${names[1]} both jump, differently` : `${names[of === "first" ? 0 : 1]} jumps`;
    const list = some.map(({ quantity, size, density, temperature, steps }: Jump) => {
      const times = steps === 1 ? "" : `, the largest of ${steps} found`;
      return `${quantity} by ${sizeWords(size)} (${placeWords({ density, temperature })}${times})`;
    });
    return [`${who}${other}: ${list.join(", ")}.`];
  });
}

/** "1.2e6 g/cm^3, 3e9 K". */
function placeWords({ density, temperature }: Pick<Place, "density" | "temperature">): string {
  return `${numberWords(density)} g/cm^3, ${numberWords(temperature)} K`;
}

function table({ quantities }: Comparison): string[] {
  const rows = [
    ["", "largest", "99 % within", "median", "divided by"],
    ...quantities.map(({ name, largest, percentile99, median, scale }) => [
      name,
      sizeWords(largest),
      sizeWords(percentile99),
      sizeWords(median),
      scale,
    ]),
  ];
  const widths = rows[0]!.map((_, i) => Math.max(...rows.map((row) => row[i]!.length)));
  return rows.map((row) => `  ${row.map((cell, i) => cell.padEnd(widths[i]!)).join("  ")}`.trimEnd());
}

/** The worst places of a quantity. */
function worstLines({ name, unit, worst, largest }: QuantityDifference): string[] {
  if (worst.length === 0 || largest < roundingSize) return [];
  const of = unit === "1" ? "" : ` ${unit}`;
  const lines = worst.flatMap((one) => {
    const kind = one.kind.length === 0 ? "" : `: ${one.kind.join(", ")}`;
    const findings = one.findings.length === 0 ? "" : `; ${findingWords(one.findings)}`;
    const values = `${numberWords(one.values[0], 6)} and ${numberWords(one.values[1], 6)}${of}`;
    const sign = one.difference < 0 ? "-" : "+";
    return wrapped(
      `${sign}${sizeWords(one.difference)} at ${placeWords(one)}${kind}${findings}; ${values}`,
      "  ",
      "      ",
    );
  });
  return [`Worst places of ${name}`, ...lines, ""];
}

/** The measured relations, one table for each. */
function consistencyLines({ names, consistency }: Comparison): string[] {
  return consistency.flatMap((checks, k) => {
    if (checks.length === 0) return [];
    const cells = (one: ConsistencyCheck): string[] => [
      one.relation,
      one.missed === 0 ? "holds" : sizeWords(one.largest),
      sizeWords(one.resolution),
      String(one.missed),
      String(one.measured),
    ];
    const rows = [["", "missed by", "seen to", "missed", "measured"], ...checks.map(cells)];
    const widths = rows[0]!.map((_, i) => Math.max(...rows.map((row) => row[i]!.length)));
    return [
      `Thermodynamics of ${names[k]}, measured from its values`,
      ...rows.map((row) => `  ${row.map((cell, i) => cell.padEnd(widths[i]!)).join("  ")}`.trimEnd()),
      "",
    ];
  });
}

/** Words in lines of at most 78 characters. */
function wrapped(words: string, indent: string, hang = `${indent}  `): string[] {
  const lines: string[] = [];
  let line = indent;
  for (const word of words.split(" ")) {
    if (line.trim() !== "" && line.length + 1 + word.length > 78) {
      lines.push(line);
      line = hang + word;
    } else line = line.trim() === "" ? line + word : `${line} ${word}`;
  }
  return [...lines, line];
}
