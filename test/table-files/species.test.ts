/** Tables of the electrons alone in .npz and HDF5: what is written comes back; what is no such table is refused. */
import * as h5wasm from "h5wasm";
import { describe, expect, test } from "vitest";
import { isFermistateError } from "../../src/errors.js";
import { arraysFromNpz, arraysToNpz, type NumberArray } from "../../src/grids/index.js";
import {
  speciesTableFromHdf5,
  speciesTableFromNpz,
  speciesTableToHdf5,
  speciesTableToNpz,
  tableChecksum,
  tableFromHdf5,
  tableToHdf5,
} from "../../src/table-files/index.js";
import { buildSpeciesTable, speciesTableContribution } from "../../src/tables/index.js";
import { inventedTable } from "./table.js";

const table = buildSpeciesTable({ coarseness: 4, temperature: [1e6, 1e10] });
const forms = {
  npz: [speciesTableToNpz, speciesTableFromNpz],
  HDF5: [speciesTableToHdf5, speciesTableFromHdf5],
} as const;

async function codeOf(action: () => Promise<unknown>): Promise<string> {
  try {
    await action();
  } catch (error) {
    if (isFermistateError(error)) return `${error.code}: ${error.argument}`;
    throw error;
  }
  return "no error";
}

describe.each(Object.entries(forms))("%s", (_, [write, read]) => {
  test("comes back bit for bit, also out of other memory; the same table gives the same bytes", async () => {
    const bytes = await write(table);
    expect(await read(bytes)).toEqual(table);
    const larger = Buffer.concat([Buffer.alloc(3), bytes, Buffer.alloc(5)]);
    expect(await read(larger.subarray(3, 3 + bytes.length))).toEqual(table);
    expect(Buffer.compare(bytes, await write(structuredClone(table)))).toBe(0);
    expect(bytes.length).toBeLessThan(table.nodes.byteLength + 40_000);
  });

  test("what has been read is the same gas", async () => {
    const [before, after] = [table, await read(await write(table))].map((one) => speciesTableContribution(one));
    expect(after!.validity).toBe(before!.validity);
    expect(after!.domain).toEqual(before!.domain);
  });

  test.each([
    ["another layout", { layout: 1 }, "table.layout"],
    ["one node of eta", { degeneracy: Float64Array.of(1) }, "table.degeneracy"],
    ["nodes that fall", { logTheta: table.logTheta.slice().reverse() }, "table.logTheta[1]"],
    [
      "cells too short",
      { logTheta: table.logTheta.map((y, i) => (i === 1 ? table.logTheta[0]! + 1e-9 : y)) },
      "table.logTheta[1]",
    ],
    ["nodes missing", { nodes: table.nodes.slice(49) }, "table.nodes"],
    ["a number that is none", { nodes: table.nodes.map((x, i) => (i === 5 ? Number.NaN : x)) }, "table.nodes[5]"],
    ["a unit below zero", { pressureUnit: -1 }, "table.pressureUnit"],
    ["a version of two lines", { version: "1\n2" }, "table.version"],
    ["no certificate", { certificate: undefined }, "table.certificate"],
  ])("a table with %s is not written", async (_name, change, argument) => {
    expect(await codeOf(() => write({ ...table, ...change } as never))).toBe(`invalid-option: ${argument}`);
  });

  test.each([null, 5, "bytes", {}])("reading %j is a wrong call", async (bytes) => {
    expect(await codeOf(() => read(bytes as never))).toBe("invalid-option: bytes");
  });
});

test("equal tables have the same checksum in every form, others have another", async () => {
  const file = arraysFromNpz(await speciesTableToNpz(table));
  const { checksum } = JSON.parse(file.get("description") as string) as { checksum: string };
  expect(checksum).toBe(await tableChecksum(table));
  expect(await tableChecksum({ ...table, densityUnit: 2 * table.densityUnit })).not.toBe(checksum);
});

test("tables of other constants come back as they are; the contribution refuses them", async () => {
  const other = { ...table, restTemperature: 5.93e9 };
  expect(await speciesTableFromNpz(await speciesTableToNpz(other))).toEqual(other);
  expect(() => speciesTableContribution(other)).toThrow(/restTemperature/);
});

describe(".npz", () => {
  const changed = async (change: (arrays: Record<string, NumberArray | string>) => void): Promise<Uint8Array> => {
    const arrays = Object.fromEntries(arraysFromNpz(await speciesTableToNpz(table)));
    change(arrays);
    return arraysToNpz(arrays);
  };

  test.each<[string, (arrays: Record<string, NumberArray | string>) => void]>([
    ["without the nodes", (arrays) => delete arrays["surface.nodes"]],
    [
      "with nodes of another shape",
      (arrays) => Object.assign(arrays["surface.nodes"]!, { shape: [table.nodes.length] }),
    ],
    [
      "with a layout of one and a half",
      (arrays) => Object.assign(arrays["format.electron_table_layout"]!, { values: Float64Array.of(1.5) }),
    ],
    [
      "with a later layout",
      (arrays) => Object.assign(arrays["format.electron_table_layout"]!, { values: Float64Array.of(3) }),
    ],
    ["with a text for numbers", (arrays) => Object.assign(arrays, { "units.density": "much" })],
    [
      "with numbers for a text",
      (arrays) => Object.assign(arrays, { "source.version": { shape: [], values: Float64Array.of(1) } }),
    ],
    ["with another list of quantities", (arrays) => Object.assign(arrays, { "certificate.quantity": "pressure" })],
    ["with one digit changed", (arrays) => (arrays["surface.nodes"] as NumberArray).values.fill(1, 9, 10)],
    ["without a description", (arrays) => delete arrays["description"]],
    ["with a description that is no JSON", (arrays) => Object.assign(arrays, { description: "null" })],
  ])("a file %s is refused", async (_name, change) => {
    expect(await codeOf(async () => speciesTableFromNpz(await changed(change)))).toMatch(/^invalid-file/);
  });

  test("describes every array and its unit", async () => {
    const arrays = arraysFromNpz(await speciesTableToNpz(table));
    const description = JSON.parse(arrays.get("description") as string) as {
      readonly items: readonly { readonly array: string; readonly description: string; readonly units?: string }[];
      readonly reading: readonly string[];
    };
    expect(description.items.map(({ array }) => array)).toEqual(
      [...arrays.keys()].filter((name) => name !== "description"),
    );
    for (const { array, description: words, units } of description.items) {
      expect(words, array).toMatch(/\w/);
      expect(units === undefined, array).toBe(typeof arrays.get(array) === "string");
    }
    expect(description.reading[0]).toContain("exp L(eta, ln theta)");
  });
});

describe("HDF5", () => {
  test("libhdf5 reads the same numbers, units and meanings", async () => {
    const { FS } = await h5wasm.ready;
    FS.writeFile("/electrons.h5", await speciesTableToHdf5(table));
    const file = new h5wasm.File("/electrons.h5", "r");
    const dataset = (path: string) => file.get(path) as h5wasm.Dataset;
    expect(dataset("surface/nodes").value).toEqual(table.nodes);
    expect(dataset("surface/nodes").shape).toEqual([table.degeneracy.length, table.logTheta.length, 7, 7]);
    expect(dataset("units/rest_temperature").attrs["units"]!.value).toBe("K");
    expect(dataset("format/checksum").value).toBe(await tableChecksum(table));
    for (const path of file.paths()) {
      const found = file.get(path);
      if (found instanceof h5wasm.Dataset) expect(found.attrs["description"]?.value, path).toMatch(/\w/);
    }
    file.close();
  });

  test("the other kind of table is refused, either way", async () => {
    const electrons = await speciesTableToHdf5(table);
    const matter = await tableToHdf5(inventedTable(1));
    expect(await codeOf(() => tableFromHdf5(electrons))).toMatch(/^invalid-file/);
    expect(await codeOf(() => speciesTableFromHdf5(matter))).toMatch(/^invalid-file/);
  });
});
