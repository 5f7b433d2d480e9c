/** The checksum of a table: of what it says, whatever the file that carries it. `checksumRecipe` has it in words. */
import type { SpeciesTable } from "../tables/species-table.js";
import type { FreeEnergyTable } from "../tables/table.js";
import type { Item } from "./item.js";
import { itemsOf } from "./items.js";
import { sha256, utf8 } from "./platform.js";
import { speciesForm } from "./species-form.js";

/**
 * SHA-256 of the content of a table of either kind, 64 hexadecimal digits: equal for equal tables in every file and in memory.
 *
 * @throws FermistateError `invalid-option` in a browser's page that was not served by https or localhost
 */
export async function tableChecksum(table: FreeEnergyTable | SpeciesTable): Promise<string> {
  return checksumOf("logTheta" in table ? speciesForm.itemsOf(table) : itemsOf(table));
}

/** The same of items. */
export async function checksumOf(items: readonly Item[]): Promise<string> {
  let list = "";
  for (const item of items) {
    const shape = item.shape.length === 0 ? "scalar" : item.shape.join("x");
    list += `${await sha256(bytesOf(item))} ${item.kind} ${shape} ${item.name}\n`;
  }
  return sha256(utf8(list));
}

/** The bytes of an item: a view of its memory, which is little-endian on every machine that runs WebAssembly. */
function bytesOf({ kind, values }: Item): Uint8Array {
  if (kind === "text") return utf8((values as readonly string[]).map((text) => `${text}\n`).join(""));
  const { buffer, byteOffset, byteLength } = values as Exclude<Item["values"], readonly string[]>;
  return new Uint8Array(buffer, byteOffset, byteLength);
}
