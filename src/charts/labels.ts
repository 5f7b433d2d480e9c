/** Names, units and numbers as a chart prints them: words, and real superscripts. */
import { type ColumnName, columnOf } from "../grids/grid.js";

/** Names where the words of the column's name do not do, and the trade's symbols. */
const names: { readonly [Name in ColumnName]?: readonly [name: string, symbol?: string] } = {
  density: ["baryon mass density", "\u03c1"],
  temperature: ["temperature", "T"],
  pressure: ["pressure", "P"],
  specificEnergy: ["specific energy", "e"],
  specificEntropy: ["specific entropy", "s"],
  heatCapacityV: ["heat capacity at constant volume", "c\u1d65"],
  heatCapacityP: ["heat capacity at constant pressure", "c\u209a"],
  densityExponent: ["density exponent of pressure", "(\u2202 ln P/\u2202 ln \u03c1) at constant T"],
  temperatureExponent: ["temperature exponent of pressure", "(\u2202 ln P/\u2202 ln T) at constant \u03c1"],
  gamma1: ["adiabatic exponent \u0393\u2081"],
  gamma2: ["adiabatic exponent \u0393\u2082"],
  gamma3: ["adiabatic exponent \u0393\u2083"],
  adiabaticGradient: ["adiabatic gradient", "(\u2202 ln T/\u2202 ln P) at constant s"],
  pressureByDensity: ["pressure by density", "\u2202P/\u2202\u03c1 at constant T"],
  pressureByTemperature: ["pressure by temperature", "\u2202P/\u2202T at constant \u03c1"],
  energyByDensity: ["energy by density", "\u2202e/\u2202\u03c1 at constant T"],
  energyByTemperature: ["energy by temperature", "\u2202e/\u2202T at constant \u03c1"],
  entropyByDensity: ["entropy by density", "\u2202s/\u2202\u03c1 at constant T"],
  entropyByTemperature: ["entropy by temperature", "\u2202s/\u2202T at constant \u03c1"],
  electronDegeneracy: ["electron degeneracy", "(\u03bc \u2212 m\u2091c\u00b2)/kT"],
};

/** "specific energy"; of other columns the words of the name. */
export function nameOf(column: ColumnName): string {
  return names[column]?.[0] ?? column.replace(/([A-Z]|\d+)/g, " $1").toLowerCase();
}

/** "pressure P [dyn/cm2]" with a real superscript; a pure number has no unit. */
export function axisLabel(column: ColumnName): string {
  const { unit } = columnOf(column);
  const symbol = names[column]?.[1];
  const label = symbol === undefined ? nameOf(column) : `${nameOf(column)} ${symbol}`;
  return unit === "1" ? label : `${label} [${unitText(unit)}]`;
}

/** "dyn/cm^2" with a real superscript. */
export function unitText(unit: string): string {
  return unit.replace(/\^(-?\d+)/g, (_, power: string) => superscript(power));
}

/** A power of ten: 10 with a real superscript, plain from 1 to 1000. */
export function powerOfTen(exponent: number): string {
  return exponent >= 0 && exponent <= 3 ? String(10 ** exponent) : `10${superscript(String(exponent))}`;
}

/** A value to three digits: "25", "1.5 x 10^7" with real signs; a plain power of ten without factor. */
export function valueText(value: number): string {
  if (value === 0) return "0";
  if (Math.abs(value) >= 1e-3 && Math.abs(value) < 1e4) return minus(String(Number(value.toPrecision(3))));
  const [factor = "", exponent = ""] = value.toExponential(2).split("e");
  const short = Number(factor);
  const power = powerOfTen(Number(exponent));
  if (short === 1) return power;
  return short === -1 ? `\u2212${power}` : `${minus(String(short))}\u00d7${power}`;
}

/** Texts of linear ticks, all with the digits that their distance needs. */
export function linearTickTexts(ticks: readonly number[]): string[] {
  const largest = Math.max(...ticks.map(Math.abs));
  const step = ticks.length > 1 ? Math.abs(ticks[1]! - ticks[0]!) : largest;
  if (largest === 0) return ticks.map(() => "0");
  const order = Math.floor(Math.log10(largest) + 1e-9);
  const stepOrder = Math.floor(Math.log10(step) + 1e-9);
  if (order < 5 && order > -4) return ticks.map((tick) => minus(tick.toFixed(Math.max(0, -stepOrder))));
  return ticks.map((tick) => {
    const factor = (tick / 10 ** order).toFixed(Math.max(0, order - stepOrder));
    return tick === 0 ? "0" : `${minus(factor)}\u00d7${powerOfTen(order)}`;
  });
}

const minus = (text: string): string => text.replace("-", "\u2212");

function superscript(digits: string): string {
  return [...digits]
    .map((one) =>
      one === "-" ? "\u207b" : "\u2070\u00b9\u00b2\u00b3\u2074\u2075\u2076\u2077\u2078\u2079"[Number(one)]!,
    )
    .join("");
}
