/** `fermistate state`: one state, all its quantities in groups, what each contribution adds, and what is strained. */
import { regimeOfState } from "../grids/findings.js";
import { validityOf } from "../grids/validity.js";
import { type Regime, regime } from "../regime/regime.js";
import { type Breakdown, breakdown } from "../thermodynamics/breakdown.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";
import { type QuantityName, quantities, quantityNames } from "../thermodynamics/quantities.js";
import { libraryVersion } from "../version.js";
import { type Command, command } from "./command.js";
import { matterOptions } from "./matter.js";
import { numberText, percentText, shortText, table, wrapped } from "./print.js";
import { flag, number } from "./readers.js";
import { findingsText, kindText, regimeData } from "./regime-text.js";
import { chosenMatter, tableOption } from "./table-file.js";

export const stateCommand: Command = command({
  name: "state",
  summary: "one state: every quantity, and what each contribution adds",
  usage: "state --density G/CM3 --temperature KELVIN --composition LABEL=X,...",
  options: {
    density: { value: "G/CM3", help: "baryon mass density, g/cm^3", read: number },
    temperature: { value: "KELVIN", help: "temperature, K; 0 is legal in crystals and without ions", read: number },
    ...matterOptions,
    ...tableOption,
    json: { help: "print JSON with all digits instead of tables", read: flag },
  },
  examples: [
    ["state --density 2e6 --temperature 1e7 --composition C12=0.5,O16=0.5", "the centre of a white dwarf"],
    ["state --density 2e6 --temperature 1e6 --composition C12=0.5,O16=0.5", "the same, cold: a crystal"],
    ["state --density 1e4 --temperature 2e9 --composition He4=1 --json", "hot enough for electron-positron pairs"],
    ["state --density 1e6 --temperature 0 --composition Fe56=1 --without ions,radiation", "cold electrons alone"],
  ],
  remarks: "Tables show ten digits. Meanings of the quantities: fermistate help quantities.",
  async run(options, io) {
    const { density, temperature } = options;
    const { equationOfState, matter } = await chosenMatter(options, io);
    const parts = breakdown(equationOfState, density, temperature, matter);
    const kind = regimeOfState(regime, equationOfState, parts.state);
    io.out(options.json ? stateJson(equationOfState, parts, kind) : stateText(equationOfState, parts, kind));
  },
});

/** Quantities in the order of the tables; those in no group come last. */
const groups: readonly (readonly [title: string, names: readonly QuantityName[]])[] = [
  [
    "Pressure, energy, entropy",
    [
      "pressure",
      "specificEnergy",
      "specificEntropy",
      "specificFreeEnergy",
      "specificEnthalpy",
      "radiationPressureFraction",
    ],
  ],
  [
    "Response",
    [
      "heatCapacityV",
      "heatCapacityP",
      "densityExponent",
      "temperatureExponent",
      "gamma1",
      "gamma2",
      "gamma3",
      "adiabaticGradient",
      "soundSpeed",
      "bulkModulus",
    ],
  ],
  ["Electrons", ["electronDensity", "electronChemicalPotential", "electronDegeneracy", "positronDensity"]],
  [
    "Plasma",
    [
      "relativityParameter",
      "densityParameter",
      "electronCoupling",
      "ionCoupling",
      "fermiTemperature",
      "ionPlasmaTemperature",
      "crystalFraction",
    ],
  ],
  [
    "Partial derivatives",
    [
      "pressureByDensity",
      "pressureByTemperature",
      "energyByDensity",
      "energyByTemperature",
      "entropyByDensity",
      "entropyByTemperature",
    ],
  ],
];

/** The state as text. */
function stateText(equationOfState: EquationOfState, { state, shares }: Breakdown, kind: Regime): string {
  const { density, temperature, composition } = state;
  const grouped = new Set(groups.flatMap(([, names]) => names));
  const rest = quantityNames.filter((name) => !grouped.has(name) && state[name] !== undefined);
  const all = rest.length === 0 ? groups : [...groups, ["Other", rest] as const];
  const rows = all.map(([, names]) =>
    names.filter((name) => state[name] !== undefined).map((name) => rowOf(state, name)),
  );
  // One width for all groups, so that numbers stand below each other.
  const lines = table(rows.flat(), "l.l").split("\n");
  const blocks = all.map(([title], i) => [title, ...lines.splice(0, rows[i]!.length)].join("\n"));
  return [
    `State of ${composition.name} at ${shortText(density)} g/cm^3 and ${shortText(temperature)} K`,
    `electrons per nucleon ${numberText(composition.electronsPerNucleon, 6)}, mean mass number ` +
      `${numberText(composition.meanMassNumber, 6)}, mean charge number ${numberText(composition.meanCharge, 6)}`,
    "",
    "What kind of matter",
    kindText(kind),
    "",
    blocks.join("\n\n"),
    "",
    "Contributions",
    shareTable(shares, state),
    "",
    "Findings",
    findingsText(kind),
    "",
    "Where the numbers hold",
    ...validityOf(equationOfState).map((one) => wrapped(one, 78, "  ")),
    "",
  ].join("\n");
}

function rowOf(state: State, name: QuantityName): string[] {
  const { unit } = quantities[name];
  return [name, numberText(state[name]!), unit === "1" ? "" : unit];
}

function shareTable(shares: Breakdown["shares"], state: State): string {
  const cell = (part: number, whole: number): string[] => [numberText(part, 6), percentText(part, whole)];
  const head = ["", "pressure", "", "specificEnergy", "", "specificEntropy", ""];
  const units = ["", "dyn/cm^2", "", "erg/g", "", "erg/(g K)", ""];
  const rows = shares.map((share) => [
    share.name,
    ...cell(share.pressure, state.pressure),
    ...cell(share.specificEnergy, state.specificEnergy),
    ...cell(share.specificEntropy, state.specificEntropy),
  ]);
  return table([head, units, ...rows], "lrrrrrr");
}

/** The state as JSON text; infinities, which JSON has no number for, as "INF" and "-INF". */
function stateJson(equationOfState: EquationOfState, { state, shares }: Breakdown, kind: Regime): string {
  const { density, temperature, composition } = state;
  const known = quantityNames.filter((name) => state[name] !== undefined);
  const document = {
    creator: `fermistate ${libraryVersion}`,
    equationOfState: equationOfState.name,
    composition: {
      name: composition.name,
      species: composition.species.map(({ label, nucleonFraction }) => ({ label, nucleonFraction })),
    },
    density: { value: density, unit: "g/cm^3" },
    temperature: { value: temperature, unit: "K" },
    quantities: Object.fromEntries(known.map((name) => [name, { value: plain(state[name]!), ...quantities[name] }])),
    contributions: shares,
    regime: regimeData(kind),
    validity: validityOf(equationOfState),
  };
  return `${JSON.stringify(document, null, 2)}\n`;
}

function plain(value: number): number | string {
  return Number.isFinite(value) ? value : numberText(value);
}
