/**
 * Arrays of numbers as NumPy's .npy bytes: magic word, version, a header that names type, order and shape, then the numbers.
 *
 * Format: NumPy Enhancement Proposal 1 ("A Simple File Format for NumPy Arrays") and the documentation of
 * `numpy.lib.format`, versions 1.0 to 3.0. Written is version 1.0, little-endian doubles in C order, padded to 64 bytes.
 * Nothing in a file is ever run: objects, which the format stores as Python pickles, are refused.
 */
import { FermistateError } from "../errors.js";
import { latin, latinText, refuseBytes, requireBytes, viewOf } from "./bytes.js";

/** Numbers with a shape. */
export interface NumberArray {
  /** Length along each axis, the slowest first (C order); [] is a single number. */
  readonly shape: readonly number[];
  /** As many numbers as the shape has places. */
  readonly values: Float64Array;
}

const magic = "\x93NUMPY";
/** NumPy's own limit. */
const mostAxes = 64;
const isLittleEndian = /* @__PURE__ */ new Uint8Array(/* @__PURE__ */ Uint16Array.of(1).buffer)[0] === 1;

/**
 * An array as .npy bytes; the same array gives the same bytes. NaN and infinities are kept.
 *
 * @throws FermistateError `invalid-option`, `length-mismatch`
 * @example
 * ```ts
 * import { arrayFromNpy, arrayToNpy } from "fermistate/grids";
 * const bytes = arrayToNpy({ shape: [2, 2], values: Float64Array.of(1, 2, 3, 4) });
 * bytes.length; // => 160
 * arrayFromNpy(bytes).shape; // => [2, 2]
 * ```
 */
export function arrayToNpy(array: NumberArray): Uint8Array {
  const { shape, values } = readArray("array", array);
  return withHeader("<f8", shape, littleEndian(values));
}

/**
 * The array in .npy bytes: doubles or floats in either byte order and in C or Fortran order (given back in C order).
 *
 * Memory is bounded by the bytes given: their length times two.
 * @throws FermistateError `invalid-file` where the bytes are not a whole .npy file of numbers: truncated, longer than the shape
 * says, another version, pickled objects, integers, structures; `invalid-option` for no Uint8Array
 */
export function arrayFromNpy(bytes: Uint8Array): NumberArray {
  requireBytes(bytes);
  const found = contentFromNpy("bytes", bytes);
  if (typeof found === "string") return refuseBytes("bytes", "a text", "numbers");
  return found;
}

/** A text as .npy bytes: an array without axes of type "<U", which NumPy reads as a string. */
export function textToNpy(text: string): Uint8Array {
  const points = [...text].map((one) => one.codePointAt(0)!);
  const data = new Uint8Array(4 * Math.max(1, points.length));
  const view = viewOf(data);
  for (const [i, point] of points.entries()) view.setUint32(4 * i, point, true);
  return withHeader(`<U${Math.max(1, points.length)}`, [], data);
}

/** Numbers, or the text of an array without axes of type "U". */
export function contentFromNpy(argument: string, bytes: Uint8Array): NumberArray | string {
  const { type, isFortran, shape, data } = readHeader(argument, bytes);
  const [, order = "", kind = "", width = ""] = /^([<>=|]?)([a-zA-Z])(\d*)$/.exec(type) ?? [];
  if (kind === "O") refuseBytes(argument, "objects", "numbers: pickled objects could hold code and are never read");
  const size = kind === "U" ? 4 * Number(width) : Number(width);
  const isNumber = kind === "f" && (size === 4 || size === 8);
  const isText = kind === "U" && shape.length === 0;
  if (!(order === "<" || order === ">") || !(isNumber || isText)) {
    refuseBytes(
      argument,
      `type ${type.slice(0, 40)}`,
      "type f8 or f4, either byte order; convert others, as by .astype(float)",
    );
  }
  const count = shape.reduce((product, one) => product * one, 1);
  if (!Number.isSafeInteger(count * size) || count * size !== data.length) {
    refuseBytes(argument, `${data.length} bytes of data`, `as many as shape (${shape.join(", ")}) of ${type} has`);
  }
  if (isText) return textOf(argument, data, order === "<");
  const values = numbersOf(data, size, order === "<", count);
  return { shape: Object.freeze(shape), values: isFortran ? inCOrder(values, shape) : values };
}

/** Checks an array; errors name it. */
export function readArray(argument: string, array: NumberArray): NumberArray {
  const invalid = (given: unknown, allowed: string): FermistateError =>
    new FermistateError("invalid-option", { argument, given, allowed });
  const { shape, values } = Object(array) as Partial<NumberArray>;
  if (!(values instanceof Float64Array)) throw invalid(array, "{ shape, values } with values in a Float64Array");
  if (!Array.isArray(shape) || shape.length > mostAxes) throw invalid(shape, `a list of at most ${mostAxes} lengths`);
  if (!shape.every((one) => Number.isSafeInteger(one) && one >= 0)) throw invalid(shape, "whole numbers >= 0");
  const count = shape.reduce((product, one) => product * one, 1);
  if (count !== values.length) {
    const allowed = `${count} numbers, which shape (${shape.join(", ")}) has`;
    throw new FermistateError("length-mismatch", { argument, given: values.length, allowed });
  }
  return { shape, values };
}

function withHeader(type: string, shape: readonly number[], data: Uint8Array): Uint8Array {
  const tuple = shape.length === 1 ? `(${shape[0]},)` : `(${shape.join(", ")})`;
  const words = `{'descr': '${type}', 'fortran_order': False, 'shape': ${tuple}, }`;
  const start = magic.length + 4;
  const end = Math.ceil((start + words.length + 1) / 64) * 64;
  const header = `${words.padEnd(end - start - 1)}\n`;
  const bytes = new Uint8Array(end + data.length);
  bytes.set(latin(`${magic}\x01\x00`));
  viewOf(bytes).setUint16(magic.length + 2, header.length, true);
  bytes.set(latin(header), start);
  bytes.set(data, end);
  return bytes;
}

/** What the header says, and the bytes after it. */
interface Header {
  readonly type: string;
  readonly isFortran: boolean;
  readonly shape: readonly number[];
  readonly data: Uint8Array;
}

function readHeader(argument: string, bytes: Uint8Array): Header {
  const whole = "a whole .npy file";
  if (bytes.length < 12) refuseBytes(argument, `${bytes.length} bytes`, whole);
  if (latinText(bytes.subarray(0, 6)) !== magic)
    refuseBytes(argument, "another beginning", "\\x93NUMPY at the beginning");
  const [major, minor] = [bytes[6]!, bytes[7]!];
  if (!(major >= 1 && major <= 3 && minor === 0))
    refuseBytes(argument, `version ${major}.${minor}`, "version 1.0 to 3.0");
  const start = major === 1 ? 10 : 12;
  const length = major === 1 ? viewOf(bytes).getUint16(8, true) : viewOf(bytes).getUint32(8, true);
  if (start + length > bytes.length)
    refuseBytes(argument, `a header of ${length} bytes`, `${whole}: the header ends beyond it`);
  // NumPy refuses longer headers too: no honest one of plain numbers comes near.
  if (length > 10_000) refuseBytes(argument, `a header of ${length} bytes`, "at most 10000");
  const entries = readDictionary(argument, latinText(bytes.subarray(start, start + length)));
  return { ...entries, data: bytes.subarray(start + length) };
}

/** One entry of the header, which is a Python dictionary of three keys. */
const entry =
  /\s*(['"])(descr|fortran_order|shape)\1\s*:\s*(?:(['"])([^'"\\]*)\3|(True|False)|\(([\d\s,]*)\))\s*(?:,|(?=\}))/y;

function readDictionary(argument: string, text: string): Omit<Header, "data"> {
  const refuse = (): never => {
    return refuseBytes(argument, text.trim().slice(0, 60), "{'descr': type, 'fortran_order': bool, 'shape': tuple}");
  };
  const inside = /^\s*\{(.*\})\s*$/s.exec(text)?.[1] ?? refuse();
  let type: string | undefined;
  let isFortran: boolean | undefined;
  let shape: number[] | undefined;
  entry.lastIndex = 0;
  for (let left = 3; left > 0; left--) {
    const [, , key, , word, truth, tuple] = entry.exec(inside) ?? refuse();
    if (key === "descr" && word !== undefined && type === undefined) type = word;
    else if (key === "fortran_order" && truth !== undefined && isFortran === undefined) isFortran = truth === "True";
    else if (key === "shape" && tuple !== undefined && shape === undefined) shape = tupleOf(tuple) ?? refuse();
    else refuse();
    if (left === 1 && inside.slice(entry.lastIndex).trim() !== "}") refuse();
  }
  return { type: type!, isFortran: isFortran!, shape: shape! };
}

/** Lengths of a Python tuple without its brackets; undefined where it is none. */
function tupleOf(text: string): number[] | undefined {
  if (text.trim() === "") return [];
  const parts = text.split(",").map((one) => one.trim());
  if (parts.at(-1) === "") parts.pop();
  else if (parts.length === 1) return undefined; // "(3)" is a number, not a tuple
  const lengths = parts.map((one) => (/^\d+$/.test(one) ? Number(one) : Number.NaN));
  return parts.length <= mostAxes && lengths.every(Number.isSafeInteger) ? lengths : undefined;
}

/** The bytes of doubles, least significant first. */
function littleEndian(values: Float64Array): Uint8Array {
  if (isLittleEndian) return new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
  const bytes = new Uint8Array(values.byteLength);
  const view = viewOf(bytes);
  for (let i = 0; i < values.length; i++) view.setFloat64(8 * i, values[i]!, true);
  return bytes;
}

function numbersOf(data: Uint8Array, size: number, little: boolean, count: number): Float64Array {
  const values = new Float64Array(count);
  if (size === 8 && little && isLittleEndian) {
    new Uint8Array(values.buffer).set(data);
    return values;
  }
  const view = viewOf(data);
  for (let i = 0; i < count; i++) {
    values[i] = size === 8 ? view.getFloat64(8 * i, little) : view.getFloat32(4 * i, little);
  }
  return values;
}

/** Numbers whose first axis runs fastest, in the order where the last one does. */
function inCOrder(values: Float64Array, shape: readonly number[]): Float64Array {
  if (shape.length < 2) return values;
  const out = new Float64Array(values.length);
  const place = shape.map(() => 0);
  const strides = shape.map((_, axis) => shape.slice(0, axis).reduce((product, one) => product * one, 1));
  let from = 0;
  for (let to = 0; to < out.length; to++) {
    out[to] = values[from]!;
    for (let axis = shape.length - 1; axis >= 0; axis--) {
      place[axis]! += 1;
      from += strides[axis]!;
      if (place[axis]! < shape[axis]!) break;
      from -= strides[axis]! * shape[axis]!;
      place[axis] = 0;
    }
  }
  return out;
}

function textOf(argument: string, data: Uint8Array, little: boolean): string {
  const view = viewOf(data);
  let text = "";
  for (let at = 0; at < data.length; at += 4) {
    const point = view.getUint32(at, little);
    if (point > 0x10ffff) refuseBytes(argument, `character ${point}`, "Unicode: at most 0x10ffff");
    text += String.fromCodePoint(point);
  }
  return text.replace(/\0+$/, "");
}
