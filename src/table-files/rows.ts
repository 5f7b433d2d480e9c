/** The rows and columns of a table's CSV files: which there are, and in which order. */
import { NODE_LENGTH, type TableAxis, type TableSheet } from "../tables/table.js";

/** A column of a CSV file. */
export interface Column {
  readonly name: string;
  readonly datatype: "string" | "integer" | "double";
  readonly units?: string;
  readonly description: string;
}

const sheet: Column = { name: "sheet", datatype: "string", description: "what the sheet describes" };
const index = (name: string, description: string): Column => ({
  name,
  datatype: "integer",
  units: "1",
  description: `${description}, counted from 0`,
});
const densityBlock = index("density_block", "block along density");
const temperatureBlock = index("temperature_block", "block along temperature");
const density: Column = {
  name: "density",
  datatype: "double",
  units: "g/cm^3",
  description: "baryon mass density, ten digits; u = ln rho is at equal steps",
};
const temperature: Column = {
  name: "temperature",
  datatype: "double",
  units: "K",
  description: "temperature, ten digits; v = ln T is at equal steps",
};
const suffixes = ["", "_v", "_vv", "_u", "_uv", "_uvv", "_uu", "_uuv", "_uuvv"];

/** The columns of each file, in order. */
export const columnsOf: Readonly<Record<"nodes" | "blocks" | "cold", readonly Column[]>> = {
  nodes: [
    sheet,
    densityBlock,
    temperatureBlock,
    index("density_node", "node of the block along density"),
    index("temperature_node", "node of the block along temperature"),
    density,
    temperature,
    ...suffixes.map(
      (suffix): Column => ({
        name: `L${suffix}`,
        datatype: "double",
        units: "1",
        description: suffix === "" ? "L" : `derivative of L by ${[...suffix.slice(1)].join(" and ")}`,
      }),
    ),
  ],
  blocks: [
    sheet,
    densityBlock,
    temperatureBlock,
    {
      name: "density_level",
      datatype: "integer",
      units: "1",
      description: "2^level cells along density; -1: no block",
    },
    { name: "temperature_level", datatype: "integer", units: "1", description: "2^level cells along temperature" },
    { name: "exponent", datatype: "integer", units: "1", description: "k in F = F_0 - 2^k exp L" },
  ],
  cold: [
    density,
    { name: "F_0", datatype: "double", units: "erg/g", description: "F_0" },
    { name: "F_0_u", datatype: "double", units: "erg/g", description: "dF_0/du" },
    { name: "F_0_uu", datatype: "double", units: "erg/g", description: "d2F_0/du2" },
  ],
};

/** A block and its two indices. */
export interface BlockRow {
  readonly block: number;
  readonly indices: readonly [density: number, temperature: number];
}

/** All blocks in the order of the arrays by block. */
export function* blockRows(densityBlocks: number, temperatureBlocks: number): Generator<BlockRow, void, undefined> {
  for (let p = 0; p < densityBlocks; p++) {
    for (let q = 0; q < temperatureBlocks; q++) yield { block: p * temperatureBlocks + q, indices: [p, q] };
  }
}

/** A node: the first of its numbers, its block's and its own indices, its place. */
export interface NodeRow {
  readonly first: number;
  readonly indices: readonly number[];
  readonly density: number;
  readonly temperature: number;
}

/** All nodes of a sheet in the order of its array. */
export function* nodeRows(
  { densityLevels, temperatureLevels }: Pick<TableSheet, "densityLevels" | "temperatureLevels">,
  densities: TableAxis,
  temperatures: TableAxis,
): Generator<NodeRow, void, undefined> {
  let first = 0;
  for (const { block, indices } of blockRows(densities.blocks, temperatures.blocks)) {
    if (densityLevels[block]! < 0) continue;
    const cells = [2 ** densityLevels[block]!, 2 ** temperatureLevels[block]!] as const;
    for (let x = 0; x <= cells[0]; x++) {
      const density = placeOn(densities, indices[0] + x / cells[0]);
      for (let y = 0; y <= cells[1]; y++) {
        const temperature = placeOn(temperatures, indices[1] + y / cells[1]);
        yield { first, indices: [...indices, x, y], density, temperature };
        first += NODE_LENGTH;
      }
    }
  }
}

/** The value at so many blocks from the lower end. */
function placeOn({ lowest, highest, blocks }: TableAxis, at: number): number {
  return lowest * (highest / lowest) ** (at / blocks);
}
