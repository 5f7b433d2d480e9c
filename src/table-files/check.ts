/** Whether an object is a table: its structure by a schema, then what the schema cannot say. */
import * as z from "zod/mini";
import { type ErrorCode, FermistateError, isFermistateError } from "../errors.js";
import { requireComposition } from "../matter/composition.js";
import { certifiedQuantities } from "../tables/errors-at.js";
import { powerOffset } from "../tables/members.js";
import { COLD_LENGTH, type FreeEnergyTable, highestLevel, NODE_LENGTH, type TableSheet } from "../tables/table.js";
import { LAYOUT } from "./items.js";

/** Most blocks of one axis; with the finest level, more cells than a table of any use has. */
const mostBlocks = 4096;
/** 2^k of a block, as the look-up knows it. */
const exponentRange = [-powerOffset, powerOffset] as const;

/** A finite number above zero. */
export const positive: z.ZodMiniType<number> = z.number().check(z.gt(0)); // zod's numbers are finite
/** Zero has no sign: JSON would lose it. */
export const notNegative: z.ZodMiniType<number> = z.number().check(
  z.gte(0),
  z.refine((value) => !Object.is(value, -0), { error: "0 without a sign" }),
);
/** A number of things. */
export const count: z.ZodMiniType<number> = z.int32().check(z.gte(0));
const axis = z.object({ lowest: positive, highest: positive, blocks: z.int().check(z.gte(1), z.lte(mostBlocks)) });
/** A line of text; the trailing NUL of a padded string and line ends of a CSV file are no part of one. */
export const line: z.ZodMiniType<string> = z
  .string()
  .check(z.maxLength(2000), z.regex(/^[^\p{Cc}\p{Cs}\u2028\u2029]*$/u));
const lines = z.array(line).check(z.maxLength(200));
const physics = z.object({
  model: line.check(z.minLength(1)),
  options: z.record(line, z.union([line, z.number(), z.boolean()])),
});
const errorOfQuantity = z.object({
  bound: notNegative,
  largest: notNegative,
  percentile99: notNegative,
  median: notNegative,
  worst: z.tuple([notNegative, notNegative]),
});

const structure = z.object({
  layout: z.literal(LAYOUT),
  holdsFor: z.enum(["one composition", "electron density"]),
  density: axis,
  temperature: axis,
  cold: z.object({ temperature: notNegative, nodes: z.instanceof(Float64Array) }),
  sheets: z
    .array(
      z.object({
        phase: z.enum(["single", "liquid", "crystal"]),
        densityLevels: z.instanceof(Int8Array),
        temperatureLevels: z.instanceof(Int8Array),
        exponents: z.instanceof(Int16Array),
        nodes: z.instanceof(Float64Array),
      }),
    )
    .check(z.minLength(1), z.maxLength(2)),
  freezing: z.optional(z.object({ factor: positive, highestDensity: positive })),
  source: z.object({ tabulated: lines, beside: lines, physics: z.array(physics), validity: lines, version: line }),
  certificate: z.object({
    places: count,
    target: notNegative,
    blocksAboveTarget: count,
    errors: z.object(Object.fromEntries(certifiedQuantities.map((name) => [name, errorOfQuantity]))),
  }),
});

/**
 * Throws an error of the given code unless `table` is a {@link FreeEnergyTable} of this layout; returns it.
 *
 * Checked: kinds and lengths of all arrays against the levels, levels and exponents in range, every number finite, axes
 * increasing, sheets and freezing line that belong together, texts of one line.
 */
export function checkTable(table: unknown, code: ErrorCode): FreeEnergyTable {
  const fail = (argument: string, given: unknown, allowed: string): never => {
    throw new FermistateError(code, { argument, given, allowed });
  };
  const checked = structureOf(table, structure, `a FreeEnergyTable of layout ${LAYOUT}`, fail) as FreeEnergyTable;
  const { density, temperature, cold, sheets, freezing, composition } = checked;
  try {
    requireComposition(composition);
  } catch (error) {
    if (isFermistateError(error)) fail("table.composition", composition, error.allowed);
    throw error;
  }
  for (const [name, { lowest, highest }] of Object.entries({ density, temperature })) {
    if (!(highest > lowest)) fail(`table.${name}.highest`, highest, `above the lowest, ${lowest}`);
  }
  const phases = sheets.map((sheet) => sheet.phase).join(" and ");
  if (sheets.length === 2 && phases !== "liquid and crystal") {
    fail("table.sheets", phases, "one sheet, or two: liquid and crystal");
  }
  if ((freezing === undefined) !== (sheets.length === 1)) {
    fail("table.freezing", freezing, "a freezing line where there are two sheets, none where there is one");
  }
  const coldNodes = cold.nodes.length / COLD_LENGTH;
  if (!Number.isInteger(coldNodes) || coldNodes < 2) {
    fail("table.cold.nodes", cold.nodes.length, `${COLD_LENGTH} numbers for each of two nodes or more`);
  }
  checkFinite("table.cold.nodes", cold.nodes, fail);
  for (const sheet of sheets) checkSheet(sheet, density.blocks * temperature.blocks, fail);
  return checked;
}

/** Throws the error of a table that is none. */
export type Fail = (argument: string, given: unknown, allowed: string) => never;

/** `table` itself where it has the structure; else fails with the path of what has not. */
export function structureOf(table: unknown, schema: z.ZodMiniType, whole: string, fail: Fail): unknown {
  if (typeof table !== "object" || table === null) return fail("table", table, whole);
  const checked = schema.safeParse(table);
  if (checked.success) return table;
  const issue = checked.error.issues[0]!;
  const path = ["table", ...issue.path];
  const given = issue.path.reduce<unknown>((inner, key) => (inner as Record<PropertyKey, unknown>)?.[key], table);
  return fail(path.join("."), given, `${whole}: ${issue.message}`);
}

function checkSheet(sheet: TableSheet, blocks: number, fail: Fail): void {
  const { densityLevels, temperatureLevels, exponents, nodes } = sheet;
  const name = `table.sheets.${sheet.phase}`;
  for (const [column, { length }] of Object.entries({ densityLevels, temperatureLevels, exponents })) {
    if (length !== blocks) fail(`${name}.${column}`, length, `one number for each of ${blocks} blocks`);
  }
  let expected = 0;
  const [least, most] = exponentRange;
  for (let i = 0; i < blocks; i++) {
    const [m, n, k] = [densityLevels[i]!, temperatureLevels[i]!, exponents[i]!];
    if (m < -1 || m > highestLevel) fail(`${name}.densityLevels[${i}]`, m, `-1 to ${highestLevel}`);
    if (n < (m < 0 ? -1 : 0) || n > highestLevel) {
      fail(`${name}.temperatureLevels[${i}]`, n, `0 to ${highestLevel}; where there is no block, also -1`);
    }
    if (k < least || k > most) fail(`${name}.exponents[${i}]`, k, `${least} to ${most}`);
    if (m >= 0) expected += NODE_LENGTH * (2 ** m + 1) * (2 ** n + 1);
  }
  if (nodes.length !== expected) fail(`${name}.nodes`, nodes.length, `${expected} numbers by the levels of the blocks`);
  checkFinite(`${name}.nodes`, nodes, fail);
}

/** Every number is finite. */
export function checkFinite(name: string, values: Float64Array, fail: Fail): void {
  for (let i = 0; i < values.length; i++) {
    const value = values[i]!;
    if (value - value !== 0) fail(`${name}[${i}]`, value, "a finite number");
  }
}
