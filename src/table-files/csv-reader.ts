/** Reads the texts of `csv.ts`, trusting nothing in them; memory is taken for what is there, not for what is claimed. */
import * as z from "zod/mini";
import {
  COLD_LENGTH,
  highestLevel,
  NODE_LENGTH,
  type SheetPhase,
  type TableAxis,
  type TableSheet,
} from "../tables/table.js";
import { invalidFile } from "./invalid.js";
import type { Arrays, Kind, ReadItem } from "./item.js";
import { columnsOf, nodeRows } from "./rows.js";

/** Longest description: true ones have some 20 kB. */
const longestMetadata = 1e6;
/** Places are written to ten digits. */
const placeTolerance = 1e-9;

const value = z.union([z.number(), z.string()]);
const structure = z.object({
  "schema:additionalProperty": z
    .array(z.object({ "schema:propertyID": z.string(), "schema:value": z.union([value, z.array(value)]) }))
    .check(z.maxLength(200)),
});

/** The properties of a description by name. */
export function readProperties(metadata: string): ReadItem {
  const properties = new Map(
    documentOf(metadata)["schema:additionalProperty"].map((one) => [one["schema:propertyID"], one["schema:value"]]),
  );
  return <K extends Kind>(name: string, kind: K, shape: readonly (number | undefined)[]): Arrays[K] => {
    const found = properties.get(name);
    const isList = Array.isArray(found);
    const values = isList ? found : [found];
    const expected = shape.includes(undefined) ? undefined : (shape as number[]).reduce((a, b) => a * b, 1);
    const type = kind === "text" ? "string" : "number";
    const whole = kind !== "int32" || values.every((one) => one === ((one as number) | 0));
    if (
      isList !== shape.length > 0 ||
      (expected !== undefined && values.length !== expected) ||
      values.some((one) => typeof one !== type) ||
      !whole
    ) {
      throw invalidFile(`property ${name}`, found, expected === undefined ? "a list" : `${expected} of kind ${kind}`);
    }
    const arrays = { float64: Float64Array, int32: Int32Array } as const;
    return (kind === "text" ? values : arrays[kind as keyof typeof arrays].from(values as number[])) as Arrays[K];
  };
}

function documentOf(metadata: string): z.infer<typeof structure> {
  if (metadata.length > longestMetadata) {
    throw invalidFile("texts.metadata", `${metadata.length} characters`, `at most ${longestMetadata}`);
  }
  let document: unknown;
  try {
    document = JSON.parse(metadata);
  } catch (error) {
    throw invalidFile("texts.metadata", (error as Error).message, "JSON");
  }
  const checked = structure.safeParse(document);
  if (checked.success) return checked.data;
  const { path, message } = checked.error.issues[0]!;
  throw invalidFile(`texts.metadata ${path.join(".")}`, message, "a description as tableToCsv writes it");
}

/** The cold curve. Its densities are not read: they are for the eye, and follow from the axis. */
export function readCold(text: string): Float64Array {
  const rows = rowsOf(text, "cold");
  const nodes = new Float64Array(rows.count * COLD_LENGTH);
  let next = 0;
  for (const fields of rows.records) {
    for (let i = 1; i <= COLD_LENGTH; i++) nodes[next++] = numberOf(fields[i]!, "cold");
  }
  return nodes;
}

/** The sheets that the properties name. */
export function readSheets(
  texts: { readonly nodes: string; readonly blocks: string },
  property: ReadItem,
): TableSheet[] {
  const axis = (name: string): TableAxis => ({
    lowest: property(`axes/${name}/lowest`, "float64", [])[0]!,
    highest: property(`axes/${name}/highest`, "float64", [])[0]!,
    blocks: property(`axes/${name}/blocks`, "int32", [])[0]!,
  });
  const [density, temperature] = [axis("density"), axis("temperature")];
  const phases = property("sheets/phase", "text", [undefined]) as readonly SheetPhase[];
  const levels = readLevels(texts.blocks, phases, density.blocks, temperature.blocks);

  const rows = rowsOf(texts.nodes, "nodes");
  const counts = levels.map(nodesOf);
  const expected = counts.reduce((sum, count) => sum + count, 0);
  if (rows.count !== expected)
    throw invalidFile("texts.nodes", `${rows.count} rows`, `${expected} by the levels of the blocks`);
  return levels.map((sheet, i) => {
    const nodes = new Float64Array(NODE_LENGTH * counts[i]!);
    for (const row of nodeRows(sheet, density, temperature)) {
      const fields = rows.records.next().value as readonly string[];
      const place = [sheet.phase, ...row.indices].join(",");
      if (fields.slice(0, 5).join(",") !== place) {
        throw invalidFile("texts.nodes", fields.slice(0, 5).join(","), `a row that begins with ${place}`);
      }
      for (const [field, true_] of [
        [fields[5]!, row.density],
        [fields[6]!, row.temperature],
      ] as const) {
        if (!(Math.abs(numberOf(field, "nodes") / true_ - 1) < placeTolerance)) {
          throw invalidFile("texts.nodes", field, `${true_}, the place of node ${place}`);
        }
      }
      for (let k = 0; k < NODE_LENGTH; k++) nodes[row.first + k] = numberOf(fields[7 + k]!, "nodes");
    }
    return { ...sheet, nodes };
  });
}

type Levels = Omit<TableSheet, "nodes">;

function readLevels(
  text: string,
  phases: readonly SheetPhase[],
  densityBlocks: number,
  temperatureBlocks: number,
): Levels[] {
  const rows = rowsOf(text, "blocks");
  const blocks = densityBlocks * temperatureBlocks;
  if (rows.count !== phases.length * blocks) {
    throw invalidFile(
      "texts.blocks",
      `${rows.count} rows`,
      `${phases.length} x ${densityBlocks} x ${temperatureBlocks}`,
    );
  }
  return phases.map((phase) => {
    const sheet = {
      phase,
      densityLevels: new Int8Array(blocks),
      temperatureLevels: new Int8Array(blocks),
      exponents: new Int16Array(blocks),
    };
    for (let block = 0; block < blocks; block++) {
      const [name, p, q, ...numbers] = rows.records.next().value as string[];
      const place = [phase, Math.floor(block / temperatureBlocks), block % temperatureBlocks].join(",");
      if (`${name},${p},${q}` !== place) {
        throw invalidFile("texts.blocks", `${name},${p},${q}`, `a row that begins with ${place}`);
      }
      sheet.densityLevels[block] = integerOf(numbers[0]!, -1, highestLevel);
      const isThere = sheet.densityLevels[block]! >= 0;
      sheet.temperatureLevels[block] = integerOf(numbers[1]!, isThere ? 0 : -1, highestLevel);
      sheet.exponents[block] = integerOf(numbers[2]!, -32768, 32767);
    }
    return sheet;
  });
}

function nodesOf({ densityLevels, temperatureLevels }: Levels): number {
  return densityLevels.reduce((sum, m, i) => (m < 0 ? sum : sum + (2 ** m + 1) * (2 ** temperatureLevels[i]! + 1)), 0);
}

/** The rows below the head: how many, and the fields of each, made one by one. */
interface Rows {
  readonly count: number;
  readonly records: Generator<readonly string[], void, undefined>;
}

function rowsOf(text: string, file: keyof typeof columnsOf): Rows {
  if (!text.endsWith("\n")) throw invalidFile(`texts.${file}`, "a last line without its end", "the whole file");
  const columns = columnsOf[file].map(({ name }) => name);
  const records = recordsOf(text, file, columns.length);
  const head = records.next().value;
  if (head === undefined || head.join() !== columns.join()) {
    throw invalidFile(`texts.${file}`, "another first row", columns.join(","));
  }
  let count = -1;
  for (let at = text.indexOf("\n"); at >= 0; at = text.indexOf("\n", at + 1)) count++;
  return { count, records };
}

/** Records without quotes, each ended by CR LF or LF. */
function* recordsOf(text: string, file: string, width: number): Generator<readonly string[], void, undefined> {
  for (let start = 0; start < text.length; ) {
    const end = text.indexOf("\n", start);
    const fields = text.slice(start, text[end - 1] === "\r" ? end - 1 : end).split(",");
    if (fields.length !== width)
      throw invalidFile(`texts.${file}`, `a row of ${fields.length} fields`, `${width} fields`);
    yield fields;
    start = end + 1;
  }
}

/** A finite double in the spelling of XML Schema, without INF and NaN. */
function numberOf(field: string, file: string): number {
  const number = /^-?\d+(\.\d+)?(E[+-]?\d+)?$/.test(field) ? Number(field) : Number.NaN;
  if (!Number.isFinite(number)) throw invalidFile(`texts.${file}`, field, "a finite number");
  return number;
}

function integerOf(field: string, least: number, most: number): number {
  const number = /^-?\d{1,5}$/.test(field) ? Number(field) : Number.NaN;
  if (!(number >= least && number <= most)) throw invalidFile("texts.blocks", field, `${least} to ${most}`);
  return number;
}
