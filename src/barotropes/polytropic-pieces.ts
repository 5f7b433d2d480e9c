/**
 * Pieces P = K rho^Gamma + Lambda joined into one barotrope: the engine of every polytrope here.
 *
 *     P = Lambda + p q^Gamma,  q = rho/rho_a, p = P_a - Lambda           (rho_a, P_a): a point of the piece, its anchor
 *     e = e_a + (p/rho_a) (q^(Gamma-1) - 1)/(Gamma-1) + Lambda (1/rho_a - 1/rho)
 *     w = e + P/rho = w_a + (p/rho_a) Gamma (q^(Gamma-1) - 1)/(Gamma-1)
 *
 * so de = P drho/rho^2 holds in each piece, and joining at a density keeps P, e and w continuous. With Lambda = 0 these
 * are the usual pieces, whose sound speed jumps. With Lambda the slope dP/drho can be kept as well, which makes the
 * sound speed continuous: p_(i+1) Gamma_(i+1) = p_i Gamma_i at the join (O'Boyle, Markakis, Stergioulas & Read 2020,
 * Phys. Rev. D 102, 083027; derived here from that condition).
 */
import {
  BAROTROPE_DENSITY,
  BAROTROPE_ENERGY,
  BAROTROPE_GAMMA,
  BAROTROPE_POTENTIAL,
  BAROTROPE_PRESSURE,
} from "./barotrope.js";

/** One piece, ready to be evaluated; cgs. */
export interface PolytropicPiece {
  /** Density from which it holds; 0 for a first piece that reaches down to P = 0. */
  readonly start: number;
  /** Density of the anchor. */
  readonly anchor: number;
  /** P at the anchor. */
  readonly pressure: number;
  /** e at the anchor; for a first piece that starts at 0, e at density 0. */
  readonly energy: number;
  /** Gamma. */
  readonly gamma: number;
  /** Lambda. */
  readonly shift: number;
}

/** What a solver needs of joined pieces. */
export interface PieceEvaluator {
  /** Fills the record from its density. */
  fillAtDensity(record: Float64Array): void;
  /** Fills the record from its pressure. */
  fillAtPressure(record: Float64Array): void;
  /** Fills the record from its potential. */
  fillAtPotential(record: Float64Array): void;
  /** rho d2P/drho2, erg/g, at the density of the record. */
  curvature(record: Float64Array): number;
}

/** The piece that goes on above `density`, where `record` holds the lower piece. */
export function nextPiece(
  record: Float64Array,
  lower: PolytropicPiece,
  gamma: number,
  smooth: boolean,
): PolytropicPiece {
  const density = record[BAROTROPE_DENSITY]!;
  const pressure = record[BAROTROPE_PRESSURE]!;
  const shift = smooth ? pressure - ((pressure - lower.shift) * lower.gamma) / gamma : 0;
  return { start: density, anchor: density, pressure, energy: record[BAROTROPE_ENERGY]!, gamma, shift };
}

/** Evaluates pieces in order of density. */
export function evaluatePieces(pieces: readonly PolytropicPiece[]): PieceEvaluator {
  const count = pieces.length;
  const column = (pick: (piece: PolytropicPiece) => number): Float64Array => Float64Array.from(pieces, pick);
  const anchors = column((one) => one.anchor);
  const gammas = column((one) => one.gamma);
  const shifts = column((one) => one.shift);
  const energies = column((one) => one.energy);
  const scales = column((one) => one.pressure - one.shift); // p
  const potentials = column((one) => one.energy + one.pressure / one.anchor); // of no use where the piece starts at 0
  const starts = column((one) => one.start);
  const startPressures = new Float64Array(count).fill(Number.NEGATIVE_INFINITY);
  const startPotentials = new Float64Array(count).fill(Number.NEGATIVE_INFINITY);
  for (let i = 1; i < count; i++) {
    startPressures[i] = pieces[i]!.pressure;
    startPotentials[i] = potentials[i]!;
  }

  function find(column: Float64Array, record: Float64Array, slot: number): number {
    let i = count - 1;
    while (i > 0 && record[slot]! < column[i]!) i--;
    return i;
  }

  /** Fills everything but the density, which the record holds. */
  function fill(record: Float64Array, i: number): void {
    const density = record[BAROTROPE_DENSITY]!;
    const gamma = gammas[i]!;
    const anchor = anchors[i]!;
    const shift = shifts[i]!;
    const power = scales[i]! * (density / anchor) ** gamma;
    record[BAROTROPE_PRESSURE] = shift + power;
    record[BAROTROPE_GAMMA] = shift === 0 ? gamma : (gamma * power) / (shift + power);
    if (starts[i] === 0) {
      const energy = density === 0 ? 0 : power / (density * (gamma - 1)); // no difference of powers
      record[BAROTROPE_ENERGY] = energies[i]! + energy;
      record[BAROTROPE_POTENTIAL] = energies[i]! + gamma * energy;
      return;
    }
    const log = Math.log(density / anchor);
    const integral = gamma === 1 ? log : Math.expm1((gamma - 1) * log) / (gamma - 1);
    const growth = (scales[i]! / anchor) * integral;
    record[BAROTROPE_ENERGY] = energies[i]! + growth + (shift === 0 ? 0 : shift * (1 / anchor - 1 / density));
    record[BAROTROPE_POTENTIAL] = potentials[i]! + gamma * growth;
  }

  return {
    fillAtDensity(record): void {
      fill(record, find(starts, record, BAROTROPE_DENSITY));
    },
    fillAtPressure(record): void {
      const i = find(startPressures, record, BAROTROPE_PRESSURE);
      const given = record[BAROTROPE_PRESSURE]!;
      const ratio = (given - shifts[i]!) / scales[i]!;
      record[BAROTROPE_DENSITY] = ratio > 0 ? anchors[i]! * ratio ** (1 / gammas[i]!) : 0;
      fill(record, i);
      record[BAROTROPE_PRESSURE] = given;
    },
    fillAtPotential(record): void {
      const i = find(startPotentials, record, BAROTROPE_POTENTIAL);
      const given = record[BAROTROPE_POTENTIAL]!;
      const exponent = gammas[i]! - 1;
      if (starts[i] === 0) {
        const energy = ((given - energies[i]!) * exponent) / gammas[i]!; // P/rho
        const ratio = (energy * anchors[i]!) / scales[i]!;
        record[BAROTROPE_DENSITY] = ratio > 0 ? anchors[i]! * ratio ** (1 / exponent) : 0;
        fill(record, i);
        record[BAROTROPE_POTENTIAL] = given;
        return;
      }
      const growth = ((given - potentials[i]!) * anchors[i]!) / (gammas[i]! * scales[i]!); // (q^exponent - 1)/exponent
      const log = exponent === 0 ? growth : Math.log1p(exponent * growth) / exponent;
      record[BAROTROPE_DENSITY] = anchors[i]! * Math.exp(log);
      fill(record, i);
      record[BAROTROPE_POTENTIAL] = given;
    },
    curvature(record): number {
      const i = find(starts, record, BAROTROPE_DENSITY);
      const gamma = gammas[i]!;
      const q = record[BAROTROPE_DENSITY]! / anchors[i]!;
      return ((gamma * (gamma - 1) * scales[i]!) / anchors[i]!) * q ** (gamma - 1);
    },
  };
}
