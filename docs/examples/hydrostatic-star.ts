/**
 * A white dwarf in hydrostatic equilibrium, by a general-purpose integrator (odex: the extrapolation method of Hairer,
 * Norsett & Wanner, Solving Ordinary Differential Equations I, section II.9).
 *
 * Pressure is the coordinate, as it runs one way from the centre to the surface, and the equation of state is asked for
 * density at pressure and temperature. With q = r^2 and v = m/r^3 both unknowns are smooth at the centre:
 *
 *     dP/dr = -G m rho/r^2,  dm/dr = 4 pi r^2 rho   =>   dq/dP = -2/(G rho v),  dv/dP = (3 v - 4 pi rho)/(G rho v q)
 *
 * Newtonian gravity; rho is its source.
 */
import { type Composition, type EquationOfState, gravitationalConstant, type State, solve } from "fermistate";
import { Solver } from "odex";

/** What the star is made of and where it begins and ends. */
export interface StarOptions {
  readonly eos: EquationOfState;
  readonly matter: Composition;
  /** g/cm^3. */
  readonly centralDensity: number;
  /** Of all of it, K: electrons conduct so well that a dwarf's interior is nearly isothermal. */
  readonly temperature: number;
  /** Pressure at which to stop, as a share of the central pressure. */
  readonly surface: number;
  /** Relative error per step that the integrator aims at. */
  readonly tolerance: number;
}

/** A shell: radius cm, mass within it g, pressure dyn/cm^2, density g/cm^3. */
export interface Shell {
  readonly radius: number;
  readonly mass: number;
  readonly pressure: number;
  readonly density: number;
}

/** The star from the centre outwards, one shell per step of the integrator, and what it took. */
export interface Star {
  readonly shells: readonly Shell[];
  readonly derivatives: number;
}

/** Integrates a star. */
export function hydrostaticStar({ eos, matter, centralDensity, temperature, surface, tolerance }: StarOptions): Star {
  const centre = eos.state(centralDensity, temperature, matter);
  let last = centre;
  /** Matter at a pressure; what was found last is the start of the search. */
  const at = (lnP: number): State => {
    last = solve(eos, matter, { pressure: Math.exp(lnP), temperature }, { guess: last }).state;
    return last;
  };

  const derivative = (lnP: number, [q, v]: number[]): number[] => {
    const { pressure, density: rho } = at(lnP);
    const dq = (-2 * pressure) / (gravitationalConstant * rho * v!);
    // At the centre v = 4 pi/3 (rho - 2/5 drho) so that dv/dlnP = (4 pi/5) drho/dlnP.
    const dv =
      q === 0 ? (0.8 * Math.PI * rho) / centre.densityExponent : 0.5 * dq * ((4 * Math.PI * rho - 3 * v!) / q!);
    return [dq, dv];
  };

  const shells: Shell[] = [];
  const integrator = new Solver(2);
  integrator.relativeTolerance = tolerance;
  integrator.absoluteTolerance = 0;
  const from = Math.log(centre.pressure);
  const start = [0, (4 * Math.PI * centralDensity) / 3];
  const { outcome, nEval } = integrator.solve(
    derivative,
    from,
    start,
    from + Math.log(surface),
    (_, __, lnP, [q, v]) => {
      const radius = Math.sqrt(q!);
      const { pressure, density } = at(lnP);
      shells.push({ radius, mass: v! * radius ** 3, pressure, density });
    },
  );
  if (outcome !== 0) throw new Error(`the integrator gave up with outcome ${outcome}`);
  return { shells, derivatives: nEval };
}
