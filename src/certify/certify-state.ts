/** One state audited: every number beside its reference with as many digits as wanted. */

import type { Decimal } from "decimal.js";
import { requireKnown } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { isNodeOf } from "../thermodynamics/interpolation-nodes.js";
import { type QuantityName, quantityNames } from "../thermodynamics/quantities.js";
import { libraryVersion } from "../version.js";
import { type Certificate, certificateDigits, unitOf } from "./certify.js";
import { compareAt, ownValues } from "./comparison.js";
import type { CertifiedQuantity } from "./reference-quantities.js";
import { requireQuantities, subjectOf } from "./subject.js";

/** Options of {@link certifyState}. */
export interface CertifyStateOptions {
  /**
   * Digits of the reference, 17 to 60.
   * @defaultValue 25
   */
  readonly digits?: number;
  /**
   * Quantities of a state, or natural derivatives of the free energy.
   * @defaultValue every quantity of a state
   */
  readonly quantities?: readonly CertifiedQuantity[];
}

/** A number of the state beside its reference. */
export interface CertifiedValue {
  /** Name of the quantity. */
  readonly name: CertifiedQuantity;
  /** Its unit in cgs, "1" for a pure number. */
  readonly unit: string;
  /** As the equation of state gives it. */
  readonly value: number;
  /** The reference, a decimal number with the digits asked for; "Infinity" where it is infinite. */
  readonly reference: string;
  /** |value - reference| over the larger of the two. */
  readonly relative: number;
  /** |value - reference| over the sum of the absolute values of the terms; undefined where the quantity is no sum. */
  readonly scaled?: number;
  /** Share of the sum of absolute terms without a reference; undefined where all has one or it is no sum. */
  readonly uncertifiedShare?: number;
}

/** What {@link certifyState} returns: plain data, ready for JSON. */
export interface StateCertificate
  extends Pick<
    Certificate,
    | "libraryVersion"
    | "equationOfState"
    | "composition"
    | "physics"
    | "uncertified"
    | "digits"
    | "referenceError"
    | "unknown"
  > {
  /** Baryon mass density, g/cm^3. */
  readonly density: number;
  /** Temperature, K. */
  readonly temperature: number;
  /** True where it is a node of a table: exact by construction, it shows nothing of the error between nodes. */
  readonly isNode: boolean;
  /** The numbers one by one. */
  readonly values: readonly CertifiedValue[];
}

const guardDigits = 5;
/** Most digits of the electron gas. */
const mostDigits = 60;

/**
 * Audits one state: each quantity beside an independent reference with `digits` digits.
 *
 * @param density - g/cm^3; the double given means its exact binary value
 * @param temperature - K; 0 where the equation of state answers there
 * @throws FermistateError what the equation of state or the reference refuses; `invalid-option`, `unavailable-quantity`
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { certifyState } from "fermistate/certify";
 * const core = composition({ C12: 0.5, O16: 0.5 });
 * const audit = certifyState(whiteDwarfMatter(), core, 2e6, 1e7, { quantities: ["pressure"] });
 * audit.values[0]?.reference; // => "7.500134365980305166350887e22"
 * ```
 */
export function certifyState(
  equationOfState: EquationOfState,
  composition: Composition,
  density: number,
  temperature: number,
  options: CertifyStateOptions = {},
): StateCertificate {
  const subject = subjectOf(equationOfState);
  requireComposition(composition);
  requireKnown("options", options, ["digits", "quantities"]);
  const digits = certificateDigits(options.digits ?? 25);
  const names = requireQuantities(options.quantities ?? (quantityNames as readonly QuantityName[]));
  const own = ownValues(subject, composition, density, temperature, names);
  // A quantity that is a difference of terms has fewer digits than they have.
  const inner = Math.min(mostDigits, digits + guardDigits);
  const result = compareAt(subject, composition, density, temperature, names, inner, own);
  return {
    libraryVersion,
    equationOfState: equationOfState.name,
    composition: {
      name: composition.name,
      species: composition.species.map(({ label, nucleonFraction }) => ({ label, nucleonFraction })),
    },
    physics: subject.physics,
    uncertified: subject.uncertified.map(({ name }) => name),
    density,
    temperature,
    isNode: isNodeOf(equationOfState, density, temperature, composition),
    digits,
    referenceError: result.referenceError,
    unknown: result.unknown,
    values: result.comparisons.map(({ name, value, reference, relative, scaled, uncertifiedShare }) => ({
      name,
      unit: unitOf(name),
      value,
      reference: digitsOf(reference, digits),
      relative,
      ...(scaled === undefined ? {} : { scaled }),
      ...(uncertifiedShare === undefined ? {} : { uncertifiedShare }),
    })),
  };
}

function digitsOf(value: Decimal, digits: number): string {
  if (!value.isFinite() || value.isZero()) return value.toString();
  return value.abs().gte("1e-3") && value.abs().lt("1e5")
    ? value.toPrecision(digits)
    : value.toExponential(digits - 1).replace("+", "");
}
