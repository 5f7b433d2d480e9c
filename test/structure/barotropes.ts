/**
 * Barotropes in closed form, for the tests of stars: each is a parametrised gas, written without the library's gases.
 *
 * Cold electrons (Chandrasekhar 1935, MNRAS 95, 207) and cold neutrons (Oppenheimer & Volkoff 1939, Phys. Rev. 55, 374) are
 * one gas of spin-1/2 fermions in the parameter x = p_F/(m c); the bcc lattice adds its static energy (Salpeter 1961, ApJ
 * 134, 669).
 */
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
  type BarotropeState,
  type DensityJump,
} from "../../src/barotropes/barotrope.js";
import * as constants from "../../src/constants.js";
import { FermistateError } from "../../src/errors.js";

/** What a barotrope of one parameter needs: everything at a parameter, and the parameter for a density, P or w. */
interface Parametrised {
  readonly name: string;
  readonly density: readonly [number, number];
  readonly jumps?: readonly DensityJump[];
  readonly kinks?: readonly number[];
  /** Fills the record at a parameter. */
  fill(parameter: number, record: Float64Array): void;
  /** Parameter of the density in the record. */
  fromDensity(density: number): number;
  /** Parameter of a pressure. */
  fromPressure(pressure: number): number;
  /** Parameter of a potential. */
  fromPotential(potential: number): number;
}

export function barotropeOf(gas: Parametrised): Barotrope {
  const [lowest, highest] = gas.density;
  const jumps = gas.jumps ?? [];
  return {
    name: gas.name,
    validity: "for tests",
    density: gas.density,
    jumps,
    ...(gas.kinks === undefined ? {} : { kinks: gas.kinks }),
    fillAtDensity: (record) => gas.fill(gas.fromDensity(record[BAROTROPE_DENSITY]!), record),
    fillAtPressure: (record) => gas.fill(gas.fromPressure(record[BAROTROPE_PRESSURE]!), record),
    fillAtPotential: (record) => gas.fill(gas.fromPotential(record[BAROTROPE_POTENTIAL]!), record),
    state(density): BarotropeState {
      const inside = jumps.some(({ densities: [below, above] }) => density > below && density < above);
      if (!(density >= lowest && density <= highest) || inside) {
        const allowed = `${lowest} to ${highest}, outside the jumps`;
        throw new FermistateError("outside-domain", { argument: "density", given: density, allowed });
      }
      const record = new Float64Array(BAROTROPE_LENGTH);
      gas.fill(gas.fromDensity(density), record);
      const pressure = record[BAROTROPE_PRESSURE]!;
      const energy = record[BAROTROPE_ENERGY]!;
      const gamma1 = record[BAROTROPE_GAMMA]!;
      const inertia = density * (constants.speedOfLight ** 2 + energy) + pressure;
      return {
        density,
        pressure,
        specificEnergy: energy,
        potential: record[BAROTROPE_POTENTIAL]!,
        gamma1,
        soundSpeed: constants.speedOfLight * Math.sqrt((gamma1 * pressure) / inertia),
      };
    },
  };
}

/** P = K rho^(1 + 1/n). */
export function polytrope(constant: number, index: number, highest = 1e30): Barotrope {
  return barotropeOf({
    name: `polytrope of index ${index}`,
    density: [0, highest],
    fill(density, record) {
      const specific = constant * density ** (1 / index); // P/rho
      record[BAROTROPE_DENSITY] = density;
      record[BAROTROPE_PRESSURE] = specific * density;
      record[BAROTROPE_ENERGY] = index * specific;
      record[BAROTROPE_POTENTIAL] = (index + 1) * specific;
      record[BAROTROPE_GAMMA] = 1 + 1 / index;
    },
    fromDensity: (density) => density,
    fromPressure: (pressure) => (pressure / constant) ** (index / (index + 1)),
    fromPotential: (potential) => (potential / ((index + 1) * constant)) ** index,
  });
}

/**
 * Two polytropes that meet at a density: P continuous, d ln P/d ln rho not. `isMarked` lists the kink.
 */
export function kinked(
  constant: number,
  index: number,
  kink: number,
  indexAbove: number,
  isMarked: boolean,
): Barotrope {
  const atKink = constant * kink ** (1 / index); // P/rho
  const energy = index * atKink;
  const potential = energy + atKink;
  const above = atKink * kink ** (-1 / indexAbove);
  /** w = potential + (n + 1)(P/rho - its value at the kink) above. */
  const densityOf = (w: number): number =>
    w <= potential
      ? (w / ((index + 1) * constant)) ** index
      : (((w - potential) / (indexAbove + 1) + atKink) / above) ** indexAbove;
  return barotropeOf({
    name: `polytropes of index ${index} and ${indexAbove}`,
    density: [0, 1e30],
    ...(isMarked ? { kinks: [potential] } : {}),
    fill(density, record) {
      const isBelow = density <= kink;
      const specific = isBelow ? constant * density ** (1 / index) : above * density ** (1 / indexAbove);
      record[BAROTROPE_DENSITY] = density;
      record[BAROTROPE_PRESSURE] = specific * density;
      record[BAROTROPE_ENERGY] = isBelow ? index * specific : energy + indexAbove * (specific - atKink);
      record[BAROTROPE_POTENTIAL] = isBelow
        ? (index + 1) * specific
        : potential + (indexAbove + 1) * (specific - atKink);
      record[BAROTROPE_GAMMA] = 1 + 1 / (isBelow ? index : indexAbove);
    },
    fromDensity: (density) => density,
    fromPressure: () => Number.NaN, // stars do not ask for it
    fromPotential: densityOf,
  });
}

/** P and e of cold fermions in units of m c^2/(pi^2 lambdabar^3) and of it: series for small x, closed forms above. */
function coldGas(x: number): { pressure: number; energy: number } {
  const root = Math.sqrt(1 + x * x);
  // int_0^x p^4/sqrt(1 + p^2) dp/3 by the binomial series below 0.3.
  let pressure = 0;
  if (x < 0.3) {
    let coefficient = 1;
    let power = x ** 5;
    for (let k = 0; k < 60 && Math.abs(coefficient * power) > 1e-18 * pressure; k++) {
      pressure += (coefficient * power) / (3 * (2 * k + 5));
      coefficient *= -(k + 0.5) / (k + 1);
      power *= x * x;
    }
  } else pressure = (x * root * (2 * x * x - 3) + 3 * Math.asinh(x)) / 24;
  const kinetic = (x ** 3 / 3) * ((x * x) / (1 + root)) - pressure; // n e_F - P
  return { pressure, energy: kinetic };
}

/** Cold fermions of mass m; `massPerFermion` grams of matter for each; lattice energy -lattice x mc^2 for each. */
function coldFermions(name: string, mass: number, massPerFermion: number, lattice: number, highest: number): Barotrope {
  const wave = constants.reducedPlanckConstant / (mass * constants.speedOfLight);
  const number = 1 / (Math.PI ** 2 * wave ** 3);
  const rest = mass * constants.speedOfLight ** 2;
  const unit = massPerFermion * (number / 3); // density at x = 1
  const perGram = rest / massPerFermion;
  /** w in units of m c^2 per fermion: sqrt(1 + x^2) - 1 - (4/3) lattice x. */
  const potentialOf = (x: number): number => (x * x) / (1 + Math.sqrt(1 + x * x)) - (4 / 3) * lattice * x;
  /** P = 0: P_e(x) = lattice x^4/9; by bisection. */
  let surface = 0;
  if (lattice > 0) {
    let [low, high] = [1e-6, 1];
    for (let i = 0; i < 200; i++) {
      const middle = Math.sqrt(low * high);
      if (coldGas(middle).pressure < (lattice * middle ** 4) / 9) low = middle;
      else high = middle;
    }
    surface = high;
  }
  const pressureOf = (x: number): number => coldGas(x).pressure - (lattice * x ** 4) / 9;
  return barotropeOf({
    name,
    density: [unit * surface ** 3, highest],
    fill(x, record) {
      const { pressure, energy } = coldGas(x);
      const n = x ** 3 / 3;
      const total = pressure - (lattice * x * n) / 3;
      const stiffness = (n * x * x) / (3 * Math.sqrt(1 + x * x)) - (4 / 9) * lattice * x * n;
      record[BAROTROPE_DENSITY] = unit * x ** 3;
      record[BAROTROPE_PRESSURE] = number * rest * total;
      record[BAROTROPE_ENERGY] = x === 0 ? 0 : perGram * (energy / n - lattice * x);
      record[BAROTROPE_POTENTIAL] = perGram * potentialOf(x);
      record[BAROTROPE_GAMMA] = x === 0 ? 5 / 3 : stiffness / total;
    },
    fromDensity: (density) => Math.cbrt(density / unit),
    fromPressure(pressure) {
      let [low, high] = [surface, 1e7];
      for (let i = 0; i < 200; i++) {
        const middle = 0.5 * (low + high);
        if (number * rest * pressureOf(middle) < pressure) low = middle;
        else high = middle;
      }
      return 0.5 * (low + high);
    },
    fromPotential(potential) {
      const w = potential / perGram;
      if (lattice === 0) return Math.sqrt(w * (2 + w));
      // (1 + w + b x)^2 = 1 + x^2, b = (4/3) lattice: the root on the branch of rising w.
      const b = (4 / 3) * lattice;
      const rest = w * (2 + w);
      const half = (1 + w) * b;
      const root = Math.sqrt(half * half + (1 - b * b) * rest);
      return (half + root) / (1 - b * b);
    },
  });
}

/** Cold electrons, `massPerElectron` in m_u; `charge` Z adds the bcc lattice of nuclei of that charge. */
export function coldElectrons(massPerElectron: number, charge?: number, highest = 1e15): Barotrope {
  const madelung = 0.89592925568176528916624546293829; // bcc, per Z^2 e^2/a; Ewald sums, quoted in the fixture
  const lattice =
    charge === undefined
      ? 0
      : madelung * constants.fineStructureConstant * Math.cbrt(4 / (9 * Math.PI)) * Math.cbrt(charge) ** 2;
  const name = charge === undefined ? "cold electrons" : `cold electrons in a lattice of charge ${charge}`;
  return coldFermions(name, constants.electronMass, massPerElectron * constants.atomicMassConstant, lattice, highest);
}

/** Cold neutrons; density in units of the neutron mass. */
export function coldNeutrons(highest = 1e18): Barotrope {
  return coldFermions("cold neutrons", constants.neutronMass, constants.neutronMass, 0, highest);
}
