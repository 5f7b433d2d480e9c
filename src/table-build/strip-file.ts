/** One finished strip as a file: text that says whose strip it is, with a checksum over all of it. */
import { createHash } from "node:crypto";
import * as z from "zod/mini";
import type { Strip } from "../tables/strip.js";

/** Version of this form. */
const form = 1;

const base64 = z.string().check(z.regex(/^[A-Za-z0-9+/]*={0,2}$/));
const schema = z.strictObject({
  form: z.literal(form),
  mark: z.string(),
  index: z.number(),
  blocksAboveTarget: z.number(),
  sheets: z.array(
    z.strictObject({
      phase: z.enum(["single", "liquid", "crystal"]),
      densityLevels: base64,
      temperatureLevels: base64,
      exponents: base64,
      nodes: base64,
    }),
  ),
  checksum: z.string(),
});

/** The text of a strip's file. Numbers are little-endian, in base64. */
export function stripText(strip: Strip, mark: string): string {
  const { index, blocksAboveTarget, sheets } = strip;
  const body = {
    form,
    mark,
    index,
    blocksAboveTarget,
    sheets: sheets.map(({ phase, densityLevels, temperatureLevels, exponents, nodes }) => ({
      phase,
      densityLevels: encoded(densityLevels),
      temperatureLevels: encoded(temperatureLevels),
      exponents: encoded(exponents),
      nodes: encoded(nodes),
    })),
  };
  return `${JSON.stringify({ ...body, checksum: checksum(body) })}\n`;
}

/** The strip of a text; undefined where the text is not a whole strip of this mark and number. */
export function stripFromText(text: string, mark: string, index: number): Strip | undefined {
  let data: unknown;
  try {
    data = JSON.parse(text);
  } catch {
    return undefined;
  }
  const read = z.safeParse(schema, data);
  if (!read.success) return undefined;
  const { checksum: stated, ...body } = read.data;
  if (stated !== checksum(body) || body.mark !== mark || body.index !== index) return undefined;
  return {
    index,
    blocksAboveTarget: body.blocksAboveTarget,
    sheets: body.sheets.map(({ phase, densityLevels, temperatureLevels, exponents, nodes }) => ({
      phase,
      densityLevels: new Int8Array(decoded(densityLevels)),
      temperatureLevels: new Int8Array(decoded(temperatureLevels)),
      exponents: new Int16Array(decoded(exponents)),
      nodes: new Float64Array(decoded(nodes)),
    })),
  };
}

const checksum = (body: unknown): string => createHash("sha256").update(JSON.stringify(body)).digest("hex");

const encoded = (array: Int8Array | Int16Array | Float64Array): string =>
  Buffer.from(array.buffer, array.byteOffset, array.byteLength).toString("base64");

/** A buffer of its own: one from the pool would not be aligned. */
const decoded = (text: string): ArrayBuffer => new Uint8Array(Buffer.from(text, "base64")).buffer;
