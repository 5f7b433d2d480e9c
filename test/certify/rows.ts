/** Rows of a comma-separated fixture by column name; lines that begin with "#" are remarks. */
import { readFileSync } from "node:fs";

export function readRows(name: string): Record<string, string>[] {
  const text = readFileSync(new URL(`../fixtures/${name}`, import.meta.url), "utf8");
  const [head, ...lines] = text.split("\n").filter((line) => line !== "" && !line.startsWith("#"));
  const columns = head!.split(",");
  return lines.map((line) => {
    const cells = line.split(",");
    return Object.fromEntries(columns.map((column, index) => [column, cells[index] ?? ""]));
  });
}
