/**
 * One phase of matter along a path of constant temperature or entropy: evaluation and inversion.
 *
 * The walk from the highest density down makes the nodes from which inversions start, and finds the surface P = 0.
 */
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { CRYSTAL_FRACTION, DENSITY, TEMPERATURE } from "../matter/plasma.js";
import { findRoot } from "../numerics/roots.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { ENERGY, ENTROPY, HEAT, PRESSURE, PRESSURE_R, PRESSURE_T } from "../thermodynamics/free-energy.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
} from "./barotrope.js";
import { ENERGY_SLOPE, INVERSION_SLOTS, type InversionNodes, inversionOf, LOG, OFFSET, SLOPE } from "./inversion.js";
import type { Layer } from "./stacked.js";

/** What is constant along the path: a temperature (0 included) or a specific entropy. */
export type Path =
  | { readonly kind: "isotherm"; readonly temperature: number }
  | { readonly kind: "adiabat"; readonly specificEntropy: number };

/** Why a branch ends where it does: the density asked for, the surface P = 0 above it, or radiation alone. */
type BranchEnd = "density" | "surface" | "radiation";

/** One phase along the path, between two densities; an inversion beyond its ends gives the nearest end. */
export interface Branch extends Layer {
  /** What the lowest density is. */
  readonly end: BranchEnd;
  /** Sets what is added to w, `potential` included. */
  shiftPotential(by: number): void;
}

/** Spacing of the nodes in ln rho: the start of the Newton iteration is then good to about 1e-9. */
const spacing = 0.02;
/** Scratch slot: temperature, the start of the solution for it on an adiabat. */
const WARM = INVERSION_SLOTS;
/** Scratch slot: d ln T/d ln rho along the path. */
const WARMING = INVERSION_SLOTS + 1;
/** Scratch slots: bracket of the temperature. */
const COLDER = INVERSION_SLOTS + 2;
const HOTTER = INVERSION_SLOTS + 3;
/**
 * Below this exponent of an isotherm radiation alone carries the pressure: w loses its digits in F + P/rho, and a
 * density cannot be told from a pressure.
 */
const leastExponent = 1e-3;

/**
 * The branch from `high` down to the lowest density at which it answers: `low`, or the surface P = 0 above it.
 *
 * @throws `unstable` where dP/drho vanishes at positive pressure; `outside-domain` where the phase changes
 */
export function branchOf(
  equationOfState: EquationOfState,
  composition: Composition,
  path: Path,
  [low, high]: readonly [number, number],
): Branch {
  const { point, members, fillMembers } = equationOfState.evaluator();
  const scratch = new Float64Array(INVERSION_SLOTS + 4);
  const isotherm = path.kind === "isotherm";
  const entropy = path.kind === "adiabat" ? path.specificEntropy : 0;
  const [coldest, hottest] = equationOfState.domain.temperature;
  scratch[WARM] = path.kind === "isotherm" ? path.temperature : Math.sqrt(coldest * hottest);

  /** Members at the density of the record on the path. */
  function enter(record: Float64Array): void {
    point[DENSITY] = record[BAROTROPE_DENSITY]!;
    point[TEMPERATURE] = scratch[WARM]!;
    fillMembers(composition, 2);
    if (!isotherm) solveTemperature();
  }

  /** Newton in ln T for s(rho, T) = s, kept within the domain; leaves the members there. */
  function solveTemperature(): void {
    scratch[COLDER] = coldest;
    scratch[HOTTER] = hottest;
    for (let i = 0; i < 200; i++) {
      const temperature = point[TEMPERATURE]!;
      const residual = members[ENTROPY]! - entropy * temperature; // T (s - s_0)
      scratch[residual > 0 ? HOTTER : COLDER] = temperature;
      const lower = scratch[COLDER]!;
      const upper = scratch[HOTTER]!;
      const step = -residual / members[HEAT]!;
      // The next step would be of second order: this one is the last.
      const isLast = Math.abs(step) < 1e-9;
      let next = temperature * Math.exp(Math.max(-2, Math.min(2, step)));
      if (!isLast && !(next > lower && next < upper)) next = Math.sqrt(lower * upper);
      if (next === temperature || upper - lower <= 4e-16 * upper) {
        if (Math.abs(step) < 1e-12) return;
        const density = point[DENSITY]!;
        if (lower > coldest && upper < hottest) refuseBoundary(density, density); // s jumps at a temperature
        const allowed = `an entropy that matter of ${density} g/cm^3 has between ${coldest} and ${hottest} K`;
        throw new FermistateError("outside-domain", { argument: "specificEntropy", given: entropy, allowed });
      }
      point[TEMPERATURE] = next;
      scratch[WARM] = next;
      fillMembers(composition, 2);
      if (isLast) return;
    }
    const allowed = "an iteration that converges: please report this";
    throw new FermistateError("no-convergence", { argument: "temperature", given: point[DENSITY], allowed });
  }

  /** Fills the record and the slopes at its density. */
  function fillAtDensity(record: Float64Array): void {
    enter(record);
    const specific = members[PRESSURE]!;
    const energy = members[ENERGY]!;
    const thermal = members[PRESSURE_T]!;
    const slope = isotherm ? members[PRESSURE_R]! : members[PRESSURE_R]! + (thermal * thermal) / members[HEAT]!;
    const free = isotherm ? energy - members[ENTROPY]! : energy;
    scratch[SLOPE] = slope;
    scratch[WARMING] = isotherm ? 0 : thermal / members[HEAT]!;
    scratch[ENERGY_SLOPE] = isotherm ? specific - thermal : specific;
    record[BAROTROPE_PRESSURE] = specific * record[BAROTROPE_DENSITY]!;
    record[BAROTROPE_ENERGY] = energy;
    record[BAROTROPE_POTENTIAL] = free + specific + scratch[OFFSET]!;
    record[BAROTROPE_GAMMA] = slope / specific;
  }

  const nodes = tabulate(low, high, fillAtDensity, scratch, point);
  const { logs, pressures, potentials, temperatures, warmings } = nodes;
  const last = logs.length - 1;

  /** Cubic Hermite start for the temperature on an adiabat, in cell i, at LOG. */
  function startTemperature(i: number): void {
    const log = scratch[LOG]!;
    const step = logs[i + 1]! - logs[i]!;
    const t = (log - logs[i]!) / step;
    const s = 1 - t;
    const rise = Math.log(temperatures[i + 1]! / temperatures[i]!);
    const curve = t * t * (3 - 2 * t) * rise + t * s * step * (s * warmings[i]! - t * warmings[i + 1]!);
    scratch[WARM] = temperatures[i]! * Math.exp(curve);
  }

  const inversion = inversionOf(nodes, fillAtDensity, scratch, isotherm ? undefined : startTemperature);

  return {
    density: nodes.density,
    end: nodes.end,
    pressure: [pressures[0]!, pressures[last]!],
    get potential(): readonly [number, number] {
      const shift = scratch[OFFSET]!;
      return [potentials[0]! + shift, potentials[last]! + shift];
    },
    fillAtDensity(record): void {
      if (!isotherm) {
        scratch[LOG] = Math.log(record[BAROTROPE_DENSITY]!);
        startTemperature(inversion.cellOfLog());
      }
      fillAtDensity(record);
    },
    fillAtPressure: inversion.fillAtPressure,
    fillAtPotential: inversion.fillAtPotential,
    shiftPotential(by): void {
      scratch[OFFSET] = by;
    },
  };
}

/** Nodes of the walk. */
interface Nodes extends InversionNodes {
  readonly end: BranchEnd;
  readonly temperatures: Float64Array;
  readonly warmings: Float64Array;
}

/** Walks from the highest density down to `low`, or to the surface where P = 0. */
function tabulate(
  low: number,
  high: number,
  fillAtDensity: (record: Float64Array) => void,
  scratch: Float64Array,
  point: Float64Array,
): Nodes {
  const record = new Float64Array(5);
  const rows: number[][] = [];
  const at = (density: number): void => {
    record[BAROTROPE_DENSITY] = density;
    fillAtDensity(record);
  };
  const count = Math.max(1, Math.ceil(Math.log(high / low) / spacing));
  const logHigh = Math.log(high);
  const step = Math.log(high / low) / count;
  const push = (density: number): void => {
    const [pressure, potential] = [record[BAROTROPE_PRESSURE]!, record[BAROTROPE_POTENTIAL]!];
    rows.push([Math.log(density), pressure, potential, scratch[SLOPE]!, scratch[WARM]!, scratch[WARMING]!]);
  };
  let lowest = low;
  let above = high;
  let phase = 0;
  let end: BranchEnd = "density";
  for (let i = 0; i <= count; i++) {
    const density = i === 0 ? high : i === count ? low : Math.exp(logHigh - i * step);
    at(density);
    if (i === 0) phase = point[CRYSTAL_FRACTION]!;
    else if (phase !== point[CRYSTAL_FRACTION]) refuseBoundary(density, above);
    if (record[BAROTROPE_GAMMA]! < leastExponent && scratch[SLOPE]! > 0 && record[BAROTROPE_PRESSURE]! > 0) {
      lowest = above;
      end = "radiation";
      break;
    }
    if (record[BAROTROPE_PRESSURE]! > 0 && scratch[SLOPE]! > 0) {
      push(density);
      above = density;
      continue;
    }
    const pressureAt = (rho: number): number => {
      at(rho);
      return record[BAROTROPE_PRESSURE]!;
    };
    const slopeAt = (rho: number): number => {
      at(rho);
      return scratch[SLOPE]!;
    };
    const negative = record[BAROTROPE_PRESSURE]! <= 0;
    if (i > 0 && negative) {
      lowest = findRoot(pressureAt, density, above).x;
      // The first double whose pressure is positive: the exponent is finite there.
      while (pressureAt(lowest) <= 0) lowest *= 1 + Number.EPSILON;
    }
    if (i === 0 || !negative || scratch[SLOPE]! <= 0) {
      const edge = i === 0 || negative ? density : findRoot(slopeAt, density, above).x;
      throw new FermistateError("unstable", {
        argument: "density",
        given: edge,
        allowed:
          "densities at which matter has positive pressure and resists compression: give { density: [lowest, highest] }",
      });
    }
    push(lowest);
    end = "surface";
    break;
  }
  rows.reverse();
  const column = (place: number): Float64Array => Float64Array.from(rows, (row) => row[place]!);
  return {
    density: [lowest, high],
    end,
    logs: column(0),
    pressures: column(1),
    potentials: column(2),
    slopes: column(3),
    temperatures: column(4),
    warmings: column(5),
  };
}

function refuseBoundary(lower: number, upper: number): never {
  const allowed =
    `densities on one side of the boundary between liquid and crystal, which lies at ${lower} to ${upper} g/cm^3, ` +
    "where matter of one entropy is a mixture of both; or one phase by withPhase(equationOfState, ...)";
  throw new FermistateError("outside-domain", { argument: "density", given: [lower, upper], allowed });
}
