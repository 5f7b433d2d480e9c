/**
 * The checksum of metadata in HDF5 files: Bob Jenkins' lookup3 (2006), as section "Disk Format: Level" of the HDF5 File Format
 * Specification 3.0 names it; a test compares it with those that libhdf5 writes.
 */

/** lookup3 of bytes with the start value 0, as an unsigned number of 32 bits. */
export function lookup3(bytes: Uint8Array): number {
  let a = (0xdeadbeef + bytes.length) | 0;
  let b = a;
  let c = a;
  let at = 0;
  for (let left = bytes.length; left > 12; left -= 12, at += 12) {
    a = (a + word(bytes, at)) | 0;
    b = (b + word(bytes, at + 4)) | 0;
    c = (c + word(bytes, at + 8)) | 0;
    a = (a - c) ^ turned(c, 4);
    c = (c + b) | 0;
    b = (b - a) ^ turned(a, 6);
    a = (a + c) | 0;
    c = (c - b) ^ turned(b, 8);
    b = (b + a) | 0;
    a = (a - c) ^ turned(c, 16);
    c = (c + b) | 0;
    b = (b - a) ^ turned(a, 19);
    a = (a + c) | 0;
    c = (c - b) ^ turned(b, 4);
    b = (b + a) | 0;
  }
  if (bytes.length === 0) return c >>> 0;
  a = (a + word(bytes, at)) | 0;
  b = (b + word(bytes, at + 4)) | 0;
  c = (c + word(bytes, at + 8)) | 0;
  c = ((c ^ b) - turned(b, 14)) | 0;
  a = ((a ^ c) - turned(c, 11)) | 0;
  b = ((b ^ a) - turned(a, 25)) | 0;
  c = ((c ^ b) - turned(b, 16)) | 0;
  a = ((a ^ c) - turned(c, 4)) | 0;
  b = ((b ^ a) - turned(a, 14)) | 0;
  c = ((c ^ b) - turned(b, 24)) | 0;
  return c >>> 0;
}

/** Four bytes, the lowest first; zeros beyond the end. */
function word(bytes: Uint8Array, at: number): number {
  return (bytes[at] ?? 0) | ((bytes[at + 1] ?? 0) << 8) | ((bytes[at + 2] ?? 0) << 16) | ((bytes[at + 3] ?? 0) << 24);
}

function turned(value: number, bits: number): number {
  return (value << bits) | (value >>> (32 - bits));
}
