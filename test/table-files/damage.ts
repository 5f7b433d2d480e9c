/**
 * Damage to files, by accident (bits, cut ends, mixed-up parts) and by intent: sizes and addresses that claim too much,
 * under checksums made anew. The same damage every time.
 */
import { isDeepStrictEqual } from "node:util";
import { isFermistateError } from "../../src/errors.js";
import { lookup3 } from "../../src/table-files/lookup3.js";

/** Uniform numbers from 0 to 1: mulberry32, a published generator of 32 bits (from memory). */
export function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let x = Math.imul(state ^ (state >>> 15), 1 | state);
    x = (x + Math.imul(x ^ (x >>> 7), 61 | x)) ^ x;
    return ((x ^ (x >>> 14)) >>> 0) / 2 ** 32;
  };
}

export type Random = () => number;
export const below = (random: Random, limit: number): number => Math.floor(random() * limit);

/** Numbers that sizes and addresses like to be in hostile files. */
const hostile = [0n, 1n, 7n, 255n, 256n, 65535n, 2n ** 31n - 1n, 2n ** 32n - 1n, 2n ** 53n, 2n ** 63n, 2n ** 64n - 1n];

/** One change of bytes, in place, between `from` and `to`. */
export function scratch(bytes: Uint8Array, from: number, to: number, random: Random): void {
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
export function damaged(bytes: Uint8Array, other: Uint8Array, random: Random): Uint8Array {
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
export function forged(bytes: Uint8Array, random: Random): Uint8Array {
  const copy = bytes.slice();
  const places = checked(bytes);
  for (let i = below(random, 3); i >= 0; i--) {
    const [from, to] = places[below(random, places.length)]!;
    scratch(copy, from, to, random);
    new DataView(copy.buffer).setUint32(to, lookup3(copy.subarray(from, to)), true);
  }
  return copy;
}

/** Reads damaged files of two tables until `count`; how many were refused and how many came back whole. */
export async function torture(
  count: number,
  tables: readonly [unknown, unknown],
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
export async function growth(action: () => Promise<void>): Promise<number> {
  const before = process.memoryUsage().rss;
  let most = before;
  const watch = setInterval(() => {
    most = Math.max(most, process.memoryUsage().rss);
  }, 5);
  await action();
  clearInterval(watch);
  return Math.max(most, process.memoryUsage().rss) - before;
}
