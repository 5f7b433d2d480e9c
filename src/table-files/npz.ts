/**
 * A table as NumPy's .npz bytes: each item an array or text whose name has a point for each slash, integers as doubles,
 * texts of several lines joined by LF; and `description`, JSON that says what they mean and has the checksum.
 */
import type { NumberArray } from "../grids/npy.js";
import { arraysFromNpz, arraysToNpz } from "../grids/npz.js";
import { libraryVersion } from "../version.js";
import { checkedTable, requireBytes } from "./checked.js";
import { checksumOf } from "./checksum.js";
import { checksumRecipe, type TableForm } from "./form.js";
import { invalidFile } from "./invalid.js";
import type { Arrays, Item, Kind, ReadItem } from "./item.js";

const arrayName = (item: string): string => item.replaceAll("/", ".");

/** The bytes of a table; equal tables give equal bytes. */
export async function npzOfTable<T>(form: TableForm<T>, table: T): Promise<Uint8Array> {
  const items = form.itemsOf(form.check(table, "invalid-option"));
  const description = {
    title: form.titleOf(table),
    creator: `fermistate ${libraryVersion}`,
    reading: form.recipe,
    checksum: await checksumOf(items),
    checksumRecipe,
    items: items.map(({ name, kind, shape }) => ({
      name,
      array: arrayName(name),
      kind,
      shape,
      ...form.meaningOf(name),
    })),
  };
  const arrays = items.map((item) => [arrayName(item.name), contentOf(item)] as const);
  return arraysToNpz({ ...Object.fromEntries(arrays), description: JSON.stringify(description, null, 1) });
}

function contentOf({ kind, shape, values }: Item): NumberArray | string {
  if (kind === "text") return (values as readonly string[]).join("\n");
  return { shape, values: values instanceof Float64Array ? values : Float64Array.from(values as Int32Array) };
}

/** The table in .npz bytes. @throws FermistateError `invalid-file` unless it is one and has its checksum */
export async function tableOfNpz<T>(form: TableForm<T>, bytes: Uint8Array): Promise<T> {
  requireBytes(bytes);
  const arrays = arraysFromNpz(bytes);
  const read: ReadItem = (name, kind, shape) => {
    const found = arrays.get(arrayName(name));
    if (found === undefined)
      throw invalidFile("bytes", `no ${arrayName(name)}`, "an .npz file as fermistate writes it");
    return itemOf(name, kind, shape, found);
  };
  return checkedTable(form, read, checksumIn(arrays.get("description")));
}

function checksumIn(description: NumberArray | string | undefined): string {
  try {
    const { checksum } = JSON.parse(description as string) as { readonly checksum?: unknown };
    if (typeof checksum === "string") return checksum;
  } catch {
    // no JSON object
  }
  throw invalidFile("bytes", "no checksum in description", "an .npz file as fermistate writes it");
}

const integers = { int32: Int32Array, int16: Int16Array, int8: Int8Array } as const;

function itemOf<K extends Kind>(
  name: string,
  kind: K,
  shape: readonly (number | undefined)[],
  found: NumberArray | string,
): Arrays[K] {
  const refuse = (given: string, allowed: string): never => {
    throw invalidFile("bytes", `${arrayName(name)}: ${given}`, allowed);
  };
  if (typeof found === "string") {
    if (kind !== "text") return refuse("a text", "numbers");
    const lines = shape.length === 0 ? [found] : found.split("\n");
    const count = shape[0] ?? lines.length;
    return (lines.length === count
      ? lines
      : refuse(`${lines.length} lines`, `${count}`)) as readonly string[] as Arrays[K];
  }
  if (kind === "text") return refuse("numbers", "a text");
  if (found.shape.length !== shape.length || shape.some((size, i) => size !== undefined && size !== found.shape[i])) {
    return refuse(`shape ${found.shape.join(" x ")}`, shape.map((size) => size ?? "any").join(" x ") || "one value");
  }
  if (kind === "float64") return found.values as Arrays[K];
  const whole = integers[kind as keyof typeof integers].from(found.values);
  if (whole.some((value, i) => value !== found.values[i])) return refuse("other numbers", `integers of kind ${kind}`);
  return whole as Arrays[K];
}
