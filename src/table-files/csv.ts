/**
 * A table as CSV (RFC 4180) with a CSV on the Web description of all its files, "Metadata Vocabulary for Tabular Data", W3C
 * Recommendation of 17 December 2015: numbers by node, by block and of the cold curve in three CSV files; the rest, named as
 * in HDF5, among the properties of the description.
 */
import { FermistateError } from "../errors.js";
import { numbersText } from "../grids/number-text.js";
import { COLD_LENGTH, type FreeEnergyTable, NODE_LENGTH, type TableSheet } from "../tables/table.js";
import { libraryVersion } from "../version.js";
import { checkTable } from "./check.js";
import { checkedTable } from "./checked.js";
import { checksumOf } from "./checksum.js";
import { readCold, readProperties, readSheets } from "./csv-reader.js";
import { checksumRecipe } from "./form.js";
import { freeEnergyForm } from "./free-energy.js";
import { invalidFile } from "./invalid.js";
import { formatItems, type Item, type ReadItem } from "./item.js";
import { itemsOf } from "./items.js";
import { meaningOf, recipe, title } from "./meanings.js";
import { blockRows, type Column, columnsOf, nodeRows } from "./rows.js";

/** A table as texts, one for each file. */
export interface TableCsv {
  /** The CSV on the Web description, JSON. */
  readonly metadata: string;
  /** L and its derivatives, one row for each node. */
  readonly nodes: string;
  /** Levels and exponents, one row for each block. */
  readonly blocks: string;
  /** The cold curve, one row for each of its nodes. */
  readonly cold: string;
}

/** What the name of the description of a table in CSV ends in. */
export const metadataEnding = "-metadata.json";

/** The names of the files of {@link tableToCsv}: the description names the others. */
export function tableCsvNames(name: string): { readonly [File in keyof TableCsv]: string } {
  if (typeof name !== "string" || !/^[^/\\\p{Cc}]+$/u.test(name)) {
    const allowed = "the beginning of names of files, without folders";
    throw new FermistateError("invalid-option", { argument: "name", given: name, allowed });
  }
  return {
    metadata: `${name}${metadataEnding}`,
    nodes: `${name}-nodes.csv`,
    blocks: `${name}-blocks.csv`,
    cold: `${name}-cold.csv`,
  };
}

/**
 * A table as CSV and its description. Numbers read back to the same bits; densities and temperatures of the nodes are there
 * for the eye, to ten digits.
 *
 * @param name - what the names of the files begin with, see {@link tableCsvNames}
 * @throws FermistateError `invalid-option` where `table` is no table of this layout or `name` no name
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { writeTexts } from "fermistate/files";
 * import { tableCsvNames, tableToCsv } from "fermistate/table-files";
 * import { buildTable } from "fermistate/tables";
 * const region = { density: [1e6, 3e6], temperature: [2e7, 3e7], accuracy: 1e-3 } as const;
 * const table = buildTable(whiteDwarfMatter(), composition({ He4: 1 }), region);
 * const texts = await tableToCsv(table, "helium");
 * const { metadata, nodes, blocks, cold } = tableCsvNames("helium");
 * await writeTexts([
 *   { path: metadata, text: texts.metadata },
 *   { path: nodes, text: texts.nodes },
 *   { path: blocks, text: texts.blocks },
 *   { path: cold, text: texts.cold },
 * ]);
 * ```
 */
export async function tableToCsv(table: FreeEnergyTable, name: string): Promise<TableCsv> {
  const items = itemsOf(checkTable(table, "invalid-option"));
  const names = tableCsvNames(name);
  const all = [...items, ...formatItems(items, await checksumOf(items))];
  const document = {
    "@context": ["http://www.w3.org/ns/csvw", { "@language": "en" }],
    "dc:title": `${title}: ${table.composition.name}`,
    "dc:creator": `fermistate ${libraryVersion}`,
    "dc:description": [...recipe, checksumRecipe],
    "schema:additionalProperty": all.filter((item) => !inColumns(item.name)).map(property),
    dialect: { encoding: "utf-8", delimiter: ",", header: true, headerRowCount: 1, lineTerminators: ["\r\n"] },
    tables: (["nodes", "blocks", "cold"] as const).map((file) => ({
      url: encodeURIComponent(names[file]),
      tableSchema: { columns: columnsOf[file].map(described), primaryKey: keys[file] },
    })),
  };
  return {
    metadata: `${JSON.stringify(document, null, 2)}\n`,
    nodes: nodesText(table),
    blocks: blocksText(table),
    cold: coldText(table),
  };
}

/**
 * The table in the texts of {@link tableToCsv}. What comes back equals what was written, or there is an error. Lines may end
 * in LF alone.
 *
 * @throws FermistateError `invalid-file` for texts that are damaged, truncated, of another layout, or not of one table
 */
export async function tableFromCsv(texts: TableCsv): Promise<FreeEnergyTable> {
  for (const file of ["metadata", "nodes", "blocks", "cold"] as const) {
    if (typeof texts?.[file] === "string") continue;
    const allowed = "{ metadata, nodes, blocks, cold: the text of each file }";
    throw new FermistateError("invalid-option", { argument: `texts.${file}`, given: texts?.[file], allowed });
  }
  const property = readProperties(texts.metadata);
  let sheets: readonly TableSheet[] | undefined;
  const read: ReadItem = (name, kind, shape) => {
    if (!inColumns(name)) return property(name, kind, shape);
    if (name === "cold/nodes") return readCold(texts.cold) as never;
    sheets ??= readSheets(texts, property);
    const [, phase, column] = name.split("/");
    const sheet = sheets.find((one) => one.phase === phase);
    if (sheet === undefined) throw invalidFile("texts.blocks", `no sheet ${phase}`, "every sheet of the description");
    const { nodes, densityLevels, temperatureLevels, exponents } = sheet;
    const columns = { nodes, density_level: densityLevels, temperature_level: temperatureLevels, exponent: exponents };
    return columns[column as keyof typeof columns] as never;
  };
  return checkedTable(freeEnergyForm, read, property("format/checksum", "text", [])[0]!);
}

/** Whether an item stands in a CSV file: all others are properties of the description. */
function inColumns(name: string): boolean {
  return name === "cold/nodes" || /^sheets\/(single|liquid|crystal)\//.test(name);
}

const keys = {
  nodes: ["sheet", "density_block", "temperature_block", "density_node", "temperature_node"],
  blocks: ["sheet", "density_block", "temperature_block"],
  cold: "density",
} as const;

/** A named value of the whole table (schema.org's PropertyValue). */
function property({ name, shape, values }: Item): Record<string, unknown> {
  const { units, description } = meaningOf(name);
  return {
    "@type": "schema:PropertyValue",
    "schema:propertyID": name,
    "schema:description": description,
    ...(units === undefined ? {} : { "schema:unitText": units }),
    "schema:value": shape.length === 0 ? values[0] : Array.from(values as ArrayLike<unknown>),
  };
}

function described({ name, datatype, units, description }: Column): Record<string, unknown> {
  return {
    name,
    titles: name,
    "dc:description": description,
    datatype,
    required: true,
    ...(units === undefined ? {} : { "schema:unitText": units }),
  };
}

const lineEnd = "\r\n";
const head = (file: keyof typeof columnsOf): string => `${columnsOf[file].map(({ name }) => name).join(",")}${lineEnd}`;

function nodesText(table: FreeEnergyTable): string {
  const lines = [head("nodes")];
  for (const sheet of table.sheets) {
    for (const { first, indices, density, temperature } of nodeRows(sheet, table.density, table.temperature)) {
      const derivatives = numbersText(Array.from(sheet.nodes.subarray(first, first + NODE_LENGTH)), "");
      const place = `${short(density)},${short(temperature)}`;
      lines.push(`${sheet.phase},${indices.join(",")},${place},${derivatives}${lineEnd}`);
    }
  }
  return lines.join("");
}

function blocksText(table: FreeEnergyTable): string {
  const lines = [head("blocks")];
  for (const { phase, densityLevels, temperatureLevels, exponents } of table.sheets) {
    for (const { block, indices } of blockRows(table.density.blocks, table.temperature.blocks)) {
      const levels = [densityLevels[block], temperatureLevels[block], exponents[block]];
      lines.push(`${[phase, ...indices, ...levels].join(",")}${lineEnd}`);
    }
  }
  return lines.join("");
}

function coldText({ cold, density }: FreeEnergyTable): string {
  const lines = [head("cold")];
  const last = cold.nodes.length / COLD_LENGTH - 1;
  for (let i = 0; i <= last; i++) {
    const place = density.lowest * (density.highest / density.lowest) ** (i / last);
    const values = numbersText(Array.from(cold.nodes.subarray(COLD_LENGTH * i, COLD_LENGTH * (i + 1))), "");
    lines.push(`${short(place)},${values}${lineEnd}`);
  }
  return lines.join("");
}

/** Ten digits. */
function short(value: number): string {
  return String(Number(value.toPrecision(10))).replace("e", "E");
}
