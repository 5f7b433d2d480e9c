/**
 * Builds a species table: nodes from the defining integrals on a mesh graded by the singularities of ln P, and its
 * certificate.
 */
import { electronDensityUnit, electronPressureUnit, electronRestTemperature } from "../constants.js";
import { FermistateError, requireFinite } from "../errors.js";
import { libraryVersion } from "../version.js";
import { certifySpecies } from "./species-certificate.js";
import { fillSpeciesIntegrals, takeLogarithm } from "./species-integrals.js";
import { NODE_LENGTH, type SpeciesTable } from "./species-table.js";

/** Options of {@link buildSpeciesTable}. */
export interface SpeciesTableOptions {
  /**
   * Lowest and highest temperature, K, within 1e4 to 1e13.
   * @defaultValue `[1e5, 1e13]`
   */
  readonly temperature?: readonly [lowest: number, highest: number];
  /**
   * Length of a cell over that of the default mesh, 0.7 to 4: errors of second derivatives go with its 12th power until
   * they meet rounding, size with its inverse square. Measured, heat capacity, largest error and size: 1, 6e-11, 0.29
   * MB; 2, 1.4e-7, 0.08 MB; 4, 1.5e-4, 0.02 MB.
   * @defaultValue 1
   */
  readonly coarseness?: number;
}

/**
 * Between these the table; below, the gas is classical, above, Sommerfeld's series is good to 2e-12 in every second
 * derivative.
 */
const lowestDegeneracy = -20;
const highestDegeneracy = 33;

/**
 * Cells are this long where ln P is nearest to its singularities, and longer by hypot(1, distance/pi) away from there:
 * at eta = +-i pi (poles of the Fermi function) and at ln theta = y +- i pi, where the largest of kT and mu is of the
 * order of m c^2.
 */
const cellLength = 0.6;
const degeneracyOnset: readonly [number, number] = [0, 0];
const relativityOnset: readonly [number, number] = [-3, 0];

/**
 * A table of ln P of electrons alone over (eta, ln theta): composition-free, both signs of the charge from one surface,
 * for codes in any language. Some three seconds of arithmetic.
 *
 * In TypeScript `electronPositronGas()` is faster, and exact; `speciesTableContribution` reads the table.
 *
 * @throws `invalid-option`, `not-a-number`, `out-of-range`
 */
export function buildSpeciesTable(options: SpeciesTableOptions = {}): SpeciesTable {
  const { lowest, highest, coarseness } = checked(options);
  const length = coarseness * cellLength;
  const degeneracy = nodesOf(lowestDegeneracy, highestDegeneracy, degeneracyOnset, length);
  const low = Math.log(lowest / electronRestTemperature);
  const high = Math.log(highest / electronRestTemperature);
  const logTheta = nodesOf(low, high, relativityOnset, length);
  const nodes = new Float64Array(NODE_LENGTH * degeneracy.length * logTheta.length);
  const node = new Float64Array(NODE_LENGTH);
  for (let i = 0, at = 0; i < degeneracy.length; i++) {
    for (let j = 0; j < logTheta.length; j++, at += NODE_LENGTH) {
      fillSpeciesIntegrals(degeneracy[i]!, Math.exp(logTheta[j]!), node);
      takeLogarithm(node);
      nodes.set(node, at);
    }
  }
  const table = {
    layout: 2,
    degeneracy,
    logTheta,
    nodes,
    restTemperature: electronRestTemperature,
    pressureUnit: electronPressureUnit,
    densityUnit: electronDensityUnit,
    version: libraryVersion,
  } as const;
  return { ...table, certificate: certifySpecies(table) };
}

/**
 * Nodes at equal steps of s: x = x_1 + pi sinh(s - s_1) beyond either end x_1 of the interval `near`, x - x_1 = pi (s -
 * s_1) on it.
 */
function nodesOf(lowest: number, highest: number, near: readonly [number, number], length: number): Float64Array {
  const [from, to] = near;
  const breadth = (to - from) / Math.PI;
  const stretched = (x: number): number =>
    x < from
      ? Math.asinh((x - from) / Math.PI)
      : breadth + (x > to ? Math.asinh((x - to) / Math.PI) : (x - to) / Math.PI);
  const place = (s: number): number =>
    s < 0 ? from + Math.PI * Math.sinh(s) : to + Math.PI * (s > breadth ? Math.sinh(s - breadth) : s - breadth);
  const [first, last] = [stretched(lowest), stretched(highest)];
  const cells = Math.ceil(((last - first) * Math.PI) / length);
  const nodes = Float64Array.from({ length: cells + 1 }, (_, k) => place(first + ((last - first) * k) / cells));
  nodes[0] = lowest;
  nodes[cells] = highest;
  return nodes;
}

function checked(options: SpeciesTableOptions): { lowest: number; highest: number; coarseness: number } {
  const allowed = "an object { temperature?: [lowest, highest], coarseness?: number }";
  if (typeof options !== "object" || options === null) {
    throw new FermistateError("invalid-option", { argument: "options", given: options, allowed });
  }
  const stranger = Object.keys(options).find((key) => key !== "temperature" && key !== "coarseness");
  if (stranger !== undefined) {
    throw new FermistateError("invalid-option", { argument: "options", given: stranger, allowed });
  }
  const { temperature = [1e5, 1e13], coarseness = 1 } = options;
  if (!Array.isArray(temperature) || temperature.length !== 2) {
    const pair = "two temperatures, K";
    throw new FermistateError("invalid-option", { argument: "options.temperature", given: temperature, allowed: pair });
  }
  const [lowest, highest] = temperature as [number, number];
  const range = "1e4 to 1e13 K, the higher one at least twice the lower";
  requireFinite("options.temperature", lowest, range);
  requireFinite("options.temperature", highest, range);
  if (!(lowest >= 1e4 && highest <= 1e13 && highest >= 2 * lowest)) {
    const given = `${lowest} to ${highest}`;
    throw new FermistateError("out-of-range", { argument: "options.temperature", given, allowed: range });
  }
  requireFinite("options.coarseness", coarseness, "0.7 to 4");
  if (!(coarseness >= 0.7 && coarseness <= 4)) {
    throw new FermistateError("out-of-range", {
      argument: "options.coarseness",
      given: coarseness,
      allowed: "0.7 to 4",
    });
  }
  return { lowest, highest, coarseness };
}
