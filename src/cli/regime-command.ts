/** `fermistate regime`: what kind of matter is at a point, by which numbers, and which assumptions are strained. */
import type { CoulombPlasma } from "../coulomb/coulomb-plasma.js";
import { meltingTemperature, type Phase } from "../coulomb/phase.js";
import { isFermistateError } from "../errors.js";
import { regimeOfState } from "../grids/findings.js";
import type { Composition } from "../matter/composition.js";
import { type Regime, regime } from "../regime/regime.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { libraryVersion } from "../version.js";
import { type Command, command } from "./command.js";
import { matterOf, matterOptions } from "./matter.js";
import { shortText } from "./print.js";
import { flag, number } from "./readers.js";
import { capturesText, findingsText, kindText, parametersText, regimeData, speciesText } from "./regime-text.js";

export const regimeCommand: Command = command({
  name: "regime",
  summary: "what kind of matter it is, which assumptions are strained",
  usage: "regime --density G/CM3 --temperature KELVIN --composition LABEL=X,...",
  options: {
    density: { value: "G/CM3", help: "baryon mass density, g/cm^3", read: number },
    temperature: { value: "KELVIN", help: "temperature, K", read: number },
    ...matterOptions,
    json: { help: "print JSON with all digits instead of tables", read: flag },
  },
  examples: [
    [
      "regime --density 2e6 --temperature 1e6 --composition C12=0.5,O16=0.5",
      "a cold white dwarf, by its numbers a crystal",
    ],
    ["regime --density 2e9 --temperature 1e8 --composition Fe56=1", "iron too dense to stay iron"],
    ["regime --density 10 --temperature 1e5 --composition C12=1 --json", "a sum that is no stable matter"],
  ],
  remarks:
    "Strained: an effect of some per cent or more is missing. Outside: the assumption does not describe this matter. " +
    "Points that state refuses as unstable are judged too.",
  async run(options, io) {
    const { equationOfState, matter } = matterOf(options);
    const found = regimeAt(equationOfState, options.density, options.temperature, matter);
    io.out(options.json ? regimeJson(equationOfState, found) : regimeText(found));
  },
});

/** The regime as the equation of state has it, also where its sum is refused as unstable. */
function regimeAt(equationOfState: EquationOfState, density: number, temperature: number, matter: Composition): Regime {
  try {
    return regimeOfState(regime, equationOfState, equationOfState.state(density, temperature, matter));
  } catch (error) {
    if (!isFermistateError(error) || error.code !== "unstable") throw error;
    const phase = phaseOf(equationOfState, density, temperature, matter);
    return regime(density, temperature, matter, { equationOfState, ...(phase === undefined ? {} : { phase }) });
  }
}

/** The phase that the Coulomb terms take; undefined where there are none. */
function phaseOf(
  { contributions }: EquationOfState,
  density: number,
  temperature: number,
  matter: Composition,
): Phase | undefined {
  const plasma = contributions.find((part): part is CoulombPlasma => part.name === "Coulomb plasma");
  if (plasma === undefined) return undefined;
  const { phase, meltingCoupling } = plasma.options;
  if (phase !== "equilibrium") return phase;
  return temperature <= meltingTemperature(density, matter, meltingCoupling) ? "crystal" : "liquid";
}

function regimeText(found: Regime): string {
  const blocks = [
    ["What kind of matter", kindText(found)],
    ["Parameters", parametersText(found)],
    ...(found.parameters.species.length === 0 ? [] : [["Nuclei", speciesText(found)]]),
    ["Electron capture", capturesText(found)],
    ["Findings", findingsText(found)],
  ];
  const head = `Regime of ${found.composition} at ${shortText(found.density)} g/cm^3 and ${shortText(found.temperature)} K`;
  return `${[head, ...blocks.map((block) => block.join("\n"))].join("\n\n")}\n`;
}

function regimeJson(equationOfState: EquationOfState, found: Regime): string {
  const document = {
    creator: `fermistate ${libraryVersion}`,
    equationOfState: equationOfState.name,
    composition: found.composition,
    density: { value: found.density, unit: "g/cm^3" },
    temperature: { value: found.temperature, unit: "K" },
    ...regimeData(found),
  };
  return `${JSON.stringify(document, null, 2)}\n`;
}
