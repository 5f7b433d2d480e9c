/** Whether an object is a table of the electrons alone: its structure by a schema, then what the schema cannot say. */
import * as z from "zod/mini";
import { type ErrorCode, FermistateError } from "../errors.js";
import { NODE_LENGTH, type SpeciesTable, speciesQuantities } from "../tables/species-table.js";
import { checkFinite, count, line, notNegative, positive, structureOf } from "./check.js";

/** Version of {@link SpeciesTable.layout} that this library writes and reads. */
export const SPECIES_LAYOUT = 2;

/** No cell is shorter than its axis over this: the index of the look-up has a place for each such length. */
const mostCells = 100_000;

const axis = z.instanceof(Float64Array).check(z.refine(({ length }) => length >= 2, { error: "two nodes or more" }));
const error = z.object({
  bound: notNegative,
  largest: notNegative,
  median: notNegative,
  worst: z.tuple([z.number(), notNegative]),
});
const structure = z.object({
  layout: z.literal(SPECIES_LAYOUT),
  degeneracy: axis,
  logTheta: axis,
  nodes: z.instanceof(Float64Array),
  restTemperature: positive,
  pressureUnit: positive,
  densityUnit: positive,
  version: line,
  certificate: z.object({
    places: count,
    errors: z.object(Object.fromEntries(speciesQuantities.map((name) => [name, error]))),
  }),
});

/**
 * Throws an error of the given code unless `table` is a {@link SpeciesTable} of this layout; returns it.
 *
 * Checked: kinds and lengths of all arrays, axes increasing, every number finite.
 */
export function checkSpeciesTable(table: unknown, code: ErrorCode): SpeciesTable {
  const fail = (argument: string, given: unknown, allowed: string): never => {
    throw new FermistateError(code, { argument, given, allowed });
  };
  const checked = structureOf(table, structure, `a SpeciesTable of layout ${SPECIES_LAYOUT}`, fail) as SpeciesTable;
  const { degeneracy, logTheta, nodes } = checked;
  for (const [name, values] of Object.entries({ degeneracy, logTheta })) {
    checkFinite(`table.${name}`, values, fail);
    const least = (values.at(-1)! - values[0]!) / mostCells;
    for (let i = 1; i < values.length; i++) {
      if (!(values[i]! - values[i - 1]! > 0 && values[i]! - values[i - 1]! >= least)) {
        fail(
          `table.${name}[${i}]`,
          values[i],
          `increasing nodes, no two of them nearer than a ${mostCells}th of the axis`,
        );
      }
    }
  }
  const expected = NODE_LENGTH * degeneracy.length * logTheta.length;
  if (nodes.length !== expected) fail("table.nodes", nodes.length, `${expected} numbers, ${NODE_LENGTH} a node`);
  checkFinite("table.nodes", nodes, fail);
  return checked;
}
