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

/** Slot of u = r^2, cm^2; slot 0 is s. */
export const U = 1;
/** Slot of v = m/r^3, g/cm^3. */
export const V = 2;
/** Slot of the binding energy over r^3, erg/cm^3. */
export const BINDING = 3;
/** Slot of du/dw_c. */
export const DU = 4;
/** Slot of dv/dw_c. */
export const DV = 5;
const CORE = 5;

/** Slots of {@link HydrostaticEquations.limits}: the ends of the present phase in w, slightly inside. */
export const LOWEST = 0;
export const HIGHEST = 1;
/** Slot of the largest (c_s/c)^2 met; not written in Newton's theory. */
export const FASTEST = 2;
/** Slot of the smallest dP/d ln rho met, dyn/cm^2. */
export const SOFTEST = 3;

const C2 = speedOfLight * speedOfLight;
const FOUR_PI = 4 * Math.PI;

/** Newton's theory of gravity or Einstein's. */
export type Relativity = "newton" | "general";

/** Which equations. */
export interface EquationOptions {
  /** Theory of gravity. */
  readonly relativity: Relativity;
  /** Moment of inertia too. */
  readonly rotation: boolean;
  /** Tidal deformability too. */
  readonly tides: boolean;
}

/** The equations of stars of one kind of matter, with their working space. */
export interface HydrostaticEquations {
  /** Number of unknowns. */
  readonly size: number;
  /** Slot of phi (general relativity) or I/r^5 (Newton); of no use unless asked for. */
  readonly inertiaSlot: number;
  /** Slot of t; of no use unless asked for. */
  readonly tideSlot: number;
  /** Matter at the last point. */
  readonly record: Float64Array;
  /** See the slots. */
  readonly limits: Float64Array;
  /** Fills `record` at the w of slot 0 of a point, kept within the limits. */
  fillMatter(point: Float64Array): void;
  /** Fills the slopes at a point. */
  fillSlope(point: Float64Array, slope: Float64Array): void;
}

/** The equations for a barotrope whose surface has the potential given. */
export function hydrostaticEquations(
  barotrope: Barotrope,
  surfacePotential: number,
  { relativity, rotation, tides }: EquationOptions,
): HydrostaticEquations {
  const size = CORE + (rotation ? 1 : 0) + (tides ? 1 : 0);
  const INERTIA = CORE + 1;
  const TIDE = size;
  const record = new Float64Array(BAROTROPE_LENGTH);
  const limits = new Float64Array(4);

  function fillMatter(s: Float64Array): void {
    const w = surfacePotential + s[0]! * s[0]!;
    record[BAROTROPE_POTENTIAL] = w < limits[LOWEST]! ? limits[LOWEST]! : w > limits[HIGHEST]! ? limits[HIGHEST]! : w;
    barotrope.fillAtPotential(record);
  }

  /** Slopes in Newton's theory. */
  function fillNewton(point: Float64Array, slope: Float64Array): void {
    fillMatter(point);
    const u = point[U]!;
    const v = point[V]!;
    const density = record[BAROTROPE_DENSITY]!;
    const stiffness = record[BAROTROPE_GAMMA]! * record[BAROTROPE_PRESSURE]!;
    if (stiffness < limits[SOFTEST]!) limits[SOFTEST] = stiffness;
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
    if (speed > limits[FASTEST]!) limits[FASTEST] = speed;
    if (stiffness < limits[SOFTEST]!) limits[SOFTEST] = stiffness;
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

  return {
    size,
    inertiaSlot: INERTIA,
    tideSlot: TIDE,
    record,
    limits,
    fillMatter,
    fillSlope: relativity === "general" ? fillGeneral : fillNewton,
  };
}
