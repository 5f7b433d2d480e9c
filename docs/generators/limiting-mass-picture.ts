/**
 * Makes docs/guide/limiting-mass.svg: radius over mass of stars of carbon and oxygen on the rungs of the ladder, and prints
 * the figures quoted in the guide. The same library gives the same bytes.
 *
 * Run from the root: npx tsx docs/generators/limiting-mass-picture.ts
 */
import { writeFileSync } from "node:fs";
import { scaleLinear } from "d3-scale";
import { linearTickTexts } from "../../src/charts/labels.js";
import { ink } from "../../src/charts/palette.js";
import { element, escaped, fontStack, text } from "../../src/charts/svg.js";
import { solarMass } from "../../src/constants.js";
import { composition } from "../../src/matter/composition.js";
import type { LadderRungCode } from "../../src/structure/ladder-rung.js";
import { limitingMassLadder } from "../../src/structure/limiting-mass-ladder.js";
import { massRadiusSequence } from "../../src/structure/sequence.js";

const rungs = limitingMassLadder(composition({ C12: 0.5, O16: 0.5 }));
for (const { code, solarMasses, radius, centralDensity } of rungs) {
  console.log(code, solarMasses, radius, centralDensity);
}
const rung = (code: LadderRungCode) => rungs.find((one) => one.code === code)!;

type Point = readonly [mass: number, radius: number];

/** Mass in solar masses and radius in 1000 km along a rung, from one central density to another. */
function curve(code: LadderRungCode, highest: number): Point[] {
  const { matter, relativity } = rung(code);
  const { mass, radius } = massRadiusSequence(matter!, {
    range: [3e5, highest],
    count: 140,
    relativity,
    tolerance: 1e-8,
  });
  return Array.from(mass, (one, i) => [one / solarMass, radius[i]! / 1e8] as const);
}

const capture = rung("electron-capture").centralDensity!;
const polytrope = rung("index-3-polytrope").solarMasses;
// Okabe & Ito 2008, Color Universal Design: told apart by the colour-blind; dashes tell them apart in grey print.
const lines = [
  {
    name: ["polytrope of index 3"],
    points: [[polytrope, 0] as Point, [polytrope, 14] as Point],
    colour: "#8c8c8c",
    dash: "2 4",
  },
  { name: ["ideal electrons"], points: curve("ideal-electrons", 1e14), colour: "#000000", dash: "8 4" },
  { name: ["+ Coulomb lattice"], points: curve("lattice", 1e14), colour: "#0072b2", dash: "3 3" },
  { name: ["+ exchange, screening"], points: curve("exchange-and-screening", 1e14), colour: "#0072b2", dash: "" },
  { name: ["+ general relativity"], points: curve("general-relativity", 1.5e11), colour: "#d55e00", dash: "6 3" },
  { name: ["+ moving nuclei"], points: curve("moving-nuclei", 1.5e11), colour: "#d55e00", dash: "" },
  {
    name: ["+ isothermal core, 10\u2078 K,", "until electron capture"],
    points: curve("isothermal-core", capture),
    colour: "#007a5e",
    dash: "",
  },
];
const starOf = (code: LadderRungCode): Point => [rung(code).solarMasses, rung(code).radius! / 1e8];
const size = { width: 1060, height: 470 } as const;

/** One frame with its axes and the curves clipped to it. */
function panel(id: string, left: number, masses: Point, radii: Point, width: number, marks: boolean): string {
  const [top, bottom] = [98, 404];
  const x = scaleLinear(masses, [left, left + width]);
  const y = scaleLinear(radii, [bottom, top]);
  const at = ([mass, radius]: Point): string => `${x(mass).toFixed(2)},${y(radius).toFixed(2)}`;
  const [xs, ys] = [x.ticks(6), y.ticks(6)];
  const [xTexts, yTexts] = [linearTickTexts(xs), linearTickTexts(ys)];
  const frame = `M${left},${top}h${width}V${bottom}h${-width}z`;
  const ticks = [
    ...xs.map((one) => `M${x(one).toFixed(2)},${bottom}v6`),
    ...ys.map((one) => `M${left},${y(one).toFixed(2)}h-6`),
  ];
  const clip = element("clipPath", { id }, element("rect", { x: left, y: top, width, height: bottom - top }));
  const drawn = lines.map(({ points, colour, dash }) =>
    element("path", {
      d: `M${points.map(at).join("L")}`,
      fill: "none",
      stroke: colour,
      "stroke-width": 1.9,
      "clip-path": `url(#${id})`,
      ...(dash === "" ? {} : { "stroke-dasharray": dash }),
    }),
  );
  const dot = (point: Point, colour: string, filled: boolean): string =>
    element("circle", {
      cx: x(point[0]),
      cy: y(point[1]),
      r: 3.8,
      fill: filled ? colour : "#ffffff",
      stroke: colour,
      "stroke-width": 1.8,
    });
  return [
    clip,
    element("path", { d: frame + ticks.join(""), stroke: ink.axis, fill: "none" }),
    ...xs.map((one, i) => text(x(one), bottom + 20, 11.5, ink.tick, xTexts[i]!, { "text-anchor": "middle" })),
    ...ys.map((one, i) => text(left - 9, y(one) + 4, 11.5, ink.tick, yTexts[i]!, { "text-anchor": "end" })),
    text(left + width / 2, bottom + 42, 12.5, ink.label, "mass [solar masses]", { "text-anchor": "middle" }),
    text(left - 40, top - 12, 12.5, ink.label, "radius [1000 km]"),
    ...drawn,
    ...(marks
      ? [
          dot(starOf("general-relativity"), "#d55e00", true),
          dot(starOf("moving-nuclei"), "#d55e00", true),
          dot(starOf("electron-capture"), "#d55e00", false),
          dot(starOf("isothermal-core"), "#007a5e", false),
        ]
      : []),
  ].join("\n");
}

const legendLeft = 838;
let row = 104;
const legend = lines.flatMap(({ name, colour, dash }) => {
  const sample = element("path", {
    d: `M${legendLeft},${row}h30`,
    stroke: colour,
    "stroke-width": 2.2,
    ...(dash === "" ? {} : { "stroke-dasharray": dash }),
  });
  const words = name.map((one, i) => text(legendLeft + 38, row + 4 + 16 * i, 12, ink.label, one));
  row += 10 + 16 * name.length;
  return [sample, ...words];
});
const spot = (top: number, filled: boolean, words: string): string[] => [
  element("circle", {
    cx: legendLeft + 15,
    cy: top,
    r: 3.8,
    fill: filled ? ink.title : "#ffffff",
    stroke: ink.title,
    "stroke-width": 1.8,
  }),
  text(legendLeft + 38, top + 4, 12, ink.label, words),
];
const parts = [
  element("title", {}, "Limiting mass of carbon and oxygen, one assumption after the other"),
  element(
    "desc",
    {},
    escaped(
      "Radius over mass of stars of carbon and oxygen in equal parts by mass. In Newton's theory the mass rises towards a limit " +
        "as the radius goes to zero: 1.456 solar masses for ideal electrons, 1.420 with the lattice, 1.422 with exchange and " +
        "screening. In general relativity it turns at a radius of 1000 km: 1.384, and 1.386 with moving nuclei. Oxygen captures electrons a little before.",
    ),
  ),
  element("rect", { ...size, fill: "#ffffff" }),
  text(22, 32, 16, ink.title, "Limiting mass of carbon and oxygen, one assumption after the other", {
    "font-weight": 600,
  }),
  text(
    22,
    54,
    12,
    ink.label,
    "Equal parts by mass. Left: all stars; right: near the limit. Each line keeps what the lines above it assume.",
  ),
  panel("all", 70, [0.2, 1.5], [0, 14], 290, false),
  panel("near", 430, [1.36, 1.46], [0, 2], 380, true),
  ...legend,
  ...spot(row + 6, true, "the mass turns (relativity)"),
  ...spot(row + 30, false, "O16 captures electrons"),
];
const viewBox = `0 0 ${size.width} ${size.height}`;
const attributes = { xmlns: "http://www.w3.org/2000/svg", ...size, viewBox, role: "img", "font-family": fontStack };
writeFileSync("docs/guide/limiting-mass.svg", `${element("svg", attributes, `\n${parts.join("\n")}\n`)}\n`);
