/** Builds a species table: nodes from the defining integrals, mesh graded by where the errors were measured, and its certificate. */
import { electronDensityUnit, electronPressureUnit, electronRestTemperature } from "../constants.js";
import { FermistateError, requireFinite } from "../errors.js";
import { libraryVersion } from "../version.js";
import { certifySpecies } from "./species-certificate.js";
import { fillSpeciesIntegrals, INTEGRALS_LENGTH, takeLogarithm } from "./species-integrals.js";
import type { SpeciesTable } from "./species-table.js";

/** Options of {@link buildSpeciesTable}. */
export interface SpeciesTableOptions {
  /**
   * Lowest and highest temperature, K, within 1e4 to 1e13.
   * @defaultValue `[1e5, 1e13]`
   */
  readonly temperature?: readonly [lowest: number, highest: number];
  /**
   * Length of a cell over that of the default mesh, 0.7 to 8: errors of second derivatives go with its fourth power, size with
   * its inverse square.
   * @defaultValue 1: 3.5 MB
   */
  readonly coarseness?: number;
}

/** Between these the table; below gas is classical, above Sommerfeld's series is good to 1e-8 in every second derivative. */
const lowestDegeneracy = -20;
const highestDegeneracy = 27;

/** Length of the cells that start at eta: e^eta is all that is left to interpolate where it is small. */
function degeneracyStep(eta: number): number {
  if (eta < -16) return 1;
  if (eta < -11) return 0.5;
  return eta < -7 ? 0.25 : eta < 13 ? 0.15 : eta < 22 ? 0.2 : 0.25;
}

/** Length of the cells that start at ln theta: long where either limit, cold or ultrarelativistic, is near. */
function temperatureStep(logTheta: number): number {
  if (logTheta < -9 || logTheta >= 2.5) return 0.16;
  return logTheta < -5 || logTheta >= 0.5 ? 0.085 : 0.058;
}

/**
 * A table of ln P of electrons alone over (eta, ln theta): composition-free, both signs of the charge from one surface, for
 * codes in any language. Some five seconds of arithmetic.
 *
 * In TypeScript `electronPositronGas()` is as fast and exact; `speciesTableContribution` reads the table.
 *
 * @throws `invalid-option`, `not-a-number`, `out-of-range`
 */
export function buildSpeciesTable(options: SpeciesTableOptions = {}): SpeciesTable {
  const { lowest, highest, coarseness } = checked(options);
  const degeneracy = nodesOf(lowestDegeneracy, highestDegeneracy, (eta) => coarseness * degeneracyStep(eta));
  const low = Math.log(lowest / electronRestTemperature);
  const high = Math.log(highest / electronRestTemperature);
  const logTheta = nodesOf(low, high, (y) => coarseness * temperatureStep(y));
  const nodes = new Float64Array(9 * degeneracy.length * logTheta.length);
  const node = new Float64Array(INTEGRALS_LENGTH);
  for (let i = 0, at = 0; i < degeneracy.length; i++) {
    for (let j = 0; j < logTheta.length; j++, at += 9) {
      fillSpeciesIntegrals(degeneracy[i]!, Math.exp(logTheta[j]!), node);
      takeLogarithm(node);
      nodes.set(node, at);
    }
  }
  const table = {
    layout: 1,
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

/** Nodes from `lowest` to `highest`, whole cells but for the last one, which takes what is left. */
function nodesOf(lowest: number, highest: number, step: (from: number) => number): Float64Array {
  const nodes = [lowest];
  for (let at = lowest; at < highest; ) {
    const length = step(at);
    // a remnant of less than half a cell joins the cell before it in two equal parts
    const rest = highest - at;
    const next = rest <= length ? highest : rest < 1.5 * length ? at + 0.5 * rest : at + length;
    nodes.push(next);
    at = next;
  }
  return Float64Array.from(nodes);
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
  requireFinite("options.coarseness", coarseness, "0.7 to 8");
  if (!(coarseness >= 0.7 && coarseness <= 8)) {
    throw new FermistateError("out-of-range", {
      argument: "options.coarseness",
      given: coarseness,
      allowed: "0.7 to 8",
    });
  }
  return { lowest, highest, coarseness };
}
