/** Charts: well-formed SVG with the right lines and labels; geometry against the scale's definition. */

import fc from "fast-check";
import { combine, composition, electronPositronGas, isFermistateError, regime, whiteDwarfMatter } from "fermistate";
import { type ChartOptions, chartGrid } from "fermistate/charts";
import { type Grid, grid, linearAxis, logarithmicAxis } from "fermistate/grids";
import { describe, expect, test } from "vitest";
import { axisScale, isDrawable } from "../../src/charts/axis-scale.js";
import { linearTickTexts, unitText, valueText } from "../../src/charts/labels.js";
import { palette } from "../../src/charts/palette.js";
import { readXml } from "./xml.js";

const core = composition({ C12: 0.5, O16: 0.5 });
const four = grid(whiteDwarfMatter({ coulomb: false }), core, {
  density: logarithmicAxis({ from: 1e2, to: 1e10, pointsPerDecade: 10 }),
  temperature: [1e6, 1e7, 1e8, 1e9],
});
const many = grid(whiteDwarfMatter({ coulomb: false }), core, {
  density: logarithmicAxis({ from: 1e2, to: 1e10, points: 3000 }),
  temperature: logarithmicAxis({ from: 1e5, to: 1e9, points: 50 }),
  quantities: ["pressure", "positronDensity"],
});
const cold = grid(combine(electronPositronGas()), core, { density: [1e4, 1e5, 1e6], temperature: [0, 1e7] });

const dataLines = (svg: string) =>
  readXml(svg.slice(svg.indexOf("<g "), svg.indexOf("</g>") + 4)).filter((one) => one.name === "path");
const texts = (svg: string) =>
  readXml(svg)
    .filter((one) => one.name === "text")
    .map((one) => one.content);
/** Points of a path made of M and L. */
const pointsOf = (path: string) =>
  [...path.matchAll(/[ML](-?[\d.]+),(-?[\d.]+)/g)].map((one) => [Number(one[1]), Number(one[2])] as const);

describe("a chart of four isotherms", () => {
  const svg = chartGrid(four);

  test("is one SVG element with title and description for those who do not see it", () => {
    const [root, title, description] = readXml(svg);
    expect(root).toMatchObject({
      name: "svg",
      attributes: { xmlns: "http://www.w3.org/2000/svg", role: "img", viewBox: "0 0 760 520" },
    });
    expect(title).toMatchObject({ name: "title", content: "Pressure of C12 0.5, O16 0.5" });
    expect(description?.name).toBe("desc");
    expect(description?.content).toContain("one line per temperature: 10\u2076 K, 10\u2077 K, 10\u2078 K, 10\u2079 K");
  });

  test("has one line per temperature through every density, and no number that is none", () => {
    const lines = dataLines(svg);
    expect(lines).toHaveLength(4);
    for (const line of lines) expect(pointsOf(line.attributes["d"]!)).toHaveLength(81);
    expect(svg).not.toMatch(/NaN|Infinity|undefined|null/);
    expect(new Set(lines.map((line) => line.attributes["stroke"])).size).toBe(4);
  });

  test("names axes with units, temperatures, matter and version", () => {
    const all = texts(svg);
    expect(all).toContain("baryon mass density \u03c1 [g/cm\u00b3]");
    expect(all).toContain("pressure P [dyn/cm\u00b2]");
    for (const label of ["10\u2076 K", "10\u2079 K", "10\u00b9\u2070", "10\u00b2\u2078", "100", "temperature"])
      expect(all).toContain(label);
    const foot = all.slice(-3).join(" ");
    expect(foot).toMatch(/fermistate \d+\.\d+\.\d+\. Nucleon fractions C12 0\.5, O16 0\.5\./);
    expect(foot).toContain("no Coulomb interactions");
  });

  test("is logarithmic in both directions: pixels are proportional to the logarithm", () => {
    // Drawn coldest last; its points against a straight line in the logarithms through the first and the last of them.
    const points = pointsOf(dataLines(svg).at(-1)!.attributes["d"]!);
    const first = points[0]!;
    const last = points.at(-1)!;
    const share = (values: ArrayLike<number>, i: number) =>
      Math.log(values[i]! / values[0]!) / Math.log(values[80]! / values[0]!);
    for (let i = 0; i < 81; i++) {
      expect(Math.abs(points[i]![0] - first[0] - share(four.columns.density, i) * (last[0] - first[0]))).toBeLessThan(
        0.011,
      );
      expect(Math.abs(points[i]![1] - first[1] - share(four.columns.pressure!, i) * (last[1] - first[1]))).toBeLessThan(
        0.011,
      );
    }
  });

  test("is the same text each time", () => expect(chartGrid(four, { quantity: "pressure" })).toBe(svg));

  test("keeps everything inside the picture", () => {
    for (const quantity of four.columnNames.slice(2)) {
      const picture = chartGrid(four, { quantity: quantity as "pressure" });
      for (const { name, attributes } of readXml(picture)) {
        if (name === "text") {
          expect(Number(attributes["x"])).toBeGreaterThan(0);
          expect(Number(attributes["x"])).toBeLessThan(760);
          expect(Number(attributes["y"])).toBeLessThan(520);
        }
      }
      for (const line of dataLines(picture)) {
        for (const [x, y] of pointsOf(line.attributes["d"]!)) expect(x > 0 && x < 760 && y > 60 && y < 460).toBe(true);
      }
    }
  });
});

describe("what is left out is said", () => {
  test("eight of fifty temperatures, evenly in the logarithm, ends included", () => {
    const svg = chartGrid(many);
    expect(dataLines(svg)).toHaveLength(8);
    expect(texts(svg).join(" ")).toContain("8 of 50 temperatures shown");
    for (const end of ["10\u2075 K", "10\u2079 K"]) expect(texts(svg)).toContain(end);
    expect(svg.length).toBeLessThan(200_000); // 3000 densities are more than pixels
  });

  test("infinite degeneracy at T = 0", () => {
    const svg = chartGrid(cold, { quantity: "electronDegeneracy" });
    expect(texts(svg).join(" ")).toContain("3 points beyond the scale");
    expect(svg).not.toMatch(/NaN|Infinity/);
  });

  test("positrons that fade below fifty decades", () => {
    const svg = chartGrid(many, { quantity: "positronDensity" });
    expect(texts(svg).join(" ")).toMatch(/\d+ points beyond the scale/);
    expect(svg).not.toMatch(/NaN|Infinity/);
  });
});

describe("shapes of grids", () => {
  const temperature = logarithmicAxis({ from: 1e6, to: 1e9, points: 20 });

  test("a single density is drawn over temperature", () => {
    const svg = chartGrid(grid(whiteDwarfMatter({ coulomb: false }), core, { density: 1e6, temperature }));
    expect(dataLines(svg)).toHaveLength(1);
    expect(texts(svg)).toContain("temperature T [K]");
    expect(texts(svg)).toContain("10\u2076 g/cm\u00b3");
  });

  test("a single point is a dot", () => {
    const svg = chartGrid(grid(whiteDwarfMatter({ coulomb: false }), core, { density: 1e6, temperature: 1e7 }));
    expect(readXml(svg).filter((one) => one.name === "circle")).toHaveLength(1);
    expect(svg).not.toMatch(/NaN|Infinity/);
  });
});

test("the remark on the ideal plasma stands below charts of one, and below no other", () => {
  const at = { density: [1e6, 1e7, 1e8], temperature: [1e6, 1e8] };
  const words = (coulomb: boolean) => texts(chartGrid(grid(whiteDwarfMatter({ coulomb }), core, at))).join(" ");
  expect(words(false)).toMatch(/Ideal plasma, no Coulomb interactions: .* 1 to 30\u00a0% too high/);
  expect(words(true)).toContain("Coulomb plasma");
  expect(words(true)).not.toMatch(/Ideal plasma|too high/);
});

test("the fraction of crystal is drawn, also where it is 0 throughout", () => {
  const density = logarithmicAxis({ from: 1e4, to: 1e10, points: 13 });
  for (const temperature of [[1e6, 1e7], [1e9]]) {
    const made = grid(whiteDwarfMatter(), core, { density, temperature, quantities: ["crystalFraction"] });
    const svg = chartGrid(made, { quantity: "crystalFraction" });
    expect(dataLines(svg)).toHaveLength(temperature.length);
    expect(texts(svg)).toContain("crystal fraction");
    expect(svg).not.toMatch(/NaN|Infinity|beyond the scale/);
  }
});

test("numbers of findings are drawn like any column", () => {
  const density = logarithmicAxis({ from: 1e4, to: 1e11, points: 15 });
  const made = grid(whiteDwarfMatter(), core, { density, temperature: [1e7, 1e9], findings: regime });
  const svg = chartGrid(made, { quantity: "findingsOutside" });
  expect(dataLines(svg)).toHaveLength(2);
  expect(texts(svg)).toContain("findings outside");
});

test("titles and notes are escaped, wrapped, and cannot leave their element", () => {
  const title =
    'A <script> & "quotes" \u0000 of a very long title that cannot possibly fit into one line of the picture at all, can it';
  const svg = chartGrid(four, { title, note: "</text><b>" });
  expect(() => readXml(svg)).not.toThrow();
  expect(readXml(svg)[1]?.content).toContain("A &lt;script&gt; &amp; &quot;quotes&quot;");
  expect(svg).not.toContain("\u0000");
  expect(texts(svg).filter((one) => /long title|can it/.test(one))).toHaveLength(2);
});

test.each([
  ["a quantity that is no column", { quantity: "gamma2" }, "unavailable-quantity", "quantity"],
  ["an axis", { quantity: "density" }, "unavailable-quantity", "quantity"],
  ["an unknown option", { colour: "red" }, "invalid-option", "options"],
  ["null", null, "invalid-option", "options"],
  ["a number for a title", { title: 3 }, "invalid-option", "title"],
  ["a NaN width", { width: Number.NaN }, "not-a-number", "width"],
  ["a small width", { width: 100 }, "out-of-range", "width"],
  ["a large height", { height: 5000 }, "out-of-range", "height"],
  ["a height without room for the note", { height: 240, note: "word ".repeat(200) }, "out-of-range", "height"],
])("%s is refused", (_, options, code, argument) => {
  try {
    chartGrid(four, options as ChartOptions);
  } catch (error) {
    if (!isFermistateError(error)) throw error;
    expect([error.code, error.argument]).toEqual([code, argument]);
    return;
  }
  throw new Error("nothing was thrown");
});

test("nothing finite to draw is refused", () => {
  const zero = grid(combine(electronPositronGas()), core, { density: [1e4, 1e5], temperature: 0 });
  expect(() => chartGrid(zero, { quantity: "electronDegeneracy" })).toThrow(/finite values/);
});

describe("scales", () => {
  const pitch = { logarithmic: 30, linear: 45 };

  test.each([
    [[1, 5], "linear"],
    [[1, 10], "logarithmic"],
    [[0, 1e-30, 1e30], "logarithmic"],
    [[-1, 1], "linear"],
    [[-5, -3, 1, 1e5], "symmetric"],
    [[-1e6, -10, -1], "symmetric"],
    [[0, 0], "linear"],
    [[7], "linear"],
  ] as const)("%j is %s", (values, kind) => expect(axisScale(values, [400, 80], 0.04, pitch).kind).toBe(kind));

  test("any finite values get increasing positions on the axis and at least one label", () => {
    const value = fc.oneof(
      fc.double({ noNaN: true, noDefaultInfinity: true }),
      fc.integer(),
      fc.double({ min: -10, max: 10, noNaN: true }),
    );
    fc.assert(
      fc.property(fc.array(value, { minLength: 1, maxLength: 30 }), (given) => {
        const values = given.filter(isDrawable);
        fc.pre(values.length > 0);
        const scale = axisScale(values, [400, 80], 0.04, pitch);
        const shown = values.filter(scale.shows).sort((a, b) => a - b);
        const places = shown.map(scale.place);
        for (const [i, place] of places.entries()) {
          expect(place >= 79.999 && place <= 400.001).toBe(true);
          if (i > 0) expect(place).toBeLessThanOrEqual(places[i - 1]!);
        }
        for (const tick of scale.ticks)
          expect(tick.position > 79 && tick.position < 401 && !/NaN|undefined/.test(tick.text)).toBe(true);
        const labels = scale.ticks.filter((tick) => tick.text !== "");
        expect(labels.length).toBeGreaterThan(0);
        expect(labels.length).toBeLessThan(20);
      }),
      { seed: 20260104, numRuns: 3000 },
    );
  });
});

describe("labels", () => {
  test.each([
    [0, "0"],
    [1e6, "10\u2076"],
    [3.162277e7, "3.16\u00d710\u2077"],
    [25, "25"],
    [1e-20, "10\u207b\u00b2\u2070"],
    [-1e5, "\u221210\u2075"],
    [1234.5, "1230"],
  ])("%d reads %s", (value, text) => expect(valueText(value)).toBe(text));

  test("units have real superscripts", () =>
    expect(unitText("dyn/(cm^2 K)  cm^-3")).toBe("dyn/(cm\u00b2 K)  cm\u207b\u00b3"));

  test("linear ticks have the digits of their distance", () => {
    expect(linearTickTexts([1.25, 1.3, 1.35])).toEqual(["1.25", "1.30", "1.35"]);
    expect(linearTickTexts([-2e7, 0, 2e7])).toEqual(["\u22122\u00d710\u2077", "0", "2\u00d710\u2077"]);
    expect(linearTickTexts([1.0002e9, 1.0004e9])).toEqual(["1.0002\u00d710\u2079", "1.0004\u00d710\u2079"]);
  });
});

test("colours: lightness rises along the list, and the lightest keeps 3:1 against white", () => {
  // Relative luminance and contrast as WCAG 2.2 (W3C Recommendation 2023) defines them.
  const luminance = palette.map((colour) => {
    const [red, green, blue] = [1, 3, 5].map((at) => Number.parseInt(colour.slice(at, at + 2), 16) / 255);
    const linear = [red!, green!, blue!].map((c) => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4));
    return 0.2126 * linear[0]! + 0.7152 * linear[1]! + 0.0722 * linear[2]!;
  });
  for (let i = 1; i < luminance.length; i++) expect(luminance[i]! / luminance[i - 1]!).toBeGreaterThan(1.15);
  expect(1.05 / (luminance.at(-1)! + 0.05)).toBeGreaterThan(3);
});

test("linear axes too: a linear grid of densities below a decade", () => {
  const made: Grid = grid(whiteDwarfMatter({ coulomb: false }), core, {
    density: linearAxis({ from: 2e6, to: 8e6, points: 7 }),
    temperature: 1e8,
  });
  expect(texts(chartGrid(made))).toContain("4\u00d710\u2076");
});
