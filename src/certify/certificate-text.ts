/** A certificate in words, as CSV and as plain columns for a map. */
import type { Certificate, ErrorSummary, RefusedPoints } from "./certify.js";
import type { StateCertificate } from "./certify-state.js";
import type { CertifiedQuantity } from "./reference-quantities.js";

const meaning = [
  "An error is the difference to an independent evaluation of the same formulas: it measures arithmetic, implementation",
  "and, for a table, interpolation. It says nothing about the error of the formulas themselves. Errors of 1.1e-16 and less",
  "are the rounding of a correct number.",
];

/** The certificate as text for a terminal, at most some 120 characters wide. */
export function certificateText(certificate: Certificate): string {
  const { equationOfState, region, asked, compared, quantities } = certificate;
  const where =
    region === undefined
      ? [`${asked} points as given`]
      : [
          `density ${span(region.density)} g/cm^3, temperature ${span(region.temperature)} K`,
          `${asked} points even in the logarithms, seed ${region.seed ?? 1}`,
        ];
  const head = ["", "of the value", "", "", "", "", "of the sum of absolute terms", "", ""];
  const names = ["", "largest", "99 %", "median", "g/cm^3", "K", "largest", "99 %", "median"];
  const rows = quantities.map(({ name, relative, scaled }) => [
    name,
    ...errorCells(relative),
    short(relative.at.density),
    short(relative.at.temperature),
    ...(scaled === undefined ? ["-", "-", "-"] : errorCells(scaled)),
  ]);
  return [
    `Certificate of ${equationOfState}`,
    ...[...aboutText(certificate), ...where, `${compared} of ${asked} points compared`].map(indented),
    ...certificate.refused.map((one) => indented(refusedText(one))),
    "",
    "Errors",
    ...aligned([head, names, ...rows]),
    "",
    ...limitsText(certificate),
    ...meaning,
    "",
  ].join("\n");
}

/** The audit of one state as text. */
export function stateCertificateText(certificate: StateCertificate): string {
  const { equationOfState, density, temperature, values } = certificate;
  const rows = values.map(({ name, unit, value, reference, relative, scaled }) => [
    name,
    String(value),
    reference,
    unit === "1" ? "" : unit,
    error(relative),
    scaled === undefined ? "-" : error(scaled),
  ]);
  return [
    `Audit of ${equationOfState}`,
    ...[...aboutText(certificate), `${short(density)} g/cm^3 and ${short(temperature)} K`].map(indented),
    "",
    ...aligned([
      ["", "value", "reference", "", "error of", "of the sum of"],
      ["", "", "", "", "the value", "terms"],
      ...rows,
    ]),
    "",
    ...limitsText(certificate),
    ...meaning,
    "",
  ].join("\n");
}

/** Errors point by point as CSV: density, temperature, then per quantity the relative and the scaled error. */
export function certificateCsv({ quantities, columns }: Certificate): string {
  const { density, temperature, relative, scaled } = columns;
  const heads = quantities.flatMap(({ name }, k) => [
    `${name} relative error`,
    ...(scaled[k] === null ? [] : [`${name} error of sum of terms`]),
  ]);
  const rows = density.map((rho, i) =>
    [
      rho,
      temperature[i]!,
      ...quantities.flatMap((_, k) => [relative[k]![i]!, ...(scaled[k] == null ? [] : [scaled[k]![i]!])]),
    ].join(","),
  );
  return `${[["density (g/cm^3)", "temperature (K)", ...heads].join(","), ...rows].join("\n")}\n`;
}

/** Columns of a map of the errors of one quantity. */
export interface ErrorMap {
  readonly quantity: CertifiedQuantity;
  /** g/cm^3 */
  readonly density: readonly number[];
  /** K */
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
    lines.push("Not certified, no independent reference");
    for (const name of uncertified) lines.push(indented(name));
    lines.push(indented("own values stand on both sides; largest share of the sum of absolute terms:"));
    lines.push(indented(shares.join(", ")), "");
  }
  if (unknown.length > 0) lines.push(`Not compared, unknown to one side: ${unknown.join(", ")}`, "");
  return lines;
}

function refusedText({ by, code, count, first }: RefusedPoints): string {
  const points = count === 1 ? "1 point" : `${count} points`;
  return (
    `${points} refused by the ${by} (${code}), the first at ${short(first.density)} g/cm^3 and ` +
    `${short(first.temperature)} K: ${first.message}`
  );
}

const indented = (line: string): string => `  ${line}`;
const error = (value: number): string => (value === 0 ? "0" : value.toExponential(1));
const errorCells = ({ largest, percentile99, median }: ErrorSummary): string[] =>
  [largest, percentile99, median].map(error);
const span = ([low, high]: readonly [number, number]): string => `${short(low)} to ${short(high)}`;

function short(value: number): string {
  const size = Math.abs(value);
  const digits = Number(value.toPrecision(4));
  return value !== 0 && (size >= 1e5 || size < 1e-3) ? digits.toExponential().replace("+", "") : String(digits);
}

/** Columns two blanks apart, the first to the left, the others to the right where they are numbers. */
function aligned(rows: readonly (readonly string[])[]): string[] {
  const widths = rows[0]!.map((_, k) => Math.max(...rows.slice(1).map((row) => row[k]!.length)));
  return rows.map((row) =>
    indented(
      row.map((cell, k) => (k === 0 ? cell.padEnd(widths[k]!) : cell.padStart(widths[k]!))).join("  "),
    ).trimEnd(),
  );
}
