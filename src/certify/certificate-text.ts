/** A certificate in words, as CSV and as plain columns for a map. */
import { nodeWarning } from "../thermodynamics/interpolation-nodes.js";
import type { Certificate, ErrorSummary, RefusedPoints } from "./certify.js";
import type { StateCertificate } from "./certify-state.js";
import type { CertifiedQuantity } from "./reference-quantities.js";

const meaning =
  "An error is the difference to an independent evaluation of the same formulas: it measures arithmetic, implementation and, " +
  "for a table, interpolation. It says nothing about how true the formulas are. 1.1e-16 and less is the rounding of a " +
  "correct number.";

/** The certificate as text of at most 80 columns. */
export function certificateText(certificate: Omit<Certificate, "columns">): string {
  const { equationOfState, region, asked, compared, quantities } = certificate;
  const where =
    region === undefined
      ? [`${asked} points as given`]
      : [
          `density ${span(region.density)} g/cm^3, temperature ${span(region.temperature)} K`,
          `${asked} points even in the logarithms, seed ${region.seed ?? 1}`,
        ];
  const refused = certificate.refused.map(refusedText);
  const warning = nodeWarning(certificate.nodes, compared) ?? [];
  const rows = quantities.map(({ name, relative: { at, ...one } }) => [
    name,
    ...errorCells(one),
    short(at.density),
    short(at.temperature),
  ]);
  const sums = quantities.flatMap(({ name, scaled }) => (scaled === undefined ? [] : [[name, ...errorCells(scaled)]]));
  const head = ["", "largest", "99 %", "median"];
  return [
    ...wrapped(`Certificate of ${equationOfState}`, ""),
    ...[...aboutText(certificate), ...where, `${compared} of ${asked} points compared`, ...refused]
      .concat(warning)
      .flatMap((one) => wrapped(one)),
    "",
    "Errors over the value, and where the largest is (g/cm^3, K)",
    ...aligned([[...head, "density", "temperature"], ...rows]),
    "",
    ...(sums.length === 0
      ? []
      : ["Errors over the sum of the absolute values of all terms", ...aligned([head, ...sums]), ""]),
    ...limitsText(certificate),
    ...wrapped(meaning, ""),
    "",
  ].join("\n");
}

/** The audit of one state as text of at most 80 columns, with up to 30 digits. */
export function stateCertificateText(certificate: StateCertificate): string {
  const { equationOfState, density, temperature, isNode, values } = certificate;
  const warning = nodeWarning(isNode ? 1 : 0, 1) ?? [];
  const rows = values.flatMap(({ name, unit, value, reference, relative, scaled }) => [
    [name, valueText(value), unit === "1" ? "" : unit, ""],
    ["", reference, error(relative), scaled === undefined ? "-" : error(scaled)],
  ]);
  return [
    ...wrapped(`Audit of ${equationOfState}`, ""),
    ...[...aboutText(certificate), `${short(density)} g/cm^3 and ${short(temperature)} K`]
      .concat(warning)
      .flatMap((one) => wrapped(one)),
    "",
    "Value, below it the reference, the error over the value and over the sum of",
    "the absolute values of all terms",
    ...aligned(rows, "llll"),
    "",
    ...limitsText(certificate),
    ...wrapped(meaning, ""),
    "",
  ].join("\n");
}

/**
 * Errors point by point as CSV: density, temperature, then per quantity the relative and the scaled error. Where points are nodes of a
 * table, a last column has 1 there and 0 elsewhere.
 */
export function certificateCsv({ quantities, columns, nodes }: Certificate): string {
  const { density, temperature, isNode, relative, scaled } = columns;
  const heads = quantities.flatMap(({ name }, k) => [
    `${name} relative error`,
    ...(scaled[k] === null ? [] : [`${name} error of sum of terms`]),
  ]);
  const rows = density.map((rho, i) =>
    [
      rho,
      temperature[i]!,
      ...quantities.flatMap((_, k) => [relative[k]![i]!, ...(scaled[k] == null ? [] : [scaled[k]![i]!])]),
      ...(nodes === 0 ? [] : [isNode[i] ? 1 : 0]),
    ].join(","),
  );
  return `${[["density (g/cm^3)", "temperature (K)", ...heads, ...(nodes === 0 ? [] : ["node of a table"])].join(","), ...rows].join("\n")}\n`;
}

/** Columns of a map of the errors of one quantity. */
export interface ErrorMap {
  /** Name of the quantity. */
  readonly quantity: CertifiedQuantity;
  /** Baryon mass density, g/cm^3. */
  readonly density: readonly number[];
  /** Temperature, K. */
  readonly temperature: readonly number[];
  /** log10 of the relative error; -20 stands for everything below, a value that is exact among them. */
  readonly logError: readonly number[];
}

/** Errors of each quantity as columns to draw. */
export function errorMaps({ quantities, columns }: Certificate): readonly ErrorMap[] {
  const { density, temperature, relative } = columns;
  return quantities.map(({ name }, k) => ({
    quantity: name,
    density,
    temperature,
    logError: relative[k]!.map((one) => Math.max(-20, Math.log10(one))),
  }));
}

type About = Pick<Certificate, "libraryVersion" | "composition" | "digits" | "referenceError">;

function aboutText({ libraryVersion, composition, digits, referenceError }: About): string[] {
  return [
    `fermistate ${libraryVersion}, ${composition.name}`,
    `reference with ${digits} digits, its own error at most ${error(referenceError)} of the sum of absolute terms`,
  ];
}

type Limits = Pick<Certificate, "uncertified" | "unknown"> & {
  readonly quantities?: Certificate["quantities"];
  readonly values?: StateCertificate["values"];
};

/** What is not certified. */
function limitsText({ uncertified, unknown, quantities, values }: Limits): string[] {
  const lines: string[] = [];
  if (uncertified.length > 0) {
    const shares = (quantities ?? values ?? []).flatMap(({ name, uncertifiedShare }) =>
      uncertifiedShare === undefined ? [] : `${name} ${(100 * uncertifiedShare).toPrecision(2)} %`,
    );
    const list = shares.length === 0 ? "not known for these quantities, which are no sums" : shares.join(", ");
    lines.push("Not certified, no independent reference", ...uncertified.flatMap((name) => wrapped(name)));
    lines.push(...wrapped(`Own values stand on both sides; largest share of the sum of absolute terms: ${list}`), "");
  }
  if (unknown.length > 0) lines.push(...wrapped(`Not compared, unknown to one side: ${unknown.join(", ")}`, ""), "");
  return lines;
}

function refusedText({ by, code, count, first }: RefusedPoints): string {
  const points = count === 1 ? "1 point" : `${count} points`;
  const place = `${short(first.density)} g/cm^3 and ${short(first.temperature)} K`;
  return `${points} refused by the ${by} (${code}), the first at ${place}: ${first.message}`;
}

const error = (value: number): string => (value === 0 ? "0" : value.toExponential(1));
const errorCells = ({ largest, percentile99, median }: Omit<ErrorSummary, "at">): string[] =>
  [largest, percentile99, median].map(error);
const span = ([low, high]: readonly [number, number]): string => `${short(low)} to ${short(high)}`;
const short = (value: number): string => valueText(Number(value.toPrecision(4)));

/** As short as it can be: "2e6", "12.5". */
function valueText(value: number): string {
  const size = Math.abs(value);
  const isPlain = value === 0 || !Number.isFinite(value) || (size < 1e5 && size >= 1e-3);
  return isPlain ? String(value) : value.toExponential().replace("+", "");
}

/** Columns two blanks apart; a letter each, "l" to the left and "r" to the right, the first to the left by default. */
function aligned(rows: readonly (readonly string[])[], sides = "lrrrrr"): string[] {
  const widths = rows[0]!.map((_, k) => Math.max(...rows.map((row) => row[k]!.length)));
  return rows.map((row) => {
    const cells = row.map((cell, k) => (sides[k] === "l" ? cell.padEnd(widths[k]!) : cell.padStart(widths[k]!)));
    return `  ${cells.join("  ")}`.trimEnd();
  });
}

/** Words in lines of at most 78 characters. */
function wrapped(words: string, indent = "  "): string[] {
  const lines: string[] = [];
  let line = indent;
  for (const word of words.split(/\s+/)) {
    if (line.trim() !== "" && line.length + 1 + word.length > 78) {
      lines.push(line);
      line = `${indent}  ${word}`;
    } else line = line.trim() === "" ? `${indent}${word}` : `${line} ${word}`;
  }
  return [...lines, line];
}
