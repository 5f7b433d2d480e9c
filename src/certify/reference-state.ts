/**
 * A whole state of the reference: all terms of the free energy at a point, their sum, and every quantity from it.
 *
 * At T = 0 the formulas are 0/0. They are then taken at a temperature 1e-28 of the electrons' Fermi temperature, where
 * everything thermal is below 1e-27 of its ground state, and the limits of c_v/T and (dP/dT)/(rho T) are read there.
 */
import { Decimal } from "decimal.js";
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import type { Physics } from "../thermodynamics/contribution.js";
import * as constants from "./constants.js";
import type { ReferenceElectronGas } from "./electron-gas.js";
import { arithmetic, exactDecimal } from "./exact.js";
import { exactMatter, type Plasma } from "./plasma.js";
import { electronTerm, noDerivatives } from "./reference-electrons.js";
import { type ReferenceTerm, type ReferenceTerms, referenceTerms } from "./reference-terms.js";
import type { SeriesLength } from "./series.js";
import { electronModel } from "./terms.js";

/** Where and what. */
export interface ReferenceRequest {
  readonly physics: readonly Physics[];
  readonly composition: Composition;
  readonly density: number;
  readonly temperature: number;
  readonly digits: number;
  readonly length: SeriesLength;
  readonly phaseAtBoundary: boolean;
  /** Whether the density of positrons is wanted where it counts in nothing else. */
  readonly positrons: boolean;
}

/** What the reference knows at a point. */
export interface ReferenceState {
  readonly density: Decimal;
  readonly temperature: Decimal;
  readonly terms: readonly ReferenceTerm[];
  /** At T = 0 limits of c_v/T and (dP/dT)/(rho T) [erg/(g K^2)] and the residual entropy [erg/(g K)]. */
  readonly cold: { readonly heat: Decimal; readonly pressure: Decimal; readonly entropy: Decimal } | undefined;
  readonly gas: ReferenceElectronGas | undefined;
  readonly crystal: boolean | undefined;
  /** Plasma variables; undefined without terms that need them. */
  readonly plasma: Plasma;
  /** Largest estimated relative error of the terms. */
  readonly relativeError: number;
}

/** Everything at one point. */
export function referenceState(request: ReferenceRequest): ReferenceState {
  const { physics, composition, density, temperature, digits } = request;
  const electrons = physics.some(({ model }) => model === electronModel)
    ? electronTerm(composition, density, temperature, digits, {
        thirdOrder: request.length > 6,
        rarePositrons: request.positrons,
      })
    : undefined;
  const others = temperature === 0 ? coldTerms(request) : referenceTerms(request);
  const electronList: readonly ReferenceTerm[] =
    electrons === undefined
      ? []
      : [{ name: electronModel, derivatives: electrons.derivatives.slice(0, request.length) }];
  const terms = temperature === 0 ? others.terms.map(withoutTemperature) : others.terms;
  const D = arithmetic(digits + 20);
  return {
    density: exactDecimal(D, "density", density),
    temperature: exactDecimal(D, "temperature", temperature),
    terms: [...electronList, ...terms],
    cold: temperature === 0 ? coldLimits(others, electrons?.coldSlopes) : undefined,
    gas: electrons?.gas,
    crystal: others.crystal,
    plasma: others.plasma,
    relativeError: Math.max(others.relativeError, electrons?.gas.relativeError ?? 0),
  };
}

function coldTerms(request: ReferenceRequest): ReferenceTerms {
  const D = arithmetic(60);
  const { electronsPerGram } = exactMatter(D, request.composition);
  const x = exactDecimal(D, "density", request.density)
    .times(electronsPerGram)
    .times(3)
    .times(new D(constants.planckConstant).div(new D(constants.electronMass).times(constants.speedOfLight)).pow(3))
    .div(D.acos(-1).times(8))
    .cbrt();
  const restTemperature = new D(constants.electronMass)
    .times(new D(constants.speedOfLight).pow(2))
    .div(constants.boltzmannConstant);
  const temperature = electronsPerGram.isZero() ? new D("1e-20") : restTemperature.times(x.pow(2)).times("5e-29");
  const made = referenceTerms({ ...request, temperature, guard: 75 });
  if (made.terms.some(({ name }) => name === "ideal ions")) {
    const allowed = "> 0 K where a classical gas is in the sum: its entropy has no limit";
    throw new FermistateError("outside-domain", { argument: "temperature", given: 0, allowed });
  }
  return made;
}

/** Slots of derivatives by temperature. */
const thermal = [2, 4, 5, 7, 8, 9, 10];

function withoutTemperature({ name, derivatives }: ReferenceTerm): ReferenceTerm {
  return { name, derivatives: derivatives.map((one, k) => (thermal.includes(k) ? new Decimal(0) : one)) };
}

function coldLimits(
  { terms, plasma }: ReferenceTerms,
  slopes: readonly [Decimal, Decimal] | undefined,
): NonNullable<ReferenceState["cold"]> {
  const temperature = plasma.temperature.c[0]!;
  const total = (k: number): Decimal =>
    terms.reduce((sum, { derivatives }) => sum.plus(derivatives[k]!), new plasma.D(0));
  // T F_T = -T s, T^2 F_TT = -T c_v, rho T F_rho,T = (T/rho) dP/dT
  return {
    heat: total(5)
      .neg()
      .div(temperature.pow(2))
      .plus(slopes?.[0] ?? 0),
    pressure: total(4)
      .div(temperature.pow(2))
      .plus(slopes?.[1] ?? 0),
    entropy: total(2).neg().div(temperature),
  };
}

/** The sum of all terms, derivative by derivative, erg/g. */
export function total({ terms }: Pick<ReferenceState, "terms">): readonly Decimal[] {
  return terms.reduce<readonly Decimal[]>(
    (sum, { derivatives }) => derivatives.map((one, k) => one.plus(sum[k]!)),
    noDerivatives,
  );
}
