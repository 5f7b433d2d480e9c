/**
 * One record carries a Fermi gas through its evaluation: a Float64Array with named slots.
 *
 * Records, not numbers, because a double that crosses a call which V8 does not inline is boxed on the heap.
 *
 * Natural units of the particle: m = hbar = c = k = 1, and every density and pressure without its factor 1/pi^2.
 * E = sqrt(1 + p^2), mu with the rest mass, nu = mu/theta, eta = (mu - 1)/theta, theta = kT/mc^2.
 *
 * The moments. Choose a centre Ec, write mu = Ec + theta psi, y = (E - Ec)/theta, z = y - psi, and let phi_0 = f(z)
 * = 1/(e^z + 1), phi_(m+1) = -d phi_m/dz. With antiparticles at yb = (E + Ec)/theta, zb = yb + psi,
 *
 *     M_(m,k) = int_0^inf p^2 [ phi_m(z) y^k - (-1)^(m-k) phi_m(zb) yb^k ] dp
 *
 * d/dpsi raises m, theta d/dtheta at fixed psi raises m and k and multiplies by -k: so a dozen moments give all
 * derivatives. Two frames: centre at the rest mass or at zero with psi free (LAMBDA = 1), or centre at mu with
 * psi = 0 (LAMBDA = 0, degenerate gas: then differentiate at fixed mu instead).
 * N_ij = theta^j d^(i+j) n / d alpha^i d theta^j with alpha = psi (LAMBDA = 1) or mu/theta_0 (LAMBDA = 0).
 *
 * This file imports nothing on purpose: the bundler then writes the slots into the loops as literals.
 */

/** Net density n = n_- - n_+ asked for. */
export const NET_DENSITY = 0;
/** Temperature kT/mc^2. */
export const THETA = 1;
/** Fermi momentum of the net density, x = (3 n)^(1/3). */
export const FERMI_MOMENTUM = 2;
/** Degeneracy (mu - 1)/theta. */
export const ETA = 3;
/** mu/theta. */
export const NU = 4;
/** mu - 1, the unknown where the gas is degenerate; on entry its value at T = 0, the Fermi energy of the net density. */
export const KINETIC_MU = 5;
/** Ec - 1. */
export const CENTRE = 6;
/** psi. */
export const PSI = 7;
/** 1 where derivatives are taken at fixed psi, 0 at fixed mu. */
export const LAMBDA = 8;

/** n. */
export const N00 = 9;
/** Pressure. */
export const P00 = 10;
/** theta dP/dtheta at fixed psi (LAMBDA = 1) or mu (LAMBDA = 0). */
export const Q = 11;
/** dn/dalpha, from here on the N_ij of the head comment. */
export const N10 = 12;
export const N01 = 13;
/** M_(1,2): the positive kernel from which the heat capacity comes. */
export const M12 = 14;
export const N20 = 15;
export const N11 = 16;
export const N02 = 17;
/** M_(2,3); this and the rest only for order 3. */
export const M23 = 18;
export const N30 = 19;
export const N21 = 20;
export const N12 = 21;

/** Density of antiparticles where the method knows it for nothing (Boltzmann), else -1. */
export const ANTIPARTICLES = 22;
/** Sweeps over the integrals that the last solution took. */
export const SWEEPS = 23;
/** Relative error of the start value of the last solution, as the first sweep saw it. */
export const START_ERROR = 24;
/** Nodes in the last sum. */
export const NODES = 25;

/** Step of the trapezoidal rule; before it is chosen, the largest that would do. */
export const STEP = 26;
/** Height of the contour in the complex plane that the step was chosen for. */
export const CONTOUR = 27;
/** Sum until y reaches this. */
export const CUT = 28;
/** Sums of the head comment, before they become N_ij. */
export const SUM_M00 = 29;
export const SUM_M10 = 30;
export const SUM_M11 = 31;
export const SUM_M12 = 32;
export const SUM_M20 = 33;
export const SUM_M21 = 34;
export const SUM_M22 = 35;
export const SUM_M23 = 36;
export const SUM_M30 = 37;
export const SUM_M31 = 38;
export const SUM_M32 = 39;
export const SUM_P = 40;
export const SUM_Q = 41;

/** 1 where third-order members need six digits only, see matter/plasma.ts. */
export const ROUGH_THIRD = 42;

/** Length of a record. */
export const RECORD_LENGTH = 48;

// How to solve from a start value.

/** By the trapezoidal rule; ETA and NU are the unknown. */
export const REGIME_TRAPEZOID = 0;
/** Degenerate: KINETIC_MU is the unknown. */
export const REGIME_DEGENERATE = 1;
/** Classical: in closed form. */
export const REGIME_CLASSICAL = 2;

// Scratch of the solver: the step in alpha, and the unit in which it is small.

export const STEP_LENGTH = 0;
export const STEP_UNIT = 1;
