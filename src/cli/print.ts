/** Numbers, sizes, times and aligned text for a terminal. */

/** Ten digits: fixed from 0.001 to 1e5, else with exponent; "2.5e-3" as programs read it. */
export function numberText(value: number, digits = 10): string {
  if (!Number.isFinite(value)) return value > 0 ? "INF" : "-INF";
  const size = Math.abs(value);
  if (value === 0) return "0";
  return size >= 1e-3 && size < 1e5 ? value.toPrecision(digits) : value.toExponential(digits - 1).replace("+", "");
}

/** A part of a whole: "98.9 %", "3.1e-8 %"; "-" where the whole is no number to divide by. */
export function percentText(part: number, whole: number): string {
  const percent = (100 * part) / whole;
  if (!Number.isFinite(percent)) return "-";
  const size = Math.abs(percent);
  const digits = size === 0 ? "0" : size >= 1e-2 && size < 1e4 ? percent.toFixed(2) : percent.toExponential(1);
  return `${digits.replace("+", "")} %`;
}

/** A given number as short as it can be: "2e6", "1e-20", "12.5". */
export function shortText(value: number): string {
  const size = Math.abs(value);
  return value !== 0 && (size >= 1e5 || size < 1e-3) ? value.toExponential().replace("+", "") : String(value);
}

/** Bytes in units of 1000: "64.1 kB". */
export function bytesText(bytes: number): string {
  if (bytes < 1000) return `${bytes} B`;
  const order = bytes < 1e6 ? 1 : bytes < 1e9 ? 2 : 3;
  return `${(bytes / 1000 ** order).toFixed(1)} ${["B", "kB", "MB", "GB"][order]}`;
}

/** Milliseconds as "12 ms", "3.4 s" or "12 min". */
export function timeText(milliseconds: number): string {
  if (milliseconds >= 600_000) return `${Math.round(milliseconds / 60_000)} min`;
  return milliseconds < 1000 ? `${Math.max(1, Math.round(milliseconds))} ms` : `${(milliseconds / 1000).toFixed(1)} s`;
}

/**
 * Rows of cells in columns two blanks apart. A letter per column: "l" and "r" align to the left and right, "." puts
 * decimal points below each other.
 */
export function table(given: readonly (readonly string[])[], sides: string, indent = "  "): string {
  const columns = [...sides].map((side, i) => {
    const cells = given.map((row) => row[i] ?? "");
    return side === "." ? pointed(cells) : cells;
  });
  const rows = given.map((row, j) => row.map((_, i) => columns[i]![j]!));
  const widths = columns.map((cells) => Math.max(...cells.map((cell) => cell.length)));
  return rows
    .map((row) => {
      const cells = row.map((cell, i) => (sides[i] === "r" ? cell.padStart(widths[i]!) : cell.padEnd(widths[i]!)));
      return `${indent}${cells.join("  ")}`.trimEnd();
    })
    .join("\n");
}

/** Cells with as many blanks before as bring their decimal points (or their ends) below each other. */
function pointed(cells: readonly string[]): string[] {
  const places = cells.map((cell) => (cell.includes(".") ? cell.indexOf(".") : cell.length));
  const place = Math.max(...places);
  return cells.map((cell, i) => " ".repeat(place - places[i]!) + cell);
}

/** A command line in lines of at most `width` characters, each but the last ended as a shell wants it. */
export function wrappedCommand(line: string, indent: string, width = 78): string {
  return wrapped(line, width - 2, indent, `${indent}  `).replaceAll("\n", " \\\n");
}

/** Words in lines of at most `width` characters, the lines after the first indented by `hang`. */
export function wrapped(words: string, width = 78, indent = "", hang: string = indent): string {
  const lines: string[] = [];
  let line = indent;
  for (const word of words.split(" ")) {
    const isBegun = line.trim() !== "";
    if (isBegun && line.length + 1 + word.length > width) {
      lines.push(line);
      line = hang + word;
    } else line = isBegun ? `${line} ${word}` : line + word;
  }
  return [...lines, line].join("\n");
}
