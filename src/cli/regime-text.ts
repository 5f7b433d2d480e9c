/** The regime of a point in words and as plain data: kind of matter, parameters with units, findings. */
import type { Finding } from "../regime/finding.js";
import type { RegimeParameters, SpeciesParameters } from "../regime/parameters.js";
import type { Regime } from "../regime/regime.js";
import { numberText, table, wrapped } from "./print.js";

/** Unit ("1" for a pure number) and meaning of each parameter, in the order of the tables. */
const parameters: Readonly<Record<Exclude<keyof RegimeParameters, "species">, readonly [unit: string, about: string]>> =
  {
    relativityParameter: ["1", "x_r, Fermi momentum over m_e c"],
    fermiTemperature: ["K", "Fermi energy over k"],
    reducedTemperature: ["1", "T over the non-relativistic Fermi temperature"],
    electronChemicalPotential: ["erg", "without rest energy"],
    electronDegeneracy: ["1", "the same over kT"],
    electronPlasmaTemperature: ["K", "hbar omega_p/k of the electrons"],
    pairFraction: ["1", "positrons over net electrons"],
    radiationPressureFraction: ["1", "photons over all pressure"],
    coulombPressureShare: ["1", "Coulomb over all pressure, an estimate"],
    electronCoupling: ["1", "Gamma_e = e^2/(a_e kT)"],
    ionCoupling: ["1", "Gamma of the ions"],
    densityParameter: ["1", "r_s, electron sphere over Bohr radius"],
    ionDensityParameter: ["1", "R_S of the ions; below 160 no crystal"],
    ionPlasmaTemperature: ["K", "hbar omega_p/k of the ions"],
    ionisationParameter: ["1", "largest r_s Z^(2/3); small where ionised"],
  };

const ofSpecies: Readonly<Record<Exclude<keyof SpeciesParameters, "label">, readonly [unit: string, head: string]>> = {
  coupling: ["1", "coupling"],
  plasmaTemperature: ["K", "T_plasma"],
  quantumParameter: ["1", "T_plasma/T"],
  ionDensityParameter: ["1", "R_S"],
  ionisationParameter: ["1", "r_s Z^(2/3)"],
};

const namesOf = <T extends object>(record: T): (keyof T)[] => Object.keys(record) as (keyof T)[];

/** "degenerate, relativistic, crystal". */
export function kindText({ kind }: Regime): string {
  return `  ${kind.join(", ")}`;
}

/** Each finding: what is judged, against what, and what it means. */
export function findingsText({ findings }: Regime): string {
  if (findings.length === 0) return "  none";
  return findings.map(findingText).join("\n");
}

function findingText({ code, severity, value, threshold, quantity, species, message }: Finding): string {
  const unit = quantity.unit === "1" ? "" : ` ${quantity.unit}`;
  const side = value > threshold ? "above" : "below";
  // The smallest positive number is the limit of what must be above zero.
  const limit = threshold === Number.MIN_VALUE ? "not above 0" : `${side} ${numberText(threshold, 4)}${unit}`;
  return [
    `  ${code}: ${severity}${species === undefined ? "" : ` (${species})`}`,
    wrapped(`${quantity.name} is ${numberText(value, 4)}${unit}, ${limit}`, 78, "    "),
    wrapped(message, 78, "    "),
  ].join("\n");
}

/** Parameters of the point, then those of each charged species. */
export function parametersText({ parameters: of }: Regime): string {
  const rows = namesOf(parameters).map((name) => {
    const [unit, about] = parameters[name];
    return [name, numberText(of[name], 6), unit === "1" ? "" : unit, about];
  });
  return table(rows, "l.ll");
}

/** One row per charged species. */
export function speciesText({ parameters: { species } }: Regime): string {
  const heads = Object.values(ofSpecies);
  const rows = species.map((one) => [one.label, ...namesOf(ofSpecies).map((name) => numberText(one[name], 6))]);
  const units = heads.map(([unit]) => (unit === "1" ? "" : unit));
  return table([["", ...heads.map(([, head]) => head)], ["", ...units], ...rows], "lrrrrr");
}

/** Thresholds of electron capture, one row per nuclide that has one. */
export function capturesText({ captures, captureChecked }: Regime): string {
  const head = ["", "becomes", "energy", "lattice adds", "cold density", "with lattice"];
  const units = ["", "", "erg", "erg", "g/cm^3", "g/cm^3"];
  const rows = captures.map((one) => {
    const numbers = [one.energy, one.latticeShift, one.density, one.densityWithLattice];
    return [one.species, one.product, ...numbers.map((value) => numberText(value, 6))];
  });
  const lines = rows.length === 0 ? [] : [table([head, units, ...rows], "llrrrr")];
  if (!captureChecked) lines.push("  not known for every nucleus of this composition");
  return lines.length === 0 ? "  none" : lines.join("\n");
}

/** The regime as plain data with units; infinities, which JSON has no number for, as "INF" and "-INF". */
export function regimeData(of: Regime): Record<string, unknown> {
  const { species, ...values } = of.parameters;
  const units = { ...parameters, ...ofSpecies };
  return finite({
    kind: of.kind,
    ...(of.phase === undefined ? {} : { phase: of.phase }),
    parameters: Object.fromEntries(
      namesOf(values).map((name) => [name, { value: values[name], unit: units[name][0], description: units[name][1] }]),
    ),
    species: species.map(({ label, ...one }) => ({
      label,
      ...Object.fromEntries(namesOf(one).map((name) => [name, { value: one[name], unit: ofSpecies[name][0] }])),
    })),
    captures: of.captures,
    captureChecked: of.captureChecked,
    findings: of.findings,
  }) as Record<string, unknown>;
}

function finite(value: unknown): unknown {
  if (typeof value === "number") return Number.isFinite(value) ? value : numberText(value);
  if (Array.isArray(value)) return value.map(finite);
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(Object.entries(value).map(([name, one]) => [name, finite(one)]));
}
