/** A comparison as JSON, CSV and maps. */
import { nameOf } from "../charts/labels.js";
import { chartMap } from "../charts/map.js";
import type { MapOptions } from "../charts/map-request.js";
import { FermistateError } from "../errors.js";
import type { QuantityName } from "../thermodynamics/quantities.js";
import type { Comparison, ConsistencyName, QuantityDifference } from "./result.js";
import { comparisonSummary } from "./text.js";
import { sizeWords } from "./words.js";

/**
 * A comparison as JSON text: maps row by row (row = i_temperature * densities + i_density), null where nothing could be
 * compared or measured, and the sentences of the text as `summary`. Differences have all digits, amounts by which relations
 * are missed and their uncertainties three.
 */
export function comparisonJson(found: Comparison): string {
  const { libraryVersion, ...rest } = found;
  const document = { creator: `fermistate ${libraryVersion}`, summary: comparisonSummary(found), ...rest };
  // JSON has no NaN: it writes null, as it does for an infinite difference.
  const plain = (name: string, value: unknown): unknown => {
    if (value instanceof Uint8Array) return Array.from(value);
    if (!(value instanceof Float64Array)) return value;
    const isRough = name === "residual" || name === "error";
    return Array.from(value, (one) => (isRough ? Number(one.toPrecision(3)) : one));
  };
  return `${JSON.stringify(document, plain, 2).replace(/\[[\s\d.,eE+\-nul]*\]/g, (list) => list.replace(/\s+/g, ""))}\n`;
}

/**
 * A comparison as CSV text (RFC 4180): density, temperature, which of the two answers (3 both, 1 the first, 2 the second, 0
 * none), then the relative difference of every quantity; an empty field where nothing could be compared. Where points are nodes of a
 * table, a last column says of which of the two, by the same numbers.
 */
export function comparisonCsv(found: Comparison): string {
  const { quantities, axes, refusals, nodes } = found;
  const head = [
    "density [g/cm^3]",
    "temperature [K]",
    "answers [1]",
    ...quantities.map(({ name }) => `${name} difference [1]`),
    ...(nodes.any === 0 ? [] : ["node of a table [1]"]),
  ];
  const lines = [head.join(",")];
  const densities = axes.density.values;
  for (let row = 0; row < found.rows; row++) {
    const numbers = [
      densities[row % densities.length]!,
      axes.temperature.values[Math.floor(row / densities.length)]!,
      refusals.answers[row]!,
      ...quantities.map(({ difference }) => difference[row]!),
      ...(nodes.any === 0 ? [] : [nodes.points[row]!]),
    ];
    lines.push(numbers.map((one) => (Number.isNaN(one) ? "" : fieldOf(one))).join(","));
  }
  return `${lines.join("\r\n")}\r\n`;
}

function fieldOf(value: number): string {
  return Number.isFinite(value) ? String(value).replace("e", "E") : value > 0 ? "INF" : "-INF";
}

/** Options of {@link comparisonMap}. */
export interface ComparisonMapOptions extends MapOptions {
  /** What is drawn: the difference, or how far the first or the second misses a thermodynamic relation. @defaultValue "difference" */
  readonly show?: "difference" | { readonly of: "first" | "second"; readonly relation: ConsistencyName };
}

/**
 * A map of the size of a difference, its worst places marked, as SVG text; or of the amount by which one of the two misses a
 * thermodynamic relation.
 *
 * @throws FermistateError `unavailable-quantity` for a quantity that was not compared or a relation that was not measured;
 * `invalid-option` as `chartMap`, also where nothing could be compared
 */
export function comparisonMap(found: Comparison, quantity: QuantityName, options: ComparisonMapOptions = {}): string {
  const { show = "difference", ...rest } = options;
  const { density, temperature } = found.axes;
  if (show !== "difference") return relationMap(found, show, rest);
  const one = quantityOf(found, quantity);
  const values = one.difference.map(Math.abs);
  const marks = one.worst
    .filter(({ temperature: t }) => t > 0)
    .map(({ density: rho, temperature: t, difference }) => ({
      density: rho,
      temperature: t,
      text: sizeWords(difference),
    }));
  const words = nameOf(quantity);
  const label = `relative difference of ${words}`;
  const title = `${words.charAt(0).toUpperCase()}${words.slice(1)}: ${found.names[1]} (b) against ${found.names[0]} (a)`;
  const [first, second] = found.compositions;
  const matter = first === second ? first : `${second} against ${first}`;
  const { nodes, refusals } = found;
  const warning =
    nodes.any === 0 ? "" : ` ${nodes.any} of ${refusals.both} points are nodes of a table: no error of it shows there.`;
  const note = `fermistate ${found.libraryVersion}. ${matter}. Size of b - a, divided by ${one.scale}.${warning}`;
  return chartMap(
    { density, temperature, values, label },
    { title, note, marks, missing: "one of the two refuses", ...rest },
  );
}

function relationMap(
  found: Comparison,
  { of, relation }: Exclude<NonNullable<ComparisonMapOptions["show"]>, string>,
  options: MapOptions,
): string {
  const checks = found.consistency[of === "first" ? 0 : 1];
  const check = checks.find(({ name }) => name === relation);
  if (check === undefined) {
    const allowed = `a relation that was measured: ${checks.map(({ name }) => name).join(", ") || "none"}`;
    throw new FermistateError("unavailable-quantity", { argument: "relation", given: relation, allowed });
  }
  const name = found.names[of === "first" ? 0 : 1];
  const { density, temperature } = found.axes;
  const title = `${name}: by how much it misses ${check.relation}`;
  return chartMap(
    { density, temperature, values: check.residual, label: "relative amount" },
    { title, missing: "not measured", ...options },
  );
}

function quantityOf(found: Comparison, quantity: QuantityName): QuantityDifference {
  const one = found.quantities.find(({ name }) => name === quantity);
  if (one !== undefined) return one;
  const allowed = `a quantity that was compared: ${found.quantities.map(({ name }) => name).join(", ")}`;
  throw new FermistateError("unavailable-quantity", { argument: "quantity", given: quantity, allowed });
}
