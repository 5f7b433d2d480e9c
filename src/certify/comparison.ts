/** One point compared: values of the equation of state beside those of the reference. */
import { Decimal } from "decimal.js";
import type { Composition } from "../matter/composition.js";
import type { FreeEnergyDerivatives } from "../thermodynamics/equation-of-state.js";
import type { QuantityName } from "../thermodynamics/quantities.js";
import {
  type CertifiedQuantity,
  derivativeNames,
  type ReferenceValue,
  referenceQuantities,
} from "./reference-quantities.js";
import { referenceState } from "./reference-state.js";
import { lengthFor, type Subject, uncertifiedTerms } from "./subject.js";

/** A quantity at a point. */
interface Comparison {
  readonly name: CertifiedQuantity;
  readonly value: number;
  readonly reference: Decimal;
  /** |value - reference| over the larger of the two. */
  readonly relative: number;
  /** |value - reference| over the sum of absolute terms; undefined where the quantity is no sum. */
  readonly scaled: number | undefined;
  /** Share of the sum of absolute terms that has no reference; undefined where the quantity is no sum or all has one. */
  readonly uncertifiedShare: number | undefined;
}

/** All quantities at a point. */
export interface PointComparison {
  readonly comparisons: readonly Comparison[];
  /** Names that either side does not know. */
  readonly unknown: readonly CertifiedQuantity[];
  /** Error estimate of the reference, relative to sums of absolute terms. */
  readonly referenceError: number;
}

/** Values of the equation of state at a point: may throw its refusals. */
export function ownValues(
  { equationOfState }: Subject,
  composition: Composition,
  density: number,
  temperature: number,
  names: readonly CertifiedQuantity[],
): { readonly values: ReadonlyMap<CertifiedQuantity, number>; readonly crystal: boolean } {
  const state = equationOfState.state(density, temperature, composition);
  const derivatives: readonly string[] = derivativeNames;
  const needed = names.some((name) => derivatives.includes(name));
  const free = needed
    ? equationOfState.freeEnergy(density, temperature, composition, lengthFor(names) === 6 ? 2 : 3)
    : undefined;
  const values = new Map<CertifiedQuantity, number>();
  for (const name of names) {
    const value = derivatives.includes(name)
      ? free?.[name as keyof FreeEnergyDerivatives]
      : state[name as QuantityName];
    if (value !== undefined) values.set(name, value);
  }
  return { values, crystal: state.crystalFraction === 1 };
}

/** Compares own values with the reference; may throw the reference's refusals. */
export function compareAt(
  subject: Subject,
  composition: Composition,
  density: number,
  temperature: number,
  names: readonly CertifiedQuantity[],
  digits: number,
  own: ReturnType<typeof ownValues>,
): PointComparison {
  const length = lengthFor(names);
  const { physics } = subject;
  const phaseAtBoundary = own.crystal;
  const positrons = names.includes("positronDensity");
  const at = { physics, composition, density, temperature };
  const state = referenceState({ ...at, digits, length, phaseAtBoundary, positrons });
  const others = uncertifiedTerms(subject, composition, density, temperature, length);
  const references = referenceQuantities({ ...state, terms: [...state.terms, ...others] }, names, digits);
  const shares = others.length === 0 ? undefined : referenceQuantities({ ...state, terms: others }, names, digits);
  const comparisons: Comparison[] = [];
  for (const name of names) {
    const value = own.values.get(name);
    const reference = references.get(name);
    if (value === undefined || reference === undefined) continue;
    comparisons.push({
      name,
      value,
      reference: reference.value,
      relative: relativeError(value, reference.value),
      scaled: reference.scale === undefined ? undefined : scaledError(value, reference),
      uncertifiedShare: shareOf(reference, shares?.get(name)),
    });
  }
  const compared = comparisons.map(({ name }) => name);
  return {
    comparisons,
    unknown: names.filter((name) => !compared.includes(name)),
    referenceError: state.relativeError,
  };
}

/** Smallest normal double: below it a double has no relative accuracy to speak of. */
const smallest = 2 ** -1022;

/** |value - reference| over the larger of the two, so never above 2; 0 where both are below the smallest normal double. */
function relativeError(value: number, reference: Decimal): number {
  const expected = reference.toNumber();
  if (!Number.isFinite(value) || !Number.isFinite(expected)) return value === expected ? 0 : 1;
  if (Math.abs(value) < smallest && Math.abs(expected) < smallest) return 0;
  const given = new Decimal(value);
  return given.minus(reference).div(Decimal.max(given.abs(), reference.abs())).abs().toNumber();
}

function scaledError(value: number, { value: reference, scale }: ReferenceValue): number {
  if (!Number.isFinite(value) || !reference.isFinite()) return relativeError(value, reference);
  if (scale === undefined || scale.isZero()) return value === 0 ? 0 : 1;
  return new Decimal(value).minus(reference).div(scale).abs().toNumber();
}

function shareOf(whole: ReferenceValue, part: ReferenceValue | undefined): number | undefined {
  if (part?.scale === undefined || whole.scale === undefined || whole.scale.isZero()) return undefined;
  return part.scale.div(whole.scale).toNumber();
}
