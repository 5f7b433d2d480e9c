/**
 * What kind of matter is this, and which assumptions are strained there: a number outside its physics must not look like
 * one inside.
 *
 * Parameters are exact to rounding within their definitions; thresholds are conventions, with the reason of each where
 * it is judged: ionisation.ts, fits.ts, capture.ts, reactions.ts, sums.ts. No finding means that nothing on this list is
 * strained, not that an equation of state has every effect (magnetic fields, rotation and neutrino losses are not here).
 */

import type { Phase } from "../coulomb/phase.js";
import type { Composition } from "../matter/composition.js";
import { type CaptureThreshold, captureThresholds, judgeCapture } from "./capture.js";
import type { Finding } from "./finding.js";
import { judgeFits } from "./fits.js";
import { judgeIonisation } from "./ionisation.js";
import { type RegimeOptions, readOptions } from "./options.js";
import { measure, type RegimeParameters } from "./parameters.js";
import { type KindWord, kindOf, phaseOf } from "./phase.js";
import { judgeReactions } from "./reactions.js";
import { judgeCoupling, judgeIdealIons, judgeShares, judgeStability } from "./sums.js";

/** What {@link regime} says; frozen throughout, and plain data for JSON (which writes null for infinities). */
export interface Regime {
  /** Baryon mass density, g/cm^3, as given. */
  readonly density: number;
  /** Temperature, K, as given. */
  readonly temperature: number;
  /** Name of the composition. */
  readonly composition: string;
  /** What this matter is called: ["degenerate", "relativistic", "liquid"]. */
  readonly kind: readonly KindWord[];
  /** Phase of the ions, a gas being a liquid; undefined where nothing is charged. */
  readonly phase: Phase | undefined;
  /** The plasma parameters. */
  readonly parameters: RegimeParameters;
  /** Thresholds of electron capture of the nuclides that have one. */
  readonly captures: readonly CaptureThreshold[];
  /** False where a species has no threshold: a mean nucleus, or no daughter in AME2020. */
  readonly captureChecked: boolean;
  /** What is strained; empty where nothing is. */
  readonly findings: readonly Finding[];
}

/**
 * What kind of matter is at a point, and which assumptions are strained there.
 *
 * @param density - baryon mass density, g/cm^3, 1e-20 to 1e18
 * @param temperature - K, 0 or 1 to 1e13
 * @param composition - from `composition(...)`; mean nuclei and free neutrons too
 * @throws FermistateError `not-a-number`, `out-of-range`, `outside-domain`, `invalid-composition`, `invalid-option`
 * @example
 * ```ts
 * import { composition, regime } from "fermistate";
 * const deep = regime(2e9, 1e8, composition({ Fe56: 1 }));
 * deep.findings.map(({ code, severity }) => `${code}: ${severity}`); // => ["electron-capture: outside"]
 * ```
 */
export function regime(
  density: number,
  temperature: number,
  composition: Composition,
  options: RegimeOptions = {},
): Regime {
  const measured = measure(density, temperature, composition);
  const { parameters } = measured;
  const { phase: forced, equationOfState, state } = readOptions(options, density, temperature, composition);
  const byRule = phaseOf(parameters);
  const phase = byRule === undefined ? undefined : (forced ?? byRule);
  const { thresholds, complete } = captureThresholds(composition, parameters.densityParameter);

  const findings: Finding[] = [];
  if (phase !== undefined) {
    judgeIonisation(findings, composition, parameters);
    judgeFits(findings, temperature, composition, parameters, phase);
  }
  judgeCapture(findings, thresholds, temperature, parameters);
  judgeReactions(findings, density, temperature, composition);
  judgeShares(findings, temperature, measured);
  const interacting = equationOfState?.contributions.some((part) => part.ideal !== true) === true;
  if (!interacting) judgeIdealIons(findings, density, temperature, composition);
  if (equationOfState !== undefined) judgeCoupling(findings, equationOfState, parameters.ionCoupling);
  judgeStability(findings, { density, temperature, composition }, measured, { state, equationOfState });

  return Object.freeze({
    density,
    temperature,
    composition: composition.name,
    kind: kindOf(temperature, parameters, phase),
    phase,
    parameters,
    captures: thresholds,
    captureChecked: complete,
    findings: Object.freeze(findings),
  });
}
