/**
 * Nuclides: atomic and nuclear masses of AME2020, ground-state spins.
 *
 * Masses: Wang, Huang, Kondev, Audi & Naimi 2021, Chin. Phys. C 45, 030003; Huang et al. 2021, 45, 030002: 3558
 * ground states, 1008 of them extrapolated from trends. Nuclear mass M = m_atom m_u - Z m_e: the electrons are taken
 * off, their binding energy is not put back. It is 13.6 eV for H1 and 79 eV for He4; by the usual fit 14.4381 Z^2.39 +
 * 1.55468e-6 Z^5.35 eV (Lunney, Pearson & Thibault 2003, Rev. Mod. Phys. 75, 1021) 7e-7 of M for Fe56, 4e-6 for U238.
 */
import { atomicMassConstant, electronMass } from "../constants.js";
import { FermistateError } from "../errors.js";
import { nuclideTable } from "./nuclide-table.js";
import { groundStateSpin } from "./spins.js";

/** One nuclide in its ground state. */
export interface Nuclide {
  /** Element symbol and mass number, "C12"; the free neutron is "n". */
  readonly label: string;
  /** Element symbol; "n" for the free neutron. */
  readonly symbol: string;
  /** Mass number A. */
  readonly massNumber: number;
  /** Charge number Z. */
  readonly chargeNumber: number;
  /** Neutron number N = A - Z. */
  readonly neutronNumber: number;
  /** Mass of the neutral atom, u: the double nearest to the decimal that AME2020 prints. */
  readonly atomicMass: number;
  /** Standard uncertainty of `atomicMass`, u; 0 for C12, which defines the unit. */
  readonly atomicMassUncertainty: number;
  /** True where AME2020 marks the mass as estimated from trends, not measured. */
  readonly extrapolated: boolean;
  /** Spin J of the ground state; 0 for even-even nuclei, undefined where this library does not know it. */
  readonly groundStateSpin: number | undefined;
  /** Mass of the bare nucleus without electron binding, g. */
  readonly nuclearMass: number;
}

const known = /* @__PURE__ */ new Map<string, Nuclide>();

/**
 * The nuclide of a label: element symbol and mass number as in "C12", "n" for the free neutron.
 *
 * Each nuclide has one label: deuterium is "H2", the alpha particle "He4".
 *
 * @throws FermistateError `unknown-nuclide` where AME2020 has no such nuclide; the message names the nearest ones.
 * @example
 * ```ts
 * import { nuclide } from "fermistate";
 * nuclide("Fe56").atomicMass; // => 55.934935537 u
 * ```
 */
export function nuclide(label: string): Nuclide {
  let found = known.get(label);
  if (found === undefined) {
    found = read(label);
    known.set(label, found);
  }
  return found;
}

let labels: readonly string[] | undefined;

/** Labels of all 3558 nuclides of AME2020, by charge number, then mass number. */
export function nuclides(): readonly string[] {
  labels ??= Object.freeze(
    [...elements()].flatMap(([symbol, chargeNumber]) => {
      const { first, entries } = isotopes(chargeNumber);
      return entries.map((_, place) => labelOf(symbol, first + place));
    }),
  );
  return labels;
}

const labelOf = (symbol: string, massNumber: number): string => (symbol === "n" ? "n" : `${symbol}${massNumber}`);

let charges: ReadonlyMap<string, number> | undefined;

/** Charge number by symbol, in order of charge. */
function elements(): ReadonlyMap<string, number> {
  charges ??= new Map(nuclideTable.map((row, chargeNumber) => [row.slice(0, row.indexOf(" ")), chargeNumber]));
  return charges;
}

/** Entries of one row of the table, and the mass number of the first and the last. */
function isotopes(chargeNumber: number): { first: number; last: number; entries: readonly string[] } {
  const [, massNumber, ...entries] = (nuclideTable[chargeNumber] ?? "").split(" ");
  const first = Number(massNumber);
  return { first, last: first + entries.length - 1, entries };
}

/** Splits "C12" into symbol and mass number; undefined where the text is not of that form. */
function parts(label: unknown): { symbol: string; massNumber: number } | undefined {
  if (label === "n") return { symbol: "n", massNumber: 1 };
  const [, symbol, digits] = (typeof label === "string" && /^([A-Z][a-z]?)([1-9]\d{0,2})$/.exec(label)) || [];
  return symbol === undefined ? undefined : { symbol, massNumber: Number(digits) };
}

/** The nuclide from its row of the table. */
function read(label: unknown): Nuclide {
  const { symbol = "", massNumber = 0 } = parts(label) ?? {};
  const chargeNumber = elements().get(symbol);
  if (chargeNumber === undefined) throw unknown(label);
  const { first, entries } = isotopes(chargeNumber);
  const entry = entries[massNumber - first];
  if (entry === undefined) throw unknown(label);

  const [decimals = "", deviation] = entry.split(/[,#]/);
  const neutronNumber = massNumber - chargeNumber;
  // As text, so that the mass is rounded once.
  const atomicMass = Number(`${decimals < "5" ? massNumber : massNumber - 1}.${decimals}`);
  return Object.freeze({
    label: labelOf(symbol, massNumber),
    symbol,
    massNumber,
    chargeNumber,
    neutronNumber,
    atomicMass,
    atomicMassUncertainty: Number(`${deviation}e-${decimals.length}`),
    extrapolated: entry.includes("#"),
    groundStateSpin: groundStateSpin(labelOf(symbol, massNumber), chargeNumber, neutronNumber),
    nuclearMass: atomicMass * atomicMassConstant - chargeNumber * electronMass,
  });
}

function unknown(label: unknown): FermistateError {
  const form = "element symbol and mass number of a nuclide in AME2020, as in C12, or n";
  const near = nearest(label).join(", ");
  const allowed = near === "" ? form : `${form}; nearest: ${near}`;
  return new FermistateError("unknown-nuclide", { argument: "nuclide", given: label, allowed });
}

/** Other names in use, for the message only. */
const otherNames: readonly (readonly [RegExp, string])[] = [
  [/^(p|[Pp]roton)$/, "H1"],
  [/^([Dd]|[Dd]euteron|[Dd]euterium)$/, "H2"],
  [/^([Tt]|[Tt]riton|[Tt]ritium)$/, "H3"],
  [/^(a|[Aa]lpha)$/, "He4"],
  [/^(n[01]|1n|[Nn]eutron)$/, "n"],
];

/** Labels a caller may have meant: other spellings, the nearest isotopes, isobars of similar symbols. At most four. */
function nearest(label: unknown): string[] {
  const text = (typeof label === "string" ? label : "").slice(0, 20).replace(/[^A-Za-z0-9]/g, "");
  const alias = otherNames.find(([pattern]) => pattern.test(text));
  if (alias !== undefined) return [alias[1]];

  const letters = /[A-Za-z]+/.exec(text)?.[0] ?? "";
  const symbol = letters.slice(0, 1).toUpperCase() + letters.slice(1).toLowerCase();
  const massNumber = Number(/\d+/.exec(text)?.[0] ?? Number.NaN);
  const found: string[] = [];
  const chargeNumber = elements().get(symbol);
  if (chargeNumber !== undefined) {
    const { first, last } = isotopes(chargeNumber);
    if (massNumber >= first && massNumber <= last) return [labelOf(symbol, massNumber)];
    found.push(labelOf(symbol, massNumber > last ? last : first));
    if (Number.isNaN(massNumber)) found.push(labelOf(symbol, last));
  }
  for (const [other, otherCharge] of elements()) {
    const { first, last } = isotopes(otherCharge);
    const similar = other !== "n" && other !== symbol && [...other].some((letter, at) => symbol[at] === letter);
    if (similar && massNumber >= first && massNumber <= last) found.push(labelOf(other, massNumber));
  }
  return found.slice(0, 4);
}
