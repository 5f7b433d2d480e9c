/**
 * Ten thousand damaged files: each is refused with `invalid-file`, or what comes back is what was written.
 *
 * Damage by accident (bits, cut ends, mixed-up parts) and by intent: sizes and addresses that claim too much, under
 * checksums made anew. The same damage every time.
 */
import { isDeepStrictEqual } from "node:util";
import { beforeAll, expect, test } from "vitest";
import { isFermistateError } from "../../src/errors.js";
import { type TableCsv, tableFromCsv, tableFromHdf5, tableToCsv, tableToHdf5 } from "../../src/table-files/index.js";
import { lookup3 } from "../../src/table-files/lookup3.js";
import { inventedTable } from "./table.js";

const tables = [inventedTable(1), inventedTable(2)] as const;
let hdf5: readonly Uint8Array[];
let csv: readonly TableCsv[];
beforeAll(async () => {
  hdf5 = await Promise.all(tables.map(tableToHdf5));
  csv = await Promise.all(tables.map((table) => tableToCsv(table, "core")));
});

/** Uniform numbers from 0 to 1: mulberry32, a published generator of 32 bits (from memory). */
function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let x = Math.imul(state ^ (state >>> 15), 1 | state);
    x = (x + Math.imul(x ^ (x >>> 7), 61 | x)) ^ x;
    return ((x ^ (x >>> 14)) >>> 0) / 2 ** 32;
  };
}

type Random = () => number;
const below = (random: Random, limit: number): number => Math.floor(random() * limit);

/** Numbers that sizes and addresses like to be in hostile files. */
const hostile = [0n, 1n, 7n, 255n, 256n, 65535n, 2n ** 31n - 1n, 2n ** 32n - 1n, 2n ** 53n, 2n ** 63n, 2n ** 64n - 1n];

/** One change of bytes, in place, between `from` and `to`. */
function scratch(bytes: Uint8Array, from: number, to: number, random: Random): void {
  const at = from + below(random, to - from);
  const kind = below(random, 4);
  if (kind === 0) bytes[at]! ^= 1 << below(random, 8);
  else if (kind === 1) bytes[at] = below(random, 256);
  else if (kind === 2) bytes.copyWithin(at, from + below(random, to - from), Math.min(to, at + below(random, 64)));
  else {
    const width = [1, 2, 4, 8][below(random, 4)]!;
    const value = hostile[below(random, hostile.length)]!;
    for (let i = 0; i < width && at + i < to; i++) bytes[at + i] = Number((value >> BigInt(8 * i)) & 255n);
  }
}

const joined = (...parts: Uint8Array[]): Uint8Array => Uint8Array.from(Buffer.concat(parts));

/** Bytes damaged by accident. */
function damaged(bytes: Uint8Array, other: Uint8Array, random: Random): Uint8Array {
  const kind = below(random, 10);
  if (kind === 0) return bytes.slice(0, below(random, bytes.length));
  if (kind === 1) return joined(bytes.subarray(0, below(random, 200)), other.subarray(below(random, 200)));
  if (kind === 2) return joined(bytes, other.subarray(0, 1 + below(random, 1000)));
  const copy = bytes.slice();
  for (let i = below(random, 4); i >= 0; i--) scratch(copy, 0, copy.length, random);
  return copy;
}

/** Where HDF5 keeps checksums: the superblock and the pieces of object headers, as [from, checksum at]. */
function checked(bytes: Uint8Array): readonly (readonly [number, number])[] {
  const view = new DataView(bytes.buffer, bytes.byteOffset);
  const found: [number, number][] = [[0, 44]];
  for (let at = 48; at < bytes.length - 12; at++) {
    if (view.getUint32(at, true) !== 0x5244484f) continue; // "OHDR"
    const flags = bytes[at + 5]!;
    const sizeAt = at + 6 + (flags & 0x20 ? 16 : 0);
    const wide = (flags & 3) === 1;
    found.push([at, sizeAt + (wide ? 2 + view.getUint16(sizeAt, true) : 1 + bytes[sizeAt]!)]);
  }
  return found;
}

/** Bytes whose headers lie under good checksums. */
function forged(bytes: Uint8Array, random: Random): Uint8Array {
  const copy = bytes.slice();
  const places = checked(bytes);
  for (let i = below(random, 3); i >= 0; i--) {
    const [from, to] = places[below(random, places.length)]!;
    scratch(copy, from, to, random);
    new DataView(copy.buffer).setUint32(to, lookup3(copy.subarray(from, to)), true);
  }
  return copy;
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

/** Reads damaged files until `count`; how many were refused and how many came back whole. */
async function torture(
  count: number,
  read: (which: 0 | 1) => Promise<unknown>,
): Promise<{ refused: number; whole: number }> {
  const result = { refused: 0, whole: 0 };
  for (let i = 0; i < count; i++) {
    const which = (i % 2) as 0 | 1;
    try {
      const table = await read(which);
      if (!isDeepStrictEqual(table, tables[which]) && !isDeepStrictEqual(table, tables[1 - which])) {
        throw new Error(`file ${i} came back as another table`);
      }
      result.whole++;
    } catch (error) {
      if (!isFermistateError(error) || error.code !== "invalid-file") throw new Error(`file ${i}`, { cause: error });
      result.refused++;
    }
  }
  return result;
}

/** Runs `action` and returns by how many bytes the process grew meanwhile, at most. */
async function growth(action: () => Promise<void>): Promise<number> {
  const before = process.memoryUsage().rss;
  let most = before;
  const watch = setInterval(() => {
    most = Math.max(most, process.memoryUsage().rss);
  }, 5);
  await action();
  clearInterval(watch);
  return Math.max(most, process.memoryUsage().rss) - before;
}

test.each([
  [
    "HDF5, by accident",
    4000,
    1,
    (random: Random) => (which: 0 | 1) => tableFromHdf5(damaged(hdf5[which]!, hdf5[1 - which]!, random)),
  ],
  ["HDF5, by intent", 3000, 2, (random: Random) => (which: 0 | 1) => tableFromHdf5(forged(hdf5[which]!, random))],
  [
    "CSV",
    3000,
    3,
    (random: Random) => (which: 0 | 1) => tableFromCsv(damagedTexts(csv[which]!, csv[1 - which]!, random)),
  ],
] as const)("%s: %i files", async (name, count, seed, reader) => {
  const read = reader(generator(seed));
  await torture(300, read); // what the first runs take for good is not a file's doing
  let result = { refused: 0, whole: 0 };
  const grown = await growth(async () => {
    result = await torture(count, read);
  });
  console.log(`${name}: ${result.refused} refused, ${result.whole} whole, grew by ${(grown / 1e6).toFixed(0)} MB`);
  expect(result.refused).toBeGreaterThan(count / 4);
  expect(result.whole).toBeGreaterThan(0);
  expect(grown).toBeLessThan(50e6 + 2 * hdf5[1]!.length);
});
