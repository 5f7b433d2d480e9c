/**
 * Makes the pictures of the example pages, docs/guide/example-*.svg, from docs/examples, and prints the figures quoted there.
 * The same library gives the same bytes.
 *
 * Run from the root: npm run build && npx tsx docs/generators/example-pictures.ts
 */
import { writeFileSync } from "node:fs";
import { scaleLinear } from "d3-scale";
import {
  combine,
  composition,
  electronPositronGas,
  meltingTemperature,
  solarMass,
  transition,
  whiteDwarfMatter,
  withPhase,
} from "fermistate";
import { type AxisScale, axisScale } from "../../src/charts/axis-scale.js";
import { linearTickTexts } from "../../src/charts/labels.js";
import { colours, ink } from "../../src/charts/palette.js";
import { element, escaped, fontStack, text } from "../../src/charts/svg.js";
import { adiabat } from "../examples/adiabat.js";
import { cool } from "../examples/cooling.js";
import { hydrostaticStar } from "../examples/hydrostatic-star.js";
import { exactRiemann } from "../examples/riemann.js";
import { runShockTube } from "../examples/shock-tube.js";

const matter = composition({ C12: 0.5, O16: 0.5 });
const full = whiteDwarfMatter();

/** What is drawn in a panel. */
interface Series {
  readonly points: readonly (readonly [x: number, y: number])[];
  readonly mark: "line" | "dashes" | "dots";
  readonly colour: string;
  /** Words beside it: at the point of this index, moved by pixels. */
  readonly label?: {
    readonly words: string;
    readonly at: number;
    readonly by: readonly [number, number];
    anchor?: string;
  };
}

interface Panel {
  /** Axes that are linear whatever the values; the others are logarithmic over a decade and more. */
  readonly linear?: string;
  readonly xLabel: string;
  readonly yLabel: string;
  readonly series: readonly Series[];
}

const halo = { stroke: "#ffffff", "stroke-width": 3, "stroke-linejoin": "round", "paint-order": "stroke" };

function panel(
  { xLabel, yLabel, linear = "", series }: Panel,
  left: number,
  top: number,
  width: number,
  height: number,
): string {
  const [right, bottom] = [left + width, top + height];
  const all = series.flatMap(({ points }) => points);
  const scale = (name: string, values: number[], range: [number, number], margin: number, pitch: number): AxisScale =>
    linear.includes(name)
      ? linearScale(values, range, margin, pitch)
      : axisScale(values, range, margin, { logarithmic: 0.6 * pitch, linear: pitch });
  const x = scale(
    "x",
    all.map(([one]) => one),
    [left, right],
    0,
    80,
  );
  const y = scale(
    "y",
    all.map(([, one]) => one),
    [bottom, top],
    0.06,
    44,
  );
  const at = ([a, b]: readonly [number, number]): readonly [number, number] => [x.place(a), y.place(b)];
  const drawn = series.map(({ points, mark, colour }) => {
    const places = points.map(at).map(([a, b]) => `${a.toFixed(2)},${b.toFixed(2)}`);
    if (mark === "dots") {
      const dots = places.map((one) => `M${one}h0`).join("");
      return element("path", { d: dots, stroke: colour, "stroke-width": 4.6, "stroke-linecap": "round", fill: "none" });
    }
    const dash = mark === "dashes" ? { "stroke-dasharray": "6 4" } : {};
    return element("path", {
      d: `M${places.join("L")}`,
      stroke: colour,
      "stroke-width": series[0]?.mark === "dots" ? 1.2 : 1.9,
      fill: "none",
      ...dash,
    });
  });
  const words = series.flatMap(({ points, label, colour }) => {
    if (label === undefined) return [];
    const [a, b] = at(points[label.at]!);
    const anchor = label.anchor ?? "start";
    return [text(a + label.by[0], b + label.by[1], 12, colour, label.words, { "text-anchor": anchor, ...halo })];
  });
  return [
    axes(x, y, left, right, top, bottom),
    text((left + right) / 2, bottom + 38, 12.5, ink.label, xLabel, { "text-anchor": "middle" }),
    text(left - 44, top - 12, 12.5, ink.label, yLabel),
    ...drawn,
    ...words,
  ].join("\n");
}

function linearScale(values: number[], range: [number, number], margin: number, pitch: number): AxisScale {
  const [low, high] = [Math.min(...values), Math.max(...values)];
  const extra = margin * (high - low);
  const place = scaleLinear([low - extra, high + extra], range);
  const ticks = place.ticks(Math.abs(range[1] - range[0]) / pitch);
  const texts = linearTickTexts(ticks);
  const placed = ticks.map((value, i) => ({ position: place(value), text: texts[i]! }));
  return { kind: "linear", place, shows: () => true, ticks: placed };
}

function axes(x: AxisScale, y: AxisScale, left: number, right: number, top: number, bottom: number): string {
  const marks = [
    ...x.ticks.map(({ position, text: words }) => `M${position.toFixed(2)},${bottom}v${words === "" ? 3 : 6}`),
    ...y.ticks.map(({ position, text: words }) => `M${left},${position.toFixed(2)}h${words === "" ? -3 : -6}`),
  ];
  const frame = `M${left},${top}H${right}V${bottom}H${left}z`;
  return [
    element("path", { d: frame + marks.join(""), stroke: ink.axis, fill: "none" }),
    ...x.ticks.map((tick) => text(tick.position, bottom + 20, 11.5, ink.tick, tick.text, { "text-anchor": "middle" })),
    ...y.ticks.map((tick) => text(left - 9, tick.position + 4, 11.5, ink.tick, tick.text, { "text-anchor": "end" })),
  ].join("\n");
}

/** A picture of one to four panels, two in a row. */
function picture(name: string, title: string, subtitle: string, description: string, panels: readonly Panel[]): void {
  const columns = Math.min(panels.length, 2);
  const rows = Math.ceil(panels.length / 2);
  const [width, height] = columns === 1 ? [560, 360] : [340, rows === 1 ? 300 : 220];
  const size = { width: 70 + columns * (width + 84), height: 84 + rows * (height + 84) };
  const drawn = panels.map((one, i) => {
    return panel(one, 84 + (i % 2) * (width + 94), 96 + Math.floor(i / 2) * (height + 84), width, height);
  });
  const parts = [
    element("title", {}, escaped(title)),
    element("desc", {}, escaped(description)),
    element("rect", { ...size, fill: "#ffffff" }),
    text(22, 32, 16, ink.title, title, { "font-weight": 600 }),
    text(22, 54, 12, ink.label, subtitle),
    ...drawn,
  ];
  const viewBox = `0 0 ${size.width} ${size.height}`;
  const attributes = { xmlns: "http://www.w3.org/2000/svg", ...size, viewBox, role: "img", "font-family": fontStack };
  writeFileSync(`docs/guide/example-${name}.svg`, `${element("svg", attributes, `\n${parts.join("\n")}\n`)}\n`);
}

const [dark, middle, light] = colours(3) as [string, string, string];

function shockTube(): void {
  const left = { density: 1e7, velocity: 0, temperature: 1e8 };
  const right = { density: 1e6, velocity: 0, temperature: 1e8 };
  const exact = exactRiemann(full, matter, left, right);
  const length = 1e5;
  const time = (0.35 * length) / exact.speeds[4]!;
  const start = (x: number) => (x < 0 ? left : right);
  const run = runShockTube({ eos: full, matter, start, length, cells: 100, time });
  // The exact curve: points along the fan and both sides of each jump.
  const [head, tail, contact, , front] = exact.speeds as [number, number, number, number, number];
  const rays = [-0.5 * (length / time), ...Array.from({ length: 60 }, (_, i) => head + ((tail - head) * i) / 59)];
  for (const jump of [contact, front]) rays.push(jump - 1, jump + 1);
  rays.push(0.5 * (length / time));
  const flows = rays.map((ray) => ({ x: (ray * time) / 1e5, ...exact.at(ray) }));
  const panelOf = (
    yLabel: string,
    cells: Float64Array,
    of: (flow: (typeof flows)[number]) => number,
    unit = 1,
    linear = "",
  ): Panel => ({
    linear,
    xLabel: "distance from the membrane [km]",
    yLabel,
    series: [
      { points: Array.from(cells, (y, i) => [run.x[i]! / 1e5, y / unit]), mark: "dots", colour: light },
      { points: flows.map((flow) => [flow.x, of(flow) / unit]), mark: "line", colour: dark },
    ],
  });
  picture(
    "shock-tube",
    "A shock tube in degenerate carbon and oxygen",
    `At first 1e7 g/cm\u00b3 on the left, 1e6 on the right, both at 1e8 K and at rest; here ${(time * 1e6).toFixed(1)} \u00b5s later. Line: exact; dots: 100 cells.`,
    "Density, velocity, pressure and temperature along a tube of one kilometre: a rarefaction to the left, the contact, a shock " +
      "to the right. Dots of the finite-volume scheme lie on the line of the exact solution but for a few cells at the " +
      "corners and jumps; temperature is too high in some cells left of the contact.",
    [
      panelOf("density [g/cm\u00b3]", run.density, ({ state }) => state.density),
      panelOf("velocity [1000 km/s]", run.velocity, ({ velocity }) => velocity, 1e8, "y"),
      panelOf("pressure [dyn/cm\u00b2]", run.pressure, ({ state }) => state.pressure),
      panelOf("temperature [K]", run.temperature, ({ state }) => state.temperature),
    ],
  );
  const star = exact.contact.map(({ density, temperature, specificEnergy, heatCapacityV, gamma1 }) => {
    return { density, temperature, gamma1, condition: specificEnergy / (heatCapacityV * temperature) };
  });
  console.log("shock tube", { pressure: exact.pressure, velocity: exact.velocity, speeds: exact.speeds, star });
  const hottest = Math.max(...run.temperature);
  console.log({
    steps: run.steps,
    hottest,
    gamma1: [left, right].map((one) => full.state(one.density, one.temperature, matter).gamma1),
  });
}

function star(): void {
  const sequence = (eos: typeof full, of: typeof matter, from: number, to: number): [number, number][] =>
    Array.from({ length: 41 }, (_, i) => {
      const centralDensity = from * (to / from) ** (i / 40);
      const { shells } = hydrostaticStar({
        eos,
        matter: of,
        centralDensity,
        temperature: 0,
        surface: 1e-10,
        tolerance: 1e-8,
      });
      const surface = shells.at(-1)!;
      return [surface.mass / solarMass, surface.radius / 1e8];
    });
  const lines = [
    {
      points: sequence(combine(electronPositronGas()), matter, 1e5, 2e10),
      colour: dark,
      mark: "dashes",
      label: { words: "electrons only", at: 14, by: [10, -8] },
    },
    {
      points: sequence(full, matter, 1e5, 2e10),
      colour: dark,
      mark: "line",
      label: { words: "carbon and oxygen", at: 40, by: [-10, 4], anchor: "end" },
    },
    {
      points: sequence(full, composition({ Fe56: 1 }), 1e5, 1.1e9),
      colour: middle,
      mark: "line",
      label: { words: "iron", at: 20, by: [-8, 12], anchor: "end" },
    },
  ] as const;
  picture(
    "hydrostatic-star",
    "Mass and radius of cold white dwarfs",
    "Central densities from 1e5 g/cm\u00b3 to where nuclei capture electrons; Newtonian gravity.",
    "Radius over mass for ideal electrons, for carbon and oxygen with Coulomb terms, and for iron. Radius falls with mass, " +
      "steeply at the limiting mass. Coulomb terms make stars smaller: a few percent for carbon and oxygen.",
    [{ linear: "xy", xLabel: "mass [solar masses]", yLabel: "radius [1000 km]", series: lines }],
  );
  console.log(
    "star",
    lines.map(({ points }) => points.at(-1)),
  );
}

function freezing(): void {
  const density = Float64Array.from({ length: 201 }, (_, i) => 3e7 * 10 ** (-(1.4 * i) / 200));
  const along = adiabat(full, matter, 8.6e6, density);
  const liquid = adiabat(withPhase(full, "liquid"), matter, 8.6e6, density);
  const points = (column: Float64Array): [number, number][] => Array.from(density, (one, i) => [one, column[i]!]);
  const melting = Float64Array.from(density, (one) => meltingTemperature(one, matter));
  const [first, last] = [along.crystalFraction.findIndex((one) => one > 0), along.crystalFraction.indexOf(1)];
  picture(
    "adiabat",
    "An adiabat through freezing",
    "Carbon and oxygen expand from 3e7 g/cm\u00b3 and 8.6e6 K at constant entropy.",
    "Left: temperature over density. The adiabat meets the melting line, follows it while matter freezes, and leaves it as a " +
      "crystal, warmer than the supercooled liquid would be. Right: the crystal fraction grows from 0 to 1 on the way.",
    [
      {
        xLabel: "density [g/cm\u00b3]",
        yLabel: "temperature [K]",
        series: [
          {
            points: points(melting),
            mark: "dashes",
            colour: ink.axis,
            label: { words: "melting", at: 30, by: [-4, -10], anchor: "end" },
          },
          {
            points: points(liquid.temperature),
            mark: "dashes",
            colour: middle,
            label: { words: "supercooled liquid", at: 150, by: [8, 14] },
          },
          {
            points: points(along.temperature),
            mark: "line",
            colour: dark,
            label: { words: "adiabat", at: 6, by: [-8, 2], anchor: "end" },
          },
        ],
      },
      {
        linear: "y",
        xLabel: "density [g/cm\u00b3]",
        yLabel: "crystal fraction",
        series: [{ points: points(along.crystalFraction), mark: "line", colour: dark }],
      },
    ],
  );
  console.log("adiabat", {
    first: density[first],
    last: density[last],
    warmer: along.temperature.at(-1)! / liquid.temperature.at(-1)!,
  });
}

function cooling(): void {
  const year = 3.15576e16; // a thousand million Julian years, s
  const loss = (temperature: number): number => 4e-3 * (temperature / 1e7) ** 3.5;
  const zone = { matter, density: 1e7, temperatures: [3e7, 3e6], loss, steps: 200 } as const;
  const line = (eos: typeof full): [number, number][] => {
    const { time, temperature } = cool({ eos, ...zone });
    return Array.from(time, (one, i) => [one / year, temperature[i]!] as [number, number]);
  };
  const [real, liquid] = [line(full), line(withPhase(full, "liquid"))];
  picture(
    "cooling",
    "One zone cools and freezes",
    "Carbon and oxygen of 1e7 g/cm\u00b3 lose 4e-3 (T/1e7 K)^3.5 erg/(g s).",
    "Temperature over time from 3e7 to 3e6 K. It falls, stays at the melting temperature of 5.6e6 K while matter freezes, and falls " +
      "faster afterwards than a liquid would.",
    [
      {
        linear: "x",
        xLabel: "time [10\u2079 years]",
        yLabel: "temperature [K]",
        series: [
          {
            points: liquid,
            mark: "dashes",
            colour: middle,
            label: { words: "if it stayed liquid", at: 192, by: [-6, 18], anchor: "end" },
          },
          {
            points: real,
            mark: "line",
            colour: dark,
            label: { words: "freezing", at: 300, by: [0, -10], anchor: "middle" },
          },
        ],
      },
    ],
  );
  const pause = (real[400]![0] - real[200]![0]) * year;
  const { latentHeat, freeEnergyMismatch, temperature } = transition(full, 1e7, matter)!;
  console.log("cooling", {
    temperature,
    start: real[200]![0],
    pause: pause / year,
    end: real.at(-1)![0],
    latentHeat,
    freeEnergyMismatch,
    energy: pause * loss(temperature),
  });
}

shockTube();
star();
freezing();
cooling();
