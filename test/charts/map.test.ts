/** Maps: colours against the CIE 1976 lightness, outlines against plane geometry, and what the reader must be told. */
import fc from "fast-check";
import { composition, isFermistateError, whiteDwarfMatter } from "fermistate";
import { chartMap, type MapData, type MapOptions, mapOfGrid } from "fermistate/charts";
import { grid, logarithmicAxis } from "fermistate/grids";
import { describe, expect, test } from "vitest";
import { colourAt } from "../../src/charts/colour-scale.js";
import { outlines } from "../../src/charts/regions.js";
import { readXml } from "./xml.js";

const density = logarithmicAxis({ from: 1e2, to: 1e10, points: 60 });
const temperature = logarithmicAxis({ from: 1e6, to: 1e10, points: 40 });
const matter = composition({ C12: 0.5, O16: 0.5 });
const made = grid(whiteDwarfMatter({ coulomb: false }), matter, { density, temperature, quantities: ["gamma1"] });

/** Values of a function of log10 density and log10 temperature. */
const valuesOf = (of: (u: number, v: number) => number): number[] =>
  temperature.values.flatMap((t) => density.values.map((rho) => of(Math.log10(rho), Math.log10(t))));
const data = (of: (u: number, v: number) => number): MapData => ({
  density,
  temperature,
  values: valuesOf(of),
  label: "a number",
});
const textsOf = (svg: string): string[] =>
  readXml(svg)
    .filter(({ name }) => name === "text")
    .map(({ content }) => content);
const bandsOf = (svg: string): { d: string; fill: string }[] =>
  readXml(svg)
    .filter(({ name, attributes }) => name === "path" && attributes["fill"]?.match(/^(#(?!fff)|url)/))
    .map(({ attributes }) => ({ d: attributes["d"]!, fill: attributes["fill"]! }));

/** Area of a path of M, H, V and z, loops the other way round counted negative. */
function areaOf(path: string): number {
  let area = 0;
  for (const loop of path.split("z").filter((one) => one !== "")) {
    const corners: [number, number][] = [];
    for (const [, letter, first, second] of loop.matchAll(/([MHV])(-?[\d.]+)(?:,(-?[\d.]+))?/g)) {
      const [x, y] = corners.at(-1) ?? [0, 0];
      corners.push(
        letter === "M" ? [Number(first), Number(second)] : letter === "H" ? [Number(first), y] : [x, Number(first)],
      );
    }
    for (const [i, [x, y]] of corners.entries()) {
      const [nextX, nextY] = corners[(i + 1) % corners.length]!;
      area += (x * nextY - nextX * y) / 2;
    }
  }
  return area;
}

describe("the colours", () => {
  /** Lightness L* of CIE 1976 (CIE 15:2004, 8.2.1) of an sRGB colour (IEC 61966-2-1). */
  const lightness = (colour: string): number => {
    const linear = [1, 3, 5].map((i) => {
      const share = Number.parseInt(colour.slice(i, i + 2), 16) / 255;
      return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
    });
    const y = 0.2126 * linear[0]! + 0.7152 * linear[1]! + 0.0722 * linear[2]!;
    return y > (6 / 29) ** 3 ? 116 * Math.cbrt(y) - 16 : (29 / 3) ** 3 * y;
  };

  test("equal steps are nearly equal steps of lightness, dark to light", () => {
    const steps = Array.from({ length: 9 }, (_, i) => lightness(colourAt((i + 1) / 9)) - lightness(colourAt(i / 9)));
    const mean = steps.reduce((sum, one) => sum + one, 0) / 9;
    // Measured: 0.95 to 1.07 of the mean.
    for (const step of steps) expect(step / mean).toBeGreaterThan(0.94);
    for (const step of steps) expect(step / mean).toBeLessThan(1.08);
  });

  test("shares beyond the ends keep the colour of the end", () => {
    expect(colourAt(-1)).toBe(colourAt(0));
    expect(colourAt(2)).toBe("#ffea46");
  });
});

test("the outline of any set of cells encloses exactly its area, holes left out", () => {
  fc.assert(
    fc.property(
      fc.integer({ min: 1, max: 9 }),
      fc.array(fc.integer({ min: 0, max: 2 }), { maxLength: 80 }),
      (n, list) => {
        const rows = Math.floor(list.length / n);
        const classes = Int16Array.from(list.slice(0, n * rows));
        const xs = Array.from({ length: n + 1 }, (_, i) => 10 + 3 * i);
        const ys = Array.from({ length: rows + 1 }, (_, i) => 20 + 2 * i);
        for (const wanted of [0, 1, 2]) {
          const cells = classes.filter((one) => one === wanted).length;
          expect(areaOf(outlines(classes, wanted, n, xs, ys))).toBe(6 * cells);
        }
      },
    ),
    { seed: 1, numRuns: 300 },
  );
});

describe("a map of a grid", () => {
  const svg = chartMap(mapOfGrid(made, "gamma1"), {
    title: "Adiabatic exponent",
    note: "Where it falls below 4/3, pairs are made.",
    marks: [{ density: 1e4, temperature: 1.5e9, text: "pairs" }],
  });

  test("is well-formed, says what it shows, and holds no number that is none", () => {
    const [root, title, description] = readXml(svg);
    expect(root).toMatchObject({ name: "svg", attributes: { role: "img", viewBox: "0 0 904 584" } });
    expect(title?.content).toBe("Adiabatic exponent");
    expect(description?.content).toContain("by colour, from 1.2");
    expect(description?.content).toContain("pairs: 10\u2074 g/cm\u00b3, 1.5\u00d710\u2079 K.");
    expect(svg).not.toMatch(/NaN|Infinity|undefined|null/);
    for (const label of ["baryon mass density \u03c1 [g/cm\u00b3]", "temperature T [K]", "pairs"]) {
      expect(textsOf(svg)).toContain(label);
    }
  });

  test("covers the whole frame once", () => {
    const frame = readXml(svg).filter(({ name, attributes }) => name === "rect" && attributes["fill"] === "none")[0]!;
    const whole = Number(frame.attributes["width"]) * Number(frame.attributes["height"]);
    const covered = bandsOf(svg).reduce((sum, { d }) => sum + Math.abs(areaOf(d)), 0);
    expect(Math.abs(covered / whole - 1)).toBeLessThan(2e-3); // corners are rounded to a tenth of a pixel
  });

  test("is the same text again, and small", () => {
    expect(chartMap(mapOfGrid(made, "gamma1"), { title: "x" })).toBe(
      chartMap(mapOfGrid(made, "gamma1"), { title: "x" }),
    );
    expect(svg.length).toBeLessThan(30_000); // 2400 cells as rectangles would be 150,000
  });
});

describe("what the reader is told", () => {
  test("missing cells are hatched, named and counted", () => {
    const svg = chartMap(
      data((u, v) => (u < 4 && v < 7 ? Number.NaN : 10 ** -u)),
      { missing: "no answer" },
    );
    expect(bandsOf(svg).filter(({ fill }) => fill === "url(#fermistate-missing)")).toHaveLength(1);
    expect(textsOf(svg)).toContain("no answer");
    expect(readXml(svg)[2]?.content).toMatch(/Hatched: no answer \(\d+ cells\)/);
    expect(chartMap(data((u) => u))).not.toContain("no value");
  });

  test("values beyond the range, zeros on a logarithmic scale, a row of T = 0", () => {
    const beyond = chartMap(
      data((u) => 10 ** -u),
      { range: [1e-8, 1e-4] },
    );
    expect(textsOf(beyond)).toContain("darkest: 10\u207b\u2078 or less");
    expect(textsOf(beyond)).toContain("lightest: 10\u207b\u2074 or more");
    expect(textsOf(chartMap(data((u) => (u < 5 ? 0 : 10 ** -u))))).toContain("darkest: 10\u207b\u00b9\u2070 or less");
    const cold = { density: [1, 10], temperature: [0, 1e6, 1e7], values: [9, 9, 1, 2, 3, 4], label: "x" };
    const svg = chartMap(cold);
    expect(textsOf(svg)).toContain("T = 0 is not shown");
    expect(readXml(svg)[2]?.content).toContain("from 1 (dark) to 4 (light)");
  });

  test("many cells share pixels and show their largest value", () => {
    const wide = logarithmicAxis({ from: 1, to: 1e6, points: 3000 });
    const values = Array.from({ length: 6000 }, (_, i) => (i === 1501 ? 5 : 1));
    const svg = chartMap({ density: wide, temperature: [1e6, 1e7], values, label: "x" });
    expect(textsOf(svg).join(" ")).toContain("of cells too small to see, the largest value");
    expect(bandsOf(svg).some(({ fill }) => fill === colourAt(1))).toBe(true);
  });

  test("a single value still has a scale; a huge spread shows 16 decades", () => {
    expect(chartMap(data(() => 7))).not.toMatch(/NaN/);
    expect(chartMap(data(() => 0))).not.toMatch(/NaN/);
    expect(readXml(chartMap(data((u) => 10 ** (-3 * u))))[2]?.content).toContain("from 10\u207b\u00b2\u00b2");
  });
});

test.each<[string, unknown, unknown, string]>([
  ["no data", null, {}, "invalid-option"],
  ["too few values", { density: [1, 2], temperature: [1, 2], values: [1], label: "x" }, {}, "length-mismatch"],
  ["one density", { density: [1], temperature: [1, 2], values: [1, 2], label: "x" }, {}, "invalid-option"],
  [
    "density 0",
    { density: [0, 1, 2], temperature: [1, 2], values: Array(6).fill(1), label: "x" },
    {},
    "invalid-option",
  ],
  [
    "only T = 0 and one more",
    { density: [1, 2], temperature: [0, 1], values: [1, 1, 1, 1], label: "x" },
    {},
    "invalid-option",
  ],
  [
    "NaN in an axis",
    { density: [1, Number.NaN], temperature: [1, 2], values: [1, 1, 1, 1], label: "x" },
    {},
    "not-a-number",
  ],
  ["no label", { density: [1, 2], temperature: [1, 2], values: [1, 1, 1, 1] }, {}, "invalid-option"],
  ["nothing finite", data(() => Number.NaN), {}, "invalid-option"],
  ["negative on a logarithmic scale", data((u) => -u), { scale: "logarithmic" }, "invalid-option"],
  ["another scale", data((u) => u), { scale: "cubic" }, "invalid-option"],
  ["a range upside down", data((u) => u), { range: [2, 1] }, "invalid-option"],
  ["a range of NaN", data((u) => u), { range: [Number.NaN, 1] }, "not-a-number"],
  ["a logarithmic range from 0", data((u) => 10 ** u), { range: [0, 1] }, "invalid-option"],
  ["a mark outside", data((u) => u), { marks: [{ density: 1, temperature: 1e7, text: "x" }] }, "invalid-option"],
  ["a mark of null", data((u) => u), { marks: [null] }, "invalid-option"],
  ["an unknown option", data((u) => u), { colour: "red" }, "invalid-option"],
  ["a title of 3", data((u) => u), { title: 3 }, "invalid-option"],
  ["a small width", data((u) => u), { width: 100 }, "out-of-range"],
  ["no room", data((u) => u), { height: 320, note: "word ".repeat(300) }, "out-of-range"],
])("refuses %s", (_, given, options, code) => {
  let error: unknown;
  try {
    chartMap(given as MapData, options as MapOptions);
  } catch (caught) {
    error = caught;
  }
  expect(isFermistateError(error) && error.code).toBe(code);
});

test("a column that the grid has not is refused", () => {
  expect(() => mapOfGrid(made, "pressure")).toThrow(/a column of this grid: gamma1/);
});
