/**
 * A chart of one quantity of a grid as SVG text: one line per temperature over density.
 *
 * Charts show shapes and regimes; a pixel is some 0.3 % of a decade, so read numbers from the grid.
 */
import { line } from "d3-shape";
import { FermistateError, requireFinite } from "../errors.js";
import type { FindingsColumn } from "../grids/findings.js";
import type { Grid } from "../grids/grid.js";
import { nearestWord } from "../grids/nearest.js";
import type { QuantityName } from "../thermodynamics/quantities.js";
import { type AxisScale, axisScale, isDrawable } from "./axis-scale.js";
import { axisLabel, nameOf } from "./labels.js";
import { colours, ink } from "./palette.js";
import { type Lines, linesOf } from "./series.js";
import { element, escaped, fontStack, text, widthOf, wrapped } from "./svg.js";

/** Options of {@link chartGrid}. */
export interface ChartOptions {
  /** Quantity on the vertical axis: a column of the grid. @defaultValue "pressure" */
  readonly quantity?: QuantityName | FindingsColumn;
  /** Title. @defaultValue the quantity and the composition */
  readonly title?: string;
  /** A remark below the chart, such as where the composition comes from. */
  readonly note?: string;
  /** Width in pixels, 320 to 4000. @defaultValue 760 */
  readonly width?: number;
  /** Height in pixels, 240 to 4000. @defaultValue 520 */
  readonly height?: number;
}

/** Font sizes in pixels. */
const size = { title: 16, label: 12.5, tick: 12, note: 10.5 } as const;
const noteLeading = 15;
const edge = 22;

/**
 * Draws a quantity of a grid.
 *
 * Axes are logarithmic where values are positive and span more than a decade. Of more than eight temperatures, eight
 * evenly spread in the logarithm are drawn, and the chart says so; points that the scale cannot show (infinite ones, zeros
 * on a logarithmic axis, rows that are refused) are left out, and the chart says so. The same grid and options give the same text.
 *
 * @returns a stand-alone SVG document without scripts, fonts or links
 * @throws FermistateError `unavailable-quantity` for no column of the grid; `invalid-option`, `not-a-number`,
 * `out-of-range` for other options, and where the quantity has no finite value to draw
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { chartGrid } from "fermistate/charts";
 * import { grid, logarithmicAxis } from "fermistate/grids";
 * const density = logarithmicAxis({ from: 1e4, to: 1e9, pointsPerDecade: 8 });
 * const made = grid(whiteDwarfMatter(), composition({ He4: 1 }), { density, temperature: [1e7, 1e8] });
 * chartGrid(made, { quantity: "gamma1" }).startsWith("<svg"); // => true
 * ```
 */
export function chartGrid(grid: Grid, options: ChartOptions = {}): string {
  const { quantity, width, height, title, note } = readOptions(grid, options);
  const lines = linesOf(grid, quantity);
  const finite = lines.series.flatMap(({ y }) => y.filter(isDrawable));
  if (finite.length === 0) {
    const allowed = "a quantity with finite values in this grid";
    throw new FermistateError("invalid-option", { argument: "quantity", given: quantity, allowed });
  }

  const notes = [...(note === undefined ? [] : [note]), ...remarks(grid)];
  const noteLines = notes.flatMap((one) => wrapped(one, size.note, width - 2 * edge));
  const legendWidth = Math.max(...[lines.parameter, ...lines.series.map((one) => `${one.text}    `)].map(labelWidth));
  const heading = wrapped(title, size.title * 1.1, width - 2 * edge); // bold is wider
  const top = 56 + 22 * heading.length;
  const bottom = height - 72 - noteLeading * noteLines.length;
  if (bottom - top < 40) {
    const allowed = `at least ${Math.ceil(height + 40 - (bottom - top))} pixels with this title and note`;
    throw new FermistateError("out-of-range", { argument: "height", given: height, allowed });
  }
  const right = width - edge - 24 - legendWidth;
  const y = axisScale(finite, [bottom, top], 0.04, { logarithmic: 30, linear: 45 });
  const left = edge + 14 + Math.max(...y.ticks.map((tick) => widthOf(tick.text, size.tick)));
  const abscissae = lines.series.flatMap((one) => one.x);
  const x = axisScale(abscissae, [left, right], 0, { logarithmic: 52, linear: 100 });
  const frame = { left, right, top, bottom };

  const hidden = lines.series.reduce((sum, one) => sum + one.x.filter((_, i) => !drawable(x, y, one, i)).length, 0);
  const reason = (grid.refusedRows ?? []).length > 0 ? "refused or beyond the scale" : "beyond the scale";
  const asides = [lines.omission, hidden === 0 ? "" : `${hidden} points ${reason}`].filter((one) => one !== "");
  const parts = [
    element("title", {}, escaped(title)),
    element("desc", {}, escaped(describe(grid, quantity, lines, asides, notes))),
    element("rect", { width, height, fill: "#ffffff" }),
    ...heading.map((one, i) => text(edge, 32 + 22 * i, size.title, ink.title, one, { "font-weight": 600 })),
    text(edge, top - 18, size.label, ink.label, `${axisLabel(quantity)}${kindNote(y)}`),
    horizontalLines(y, frame),
    verticalTicks(x, frame),
    text((left + right) / 2, bottom + 42, size.label, ink.label, axisLabel(lines.abscissa), {
      "text-anchor": "middle",
    }),
    drawnLines(x, y, lines),
    legend(lines, right + 24, top, asides, legendWidth),
    ...noteLines.map((one, i) => {
      return text(edge, height - 14 - noteLeading * (noteLines.length - 1 - i), size.note, ink.tick, one);
    }),
  ];
  const attributes = {
    xmlns: "http://www.w3.org/2000/svg",
    width,
    height,
    viewBox: `0 0 ${width} ${height}`,
    role: "img",
    "font-family": fontStack,
  };
  return `${element("svg", attributes, `\n${parts.filter((part) => part !== "").join("\n")}\n`)}\n`;
}

/** The rectangle of the data. */
interface Frame {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
}

/** Rules and labels of the vertical axis. */
function horizontalLines(y: AxisScale, { left, right, bottom }: Frame): string {
  const labelled = y.ticks.filter((tick) => tick.text !== "");
  const rules = labelled
    .map(({ position }) => `M${left.toFixed(2)},${position.toFixed(2)}H${right.toFixed(2)}`)
    .join("");
  const labels = labelled.map(({ position, text: words }) => {
    return text(left - 9, position + 4, size.tick, ink.tick, words, { "text-anchor": "end" });
  });
  return [
    element("path", { d: rules, stroke: ink.grid, fill: "none" }),
    element("path", {
      d: `M${left.toFixed(2)},${bottom.toFixed(2)}H${right.toFixed(2)}`,
      stroke: ink.axis,
      fill: "none",
    }),
    ...labels,
  ].join("\n");
}

/** Ticks and labels of the horizontal axis. */
function verticalTicks(x: AxisScale, { bottom }: Frame): string {
  const marks = x.ticks.map(({ position, text: words }) => {
    return `M${position.toFixed(2)},${bottom.toFixed(2)}v${words === "" ? 3 : 6}`;
  });
  const labels = x.ticks
    .filter((tick) => tick.text !== "")
    .map(({ position, text: words }) => {
      return text(position, bottom + 21, size.tick, ink.tick, words, { "text-anchor": "middle" });
    });
  return [element("path", { d: marks.join(""), stroke: ink.axis, fill: "none" }), ...labels].join("\n");
}

function drawable(x: AxisScale, y: AxisScale, one: Lines["series"][number], i: number): boolean {
  return isDrawable(one.y[i]!) && y.shows(one.y[i]!) && x.shows(one.x[i]!);
}

/** The data; the first line last, so that where lines run together the coldest, their common limit, is seen. */
function drawnLines(x: AxisScale, y: AxisScale, lines: Lines): string {
  const strokes = colours(lines.series.length);
  const drawn = lines.series.map((one, k) => {
    const indices = one.x.map((_, i) => i);
    const shown = indices.filter((i) => drawable(x, y, one, i));
    const [only] = shown;
    if (only !== undefined && shown.length === 1) {
      return element("circle", { cx: x.place(one.x[only]!), cy: y.place(one.y[only]!), r: 3.5, fill: strokes[k]! });
    }
    const path = line<number>()
      .defined((i) => drawable(x, y, one, i))
      .x((i) => x.place(one.x[i]!))
      .y((i) => y.place(one.y[i]!))
      .digits(2);
    return element("path", { d: path(indices) ?? "", stroke: strokes[k]!, ...dashes(lines, k) });
  });
  const group = { fill: "none", "stroke-width": 1.9, "stroke-linejoin": "round", "stroke-linecap": "round" };
  return element("g", group, `\n${drawn.reverse().join("\n")}\n`);
}

/** Every other line of many is dashed: there neighbours must differ by more than colour. */
function dashes(lines: Lines, k: number): Record<string, string> {
  return lines.series.length > 5 && k % 2 === 1 ? { "stroke-dasharray": "7 4.5" } : {};
}

/** The legend, hottest on top as lines usually lie, with what was left out below. */
function legend(lines: Lines, left: number, top: number, asides: readonly string[], width: number): string {
  const strokes = colours(lines.series.length);
  const pitch = 21;
  const rows = lines.series.map((one, k) => {
    const middle = top + 24 + pitch * (lines.series.length - 1 - k);
    const sample = {
      d: `M${left.toFixed(2)},${middle.toFixed(2)}h24`,
      stroke: strokes[k]!,
      "stroke-width": 2.2,
      fill: "none",
    };
    return [
      element("path", { ...sample, ...dashes(lines, k) }),
      text(left + 32, middle + 4, size.tick, ink.label, one.text),
    ].join("\n");
  });
  const below = top + 24 + pitch * lines.series.length + 6;
  const small = asides.flatMap((one) => wrapped(one, size.note, width));
  return [
    text(left, top + 4, size.label, ink.label, lines.parameter),
    ...rows.reverse(),
    ...small.map((words, i) => text(left, below + 14 * i, size.note, ink.tick, words)),
  ].join("\n");
}

const labelWidth = (words: string): number => Math.max(96, widthOf(words, size.label));

function kindNote(scale: AxisScale): string {
  return scale.kind === "symmetric" ? ", logarithmic in both directions, linear near 0" : "";
}

/** What stands below every chart. */
function remarks(grid: Grid): string[] {
  const interactions = grid.ideal
    ? ["Ideal plasma, no Coulomb interactions: the pressure is 1 to 30\u00a0% too high where white dwarfs live."]
    : [];
  const matter = `Nucleon fractions ${grid.composition.name}. Contributions: ${grid.contributions.join(", ")}.`;
  return [`fermistate ${grid.libraryVersion}. ${matter}`, ...interactions];
}

/** The chart in words. */
function describe(
  grid: Grid,
  quantity: QuantityName | FindingsColumn,
  lines: Lines,
  asides: readonly string[],
  notes: readonly string[],
): string {
  const { abscissa, parameter, series } = lines;
  const labels = series.map((one) => one.text).join(", ");
  const range = `${Math.min(...series[0]!.x)} to ${Math.max(...series[0]!.x)}`;
  const drawn = `${axisLabel(quantity)} over ${axisLabel(abscissa)} from ${range}, one line per ${parameter}: ${labels}.`;
  return [drawn, ...asides.map((one) => `${one}.`), `${grid.rows} points.`, ...notes].join(" ");
}

function readOptions(grid: Grid, options: ChartOptions): Required<Omit<ChartOptions, "note">> & { note?: string } {
  const fail = (code: "invalid-option" | "unavailable-quantity", argument: string, given: unknown, allowed: string) => {
    throw new FermistateError(code, { argument, given, allowed });
  };
  if (typeof options !== "object" || options === null)
    fail("invalid-option", "options", options, "an object of options");
  const { quantity = "pressure", width = 760, height = 520, title, note, ...others } = options;
  const [stranger] = Object.keys(others);
  const allowed = "quantity, title, note, width, height";
  if (stranger !== undefined) fail("invalid-option", "options", stranger, allowed);
  const drawableNames = grid.columnNames.slice(2) as string[];
  if (!drawableNames.includes(quantity)) {
    const near = nearestWord(String(quantity), drawableNames);
    const names = `a column of this grid: ${drawableNames.join(", ")}`;
    fail("unavailable-quantity", "quantity", quantity, near === undefined ? names : `perhaps ${near}; ${names}`);
  }
  requirePixels("width", width, 320);
  requirePixels("height", height, 240);
  for (const [argument, value] of Object.entries({ title, note })) {
    if (value !== undefined && typeof value !== "string") fail("invalid-option", argument, value, "a text");
  }
  const words = nameOf(quantity);
  const standard = `${words.charAt(0).toUpperCase()}${words.slice(1)} of ${grid.composition.name}`;
  const known = { quantity, width, height, title: title ?? standard };
  return note === undefined ? known : { ...known, note };
}

function requirePixels(argument: string, value: unknown, least: number): void {
  const allowed = `a number of pixels from ${least} to 4000`;
  const pixels = requireFinite(argument, value, allowed);
  if (pixels >= least && pixels <= 4000) return;
  throw new FermistateError("out-of-range", { argument, given: pixels, allowed });
}
