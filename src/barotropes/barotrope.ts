/**
 * Matter whose pressure depends on density alone: cold, isothermal or isentropic.
 *
 * What stars are built on. The natural variable of hydrostatic equilibrium is the potential w with dw = dP/rho:
 * dw/dr = -G m/r^2 in Newton's theory, dw/dr = -(c^2 + e + P/rho) G (m + 4 pi r^3 P/c^2)/(c^2 r (r - 2 G m/c^2)) in
 * Einstein's. It is e + P/rho for cold and isentropic matter, F + P/rho for isothermal matter, continuous where
 * the density jumps, and finite at a surface.
 */

/** Slot of baryon mass density, g/cm^3. */
export const BAROTROPE_DENSITY = 0;
/** Slot of P, dyn/cm^2. */
export const BAROTROPE_PRESSURE = 1;
/** Slot of e, erg/g, without rest mass. */
export const BAROTROPE_ENERGY = 2;
/** Slot of w, erg/g: dw = dP/rho. */
export const BAROTROPE_POTENTIAL = 3;
/** Slot of d ln P/d ln rho along the barotrope. */
export const BAROTROPE_GAMMA = 4;
/** Length of the record. */
export const BAROTROPE_LENGTH = 5;

/** A phase transition at constant pressure: the density jumps. */
export interface DensityJump {
  /** dyn/cm^2. */
  readonly pressure: number;
  /** erg/g; the same on both sides. */
  readonly potential: number;
  /** Density just below and just above, g/cm^3. */
  readonly densities: readonly [below: number, above: number];
}

/** A density beyond which matter is no longer what the barotrope takes it for. */
export interface BarotropeLimit {
  /**
   * `electron-capture`: nuclei catch electrons, the composition changes; `neutron-drip`: neutrons leave the nuclei;
   * `extrapolated`: a fit or a published representation goes beyond the densities it was made for.
   */
  readonly code: "electron-capture" | "neutron-drip" | "extrapolated";
  /** g/cm^3. */
  readonly density: number;
  /** Whether it is the densities above it or those below that are concerned. */
  readonly side: "above" | "below";
  /** In a sentence. */
  readonly message: string;
}

/** The state of a barotrope at one density; immutable. */
export interface BarotropeState {
  /** Baryon mass density, g/cm^3. */
  readonly density: number;
  /** dyn/cm^2. */
  readonly pressure: number;
  /** erg/g, without rest mass. */
  readonly specificEnergy: number;
  /** w, erg/g: dw = dP/rho. */
  readonly potential: number;
  /** d ln P/d ln rho. */
  readonly gamma1: number;
  /** Relativistic sound speed, cm/s. */
  readonly soundSpeed: number;
}

/** Matter whose pressure depends on density alone. */
export interface Barotrope {
  /** What it is, in words. */
  readonly name: string;
  /** Where its physics holds, in a sentence or two. */
  readonly validity: string;
  /** Densities at which it answers, g/cm^3, ends included; the lowest is that of the surface where P = 0 there. */
  readonly density: readonly [lowest: number, highest: number];
  /** Density jumps by rising pressure; a density inside a jump is refused. */
  readonly jumps: readonly DensityJump[];
  /**
   * Potentials, erg/g, at which d rho/dw breaks and the density does not, or near which it changes fast: where solvers should
   * end a step.
   */
  readonly kinks?: readonly number[];
  /** Densities beyond which the physics is another, as far as known; it answers there all the same. */
  readonly limits?: readonly BarotropeLimit[];
  /** Fills the record from its density. Unchecked, allocates nothing. */
  fillAtDensity(record: Float64Array): void;
  /** Fills the record from its pressure. Unchecked, allocates nothing. */
  fillAtPressure(record: Float64Array): void;
  /** Fills the record from its potential. Unchecked, allocates nothing. */
  fillAtPotential(record: Float64Array): void;
  /** The state at a density. @throws `not-a-number`, `outside-domain` */
  state(density: number): BarotropeState;
}
