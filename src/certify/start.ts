/**
 * A start value for the degeneracy parameter, in double precision: bisection on elementary quadratures.
 *
 * Units m = c = hbar = k = 1, densities without 1/pi^2. With eta_+ = -eta - 2/T for the positrons,
 *
 *     n = int p E (f_- - f_+) dE
 *       = (1 - e^(-2 nu)) e^eta T int p E e^-x / [(1 + e^(eta - x)) (1 + e^(eta_+ - x))] dx,   E = 1 + T x,
 *
 * which keeps the small difference of a nearly symmetric pair plasma; beyond eta = 30 positrons do not matter and
 * n = int (p^3/3) g dz (by parts) needs the neighbourhood of the Fermi surface only. About nine digits: Newton's
 * method in decimal.js does the rest.
 */

/** Start value and what the choice of the working precision needs to know. */
export interface DegeneracyStart {
  readonly eta: number;
  /** mu/kT with the rest mass. */
  readonly nu: number;
}

const strongDegeneracy = 30;
const bisections = 70;
const intervals = 600;

/** Degeneracy parameter at net density e^`target` (times pi^2 lambda^3, lambda = hbar/mc) and `theta` = kT/mc^2. */
export function startDegeneracy(target: number, theta: number): DegeneracyStart {
  if (target > logNetDensity(strongDegeneracy, strongDegeneracy + 1 / theta, theta)) {
    const n = Math.exp(target);
    const largest = (1 + Math.cbrt(3 * n)) / theta + 2 * strongDegeneracy;
    const eta = bisect(strongDegeneracy, largest, (trial) => surfaceDensity(trial, theta) - n);
    return { eta, nu: eta + 1 / theta };
  }
  const eta = bisect(-1 / theta, strongDegeneracy, (trial) => logNetDensity(trial, trial + 1 / theta, theta) - target);
  if (eta + 1 / theta > 1) return { eta, nu: eta + 1 / theta };
  // Pairs may outnumber the net charge by 31 powers of ten and more: now ln nu is the well-scaled unknown.
  const logNu = bisect(-1000, 1, (trial) => {
    const nu = Math.exp(trial);
    return logNetDensity(nu - 1 / theta, nu, theta) - target;
  });
  return { eta: Math.exp(logNu) - 1 / theta, nu: Math.exp(logNu) };
}

/** ln of the net density, Simpson's rule in y = sqrt(x). */
function logNetDensity(eta: number, nu: number, theta: number): number {
  const positronEta = -nu - 1 / theta;
  const end = Math.sqrt(Math.max(eta, 0) + 45);
  const integral = simpson(0, end, (y) => {
    const x = y * y;
    const energy = theta * x;
    const momentum = Math.sqrt(energy * (energy + 2));
    const density = momentum * (energy + 1) * theta * 2 * y;
    return (density * Math.exp(-x)) / ((1 + Math.exp(eta - x)) * (1 + Math.exp(positronEta - x)));
  });
  return eta + Math.log(-Math.expm1(-2 * nu)) + Math.log(integral);
}

/** Density of electrons alone, from the neighbourhood of the Fermi surface. */
function surfaceDensity(eta: number, theta: number): number {
  return simpson(-40, 40, (z) => {
    const energy = theta * Math.max(eta + z, 0);
    const momentum = Math.sqrt(energy * (energy + 2));
    const q = Math.exp(-Math.abs(z));
    return (momentum ** 3 / 3) * (q / (1 + q) ** 2);
  });
}

function simpson(from: number, to: number, integrand: (x: number) => number): number {
  const step = (to - from) / intervals;
  let sum = integrand(from) + integrand(to);
  for (let i = 1; i < intervals; i++) sum += (i % 2 === 1 ? 4 : 2) * integrand(from + i * step);
  return (sum * step) / 3;
}

/** Root of an increasing function. */
function bisect(from: number, to: number, increasing: (x: number) => number): number {
  let low = from;
  let high = to;
  for (let i = 0; i < bisections; i++) {
    const middle = (low + high) / 2;
    if (increasing(middle) < 0) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
