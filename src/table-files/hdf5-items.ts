/**
 * Items in an HDF5 file, by h5wasm: every item a dataset of its path, contiguous and not compressed, with attributes `units`
 * and `description`; texts of fixed length, UTF-8, padded with NUL.
 */
import type { Meaning } from "./form.js";
import type { Item, Kind } from "./item.js";
import { utf8 } from "./platform.js";

/** What is used of h5wasm. */
export type Hdf5 = typeof import("h5wasm");

/** h5wasm's names of the number types. */
const dtypes: Readonly<Record<Exclude<Kind, "text">, string>> = {
  float64: "<d",
  int32: "<i",
  int16: "<h",
  int8: "<b",
};

let files = 0;

/** The bytes of an HDF5 file with these items and, at its root, attributes. Equal items give equal bytes. */
export function hdf5OfItems(
  hdf5: Hdf5,
  items: readonly Item[],
  attributes: Readonly<Record<string, string | readonly string[]>>,
  meaningOf: (name: string) => Meaning,
): Uint8Array {
  const fs = hdf5.FS!;
  const path = `/fermistate-${++files}.h5`;
  return atTimeZero(() => {
    const file = new hdf5.File(path, "w", { libver: ["v108", "v108"] });
    try {
      for (const [name, value] of Object.entries(attributes)) {
        file.create_attribute(name, typeof value === "string" ? value : [...value]);
      }
      for (const item of items) createDataset(file, item, meaningOf(item.name));
      file.close();
      return fs.readFile(path) as Uint8Array;
    } finally {
      fs.unlink(path);
    }
  });
}

function createDataset(file: InstanceType<Hdf5["File"]>, { name, kind, shape, values }: Item, meaning: Meaning): void {
  const folders = name.split("/").slice(0, -1);
  const group = folders.reduce<InstanceType<Hdf5["Group"]>>(
    (outer, inner) => (outer.get(inner) as InstanceType<Hdf5["Group"]> | null) ?? outer.create_group(inner),
    file,
  );
  const { units, description } = meaning;
  const dataset = group.create_dataset({
    name: name.split("/").at(-1)!,
    shape: [...shape],
    ...(kind === "text"
      ? { data: [...(values as readonly string[])], dtype: `S${textLength(values as readonly string[])}` }
      : { data: values as Float64Array, dtype: dtypes[kind] }),
  });
  if (units !== undefined) dataset.create_attribute("units", units);
  dataset.create_attribute("description", description);
}

/** Bytes of the longest text, one at least. */
function textLength(values: readonly string[]): number {
  return Math.max(1, ...values.map((text) => utf8(text).length));
}

/** HDF5 writes the time into the heads of objects: a clock that stands makes equal files of equal tables. */
function atTimeZero<T>(action: () => T): T {
  const { now } = Date;
  Date.now = () => 0;
  try {
    return action();
  } finally {
    Date.now = now;
  }
}
