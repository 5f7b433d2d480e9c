/**
 * Stars in hydrostatic equilibrium, of any barotrope, in Newton's or Einstein's theory of gravity.
 *
 * Conventions: Newton's source of gravity is the baryon mass density rho; Einstein's is the mass-energy density
 * rho + rho e/c^2, so the gravitational mass holds the energy e as the barotrope defines it. The surface is where P = 0, or
 * where the barotrope begins. The equations and their sources stand in hydrostatic-equations.ts.
 */
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
  type BarotropeLimit,
} from "../barotropes/barotrope.js";
import { gravitationalConstant, speedOfLight } from "../constants.js";
import { FermistateError, requireFinite, requireKnown } from "../errors.js";
import { denseSolution } from "../numerics/dense-solution.js";
import type { OdeStep } from "../numerics/ode.js";
import { type StarFinding, starFindings } from "./findings.js";
import { type HydrostaticSolver, hydrostaticSolver } from "./hydrostatic.js";
import { BINDING, type Relativity, U, V } from "./hydrostatic-equations.js";
import { type StarProfile, starProfile } from "./profile.js";
import { loveNumber } from "./tides.js";

/** How a star is integrated. */
export interface StarOptions {
  /**
   * Theory of gravity: "newton" or "general" (relativity).
   * @defaultValue "general"
   */
  readonly relativity?: Relativity;
  /**
   * Relative error per step of the integration, 1e-15 to 1e-3; the error of mass and radius is smaller than it.
   * @defaultValue 1e-11
   */
  readonly tolerance?: number;
  /**
   * Moment of inertia too.
   * @defaultValue false
   */
  readonly rotation?: boolean;
  /**
   * Love number and tidal deformability too; for cold or isentropic matter.
   * @defaultValue false
   */
  readonly tides?: boolean;
}

/** One star. */
export interface SingleStarOptions extends StarOptions {
  /** Baryon mass density at the centre, g/cm^3. */
  readonly centralDensity: number;
  /**
   * Keep the inside of the star as `profile`.
   * @defaultValue false
   */
  readonly profile?: boolean;
}

/** A star in hydrostatic equilibrium; frozen. */
export interface Star {
  /** Theory of gravity. */
  readonly relativity: Relativity;
  /** Baryon mass density at the centre, g/cm^3. */
  readonly centralDensity: number;
  /** dyn/cm^2. */
  readonly centralPressure: number;
  /** erg/g, without rest mass. */
  readonly centralSpecificEnergy: number;
  /** Gravitational mass, g (M_sun is `solarMass`). */
  readonly mass: number;
  /** Mass of the baryons (rho integrated over proper volume), g; equal to `mass` in Newton's theory. */
  readonly baryonMass: number;
  /** Radius (circumference over 2 pi), cm. */
  readonly radius: number;
  /**
   * Energy to take the star apart into matter of e = 0, erg: M_baryon c^2 - M c^2; in Newton's theory minus the sum of
   * gravitational and internal energy.
   */
  readonly bindingEnergy: number;
  /** G M/(R c^2). */
  readonly compactness: number;
  /** Redshift z of light from the surface; to first order in Newton's theory. */
  readonly redshift: number;
  /** Acceleration of free fall at the surface, cm/s^2. */
  readonly surfaceGravity: number;
  /** Density at the surface, g/cm^3; above 0 for matter with a lattice. */
  readonly surfaceDensity: number;
  /**
   * d ln M/d ln rho_c along the sequence of stars, exact. The fundamental radial mode changes between stable and unstable where
   * it changes its sign (Harrison, Thorne, Wakano & Wheeler 1965).
   */
  readonly massSlope: number;
  /** g cm^2, for slow rotation (Hartle 1967); undefined unless asked for. */
  readonly momentOfInertia: number | undefined;
  /** k_2 of the static tide of order 2; undefined unless asked for. */
  readonly loveNumber: number | undefined;
  /** Lambda = (2/3) k_2 (R c^2/(G M))^5; undefined unless asked for. */
  readonly tidalDeformability: number | undefined;
  /** What a reader of these numbers should know. */
  readonly findings: readonly StarFinding[];
  /** The inside; undefined unless asked for. */
  readonly profile: StarProfile | undefined;
}

/** A star whose optional members are there where the options ask for them by the word `true`. */
export type StarWith<Options> = Star &
  (Options extends { readonly profile: true } ? { readonly profile: StarProfile } : unknown) &
  (Options extends { readonly rotation: true } ? { readonly momentOfInertia: number } : unknown) &
  (Options extends { readonly tides: true }
    ? { readonly loveNumber: number; readonly tidalDeformability: number }
    : unknown);

/** Options without unknown names: a misspelt one does not compile. */
export type Known<Options, All> = Options & { readonly [Name in Exclude<keyof Options, keyof All>]: never };

const DEFAULT_TOLERANCE = 1e-11;

/**
 * The star of a central density.
 *
 * At the default tolerance mass, moment of inertia and radius are good to 1e-10, mostly to 1e-12, where the barotrope is smooth
 * between its jumps and the kinks it lists. A kink that it does not list may cost 200 tolerances. Tidal numbers lose ten times
 * more; matter softer than a polytrope of index 1 at its surface (rho ~ w^n, n < 1) keeps 1e-9 of them.
 *
 * ```ts
 * import { polytrope } from "fermistate/barotropes";
 * import { hydrostaticStar } from "fermistate/structure";
 *
 * const star = hydrostaticStar(polytrope({ constant: 1e13, index: 1.5 }), { centralDensity: 1e5, relativity: "newton" });
 * ```
 * @throws `not-a-number`, `out-of-range`, `invalid-option`; `outside-domain` where the barotrope does not know the
 * density (too low, too high, inside a density jump); `unstable` for matter whose pressure does not rise with density;
 * `integration-failed`
 */
export function hydrostaticStar<const Options extends SingleStarOptions>(
  barotrope: Barotrope,
  options: Known<Options, SingleStarOptions>,
): StarWith<Options> {
  requireStarOptions(options, ["centralDensity", "profile"]);
  return starMaker(barotrope, options)(options.centralDensity, options.profile === true) as StarWith<Options>;
}

/** An equation of state in place of a barotrope is a likely mistake. */
function requireBarotrope(barotrope: unknown): void {
  if (typeof (barotrope as Barotrope | undefined)?.fillAtPotential === "function") return;
  const allowed = "a barotrope: barotrope(equationOfState, composition, { temperature: 0 }) makes one";
  throw new FermistateError("invalid-option", { argument: "barotrope", given: barotrope, allowed });
}

const ownOptions = ["relativity", "tolerance", "rotation", "tides"];

/** Throws `invalid-option` unless the options are those of every star and the ones named here. */
export function requireStarOptions(options: unknown, others: readonly string[]): void {
  requireKnown("options", options, [...others, ...ownOptions]);
  for (const name of ["rotation", "tides", "profile"]) {
    const given = (options as Readonly<Record<string, unknown>>)[name];
    if (given === undefined || typeof given === "boolean") continue;
    throw new FermistateError("invalid-option", { argument: name, given, allowed: "true or false" });
  }
}

/** A function that makes stars of one barotrope by central density, with one working space. */
export function starMaker(
  barotrope: Barotrope,
  options: StarOptions,
): (centralDensity: number, keepsProfile?: boolean) => Star {
  requireBarotrope(barotrope);
  const { relativity = "general", rotation = false, tides = false } = options;
  if (relativity !== "newton" && relativity !== "general") {
    throw new FermistateError("invalid-option", {
      argument: "relativity",
      given: relativity,
      allowed: '"newton" or "general"',
    });
  }
  const tolerance = requireTolerance(options.tolerance);
  const solver = hydrostaticSolver(barotrope, { relativity, tolerance, rotation, tides });
  return (centralDensity, keepsProfile = false) => {
    requireFinite("centralDensity", centralDensity, "a density in g/cm^3");
    barotrope.state(centralDensity); // refuses what is outside the domain or inside a jump
    const { centre } = solver.result;
    centre[BAROTROPE_DENSITY] = centralDensity;
    barotrope.fillAtDensity(centre);
    centre[BAROTROPE_DENSITY] = centralDensity; // a barotrope may return it rounded
    const solution = keepsProfile ? denseSolution(solver.result.surface.length - 1) : undefined;
    integrate(solver, tolerance, solution?.add);
    const isGeneral = relativity === "general";
    const profile =
      solution &&
      starProfile({
        barotrope,
        solution,
        centre: centre.slice(),
        surface: solver.result.surface.slice(),
        surfacePotential: solver.surfaceMatter[BAROTROPE_POTENTIAL]!,
        isGeneral,
      });
    return starOf(solver, { relativity, tolerance, limits: barotrope.limits ?? [] }, profile);
  };
}

/** Integrates; where the rounding of the potential makes that impossible, the refusal says which tolerance is left. */
function integrate(solver: HydrostaticSolver, tolerance: number, onStep: ((step: OdeStep) => void) | undefined): void {
  try {
    solver.solve(onStep);
  } catch (error) {
    const rounding = roundingOf(solver);
    if (!(error instanceof FermistateError) || error.code !== "integration-failed" || rounding < tolerance) throw error;
    const allowed =
      `${(4 * rounding).toExponential(1)} to 1e-3 at this central density: the zero of energy of this matter is so far ` +
      "off that the potential at the centre has no more digits";
    throw new FermistateError("out-of-range", { argument: "tolerance", given: tolerance, allowed });
  }
}

/** Rounding of the potential over its rise from surface to centre. */
function roundingOf({ result, surfaceMatter }: HydrostaticSolver): number {
  const top = result.centre[BAROTROPE_POTENTIAL]!;
  return (Number.EPSILON * Math.abs(top)) / (top - surfaceMatter[BAROTROPE_POTENTIAL]!);
}

/** What else is known of a star. */
interface StarContext {
  readonly relativity: Relativity;
  readonly tolerance: number;
  readonly limits: readonly BarotropeLimit[];
}

/** The star just integrated. */
function starOf(
  solver: HydrostaticSolver,
  { relativity, tolerance, limits }: StarContext,
  profile: StarProfile | undefined,
): Star {
  const { result, surfaceMatter } = solver;
  const { centre, surface } = result;
  const isGeneral = relativity === "general";
  const c2 = speedOfLight * speedOfLight;
  const radius = Math.sqrt(surface[U]!);
  const cube = radius ** 3;
  const mass = surface[V]! * cube;
  const bindingEnergy = surface[BINDING]! * cube;
  const compactness = (gravitationalConstant * surface[V]! * surface[U]!) / c2;
  const root = Math.sqrt(1 - 2 * compactness);
  const love = Number.isNaN(result.tide) ? undefined : loveNumber(result.tide, isGeneral ? compactness : 0);
  const inertia = result.rotation;
  const surfacePressure = surfaceMatter[BAROTROPE_PRESSURE]!;
  return Object.freeze({
    relativity,
    centralDensity: centre[BAROTROPE_DENSITY]!,
    centralPressure: centre[BAROTROPE_PRESSURE]!,
    centralSpecificEnergy: centre[BAROTROPE_ENERGY]!,
    mass,
    baryonMass: isGeneral ? mass + bindingEnergy / c2 : mass,
    radius,
    bindingEnergy,
    compactness,
    redshift: isGeneral ? (2 * compactness) / (root * (1 + root)) : compactness,
    surfaceGravity: (gravitationalConstant * surface[V]! * radius) / (isGeneral ? root : 1),
    surfaceDensity: surfaceMatter[BAROTROPE_DENSITY]!,
    massSlope: result.massSlope,
    momentOfInertia: Number.isNaN(inertia)
      ? undefined
      : isGeneral
        ? ((c2 / gravitationalConstant) * cube * inertia) / (6 + 2 * inertia)
        : inertia * cube * radius * radius,
    loveNumber: love,
    tidalDeformability: love === undefined ? undefined : (2 / 3) * love * compactness ** -5,
    findings: starFindings({
      fastest: result.fastest,
      softest: result.softest,
      massSlope: result.massSlope,
      neglected: isGeneral ? 0 : centre[BAROTROPE_PRESSURE]! / (centre[BAROTROPE_DENSITY]! * c2),
      missing: surfacePressure > 0 ? surfacePressure / (surfaceMatter[BAROTROPE_DENSITY]! * compactness * c2) : 0,
      rounding: roundingOf(solver),
      tolerance,
      centralDensity: centre[BAROTROPE_DENSITY]!,
      limits,
    }),
    profile,
  });
}

/** The tolerance asked for, checked. */
export function requireTolerance(tolerance: unknown = DEFAULT_TOLERANCE): number {
  const allowed = "a relative tolerance from 1e-15 to 1e-3";
  const value = requireFinite("tolerance", tolerance, allowed);
  if (value < 1e-15 || value > 1e-3) {
    throw new FermistateError("out-of-range", { argument: "tolerance", given: value, allowed });
  }
  return value;
}
