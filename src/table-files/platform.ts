/**
 * What Node and browsers share beyond ECMAScript: UTF-8 and SHA-256. Browsers have the second on https and localhost only.
 */
import { FermistateError } from "../errors.js";

interface Platform {
  readonly TextEncoder: new () => { encode(text: string): Uint8Array };
  readonly TextDecoder: new (label: "utf-8", options: { fatal: true }) => { decode(bytes: Uint8Array): string };
  readonly crypto?: { readonly subtle?: { digest(name: "SHA-256", data: Uint8Array): Promise<ArrayBuffer> } };
}

const platform = globalThis as unknown as Platform;

/** A text as UTF-8. */
export function utf8(text: string): Uint8Array {
  return new platform.TextEncoder().encode(text);
}

/** The text of UTF-8; throws a TypeError where it is none. */
export function textOfUtf8(bytes: Uint8Array): string {
  return new platform.TextDecoder("utf-8", { fatal: true }).decode(bytes);
}

/** SHA-256 (FIPS 180-4), 64 hexadecimal digits in lower case. */
export async function sha256(bytes: Uint8Array): Promise<string> {
  const subtle = platform.crypto?.subtle;
  if (subtle === undefined) {
    const allowed = "a page served by https or from localhost: elsewhere browsers withhold crypto.subtle";
    throw new FermistateError("invalid-option", { argument: "globalThis.crypto", given: undefined, allowed });
  }
  const digest = new Uint8Array(await subtle.digest("SHA-256", bytes));
  return Array.from(digest, (byte) => byte.toString(16).padStart(2, "0")).join("");
}
