/** How the command line writes numbers, axes, compositions and lists; each reader turns a text into a value. */
import * as z from "zod/mini";
import type { Axis } from "../grids/axes.js";
import { linearAxis, listedAxis, logarithmicAxis } from "../grids/axes.js";
import { nearestWord } from "../grids/nearest.js";
import type { NucleonFractions } from "../matter/composition.js";
import { type QuantityName, quantityNames } from "../thermodynamics/quantities.js";

/** Why a text cannot be read; becomes the message of the option. */
class Unreadable extends Error {}

/** A reader of texts; `read` throws {@link Unreadable} with what is allowed, or an error of the library as it is. */
function reader<Value>(read: (text: string) => Value): z.ZodMiniType<Value, string> {
  const parse = z.transform((text: string, context) => {
    try {
      return read(text);
    } catch (error) {
      if (!(error instanceof Unreadable)) throw error;
      context.issues.push({ code: "custom", input: text, message: error.message });
      return z.NEVER;
    }
  });
  return z.pipe(z.string({ error: "" }), parse) as z.ZodMiniType<Value, string>;
}

const decimal = String.raw`[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?`;
const wholeNumber = new RegExp(`^${decimal}$`);
const range = new RegExp(`^(${decimal})\\.\\.(${decimal}),(${decimal})-(per-decade|points|linear-points)$`);

/** A decimal number such as 2e6. */
export const number: z.ZodMiniType<number, string> = reader((text) => toNumber(text, "a number such as 2e6"));

/**
 * An axis: "2e6"; "1e5,1e6,3e7"; "1e2..1e10,10-per-decade"; "1e2..1e10,81-points" (equal ratios);
 * "0..1e9,5-linear-points".
 */
export const axis: z.ZodMiniType<Axis, string> = reader(toAxis);

/** Ends of a region to sample. */
export interface Span {
  readonly from: number;
  readonly to: number;
}

const bareSpan = new RegExp(`^(${decimal})\\.\\.(${decimal})$`);

/** A span "1e4..1e9" or an axis. */
export const spanOrAxis: z.ZodMiniType<Span | Axis, string> = reader((text) => {
  const [, from, to] = bareSpan.exec(text) ?? [];
  return from === undefined ? toAxis(text) : { from: Number(from), to: Number(to) };
});

function toAxis(text: string): Axis {
  const [, from, to, count, kind] = range.exec(text) ?? [];
  if (kind === "per-decade") {
    return logarithmicAxis({ from: Number(from), to: Number(to), pointsPerDecade: Number(count) });
  }
  if (kind === "points") return logarithmicAxis({ from: Number(from), to: Number(to), points: Number(count) });
  if (kind === "linear-points") return linearAxis({ from: Number(from), to: Number(to), points: Number(count) });
  const forms = "2e6 or 1e5,1e6,3e7 or 1e2..1e10,10-per-decade or 1e2..1e10,81-points or 0..1e9,5-linear-points";
  return listedAxis(text.split(",").map((one) => toNumber(one, forms)));
}

/** Two ends of a range: "1e4..1e9". */
export const interval: z.ZodMiniType<readonly [number, number], string> = reader((text) => {
  const [from, to, ...rest] = text.split("..");
  if (from === undefined || to === undefined || rest.length > 0) throw new Unreadable("a range such as 1e4..1e9");
  return [toNumber(from, "a range such as 1e4..1e9"), toNumber(to, "a range such as 1e4..1e9")];
});

/** A share: "2/5" is the second of five. */
export const share: z.ZodMiniType<readonly [number, number], string> = reader((text) => {
  const [, number, of] = /^(\d+)\/(\d+)$/.exec(text) ?? [];
  if (number === undefined || Number(number) < 1 || Number(number) > Number(of)) {
    throw new Unreadable("a share K/N with 1 <= K <= N, such as 2/5");
  }
  return [Number(number), Number(of)];
});

/** Texts separated by commas. */
export const textList: z.ZodMiniType<readonly string[], string> = reader((text) => {
  const found = text.split(",").map((one) => one.trim());
  if (found.includes("")) throw new Unreadable("names separated by commas");
  return found;
});

/** Nucleon fractions: "C12=0.5,O16=0.5", or a mean nucleus "meanMassNumber=13.7,meanCharge=6.85". */
export const fractions: z.ZodMiniType<NucleonFractions, string> = reader((text) => {
  const form = "nucleon fractions such as C12=0.5,O16=0.5";
  const found: Record<string, number> = {};
  for (const part of text.split(",")) {
    const [label = "", value, ...rest] = part.split("=").map((one) => one.trim());
    if (label === "" || value === undefined || rest.length > 0) throw new Unreadable(form);
    if (Object.hasOwn(found, label)) throw new Unreadable(`each nuclide once (${label} is there twice)`);
    found[label] = toNumber(value, form);
  }
  return found;
});

/** Names of quantities separated by commas, or "all". */
export const quantityList: z.ZodMiniType<readonly QuantityName[], string> = reader((text) => {
  if (text === "all") return quantityNames;
  return listOf(text, quantityNames, "see fermistate help quantities") as QuantityName[];
});

/** Words of a list separated by commas. */
export function wordList<Word extends string>(known: readonly Word[]): z.ZodMiniType<readonly Word[], string> {
  return reader((text) => listOf(text, known, `of ${known.join(", ")}`) as Word[]);
}

/** One word of a list. */
export function oneOf<Word extends string>(known: readonly Word[]): z.ZodMiniType<Word, string> {
  return reader((text) => {
    if ((known as readonly string[]).includes(text)) return text as Word;
    throw new Unreadable(`one of ${known.join(", ")}`);
  });
}

/** Any text. */
export const words: z.ZodMiniType<string, string> = reader((text) => text);

/** A path. */
export const path: z.ZodMiniType<string, string> = reader((text) => {
  if (text === "" || text.includes("\0")) throw new Unreadable("the path of a file or folder");
  return text;
});

/** A switch: true where it is given. */
export const flag: z.ZodMiniType<boolean, true | undefined> = z.pipe(
  z.optional(z.literal(true)),
  z.transform((given) => given === true),
);

function toNumber(text: string, allowed: string): number {
  if (!wholeNumber.test(text.trim())) throw new Unreadable(allowed);
  return Number(text);
}

function listOf(text: string, known: readonly string[], where: string): string[] {
  const found = text.split(",").map((one) => one.trim());
  for (const [i, one] of found.entries()) {
    if (found.indexOf(one) < i) throw new Unreadable(`each once (${one} is there twice)`);
    if (known.includes(one)) continue;
    const near = nearestWord(one, known);
    throw new Unreadable(`${near === undefined ? "" : `perhaps ${near}; `}names separated by commas, ${where}`);
  }
  return found;
}
