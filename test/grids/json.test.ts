/** JSON: read back by the engine's own reader (ECMA-404) to the same bits, infinities as the file says. */
import { combine, composition, electronPositronGas, quantityNames, regime, whiteDwarfMatter } from "fermistate";
import { type Grid, grid, gridToJson, gridToJsonPieces, logarithmicAxis } from "fermistate/grids";
import { expect, test } from "vitest";
import about from "../../package.json" with { type: "json" };
import { joined } from "../../src/grids/chunks.js";
import { libraryVersion } from "../../src/version.js";

const core = composition({ C12: 0.5, O16: 0.48, Ne22: 0.02 });
const hot = grid(whiteDwarfMatter({ coulomb: false }), core, {
  density: logarithmicAxis({ from: 1e-6, to: 1e12, points: 100 }),
  temperature: logarithmicAxis({ from: 1e5, to: 1e10, points: 31 }),
  quantities: quantityNames,
});
const cold = grid(combine(electronPositronGas()), core, {
  density: [1e4, 1e6],
  temperature: [0, 1e6],
  quantities: quantityNames,
});

/** The columns of the text as numbers, by the rules that it states. */
function read(text: string): { document: Record<string, unknown>; columns: Record<string, number[]> } {
  const document = JSON.parse(text);
  const number = (value: number | string): number => {
    return typeof value === "number" ? value : value === "INF" ? Infinity : value === "-INF" ? -Infinity : Number.NaN;
  };
  const columns = Object.entries(document.columns as Record<string, { values: (number | string)[] }>);
  return { document, columns: Object.fromEntries(columns.map(([name, { values }]) => [name, values.map(number)])) };
}

function expectSameBits(made: Grid): void {
  const { document, columns } = read(gridToJson(made));
  expect(Object.keys(columns)).toEqual(made.columnNames);
  for (const name of made.columnNames) {
    const differs = columns[name]!.findIndex((value, i) => !Object.is(value, made.columns[name]![i]));
    expect(differs, name).toBe(-1);
    expect(columns[name]).toHaveLength(made.rows);
    expect(document["columns"]).toHaveProperty(`${name}.unit`, made.units[name]);
  }
  expect(document["shape"]).toEqual(made.shape);
  expect(document["order"]).toEqual(["temperature", "density"]);
}

test("the columns read back to the same bits", () => {
  expectSameBits(hot);
  expectSameBits(cold);
  expect(gridToJson(cold)).toContain('"INF"');
});

test("it describes itself", () => {
  const { document } = read(gridToJson(hot, { title: "Core", note: "invented" }));
  expect(document).toMatchObject({ title: "Core", note: "invented", creator: `fermistate ${libraryVersion}` });
  expect(document["composition"]).toMatchObject({ name: core.name, electronsPerNucleon: core.electronsPerNucleon });
  expect(JSON.stringify(document["conventions"])).toContain("baryon mass density");
  expect(JSON.stringify(document["validity"])).toContain("no Coulomb interactions");
  expect(document["infinities"]).toContain("INF");
});

test("findings: columns to the same bits, and the list", () => {
  const density = logarithmicAxis({ from: 1e4, to: 1e11, points: 20 });
  const judged = grid(whiteDwarfMatter(), core, { density, temperature: [1e7, 1e9], findings: regime });
  expectSameBits(judged);
  expect(judged.findings?.length).toBeGreaterThan(0);
  expect(read(gridToJson(judged)).document["findings"]).toEqual(judged.findings);
  expect(read(gridToJson(hot)).document).not.toHaveProperty("findings");
});

test("pieces are the text, and small", () => {
  const pieces = [...gridToJsonPieces(hot)];
  expect(pieces.join("")).toBe(gridToJson(hot));
  expect(pieces.length).toBeGreaterThan(10);
  expect(Math.max(...pieces.map((piece) => piece.length))).toBeLessThan(120_000);
});

test("a text beyond the engine's longest string is refused by name", () => {
  const piece = "x".repeat(2 ** 28);
  expect(() => joined([piece, piece], "gridToJsonPieces")).toThrow(/use gridToJsonPieces/);
});

test("the version is the package's", () => expect(libraryVersion).toBe(about.version));
