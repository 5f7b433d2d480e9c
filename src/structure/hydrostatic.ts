/**
 * The equations of hydrostatic equilibrium, in the potential w of the matter (dw = dP/rho) as independent variable.
 *
 * With u = r^2, v = m/r^3, sigma the mass density that gravitates (rho in Newton's theory, rho(1 + e/c^2) in Einstein's),
 * E = c^2 + e + P/rho, q = v + 4 pi P/c^2 and x = 2 G v u/c^2 = 2 G m/(r c^2), Tolman's and Oppenheimer & Volkoff's
 * equations (1939, Phys. Rev. 55, 364 and 374) are
 *
 *     du/dw = K = -(2/G) (c^2/E) (1 - x)/q,      dv/dw = (4 pi sigma - 3 v) K/(2u);      Newton: K = -2/(G v).
 *
 * Both unknowns are regular from centre to surface, the surface is the end of the range of w, and density jumps and kinks stand
 * at known w (the enthalpy form: Lindblom 1992, ApJ 398, 569; Newton's theory alike). The integration runs in
 * s = (w - w_surface)^(1/2), in which rho(w) is smooth at the surface. rho(w) does not know the centre, so the derivatives
 * of u and v with respect to the central w obey the same equations linearised, without derivatives of the matter: they give
 * dM/drho_c exactly.
 *
 * Further unknowns, by y = dy/d ln r = (K/2u)^-1 dy/dw:
 * - binding energy D = d r^3: d' = 4 pi rho g - 3d, g = c^2 [(1 - x)^(-1/2) - 1] - e; Newton: g = G v u - e. So
 *   M_baryon c^2 - M c^2 is an integral of its own, not a difference.
 * - slow rotation (Hartle 1967, ApJ 150, 1005, eq. 46): for phi = d ln(omega bar)/d ln r, phi' = -phi(phi + 3) + F(phi + 4),
 *   F = 4 pi G u (sigma + P/c^2)/(c^2 (1 - x)), I = (c^2/G) R^3 phi/(6 + 2 phi); Newton: I = i r^5, i' = 8 pi rho/3 - 5 i.
 * - static tide of order 2 (Hinderer 2008, ApJ 677, 1216, and erratum 2009, ApJ 697, 964; Riccati form of Postnikov,
 *   Prakash & Lattimer 2010, Phys. Rev. D 82, 024016): t = d ln H/d ln r - 2, written so that nothing cancels at the
 *   centre; at a density jump t falls by 4 pi (sigma_in - sigma_out)/q (Damour & Nagar 2009, Phys. Rev. D 80, 084035).
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

/** Slot of u = r^2, cm^2; slot 0 is s. */
export const U = 1;
/** Slot of v = m/r^3, g/cm^3. */
export const V = 2;
/** Slot of the binding energy over r^3, erg/cm^3. */
export const BINDING = 3;
const DU = 4;
const DV = 5;
const CORE = 5;

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

/** Newton's theory of gravity or Einstein's. */
export type Relativity = "newton" | "general";

/** What is integrated. */
export interface HydrostaticOptions {
  /** Theory of gravity. */
  readonly relativity: Relativity;
  /** Relative error per step. */
  readonly tolerance: number;
  /** Moment of inertia too. */
  readonly rotation: boolean;
  /** Tidal deformability too. */
  readonly tides: boolean;
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

/** A solver for one barotrope. */
export function hydrostaticSolver(barotrope: Barotrope, options: HydrostaticOptions): HydrostaticSolver {
  const { relativity, tolerance, rotation, tides } = options;
  const isGeneral = relativity === "general";
  const size = CORE + (rotation ? 1 : 0) + (tides ? 1 : 0);
  const INERTIA = CORE + 1;
  const TIDE = size;
  const record = new Float64Array(BAROTROPE_LENGTH);
  const surfaceMatter = new Float64Array(BAROTROPE_LENGTH);
  surfaceMatter[BAROTROPE_DENSITY] = barotrope.density[0];
  barotrope.fillAtDensity(surfaceMatter);
  const surfacePotential = surfaceMatter[BAROTROPE_POTENTIAL]!;
  const breaks = [...barotrope.jumps.map((jump) => jump.potential), ...(barotrope.kinks ?? [])].sort((a, b) => a - b);
  /** Ends of the present phase in w, slightly inside; the largest (c_s/c)^2. */
  const limits = new Float64Array(3);

  function fillMatter(s: Float64Array): void {
    const w = surfacePotential + s[0]! * s[0]!;
    record[BAROTROPE_POTENTIAL] = w < limits[0]! ? limits[0]! : w > limits[1]! ? limits[1]! : w;
    barotrope.fillAtPotential(record);
  }

  /** Slopes in Newton's theory. */
  function fillNewton(point: Float64Array, slope: Float64Array): void {
    fillMatter(point);
    const u = point[U]!;
    const v = point[V]!;
    const density = record[BAROTROPE_DENSITY]!;
    const twoS = 2 * point[0]!;
    const k = -2 / (G * v);
    const toLog = (twoS * k) / (2 * u); // d ln r/ds
    const excess = FOUR_PI * density - 3 * v;
    slope[U] = twoS * k;
    slope[V] = toLog * excess;
    slope[BINDING] = toLog * (FOUR_PI * density * (G * v * u - record[BAROTROPE_ENERGY]!) - 3 * point[BINDING]!);
    const dk = (-k / v) * point[DV]!;
    slope[DU] = twoS * dk;
    slope[DV] = toLog * (excess * (dk / k - point[DU]! / u) - 3 * point[DV]!);
    if (rotation) slope[INERTIA] = toLog * ((8 / 3) * Math.PI * density - 5 * point[INERTIA]!);
    if (tides) {
      const stiffness = record[BAROTROPE_GAMMA]! * record[BAROTROPE_PRESSURE]!;
      const t = point[TIDE]!;
      slope[TIDE] = -toLog * (t * (t + 5) + (FOUR_PI * G * u * density * density) / stiffness);
    }
  }

  /** Slopes in Einstein's theory. */
  function fillGeneral(point: Float64Array, slope: Float64Array): void {
    fillMatter(point);
    const u = point[U]!;
    const v = point[V]!;
    const density = record[BAROTROPE_DENSITY]!;
    const energy = record[BAROTROPE_ENERGY]!;
    const pressure = record[BAROTROPE_PRESSURE]!;
    const stiffness = record[BAROTROPE_GAMMA]! * pressure;
    const enthalpy = C2 + energy + pressure / density;
    const sigma = density * (1 + energy / C2);
    const p = pressure / C2;
    const q = v + FOUR_PI * p;
    const x = (2 * G * v * u) / C2;
    const twoS = 2 * point[0]!;
    const k = ((-2 / G) * (C2 / enthalpy) * (1 - x)) / q;
    const toLog = (twoS * k) / (2 * u);
    const excess = FOUR_PI * sigma - 3 * v;
    const speed = stiffness / (density * enthalpy);
    if (speed > limits[2]!) limits[2] = speed;
    slope[U] = twoS * k;
    slope[V] = toLog * excess;
    const root = Math.sqrt(1 - x);
    const gained = (C2 * x) / (root * (1 + root)) - energy;
    slope[BINDING] = toLog * (FOUR_PI * density * gained - 3 * point[BINDING]!);
    const dk = (4 * v * point[DU]! + 4 * u * point[DV]!) / (enthalpy * q) - (k / q) * point[DV]!;
    slope[DU] = twoS * dk;
    slope[DV] = toLog * (excess * (dk / k - point[DU]! / u) - 3 * point[DV]!);
    const a = ((FOUR_PI * G) / C2) * u; // times a density: its share of x
    if (rotation) {
      const phi = point[INERTIA]!;
      slope[INERTIA] = toLog * (((a * (sigma + p)) / (1 - x)) * (phi + 4) - phi * (phi + 3));
    }
    if (tides) {
      const t = point[TIDE]!;
      const f = a * (sigma - p);
      const source = a * (5 * sigma + 9 * p + ((sigma + p) * (sigma + p) * C2) / stiffness);
      const redshift = (2 * G * u * q) / (C2 * (1 - x));
      slope[TIDE] =
        toLog * ((4 * x + 2 * f - source) / (1 - x) + redshift * redshift - t * (t + 4 + (1 - f) / (1 - x)));
    }
  }

  const absolute = new Float64Array(size);
  const solver = integrator(
    { size, fillSlope: isGeneral ? fillGeneral : fillNewton },
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
    limits[0] = low + Math.max(rounding * (atSurface ? size : Math.abs(low)), atSurface ? 1e-14 * (high - low) : 0);
    limits[1] = atCentre ? high : high - rounding * Math.abs(high);
  }

  /** Gravitating mass density, and mass density of the pressure, at the upper or lower end of the present phase. */
  function sigmaAt(limit: number): number {
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
    limits[2] = 0;
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
      const before = tides && !isFirst ? sigmaAt(0) : 0;
      enter(low, high, i === 0, isFirst && top === undefined);
      if (isFirst) {
        record.set(centre);
        if (top !== undefined) sigmaAt(1);
        start(record[BAROTROPE_POTENTIAL]! - low);
      } else if (tides) lowerTide(before - sigmaAt(1));
      if (i === 0) approachSurface(watch);
      solver.integrate(Math.sqrt(low - surfacePotential), watch);
      high = low;
    }
    if (tides) lowerTide(sigmaAt(0));
    surface.set(point);
    result.fastest = limits[2]!;
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
