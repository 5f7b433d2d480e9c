/** The lines of a chart: one per temperature over density, or one over temperature where there is one density. */
import type { ColumnName, Grid } from "../grids/grid.js";
import { unitText, valueText } from "./labels.js";

/** One line. */
interface Series {
  /** What the legend says. */
  readonly text: string;
  readonly x: readonly number[];
  readonly y: readonly number[];
}

/** All lines, and what was left out. */
export interface Lines {
  /** What the horizontal axis shows. */
  readonly abscissa: ColumnName;
  /** What differs from line to line. */
  readonly parameter: ColumnName;
  readonly series: readonly Series[];
  /** "8 of 200 temperatures shown"; empty where all are. */
  readonly omission: string;
}

/** Most lines that can be told apart. */
const mostLines = 8;
/** Most points of a line: more would fall on the same pixels. */
const mostPoints = 1200;

/** The lines of a quantity. */
export function linesOf(grid: Grid, quantity: ColumnName): Lines {
  const [temperatures, densities] = grid.shape;
  const column = grid.columns[quantity]!;
  if (densities === 1) {
    const x = grid.axes.temperature.values;
    const picked = spread(x.length, Math.min(x.length, mostPoints));
    const series = [
      {
        text: `${valueText(grid.axes.density.values[0]!)} ${unitText("g/cm^3")}`,
        x: picked.map((i) => x[i]!),
        y: picked.map((i) => column[i]!),
      },
    ];
    return { abscissa: "temperature", parameter: "density", series, omission: "" };
  }
  const lines = evenInLogarithm(grid.axes.temperature.values, mostLines);
  const points = spread(densities, Math.min(densities, mostPoints));
  const series = lines.map((line) => ({
    text: `${valueText(grid.axes.temperature.values[line]!)} K`,
    x: points.map((i) => grid.axes.density.values[i]!),
    y: points.map((i) => column[line * densities + i]!),
  }));
  const omission = lines.length < temperatures ? `${lines.length} of ${temperatures} temperatures shown` : "";
  return { abscissa: "density", parameter: "temperature", series, omission };
}

/** `count` indices below `length`, evenly spread, both ends among them. */
function spread(length: number, count: number): number[] {
  return Array.from({ length: count }, (_, i) => (count === 1 ? 0 : Math.round((i * (length - 1)) / (count - 1))));
}

/** Indices of at most `most` values, both ends and those nearest to even steps in the logarithm. */
function evenInLogarithm(values: readonly number[], most: number): number[] {
  if (values.length <= most) return values.map((_, i) => i);
  const logs = values.map((value) => Math.log(value));
  const start = values[0] === 0 ? 1 : 0; // T = 0 is kept, and is no place to step from
  const steps = most - start - 1;
  const picked = new Set(start === 1 ? [0] : []);
  for (let i = 0; i <= steps; i++) {
    const wanted = logs[start]! + ((logs.at(-1)! - logs[start]!) * i) / steps;
    let best = start;
    for (let j = start; j < logs.length; j++) {
      if (Math.abs(logs[j]! - wanted) < Math.abs(logs[best]! - wanted)) best = j;
    }
    picked.add(best);
  }
  return [...picked].sort((a, b) => a - b);
}
