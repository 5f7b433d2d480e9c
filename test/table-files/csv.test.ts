/** Tables as CSV on the Web: the same bits come back, and what is damaged is refused. */
import { describe, expect, test } from "vitest";
import { composition } from "../../src/matter/composition.js";
import { type TableCsv, tableCsvNames, tableFromCsv, tableToCsv } from "../../src/table-files/index.js";
import { complaintsAbout } from "../grids/csvw.js";
import { inventedTable } from "./table.js";

describe.each([1, 2] as const)("a table of %i sheets", (sheets) => {
  test.each([
    ["nuclides", composition({ H1: 0.2, He4: 0.7, Fe56: 0.1 })],
    ["a mean nucleus", composition({ meanMassNumber: 14.1, meanCharge: 7.03 })],
  ])("of %s comes back bit for bit", async (_, matter) => {
    const table = inventedTable(sheets, matter);
    expect(await tableFromCsv(await tableToCsv(table, "core"))).toEqual(table);
  });

  test("also with signed zeros, subnormal and huge numbers, and line ends of other systems", async () => {
    const table = inventedTable(sheets);
    table.sheets[0]!.nodes.set([-0, 5e-324, -1.7976931348623157e308, 1e21, 0.1, 123456789012345680000, 1e-7, 0, -1]);
    const texts = await tableToCsv(table, "core");
    const back = await tableFromCsv({ ...texts, nodes: texts.nodes.replaceAll("\r\n", "\n") });
    expect(back).toEqual(table);
    expect(Object.is(back.sheets[0]!.nodes[0], -0)).toBe(true);
  });
});

test("the description obeys CSV on the Web for every file, and names and explains all columns", async () => {
  const texts = await tableToCsv(inventedTable(2), "core of mine");
  const names = tableCsvNames("core of mine");
  const { tables, ...common } = JSON.parse(texts.metadata) as { tables: Record<string, unknown>[] };
  expect(tables.map(({ url }) => decodeURIComponent(String(url)))).toEqual([names.nodes, names.blocks, names.cold]);
  for (const [i, text] of [texts.nodes, texts.blocks, texts.cold].entries()) {
    expect(complaintsAbout({ ...common, ...tables[i] })).toEqual([]);
    const columns = (tables[i]!["tableSchema"] as { columns: Record<string, string>[] }).columns;
    expect(text.slice(0, text.indexOf("\r\n")).split(",")).toEqual(columns.map(({ name }) => name));
    for (const column of columns) {
      expect(column["dc:description"]).toMatch(/\w/);
      if (column["datatype"] !== "string") expect(column["schema:unitText"]).toMatch(/\w/);
    }
  }
});

test("node rows tell where they are", async () => {
  const { nodes } = await tableToCsv(inventedTable(1), "core");
  const rows = nodes.split("\r\n").map((line) => line.split(","));
  // The first block has levels 1 and 0: three densities by two temperatures; rho from 1e4 to 1e6, T from 1e6 by 10^(2/3).
  expect(rows.slice(1, 7).map((row) => row.slice(0, 7).join())).toEqual([
    "single,0,0,0,0,10000,1000000",
    "single,0,0,0,1,10000,4641588.834",
    "single,0,0,1,0,100000,1000000",
    "single,0,0,1,1,100000,4641588.834",
    "single,0,0,2,0,1000000,1000000",
    "single,0,0,2,1,1000000,4641588.834",
  ]);
});

describe("what is damaged is refused", () => {
  const edit = (file: keyof TableCsv, from: string | RegExp, to: string) => (texts: TableCsv) => {
    const changed = texts[file].replace(from, to);
    if (changed === texts[file]) throw new Error("nothing changed");
    return { ...texts, [file]: changed };
  };
  test.each([
    ["no JSON", edit("metadata", "{", "["), "texts.metadata"],
    ["another layout", edit("metadata", '"schema:value": 1\n', '"schema:value": 2\n'), "layout"],
    [
      "a property that lacks",
      edit("metadata", '"axes/density/blocks",\n', '"axes/density/boxes",\n'),
      "property axes/density/blocks",
    ],
    [
      "a text for a number",
      edit("metadata", '"schema:value": 10000', '"schema:value": "10000"'),
      "property axes/density/lowest",
    ],
    [
      "half a block",
      edit("metadata", '"schema:value": 3\n', '"schema:value": 3.5\n'),
      "property axes/temperature/blocks",
    ],
    ["a billion blocks", edit("metadata", '"schema:value": 3\n', '"schema:value": 1000000000\n'), "texts.blocks"],
    ["another mass number", edit("metadata", /\b16\b/, "17"), "composition/mass_number"],
    ["an infinite number", edit("metadata", '"schema:value": 10000', '"schema:value": 1e999'), /texts.metadata/],
    ["another head", edit("nodes", "L_uv", "L_vu"), "texts.nodes"],
    ["a digit", edit("nodes", /(\d)\r\n$/, "5$1\r\n"), "checksum of the content"],
    ["NaN", edit("nodes", /[^,]*\r\n$/, "NaN\r\n"), "texts.nodes"],
    ["INF", edit("nodes", /[^,]*\r\n$/, "INF\r\n"), "texts.nodes"],
    ["beyond all doubles", edit("nodes", /[^,]*\r\n$/, "1E999\r\n"), "texts.nodes"],
    ["a hexadecimal number", edit("nodes", /[^,]*\r\n$/, "0x10\r\n"), "texts.nodes"],
    ["a row less", edit("nodes", /[^\n]*\r\n$/, ""), "texts.nodes"],
    ["no end of the last line", edit("nodes", /\r\n$/, ""), "texts.nodes"],
    ["a row more", edit("nodes", /([^\n]*\r\n)$/, "$1$1"), "texts.nodes"],
    ["a field more", edit("nodes", /\r\n$/, ",1\r\n"), "texts.nodes"],
    ["another place", edit("nodes", "0,10000,1000000,", "0,10001,1000000,"), "texts.nodes"],
    ["another node", edit("nodes", "liquid,0,0,0,1,", "liquid,0,0,1,0,"), "texts.nodes"],
    ["a level of 9", edit("blocks", "liquid,0,0,1,0,3", "liquid,0,0,9,0,3"), "texts.blocks"],
    ["a level of -1 beside 0", edit("blocks", "liquid,0,0,1,0,3", "liquid,0,0,1,-1,3"), "texts.blocks"],
    ["a coarser block", edit("blocks", "liquid,0,0,1,0,3", "liquid,0,0,0,0,3"), "texts.nodes"],
    ["another exponent", edit("blocks", "liquid,0,0,1,0,3", "liquid,0,0,1,0,4"), "checksum of the content"],
    ["a block less", edit("blocks", /[^\n]*\r\n$/, ""), "texts.blocks"],
    ["a cold node less", edit("cold", /[^\n]*\r\n$/, ""), "checksum of the content"],
    ["nothing", (texts: TableCsv) => ({ ...texts, cold: "" }), "texts.cold"],
    ["deep JSON", (texts: TableCsv) => ({ ...texts, metadata: "[".repeat(900_000) }), "texts.metadata"],
    ["long JSON", (texts: TableCsv) => ({ ...texts, metadata: " ".repeat(1_000_001) }), "texts.metadata"],
  ])("%s", async (_, damage, argument) => {
    const texts = damage(await tableToCsv(inventedTable(2), "core"));
    await expect(tableFromCsv(texts)).rejects.toMatchObject({
      code: "invalid-file",
      argument: typeof argument === "string" ? argument : expect.stringMatching(argument),
    });
  });

  test("texts that are none, names that are none", async () => {
    await expect(tableFromCsv({} as never)).rejects.toMatchObject({
      code: "invalid-option",
      argument: "texts.metadata",
    });
    await expect(tableFromCsv(null as never)).rejects.toMatchObject({ code: "invalid-option" });
    for (const name of ["", "a/b", "a\\b", "a\nb", 1]) {
      await expect(tableToCsv(inventedTable(1), name as never)).rejects.toMatchObject({
        code: "invalid-option",
        argument: "name",
      });
    }
  });
});
