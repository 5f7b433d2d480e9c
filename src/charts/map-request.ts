/** What may be asked of a map, and its checks. */
import { FermistateError, requireFinite } from "../errors.js";
import { type Axis, axisOf } from "../grids/axes.js";
import type { Cells } from "./map-cells.js";

/** What a map shows: values over density and temperature. */
export interface MapData {
  /** Baryon mass densities, g/cm^3, increasing, at least two. */
  readonly density: Axis | ArrayLike<number>;
  /** Temperatures, K, increasing, at least two above 0; a row of T = 0 has no place on the map and is left out. */
  readonly temperature: Axis | ArrayLike<number>;
  /** Row by row as in a grid: values[i_temperature * densities + i_density]; NaN and infinities are missing. */
  readonly values: ArrayLike<number>;
  /** What the values are, such as "relative difference of pressure". */
  readonly label: string;
  /** Unit in cgs, "1" for a pure number. @defaultValue "1" */
  readonly unit?: string;
}

/** A place on a map with a word beside it. */
export interface MapMark {
  /** Baryon mass density, g/cm^3, within the axis. */
  readonly density: number;
  /** Temperature, K, within the axis. */
  readonly temperature: number;
  /** What stands beside the circle. */
  readonly text: string;
}

/** Options of {@link chartMap}. */
export interface MapOptions {
  /** Title. @defaultValue the label of the values */
  readonly title?: string;
  /** A remark below the map. */
  readonly note?: string;
  /** Scale of the colours. @defaultValue logarithmic where values are not negative and span more than a decade */
  readonly scale?: "logarithmic" | "linear";
  /** Values at the ends of the colours; values beyond take the colour of the end. @defaultValue those of the data, at most 16 decades */
  readonly range?: readonly [low: number, high: number];
  /** What a missing value means, for the legend. @defaultValue "no value" */
  readonly missing?: string;
  /** Places to point out. */
  readonly marks?: readonly MapMark[];
  /** Width in pixels, 480 to 4000. @defaultValue 904 */
  readonly width?: number;
  /** Height in pixels, 320 to 4000. @defaultValue 584 */
  readonly height?: number;
}

/** The options, defaults filled in. */
export type Asked = Omit<Required<MapOptions>, "title" | "note" | "scale" | "range"> &
  Pick<MapOptions, "title" | "note" | "scale" | "range">;

/** Values of an axis that can be drawn. */
export function readAxis(argument: string, given: MapData["density"]): readonly number[] {
  const { values } = axisOf(argument, given);
  const positive = values.filter((value) => value > 0);
  if (positive.length < 2) throw invalid(argument, given, "at least two values above 0");
  if (argument === "density" && values[0] === 0) throw invalid(argument, 0, "values above 0");
  return values;
}

/** Checks the texts of the data. */
export function readLabels(data: MapData): MapData {
  if (typeof data !== "object" || data === null) throw invalid("data", data, "density, temperature, values and label");
  for (const [argument, value] of Object.entries({ label: data.label, unit: data.unit ?? "1" })) {
    if (typeof value !== "string" || value === "") throw invalid(argument, value, "a text");
  }
  return data;
}

/** Refuses marks outside the map. */
export function checkMarks(marks: readonly MapMark[], { densityEdges, temperatureEdges }: Cells): void {
  for (const [index, mark] of marks.entries()) {
    const inside = (edges: readonly number[], value: unknown): boolean =>
      typeof value === "number" && value >= edges[0]! && value <= edges.at(-1)!;
    const good = inside(densityEdges, mark?.density) && inside(temperatureEdges, mark?.temperature);
    if (!good || typeof mark.text !== "string") {
      throw new FermistateError("invalid-option", {
        argument: "marks",
        given: mark,
        allowed: "{ density, temperature, text } inside the map",
        index,
      });
    }
  }
}

/** Reads the options. */
export function readOptions(options: MapOptions): Asked {
  if (typeof options !== "object" || options === null) throw invalid("options", options, "an object of options");
  const { title, note, scale, range, missing = "no value", marks = [], width = 904, height = 584, ...others } = options;
  const [stranger] = Object.keys(others);
  if (stranger !== undefined) {
    throw invalid("options", stranger, "title, note, scale, range, missing, marks, width, height");
  }
  for (const [argument, value] of Object.entries({ title, note, missing })) {
    if (value !== undefined && typeof value !== "string") throw invalid(argument, value, "a text");
  }
  if (scale !== undefined && scale !== "logarithmic" && scale !== "linear") {
    throw invalid("scale", scale, '"logarithmic" or "linear"');
  }
  if (!Array.isArray(marks)) throw invalid("marks", marks, "a list of { density, temperature, text }");
  if (range !== undefined) {
    const allowed = "[low, high], finite, low < high";
    if (!Array.isArray(range) || range.length !== 2) throw invalid("range", range, allowed);
    for (const end of range as readonly unknown[]) requireFinite("range", end, allowed);
    if (!(range[0] < range[1])) throw invalid("range", range, allowed);
  }
  requirePixels("width", width, 480);
  requirePixels("height", height, 320);
  return {
    missing,
    marks,
    width,
    height,
    ...(title === undefined ? {} : { title }),
    ...(note === undefined ? {} : { note }),
    ...(scale === undefined ? {} : { scale }),
    ...(range === undefined ? {} : { range }),
  };
}

function requirePixels(argument: string, value: unknown, least: number): void {
  const allowed = `a number of pixels from ${least} to 4000`;
  const pixels = requireFinite(argument, value, allowed);
  if (pixels >= least && pixels <= 4000) return;
  throw new FermistateError("out-of-range", { argument, given: pixels, allowed });
}

/** An `invalid-option`. */
export function invalid(argument: string, given: unknown, allowed: string): FermistateError {
  return new FermistateError("invalid-option", { argument, given, allowed });
}
