/** What a grid's numbers mean and where they hold, in words that go with them into every file. */
import type { Domain } from "../thermodynamics/contribution.js";
import type { Grid } from "./grid.js";

/** What a caller may add to the files and charts of a grid. */
export interface GridTexts {
  /** Title. @defaultValue what the grid is made of */
  readonly title?: string;
  /** A remark of the caller, such as where the composition comes from. */
  readonly note?: string;
}

/** The title of a grid: the caller's, or what it is made of. */
export function titleOf(grid: Grid, texts: GridTexts = {}): string {
  return texts.title ?? `Equation of state of ${grid.composition.name}`;
}

/** The conventions of all numbers of this library. */
export const conventions: readonly string[] = [
  "Units are cgs; unit 1 is a pure number.",
  "density is baryon mass density: baryon number density times the atomic mass constant, conserved by reactions; it is " +
    "not the physical mass density, which differs by nuclear binding (0.8 % for H1 against C12).",
  "Compositions are nucleon fractions X (integer mass numbers A): the number density of a species is X density/(A m_u).",
  "Specific energies leave out the rest mass of ions and of net electrons and include 2 m_e c^2 of each " +
    "electron-positron pair.",
];

/** Contributions that know no interaction. */
const ideal: readonly string[] = ["electrons and positrons", "ideal ions", "radiation"];

/** True where no contribution is known to hold an interaction. */
export function isIdeal(contributions: readonly string[]): boolean {
  return contributions.every((name) => ideal.includes(name));
}

/** Where numbers of these contributions hold, and what is not in them. */
export function validity(domain: Domain, contributions: readonly string[]): string[] {
  const [thinnest, densest] = domain.density;
  const [coldest, hottest] = domain.temperature;
  const zero = domain.zeroTemperature ? "0 and " : "";
  const [thin, dense, cold, hot] = [thinnest, densest, coldest, hottest].map(short);
  const found = [
    `Answers at density ${thin} to ${dense} g/cm^3 and temperature ${zero}${cold} to ${hot} K; a number is physical ` +
      "only where its assumptions hold.",
    "Matter is fully ionised and its composition fixed: no recombination, no electron capture, no nuclear reactions.",
  ];
  if (isIdeal(contributions)) {
    found.push(
      "Ideal plasma: no Coulomb interactions and no crystal, so the pressure is 1 to 30 % too high where white dwarfs " +
        "live (least in hot or light-element matter, most in cold dense iron).",
    );
  }
  if (contributions.includes("ideal ions")) {
    found.push("Ions are a classical gas: in cold dense matter, where they would freeze, its entropy turns negative.");
  }
  return found;
}

/** "1e18" and not a row of zeros. */
function short(value: number): string {
  return value >= 1e6 ? value.toExponential().replace("+", "") : String(value);
}

/** How the rows run. */
export const orderOfRows: string =
  "Rows run through all densities of the lowest temperature, then through those of the next.";
