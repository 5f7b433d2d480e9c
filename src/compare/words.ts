/** Numbers in sentences. */
import type { FindingCode } from "../regime/finding.js";

/** A size of a relative difference, signless, to two digits: "1.2e-5", "0.34 %", "12 %", "2.3e4 times". */
export function sizeWords(value: number): string {
  const size = Math.abs(value);
  if (size === 0) return "0";
  if (!Number.isFinite(size)) return "beyond all bounds";
  if (size >= 10) return `${numberWords(size, 2)} times`;
  if (size >= 1e-3) return `${Number((100 * size).toPrecision(2))} %`;
  return size.toExponential(1).replace(".0e", "e");
}

/** A number as short as three digits (or more) let it be: "2e6", "1.25e-7", "30". */
export function numberWords(value: number, digits = 3): string {
  const rounded = Number(value.toPrecision(digits));
  const size = Math.abs(rounded);
  return rounded !== 0 && (size >= 1e4 || size < 1e-2) ? rounded.toExponential().replace("+", "") : String(rounded);
}

/** "strained: partial-ionisation, linear-response". */
export function findingWords(codes: readonly FindingCode[]): string {
  return `strained: ${codes.join(", ")}`;
}
