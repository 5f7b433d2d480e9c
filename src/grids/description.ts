/** What a grid's numbers mean, in words that go with them into every file. */
import { requireKnown } from "../errors.js";
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
  requireKnown("texts", texts, ["title", "note"]);
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

/** How the rows run. */
export const orderOfRows: string =
  "Rows run through all densities of the lowest temperature, then through those of the next.";
