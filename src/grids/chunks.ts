/** Long texts in pieces, and one string of them. */
import { FermistateError } from "../errors.js";

/** Characters of a piece: large enough that writing one costs little, small enough to be no burden. */
export const pieceLength: number = 65536;

/** All pieces as one string; `too-large` beyond the engine's longest string (about 5e8 characters). */
export function joined(pieces: Iterable<string>, instead: string): string {
  try {
    return [...pieces].join("");
  } catch (error) {
    if (!(error instanceof RangeError)) throw error;
    const allowed = `a text as long as this engine's longest string; use ${instead} for larger grids`;
    throw new FermistateError("too-large", { argument: "grid", given: "a longer text", allowed });
  }
}
