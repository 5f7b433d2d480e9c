/**
 * Damaged files by the thousand: each is refused with `invalid-file`, or what comes back is what was written
 * (damage.ts).
 */
import { beforeAll, expect, test } from "vitest";
import { fromZip, toZip } from "../../src/grids/zip.js";
import {
  speciesTableFromHdf5,
  speciesTableFromNpz,
  speciesTableToHdf5,
  speciesTableToNpz,
  type TableCsv,
  tableFromCsv,
  tableFromHdf5,
  tableToCsv,
  tableToHdf5,
} from "../../src/table-files/index.js";
import { buildSpeciesTable } from "../../src/tables/index.js";
import { below, damaged, forged, generator, growth, type Random, scratch, torture } from "./damage.js";
import { inventedTable } from "./table.js";

const tables = [inventedTable(1), inventedTable(2)] as const;
const electrons = [
  buildSpeciesTable({ coarseness: 4, temperature: [1e6, 1e8] }),
  buildSpeciesTable({ coarseness: 4, temperature: [1e7, 1e10] }),
] as const;
let hdf5: readonly Uint8Array[];
let csv: readonly TableCsv[];
let electronHdf5: readonly Uint8Array[];
let electronNpz: readonly Uint8Array[];
beforeAll(async () => {
  hdf5 = await Promise.all(tables.map(tableToHdf5));
  csv = await Promise.all(tables.map((table) => tableToCsv(table, "core")));
  electronHdf5 = await Promise.all(electrons.map(speciesTableToHdf5));
  electronNpz = await Promise.all(electrons.map(speciesTableToNpz));
});

/** An archive whose members are damaged under good check sums of the archive's own. */
function forgedArchive(bytes: Uint8Array, random: Random): Uint8Array {
  const members = fromZip(bytes).map(({ name, bytes: content }) => ({ name, bytes: content.slice() }));
  for (let i = below(random, 3); i >= 0; i--) {
    const { bytes: content } = members[below(random, members.length)]!;
    scratch(content, 0, below(random, 2) === 0 ? Math.min(128, content.length) : content.length, random);
  }
  if (below(random, 5) === 0) members.splice(below(random, members.length), 1);
  return toZip(members);
}

const encoder = new TextEncoder();
const decoder = new TextDecoder();

/** Texts of which one is damaged: bytes, numbers, lines. */
function damagedTexts(texts: TableCsv, other: TableCsv, random: Random): TableCsv {
  const file = (["metadata", "nodes", "blocks", "cold"] as const)[below(random, 4)]!;
  const text = texts[file];
  const kind = below(random, 5);
  if (kind === 0) return { ...texts, [file]: other[file] };
  if (kind === 1) {
    const lines = text.split("\n");
    lines.splice(below(random, lines.length), below(random, 3), ...lines.slice(0, below(random, 2)));
    return { ...texts, [file]: lines.join("\n") };
  }
  if (kind === 2) {
    const numbers = [
      "0",
      "-1",
      "1e9",
      "2147483647",
      "4294967296",
      "1E400",
      "NaN",
      "INF",
      "1e-320",
      "[]",
      "{}",
      "null",
      '"x"',
    ];
    const count = (text.match(/\d+/g) ?? []).length;
    let which = below(random, count);
    return {
      ...texts,
      [file]: text.replace(/\d+/g, (own) => (which-- === 0 ? numbers[below(random, numbers.length)]! : own)),
    };
  }
  return { ...texts, [file]: decoder.decode(damaged(encoder.encode(text), encoder.encode(other[file]), random)) };
}

test.each([
  [
    "HDF5, by accident",
    tables,
    4000,
    1,
    (random: Random) => (which: 0 | 1) => tableFromHdf5(damaged(hdf5[which]!, hdf5[1 - which]!, random)),
  ],
  [
    "HDF5, by intent",
    tables,
    3000,
    2,
    (random: Random) => (which: 0 | 1) => tableFromHdf5(forged(hdf5[which]!, random)),
  ],
  [
    "CSV",
    tables,
    3000,
    3,
    (random: Random) => (which: 0 | 1) => tableFromCsv(damagedTexts(csv[which]!, csv[1 - which]!, random)),
  ],
  [
    "electrons, HDF5, by accident",
    electrons,
    1000,
    4,
    (random: Random) => (which: 0 | 1) =>
      speciesTableFromHdf5(damaged(electronHdf5[which]!, electronHdf5[1 - which]!, random)),
  ],
  [
    "electrons, HDF5, by intent",
    electrons,
    1000,
    5,
    (random: Random) => (which: 0 | 1) => speciesTableFromHdf5(forged(electronHdf5[which]!, random)),
  ],
  [
    "electrons, .npz, by accident",
    electrons,
    1000,
    6,
    (random: Random) => (which: 0 | 1) =>
      speciesTableFromNpz(damaged(electronNpz[which]!, electronNpz[1 - which]!, random)),
  ],
  [
    "electrons, .npz, by intent",
    electrons,
    1000,
    7,
    (random: Random) => (which: 0 | 1) => speciesTableFromNpz(forgedArchive(electronNpz[which]!, random)),
  ],
] as const)("%s", async (name, pair, count, seed, reader) => {
  const read = reader(generator(seed));
  await torture(300, pair, read); // what the first runs take for good is not a file's doing
  let result = { refused: 0, whole: 0 };
  const grown = await growth(async () => {
    result = await torture(count, pair, read);
  });
  console.log(`${name}: ${result.refused} refused, ${result.whole} whole, grew by ${(grown / 1e6).toFixed(0)} MB`);
  expect(result.refused).toBeGreaterThan(count / 4);
  expect(result.whole).toBeGreaterThan(0);
  expect(grown).toBeLessThan(50e6 + 2 * hdf5[1]!.length);
});
