/** A grid as JSON that describes itself: what it is, units, order of rows, then the columns. */
import { joined, pieceLength } from "./chunks.js";
import { conventions, type GridTexts, orderOfRows, titleOf } from "./description.js";
import { columnOf, type Grid } from "./grid.js";
import { numbersText } from "./number-text.js";
import { aboutRefused } from "./refused.js";

/** Numbers turned into text at once. */
const batch = 2048;

/**
 * A grid as JSON text (RFC 8259). Numbers read back to the same bits; infinities, which JSON has no number for, are the
 * strings "INF" and "-INF"; rows that are refused have null.
 *
 * @throws FermistateError `too-large` where the text is longer than a string may be: use {@link gridToJsonPieces}
 * @example
 * ```ts
 * import { composition, whiteDwarfMatter } from "fermistate";
 * import { grid, gridToJson } from "fermistate/grids";
 * const made = grid(whiteDwarfMatter(), composition({ He4: 1 }), { density: [1e4, 1e5], temperature: 1e8 });
 * const read = JSON.parse(gridToJson(made));
 * read.shape; // => [1, 2]
 * read.columns.density.values; // => [10000, 100000]
 * ```
 */
export function gridToJson(grid: Grid, texts: GridTexts = {}): string {
  return joined(gridToJsonPieces(grid, texts), "gridToJsonPieces");
}

/** The text of {@link gridToJson} in pieces of about 64 kB, so that memory stays bounded. */
export function* gridToJsonPieces(grid: Grid, texts: GridTexts = {}): Generator<string, void, undefined> {
  let piece = `${JSON.stringify(aboutGrid(grid, texts), null, 2).slice(0, -2)},\n  "columns": {`;
  for (const [i, name] of grid.columnNames.entries()) {
    const { unit, description } = columnOf(name);
    const about = JSON.stringify({ unit, description }, null, 6).slice(0, -2);
    piece += `${i === 0 ? "" : ","}\n    "${name}": ${about},\n      "values": [`;
    const column = grid.columns[name]!;
    for (let start = 0; start < column.length; start += batch) {
      piece += (start === 0 ? "" : ",") + numbersText(Array.from(column.subarray(start, start + batch)), '"');
      if (piece.length < pieceLength) continue;
      yield piece;
      piece = "";
    }
    piece += "]\n    }";
  }
  yield `${piece}\n  }\n}\n`;
}

/** What a grid is, but for its columns: all that a file says of it besides numbers and units. */
export function aboutGrid(grid: Grid, texts: GridTexts): Readonly<Record<string, unknown>> {
  const { composition } = grid;
  return {
    title: titleOf(grid, texts),
    ...(texts.note === undefined ? {} : { note: texts.note }),
    creator: `fermistate ${grid.libraryVersion}`,
    equationOfState: grid.equationOfState,
    contributions: grid.contributions,
    composition: {
      name: composition.name,
      electronsPerNucleon: composition.electronsPerNucleon,
      meanMassNumber: composition.meanMassNumber,
      meanCharge: composition.meanCharge,
      species: composition.species.map(({ label, massNumber, chargeNumber, nucleonFraction }) => {
        return { label, massNumber, chargeNumber, nucleonFraction };
      }),
    },
    conventions,
    validity: grid.validity,
    ...(grid.findings === undefined ? {} : { findings: grid.findings }),
    ...(grid.refusedRows === undefined ? {} : { refusedRows: grid.refusedRows }),
    infinities: 'values beyond all numbers are the strings "INF" and "-INF"',
    rows: [orderOfRows, ...aboutRefused(grid.refusedRows)].join(" "),
    order: grid.order,
    shape: grid.shape,
  };
}
