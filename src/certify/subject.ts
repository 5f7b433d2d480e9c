/** What is certified: an equation of state, split into terms that have a reference and terms that have none. */
import { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { combine } from "../thermodynamics/combine.js";
import type { Contribution, Physics } from "../thermodynamics/contribution.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { quantityNames } from "../thermodynamics/quantities.js";
import { type CertifiedQuantity, derivativeNames } from "./reference-quantities.js";
import type { ReferenceTerm } from "./reference-terms.js";
import type { SeriesLength } from "./series.js";
import { hasReference } from "./terms.js";

/** An equation of state under examination. */
export interface Subject {
  readonly equationOfState: EquationOfState;
  /** Formulas with a reference. */
  readonly physics: readonly Physics[];
  /** Contributions without one: their own values stand in the sum, and the certificate names them. */
  readonly uncertified: readonly Contribution[];
  /** Sum of the latter. */
  readonly rest: EquationOfState | undefined;
}

/** Splits an equation of state. @throws `invalid-option` where nothing has a reference */
export function subjectOf(equationOfState: EquationOfState): Subject {
  const isGood = typeof equationOfState?.state === "function" && Array.isArray(equationOfState.contributions);
  if (!isGood) {
    const allowed = "an equation of state, such as whiteDwarfMatter() or combine(...)";
    throw new FermistateError("invalid-option", { argument: "equationOfState", given: equationOfState, allowed });
  }
  const isKnown = ({ physics = [] }: Contribution): boolean => physics.length > 0 && physics.every(hasReference);
  const certified = equationOfState.contributions.filter(isKnown);
  const uncertified = equationOfState.contributions.filter((one) => !isKnown(one));
  if (certified.length === 0) {
    const allowed = "contributions that say what they are (physics) and have an independent reference";
    const given = equationOfState.name;
    throw new FermistateError("invalid-option", { argument: "equationOfState", given, allowed });
  }
  return {
    equationOfState,
    physics: certified.flatMap(({ physics = [] }) => physics),
    uncertified,
    rest: uncertified.length === 0 ? undefined : combine(...uncertified),
  };
}

/** The terms without a reference, as the equation of state gives them. */
export function uncertifiedTerms(
  { rest }: Subject,
  composition: Composition,
  density: number,
  temperature: number,
  length: SeriesLength,
): readonly ReferenceTerm[] {
  if (rest === undefined) return [];
  if (temperature === 0) {
    const allowed = "> 0 K where a contribution has no reference";
    throw new FermistateError("outside-domain", { argument: "temperature", given: 0, allowed });
  }
  const f = rest.freeEnergy(density, temperature, composition, length === 6 ? 2 : 3);
  const derivatives = derivativeNames.slice(0, length).map((name) => new Decimal(f[name]!));
  return [{ name: rest.name, derivatives }];
}

/** Quantities certified unless others are asked for. */
const defaultQuantities: readonly CertifiedQuantity[] = [
  ...(["pressure", "specificEnergy", "specificEntropy", "specificFreeEnergy", "heatCapacityV"] as const),
  ...(["densityExponent", "temperatureExponent", "gamma1", "gamma3", "adiabaticGradient", "soundSpeed"] as const),
];

/** Checked names of quantities. */
export function requireQuantities(
  names: readonly CertifiedQuantity[] = defaultQuantities,
): readonly CertifiedQuantity[] {
  const known: readonly string[] = [...quantityNames, ...derivativeNames];
  const allowed = "names of quantities of a state, or of the derivatives of the free energy f00, f10, f01 ... f22";
  if (!Array.isArray(names) || names.length === 0) {
    throw new FermistateError("invalid-option", { argument: "quantities", given: names, allowed });
  }
  for (const name of names) {
    if (!known.includes(name)) {
      throw new FermistateError("unavailable-quantity", { argument: "quantities", given: name, allowed });
    }
  }
  return [...new Set<CertifiedQuantity>(names)];
}

/** How many derivatives of the free energy the quantities need. */
export function lengthFor(names: readonly CertifiedQuantity[]): SeriesLength {
  const third: readonly string[] = derivativeNames.slice(6);
  return names.some((name) => third.includes(name)) ? 11 : 6;
}
