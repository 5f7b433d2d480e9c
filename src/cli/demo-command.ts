/** `fermistate demo`: an invented white dwarf, its core and its mantle, as grids, charts and a first look. */
import { join } from "node:path";
import * as z from "zod/mini";
import { transition } from "../coulomb/transition.js";
import { logarithmicAxis } from "../grids/axes.js";
import { defaultQuantities, type Grid, grid } from "../grids/grid.js";
import { type Composition, composition } from "../matter/composition.js";
import { breakdown } from "../thermodynamics/breakdown.js";
import type { QuantityName } from "../thermodynamics/quantities.js";
import { whiteDwarfMatter } from "../white-dwarf-matter.js";
import { type Command, command } from "./command.js";
import { checkOutput, type Output, writeOutput } from "./output.js";
import { numberText, percentText, shortText, table, timeText, wrapped } from "./print.js";
import { path } from "./readers.js";

const note =
  "Invented scenario, no observed star: a carbon-oxygen white dwarf that takes matter from a helium-rich companion.";

/** The parts of the star: what they are made of, and where in density and temperature they may be found. */
const parts = [
  {
    name: "core",
    title: "Core of an accreting white dwarf (invented)",
    fractions: { C12: 0.5, O16: 0.48, Ne22: 0.02 },
    density: { from: 1e4, to: 1e10, pointsPerDecade: 20 },
    temperature: [1e6, 1e7, 1e8, 1e9],
  },
  {
    name: "mantle",
    title: "Helium mantle of an accreting white dwarf (invented)",
    fractions: { He4: 0.98, N14: 0.02 },
    density: { from: 1e1, to: 1e7, pointsPerDecade: 20 },
    temperature: [1e7, 3e7, 1e8, 3e8, 1e9],
  },
] as const;

const charts: readonly QuantityName[] = ["pressure", "gamma1", "electronDegeneracy"];

export const demoCommand: Command = command({
  name: "demo",
  summary: "an invented white dwarf: grids, charts and a first look",
  usage: "demo [--out FOLDER]",
  options: {
    out: {
      value: "FOLDER",
      help: "folder for the files, made if need be; fermistate-demo by default; files of an earlier demo are replaced",
      read: z._default(path, "fermistate-demo"),
    },
  },
  examples: [["demo", "writes ./fermistate-demo and says what to look at"]],
  remarks: note,
  async run({ out }, io) {
    const equationOfState = whiteDwarfMatter();
    const outputOptions = { overwrite: true, createFolders: true };
    const outputs = parts.map(
      ({ name, title }): Output => ({
        base: join(out, name),
        csv: true,
        json: true,
        npz: false,
        parquet: false,
        charts,
        title,
        note,
      }),
    );
    await checkOutput(outputs, io.cwd, outputOptions);
    const start = performance.now();
    const made = parts.map((part, i) => {
      const quantities = [...defaultQuantities, "crystalFraction"] as const;
      const options = { density: logarithmicAxis(part.density), temperature: part.temperature, quantities };
      return { grid: grid(equationOfState, composition(part.fractions), options), output: outputs[i]! };
    });
    const states = made.reduce((sum, one) => sum + one.grid.rows, 0);
    const took = performance.now() - start;
    const list = await writeOutput(made, io.cwd, outputOptions);
    io.out(
      [
        wrapped(note),
        "",
        `${states} states in ${timeText(took)}: ${equationOfState.name}`,
        ...made.map(({ grid: one }, i) => `  ${parts[i]!.name.padEnd(8)}${one.composition.name}`),
        "",
        firstLook(made[0]!.grid.composition),
        "",
        freezing(made[0]!.grid),
        "",
        twoStates(made[0]!.grid.composition),
        "",
        "Files",
        list,
        "",
        `Open ${join(out, "core-pressure.svg")} in a browser. One state in full, and what is strained there:`,
        "  npx fermistate state --density 2e6 --temperature 1e7 --composition C12=0.5,O16=0.48,Ne22=0.02",
        "",
      ].join("\n"),
    );
  },
});

/** A few densities and temperatures of the core, side by side. */
function firstLook(matter: Composition): string {
  const equationOfState = whiteDwarfMatter();
  const temperatures = [1e7, 1e9];
  const shown = ["pressure", "electronDegeneracy", "gamma1"] as const;
  const head = ["density", ...temperatures.flatMap((t) => [`${shortText(t)} K:`, "pressure", "degeneracy", "gamma1"])];
  const rows = [1e4, 1e6, 1e8, 1e10].map((density) => [
    shortText(density),
    ...temperatures.flatMap((temperature) => {
      const state = equationOfState.state(density, temperature, matter);
      return ["", ...shown.map((name) => numberText(state[name]!, name === "gamma1" ? 5 : 4))];
    }),
  ]);
  const units = ["g/cm^3", ...temperatures.flatMap(() => ["", "dyn/cm^2", "mu/kT", ""])];
  return `Core: cold and hot\n${table([head, units, ...rows], "rrrrrrrrr")}`;
}

/** Where the core is a crystal: the melting temperature and the latent heat along its densities. */
function freezing({ composition: matter, columns, rows }: Grid): string {
  const equationOfState = whiteDwarfMatter();
  const lines = [1e4, 1e6, 1e8, 1e10].flatMap((density) => {
    const melting = transition(equationOfState, density, matter);
    if (melting === undefined) return [];
    return [[shortText(density), numberText(melting.temperature, 4), numberText(melting.latentHeat, 4)]];
  });
  const frozen = columns.crystalFraction!.reduce((sum, one) => sum + one, 0);
  const heads = [
    ["density", "freezes below", "latent heat"],
    ["g/cm^3", "K", "erg/g"],
  ];
  return `Core: ${frozen} of ${rows} states are a crystal\n${table([...heads, ...lines], "rrr")}`;
}

/** Who carries two states of the core, one liquid and one a crystal. */
function twoStates(matter: Composition): string {
  const density = 2e6;
  const equationOfState = whiteDwarfMatter();
  const tables = [1e7, 1e6].map((temperature) => {
    const { state, shares } = breakdown(equationOfState, density, temperature, matter);
    const cells = shares.map((share) => [
      share.name,
      percentText(share.pressure, state.pressure),
      percentText(share.specificEntropy, state.specificEntropy),
    ]);
    const phase = state.crystalFraction === 1 ? "crystal" : "liquid";
    const rows = [["", "of pressure", "of entropy"], ...cells];
    return `${phase} at ${shortText(temperature)} K\n${table(rows, "lrr", "    ")}`;
  });
  return [`Core at ${shortText(density)} g/cm^3: who carries what`, ...tables].join("\n  ");
}
