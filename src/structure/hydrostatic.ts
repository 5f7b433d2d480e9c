/**
 * Integration of a star from the series at its centre through its phases to the surface; the equations stand in
 * hydrostatic-equations.ts.
 *
 * Every density jump and kink of the matter ends a range of integration, so no step crosses one.
 */
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
} from "../barotropes/barotrope.js";
import { gravitationalConstant as G, speedOfLight } from "../constants.js";
import { FermistateError } from "../errors.js";
import { type Integrator, integrator, type OdeStep, type Watch } from "../numerics/ode.js";
import {
  BINDING,
  DU,
  DV,
  type EquationOptions,
  FASTEST,
  HIGHEST,
  hydrostaticEquations,
  LOWEST,
  SOFTEST,
  U,
  V,
} from "./hydrostatic-equations.js";

const C2 = speedOfLight * speedOfLight;
const FOUR_PI = 4 * Math.PI;
/** The series at the centre ends here, in units of the smaller of w_c - w_surface and dP/drho: its error is this cubed. */
const CENTRE = 1e-5;
/** Nor does it end nearer to the centre than this, in units of w_c - w_surface, unless a core is smaller: rounding. */
const SHALLOWEST = 1e-7;
/** A core above a density jump that is thinner than this in w is left out: its mass is this to the power 3/2. */
const THINNEST_CORE = 1e-9;
/** Ratio of successive ranges of s towards the surface. */
const SHRINKING = 0.7;

/** What is integrated. */
export interface HydrostaticOptions extends EquationOptions {
  /** Relative error per step. */
  readonly tolerance: number;
}

/** What an integration leaves. */
interface HydrostaticResult {
  /** Record of the matter at the centre. */
  readonly centre: Float64Array;
  /** u, v, binding at the surface in their slots. */
  readonly surface: Float64Array;
  /** d ln M/d ln rho_c. */
  massSlope: number;
  /** phi of slow rotation (general relativity) or I/R^5 (Newton); NaN if not asked for. */
  rotation: number;
  /** d ln H/d ln r just outside the surface; NaN if not asked for. */
  tide: number;
  /** Largest (c_s/c)^2 met. */
  fastest: number;
  /** Smallest dP/d ln rho met, dyn/cm^2. */
  softest: number;
}

/** Integrates stars of one kind of matter; keeps its working space. */
export interface HydrostaticSolver {
  /** Of the last star. */
  readonly result: HydrostaticResult;
  /** Record of the matter at the surface: of the lowest density. */
  readonly surfaceMatter: Float64Array;
  /** Counts over all stars. */
  readonly count: Integrator["count"];
  /** Integrates the star whose centre is `result.centre`, which the caller has filled. */
  solve(onStep?: (step: OdeStep) => void): void;
}

/** Potentials of jumps and kinks, rising; those that differ by rounding count once. */
function breaksOf({ jumps, kinks = [] }: Barotrope): readonly number[] {
  const all = [...jumps.map((jump) => jump.potential), ...kinks].sort((a, b) => a - b);
  return all.filter((w, i) => i === 0 || w - all[i - 1]! > 4 * Number.EPSILON * Math.abs(w));
}

/** A solver for one barotrope. */
export function hydrostaticSolver(barotrope: Barotrope, options: HydrostaticOptions): HydrostaticSolver {
  const { relativity, tolerance, rotation, tides } = options;
  const isGeneral = relativity === "general";
  const surfaceMatter = new Float64Array(BAROTROPE_LENGTH);
  surfaceMatter[BAROTROPE_DENSITY] = barotrope.density[0];
  barotrope.fillAtDensity(surfaceMatter);
  const surfacePotential = surfaceMatter[BAROTROPE_POTENTIAL]!;
  const breaks = breaksOf(barotrope);
  const equations = hydrostaticEquations(barotrope, surfacePotential, options);
  const { size, inertiaSlot: INERTIA, tideSlot: TIDE, record, limits, fillMatter } = equations;

  const absolute = new Float64Array(size);
  const solver = integrator(
    { size, fillSlope: equations.fillSlope },
    { relativeTolerance: tolerance, absoluteTolerance: absolute },
  );
  const { point } = solver;
  const result: HydrostaticResult = {
    centre: new Float64Array(BAROTROPE_LENGTH),
    surface: new Float64Array(size + 1),
    massSlope: 0,
    rotation: Number.NaN,
    tide: Number.NaN,
    fastest: 0,
    softest: 0,
  };

  /** The point where the series at the centre ends; matter in `record`, `range` of w left in this phase. */
  function start(range: number): void {
    const whole = record[BAROTROPE_POTENTIAL]! - surfacePotential;
    const density = record[BAROTROPE_DENSITY]!;
    const energy = record[BAROTROPE_ENERGY]!;
    const pressure = record[BAROTROPE_PRESSURE]!;
    const stiffness = record[BAROTROPE_GAMMA]! * pressure;
    const wished = Math.max(CENTRE * Math.min(range, stiffness / density), SHALLOWEST * whole);
    point[0] = Math.sqrt(whole - Math.min(wished, 0.1 * range));
    const depth = whole - point[0] ** 2;
    const enthalpy = isGeneral ? C2 + energy + pressure / density : C2;
    const sigma = isGeneral ? density * (1 + energy / C2) : density;
    const p = isGeneral ? pressure / C2 : 0;
    const perDepth = ((density * density) / stiffness) * (enthalpy / C2); // d sigma/dw
    const v = (FOUR_PI * sigma) / 3;
    const v1 = (-FOUR_PI * perDepth) / 5;
    const q = v + FOUR_PI * p;
    const u1 = (2 * C2) / (G * enthalpy * q);
    const ku = isGeneral ? (4 * v) / (enthalpy * q) : 0;
    const kw = isGeneral ? u1 * (1 / enthalpy + (FOUR_PI * density) / (C2 * q)) : 0;
    const dv = (8 * Math.PI * perDepth) / 15;
    const u = depth * (u1 + (depth / 2) * (kw - ku * u1 - (u1 / q) * v1));
    point[U] = u;
    point[V] = v + v1 * depth;
    point[BINDING] = (FOUR_PI / 3) * density * -energy;
    point[DU] = u1 - depth * ((u1 / q) * dv + ku * u1);
    point[DV] = dv;
    const a = FOUR_PI * G * u;
    if (rotation) point[INERTIA] = isGeneral ? (0.8 * a * (sigma + p)) / C2 : (8 * Math.PI * density) / 15;
    if (tides) {
      const kinematic = isGeneral ? ((8 / 3 + 2 - 5) * sigma - 11 * p) / C2 : 0; // 4x + 2f - (5 sigma + 9p) terms
      point[TIDE] = (a / 7) * (kinematic - ((sigma + p) * (sigma + p)) / stiffness);
    }
    // Errors are judged by the size the unknowns have in the star, not by that at the centre.
    absolute[U - 1] = 0.01 * tolerance * u1 * whole;
    absolute[BINDING - 1] = 0.01 * tolerance * v * Math.max(whole, Math.abs(energy));
    // The derivatives begin with the rounding of v over the depth there, which dies out: they are held more loosely.
    const loose = Math.max(tolerance, 1e-8);
    absolute[DU - 1] = loose * u1;
    absolute[DV - 1] = v * Math.max(loose / whole, (10 * Number.EPSILON) / depth);
    if (tides) absolute[TIDE - 1] = tolerance;
    solver.firstStep = 0;
  }

  /** Sets the present phase to w in [low, high], a few roundings inside where its neighbours are other phases. */
  function enter(low: number, high: number, atSurface: boolean, atCentre: boolean): void {
    const rounding = 8 * Number.EPSILON;
    const size = Math.max(Math.abs(low), Math.abs(high));
    limits[LOWEST] =
      low + Math.max(rounding * (atSurface ? size : Math.abs(low)), atSurface ? 1e-14 * (high - low) : 0);
    limits[HIGHEST] = atCentre ? high : high - rounding * Math.abs(high);
  }

  /** Gravitating mass density, and mass density of the pressure, at the upper or lower end of the present phase. */
  function sigmaAt(limit: typeof LOWEST | typeof HIGHEST): number {
    record[BAROTROPE_POTENTIAL] = limits[limit]!;
    barotrope.fillAtPotential(record);
    return record[BAROTROPE_DENSITY]! * (isGeneral ? 1 + record[BAROTROPE_ENERGY]! / C2 : 1);
  }

  function solve(onStep?: (step: OdeStep) => void): void {
    const { centre, surface } = result;
    requireStable(centre);
    const whole = centre[BAROTROPE_POTENTIAL]! - surfacePotential;
    if (!(whole > 0)) {
      const allowed = `a density above that of the surface, ${barotrope.density[0]} g/cm^3`;
      throw new FermistateError("outside-domain", {
        argument: "centralDensity",
        given: centre[BAROTROPE_DENSITY],
        allowed,
      });
    }
    limits[FASTEST] = 0;
    limits[SOFTEST] = Number.POSITIVE_INFINITY;
    const watch = onStep === undefined ? {} : { onStep };
    let high = centre[BAROTROPE_POTENTIAL]!;
    const below = breaks.filter((w) => w > surfacePotential && w < high - THINNEST_CORE * whole);
    const ends = [surfacePotential, ...below];
    // A centre on top of a jump: the star of the phase below, since the core of the denser phase has no extent.
    const top = barotrope.jumps.find(
      (jump) => jump.potential <= high && jump.potential >= high - THINNEST_CORE * whole,
    );
    if (top !== undefined) high = top.potential;
    for (let i = ends.length - 1; i >= 0; i--) {
      const low = ends[i]!;
      const isFirst = i === ends.length - 1;
      const before = tides && !isFirst ? sigmaAt(LOWEST) : 0;
      enter(low, high, i === 0, isFirst && top === undefined);
      if (isFirst) {
        record.set(centre);
        if (top !== undefined) sigmaAt(HIGHEST);
        start(record[BAROTROPE_POTENTIAL]! - low);
      } else if (tides) lowerTide(before - sigmaAt(HIGHEST));
      if (i === 0) approachSurface(watch);
      solver.integrate(Math.sqrt(low - surfacePotential), watch);
      high = low;
    }
    if (tides) lowerTide(sigmaAt(LOWEST));
    surface.set(point);
    result.fastest = limits[FASTEST]!;
    result.softest = limits[SOFTEST]!;
    result.rotation = rotation ? point[INERTIA]! : Number.NaN;
    result.tide = tides ? point[TIDE]! + 2 : Number.NaN;
    const perLog = (centre[BAROTROPE_GAMMA]! * centre[BAROTROPE_PRESSURE]!) / centre[BAROTROPE_DENSITY]!; // dw/d ln rho
    result.massSlope = perLog * (point[DV]! / point[V]! + (1.5 * point[DU]!) / point[U]!);
  }

  /**
   * Goes towards the surface in ranges of s that shrink in proportion, until the mass outside is below the tolerance:
   * matter there has scales of its own, as small as its w, which a long step would not notice.
   */
  function approachSurface(watch: Watch): void {
    for (;;) {
      fillMatter(point);
      const outside = (FOUR_PI * record[BAROTROPE_DENSITY]! * point[0]! ** 2) / (G * point[V]! * point[V]! * point[U]!);
      if (outside < 0.1 * tolerance) return;
      solver.integrate(SHRINKING * point[0]!, watch);
    }
  }

  /** The tide where the density falls by `step` outwards, at the point; pressure as in `record`. */
  function lowerTide(step: number): void {
    const p = isGeneral ? record[BAROTROPE_PRESSURE]! / C2 : 0;
    point[TIDE]! -= (FOUR_PI * step) / (point[V]! + FOUR_PI * p);
  }

  function requireStable(centre: Float64Array): void {
    const isStable = centre[BAROTROPE_PRESSURE]! > 0 && centre[BAROTROPE_GAMMA]! > 0 && centre[BAROTROPE_DENSITY]! > 0;
    if (isStable) return;
    throw new FermistateError("unstable", {
      argument: "barotrope",
      given: `P = ${centre[BAROTROPE_PRESSURE]} dyn/cm^2, d ln P/d ln rho = ${centre[BAROTROPE_GAMMA]}`,
      allowed: `matter whose pressure is positive and rises with density, at ${centre[BAROTROPE_DENSITY]} g/cm^3`,
    });
  }

  return { result, surfaceMatter, count: solver.count, solve };
}
