/**
 * Inverse questions with phases: on which side of the freezing boundary the answer lies, or whether liquid and crystal
 * coexist there.
 *
 * Each side is smooth, the boundary is where matter of one density freezes (a convention, see coulomb/phase.ts). At
 * given density, energy and entropy jump up with temperature: a target in the gap is coexistence at the melting
 * temperature, by the lever rule. At given temperature and pressure matter is liquid where P <= P_liquid(rho_m, T), else
 * a crystal: one-valued although the pressures of the two sides differ by some 1e-4. With pressure and another quantity
 * given, the coexisting phases have one pressure; with two energies or entropies, one density.
 */
import type { Composition } from "../matter/composition.js";
import { DENSITY, ROUGH_THIRD_ORDER, TEMPERATURE } from "../matter/plasma.js";
import type { PhasePair } from "../thermodynamics/contribution.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { type Evaluator, evaluatorOf } from "../thermodynamics/evaluator.js";
import { fillFunction } from "./functions.js";
import { nestedSearch } from "./nested.js";
import { functionsOf, searchOne, searchTwo } from "./search.js";
import {
  BEYOND_LOWER,
  BEYOND_UPPER,
  BY_U,
  BY_V,
  COEXISTENCE,
  CRYSTAL,
  DENSITY_AT_TEMPERATURE,
  DENSITY_NOW,
  EVALUATIONS,
  FIRST_TARGET,
  FOLLOWS,
  FOUND,
  FUNCTION_LENGTH,
  GUESSED,
  HIGHEST_DENSITY,
  HIGHEST_TEMPERATURE,
  LIQUID,
  LOST,
  LOWEST_DENSITY,
  LOWEST_TEMPERATURE,
  PRESSURE_KIND,
  SEARCH_LENGTH,
  SECOND_TARGET,
  SIZE,
  STEP_U,
  STEP_V,
  TEMPERATURE_AT_DENSITY,
  TEMPERATURE_NOW,
  WHOLE,
} from "./slots.js";

/** Searches in one equation of state, with their records. */
export interface Searcher {
  /** Start, targets, bounds, result: see slots.ts. */
  readonly w: Float64Array;
  /** Functions of the two quantities at the last evaluation. */
  readonly f: Float64Array;
  /** Where the result stands. */
  readonly place: Int32Array;
  /** Slot 0: mass fraction of the crystal; 1, 2: densities of liquid and crystal where they coexist. */
  readonly share: Float64Array;
  /** The evaluator of the side of the last result. */
  evaluator(): Evaluator;
  /** Both sides, where the matter has two. */
  readonly liquid: Evaluator | undefined;
  readonly crystal: Evaluator | undefined;
  /** One search: returns how it ended (slots.ts). */
  search(composition: Composition, question: number, first: number, second: number): number;
}

/** A searcher for an equation of state. */
export function searcherOf(eos: EquationOfState): Searcher {
  const w = new Float64Array(SEARCH_LENGTH);
  const f = functionsOf();
  const place = new Int32Array(1);
  const share = new Float64Array(3);
  const boundary = new Float64Array(5);
  const at = new Float64Array(1); // a density on its way: an argument would be boxed
  const whole = eos.evaluator();
  const phases: PhasePair | undefined = eos.contributions.find((part) => part.phases !== undefined)?.phases;
  const sideOf = (phase: "liquid" | "crystal"): Evaluator =>
    evaluatorOf(eos.contributions.map((part) => part.phases?.[phase] ?? part));
  const liquid = phases && sideOf("liquid");
  const crystal = phases && sideOf("crystal");
  for (const ev of [whole, liquid, crystal]) if (ev !== undefined) ev.point[ROUGH_THIRD_ORDER] = 1;
  const [lowestDensity, highestDensity] = eos.domain.density;
  const [lowestTemperature, highestTemperature] = eos.domain.temperature;

  /** Goes to a side: members of third order that an evaluator kept are of a neighbour only where it answered the row before. */
  function enter(side: number): void {
    if (place[0] !== side) w[FOLLOWS] = 0;
    place[0] = side;
  }

  function atDensity(composition: Composition, kind: number): number {
    w[LOWEST_TEMPERATURE] = lowestTemperature;
    w[HIGHEST_TEMPERATURE] = highestTemperature;
    boundary[0] = w[DENSITY_NOW]!;
    boundary[1] = w[TEMPERATURE_NOW]!;
    phases?.fillBoundary(composition, boundary);
    const melting = phases === undefined ? 0 : boundary[2]!;
    if (liquid === undefined || crystal === undefined || melting <= lowestTemperature) {
      enter(WHOLE);
      return searchOne(whole, composition, false, kind, w, f);
    }
    let side = w[TEMPERATURE_NOW]! >= melting ? LIQUID : CRYSTAL;
    for (let attempt = 0; ; attempt++) {
      enter(side);
      w[LOWEST_TEMPERATURE] = side === LIQUID ? melting : lowestTemperature;
      w[HIGHEST_TEMPERATURE] = side === LIQUID ? highestTemperature : melting;
      const end = searchOne(side === LIQUID ? liquid : crystal, composition, false, kind, w, f);
      if (side === LIQUID ? end !== BEYOND_LOWER : end !== BEYOND_UPPER) return end;
      if (attempt === 1) break;
      side = LIQUID + CRYSTAL - side;
      w[TEMPERATURE_NOW] = melting;
    }
    w[TEMPERATURE_NOW] = melting;
    share[1] = w[DENSITY_NOW]!;
    share[2] = w[DENSITY_NOW]!;
    return coexist(composition, kind);
  }

  function atTemperature(composition: Composition, kind: number): number {
    w[LOWEST_DENSITY] = lowestDensity;
    w[HIGHEST_DENSITY] = highestDensity;
    boundary[0] = w[DENSITY_NOW]!;
    boundary[1] = w[TEMPERATURE_NOW]!;
    phases?.fillBoundary(composition, boundary);
    const freezing = phases === undefined ? Number.POSITIVE_INFINITY : boundary[3]!;
    const limit = boundary[4]!;
    if (liquid === undefined || crystal === undefined || freezing >= highestDensity) {
      enter(WHOLE);
      return searchOne(whole, composition, true, kind, w, f);
    }
    // Three pieces by rising density: liquid, crystal, and liquid again where quantum melting forbids a crystal.
    const start = w[DENSITY_NOW]!;
    // Without a guess the third piece is tried last: its cold liquid is beyond the fits.
    let piece = start < freezing ? 0 : start <= limit || !w[GUESSED]! ? 1 : 2;
    let rising = 0;
    for (let attempt = 0; attempt < 4; attempt++) {
      const side = piece === 1 ? crystal : liquid;
      enter(piece === 1 ? CRYSTAL : LIQUID);
      // The crystal may reach a little below its boundary: where its pressure there is above that of the liquid.
      const below = kind === PRESSURE_KIND ? 0.9 * freezing : freezing;
      w[LOWEST_DENSITY] = piece === 0 ? lowestDensity : piece === 1 ? Math.max(below, lowestDensity) : limit;
      w[HIGHEST_DENSITY] = piece === 0 ? freezing : piece === 1 ? Math.min(limit, highestDensity) : highestDensity;
      const end = searchOne(side, composition, true, kind, w, f);
      if (end === LOST) return LOST;
      if (end === FOUND) {
        if (piece !== 1 || kind !== PRESSURE_KIND || w[DENSITY_NOW]! > 1.05 * freezing) return FOUND;
        if (boundaryPressureBelowTarget(composition)) {
          w[DENSITY_NOW]! *= 1 + w[STEP_U]!;
          w[STEP_U] = 0;
          at[0] = w[DENSITY_NOW]!;
          fillSide(crystal, composition, kind, 0);
          return FOUND;
        }
        piece = 0; // the rule of one value: below the boundary's pressure matter is liquid
        rising = -1;
        w[DENSITY_NOW] = freezing;
        continue;
      }
      const way = end === BEYOND_UPPER ? 1 : -1;
      const next = piece + way;
      if (next < 0 || next > 2 || (next === 2 && limit >= highestDensity)) return end;
      const edge = Math.max(piece, next) === 1 ? freezing : limit;
      w[DENSITY_NOW] = edge;
      // Where quantum melting ends the crystal no two phases are in balance: what lies in that gap has no state.
      if (rising === -way) {
        if (edge !== freezing) return LOST;
        share[1] = edge;
        share[2] = edge;
        return coexist(composition, kind);
      }
      rising = way;
      piece = next;
    }
    return LOST;
  }

  /** Whether the liquid's pressure at the density of freezing is below the target; the temperature is that of the search. */
  function boundaryPressureBelowTarget(composition: Composition): boolean {
    const { point, members } = liquid!;
    point[DENSITY] = boundary[3]!;
    point[TEMPERATURE] = w[TEMPERATURE_NOW]!;
    liquid!.fillMembers(composition, 3);
    w[EVALUATIONS]! += 1;
    fillFunction(f, FUNCTION_LENGTH, PRESSURE_KIND, point, members);
    return f[FUNCTION_LENGTH]! < w[FIRST_TARGET]!;
  }

  /** Both phases at the temperature of the search and the densities in `share`: the lever rule for the first target. */
  function coexist(composition: Composition, kind: number): number {
    at[0] = share[1]!;
    fillSide(liquid!, composition, kind, 0);
    at[0] = share[2]!;
    fillSide(crystal!, composition, kind, FUNCTION_LENGTH);
    const frozen = (f[0]! - w[FIRST_TARGET]!) / (f[0]! - f[FUNCTION_LENGTH]!);
    if (!(frozen >= -1e-9 && frozen <= 1 + 1e-9)) return LOST;
    place[0] = COEXISTENCE;
    share[0] = Math.min(1, Math.max(0, frozen));
    w[STEP_U] = 0;
    w[STEP_V] = 0;
    w[DENSITY_NOW] = 1 / (share[0]! / share[2]! + (1 - share[0]!) / share[1]!);
    return FOUND;
  }

  /** The function of a kind on one side, at the density in `at`. */
  function fillSide(side: Evaluator, composition: Composition, kind: number, slot: number): void {
    side.point[DENSITY] = at[0]!;
    side.point[TEMPERATURE] = w[TEMPERATURE_NOW]!;
    side.fillMembers(composition, 3);
    w[EVALUATIONS]! += 1;
    fillFunction(f, slot, kind, side.point, side.members);
  }

  function bothUnknown(composition: Composition, first: number, second: number): number {
    w[LOWEST_DENSITY] = lowestDensity;
    w[HIGHEST_DENSITY] = highestDensity;
    w[LOWEST_TEMPERATURE] = lowestTemperature;
    w[HIGHEST_TEMPERATURE] = highestTemperature;
    if (liquid === undefined || crystal === undefined) {
      enter(WHOLE);
      return onSide(whole, composition, first, second);
    }
    let side = isHotter(composition) ? LIQUID : CRYSTAL;
    for (let attempt = 0; attempt < 2; attempt++) {
      enter(side);
      const density = w[DENSITY_NOW]!;
      const temperature = w[TEMPERATURE_NOW]!;
      const end = onSide(side === LIQUID ? liquid : crystal, composition, first, second);
      if (end === FOUND) {
        if (isHotter(composition) === (side === LIQUID)) return FOUND;
      } else {
        w[DENSITY_NOW] = density;
        w[TEMPERATURE_NOW] = temperature;
      }
      side = LIQUID + CRYSTAL - side;
    }
    return onBoundary(composition, first, second);
  }

  function onSide(side: Evaluator, composition: Composition, first: number, second: number): number {
    const density = w[DENSITY_NOW]!;
    const temperature = w[TEMPERATURE_NOW]!;
    const end = searchTwo(side, composition, first, second, w, f);
    if (end === FOUND) return FOUND;
    w[DENSITY_NOW] = density;
    w[TEMPERATURE_NOW] = temperature;
    w[FOLLOWS] = 0;
    return nestedSearch(side, composition, first, second, w, f);
  }

  /** Whether the place of the search is at the melting temperature of its density or above; so where nothing freezes. */
  function isHotter(composition: Composition): boolean {
    boundary[0] = w[DENSITY_NOW]! * (1 + w[STEP_U]!);
    boundary[1] = w[TEMPERATURE_NOW]! * (1 + w[STEP_V]!);
    phases!.fillBoundary(composition, boundary);
    return boundary[1]! >= boundary[2]!;
  }

  /**
   * Coexistence with two quantities given. With the pressure among them: where the liquid's pressure on the boundary is the
   * target. Else: where both targets are one mixture at one density. A secant in ln rho, the slope that of T ~ rho^(1/3).
   */
  function onBoundary(composition: Composition, first: number, second: number): number {
    const isobar = first === PRESSURE_KIND;
    const target = w[FIRST_TARGET]!;
    const other = w[SECOND_TARGET]!;
    let density: number = w[DENSITY_NOW]!;
    let slope = target;
    let lastRest = target;
    let lastStep = target;
    for (let i = 0; i < 40; i++) {
      boundary[0] = density;
      phases!.fillBoundary(composition, boundary);
      if (!(boundary[2]! > 0)) return LOST;
      w[TEMPERATURE_NOW] = boundary[2]!;
      at[0] = density;
      fillSide(liquid!, composition, first, 0);
      let rest = target - f[0]!;
      slope = f[BY_U]! + f[BY_V]! / 3;
      const size = f[SIZE]!;
      if (!isobar) {
        const ofLiquid = f[0]!;
        fillSide(crystal!, composition, first, FUNCTION_LENGTH);
        const ofCrystal = f[FUNCTION_LENGTH]!;
        fillFunction(f, 0, second, liquid!.point, liquid!.members);
        fillFunction(f, FUNCTION_LENGTH, second, crystal!.point, crystal!.members);
        const frozen = (f[0]! - other) / (f[0]! - f[FUNCTION_LENGTH]!);
        rest = target - (ofLiquid + frozen * (ofCrystal - ofLiquid));
        // At the lever's fraction the second quantity moves too: the secant learns the slope.
        if (i > 0 && lastStep !== 0) slope = (lastRest - rest) / lastStep;
      }
      if (Math.abs(rest) <= 4e-16 * size || (i > 0 && Math.abs(lastStep) < 1e-15)) break;
      if (!(Math.abs(slope) > 0)) return LOST;
      lastStep = Math.min(Math.max(rest / slope, -1), 1);
      lastRest = rest;
      density *= Math.exp(lastStep);
      if (i === 39) return LOST;
    }
    w[FIRST_TARGET] = other;
    let ofCrystal = density;
    if (isobar) {
      w[FIRST_TARGET] = target;
      w[DENSITY_NOW] = density;
      w[LOWEST_DENSITY] = 0.5 * density;
      w[HIGHEST_DENSITY] = 2 * density;
      if (searchOne(crystal!, composition, true, PRESSURE_KIND, w, f) !== FOUND) return LOST;
      ofCrystal = w[DENSITY_NOW]! * (1 + w[STEP_U]!);
      w[FIRST_TARGET] = other;
    }
    share[1] = density;
    share[2] = ofCrystal;
    const end = coexist(composition, second);
    w[FIRST_TARGET] = target;
    return end;
  }

  function search(composition: Composition, question: number, first: number, second: number): number {
    w[STEP_U] = 0;
    w[STEP_V] = 0;
    if (question === TEMPERATURE_AT_DENSITY) return atDensity(composition, first);
    if (question === DENSITY_AT_TEMPERATURE) return atTemperature(composition, first);
    return bothUnknown(composition, first, second);
  }

  function evaluator(): Evaluator {
    return place[0] === LIQUID || place[0] === COEXISTENCE ? liquid! : place[0] === CRYSTAL ? crystal! : whole;
  }

  return { w, f, place, share, evaluator, liquid, crystal, search };
}
