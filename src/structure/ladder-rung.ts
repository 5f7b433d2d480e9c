/** One rung of the ladder of limiting masses: what it is, why masses end there, and how it reads. */
import type { Barotrope } from "../barotropes/barotrope.js";
import { solarMass } from "../constants.js";
import type { Relativity } from "./hydrostatic-equations.js";

/** The rungs by rising number of assumptions, in the order of {@link limitingMassLadder}. */
export type LadderRungCode =
  | "uniform-sphere"
  | "index-3-polytrope"
  | "ideal-electrons"
  | "lattice"
  | "exchange-and-screening"
  | "general-relativity"
  | "moving-nuclei"
  | "electron-capture"
  | "isothermal-core";

/**
 * Why there is no heavier star.
 *
 * - `energy`: above it, gravity wins at every radius
 * - `scale-free`: stars of every central density have this mass
 * - `infinite-density`: the limit of the mass as the central density grows without end
 * - `relativity`: the mass turns at a finite central density, by general relativity
 * - `electron-capture`: the mass still rises where nuclei begin to capture electrons
 */
export type LadderEnd = "energy" | "scale-free" | "infinite-density" | "relativity" | "electron-capture";

/** The limiting mass under the assumptions of one rung and those below it; frozen. */
export interface LadderRung {
  /** Stable name for programs. */
  readonly code: LadderRungCode;
  /** Plain name. */
  readonly name: string;
  /** What it assumes, in a line. */
  readonly assumes: string;
  /** g; gravitational mass where relativity is in. */
  readonly mass: number;
  /** The same in solar masses. */
  readonly solarMasses: number;
  /** Radius of the heaviest star, cm; undefined where there is none of finite density. */
  readonly radius: number | undefined;
  /** Its central density, g/cm^3; undefined where there is none of finite density. */
  readonly centralDensity: number | undefined;
  /** Why there is no heavier star. */
  readonly end: LadderEnd;
  /** The same in a sentence. */
  readonly message: string;
  /** The theory of gravity. */
  readonly relativity: Relativity;
  /** The matter, for `massRadiusSequence` and the like; undefined for the uniform sphere. */
  readonly matter: Barotrope | undefined;
}

/** A rung before its derived members. */
export type Draft = Omit<LadderRung, "solarMasses" | "radius" | "centralDensity" | "matter"> &
  Partial<Pick<LadderRung, "radius" | "centralDensity" | "matter">>;

/** The rung of a draft; frozen. */
export function rung(draft: Draft): LadderRung {
  const { code, name, assumes, mass, radius, centralDensity, end, message, relativity, matter } = draft;
  const solarMasses = mass / solarMass;
  return Object.freeze({
    code,
    name,
    assumes,
    mass,
    solarMasses,
    radius,
    centralDensity,
    end,
    message,
    relativity,
    matter,
  });
}

/** What the search for a limit finds. */
export type Outcome = Omit<Draft, "code" | "name" | "assumes">;

/** 1e8 for 100000000. */
export const shortest = (value: number): string => value.toExponential().replace("+", "");
/** Four digits. */
export const short = (value: number): string => value.toPrecision(4).replace("+", "");
