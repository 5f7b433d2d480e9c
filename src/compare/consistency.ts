/**
 * How well an equation of state obeys thermodynamics, measured from its values alone: a foreign one may claim derivatives that
 * do not belong to its values.
 *
 * Derivatives by u = ln rho and v = ln T from differences (derivative.ts). Each relation is missed by a relative amount and
 * known to an uncertainty; where a value is a small difference of large ones (the entropy of cold matter in F) the
 * uncertainty is large, and the point says little. Nothing is measured across a phase boundary.
 */
import type { Composition } from "../matter/composition.js";
import type { EquationOfState, State } from "../thermodynamics/equation-of-state.js";
import { answerAt, isState } from "./answers.js";
import { derivativeOf, type Measured, steps } from "./derivative.js";
import { statisticsOf } from "./difference.js";
import type { ConsistencyCheck, ConsistencyName, Place } from "./result.js";

/** The relations. */
const relations: Readonly<Record<ConsistencyName, string>> = {
  "free-energy": "F = e - T s",
  pressure: "P = rho^2 dF/drho",
  entropy: "s = -dF/dT",
  maxwell: "ds/drho = -(dP/dT)/rho^2",
  "first-law-density": "de/drho = P/rho^2 + T ds/drho",
  "first-law-temperature": "de/dT = T ds/dT",
  densityExponent: "chi_rho = d ln P/d ln rho",
  temperatureExponent: "chi_T = d ln P/d ln T",
  heatCapacityV: "c_v = de/dT",
  gamma1: "Gamma1 = chi_rho + chi_T^2 P/(rho T c_v)",
  adiabaticGradient: "gradient = chi_T P/(rho T c_v Gamma1)",
};

const names = Object.keys(relations) as ConsistencyName[];
const functions = ["specificFreeEnergy", "pressure", "specificEntropy", "specificEnergy"] as const;
type FunctionName = (typeof functions)[number];

/** Rounding that algebraic relations may show. */
const rounding = 64 * 2 ** -52;
/** Uncertainty beyond which a point says nothing. */
const coarse = 0.01;

/** Measures point by point. */
export interface ConsistencyMeter {
  /** Measures at one row. */
  readonly measure: (row: number, state: State) => void;
  /** What was measured. */
  readonly checks: () => readonly ConsistencyCheck[];
  /** d ln P/d ln rho and T de/dT over P/rho at the row just measured, where they are known. */
  readonly response: { stiffness: Measured; heat: Measured };
}

const unknown: Measured = { value: Number.NaN, error: Number.POSITIVE_INFINITY };

/** A meter for points of one equation of state. */
export function consistencyMeter(
  equationOfState: EquationOfState,
  composition: Composition,
  rows: number,
  placeOf: (row: number) => Place,
): ConsistencyMeter {
  const blank = (): Float64Array => new Float64Array(rows).fill(Number.NaN);
  const residuals = Object.fromEntries(names.map((name) => [name, blank()])) as Record<ConsistencyName, Float64Array>;
  const errors = Object.fromEntries(names.map((name) => [name, blank()])) as Record<ConsistencyName, Float64Array>;
  const response = { stiffness: unknown, heat: unknown };

  const neighbour = (state: State, along: "density" | "temperature", step: number): State | undefined => {
    const factor = Math.exp(step);
    const density = along === "density" ? state.density * factor : state.density;
    const temperature = along === "temperature" ? state.temperature * factor : state.temperature;
    const answer = answerAt(equationOfState, density, temperature, composition);
    return isState(answer) && answer.crystalFraction === state.crystalFraction ? answer : undefined;
  };

  /** Derivatives of the functions along one direction; undefined where a neighbour does not answer. */
  const derivatives = (state: State, along: "density" | "temperature"): Record<FunctionName, Measured> | undefined => {
    const above = steps.map((step) => neighbour(state, along, step));
    const below = steps.map((step) => neighbour(state, along, -step));
    if ([...above, ...below].includes(undefined)) return undefined;
    const of = (name: FunctionName): Measured =>
      derivativeOf(
        above.map((one) => one![name]),
        below.map((one) => one![name]),
        roundingScale(state, name),
      );
    return Object.fromEntries(functions.map((name) => [name, of(name)])) as Record<FunctionName, Measured>;
  };

  function measure(row: number, state: State): void {
    const set = (name: ConsistencyName, missed: number, error: number, scale: number): void => {
      // 0 = 0 holds exactly.
      residuals[name][row] = missed === 0 ? 0 : Math.abs(missed) / scale;
      errors[name][row] = error === 0 ? 0 : error / scale;
    };
    const { density: rho, temperature: t, pressure: p, specificEnergy: e, specificFreeEnergy: f } = state;
    const { densityExponent, temperatureExponent, heatCapacityV, gamma1, adiabaticGradient } = state;
    const ts = t * state.specificEntropy;
    const specific = p / rho;
    const sizes = Math.max(Math.abs(f), Math.abs(e), Math.abs(ts));
    set("free-energy", f - (e - ts), rounding * sizes, sizes);
    response.stiffness = unknown;
    response.heat = unknown;

    const u = derivatives(state, "density");
    if (u !== undefined) {
      const { specificFreeEnergy: fu, pressure: pu, specificEntropy: su, specificEnergy: eu } = u;
      response.stiffness = { value: pu.value / Math.abs(p), error: pu.error / Math.abs(p) };
      set("pressure", specific - fu.value, fu.error, Math.abs(specific));
      const work = Math.max(Math.abs(eu.value), Math.abs(specific), Math.abs(t * su.value));
      set("first-law-density", eu.value - specific - t * su.value, eu.error + t * su.error, work);
      set("densityExponent", densityExponent - pu.value / p, pu.error / Math.abs(p), Math.abs(densityExponent));
    }
    if (t === 0) return;
    const heat = t * heatCapacityV;
    if (heatCapacityV > 0) {
      const grueneisen = (temperatureExponent * specific) / heat;
      set(
        "gamma1",
        gamma1 - densityExponent - temperatureExponent * grueneisen,
        rounding * Math.abs(gamma1),
        Math.abs(gamma1),
      );
      const gradient = grueneisen / gamma1;
      set("adiabaticGradient", adiabaticGradient - gradient, rounding * Math.abs(gradient), Math.abs(gradient));
    }
    const v = derivatives(state, "temperature");
    if (v === undefined) return;
    const { specificFreeEnergy: fv, pressure: pv, specificEntropy: sv, specificEnergy: ev } = v;
    response.heat = { value: ev.value / Math.abs(specific), error: ev.error / Math.abs(specific) };
    set("entropy", ts + fv.value, fv.error, Math.abs(ts));
    set("first-law-temperature", ev.value - t * sv.value, ev.error + t * sv.error, Math.abs(t * sv.value));
    set(
      "temperatureExponent",
      temperatureExponent - pv.value / p,
      pv.error / Math.abs(p),
      Math.abs(temperatureExponent),
    );
    set("heatCapacityV", heat - ev.value, ev.error, Math.abs(heat));
    if (u === undefined) return;
    const { value, error } = u.specificEntropy;
    set("maxwell", t * value + pv.value / rho, t * error + pv.error / rho, Math.abs(pv.value / rho));
  }

  const checks = (): readonly ConsistencyCheck[] =>
    names.map((name) => checkOf(name, residuals[name], errors[name], placeOf));
  return { measure, checks, response };
}

/** Size of the terms that a function is rounded at: F and e may be near zero as the difference of large ones. */
function roundingScale(state: State, name: FunctionName): number {
  const own = Math.abs(state[name]);
  if (name === "pressure" || name === "specificEntropy") return own;
  const heat = Math.abs(state.temperature * state.specificEntropy);
  return Math.max(own, Math.abs(state.specificEnergy), state.pressure / state.density, heat);
}

function checkOf(
  name: ConsistencyName,
  residual: Float64Array,
  error: Float64Array,
  placeOf: (row: number) => Place,
): ConsistencyCheck {
  let [measured, unresolved, missed, largest, worst] = [0, 0, 0, 0, -1];
  const seen: number[] = [];
  for (let row = 0; row < residual.length; row++) {
    // NaN of a foreign equation of state is nothing measured.
    if (!(error[row]! <= coarse) || Number.isNaN(residual[row]!)) {
      unresolved += 1;
      continue;
    }
    measured += 1;
    seen.push(error[row]!);
    if (!(residual[row]! > 3 * error[row]!)) continue;
    missed += 1;
    if (residual[row]! <= largest) continue;
    largest = residual[row]!;
    worst = row;
  }
  return {
    name,
    relation: relations[name],
    residual,
    error,
    measured,
    unresolved,
    missed,
    largest,
    worst: worst < 0 ? undefined : placeOf(worst),
    resolution: statisticsOf(seen).median,
  };
}
