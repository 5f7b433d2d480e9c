/**
 * Two barotropes joined at a pressure: outer matter below it, inner matter above.
 *
 * The inner one keeps its P as a function of the density of mass-energy E. Its baryon density is only known up to a
 * factor s, as dE/(E + P) = d rho/rho; the factor makes the enthalpy per baryon (E + P)/rho, which is c^2 + w,
 * continuous:
 *
 *     rho' = s rho,   c^2 + w' = (c^2 + w)/s,   c^2 + e' = (c^2 + e)/s
 */
import { speedOfLight } from "../constants.js";
import { FermistateError, requireKnown } from "../errors.js";
import { findRoot } from "../numerics/roots.js";
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_LENGTH,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
  type Barotrope,
  type BarotropeLimit,
} from "./barotrope.js";
import { requireBarotrope, requirePositive } from "./options.js";
import { type Layer, stacked } from "./stacked.js";

/** Options of {@link joinBarotropes}. */
export interface JoinOptions {
  /**
   * Pressure of the join, dyn/cm^2; the inner matter must be denser there or of equal density.
   * @defaultValue the highest pressure at which both have the same density of mass-energy, or where the inner one's lies within a
   *   density jump of the outer one
   */
  readonly pressure?: number;
}

const c2 = speedOfLight * speedOfLight;
/** Pressures tried from the top of the outer matter, in steps of this much in ln P. */
const step = 0.005;

/**
 * Outer and inner matter as one barotrope: a crust on a core.
 *
 * P and w are continuous; the density jumps by what the two disagree at the pressure given, or not at all where they
 * cross. Both must count e from the same zero, the mass m_u c^2 per baryon, for rho to mean the same: then the factor s
 * differs from 1 by the difference of their binding energies, 1e-3 or less.
 *
 * @throws `outside-domain` where the pressure is not in both; `unstable` where the inner matter is thinner there, or nowhere as dense
 */
export function joinBarotropes(outer: Barotrope, inner: Barotrope, options: JoinOptions = {}): Barotrope {
  requireBarotrope("outer", outer);
  requireBarotrope("inner", inner);
  requireKnown("options", options, ["pressure"]);
  const [low, high] = overlap(outer, inner);
  const at = options.pressure === undefined ? crossing(outer, inner, low, high) : options.pressure;
  const pressure = requirePositive("pressure", at, " dyn/cm^2");
  if (pressure < low || pressure > high) {
    const allowed = `${low} to ${high} dyn/cm^2, where both answer`;
    throw new FermistateError("outside-domain", { argument: "pressure", given: pressure, allowed });
  }
  const record = new Float64Array(BAROTROPE_LENGTH);
  const fill = (matter: Barotrope): Float64Array => {
    record[BAROTROPE_PRESSURE] = pressure;
    matter.fillAtPressure(record);
    return record;
  };
  const ofInner = fill(inner).slice();
  const ofOuter = fill(outer).slice();
  // At a density jump of the outer matter: its lower side.
  const jump = outer.jumps.find((one) => Math.abs(one.pressure / pressure - 1) < 1e-12);
  const end = jump === undefined ? ofOuter[BAROTROPE_DENSITY]! : jump.densities[0];
  const extra = (ofInner[BAROTROPE_POTENTIAL]! - ofOuter[BAROTROPE_POTENTIAL]!) / (c2 + ofOuter[BAROTROPE_POTENTIAL]!);
  const begin = ofInner[BAROTROPE_DENSITY]! * (1 + extra);
  if (begin < end * (1 - 1e-9)) {
    const allowed = `inner matter at least as dense as the outer (${end} g/cm^3) at ${pressure} dyn/cm^2`;
    throw new FermistateError("unstable", { argument: "pressure", given: begin, allowed });
  }
  const start = begin > end * (1 + 1e-9) ? begin : end;
  return stacked(
    `${outer.name}, then ${inner.name}`,
    `Up to ${Number(end.toPrecision(4))} g/cm^3: ${outer.validity} Above: ${inner.validity}`,
    [
      part(outer, outer.density[0], end, pressure),
      { ...rescaled(inner, extra), ...startOf(inner, start, extra, ofOuter) },
    ],
    limitsOf(outer, end, inner, start, 1 + extra),
  );
}

/** Limits that concern the part of each that is used. */
function limitsOf(outer: Barotrope, end: number, inner: Barotrope, start: number, scale: number): BarotropeLimit[] {
  const isInOuter = ({ side, density }: BarotropeLimit): boolean => side === "below" || density < end;
  const isInInner = ({ side, density }: BarotropeLimit): boolean => side === "above" || density > start;
  const ofInner = (inner.limits ?? []).map((limit) => Object.freeze({ ...limit, density: limit.density * scale }));
  return [...(outer.limits ?? []).filter(isInOuter), ...ofInner.filter(isInInner)];
}

/** Pressures that both have. */
function overlap(outer: Barotrope, inner: Barotrope): readonly [number, number] {
  const record = new Float64Array(BAROTROPE_LENGTH);
  const pressureAt = (matter: Barotrope, end: 0 | 1): number => {
    record[BAROTROPE_DENSITY] = matter.density[end];
    matter.fillAtDensity(record);
    return record[BAROTROPE_PRESSURE]!;
  };
  const low = Math.max(pressureAt(outer, 0), pressureAt(inner, 0));
  const high = Math.min(pressureAt(outer, 1), pressureAt(inner, 1));
  if (low < high) return [low, high];
  const allowed = "barotropes that have a pressure in common";
  throw new FermistateError("outside-domain", { argument: "inner", given: inner.name, allowed });
}

/** The highest pressure at which the inner matter's density of mass-energy overtakes the outer's. */
function crossing(outer: Barotrope, inner: Barotrope, low: number, high: number): number {
  const record = new Float64Array(BAROTROPE_LENGTH);
  const massEnergy = (matter: Barotrope, pressure: number): number => {
    record[BAROTROPE_PRESSURE] = pressure;
    matter.fillAtPressure(record);
    return Math.log(record[BAROTROPE_DENSITY]!) + Math.log1p(record[BAROTROPE_ENERGY]! / c2);
  };
  // Positive where the inner one is denser.
  const difference = (log: number): number => massEnergy(inner, Math.exp(log)) - massEnergy(outer, Math.exp(log));
  const jumpLogs = outer.jumps.map((one) => Math.log(one.pressure));
  let above = Math.log(high) - 1e-9;
  const bottom = Math.max(Math.log(low), Math.log(high) - 20);
  while (above > bottom) {
    const below = Math.max(bottom, above - step);
    const [ofBelow, ofAbove] = [difference(below), difference(above)];
    if (ofBelow * ofAbove <= 0) {
      const log = findRoot(difference, below, above, { values: [ofBelow, ofAbove] }).x;
      // A root on a jump of the outer matter is the jump's pressure to the last digit.
      const jump = jumpLogs.findIndex((one) => Math.abs(one - log) < 1e-9);
      return jump < 0 ? Math.exp(log) : outer.jumps[jump]!.pressure;
    }
    above = below;
  }
  throw new FermistateError("unstable", {
    argument: "inner",
    given: inner.name,
    allowed: "matter as dense as the outer at some pressure both have; or give the pressure of the join",
  });
}

/** The outer barotrope up to a density. */
function part(matter: Barotrope, low: number, high: number, pressure: number): Layer {
  const record = new Float64Array(BAROTROPE_LENGTH);
  const at = (density: number): Float64Array => {
    record[BAROTROPE_DENSITY] = density;
    matter.fillAtDensity(record);
    return record;
  };
  const first = at(low).slice();
  const last = at(high).slice();
  return {
    density: [low, high],
    pressure: [first[BAROTROPE_PRESSURE]!, pressure],
    potential: [first[BAROTROPE_POTENTIAL]!, last[BAROTROPE_POTENTIAL]!],
    jumps: matter.jumps.filter(({ densities: [, above] }) => above <= high),
    kinks: (matter.kinks ?? []).filter((kink) => kink < last[BAROTROPE_POTENTIAL]!),
    fillAtDensity: matter.fillAtDensity,
    fillAtPressure: matter.fillAtPressure,
    fillAtPotential: matter.fillAtPotential,
  };
}

/** Where the inner layer begins and ends after its change of scale, its jumps and kinks. */
function startOf(
  inner: Barotrope,
  start: number,
  extra: number,
  ofOuter: Float64Array,
): Pick<Layer, "density" | "pressure" | "potential" | "jumps" | "kinks"> {
  const record = new Float64Array(BAROTROPE_LENGTH);
  const scale = 1 + extra;
  const rescaledPotential = (potential: number): number => (potential - extra * c2) / scale;
  record[BAROTROPE_DENSITY] = inner.density[1];
  inner.fillAtDensity(record);
  const jumps = inner.jumps
    .filter(({ pressure }) => pressure > ofOuter[BAROTROPE_PRESSURE]!)
    .map(({ pressure, potential, densities }) => ({
      pressure,
      potential: rescaledPotential(potential),
      densities: [densities[0] * scale, densities[1] * scale] as const,
    }));
  return {
    density: [start, inner.density[1] * scale],
    pressure: [ofOuter[BAROTROPE_PRESSURE]!, record[BAROTROPE_PRESSURE]!],
    potential: [ofOuter[BAROTROPE_POTENTIAL]!, rescaledPotential(record[BAROTROPE_POTENTIAL]!)],
    jumps,
    kinks: (inner.kinks ?? []).map(rescaledPotential).filter((kink) => kink > ofOuter[BAROTROPE_POTENTIAL]!),
  };
}

/** The inner barotrope with its baryon density times 1 + extra. */
function rescaled(
  inner: Barotrope,
  extra: number,
): Pick<Layer, "fillAtDensity" | "fillAtPressure" | "fillAtPotential"> {
  const scale = 1 + extra;
  const change = (record: Float64Array): void => {
    record[BAROTROPE_DENSITY]! *= scale;
    record[BAROTROPE_ENERGY] = (record[BAROTROPE_ENERGY]! - extra * c2) / scale;
    record[BAROTROPE_POTENTIAL] = (record[BAROTROPE_POTENTIAL]! - extra * c2) / scale;
  };
  return {
    fillAtDensity(record): void {
      const given = record[BAROTROPE_DENSITY]!;
      record[BAROTROPE_DENSITY] = given / scale;
      inner.fillAtDensity(record);
      change(record);
      record[BAROTROPE_DENSITY] = given;
    },
    fillAtPressure(record): void {
      inner.fillAtPressure(record);
      change(record);
    },
    fillAtPotential(record): void {
      const given = record[BAROTROPE_POTENTIAL]!;
      record[BAROTROPE_POTENTIAL] = given * scale + extra * c2;
      inner.fillAtPotential(record);
      change(record);
      record[BAROTROPE_POTENTIAL] = given;
    },
  };
}
