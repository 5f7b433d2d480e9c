/** How a composition differs from the one that a table holds. */
import { FermistateError } from "../errors.js";
import type { Composition, Species } from "./composition-members.js";

/** Nucleon fractions that differ by no more are the same: ten printed digits, as in the sum that `composition` asks for. */
const tolerance = 1e-10;

/** Throws `invalid-composition` where `given` is not the one composition `own` of `holder` ("this table"). */
export function requireSame(given: Composition, own: Composition, holder: string): void {
  const text = compositionDifference(given, own);
  if (text === undefined) return;
  const allowed = `${own.name}, the one composition of ${holder}`;
  throw new FermistateError("invalid-composition", {
    argument: "composition",
    given: `${given.name} (${text})`,
    allowed,
  });
}

/** The first species by which `given` differs from `own`, in words; undefined where both are the same matter. */
function compositionDifference(given: Composition, own: Composition): string | undefined {
  const theirs = new Map(given.species.map((one) => [one.label, one]));
  for (const one of own.species) {
    const other = theirs.get(one.label);
    theirs.delete(one.label);
    const text = difference(other, one);
    if (text !== undefined) return text;
  }
  for (const other of theirs.values()) {
    const text = difference(other, undefined);
    if (text !== undefined) return text;
  }
  return undefined;
}

function difference(given: Species | undefined, own: Species | undefined): string | undefined {
  const [a, b] = [given?.nucleonFraction ?? 0, own?.nucleonFraction ?? 0];
  const label = (given ?? own)!.label;
  if (Math.abs(a - b) > tolerance) return `${label} ${a} instead of ${b}`;
  if (given === undefined || own === undefined) return undefined;
  for (const member of ["massNumber", "chargeNumber", "ionMass"] as const) {
    if (Math.abs(given[member] - own[member]) > tolerance * own[member]) {
      return `${label} with ${member} ${given[member]} instead of ${own[member]}`;
    }
  }
  return undefined;
}
