/**
 * Spheres of gas in equilibrium under their own gravity, in units of their own: the Lane-Emden and the isothermal function.
 *
 *     (1/xi^2) d/dxi (xi^2 dtheta/dxi) = -theta^n,    theta(0) = 1, theta'(0) = 0      (Lane 1870; Emden 1907)
 *     (1/xi^2) d/dxi (xi^2 dpsi/dxi)   = e^-psi,      psi(0) = 0,   psi'(0) = 0
 *
 * Chandrasekhar 1939, An Introduction to the Study of Stellar Structure, chapter IV. Integrated in s = theta^(1/2) or
 * psi^(1/2), with xi^2 and m/xi^3 as unknowns (m = -xi^2 theta' or xi^2 psi'): both are regular at the centre and
 *
 *     d(xi^2)/dtheta = -2/v,   dv/dtheta = -(theta^n - 3 v)/(v xi^2),   v = m/xi^3,
 *
 * so the surface theta = 0 is the end of the range, not a zero to be searched, and theta^n = s^(2n) is smooth enough
 * there for any n. The first step leaves the centre by the power series. Measured against 22-digit values and
 * mpmath: see {@link laneEmden}.
 */
import { FermistateError, requireFinite } from "../errors.js";
import { denseSolution } from "../numerics/dense-solution.js";
import { integrator, type OdeSystem } from "../numerics/ode.js";

/** Slots of the integration: s, xi^2, v. */
const U = 1;
const V = 2;
/** xi^2 where the series at the centre ends: the first term left out is 1e-18. */
const SERIES_END = 1e-3;
/** Below this the steps are as short as rounding lets them be. */
const TOLERANCE = 1e-15;

/** A polytrope at one radius. */
export interface LaneEmdenPoint {
  /** Radius in units of alpha, alpha^2 = (n + 1) P_c/(4 pi G rho_c^2). */
  readonly xi: number;
  /** theta: rho = rho_c theta^n, P = P_c theta^(n+1). */
  readonly theta: number;
  /** dtheta/dxi. */
  readonly slope: number;
  /** -xi^2 theta': the mass within xi is 4 pi alpha^3 rho_c times this. */
  readonly mass: number;
}

/** A polytrope of index n as a whole. */
export interface LaneEmden {
  /** n. */
  readonly index: number;
  /** xi_1, the first zero of theta: the radius in units of alpha. */
  readonly radius: number;
  /** theta'(xi_1). */
  readonly surfaceSlope: number;
  /** -xi_1^2 theta'(xi_1): M = 4 pi alpha^3 rho_c times this. */
  readonly mass: number;
  /** rho_c over the mean density: xi_1/(-3 theta'(xi_1)). */
  readonly densityRatio: number;
  /** The polytrope at 0 <= xi <= xi_1. @throws `not-a-number`, `outside-domain` */
  at(xi: number): LaneEmdenPoint;
}

/**
 * The polytrope of index n, for any n from 0 up to, but not including, 5 (where the radius becomes infinite).
 *
 * Relative error of xi_1 and of the mass: below 1e-14 for n <= 4.5. Near 5, xi_1 = 32 sqrt(3)/(pi (5 - n)) and the rounding
 * of n alone moves it by 5e-16/(5 - n); measured 3e-14 at 4.9, 2e-13 at 4.99, 3e-12 at 4.999. Inside, theta is good to 1e-13 absolute.
 *
 * ```ts
 * import { laneEmden } from "fermistate/structure";
 *
 * const sphere = laneEmden(1.5);
 * sphere.radius; // => 3.653753736219
 * sphere.mass; // => 2.714055120109
 * sphere.at(1).theta; // => 0.8451698
 * ```
 * @throws `not-a-number`, `out-of-range`
 */
export function laneEmden(index: number): LaneEmden {
  const allowed = "a number from 0 up to, but not including, 5: from there on the sphere has no surface";
  const n = requireFinite("index", index, allowed);
  if (n < 0 || n >= 5) throw new FermistateError("out-of-range", { argument: "index", given: n, allowed });
  const system: OdeSystem = {
    size: 2,
    fillSlope(point, slope) {
      const s = point[0]!;
      const v = point[V]!;
      slope[U] = (-4 * s) / v;
      slope[V] = (-2 * s * ((s * s) ** n - 3 * v)) / (v * point[U]!);
    },
  };
  const solver = integrator(system, { relativeTolerance: TOLERANCE });
  const solution = denseSolution(2);
  const start = laneEmdenSeries(n, SERIES_END);
  solver.point.set([Math.sqrt(start.theta), SERIES_END, start.mass / SERIES_END ** 1.5]);
  solver.integrate(0, { onStep: solution.add });
  const radius = Math.sqrt(solver.point[U]!);
  const mass = solver.point[V]! * radius ** 3;
  const point = new Float64Array(3);
  return Object.freeze({
    index: n,
    radius,
    surfaceSlope: -mass / radius ** 2,
    mass,
    densityRatio: 1 / (3 * solver.point[V]!),
    at(xi: number): LaneEmdenPoint {
      requireRadius(xi, radius);
      if (xi * xi <= SERIES_END) return laneEmdenSeries(n, xi * xi);
      solution.fillWhere(U, xi * xi, point);
      const within = point[V]! * xi ** 3;
      return { xi, theta: point[0]! ** 2, slope: -point[V]! * xi, mass: within };
    },
  });
}

/** The power series at the centre in u = xi^2 (Chandrasekhar 1939, IV, continued by the recurrence of theta^n). */
function laneEmdenSeries(n: number, u: number): LaneEmdenPoint {
  const a = n / 120;
  const b = (n * (8 * n - 5)) / 15120;
  const c = (n * (122 * n * n - 183 * n + 70)) / 3265920;
  const xi = Math.sqrt(u);
  const theta = 1 - u * (1 / 6 - u * (a - u * (b - u * c)));
  const v = 1 / 3 - u * (4 * a - u * (6 * b - u * 8 * c));
  return { xi, theta, slope: -v * xi, mass: v * u * xi };
}

/** An isothermal sphere at one radius. */
export interface IsothermalPoint {
  /** Radius in units of c_s/(4 pi G rho_c)^(1/2), c_s^2 = P/rho. */
  readonly xi: number;
  /** psi = ln(rho_c/rho): the potential in units of c_s^2. */
  readonly potential: number;
  /** dpsi/dxi. */
  readonly slope: number;
  /** xi^2 psi': the mass within xi is 4 pi rho_c (c_s^2/(4 pi G rho_c))^(3/2) times this. */
  readonly mass: number;
}

/** The isothermal sphere out to some radius. */
export interface IsothermalSphere {
  /** The largest xi it was made for. */
  readonly radius: number;
  /** The sphere at 0 <= xi <= radius. @throws `not-a-number`, `outside-domain` */
  at(xi: number): IsothermalPoint;
}

/** s, xi^2, v with psi = s^2. */
const isothermalSystem: OdeSystem = {
  size: 2,
  fillSlope(point, slope) {
    const s = point[0]!;
    const v = point[V]!;
    slope[U] = (4 * s) / v;
    slope[V] = (2 * s * (Math.exp(-s * s) - 3 * v)) / (v * point[U]!);
  },
};
/** psi = 50 lies beyond xi = 1e10. */
const FARTHEST = Math.sqrt(50);

/**
 * The isothermal sphere (Emden 1907, Chandrasekhar 1939, chapter IV.22) out to xi = radius <= 1e10; it has no surface.
 * Relative error of psi and of the mass: 1e-13.
 *
 * ```ts
 * import { isothermalSphere } from "fermistate/structure";
 *
 * isothermalSphere(10).at(10).potential; // => 3.73656
 * ```
 * @throws `not-a-number`, `out-of-range`
 */
export function isothermalSphere(radius: number): IsothermalSphere {
  const allowed = "a positive number up to 1e10, in units of c_s/(4 pi G rho_c)^(1/2)";
  requireFinite("radius", radius, allowed);
  if (radius <= 0 || radius > 1e10) {
    throw new FermistateError("out-of-range", { argument: "radius", given: radius, allowed });
  }
  const solver = isothermalSolver();
  const solution = denseSolution(2);
  const end = radius * radius;
  if (end > SERIES_END) solver.integrate(FARTHEST, { onStep: solution.add, event: (point) => point[U]! - end });
  const point = new Float64Array(3);
  return Object.freeze({
    radius,
    at(xi: number): IsothermalPoint {
      requireRadius(xi, radius);
      if (xi * xi <= SERIES_END) return isothermalSeries(xi * xi);
      solution.fillWhere(U, xi * xi, point);
      return { xi, potential: point[0]! ** 2, slope: point[V]! * xi, mass: point[V]! * xi ** 3 };
    },
  });
}

/** The heaviest isothermal sphere that a given outer pressure can hold. */
export interface BonnorEbertSphere {
  /** xi at its edge. */
  readonly radius: number;
  /** Density at the centre over that at the edge. */
  readonly densityRatio: number;
  /** m in M = m c_s^4/(G^(3/2) P^(1/2)), P the pressure at the edge. */
  readonly mass: number;
  /** R in units of G M/c_s^2. */
  readonly radiusOverMass: number;
}

/**
 * The critical isothermal sphere of Ebert 1955 (Z. Astrophys. 37, 217) and Bonnor 1956 (MNRAS 116, 351): where the mass
 * held by a given outer pressure is largest, psi'^2 = 2 e^-psi.
 *
 * ```ts
 * import { bonnorEbertSphere } from "fermistate/structure";
 *
 * bonnorEbertSphere().mass; // => 1.18223
 * bonnorEbertSphere().densityRatio; // => 14.0420
 * ```
 */
export function bonnorEbertSphere(): BonnorEbertSphere {
  const solver = isothermalSolver();
  const { point } = solver;
  solver.integrate(FARTHEST, { event: (at) => at[V]! ** 2 * at[U]! - 2 * Math.exp(-at[0]! * at[0]!) });
  const radius = Math.sqrt(point[U]!);
  const densityRatio = Math.exp(point[0]! ** 2);
  const mass = (point[V]! * radius ** 3) / Math.sqrt(4 * Math.PI * densityRatio);
  return Object.freeze({ radius, densityRatio, mass, radiusOverMass: 1 / (point[V]! * point[U]!) });
}

/** An integrator that stands where the series ends. */
function isothermalSolver(): ReturnType<typeof integrator> {
  const solver = integrator(isothermalSystem, { relativeTolerance: TOLERANCE });
  const start = isothermalSeries(SERIES_END);
  solver.point.set([Math.sqrt(start.potential), SERIES_END, start.mass / SERIES_END ** 1.5]);
  return solver;
}

function isothermalSeries(u: number): IsothermalPoint {
  const xi = Math.sqrt(u);
  const potential = u * (1 / 6 - u * (1 / 120 - u * (1 / 1890 - (u * 61) / 1632960)));
  const v = 1 / 3 - u * (1 / 30 - u * (1 / 315 - (u * 61) / 204120));
  return { xi, potential, slope: v * xi, mass: v * u * xi };
}

function requireRadius(xi: number, radius: number): void {
  const allowed = `0 <= xi <= ${radius}`;
  requireFinite("xi", xi, allowed);
  if (xi < 0 || xi > radius) throw new FermistateError("outside-domain", { argument: "xi", given: xi, allowed });
}
