/** A kind of table, as the containers know it: they write and read any that has one. And what all kinds share. */
import type { ErrorCode } from "../errors.js";
import type { Item, ReadItem } from "./item.js";

/** Unit in cgs ("1": a pure number; none for texts) and meaning. */
export interface Meaning {
  readonly units?: string;
  readonly description: string;
}

/** What is to be known of a kind of table. */
export interface TableForm<T> {
  /** What the whole is. */
  titleOf(table: T): string;
  /** How to get numbers out of it. */
  readonly recipe: readonly string[];
  /** The item with the version of the layout, and the version that is written and read. */
  readonly layout: { readonly item: string; readonly version: number };
  /** All items of a table, in the order of the checksum. */
  itemsOf(table: T): Item[];
  /** The object that items describe: of a table's form, nothing checked beyond kinds and shapes. */
  tableOf(read: ReadItem): T;
  /** Throws an error of the given code unless `table` is one; returns it. */
  check(table: unknown, code: ErrorCode): T;
  /** The meaning of an item. */
  meaningOf(name: string): Meaning;
}

/** How the checksum of the content is made; the same for every kind of file. */
export const checksumRecipe: string =
  "SHA-256 (FIPS 180-4) of a text of one line for each item in the order of format/items, ended by LF: the SHA-256 of the item's " +
  "bytes in hexadecimal, its kind, its shape (sizes joined by x, or scalar), its name, separated by single spaces. Bytes: " +
  "numbers little-endian, last index fastest; texts in UTF-8, each ended by LF.";

/** Of the items beside those of a table. */
export const formatMeanings: Readonly<Record<string, Meaning>> = {
  "format/items": { description: "names of what the checksum is of, in order" },
  "format/checksum": { description: "SHA-256 of the content, made as the description of the whole says" },
};
