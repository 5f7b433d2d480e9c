/**
 * Named arrays, the form of a table that every container carries and that the checksum is of. Names are paths; all
 * numbers are IEEE doubles or integers, all texts UTF-8.
 */

/** Arrays of an item: their kind says what a number is. */
export interface Arrays {
  readonly float64: Float64Array;
  readonly int32: Int32Array;
  readonly int16: Int16Array;
  readonly int8: Int8Array;
  readonly text: readonly string[];
}

/** Kind of the values of an item. */
export type Kind = keyof Arrays;

/** One named array; no axes in its shape: a single value. */
export interface Item<K extends Kind = Kind> {
  readonly name: string;
  readonly kind: K;
  readonly shape: readonly number[];
  readonly values: Arrays[K];
}

/**
 * Hands out the values of an item by name; a number in `shape` must be met, undefined leaves it open. Throws where
 * there is no such item.
 */
export type ReadItem = <K extends Kind>(name: string, kind: K, shape: readonly (number | undefined)[]) => Arrays[K];

/** Doubles of a shape. */
export const float64 = (name: string, values: Float64Array, shape: readonly number[]): Item => ({
  name,
  kind: "float64",
  shape,
  values,
});
/** Doubles in a row. */
export const numbers = (name: string, values: readonly number[]): Item =>
  float64(name, Float64Array.from(values), [values.length]);
/** One double. */
export const number = (name: string, value: number): Item => float64(name, Float64Array.of(value), []);
/** One integer of 32 bits. */
export const integer = (name: string, value: number): Item => ({
  name,
  kind: "int32",
  shape: [],
  values: Int32Array.of(value),
});
/** Texts in a row. */
export const texts = (name: string, values: readonly string[]): Item => ({
  name,
  kind: "text",
  shape: [values.length],
  values,
});
/** One text. */
export const text = (name: string, value: string): Item => ({ name, kind: "text", shape: [], values: [value] });

/** What a file holds besides the items of a table: the names of those, in order, and their checksum. */
export function formatItems(items: readonly Item[], checksum: string): Item[] {
  return [
    texts(
      "format/items",
      items.map(({ name }) => name),
    ),
    text("format/checksum", checksum),
  ];
}
