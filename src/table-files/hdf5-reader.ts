/**
 * Reads the part of HDF5 that `hdf5-items.ts` makes h5wasm write (HDF5 File Format Specification 3.0): superblock of version
 * 2 or 3, object headers of version 2 with their links inside, contiguous datasets of numbers and of texts of fixed length.
 *
 * Not by h5wasm, although that could: a file of 28 kB whose headers claim what is not there, with good checksums, made
 * libhdf5 2.0 take 2 GB. Here every place is checked to lie inside the file, every loop to end, and all values together to
 * be no more than the file. It also spares readers the package.
 */
import { invalidFile } from "./invalid.js";
import type { Arrays, Kind, ReadItem } from "./item.js";
import { lookup3 } from "./lookup3.js";
import { textOfUtf8 } from "./platform.js";

const argument = "bytes";
const form = "an HDF5 file as fermistate writes it";

const signature = [0x89, 0x48, 0x44, 0x46, 0x0d, 0x0a, 0x1a, 0x0a] as const;

/** Types of header messages (specification, IV.A.2). */
const message = { dataspace: 1, datatype: 3, link: 6, external: 7, layout: 8, filters: 11, continuation: 16 } as const;

/** The datatype messages of the kinds of numbers, byte for byte; of a text the first four, before its length. */
const datatypes: Readonly<Record<Kind, readonly number[]>> = {
  float64: [0x11, 0x20, 0x3f, 0, 8, 0, 0, 0, 0, 0, 0x40, 0, 0x34, 0x0b, 0, 0x34, 0xff, 3, 0, 0],
  int32: [0x10, 8, 0, 0, 4, 0, 0, 0, 0, 0, 0x20, 0],
  int16: [0x10, 8, 0, 0, 2, 0, 0, 0, 0, 0, 0x10, 0],
  int8: [0x10, 8, 0, 0, 1, 0, 0, 0, 0, 0, 8, 0],
  text: [0x13, 0x12, 0, 0],
};

const arrays = { float64: Float64Array, int32: Int32Array, int16: Int16Array, int8: Int8Array } as const;

/** Pieces and messages of one object header: in true files three and a dozen. */
const mostPieces = 32;
const mostMessages = 200;
/** Texts of one item. */
const mostTexts = 1000;

/** The messages of an object header by type. */
type Header = ReadonlyMap<number, readonly Uint8Array[]>;

/**
 * Hands out the datasets of a file by path.
 *
 * @throws FermistateError `invalid-file`, here and from the function returned
 */
export function hdf5Reader(given: Uint8Array): ReadItem {
  const view = viewOf(given);
  const bytes = new Uint8Array(given.buffer, given.byteOffset, given.byteLength); // slices of a Node Buffer are no copies

  const root = superblock(bytes, view);
  const headers = new Map<number, Header>();
  let left = bytes.length;

  const headerAt = (address: number): Header => {
    const known = headers.get(address) ?? readHeader(bytes, view, address);
    headers.set(address, known);
    return known;
  };

  return <K extends Kind>(name: string, kind: K, shape: readonly (number | undefined)[]): Arrays[K] => {
    let header = headerAt(root);
    for (const part of name.split("/")) {
      const address = links(header).get(part);
      if (address === undefined) throw invalidFile(argument, `no ${name}`, form);
      header = headerAt(address);
    }
    const { offset, sizes, width, length } = dataset(header, name, kind);
    if (sizes.length !== shape.length || shape.some((size, i) => size !== undefined && size !== sizes[i])) {
      const expected = shape.map((size) => size ?? "any").join(" x ");
      throw invalidFile(argument, `${name} of shape ${sizes.join(" x ")}`, `shape ${expected || "of one value"}`);
    }
    left -= length;
    if (left < 0 || offset + length > bytes.length) {
      throw invalidFile(argument, `${name} of ${length} bytes`, "no more than the file holds");
    }
    const part = bytes.slice(offset, offset + length);
    if (kind === "text") return textsOf(part, width, name) as unknown as Arrays[K];
    return new arrays[kind as Exclude<Kind, "text">](part.buffer) as unknown as Arrays[K];
  };
}

/** Checks the superblock; returns the address of the root group. */
function superblock(bytes: Uint8Array, view: DataView): number {
  if (bytes.length < 48 || signature.some((byte, i) => bytes[i] !== byte)) {
    throw invalidFile(argument, "no HDF5 signature at its start", form);
  }
  if (bytes[8] !== 2 && bytes[8] !== 3) throw invalidFile(argument, `superblock of version ${bytes[8]}`, form);
  if (lookup3(bytes.subarray(0, 44)) !== view.getUint32(44, true)) throw damaged("superblock");
  const [lengthOfOffsets, lengthOfLengths] = [bytes[9], bytes[10]];
  if (lengthOfOffsets !== 8 || lengthOfLengths !== 8 || address(view, 12) !== 0) {
    throw invalidFile(argument, "a superblock with other sizes or a user block", form);
  }
  const end = address(view, 28);
  if (end !== bytes.length) {
    throw invalidFile(argument, `${bytes.length} bytes`, `the ${end} bytes that its superblock states`);
  }
  return address(view, 36);
}

/** The messages of the object header at an address, continuations included. */
function readHeader(bytes: Uint8Array, view: DataView, start: number): Header {
  const found = new Map<number, Uint8Array[]>();
  let messages = 0;
  within(bytes, start, 24);
  if (view.getUint32(start, true) !== 0x5244484f || bytes[start + 4] !== 2) throw damaged("object header"); // "OHDR"
  const flags = bytes[start + 5]!;
  const fixed = start + 6 + (flags & 0x20 ? 16 : 0) + (flags & 0x10 ? 4 : 0);
  const sizeBytes = 1 << (flags & 3);
  within(bytes, fixed, sizeBytes);
  const first = fixed + sizeBytes;
  const pieces = [{ head: start, from: first, to: first + unsigned(view, fixed, sizeBytes) }];
  for (const { head, from, to } of pieces) {
    within(bytes, from, to + 4 - from);
    if (lookup3(bytes.subarray(head, to)) !== view.getUint32(to, true)) throw damaged("object header");
    const headLength = 4 + (flags & 4 ? 2 : 0);
    for (let at = from; at + headLength <= to; ) {
      const type = bytes[at]!;
      const body = at + headLength;
      const length = view.getUint16(at + 1, true);
      const isShared = (bytes[at + 3]! & 2) !== 0; // kept elsewhere
      if (body + length > to || isShared || ++messages > mostMessages) throw damaged("object header");
      at = body + length;
      if (type !== message.continuation) {
        const same = found.get(type);
        if (same === undefined) found.set(type, [bytes.subarray(body, at)]);
        else same.push(bytes.subarray(body, at));
        continue;
      }
      if (length !== 16 || pieces.length === mostPieces) throw damaged("object header");
      const place = address(view, body);
      const size = address(view, body + 8);
      within(bytes, place, size);
      if (size < 8 || view.getUint32(place, true) !== 0x4b48434f) throw damaged("object header"); // "OCHK"
      pieces.push({ head: place, from: place + 4, to: place + size - 4 });
    }
  }
  return found;
}

/** The hard links of a group: names and addresses (specification, IV.A.2.g). */
function links(header: Header): ReadonlyMap<string, number> {
  const found = new Map<string, number>();
  for (const body of header.get(message.link) ?? []) {
    const view = viewOf(body);
    // Version 1; the name's length in one byte; nothing optional but the character set, which is ASCII or UTF-8.
    const flags = body[1] ?? 0xff;
    const at = flags === 0x10 ? 3 : 2;
    const length = body[at] ?? 0;
    if (body[0] !== 1 || (flags !== 0 && flags !== 0x10) || body.length !== at + 1 + length + 8) throw damaged("link");
    found.set(decoded(body.subarray(at + 1, at + 1 + length), "link"), address(view, at + 1 + length));
  }
  return found;
}

/** Where the values of a dataset are. */
interface Dataset {
  readonly offset: number;
  readonly sizes: readonly number[];
  /** Bytes of one value. */
  readonly width: number;
  /** Bytes of all. */
  readonly length: number;
}

function dataset(header: Header, name: string, kind: Kind): Dataset {
  const only = (type: number): Uint8Array => {
    const [body, another] = header.get(type) ?? [];
    if (body === undefined || another !== undefined) throw invalidFile(argument, `no dataset ${name}`, form);
    return body;
  };
  const space = only(message.dataspace);
  const type = only(message.datatype);
  const layout = only(message.layout);
  if (header.has(message.filters) || header.has(message.external) || (layout[0] !== 3 && layout[0] !== 4)) {
    throw invalidFile(argument, `${name} compressed or in another file`, `${form}: contiguous, as it is`);
  }
  if (layout[1] !== 1 || layout.length < 18) throw invalidFile(argument, `${name} in chunks`, `${form}: contiguous`);

  const template = datatypes[kind];
  if (template.some((byte, i) => type[i] !== byte) || (kind === "text" && type.length < 8)) {
    throw invalidFile(argument, `${name} of another type`, `values of type ${kind}`);
  }
  const width = viewOf(type).getUint32(4, true);
  const sizes = dataspace(space, name);
  const count = sizes.reduce((product, size) => product * size, 1);
  const length = count * width;
  const place = viewOf(layout);
  const stored = address(place, 10);
  if (length !== stored)
    throw invalidFile(argument, `${name} of ${stored} bytes`, `${length} bytes, as its shape has it`);
  if (kind === "text" && (count > mostTexts || width === 0)) {
    throw invalidFile(argument, `${name} of ${count} texts`, `at most ${mostTexts}, of one byte or more`);
  }
  return { offset: length === 0 ? 0 : address(place, 2), sizes, width, length };
}

/** The sizes of a dataspace of version 2: scalar (type 0) or simple (type 1). */
function dataspace(body: Uint8Array, name: string): number[] {
  const rank = body[1] ?? 255;
  const type = body[3];
  if (body[0] !== 2 || rank > 4 || body.length < 4 + 8 * rank || type !== (rank === 0 ? 0 : 1)) {
    throw invalidFile(argument, `${name} of another dataspace`, form);
  }
  const view = viewOf(body);
  return Array.from({ length: rank }, (_, i) => address(view, 4 + 8 * i));
}

/** Texts of a fixed width, padded with NUL. */
function textsOf(bytes: Uint8Array, width: number, name: string): string[] {
  return Array.from({ length: bytes.length / width }, (_, i) => {
    let end = (i + 1) * width;
    while (end > i * width && bytes[end - 1] === 0) end--;
    return decoded(bytes.subarray(i * width, end), name);
  });
}

function decoded(bytes: Uint8Array, name: string): string {
  try {
    return textOfUtf8(bytes);
  } catch {
    throw invalidFile(argument, `bytes that are no UTF-8 in ${name}`, form);
  }
}

/** An address or length of eight bytes; those beyond 2^53, the undefined one among them, are outside every file anyway. */
function address(view: DataView, at: number): number {
  return unsigned(view, at, 8);
}

function unsigned(view: DataView, at: number, bytes: number): number {
  if (bytes === 8) return view.getUint32(at, true) + 2 ** 32 * view.getUint32(at + 4, true);
  return bytes === 4 ? view.getUint32(at, true) : bytes === 2 ? view.getUint16(at, true) : view.getUint8(at);
}

/** Throws unless `length` bytes from `start` lie inside the file. */
function within(bytes: Uint8Array, start: number, length: number): void {
  if (length < 0 || start + length > bytes.length) throw damaged("address");
}

function viewOf(bytes: Uint8Array): DataView {
  return new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
}

function damaged(part: string): Error {
  return invalidFile(argument, `a damaged ${part}`, form);
}
