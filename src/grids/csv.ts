/**
 * A grid as CSV (RFC 4180) and its description (CSV on the Web).
 *
 * First row: titles of the form "pressure [dyn/cm^2]"; then one row per point, records ended by CR LF as RFC 4180, 2.1
 * has it. The description is a document of the W3C Recommendation of 17 December 2015 "Metadata Vocabulary for Tabular
 * Data"; readers look for it beside FILE.csv under the name FILE.csv-metadata.json ("Model for Tabular Data and
 * Metadata on the Web", 5.3). Units stand in `schema:unitText` (schema.org), column by column.
 */
import { FermistateError } from "../errors.js";
import { joined, pieceLength } from "./chunks.js";
import { conventions, type GridTexts, orderOfRows, titleOf } from "./description.js";
import { type ColumnName, columnOf, type Grid } from "./grid.js";
import { numbersText } from "./number-text.js";
import { aboutRefused } from "./refused.js";

/**
 * A grid as CSV text. Numbers read back to the same bits; infinities are INF and -INF; rows that are
 * refused have empty fields.
 *
 * @throws FermistateError `too-large` where the text is longer than a string may be: use {@link gridToCsvPieces}
 */
export function gridToCsv(grid: Grid): string {
  return joined(gridToCsvPieces(grid), "gridToCsvPieces");
}

/** The text of {@link gridToCsv} in pieces of about 64 kB, so that memory stays bounded. */
export function* gridToCsvPieces(grid: Grid): Generator<string, void, undefined> {
  const columns = grid.columnNames.map((name) => grid.columns[name]!);
  const record = new Array<number>(columns.length).fill(0);
  let piece = `${grid.columnNames.map((name) => field(titleOfColumn(name))).join(",")}\r\n`;
  for (let row = 0; row < grid.rows; row++) {
    for (let i = 0; i < columns.length; i++) record[i] = columns[i]![row]!;
    piece += `${numbersText(record, "")}\r\n`;
    if (piece.length < pieceLength) continue;
    yield piece;
    piece = "";
  }
  if (piece !== "") yield piece;
}

/** Name under which readers of CSV on the Web look for the description of a CSV file. */
export function csvMetadataName(csvName: string): string {
  return `${csvName}-metadata.json`;
}

/**
 * The CSV on the Web description of {@link gridToCsv}'s text, as JSON text.
 *
 * @param csvName - name of the CSV file, without folders; write the description to `csvMetadataName(csvName)` beside it
 * @throws FermistateError `invalid-option` for a name that is empty or holds a folder
 */
export function gridToCsvMetadata(grid: Grid, csvName: string, texts: GridTexts = {}): string {
  if (typeof csvName !== "string" || !/^[^/\\\0]+$/.test(csvName)) {
    const allowed = "the name of a file, without folders";
    throw new FermistateError("invalid-option", { argument: "csvName", given: csvName, allowed });
  }
  const document = {
    "@context": ["http://www.w3.org/ns/csvw", { "@language": "en" }],
    url: encodeURIComponent(csvName),
    "dc:title": titleOf(grid, texts),
    "dc:creator": `fermistate ${grid.libraryVersion}`,
    "dc:description": [
      ...(texts.note === undefined ? [] : [texts.note]),
      ...conventions,
      orderOfRows,
      ...aboutRefused(grid.refusedRows),
    ],
    "rdfs:comment": grid.validity,
    "schema:additionalProperty": [
      property("equation of state", grid.equationOfState),
      ...grid.contributions.map((name) => property("contribution", name)),
      property("temperatures", grid.shape[0]),
      property("densities", grid.shape[1]),
      ...grid.composition.species.map((one) => property(`nucleon fraction of ${one.label}`, one.nucleonFraction, "1")),
      property("electrons per nucleon", grid.composition.electronsPerNucleon, "1"),
      property("mean mass number of the nuclei", grid.composition.meanMassNumber, "1"),
      property("mean charge number of the nuclei", grid.composition.meanCharge, "1"),
      ...(grid.findings ?? []).flatMap(({ code, strained, outside }) => [
        property(`points where ${code} is strained`, strained, "1"),
        property(`points where ${code} is outside its range`, outside, "1"),
      ]),
      ...(grid.refusedRows ?? []).map(({ reason, code, meaning, rows }) =>
        property(`rows with refused = ${reason}: ${meaning} (${code})`, rows, "1"),
      ),
    ],
    dialect: { encoding: "utf-8", delimiter: ",", header: true, headerRowCount: 1, lineTerminators: ["\r\n"] },
    tableSchema: {
      columns: grid.columnNames.map((name) => ({
        name,
        titles: titleOfColumn(name),
        "dc:description": columnOf(name).description,
        datatype: "double",
        required: grid.refusedRows === undefined || ["density", "temperature", "refused"].includes(name),
        "schema:unitText": columnOf(name).unit,
      })),
      primaryKey: [...grid.order],
    },
  };
  return `${JSON.stringify(document, null, 2)}\n`;
}

/** "pressure [dyn/cm^2]". */
function titleOfColumn(name: ColumnName): string {
  return `${name} [${columnOf(name).unit}]`;
}

/** A named value of the whole table (schema.org's PropertyValue). */
function property(name: string, value: string | number, unit?: string): Record<string, string | number> {
  const common = { "@type": "schema:PropertyValue", "schema:name": name, "schema:value": value };
  return unit === undefined ? common : { ...common, "schema:unitText": unit };
}

/** A field of RFC 4180: quoted where it must be. */
function field(text: string): string {
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
