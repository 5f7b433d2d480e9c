/**
 * ZIP archives of stored members: PKWARE's APPNOTE.TXT, sections 4.3 and 4.4, without compression, encryption and parts.
 *
 * Reading believes nothing: every length is held against the bytes there are, members may not overlap, and each is held to
 * its CRC-32. Nothing is inflated, so an archive cannot grow in memory.
 */
import { FermistateError } from "../errors.js";
import { crc32, latin, latinText, refuseBytes, viewOf } from "./bytes.js";

/** One file of an archive. */
export interface ZipMember {
  /** Its name, ASCII. */
  readonly name: string;
  readonly bytes: Uint8Array;
}

const LOCAL = 0x04034b50;
const CENTRAL = 0x02014b50;
const END = 0x06054b50;
const LOCAL_LENGTH = 30;
const CENTRAL_LENGTH = 46;
const END_LENGTH = 22;
/** What 32-bit fields hold where the number stands in a ZIP64 extra field. */
const ELSEWHERE = 0xffffffff;
/** 1 January 1980, the first day there is: the same members give the same bytes. */
const FIRST_DAY = 0x0021;

/** Members in one archive, in the order given. */
export function toZip(members: readonly ZipMember[]): Uint8Array {
  const names = members.map(({ name }) => latin(name));
  const sizes = members.map(({ bytes }, i) => LOCAL_LENGTH + names[i]!.length + bytes.length);
  const directory = names.reduce((sum, name) => sum + CENTRAL_LENGTH + name.length, 0);
  const start = sizes.reduce((sum, one) => sum + one, 0);
  const length = start + directory + END_LENGTH;
  if (length > 0xfffffffe || members.length > 0xfffe) {
    const allowed = "less than 4 GiB and 65535 members in one archive";
    throw new FermistateError("too-large", { argument: "arrays", given: length, allowed });
  }
  const out = new Uint8Array(length);
  const view = viewOf(out);
  let local = 0;
  let central = start;
  for (const [i, { bytes }] of members.entries()) {
    const name = names[i]!;
    const sum = crc32(bytes);
    const common = (at: number): void => {
      view.setUint16(at, 20, true); // version needed
      view.setUint16(at + 8, FIRST_DAY, true);
      view.setUint32(at + 10, sum, true);
      view.setUint32(at + 14, bytes.length, true);
      view.setUint32(at + 18, bytes.length, true);
      view.setUint16(at + 22, name.length, true);
    };
    view.setUint32(local, LOCAL, true);
    common(local + 4);
    out.set(name, local + LOCAL_LENGTH);
    out.set(bytes, local + LOCAL_LENGTH + name.length);
    view.setUint32(central, CENTRAL, true);
    view.setUint16(central + 4, 20, true); // made by
    common(central + 6);
    view.setUint32(central + 42, local, true);
    out.set(name, central + CENTRAL_LENGTH);
    local += sizes[i]!;
    central += CENTRAL_LENGTH + name.length;
  }
  view.setUint32(central, END, true);
  view.setUint16(central + 8, members.length, true);
  view.setUint16(central + 10, members.length, true);
  view.setUint32(central + 12, directory, true);
  view.setUint32(central + 16, start, true);
  return out;
}

/** The members of an archive, as views of its bytes; refuses anything else (`invalid-file`). */
export function fromZip(bytes: Uint8Array): ZipMember[] {
  const view = viewOf(bytes);
  const end = endOf(bytes, view);
  const count = view.getUint16(end + 10, true);
  const size = view.getUint32(end + 12, true);
  const start = view.getUint32(end + 16, true);
  const isWhole = view.getUint16(end + 8, true) === count && view.getUint32(end + 4, true) === 0;
  if (!isWhole || start + size !== end) {
    refuseBytes("bytes", "a directory that does not fit the file", "one whole ZIP archive below 4 GiB");
  }
  const found: Placed[] = [];
  let at = start;
  for (let i = 0; i < count; i++) {
    if (at + CENTRAL_LENGTH > end || view.getUint32(at, true) !== CENTRAL) {
      refuseBytes("bytes", `directory entry ${i} cut off`, `${count} entries, as the end of the file says`);
    }
    const lengths = [28, 30, 32].map((offset) => view.getUint16(at + offset, true));
    const next = at + CENTRAL_LENGTH + lengths.reduce((sum, one) => sum + one, 0);
    if (next > end) refuseBytes("bytes", `directory entry ${i} cut off`, "entries that end inside the directory");
    found.push(readMember(bytes, view, at, start));
    at = next;
  }
  if (at !== end) refuseBytes("bytes", "bytes after the last directory entry", "none");
  checkPlaces(found); // before the sums: members that overlap would make their work grow with the square
  return found.map(({ name, bytes: content, sum }) => {
    if (crc32(content) !== sum) {
      const allowed = "content of the CRC-32 in the directory: it is damaged";
      refuseBytes(`bytes, member ${name.slice(0, 60)}`, "another check sum", allowed);
    }
    return { name, bytes: content };
  });
}

/** A member with what the directory says of it. */
interface Placed extends ZipMember {
  readonly sum: number;
  /** First byte of its local header, and the first byte after its data. */
  readonly from: number;
  readonly to: number;
}

/** Where the end record lies: the last one whose comment ends with the file. */
function endOf(bytes: Uint8Array, view: DataView): number {
  for (let at = bytes.length - END_LENGTH; at >= Math.max(0, bytes.length - END_LENGTH - 0xffff); at--) {
    if (view.getUint32(at, true) !== END) continue;
    if (at + END_LENGTH + view.getUint16(at + 20, true) === bytes.length) return at;
  }
  return refuseBytes("bytes", `${bytes.length} bytes without the end of an archive`, "a whole .npz file");
}

/** A member by its directory entry; its local header must agree. */
function readMember(bytes: Uint8Array, view: DataView, entry: number, limit: number): Placed {
  const nameLength = view.getUint16(entry + 28, true);
  const name = latinText(bytes.subarray(entry + CENTRAL_LENGTH, entry + CENTRAL_LENGTH + nameLength));
  if (!/^[\x20-\x7e]+$/.test(name)) refuseBytes("bytes", "a member name", "printable ASCII");
  const where = `bytes, member ${name.slice(0, 60)}`;
  const flags = view.getUint16(entry + 8, true);
  const method = view.getUint16(entry + 10, true);
  if ((flags & 1) !== 0) refuseBytes(where, "encrypted", "a member without password");
  if (method !== 0) {
    refuseBytes(
      where,
      `compression method ${method}`,
      "stored members, as numpy.savez writes them (not savez_compressed)",
    );
  }
  const sum = view.getUint32(entry + 16, true);
  const size = view.getUint32(entry + 24, true);
  const from = view.getUint32(entry + 42, true);
  if (view.getUint32(entry + 20, true) !== size) refuseBytes(where, "two different sizes", "a stored member has one");
  if (from + LOCAL_LENGTH > limit || view.getUint32(from, true) !== LOCAL) {
    refuseBytes(where, `no member at byte ${from}`, "a local header where the directory says");
  }
  const data = from + LOCAL_LENGTH + view.getUint16(from + 26, true) + view.getUint16(from + 28, true);
  const to = data + size;
  if (to > limit) refuseBytes(where, `${size} bytes`, "no more bytes than there are before the directory");
  const isNamed =
    view.getUint16(from + 26, true) === nameLength &&
    latinText(bytes.subarray(from + LOCAL_LENGTH, from + LOCAL_LENGTH + nameLength)) === name;
  // Sizes and sum of the local header may stand behind the data (flag 3) or in a ZIP64 field.
  const isLater = (flags & 8) !== 0;
  const agrees = (offset: number, wanted: number): boolean => {
    const given = view.getUint32(from + offset, true);
    return given === wanted || (isLater && given === 0) || (offset > 14 && given === ELSEWHERE);
  };
  const isSame = isNamed && view.getUint16(from + 8, true) === method;
  if (!isSame || !agrees(14, sum) || !agrees(18, size) || !agrees(22, size)) {
    refuseBytes(where, "a local header that says otherwise", "the same name, sizes and check sum as in the directory");
  }
  return { name, bytes: bytes.subarray(data, to), sum, from, to };
}

/** Members with different names in places of their own. */
function checkPlaces(members: readonly Placed[]): void {
  const names = new Set<string>();
  for (const { name } of members) {
    if (names.has(name)) refuseBytes("bytes", `member ${name.slice(0, 60)} twice`, "members with different names");
    names.add(name);
  }
  const sorted = [...members].sort((a, b) => a.from - b.from);
  for (let i = 1; i < sorted.length; i++) {
    if (sorted[i]!.from < sorted[i - 1]!.to) refuseBytes("bytes", "members that overlap", "each in a place of its own");
  }
}
