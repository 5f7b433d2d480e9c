/**
 * Makes docs/guide/coulomb-phase-map.svg and docs/guide/coulomb-pressure-map.svg: carbon and oxygen in equal parts by mass
 * over density and temperature. The same library gives the same bytes.
 *
 * Run from the root: npx tsx docs/generators/coulomb-maps.ts
 */
import { writeFileSync } from "node:fs";
import { type AxisScale, axisScale } from "../../src/charts/axis-scale.js";
import { powerOfTen } from "../../src/charts/labels.js";
import { ink } from "../../src/charts/palette.js";
import { element, escaped, fontStack, text } from "../../src/charts/svg.js";
import { coulombPlasma } from "../../src/coulomb/coulomb-plasma.js";
import { meltingTemperature } from "../../src/coulomb/phase.js";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { regime } from "../../src/regime/regime.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";

const matter = composition({ C12: 0.5, O16: 0.5 });
const full = combine(electronPositronGas(), coulombPlasma(), radiation());
const [lowestDensity, highestDensity] = [1e2, 1e10];
const [lowestTemperature, highestTemperature] = [1e5, 1e10];
const frame = { left: 84, right: 684, top: 96, bottom: 496 } as const;
const size = { width: 904, height: 584 } as const;
const x = axisScale([lowestDensity, highestDensity], [frame.left, frame.right], 0, { logarithmic: 40, linear: 100 });
const y = axisScale([lowestTemperature, highestTemperature], [frame.bottom, frame.top], 0, {
  logarithmic: 40,
  linear: 100,
});

/** Density and temperature at a pixel. */
const densityAt = (pixel: number): number =>
  lowestDensity * (highestDensity / lowestDensity) ** ((pixel - frame.left) / (frame.right - frame.left));
const temperatureAt = (pixel: number): number =>
  lowestTemperature * (highestTemperature / lowestTemperature) ** ((frame.bottom - pixel) / (frame.bottom - frame.top));

/** Cells of some pixels' side, filled by what `colourOf` says; runs of one colour along a row are one rectangle. */
function cells(side: number, colourOf: (density: number, temperature: number) => string | undefined): string {
  const paths = new Map<string, string>();
  for (let top = frame.top; top < frame.bottom; top += side) {
    let from = frame.left;
    let open: string | undefined;
    for (let left = frame.left; left <= frame.right; left += side) {
      const inside = left < frame.right;
      const colour = inside ? colourOf(densityAt(left + side / 2), temperatureAt(top + side / 2)) : undefined;
      if (colour === open) continue;
      if (open !== undefined) paths.set(open, `${paths.get(open) ?? ""}M${from},${top}H${left}v${side}H${from}z`);
      [open, from] = [colour, left];
    }
  }
  const filled = [...paths].sort().map(([fill, d]) => element("path", { d, fill }));
  return element("g", { "shape-rendering": "crispEdges" }, `\n${filled.join("\n")}\n`);
}

/** Line of a temperature over density, clipped to the frame. */
function curve(
  temperatureOf: (density: number) => number,
  attributes: Readonly<Record<string, string | number>>,
): string {
  const points: string[] = [];
  for (let pixel = frame.left; pixel <= frame.right; pixel += 4) {
    const temperature = temperatureOf(densityAt(pixel));
    points.push(`${pixel},${y.place(temperature).toFixed(2)}`);
  }
  return element("path", { d: `M${points.join("L")}`, fill: "none", "clip-path": "url(#frame)", ...attributes });
}

/** Words along a curve at a density, turned with it; a halo keeps them legible. */
function label(words: string, temperatureOf: (density: number) => number, density: number, rise: number): string {
  const [left, right] = [density / 1.5, density * 1.5].map(
    (one) => [x.place(one), y.place(temperatureOf(one))] as const,
  );
  const turn = (Math.atan2(right![1] - left![1], right![0] - left![0]) * 180) / Math.PI;
  const [cx, cy] = [x.place(density), y.place(temperatureOf(density))];
  return indexed(cx, cy - rise, ink.title, words, {
    "text-anchor": "middle",
    transform: `rotate(${turn.toFixed(1)} ${cx.toFixed(2)} ${cy.toFixed(2)})`,
    ...halo,
  });
}

/** Text in which "T_F" is T with a subscript of one letter. */
function indexed(
  at: number,
  top: number,
  fill: string,
  words: string,
  more: Readonly<Record<string, string | number>> = {},
) {
  const content = escaped(words).replace(/_(\w)/g, (_, letter: string) => {
    return `${element("tspan", { dy: 3, "font-size": 9.5 }, letter)}${element("tspan", { dy: -3 }, "\u200b")}`;
  });
  return element("text", { x: at, y: top, "font-size": 12, fill, ...more }, content);
}
const halo = { stroke: "#ffffff", "stroke-width": 3, "stroke-linejoin": "round", "paint-order": "stroke" };

function axes(): string {
  const marks: string[] = [];
  const words: string[] = [];
  const along = (
    scale: AxisScale,
    mark: (at: number, length: number) => string,
    word: (at: number, text: string) => string,
  ) => {
    for (const tick of scale.ticks) {
      marks.push(mark(tick.position, tick.text === "" ? 3 : 6));
      if (tick.text !== "") words.push(word(tick.position, tick.text));
    }
  };
  along(
    x,
    (at, length) => `M${at.toFixed(2)},${frame.bottom}v${length}`,
    (at, word) => text(at, frame.bottom + 21, 12, ink.tick, word, { "text-anchor": "middle" }),
  );
  along(
    y,
    (at, length) => `M${frame.left},${at.toFixed(2)}h${-length}`,
    (at, word) => text(frame.left - 10, at + 4, 12, ink.tick, word, { "text-anchor": "end" }),
  );
  const box = `M${frame.left},${frame.top}H${frame.right}V${frame.bottom}H${frame.left}z`;
  return [
    element("path", { d: box + marks.join(""), stroke: ink.axis, fill: "none" }),
    ...words,
    text(
      (frame.left + frame.right) / 2,
      frame.bottom + 44,
      12.5,
      ink.label,
      "baryon mass density \u03c1 [g/cm\u00b3]",
      {
        "text-anchor": "middle",
      },
    ),
    text(22, frame.top - 14, 12.5, ink.label, "temperature T [K]"),
  ].join("\n");
}

function document(title: string, description: string, subtitle: string, parts: readonly string[]): string {
  const attributes = {
    xmlns: "http://www.w3.org/2000/svg",
    width: size.width,
    height: size.height,
    viewBox: `0 0 ${size.width} ${size.height}`,
    role: "img",
    "font-family": fontStack,
  };
  const clip = element("clipPath", { id: "frame" }, rectangle("#000000"));
  const stripe = element(
    "pattern",
    { id: "outside", width: 7, height: 7, patternUnits: "userSpaceOnUse", patternTransform: "rotate(45)" },
    element("rect", { width: 3.2, height: 7, fill: "#ffffff", opacity: 0.55 }) +
      element("rect", { x: 0.8, width: 1.6, height: 7, fill: "#303030" }),
  );
  const all = [
    element("title", {}, escaped(title)),
    element("desc", {}, escaped(description)),
    element("defs", {}, clip + stripe),
    element("rect", { width: size.width, height: size.height, fill: "#ffffff" }),
    text(22, 32, 16, ink.title, title, { "font-weight": 600 }),
    text(22, 54, 12, ink.label, subtitle),
    ...parts,
  ];
  return `${element("svg", attributes, `\n${all.join("\n")}\n`)}\n`;
}

const rectangle = (fill: string): string =>
  element("rect", {
    x: frame.left,
    y: frame.top,
    width: frame.right - frame.left,
    height: frame.bottom - frame.top,
    fill,
  });

const legendLeft = frame.right + 26;

/** A square or a line with words beside it. */
function entry(row: number, sample: (top: number) => string, words: readonly string[]): string {
  const top = frame.top + row;
  return [sample(top), ...words.map((word, i) => indexed(legendLeft + 30, top + 11 + 15 * i, ink.label, word))].join(
    "\n",
  );
}
const square = (fill: string) => (top: number) =>
  element("rect", { x: legendLeft, y: top, width: 20, height: 14, fill, stroke: ink.axis, "stroke-width": 0.6 });
const stroke = (attributes: Readonly<Record<string, string | number>>) => (top: number) =>
  element("path", { d: `M${legendLeft},${top + 7}h20`, fill: "none", ...attributes });

// What is where. Gamma_m T_m(rho) is Gamma T; parameters at any T give the other two lines.
const couplingTemperature = (density: number): number => 175 * meltingTemperature(density, matter);
const parametersAt = (density: number) => regime(density, 1e7, matter).parameters;
const lines = [
  {
    of: couplingTemperature,
    words: "\u0393 = 1",
    legend: ["\u0393 = 1: gas above"],
    at: 10 ** 8.4,
    style: { stroke: "#1a1a1a", "stroke-width": 1.6, "stroke-dasharray": "7 4.5" },
  },
  {
    of: (density: number) => couplingTemperature(density) / 175,
    words: "\u0393 = 175",
    legend: ["\u0393 = 175: crystal below"],
    at: 10 ** 8.4,
    style: { stroke: "#1a1a1a", "stroke-width": 2.4 },
  },
  {
    of: (density: number) => parametersAt(density).fermiTemperature,
    words: "T = T_F",
    legend: ["T = T_F: electrons", "degenerate below"],
    at: 10 ** 5.5,
    style: { stroke: "#1a1a1a", "stroke-width": 1.6, "stroke-dasharray": "1.5 3.5", "stroke-linecap": "round" },
  },
  {
    of: (density: number) => parametersAt(density).ionPlasmaTemperature,
    words: "T = T_p",
    legend: ["T = T_p: nuclei move", "by quantum laws below"],
    at: 10 ** 5.4,
    style: { stroke: "#1a1a1a", "stroke-width": 1.6, "stroke-dasharray": "10 3 2 3" },
  },
] as const;

const phaseColours = { gas: "#f7efd0", liquid: "#9cc9de", crystal: "#3f6fa6" } as const;
const isOutside = (density: number, temperature: number): boolean =>
  regime(density, temperature, matter, { equationOfState: full }).findings.some(
    ({ severity }) => severity === "outside",
  );

function phaseMap(): string {
  const phaseColour = (density: number, temperature: number): string => {
    const { parameters, phase } = regime(density, temperature, matter);
    if (phase === "crystal") return phaseColours.crystal;
    return parameters.ionCoupling < 1 ? phaseColours.gas : phaseColours.liquid;
  };
  const legend = [
    entry(2, square(phaseColours.gas), ["ion gas, \u0393 < 1"]),
    entry(28, square(phaseColours.liquid), ["Coulomb liquid"]),
    entry(54, square(phaseColours.crystal), ["bcc crystal"]),
    entry(80, (top) => square("#ffffff")(top) + square("url(#outside)")(top), [
      "no model here:",
      "a finding \u201coutside\u201d",
    ]),
    ...lines.map((line, i) => entry(134 + [0, 26, 52, 93][i]!, stroke(line.style), line.legend)),
  ];
  return document(
    "Phases of carbon and oxygen in equal parts by mass",
    "Map of the phase of the ions over baryon mass density from 1e2 to 1e10 g/cm^3 and temperature from 1e5 to 1e10 K. Gas " +
      "where the coupling is below 1, crystal where it is above 175, liquid between. Hatched where regime() makes a finding " +
      "of severity outside: atoms not fully ionised in cold thin matter, positrons in hot thin matter. Lines: coupling 1 and " +
      "175, Fermi temperature of the electrons, plasma temperature of the ions.",
    "Convention \u0393 = 175 for melting; thresholds of the findings as in regime().",
    [
      cells(2, phaseColour),
      cells(2, (density, temperature) => (isOutside(density, temperature) ? "url(#outside)" : undefined)),
      ...lines.map(({ of, style }) => curve(of, style)),
      ...lines.map(({ of, words, at }) => label(words, of, at, 6)),
      axes(),
      ...legend,
    ],
  );
}

/** Steps of log10 |P/P_ideal - 1|, from the palest; lightness falls all the way, so the order survives colour blindness. */
const steps = [
  "#f4f1e6",
  "#dfe7d4",
  "#c0dccb",
  "#98cdc6",
  "#6bb8c2",
  "#449dba",
  "#327fac",
  "#2f6099",
  "#2f427f",
  "#2a265c",
] as const;
const [faintest, strongest] = [-5, 0];

function pressureMap(): string {
  const ideal = whiteDwarfMatter({ coulomb: false });
  const colourOf = (density: number, temperature: number): string => {
    // From the free energy, which has an answer also where the sum is unstable.
    const pressure = full.freeEnergy(density, temperature, matter).f10;
    const correction = pressure / ideal.freeEnergy(density, temperature, matter).f10 - 1;
    const place = (Math.log10(Math.abs(correction)) - faintest) / (strongest - faintest);
    return steps[Math.min(steps.length - 1, Math.max(0, Math.floor(place * steps.length)))]!;
  };
  const barTop = frame.top + 34;
  const cell = 26;
  const bar = steps.map((fill, i) =>
    element("rect", { x: legendLeft, y: barTop + (steps.length - 1 - i) * cell, width: 22, height: cell, fill }),
  );
  const barBottom = barTop + steps.length * cell;
  const ticks = Array.from({ length: strongest - faintest + 1 }, (_, i) => {
    const at = barBottom - (i * cell * steps.length) / (strongest - faintest);
    return [
      element("path", { d: `M${legendLeft + 22},${at}h5`, stroke: ink.axis }),
      text(legendLeft + 33, at + 4, 12, ink.tick, powerOfTen(faintest + i)),
    ].join("\n");
  });
  return document(
    "Coulomb share of the pressure, carbon and oxygen in equal parts by mass",
    "Map of the size of P/P_ideal - 1 over baryon mass density from 1e2 to 1e10 g/cm^3 and temperature from 1e5 to 1e10 K, " +
      "P_ideal without Coulomb interactions but with ideal ions. From 1e-5 and less in hot thin matter to more than 0.3 in " +
      "cold thin matter, where it is hatched: a finding of severity outside. Along the cold edge 0.14 at 1e4, 0.032 at 1e6, 0.016 at 1e8 g/cm^3. The pressure is lower everywhere.",
    "Interactions lower the pressure everywhere here; hatched: a finding \u201coutside\u201d. Solid line: melting.",
    [
      cells(2, colourOf),
      cells(2, (density, temperature) => (isOutside(density, temperature) ? "url(#outside)" : undefined)),
      curve(lines[1].of, { stroke: "#ffffff", "stroke-width": 5.5 }),
      curve(lines[1].of, lines[1].style),
      label(lines[1].words, lines[1].of, 10 ** 8.4, 6),
      axes(),
      text(legendLeft, frame.top + 11, 12, ink.label, "|P/P(ideal) \u2212 1|"),
      ...bar,
      element("rect", {
        x: legendLeft,
        y: barTop,
        width: 22,
        height: barBottom - barTop,
        fill: "none",
        stroke: ink.axis,
      }),
      ...ticks,
      text(legendLeft, barBottom + 26, 10.5, ink.tick, "palest: 10\u207b\u2075 or less"),
    ],
  );
}

writeFileSync("docs/guide/coulomb-phase-map.svg", phaseMap());
writeFileSync("docs/guide/coulomb-pressure-map.svg", pressureMap());
