/** `fermistate limiting-mass`: the limiting mass of a composition, one assumption after the other. */
import * as z from "zod/mini";
import { FermistateError } from "../errors.js";
import type { LadderRung } from "../structure/ladder-rung.js";
import { limitingMassLadder } from "../structure/limiting-mass-ladder.js";
import { libraryVersion } from "../version.js";
import { type Command, command } from "./command.js";
import { compositionOf, matterOptions } from "./matter.js";
import { numberText, table, wrapped } from "./print.js";
import { flag, number } from "./readers.js";

const { composition, normalise } = matterOptions;

export const limitingMassCommand: Command = command({
  name: "limiting-mass",
  summary: "the limiting mass, one assumption after the other",
  usage: "limiting-mass --composition LABEL=X,... [--temperature KELVIN | --cold]",
  options: {
    composition,
    normalise,
    temperature: {
      value: "KELVIN",
      help: "temperature of the isothermal core of the last rung, K, 1e6 to 5e8; 1e8 by default",
      read: z.optional(number),
    },
    cold: { help: "leave out the isothermal core", read: flag },
    json: { help: "print JSON with all digits instead of a table", read: flag },
  },
  examples: [
    ["limiting-mass --composition C12=0.5,O16=0.5", "carbon and oxygen: from the estimate to the star"],
    ["limiting-mass --composition Fe56=1 --temperature 1e7 --json", "iron, as JSON"],
  ],
  remarks:
    "Each rung keeps what the rungs above it assume but for what it replaces; centre is its central density. A dash: no star has this mass, or stars of " +
    "all central densities have it. Not in it: rotation, magnetic fields, burning. The first electron capture counts, " +
    "of however rare a nuclide.",
  async run(options, io) {
    const matter = compositionOf(options);
    const { temperature = 1e8, cold } = options;
    if (cold && options.temperature !== undefined) {
      throw new FermistateError("invalid-option", {
        argument: "--cold",
        given: "--temperature too",
        allowed: "one of them",
      });
    }
    const rungs = limitingMassLadder(matter, { temperature: cold ? false : temperature });
    io.out(options.json ? ladderJson(matter.name, rungs) : ladderText(matter.name, rungs));
  },
});

function ladderText(name: string, rungs: readonly LadderRung[]): string {
  const digits = (value: number | undefined): string => (value === undefined ? "-" : numberText(value, 5));
  const head = ["", "", "mass", "radius", "centre", "ends by"];
  const units = ["", "", "M_sun", "cm", "g/cm^3", ""];
  const rows = rungs.map((rung, i) => [
    String(i + 1),
    rung.name,
    rung.solarMasses.toFixed(5),
    digits(rung.radius),
    digits(rung.centralDensity),
    rung.end,
  ]);
  const notes = rungs.map(({ assumes, message }, i) => wrapped(`${i + 1}  ${assumes}. ${message}`, 78, "  ", "     "));
  return [
    `Limiting mass of white dwarfs of ${name}`,
    "",
    table([head, units, ...rows], "rlrrrl"),
    "",
    "What each rung assumes, and why its masses end",
    ...notes,
    "",
  ].join("\n");
}

/** Members that do not exist are null. */
function ladderJson(name: string, rungs: readonly LadderRung[]): string {
  const document = {
    creator: `fermistate ${libraryVersion}`,
    composition: name,
    units: { mass: "g", solarMasses: "M_sun", radius: "cm", centralDensity: "g/cm^3" },
    rungs: rungs.map(({ matter, radius = null, centralDensity = null, ...rung }) => ({
      ...rung,
      radius,
      centralDensity,
      matter: matter?.name ?? null,
    })),
  };
  return `${JSON.stringify(document, null, 2)}\n`;
}
