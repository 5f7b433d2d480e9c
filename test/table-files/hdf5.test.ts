/** Tables in HDF5: what is written comes back, by this library, by libhdf5 and by h5dump; what is not a table is refused. */
import { execFileSync, spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import * as h5wasm from "h5wasm";
import { afterAll, describe, expect, test } from "vitest";
import { electronPositronGas } from "../../src/fermi-gas/electron-positron-gas.js";
import { idealIons } from "../../src/ions/ideal-ions.js";
import { composition } from "../../src/matter/composition.js";
import { radiation } from "../../src/radiation.js";
import { tableChecksum, tableFromCsv, tableFromHdf5, tableToCsv, tableToHdf5 } from "../../src/table-files/index.js";
import { lookup3 } from "../../src/table-files/lookup3.js";
import { optionalPackage } from "../../src/table-files/optional.js";
import { buildTable, tableEquationOfState } from "../../src/tables/index.js";
import { combine } from "../../src/thermodynamics/combine.js";
import { type QuantityName, quantities } from "../../src/thermodynamics/quantities.js";
import { whiteDwarfMatter } from "../../src/white-dwarf-matter.js";
import { inventedTable } from "./table.js";

const folder = mkdtempSync(join(tmpdir(), "fermistate-hdf5-"));
afterAll(() => rmSync(folder, { recursive: true }));

const matters = {
  nuclides: composition({ H1: 0.2, He4: 0.7, Fe56: 0.1 }),
  "a mean nucleus": composition({ meanMassNumber: 14.1, meanCharge: 7.03 }),
  "normalised fractions": composition({ C12: 1, O16: 2 }, { normalise: true }),
};

describe.each([1, 2] as const)("a table of %i sheets", (sheets) => {
  test.each(Object.entries(matters))("of %s comes back bit for bit", async (_, matter) => {
    const table = inventedTable(sheets, matter);
    const bytes = await tableToHdf5(table);
    expect(await tableFromHdf5(bytes)).toEqual(table);
    expect(await tableChecksum(table)).toMatch(/^[0-9a-f]{64}$/);
  });

  test("also out of the middle of other memory", async () => {
    const table = inventedTable(sheets);
    const bytes = await tableToHdf5(table);
    const larger = Buffer.concat([Buffer.alloc(3), bytes, Buffer.alloc(5)]);
    expect(await tableFromHdf5(larger.subarray(3, 3 + bytes.length))).toEqual(table);
  });
});

test("the same table gives the same bytes, whatever the time", async () => {
  const first = await tableToHdf5(inventedTable(2));
  const before = Math.floor(Date.now() / 1000);
  while (Math.floor(Date.now() / 1000) === before) await new Promise((wait) => setTimeout(wait, 20)); // HDF5 counts seconds
  const second = await tableToHdf5(inventedTable(2));
  expect(Buffer.compare(first, second)).toBe(0);
  expect(Math.abs(Date.now() / 1000 - before)).toBeLessThan(10); // the clock goes on
});

test("a true table of two phases comes back, in HDF5 and in CSV, and gives the same states", async () => {
  const matter = composition({ C12: 0.5, O16: 0.5 });
  const region = { density: [1e6, 1e7], temperature: [2e6, 1e7], accuracy: 1e-4 } as const;
  const table = buildTable(whiteDwarfMatter(), matter, region);
  expect(table.sheets.map(({ phase }) => phase)).toEqual(["liquid", "crystal"]);
  const bytes = await tableToHdf5(table);
  const back = await tableFromHdf5(bytes);
  expect(back).toEqual(table);
  expect(await tableFromCsv(await tableToCsv(table, "core"))).toEqual(table);
  const pressure = (one: typeof table): number => tableEquationOfState(one).state(3e6, 5e6, matter).pressure;
  expect(pressure(back)).toBe(pressure(table));
});

test.each(["liquid", "crystal"] as const)("a table of the %s alone comes back", async (phase) => {
  const table = inventedTable(1);
  const one = { ...table, sheets: [{ ...table.sheets[0]!, phase }] };
  expect(await tableFromHdf5(await tableToHdf5(one))).toEqual(one);
  expect(await tableFromCsv(await tableToCsv(one, "core"))).toEqual(one);
});

test("an electron table comes back", async () => {
  const table = { ...inventedTable(1), holdsFor: "electron density" } as const;
  expect(await tableFromHdf5(await tableToHdf5(table))).toEqual(table);
});

test("lookup3 is that of libhdf5: superblock of a file of its own", async () => {
  const bytes = await tableToHdf5(inventedTable(1));
  expect(lookup3(bytes.subarray(0, 44))).toBe(new DataView(bytes.buffer, bytes.byteOffset).getUint32(44, true));
  expect(lookup3(new Uint8Array(0))).toBe(0xdeadbeef); // from memory: the value that its author's self-test prints
});

test("libhdf5 reads the same numbers, units and meanings", async () => {
  const table = inventedTable(2);
  const { FS } = await h5wasm.ready;
  FS.writeFile("/again.h5", await tableToHdf5(table));
  const file = new h5wasm.File("/again.h5", "r");
  const dataset = (path: string) => file.get(path) as h5wasm.Dataset;
  expect(dataset("sheets/crystal/nodes").value).toEqual(table.sheets[1]!.nodes);
  expect(dataset("sheets/crystal/nodes").shape).toEqual([table.sheets[1]!.nodes.length / 9, 3, 3]);
  expect(dataset("sheets/liquid/exponent").value).toEqual(table.sheets[0]!.exponents);
  expect(dataset("cold/nodes").value).toEqual(table.cold.nodes);
  expect(dataset("cold/nodes").attrs["units"]!.value).toBe("erg/g");
  expect(dataset("composition/label").value).toEqual(["C12", "O16"]);
  expect(dataset("source/validity").value).toEqual(table.source.validity);
  expect(dataset("format/checksum").value).toBe(await tableChecksum(table));
  for (const path of file.paths()) {
    const found = file.get(path);
    if (found instanceof h5wasm.Dataset) expect(found.attrs["description"]?.value, path).toMatch(/\w/);
  }
  expect(file.attrs["reading"]!.value).toContainEqual(expect.stringContaining("F_0(rho) - 2^k exp L"));
  file.close();
});

const has = (command: string, ...options: string[]): boolean => spawnSync(command, options).status === 0;

describe("other programs", () => {
  const path = join(folder, "core.h5");
  const isRequired = process.env["CI"] === "true";

  const noDump = !isRequired && !has("h5dump", "--version");
  if (noDump) console.warn("h5dump (Debian: hdf5-tools) is missing: its test is skipped");
  test.skipIf(noDump)("h5dump prints the numbers written", async () => {
    const table = inventedTable(2);
    writeFileSync(path, await tableToHdf5(table));
    const text = execFileSync("h5dump", ["-m", "%.17g", "-y", "-w", "0", "-d", "/sheets/liquid/nodes", path], {
      encoding: "utf8",
    });
    const numbers = /DATA \{([^}]*)\}/
      .exec(text)![1]!
      .split(/[\s,]+/)
      .filter((word) => word !== "");
    expect(Float64Array.from(numbers, Number)).toEqual(table.sheets[0]!.nodes);
  });

  const python = ["/usr/bin/python3", "python3"].find((command) => has(command, "-c", "import h5py, numpy"));
  const noPython = !isRequired && python === undefined;
  if (noPython) console.warn("python3 with h5py (Debian: python3-h5py) is missing: its test is skipped");
  test.skipIf(noPython)("docs/read_table.py finds the checksum good and the same states", async () => {
    const table = inventedTable(2);
    writeFileSync(path, await tableToHdf5(table));
    const run = (...given: string[]): string =>
      execFileSync(python ?? "python3", ["docs/read_table.py", path, ...given], { encoding: "utf8" });
    expect(run()).toContain("composition: C12 0.3, O16 0.7\nsheets: liquid, crystal\nbeside the table: radiation\n");

    const eos = tableEquationOfState(table); // with radiation
    for (const [density, temperature, phase] of [
      [3.3e6, 6.6e7, "liquid"],
      [1e4, 1e6, "crystal"],
      [1e4, 1e8, "liquid"], // radiation is 1e-3 of the pressure
      [1.7e7, 1.1e7, "crystal"],
      [9e7, 2e6, "liquid"],
      [1e8, 1e8, "liquid"],
    ] as const) {
      const printed = run(String(density), String(temperature));
      expect(printed).toContain(`phase: ${phase}\n`);
      expect(printed).not.toContain("without");
      const state = eos.state(density, temperature, table.composition);
      const read = [...printed.matchAll(/^(\w+): (\S+) (.+)$/gm)];
      expect(read).toHaveLength(7);
      for (const [, name, value, unit] of read) {
        expect(unit).toBe(quantities[name as QuantityName].unit);
        // Measured: 2e-15 of the larger terms; the rest is rounding of exp and of the monomials in the script.
        const error = Math.abs(Number(value) / state[name as QuantityName]! - 1);
        expect(error, `${name} at ${density}, ${temperature}`).toBeLessThan(2e-14);
      }
    }
    const damaged = await tableToHdf5(table);
    damaged[damaged.length - 100]! ^= 1;
    writeFileSync(path, damaged);
    expect(spawnSync(python ?? "python3", ["docs/read_table.py", path])).toMatchObject({ status: 1 });
  });

  test.skipIf(noPython)("docs/read_table.py adds what stands beside a table, and says what it cannot add", async () => {
    const matter = composition({ He4: 0.3, C12: 0.7 });
    const physics = combine(electronPositronGas(), idealIons(), radiation());
    const table = buildTable(physics, matter, { density: [1e4, 1e6], temperature: [1e8, 1e9], accuracy: 1e-4 });
    const strange = { ...table, source: { ...table.source, beside: [...table.source.beside, "axions"] } };
    const run = (...given: string[]) =>
      spawnSync(python ?? "python3", ["docs/read_table.py", path, ...given], { encoding: "utf8" });
    writeFileSync(path, await tableToHdf5(table));
    const exact = tableEquationOfState(table).state(1.1e5, 9e8, matter);
    const { stdout } = run("1.1e5", "9e8");
    for (const name of ["pressure", "specificEnergy", "heatCapacityV", "pressureByDensity", "pressureByTemperature"]) {
      const value = Number(new RegExp(`^${name}: (\\S+) [^\\n(]*(\\(g K\\)|\\(cm\\^2 K\\)|)$`, "m").exec(stdout)?.[1]);
      expect(Math.abs(value / exact[name as "pressure"] - 1), name).toBeLessThan(2e-14);
    }
    for (const name of ["specificEntropy", "specificFreeEnergy"]) {
      expect(stdout).toMatch(new RegExp(`^${name}: .* \\(without ideal ions\\)$`, "m"));
    }
    writeFileSync(path, await tableToHdf5(strange));
    const other = run("1.1e5", "9e8").stdout;
    expect(other).toMatch(/^pressure: \S+ dyn\/cm\^2 \(without axions\)$/m);
    expect(other).toMatch(/^specificEntropy: .* \(without ideal ions, axions\)$/m);
    for (const [given, message] of [
      [["1", "9e8"], "density: given 1.0; allowed: 10000.0 to 1000000.0 g/cm^3"],
      [["1e5", "nan"], "temperature: given nan; allowed: 100000000.0 to 1000000000.0 K"],
      [["abc", "9e8"], "density, temperature: given abc 9e8; allowed: two numbers"],
    ] as const) {
      expect(run(...given)).toMatchObject({ status: 1, stdout: "", stderr: `${path}: ${message}\n` });
    }
  });
});

describe("what is not a table is refused", () => {
  const good = inventedTable(2);
  const [liquid, crystal] = good.sheets as [(typeof good.sheets)[0], (typeof good.sheets)[0]];
  test.each([
    ["nothing", null, "table"],
    ["another layout", { ...good, layout: 2 }, "table.layout"],
    ["no composition", { ...good, composition: { ...good.composition } }, "table.composition"],
    ["axis that falls", { ...good, density: { lowest: 2, highest: 1, blocks: 2 } }, "table.density.highest"],
    ["an infinite axis", { ...good, density: { ...good.density, highest: Infinity } }, "table.density.highest"],
    ["half a block", { ...good, density: { ...good.density, blocks: 1.5 } }, "table.density.blocks"],
    ["one sheet of two", { ...good, sheets: [liquid] }, "table.freezing"],
    ["sheets in another order", { ...good, sheets: [crystal, liquid] }, "table.sheets"],
    ["no freezing line", { ...good, freezing: undefined }, "table.freezing"],
    [
      "short levels",
      { ...good, sheets: [{ ...liquid, densityLevels: new Int8Array(3) }, crystal] },
      "table.sheets.liquid.densityLevels",
    ],
    [
      "a level of 9",
      { ...good, sheets: [{ ...liquid, densityLevels: new Int8Array(6).fill(9) }, crystal] },
      "table.sheets.liquid.densityLevels[0]",
    ],
    [
      "a level of -1",
      { ...good, sheets: [{ ...liquid, temperatureLevels: new Int8Array(6).fill(-1) }, crystal] },
      "table.sheets.liquid.temperatureLevels[0]",
    ],
    [
      "a huge exponent",
      { ...good, sheets: [{ ...liquid, exponents: new Int16Array(6).fill(2000) }, crystal] },
      "table.sheets.liquid.exponents[0]",
    ],
    [
      "nodes that lack",
      { ...good, sheets: [{ ...liquid, nodes: liquid.nodes.slice(9) }, crystal] },
      "table.sheets.liquid.nodes",
    ],
    [
      "NaN in a node",
      { ...good, sheets: [{ ...liquid, nodes: liquid.nodes.map((x, i) => (i === 7 ? NaN : x)) }, crystal] },
      "table.sheets.liquid.nodes[7]",
    ],
    ["one cold node", { ...good, cold: { temperature: 0, nodes: new Float64Array(3) } }, "table.cold.nodes"],
    [
      "NaN in the cold curve",
      { ...good, cold: { temperature: 0, nodes: new Float64Array(6).fill(NaN) } },
      "table.cold.nodes[0]",
    ],
    ["an array of another kind", { ...good, cold: { temperature: 0, nodes: [1, 2, 3, 4, 5, 6] } }, "table.cold.nodes"],
    ["two lines of text", { ...good, source: { ...good.source, validity: ["a\nb"] } }, "table.source.validity.0"],
    ["a certificate of -0", { ...good, certificate: { ...good.certificate, target: -0 } }, "table.certificate.target"],
    ["a lost surrogate", { ...good, source: { ...good.source, version: "\ud800" } }, "table.source.version"],
  ])("%s", async (_, table, argument) => {
    await expect(tableToHdf5(table as never)).rejects.toMatchObject({ code: "invalid-option", argument });
  });

  test.each([["text"], [undefined], [[1, 2, 3]], [new ArrayBuffer(100)]])("bytes that are %s", async (bytes) => {
    await expect(tableFromHdf5(bytes as never)).rejects.toMatchObject({ code: "invalid-option", argument: "bytes" });
  });

  test("a missing package tells how to install it", async () => {
    const load = () => Promise.reject(new Error("Cannot find package 'h5wasm'"));
    await expect(optionalPackage("h5wasm", "HDF5", load)).rejects.toMatchObject({
      code: "invalid-option",
      allowed: expect.stringContaining("npm install h5wasm"),
    });
  });
});

describe("files that lie, with good checksums of HDF5's own", () => {
  /** A good file, changed by libhdf5 itself or byte by byte with checksums made anew. */
  async function changed(change: (file: h5wasm.File) => void): Promise<Uint8Array> {
    const { FS } = await h5wasm.ready;
    FS.writeFile("/lie.h5", await tableToHdf5(inventedTable(2)));
    const file = new h5wasm.File("/lie.h5", "a");
    change(file);
    file.close();
    return FS.readFile("/lie.h5") as Uint8Array;
  }
  const write = (path: string, data: Float64Array | Int32Array | Int8Array) => (file: h5wasm.File) => {
    const bytes = new Uint8Array(data.buffer);
    const at = h5wasm.Module._malloc(bytes.length);
    h5wasm.Module.HEAPU8.set(bytes, at);
    h5wasm.Module.set_dataset_data(file.file_id, path, null, null, null, BigInt(at));
    h5wasm.Module._free(at);
  };

  test.each([
    [
      "a number changed",
      write(
        "cold/nodes",
        inventedTable(2).cold.nodes.map((x) => x * 1.0000001),
      ),
      "checksum of the content",
    ],
    ["NaN", write("cold/nodes", new Float64Array(27).fill(NaN)), "table.cold.nodes[0]"],
    ["another layout", write("format/layout", Int32Array.of(2)), "layout"],
    ["fractions of no sum", write("composition/nucleon_fraction", Float64Array.of(0.3, 0.3)), "sum of fractions"],
    ["an axis that falls", write("axes/density/lowest", Float64Array.of(1e9)), "table.density.highest"],
    ["negative blocks", write("axes/density/blocks", Int32Array.of(-2)), "bytes"],
    [
      "a mass number that is not the nuclide's",
      write("composition/mass_number", Float64Array.of(13, 16)),
      "composition/mass_number",
    ],
    [
      "a level of 100",
      write("sheets/liquid/density_level", new Int8Array(6).fill(100)),
      "table.sheets.liquid.densityLevels[0]",
    ],
  ])("%s", async (_, change, argument) => {
    await expect(tableFromHdf5(await changed(change))).rejects.toMatchObject({ code: "invalid-file", argument });
  });

  test("a file cut or continued tells how long it should be", async () => {
    const bytes = await tableToHdf5(inventedTable(2));
    const allowed = `the ${bytes.length} bytes that its superblock states`;
    const longer = Uint8Array.from([...bytes, 0]);
    for (const other of [bytes.subarray(0, -1), bytes.subarray(0, 1000), longer]) {
      const given = `${other.length} bytes`;
      await expect(tableFromHdf5(other)).rejects.toMatchObject({ code: "invalid-file", given, allowed });
    }
    await expect(tableFromHdf5(bytes.subarray(0, 40))).rejects.toMatchObject({
      given: "no HDF5 signature at its start",
    });
  });

  test.each([
    ["of a size that its bytes do not have", 2n ** 40n, undefined, /nodes of \d+ bytes/],
    ["of a size and as many bytes, beyond the file", 2n ** 40n, 72n * 2n ** 40n, /nodes of 79164837199872 bytes/],
    ["beyond all numbers", 2n ** 64n - 1n, 2n ** 64n - 1n, /nodes of \d/],
  ])("nodes %s", async (_, size, stored, given) => {
    const bytes = await tableToHdf5(inventedTable(1));
    const view = new DataView(bytes.buffer, bytes.byteOffset);
    const nodes = inventedTable(1).sheets[0]!.nodes.length / 9;
    // The dataspace message: version 2, rank 3, with largest sizes, simple; then the sizes. It is the header's first, 28 bytes in.
    const at = Buffer.from(bytes).indexOf(Uint8Array.of(2, 3, 1, 1, nodes, 0, 0, 0, 0, 0, 0, 0, 3));
    view.setBigUint64(at + 4, size, true);
    const layout = Buffer.from(bytes).indexOf(Uint8Array.of(8, 18, 0, 0, 3, 1), at); // type, length, flags; version 3, contiguous
    if (stored !== undefined) view.setBigUint64(layout + 14, stored, true);
    const head = Buffer.from(bytes).lastIndexOf("OHDR", at);
    const end = head + 24 + view.getUint16(head + 22, true);
    view.setUint32(end, lookup3(bytes.subarray(head, end)), true);
    await expect(tableFromHdf5(bytes)).rejects.toMatchObject({
      code: "invalid-file",
      given: expect.stringMatching(given),
    });
  });

  test("a file of another program", async () => {
    const { FS } = await h5wasm.ready;
    const file = new h5wasm.File("/other.h5", "w");
    file.create_dataset({ name: "nodes", data: new Float64Array(9), shape: [3, 3], chunks: [1, 3], compression: 9 });
    file.close();
    await expect(tableFromHdf5(FS.readFile("/other.h5") as Uint8Array)).rejects.toMatchObject({ code: "invalid-file" });
  });
});
