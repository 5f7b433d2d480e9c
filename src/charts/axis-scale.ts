/**
 * The scale of one axis and its ticks: logarithmic where values are positive and span more than a decade, linear
 * otherwise; values of both signs that span decades get a symmetric logarithmic scale, sign ln(1 + |x|/c) (Webber 2013,
 * Meas. Sci. Technol. 24, 027001), which is linear near zero.
 */
import { scaleLinear, scaleLog, scaleSymlog } from "d3-scale";
import { linearTickTexts, powerOfTen } from "./labels.js";

/** One tick: where, and what it says; the text is empty for a tick without label. */
interface Tick {
  readonly position: number;
  readonly text: string;
}

/** A scale from values to pixels. */
export interface AxisScale {
  readonly kind: "logarithmic" | "linear" | "symmetric";
  /** Position of a value in pixels; the value must be drawable. */
  readonly place: (value: number) => number;
  /** False for values that the scale cannot show. */
  readonly shows: (value: number) => boolean;
  readonly ticks: readonly Tick[];
}

/** Most decades of an axis: below, a quantity that fades exponentially (positrons) would take all the room. */
const mostDecades = 50;

/** True for values that a chart can show: 0, and sizes from 1e-300 to 1e300, beyond which arithmetic breaks down. */
export function isDrawable(value: number): boolean {
  const size = Math.abs(value);
  return value === 0 || (size >= 1e-300 && size <= 1e300);
}

/** Pixels between two labels that still do not touch. */
const leastPitch = 15;

/** Pixels that an axis covers, from its low to its high end. */
export type PixelRange = readonly [low: number, high: number];

/**
 * The scale that suits values (at least one), all of them drawable.
 *
 * @param margin - empty share of the axis beyond the values at each end
 * @param pitch - pixels from label to label, at least
 * @param forced - the kind of scale where the caller knows better; logarithmic needs a positive value
 */
export function axisScale(
  values: readonly number[],
  range: PixelRange,
  margin: number,
  pitch: { readonly logarithmic: number; readonly linear: number },
  forced?: "logarithmic" | "linear",
): AxisScale {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  let smallest = Number.POSITIVE_INFINITY; // positive
  for (const value of values) {
    if (value < low) low = value;
    if (value > high) high = value;
    if (value > 0 && value < smallest) smallest = value;
  }
  const room = Math.abs(range[1] - range[0]);
  const most = Math.max(2, Math.floor(room / pitch.logarithmic));
  const isLogarithmic = forced === undefined ? low >= 0 && high >= 9.999 * smallest : forced === "logarithmic";
  if (isLogarithmic) return logarithmic(smallest, high, range, margin, most);
  if (forced === undefined && low < 0 && spansDecades(values)) return symmetric(low, high, values, range, margin, most);
  return linear(low, high, range, margin, Math.max(2, Math.floor(room / pitch.linear)));
}

function logarithmic(low: number, high: number, range: PixelRange, margin: number, most: number): AxisScale {
  const bottom = Math.max(low, high / 10 ** mostDecades);
  const spread = (high / bottom) ** margin;
  const ends = [bottom / spread, high * spread] as const;
  const scale = scaleLog().domain(ends).range(range);
  const place = (value: number): number => scale(value);
  return { kind: "logarithmic", place, shows: (value) => value >= bottom, ticks: logarithmicTicks(ends, place, most) };
}

/** Labels at powers of ten, and at 2 and 5 times them where there are few; ticks without label between. */
function logarithmicTicks(ends: readonly [number, number], place: (value: number) => number, most: number): Tick[] {
  const slack = 1e-9;
  const first = Math.ceil(Math.log10(ends[0]) - slack);
  const last = Math.floor(Math.log10(ends[1]) + slack);
  const stride = Math.max(1, Math.ceil((last - first + 1) / most));
  const few = last - first < 2;
  const ticks: Tick[] = [];
  for (let power = first - 1; power <= last; power++) {
    const decade = Number(`1e${power}`);
    for (const factor of stride > 1 ? [1] : [1, 2, 3, 4, 5, 6, 7, 8, 9]) {
      const value = factor * decade;
      if (value < ends[0] * (1 - slack) || value > ends[1] * (1 + slack)) continue;
      const plain = factor === 1 && power % stride === 0;
      const text = plain ? powerOfTen(power) : few && (factor === 2 || factor === 5) ? between(factor, power) : "";
      ticks.push({ position: place(value), text });
    }
  }
  return ticks;
}

function between(factor: number, power: number): string {
  return power >= 0 && power <= 3 ? String(factor * 10 ** power) : `${factor}\u00d7${powerOfTen(power)}`;
}

function linear(low: number, high: number, range: PixelRange, margin: number, most: number): AxisScale {
  // Values that agree to nine digits are one value: their difference is no more than rounding.
  const size = Math.max(Math.abs(low), Math.abs(high));
  const isFlat = high - low <= 1e-9 * size;
  const extra = isFlat ? 0.1 * size || 1 : margin * (high - low);
  const scale = scaleLinear()
    .domain([low - extra, high + extra])
    .range(range);
  const values = scale.ticks(most);
  const texts = linearTickTexts(values);
  const ticks = values.map((value, i) => ({ position: scale(value), text: texts[i]! }));
  return { kind: "linear", place: (value) => scale(value), shows: () => true, ticks };
}

/** Whether most values would be pressed onto the zero line of a linear axis. */
function spansDecades(values: readonly number[]): boolean {
  const sizes = values.map(Math.abs).sort((a, b) => a - b);
  return sizes.at(-1)! > 20 * sizes[Math.floor(sizes.length / 2)]!;
}

function symmetric(
  low: number,
  high: number,
  values: readonly number[],
  range: PixelRange,
  margin: number,
  most: number,
): AxisScale {
  // The scale bends at the size of the smaller side; with one side only, at the smallest value.
  const smaller = high > 0 ? Math.min(-low, high) : Math.min(...values.filter((value) => value < 0).map(Math.abs));
  const least = Math.max(-low, high) / 10 ** (mostDecades / 2);
  const unit = Number(`1e${Math.floor(Math.log10(Math.max(smaller, least)))}`);
  const scale = scaleSymlog()
    .constant(unit)
    .domain([low, Math.max(high, 0)])
    .range(range);
  const extra = margin * (range[1] - range[0]);
  scale.domain([scale.invert(range[0] - extra), scale.invert(range[1] + extra)]);
  const [bottom, top] = scale.domain() as [number, number];
  const reach = Math.max(top, -bottom);
  const first = Math.round(Math.log10(unit));
  const stride = Math.max(1, Math.ceil((Math.log10(reach) - first + 2) / most));
  const ticks: Tick[] = [{ position: scale(0), text: "0" }];
  for (let power = first; power < 309; power += stride) {
    const value = Number(`1e${power}`);
    if (value > reach) break;
    if (Math.abs(scale(value) - scale(0)) < leastPitch) continue;
    if (value <= top) ticks.push({ position: scale(value), text: powerOfTen(power) });
    if (-value >= bottom) ticks.push({ position: scale(-value), text: `\u2212${powerOfTen(power)}` });
  }
  return { kind: "symmetric", place: (value) => scale(value), shows: () => true, ticks };
}
