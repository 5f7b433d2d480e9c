/**
 * An adiabat of matter that freezes: liquid, crystal, and mixtures of both at the melting temperature in between.
 *
 * At one density the entropies s_l, s_c of liquid and crystal at T_m(rho) differ; matter of an entropy between them is frozen by
 * the share f = (s_l - s)/(s_l - s_c), and P, e follow from f by the lever rule, as in `solve`. Along the melting line
 * T_m ~ rho^(1/3), so d/d ln rho = rho d/drho + (1/3) T d/dT there:
 *
 *     f' = [(1 - f) s_l' + f s_c']/(s_l - s_c),    P' = f P_c' + (1 - f) P_l' + (P_c - P_l) f'
 *
 * Where freezing sets in is a convention (coulomb/phase.ts), so F_l and F_c differ a little there and e + P/rho alone does not
 * obey the first law: the potential is w = e + P/rho + int (F_l - F_c) df, with dw = dP/rho exactly.
 */
import { highestCrystalDensity, meltingTemperature } from "../coulomb/phase.js";
import { withPhase } from "../coulomb/transition.js";
import { FermistateError } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { DENSITY, TEMPERATURE } from "../matter/plasma.js";
import { findRoot } from "../numerics/roots.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import type { Evaluator } from "../thermodynamics/evaluator.js";
import { ENERGY, ENTROPY, HEAT, PRESSURE, PRESSURE_R, PRESSURE_T } from "../thermodynamics/free-energy.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
} from "./barotrope.js";
import { type Branch, branchOf } from "./branch.js";
import { ENERGY_SLOPE, INVERSION_SLOTS, inversionOf, OFFSET, SLOPE } from "./inversion.js";

/** Steps in ln rho at which boundaries are looked for, and nodes of a mixture. */
const spacing = 0.02;
/** Scratch slots of a mixture: slope of the integral over f, and its value; ln rho. */
const MISMATCH_SLOPE = INVERSION_SLOTS;
const MISMATCH = INVERSION_SLOTS + 1;

/** Both phases on the melting line of a composition. */
interface MeltingLine {
  readonly liquid: Evaluator;
  readonly crystal: Evaluator;
  /** Fills the members of both at a density and its melting temperature. */
  fill(density: number): void;
  /** T (s_phase - s) there, erg/g. */
  excess(phase: Evaluator, log: number): number;
}

type Matter = "liquid" | "crystal" | "mixture";

/** What matter is from one density to another. */
interface Stretch {
  readonly matter: Matter;
  readonly range: readonly [number, number];
}

/**
 * The branches of an adiabat by rising density, P, e and w continuous.
 *
 * @throws `outside-domain` where it meets the density above which zero-point motion melts the crystal; `unstable` where the
 *   crystal has the larger entropy; and as `branchOf`
 */
export function freezingBranches(
  equationOfState: EquationOfState,
  composition: Composition,
  entropy: number,
  [low, high]: readonly [number, number],
  meltingCoupling: number,
): Branch[] {
  const limit = highestCrystalDensity(composition);
  const line = meltingLine(equationOfState, composition, entropy, meltingCoupling);
  const path = { kind: "adiabat", specificEntropy: entropy } as const;
  const ends = low < limit ? [low, ...boundaries(line, low, Math.min(high, limit)), Math.min(high, limit)] : [low];
  const stretches = ends.slice(1).map((end, i): Stretch => {
    const range = [ends[i]!, end] as const;
    return { range, matter: matterBetween(line, range) };
  });
  if (high > limit) {
    const below = stretches.pop();
    if (below !== undefined && below.matter !== "liquid") refuseQuantumMelting(high, limit);
    stretches.push({ range: [below?.range[0] ?? low, high], matter: "liquid" });
  }
  const branches: Branch[] = [];
  for (const { range, matter } of stretches.reverse()) {
    const branch =
      matter === "mixture"
        ? mixture(line, entropy, range)
        : branchOf(withPhase(equationOfState, matter), composition, path, range);
    branches.unshift(branch);
    if (branch.end !== "density") break;
  }
  for (const [i, branch] of branches.entries()) {
    if (i > 0) branch.shiftPotential(branches[i - 1]!.potential[1] - branch.potential[0]);
  }
  return branches;
}

function meltingLine(
  equationOfState: EquationOfState,
  composition: Composition,
  entropy: number,
  meltingCoupling: number,
): MeltingLine {
  const [liquid, crystal] = (["liquid", "crystal"] as const).map((phase) =>
    withPhase(equationOfState, phase).evaluator(),
  ) as [Evaluator, Evaluator];
  const unit = meltingTemperature(1, composition, meltingCoupling);
  const fillAt = ({ point, fillMembers }: Evaluator, density: number): void => {
    point[DENSITY] = density;
    point[TEMPERATURE] = unit * Math.cbrt(density);
    fillMembers(composition, 2);
  };
  return {
    liquid,
    crystal,
    fill(density): void {
      fillAt(liquid, density);
      fillAt(crystal, density);
    },
    excess(phase, log): number {
      fillAt(phase, Math.exp(log));
      return phase.members[ENTROPY]! - entropy * phase.point[TEMPERATURE]!;
    },
  };
}

/** Densities at which the entropy is that of liquid or crystal on the melting line, rising. */
function boundaries({ liquid, crystal, excess }: MeltingLine, low: number, high: number): number[] {
  const count = Math.max(1, Math.ceil(Math.log(high / low) / spacing));
  const log = (i: number): number => Math.log(low) + (Math.log(high / low) * i) / count;
  const found: number[] = [];
  for (const phase of [liquid, crystal]) {
    let before = excess(phase, log(0));
    for (let i = 1; i <= count; i++) {
      const here = excess(phase, log(i));
      if (before < 0 !== here < 0) {
        const at = Math.exp(findRoot((x) => excess(phase, x), log(i - 1), log(i), { values: [before, here] }).x);
        if (at > low && at < high) found.push(at);
      }
      before = here;
    }
  }
  return found.sort((a, b) => a - b);
}

/** What matter is between two neighbouring boundaries. */
function matterBetween({ liquid, crystal, excess }: MeltingLine, [low, high]: readonly [number, number]): Matter {
  const middle = 0.5 * (Math.log(low) + Math.log(high));
  const [ofLiquid, ofCrystal] = [excess(liquid, middle), excess(crystal, middle)];
  if (ofLiquid <= 0 && ofCrystal < 0) return "liquid";
  if (ofCrystal >= 0 && ofLiquid > 0) return "crystal";
  if (ofCrystal < ofLiquid) return "mixture";
  throw new FermistateError("unstable", {
    argument: "density",
    given: [low, high],
    allowed:
      `densities outside ${short(low)} to ${short(high)} g/cm^3: there the crystal has the larger entropy, so that matter of ` +
      "this entropy is neither liquid, crystal nor a mixture; or one phase by withPhase(equationOfState, ...)",
  });
}

function refuseQuantumMelting(high: number, limit: number): never {
  throw new FermistateError("outside-domain", {
    argument: "density[1]",
    given: high,
    allowed:
      `up to ${limit} g/cm^3: above, zero-point motion melts the crystal and the pressure jumps; or a liquid throughout, by ` +
      'withPhase(equationOfState, "liquid")',
  });
}

/** Liquid and crystal at the melting temperature of each density. */
function mixture(line: MeltingLine, entropy: number, [low, high]: readonly [number, number]): Branch {
  const scratch = new Float64Array(INVERSION_SLOTS + 2);
  const { members: l, point } = line.liquid;
  const { members: c } = line.crystal;
  const count = Math.max(2, Math.ceil(Math.log(high / low) / spacing));
  const first = Math.log(low);
  const step = Math.log(high / low) / count;
  /** int (F_l - F_c) df from the lowest density to each node, and its slope there by ln rho. */
  const integral = new Float64Array(count + 1);
  const integralSlope = new Float64Array(count + 1);

  /** Fills the record but for the integral, and the slopes. */
  function mix(record: Float64Array): void {
    line.fill(record[BAROTROPE_DENSITY]!);
    const gap = l[ENTROPY]! - c[ENTROPY]!;
    const share = (l[ENTROPY]! - entropy * point[TEMPERATURE]!) / gap;
    const frozen = share < 0 ? 0 : share > 1 ? 1 : share;
    const melted = 1 - frozen;
    const freezing = (melted * (l[HEAT]! / 3 - l[PRESSURE_T]!) + frozen * (c[HEAT]! / 3 - c[PRESSURE_T]!)) / gap;
    const specific = melted * l[PRESSURE]! + frozen * c[PRESSURE]!;
    const ofLiquid = l[PRESSURE_R]! + l[PRESSURE_T]! / 3;
    const ofCrystal = c[PRESSURE_R]! + c[PRESSURE_T]! / 3;
    const slope = melted * ofLiquid + frozen * ofCrystal + (c[PRESSURE]! - l[PRESSURE]!) * freezing;
    scratch[SLOPE] = slope;
    scratch[MISMATCH_SLOPE] = (l[ENERGY]! - c[ENERGY]! - gap) * freezing;
    scratch[ENERGY_SLOPE] = specific - scratch[MISMATCH_SLOPE]!;
    record[BAROTROPE_PRESSURE] = specific * record[BAROTROPE_DENSITY]!;
    record[BAROTROPE_ENERGY] = melted * l[ENERGY]! + frozen * c[ENERGY]!;
    record[BAROTROPE_POTENTIAL] = record[BAROTROPE_ENERGY]! + specific + scratch[OFFSET]!;
    record[BAROTROPE_GAMMA] = slope / specific;
  }

  /** Cubic Hermite interpolation of the integral at the density of the record. */
  function interpolate(record: Float64Array): void {
    const place = (Math.log(record[BAROTROPE_DENSITY]!) - first) / step;
    const i = place < 0 ? 0 : place >= count ? count - 1 : Math.floor(place);
    const t = place - i;
    const s = 1 - t;
    const rise = integral[i + 1]! - integral[i]!;
    const bend = t * s * step * (s * integralSlope[i]! - t * integralSlope[i + 1]!);
    scratch[MISMATCH] = integral[i]! + t * t * (3 - 2 * t) * rise + bend;
  }

  function fillAtDensity(record: Float64Array): void {
    mix(record);
    interpolate(record);
    record[BAROTROPE_POTENTIAL]! += scratch[MISMATCH]!;
  }

  const record = new Float64Array(BAROTROPE_LENGTH);
  const densityAt = (place: number): number =>
    place === 0 ? low : place === count ? high : Math.exp(first + step * place);
  const slopeAt = (place: number): number => {
    record[BAROTROPE_DENSITY] = densityAt(place);
    mix(record);
    return scratch[MISMATCH_SLOPE]!;
  };
  for (let i = 0; i <= count; i++) {
    integralSlope[i] = slopeAt(i);
    if (i === 0) continue;
    // Simpson's rule.
    integral[i] = integral[i - 1]! + (step / 6) * (integralSlope[i - 1]! + 4 * slopeAt(i - 0.5) + integralSlope[i]!);
  }

  const column = (): Float64Array => new Float64Array(count + 1);
  const nodes = {
    density: [low, high] as const,
    logs: column(),
    pressures: column(),
    potentials: column(),
    slopes: column(),
  };
  for (let i = 0; i <= count; i++) {
    record[BAROTROPE_DENSITY] = densityAt(i);
    fillAtDensity(record);
    requireStiff(record, scratch[SLOPE]!);
    nodes.logs[i] = Math.log(record[BAROTROPE_DENSITY]!);
    nodes.pressures[i] = record[BAROTROPE_PRESSURE]!;
    nodes.potentials[i] = record[BAROTROPE_POTENTIAL]!;
    nodes.slopes[i] = scratch[SLOPE]!;
  }
  const { fillAtPressure, fillAtPotential } = inversionOf(nodes, fillAtDensity, scratch, undefined);
  return {
    density: nodes.density,
    end: "density",
    pressure: [nodes.pressures[0]!, nodes.pressures[count]!],
    get potential(): readonly [number, number] {
      const shift = scratch[OFFSET]!;
      return [nodes.potentials[0]! + shift, nodes.potentials[count]! + shift];
    },
    fillAtDensity,
    fillAtPressure,
    fillAtPotential,
    shiftPotential(by): void {
      scratch[OFFSET] = by;
    },
  };
}

function requireStiff(record: Float64Array, slope: number): void {
  if (record[BAROTROPE_PRESSURE]! > 0 && slope > 0) return;
  const allowed = "densities at which freezing matter has positive pressure and resists compression";
  throw new FermistateError("unstable", { argument: "density", given: record[BAROTROPE_DENSITY], allowed });
}

const short = (value: number): string => String(Number(value.toPrecision(6)));
