/**
 * The terms of the free energy at a point with their natural derivatives, to a number of digits.
 *
 * Formulas lose digits (differences at weak coupling, a temperature derivative of what hardly depends on temperature), and
 * how many depends on where. So each point is worked out at two precisions 8 digits apart; where they differ by more
 * than was asked for, both are raised.
 */
import { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import type { Physics } from "../thermodynamics/contribution.js";
import { arithmetic, exactDecimal } from "./exact.js";
import { crystalMargins, exactMatter, type Plasma, plasmaAt } from "./plasma.js";
import { naturalDerivatives, type SeriesLength } from "./series.js";
import { coulombModel, electronModel, termsOf } from "./terms.js";

/** A named term: natural derivatives of its free energy in the order of `powers`, erg/g. */
export interface ReferenceTerm {
  readonly name: string;
  readonly derivatives: readonly Decimal[];
}

/** Terms at a point, and how sure they are. */
export interface ReferenceTerms {
  readonly terms: readonly ReferenceTerm[];
  /** Whether the ions are a crystal; undefined where no model has two phases. */
  readonly crystal: boolean | undefined;
  /** Largest difference of two precisions over the sum of absolute terms of the derivative. */
  readonly relativeError: number;
  readonly plasma: Plasma;
}

/** Where and what. */
export interface TermRequest {
  readonly physics: readonly Physics[];
  readonly composition: Composition;
  readonly density: number;
  /** > 0 */
  readonly temperature: number | Decimal;
  readonly digits: number;
  readonly length: SeriesLength;
  /** The phase on the boundary itself, where rounding decides. */
  readonly phaseAtBoundary: boolean;
  /** Digits to begin with beyond those wanted. */
  readonly guard?: number;
}

const step = 8;
const highestPrecision = 400;

/** All terms but those of electrons and positrons. */
export function referenceTerms(request: TermRequest): ReferenceTerms {
  const { digits, guard = 9 } = request;
  let precision = digits + guard;
  let coarse = termsAt(request, precision);
  for (;;) {
    precision += step;
    const fine = termsAt(request, precision);
    const error = difference(coarse.terms, fine.terms);
    if (Number.isNaN(error)) {
      const allowed = "charges and densities for which every formula is a number";
      throw new FermistateError("outside-domain", {
        argument: "composition",
        given: request.composition.name,
        allowed,
      });
    }
    if (error <= 10 ** -digits) return { ...fine, relativeError: error };
    if (precision > highestPrecision) break;
    precision = Math.ceil(precision * 1.3);
    coarse = termsAt(request, precision);
  }
  throw new FermistateError("no-convergence", {
    argument: "digits",
    given: digits,
    allowed: `two precisions within 1e-${digits} up to ${highestPrecision} digits`,
  });
}

function termsAt(request: TermRequest, precision: number): Omit<ReferenceTerms, "relativeError"> {
  const { physics, composition, length, density, temperature, phaseAtBoundary } = request;
  const D = arithmetic(precision);
  const matter = exactMatter(D, composition);
  const rho = exactDecimal(D, "density", density);
  const plasma = plasmaAt(D, length, matter, rho, exactDecimal(D, "temperature", temperature));
  let crystal: boolean | undefined;
  const terms = physics
    .filter(({ model }) => model !== electronModel)
    .flatMap((one) => {
      const isCrystal = one.model === coulombModel && phaseOf(one, plasma, phaseAtBoundary);
      if (one.model === coulombModel) crystal = isCrystal;
      return termsOf(one, plasma, isCrystal);
    })
    .map(([name, freeEnergy]): ReferenceTerm => ({ name, derivatives: naturalDerivatives(freeEnergy) }));
  return { terms, crystal, plasma };
}

/** Coupling this close to the boundary, relatively, leaves the phase to the equation of state. */
const boundaryWidth = 1e-13;

function phaseOf({ options }: Physics, plasma: Plasma, phaseAtBoundary: boolean): boolean {
  if (options["phase"] !== "equilibrium") return options["phase"] === "crystal";
  if (plasma.matter.charged.length === 0) return false;
  const { coupling, quantum } = crystalMargins(plasma, Number(options["meltingCoupling"]));
  const isNear = (one: Decimal): boolean => one.minus(1).abs().lt(boundaryWidth);
  if (isNear(coupling) || isNear(quantum)) return phaseAtBoundary;
  return coupling.gt(1) && quantum.gt(1);
}

/** Derivatives that vanish count by the free energy itself: below this share of it they are zero. */
const vanishing = "1e-40";

/** Largest |fine - coarse| over the sum of absolute terms, derivative by derivative. */
function difference(coarse: readonly ReferenceTerm[], fine: readonly ReferenceTerm[]): number {
  const sizes = (k: number): Decimal =>
    fine.reduce((sum, { derivatives }) => sum.plus(derivatives[k]!.abs()), new Decimal(0));
  const floor = sizes(0).times(vanishing);
  let worst = 0;
  for (let k = 0; k < (fine[0]?.derivatives.length ?? 0); k++) {
    let off = new Decimal(0);
    for (const [i, { derivatives }] of fine.entries()) {
      off = off.plus(derivatives[k]!.minus(coarse[i]!.derivatives[k]!).abs());
    }
    const size = Decimal.max(sizes(k), floor);
    if (!size.isZero()) worst = Math.max(worst, off.div(size).toNumber());
  }
  return worst;
}
