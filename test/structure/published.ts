/** Reads the fixture of published figures: values by the name of the quantity. */
import { readFileSync } from "node:fs";

interface Row {
  readonly quantity: string;
  readonly value: string;
}

const rows = (
  JSON.parse(readFileSync(new URL("../fixtures/stars-published.json", import.meta.url), "utf8")) as { rows: Row[] }
).rows;

/** The value of one quantity. */
export function published(quantity: string): number {
  const row = rows.find((one) => one.quantity === quantity);
  if (row === undefined) throw new Error(`${quantity} is not in the fixture`);
  return Number(row.value);
}

/** Every value whose quantity begins with `head`, with the number after `mark` in its name and its last digit's half. */
export function publishedRows(head: string, mark: string): { at: number; value: number; halfDigit: number }[] {
  return rows
    .filter(({ quantity }) => quantity.startsWith(head))
    .map(({ quantity, value }) => ({
      at: Number(quantity.slice(quantity.lastIndexOf(mark) + mark.length)),
      value: Number(value),
      halfDigit: halfDigit(value),
    }));
}

/** Half a unit of the last digit printed. */
function halfDigit(text: string): number {
  const [mantissa = "", exponent = "0"] = text.toLowerCase().split("e");
  return 0.5 * 10 ** (Number(exponent) - (mantissa.split(".")[1]?.length ?? 0));
}
