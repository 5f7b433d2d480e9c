/** Bytes of binary forms: their check sum, ASCII, and the refusal of bytes that are not what they claim. */
import { FermistateError } from "../errors.js";

/** Remainders of the 256 bytes for {@link crc32}. */
const remainders = /* @__PURE__ */ makeRemainders();

function makeRemainders(): Uint32Array {
  return Uint32Array.from({ length: 256 }, (_, byte) => {
    let rest = byte;
    for (let bit = 0; bit < 8; bit++) rest = rest & 1 ? (rest >>> 1) ^ 0xedb88320 : rest >>> 1;
    return rest;
  });
}

/** CRC-32 as ZIP uses it (ISO/IEC 8802-3, polynomial 0x04c11db7, reflected). */
export function crc32(bytes: Uint8Array): number {
  let rest = 0xffffffff;
  for (let i = 0; i < bytes.length; i++) rest = remainders[(rest ^ bytes[i]!) & 0xff]! ^ (rest >>> 8);
  return (rest ^ 0xffffffff) >>> 0;
}

/** Bytes of a text whose characters are all below 256. */
export function latin(text: string): Uint8Array {
  return Uint8Array.from(text, (one) => one.charCodeAt(0));
}

/** The text of bytes, one character each. */
export function latinText(bytes: Uint8Array): string {
  let text = "";
  for (const byte of bytes) text += String.fromCharCode(byte);
  return text;
}

/** A view of bytes for numbers of any width. */
export function viewOf(bytes: Uint8Array): DataView {
  return new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
}

/** Throws `invalid-file`. */
export function refuseBytes(argument: string, given: unknown, allowed: string): never {
  throw new FermistateError("invalid-file", { argument, given, allowed });
}

/** Throws `invalid-option` unless `bytes` is a Uint8Array (a Buffer of Node is one). */
export function requireBytes(bytes: unknown): void {
  if (bytes instanceof Uint8Array) return;
  throw new FermistateError("invalid-option", { argument: "bytes", given: bytes, allowed: "a Uint8Array" });
}
