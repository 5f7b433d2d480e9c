/**
 * A map: one quantity over density and temperature, by colour, as SVG text.
 *
 * A map shows where something is large or missing; read numbers from what it was made of. Colours are banded, so that
 * equal cells become one outline and a band can be told from its neighbour in the colour bar.
 */
import { FermistateError } from "../errors.js";
import type { FindingsColumn } from "../grids/findings.js";
import { columnOf, type Grid } from "../grids/grid.js";
import type { QuantityName } from "../thermodynamics/quantities.js";
import { type AxisScale, axisScale, isDrawable } from "./axis-scale.js";
import { colourAt } from "./colour-scale.js";
import { axisLabel, nameOf, unitText, valueText } from "./labels.js";
import { type Cells, cellsOf, MISSING } from "./map-cells.js";
import {
  type Asked,
  checkMarks,
  invalid,
  type MapData,
  type MapMark,
  type MapOptions,
  readAxis,
  readLabels,
  readOptions,
} from "./map-request.js";
import { ink } from "./palette.js";
import { outlines } from "./regions.js";
import { element, escaped, fontStack, text, widthOf, wrapped } from "./svg.js";

const size = { title: 16, label: 12.5, tick: 12, note: 10.5 } as const;
const edge = 22;
const noteLeading = 15;
/** Width of the column of the colour bar. */
const keyWidth = 190;
/** Bands of colour: more could not be told apart, and would only make the file larger. */
const mostBands = 48;
/** Decades that a scale covers where the caller names no range: those of double precision. */
const mostDecades = 16;

/**
 * Draws a map.
 *
 * Each cell reaches half way to its neighbours. Of more than 360 values along an axis, neighbours share a cell, which shows
 * the largest of them, and the map says so. Missing values are hatched. The same data and options give the same text.
 *
 * @returns a stand-alone SVG document without scripts, fonts or links
 * @throws FermistateError `invalid-option`, `not-a-number`, `out-of-range`, `length-mismatch`; `invalid-option` where there is
 * no value to draw or a logarithmic scale is asked for negative values
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { chartMap, mapOfGrid } from "fermistate/charts";
 * import { grid } from "fermistate/grids";
 * const axes = { density: [1e4, 1e5, 1e6], temperature: [1e7, 1e8, 1e9] };
 * const made = grid(whiteDwarfMatter(), composition({ He4: 1 }), axes);
 * chartMap(mapOfGrid(made, "gamma1"), { title: "Adiabatic exponent of helium" }).startsWith("<svg"); // => true
 * ```
 */
export function chartMap(data: MapData, options: MapOptions = {}): string {
  const asked = readOptions(options);
  const { width, height } = asked;
  const { label, unit = "1" } = readLabels(data);
  const cells = cellsOf(readAxis("density", data.density), readAxis("temperature", data.temperature), data.values);
  const title = asked.title ?? sentence(label);
  const heading = wrapped(title, size.title * 1.1, width - 2 * edge);
  const notes = asked.note === undefined ? [] : wrapped(asked.note, size.note, width - 2 * edge);
  const frame = {
    left: 84,
    right: width - edge - keyWidth,
    top: 52 + 22 * heading.length,
    bottom: height - 72 - noteLeading * notes.length,
  };
  if (frame.bottom - frame.top < 120) {
    const allowed = `at least ${Math.ceil(height + 120 - (frame.bottom - frame.top))} pixels with this title and note`;
    throw new FermistateError("out-of-range", { argument: "height", given: height, allowed });
  }
  const pitch = { logarithmic: 40, linear: 90 };
  const ends = (edges: readonly number[]): readonly number[] => [edges[0]!, edges.at(-1)!];
  const x = axisScale(ends(cells.densityEdges), [frame.left, frame.right], 0, pitch);
  const y = axisScale(ends(cells.temperatureEdges), [frame.bottom, frame.top], 0, pitch);
  checkMarks(asked.marks, cells);

  const bar = barOf(cells, asked, frame.top + 34, frame.bottom - 90);
  const classes = Int16Array.from(cells.values, bar.bandOf);
  const parts = [
    element("title", {}, escaped(title)),
    element("desc", {}, escaped(describe(cells, label, unit, bar, asked))),
    element("defs", {}, hatch),
    element("rect", { width, height, fill: "#ffffff" }),
    ...heading.map((one, i) => text(edge, 32 + 22 * i, size.title, ink.title, one, { "font-weight": 600 })),
    text(edge, frame.top - 14, size.label, ink.label, axisLabel("temperature")),
    coloured(classes, cells, x, y, bar.bands),
    axes(x, y, frame),
    ...asked.marks.map((mark) => drawnMark(mark, x, y, frame.right)),
    text((frame.left + frame.right) / 2, frame.bottom + 42, size.label, ink.label, axisLabel("density"), {
      "text-anchor": "middle",
    }),
    key(bar, cells, asked, unit === "1" ? label : `${label} [${unitText(unit)}]`, frame),
    ...notes.map((one, i) => {
      return text(edge, height - 14 - noteLeading * (notes.length - 1 - i), size.note, ink.tick, one);
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

/**
 * A column of a grid as the data of a map.
 *
 * @throws FermistateError `unavailable-quantity` for no column of the grid
 */
export function mapOfGrid(grid: Grid, quantity: QuantityName | FindingsColumn): MapData {
  const values = grid.columns[quantity];
  if (values === undefined) {
    const allowed = `a column of this grid: ${grid.columnNames.slice(2).join(", ")}`;
    throw new FermistateError("unavailable-quantity", { argument: "quantity", given: quantity, allowed });
  }
  const { density, temperature } = grid.axes;
  return { density, temperature, values, label: nameOf(quantity), unit: columnOf(quantity).unit };
}

/** The rectangle of the data. */
interface Frame {
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly bottom: number;
}

/** The colour bar: its scale in pixels, and which band a value is in. */
interface Bar {
  readonly scale: AxisScale;
  readonly range: readonly [low: number, high: number];
  readonly bands: number;
  readonly bandOf: (value: number) => number;
  readonly top: number;
  readonly bottom: number;
  readonly below: number;
  readonly above: number;
}

function barOf({ values }: Cells, { scale, range }: Asked, top: number, bottom: number): Bar {
  const shown = [...values].filter(isShown);
  if (shown.length === 0) throw invalid("values", "none that is finite", "at least one finite value");
  let least = Number.POSITIVE_INFINITY;
  let most = Number.NEGATIVE_INFINITY;
  let positive = Number.POSITIVE_INFINITY;
  for (const value of shown) {
    least = Math.min(least, value);
    most = Math.max(most, value);
    if (value > 0) positive = Math.min(positive, value);
  }
  if (scale === "logarithmic" && (least < 0 || most === 0) && range === undefined) {
    throw invalid("scale", scale, '"linear": there are values below 0, or none above');
  }
  const isLogarithmic = scale === undefined ? least >= 0 && most >= 10 * positive : scale === "logarithmic";
  if (isLogarithmic && range !== undefined && range[0] <= 0) throw invalid("range", range, "both ends > 0");
  const automatic = isLogarithmic ? ([Math.max(positive, most / 10 ** mostDecades), most] as const) : [least, most];
  const [low, high] = (range ?? (automatic[0] === automatic[1] ? widened(automatic[0]!) : automatic)) as [
    number,
    number,
  ];
  const kind = isLogarithmic ? "logarithmic" : "linear";
  const bars = axisScale([low, high], [bottom, top], 0, { logarithmic: 26, linear: 30 }, kind);
  const bandOf = (value: number): number => {
    if (!isShown(value)) return MISSING;
    if (value <= low) return 0;
    if (value >= high) return mostBands - 1;
    const share = (bars.place(value) - bottom) / (top - bottom);
    return Math.min(Math.max(Math.floor(share * mostBands), 0), mostBands - 1);
  };
  const count = (test: (value: number) => boolean): number => shown.filter(test).length;
  return {
    scale: bars,
    range: [low, high],
    bands: mostBands,
    bandOf,
    top,
    bottom,
    below: count((value) => value < low),
    above: count((value) => value > high),
  };
}

/** A scale around the only value. */
function widened(value: number): [number, number] {
  return value === 0 ? [0, 1] : [Math.min(0.9 * value, 1.1 * value), Math.max(0.9 * value, 1.1 * value)];
}

const isShown = (value: number): boolean => Number.isFinite(value) && isDrawable(value);

/** Cells of each band as one path; missing ones hatched. */
function coloured(classes: Int16Array, cells: Cells, x: AxisScale, y: AxisScale, bands: number): string {
  const xs = cells.densityEdges.map(x.place);
  const ys = cells.temperatureEdges.map(y.place);
  const columns = cells.densityEdges.length - 1;
  const present = [...new Set(classes)].sort((a, b) => a - b);
  const paths = present.map((band) => {
    const fill = band === MISSING ? "url(#fermistate-missing)" : colourAt(band / (bands - 1));
    return element("path", { d: outlines(classes, band, columns, xs, ys), fill });
  });
  return element("g", { "shape-rendering": "crispEdges" }, `\n${paths.join("\n")}\n`);
}

/** White with grey strokes: no colour of the scale. */
const hatch: string = element(
  "pattern",
  { id: "fermistate-missing", width: 6, height: 6, patternUnits: "userSpaceOnUse" },
  element("rect", { width: 6, height: 6, fill: "#ffffff" }) +
    element("path", { d: "M-1,7L7,-1M-1,1L1,-1M5,7L7,5", stroke: "#8c8c8c", "stroke-width": 1.1 }),
);

function axes(x: AxisScale, y: AxisScale, { left, right, top, bottom }: Frame): string {
  const marks = [
    ...x.ticks.map(({ position, text: words }) => `M${position.toFixed(2)},${bottom}v${words === "" ? 3 : 6}`),
    ...y.ticks.map(({ position, text: words }) => `M${left},${position.toFixed(2)}h${words === "" ? -3 : -6}`),
  ];
  const labels = [
    ...labelled(x).map(({ position, text: words }) => {
      return text(position, bottom + 21, size.tick, ink.tick, words, { "text-anchor": "middle" });
    }),
    ...labelled(y).map(({ position, text: words }) => {
      return text(left - 10, position + 4, size.tick, ink.tick, words, { "text-anchor": "end" });
    }),
  ];
  const box = { x: left, y: top, width: right - left, height: bottom - top, fill: "none", stroke: ink.axis };
  return [element("rect", box), element("path", { d: marks.join(""), stroke: ink.axis, fill: "none" }), ...labels].join(
    "\n",
  );
}

const labelled = (scale: AxisScale): AxisScale["ticks"] => scale.ticks.filter((tick) => tick.text !== "");

/** A circle and its word; the white halo keeps both legible on any colour. */
function drawnMark({ density, temperature, text: words }: MapMark, x: AxisScale, y: AxisScale, right: number): string {
  const [cx, cy] = [x.place(density), y.place(temperature)];
  const isLeft = cx + 12 + widthOf(words, size.tick) > right - 4;
  const halo = { stroke: "#ffffff", "stroke-width": 3, "stroke-linejoin": "round", "paint-order": "stroke" };
  return [
    element("circle", { cx, cy, r: 5, fill: "none", stroke: "#ffffff", "stroke-width": 4 }),
    element("circle", { cx, cy, r: 5, fill: "none", stroke: ink.title, "stroke-width": 1.6 }),
    text(isLeft ? cx - 10 : cx + 10, cy + 4, size.tick, ink.title, words, {
      "text-anchor": isLeft ? "end" : "start",
      ...halo,
    }),
  ].join("\n");
}

/** The colour bar with its label, and what else the reader must know. */
function key(bar: Bar, cells: Cells, asked: Asked, label: string, frame: Frame): string {
  const left = frame.right + 26;
  const barWidth = 20;
  const heading = wrapped(label, size.label, keyWidth - 26).slice(0, 2);
  const height = (bar.bottom - bar.top) / bar.bands;
  const bands = Array.from({ length: bar.bands }, (_, i) => {
    const y = (bar.bottom - (i + 1) * height).toFixed(2);
    return element("rect", {
      x: left,
      y,
      width: barWidth,
      height: height.toFixed(2),
      fill: colourAt(i / (bar.bands - 1)),
    });
  });
  const ticks = labelled(bar.scale).map(({ position, text: words }) => {
    const mark = element("path", { d: `M${left + barWidth},${position.toFixed(2)}h5`, stroke: ink.axis });
    return `${mark}${text(left + barWidth + 10, position + 4, size.tick, ink.tick, words)}`;
  });
  const remarks = remarksOf(bar, cells).flatMap((one) => wrapped(one, size.note, keyWidth - 26));
  let at = bar.bottom + 22;
  const legend: string[] = [];
  if (cells.missing > 0) {
    const box = {
      x: left,
      y: at - 10,
      width: barWidth,
      height: 13,
      fill: "url(#fermistate-missing)",
      stroke: ink.axis,
    };
    legend.push(element("rect", box), text(left + barWidth + 10, at, size.note, ink.label, asked.missing));
    at += 18;
  }
  return [
    ...heading.map((one, i) => text(left, frame.top + 4 + 15 * i, size.label, ink.label, one)),
    element("g", { "shape-rendering": "crispEdges" }, bands.join("")),
    element("rect", {
      x: left,
      y: bar.top,
      width: barWidth,
      height: bar.bottom - bar.top,
      fill: "none",
      stroke: ink.axis,
    }),
    ...ticks,
    ...legend,
    ...remarks.map((one, i) => text(left, at + 14 * i, size.note, ink.tick, one)),
  ].join("\n");
}

function remarksOf({ below, above, range }: Bar, { pooled, zeroRow }: Cells): string[] {
  return [
    ...(below > 0 ? [`darkest: ${valueText(range[0])} or less`] : []),
    ...(above > 0 ? [`lightest: ${valueText(range[1])} or more`] : []),
    ...(pooled ? ["of cells too small to see, the largest value"] : []),
    ...(zeroRow ? ["T = 0 is not shown"] : []),
  ];
}

/** The map in words. */
function describe(cells: Cells, label: string, unit: string, bar: Bar, asked: Asked): string {
  const ends = (edges: readonly number[]): string => `${valueText(edges[0]!)} to ${valueText(edges.at(-1)!)}`;
  const of = unit === "1" ? label : `${label} [${unitText(unit)}]`;
  return [
    `${sentence(of)} by colour, from ${valueText(bar.range[0])} (dark) to ${valueText(bar.range[1])} (light), ` +
      `${bar.scale.kind}, over density ${ends(cells.densityEdges)} g/cm\u00b3 and temperature ` +
      `${ends(cells.temperatureEdges)} K.`,
    ...(cells.missing > 0 ? [`Hatched: ${asked.missing} (${cells.missing} cells).`] : []),
    ...asked.marks.map(({ density, temperature, text: words }) => {
      return `${words}: ${valueText(density)} g/cm\u00b3, ${valueText(temperature)} K.`;
    }),
    ...remarksOf(bar, cells).map((one) => `${sentence(one)}.`),
    ...(asked.note === undefined ? [] : [asked.note]),
  ].join(" ");
}

const sentence = (words: string): string => `${words.charAt(0).toUpperCase()}${words.slice(1)}`;
