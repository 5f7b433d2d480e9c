/** The check of descriptions finds what it is for. */
import { expect, test } from "vitest";
import { complaintsAbout } from "./csvw.js";

const column = { name: "a", titles: "a [1]", datatype: "double", required: true };
const good = {
  "@context": "http://www.w3.org/ns/csvw",
  url: "a.csv",
  "dc:title": "A",
  tableSchema: { columns: [column], primaryKey: "a" },
};

test("a valid description has no complaints", () => expect(complaintsAbout(good)).toEqual([]));

test.each([
  ["another context", { ...good, "@context": "http://example.org/" }],
  ["no url", { ...good, url: undefined }],
  ["a url with a space", { ...good, url: "a b.csv" }],
  ["an unknown property", { ...good, title: "A" }],
  ["an unknown prefix", { ...good, "mine:title": "A" }],
  ["a bare name inside a common property", { ...good, "schema:about": { name: "A" } }],
  ["an unknown property of a dialect", { ...good, dialect: { separator: "," } }],
  ["a name with a minus", { ...good, tableSchema: { columns: [{ ...column, name: "a-b" }] } }],
  ["a repeated name", { ...good, tableSchema: { columns: [column, column] } }],
  ["an unknown datatype", { ...good, tableSchema: { columns: [{ ...column, datatype: "real" }] } }],
  ["a key that is no column", { ...good, tableSchema: { columns: [column], primaryKey: ["b"] } }],
])("%s is found", (_, document) => expect(complaintsAbout(document).length).toBeGreaterThan(0));
