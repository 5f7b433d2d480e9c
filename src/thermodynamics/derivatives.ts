/**
 * Derivatives of the state by any two of its variables: the Jacobian of an implicit solver, in the solver's own variables.
 *
 *     (dQ/da) at constant b = [Q, b]/[a, b],      [Q, b] = (dQ/d ln rho)(db/dT) - (dQ/dT)(db/d ln rho)
 *
 * Gradients come from gradients.ts, brackets of two variables from brackets.ts.
 */
import { FermistateError, withIndex } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import { BRACKET_COUNT, bracketSlot, fillBrackets, type StateVariable, stateVariables } from "./brackets.js";
import { checkInput, checkPoints, requireObject, requireRows } from "./columns.js";
import { holds, refusePoint } from "./domain.js";
import type { BatchInput, EquationOfState } from "./equation-of-state.js";
import type { Order } from "./free-energy.js";
import { type DifferentiableQuantity, differentiable, fillGradients, GRADIENT_LENGTH, orderOf } from "./gradients.js";

/** Which derivatives are wanted. */
export interface DerivativesRequest<Of extends DifferentiableQuantity, By extends StateVariable> {
  /** Quantities to differentiate, at least one. */
  readonly of: readonly Of[];
  /** The two independent variables, in any order. */
  readonly by: readonly [By, By];
}

/** A value for each quantity and variable: `all.pressure.density` is dP/drho at constant other variable. */
export type ByVariable<Of extends DifferentiableQuantity, By extends StateVariable, Value> = {
  readonly [Q in Of]: { readonly [V in By]: Value };
};

/** Derivatives at one point. */
export type Derivatives<Of extends DifferentiableQuantity, By extends StateVariable> = ByVariable<Of, By, number> & {
  /**
   * Factor >= 1 by which the pair magnifies relative errors of the derivatives: 1 where its determinant is a product
   * or a sum of positive terms, large where the two variables hardly fix the state (temperature and energy of a
   * nearly ideal gas).
   */
  readonly conditioning: number;
};

/** Columns of a batch of derivatives, owned by the caller; only those given are written. */
export type DerivativeColumns<Of extends DifferentiableQuantity, By extends StateVariable> = {
  readonly [Q in Of]?: { readonly [V in By]?: Float64Array };
} & {
  /** Conditioning of the pair, as in {@link Derivatives}. */
  readonly conditioning?: Float64Array;
};

/** Derivatives of chosen quantities by a chosen pair, prepared once for many points. */
export interface DerivativesEvaluator<Of extends DifferentiableQuantity, By extends StateVariable> {
  /** The quantities, as given. */
  readonly of: readonly Of[];
  /** The pair, as given. */
  readonly by: readonly [By, By];
  /** Input of `fill`: slot 0 density, slot 1 temperature; the others are not yours. */
  readonly point: Float64Array;
  /** Output of `fill`: for each quantity the derivative by `by[0]`, then that by `by[1]`; at the end the conditioning. */
  readonly values: Float64Array;
  /**
   * Fills `values` at `point`: checks nothing before, allocates nothing.
   *
   * @param row - for the error message, -1 for none
   * @throws `dependent-variables`, `unavailable-quantity`, `unstable`
   */
  fill(composition: Composition, row: number): void;
  /** Many points: checks all of them, then writes the columns given and allocates nothing per point. */
  evaluate(input: BatchInput, output: DerivativeColumns<Of, By>): void;
}

/** Where fewer than about six bits of a determinant are left, the pair is refused. */
const smallestDeterminant = 64 * Number.EPSILON;

/**
 * Partial derivatives of any thermodynamic quantity by any two of density, temperature, pressure, specific energy,
 * specific entropy and specific enthalpy, at one point and fixed composition; exact, from the members of the free energy.
 *
 * `all.pressure.density` is the derivative of pressure by density with the other variable of the pair constant, in the
 * units of the two. Where the ions melt or freeze it belongs to the phase that `state` shows.
 *
 * Error: a few units in the last place of the largest of the terms that a derivative is the sum of, times `conditioning`; a
 * derivative that passes zero, or that is small against c_v, say, is relatively less accurate.
 *
 * At T = 0 thermal parts are taken to begin with T^2 in the free energy. Pairs that do not fix T there (density and
 * energy, density and pressure, ...) are refused, and so are gamma2, gamma3, the adiabatic gradient and entropyByTemperature.
 *
 * @param density - g/cm^3
 * @param temperature - K
 * @throws `dependent-variables` where the pair does not fix the state; `unavailable-quantity`; `invalid-option` for names;
 * as the method `state`
 * @example
 * ```ts
 * import { composition, derivatives, whiteDwarfMatter } from "fermistate";
 * const core = composition({ C12: 0.5, O16: 0.5 });
 * const all = derivatives(whiteDwarfMatter(), 2e6, 1e8, core, {
 *   of: ["pressure", "temperature", "gamma1"],
 *   by: ["density", "specificEnergy"],
 * });
 * all.pressure.density; // => 3.78896657755e16
 * all.temperature.specificEnergy; // => 4.7048247506e-8
 * all.gamma1.density; // => -1.8170731714e-8
 * ```
 */
export function derivatives<const Of extends DifferentiableQuantity, const By extends StateVariable>(
  equationOfState: EquationOfState,
  density: number,
  temperature: number,
  composition: Composition,
  request: DerivativesRequest<Of, By>,
): Derivatives<Of, By> {
  const { domain, contributions } = equationOfState;
  const { of, by, point, values, fill } = derivativesEvaluator(equationOfState, request);
  requireComposition(composition);
  if (typeof density !== "number" || typeof temperature !== "number" || !holds(domain, density, temperature)) {
    refusePoint(contributions, density, temperature);
  }
  point[DENSITY] = density;
  point[TEMPERATURE] = temperature;
  fill(composition, -1);
  const entries = of.map((name, i) => [name, Object.freeze({ [by[0]]: values[2 * i]!, [by[1]]: values[2 * i + 1]! })]);
  const all = { ...Object.fromEntries(entries), conditioning: values[2 * of.length]! };
  return Object.freeze(all) as Derivatives<Of, By>;
}

/**
 * The same for many points: names are read once, `fill` and `evaluate` allocate nothing per point.
 *
 * @throws `invalid-option` for names that do not exist, an empty list, or twice the same variable
 * @example
 * ```ts
 * import { composition, derivativesEvaluator, whiteDwarfMatter } from "fermistate";
 * const jacobian = derivativesEvaluator(whiteDwarfMatter(), { of: ["density"], by: ["pressure", "specificEntropy"] });
 * const input = { density: Float64Array.of(1e6, 1e7), temperature: Float64Array.of(1e8, 1e8) };
 * const pressure = new Float64Array(2);
 * jacobian.evaluate({ ...input, composition: composition({ C12: 1 }) }, { density: { pressure } });
 * pressure[1]; // => 8.18323997485e-18
 * ```
 */
export function derivativesEvaluator<const Of extends DifferentiableQuantity, const By extends StateVariable>(
  equationOfState: EquationOfState,
  request: DerivativesRequest<Of, By>,
): DerivativesEvaluator<Of, By> {
  const { of, by } = readRequest(request);
  const at = equationOfState.evaluator();
  const { point } = at;
  const gradients = new Float64Array(GRADIENT_LENGTH);
  const brackets = new Float64Array(BRACKET_COUNT);
  const sizes = new Float64Array(BRACKET_COUNT);
  const values = new Float64Array(2 * of.length + 1);
  const slots = of.map((name) => differentiable.indexOf(name));
  const order: Order = slots.some((slot) => orderOf(slot) === 3) ? 3 : 2;
  const a = stateVariables.indexOf(by[0]);
  const b = stateVariables.indexOf(by[1]);
  const pair = bracketSlot(a, b);

  function fill(composition: Composition, row: number): void {
    at.fillMembers(composition, order);
    at.fillThermodynamics(composition, row);
    fillGradients(at, order, gradients);
    fillBrackets(at, brackets, sizes);
    const determinant = brackets[pair]!;
    // Written so that NaN is refused.
    if (!(Math.abs(determinant) > smallestDeterminant * sizes[pair]!)) refusePair(by, row);
    const aR = gradients[2 * a]!;
    const aT = gradients[2 * a + 1]!;
    const bR = gradients[2 * b]!;
    const bT = gradients[2 * b + 1]!;
    for (let i = 0; i < slots.length; i++) {
      const slot = slots[i]!;
      const known = slot < stateVariables.length;
      const r = gradients[2 * slot]!;
      const t = gradients[2 * slot + 1]!;
      // [Q, b] and [a, Q]; of two variables from the table, which does not cancel.
      const first = known ? brackets[bracketSlot(slot, b)]! : r * bT - t * bR;
      const second = known ? brackets[bracketSlot(a, slot)]! : aR * t - aT * r;
      values[2 * i] = first / determinant + 0; // no -0
      values[2 * i + 1] = second / determinant + 0;
      if (!(Number.isFinite(values[2 * i]) && Number.isFinite(values[2 * i + 1]))) {
        refuseValue(of[i]!, point[TEMPERATURE] === 0, row);
      }
    }
    values[2 * of.length] = sizes[pair]! / Math.abs(determinant);
  }

  function evaluate(input: BatchInput, output: DerivativeColumns<Of, By>): void {
    requireObject("input", input);
    const { count, compositions } = checkInput(input);
    const columns = columnsOf(of, by, output, count);
    checkPoints(equationOfState, input);
    const { density, temperature } = input;
    for (let i = 0; i < count; i++) {
      point[DENSITY] = density[i]!;
      point[TEMPERATURE] = temperature[i]!;
      fill(compositions.one ?? compositions.at(i), i);
      for (let j = 0; j < columns.length; j++) columns[j]![1][i] = values[columns[j]![0]]!;
    }
  }

  return Object.freeze({ of, by, point, values, fill, evaluate });
}

/** The columns given, each with its place in `values`. */
function columnsOf(
  of: readonly string[],
  by: readonly [string, string],
  output: unknown,
  count: number,
): (readonly [number, Float64Array])[] {
  requireObject("output", output);
  const columns: [number, Float64Array][] = [];
  const add = (place: number, name: string, column: unknown): void => {
    if (column === undefined) return;
    requireRows(name, column, count);
    columns.push([place, column as Float64Array]);
  };
  for (const [name, entry] of Object.entries(output as Record<string, unknown>)) {
    if (name === "conditioning") {
      add(2 * of.length, name, entry);
      continue;
    }
    if (entry === undefined) continue;
    const i = of.indexOf(name);
    if (i < 0) throw unknownName("output", name, [...of, "conditioning"]);
    requireObject(name, entry);
    for (const [variable, column] of Object.entries(entry as Record<string, unknown>)) {
      const j = by.indexOf(variable);
      if (j < 0) throw unknownName(`output.${name}`, variable, by);
      add(2 * i + j, `${name}.${variable}`, column);
    }
  }
  return columns;
}

/** Checks the names and keeps copies of the two lists. */
function readRequest<Of extends DifferentiableQuantity, By extends StateVariable>(
  request: DerivativesRequest<Of, By>,
): DerivativesRequest<Of, By> {
  const { of, by } = typeof request === "object" && request !== null ? request : { of: undefined, by: undefined };
  if (!Array.isArray(of) || of.length === 0) {
    const allowed = "a list of quantities, such as { of: ['pressure'], by: ['density', 'specificEnergy'] }";
    throw new FermistateError("invalid-option", { argument: "of", given: of, allowed });
  }
  const stranger = of.findIndex((name) => !differentiable.includes(name));
  if (stranger >= 0) throw unknownName("of", of[stranger], differentiable);
  if (!Array.isArray(by) || by.length !== 2) {
    const allowed = `two of ${stateVariables.join(", ")}`;
    throw new FermistateError("invalid-option", { argument: "by", given: by, allowed });
  }
  const other = by.findIndex((name) => !stateVariables.includes(name));
  if (other >= 0) throw unknownName("by", by[other], stateVariables);
  if (by[0] === by[1]) {
    throw new FermistateError("invalid-option", { argument: "by", given: by[0], allowed: "two different variables" });
  }
  return { of: Object.freeze([...of]), by: Object.freeze([by[0], by[1]] as const) };
}

function unknownName(argument: string, given: unknown, names: readonly string[]): FermistateError {
  return new FermistateError("invalid-option", { argument, given, allowed: `one of ${names.join(", ")}` });
}

function refusePair(by: readonly string[], row: number): never {
  const allowed = "two variables that fix the state here: their Jacobian determinant vanishes at this point";
  const details = { argument: "by", given: by.join(" and "), allowed };
  throw new FermistateError("dependent-variables", withIndex(details, row < 0 ? undefined : row));
}

/** A derivative that is no number: unknown at T = 0, or a contribution that broke its contract. */
function refuseValue(name: string, atZero: boolean, row: number): never {
  const allowed = atZero
    ? "quantities whose derivative at T = 0 is known (not gamma2, gamma3, adiabaticGradient, entropyByTemperature)"
    : "finite derivatives: a contribution has added something else at third order";
  const details = { argument: "of", given: name, allowed };
  throw new FermistateError(
    atZero ? "unavailable-quantity" : "unstable",
    withIndex(details, row < 0 ? undefined : row),
  );
}
