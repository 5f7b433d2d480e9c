/**
 * What the W3C Recommendation of 17 December 2015, "Metadata Vocabulary for Tabular Data", requires of a document that
 * describes one table; section numbers and lists of properties from memory.
 */

type Json = Readonly<Record<string, unknown>>;

/** 5.7: properties that tables, schemas and columns hand down. */
const inherited =
  "aboutUrl datatype default lang null ordered propertyUrl required separator textDirection valueUrl".split(" ");
/** 5.4 tables, 5.5 schemas, 5.6 columns, 5.9 dialects: properties besides inherited and common ones. */
const allowed = {
  table: "@context @id @type url dialect notes suppressOutput tableDirection tableSchema transformations".split(" "),
  schema: "@id @type columns foreignKeys primaryKey rowTitles".split(" "),
  column: "@id @type name suppressOutput titles virtual".split(" "),
  dialect: (
    "@id @type commentPrefix delimiter doubleQuote encoding header headerRowCount lineTerminators quoteChar " +
    "skipBlankRows skipColumns skipInitialSpace skipRows trim"
  ).split(" "),
};
/** 5.8: common properties are prefixed names or URLs; prefixes are those of the RDFa initial context (2014), in part. */
const prefixes = ["dc", "dcterms", "dc11", "schema", "rdf", "rdfs", "skos", "prov", "xsd", "csvw"];
/** 5.11.1: built-in datatypes, in part. */
const builtIn = "number decimal integer long int short byte double float string".split(" ");

function common(key: string): boolean {
  const [prefix = "", name] = key.split(":");
  return name !== undefined && name !== "" && prefixes.includes(prefix);
}

function unknown(where: string, object: Json, properties: readonly string[]): string[] {
  return Object.keys(object)
    .filter((key) => !properties.includes(key) && !common(key))
    .map((key) => `${where}: ${key} is no property`);
}

/** 5.8 and 6.1: values of common properties are plain values, or objects with prefixed names and @type. */
function commonValues(where: string, value: unknown): string[] {
  if (value === null) return [`${where}: null`];
  if (Array.isArray(value)) return value.flatMap((one, i) => commonValues(`${where}[${i}]`, one));
  if (typeof value !== "object") return [];
  return Object.entries(value).flatMap(([key, inner]) => {
    if (key === "@type") return typeof inner === "string" && common(inner) ? [] : [`${where}: @type ${inner}`];
    if (["@id", "@value", "@language"].includes(key)) return [];
    return common(key) ? commonValues(`${where}.${key}`, inner) : [`${where}: ${key} is no prefixed name`];
  });
}

/** Everything that breaks a rule; empty for a valid description. */
export function complaintsAbout(document: Json): string[] {
  const found: string[] = [];
  const require = (holds: boolean, complaint: string): void => void (holds || found.push(complaint));

  // 5.2: the context is the URL, or it and an object with @base or @language.
  const context = document["@context"];
  const [url, more] = Array.isArray(context) ? context : [context, {}];
  require(url === "http://www.w3.org/ns/csvw", "@context must begin with http://www.w3.org/ns/csvw");
  require(Object.keys(more as Json).every(
    (key) => key === "@base" || key === "@language",
  ), "@context: @base, @language");

  // 5.4: url is required, a relative reference without spaces.
  require(typeof document["url"] === "string" && /^[\w.~!$&'()*+;=:@%/-]+$/.test(document["url"]), "url is required");
  found.push(...unknown("table", document, [...allowed.table, ...inherited]));
  for (const [key, value] of Object.entries(document)) if (common(key)) found.push(...commonValues(key, value));

  const dialect = (document["dialect"] ?? {}) as Json;
  found.push(...unknown("dialect", dialect, allowed.dialect));

  const schema = document["tableSchema"] as Json;
  found.push(...unknown("schema", schema, [...allowed.schema, ...inherited]));
  const columns = schema["columns"] as readonly Json[];
  const names = columns.map((column) => column["name"]);
  // 5.5: names of columns are unique; 5.6: a name is a variable of RFC 6570, 2.3, and does not begin with "_".
  require(new Set(names).size === names.length, "names of columns repeat");
  for (const column of columns) {
    const name = String(column["name"]);
    found.push(...unknown(name, column, [...allowed.column, ...inherited]));
    require(/^[A-Za-z0-9][A-Za-z0-9_.]*$/.test(name), `${name} is no name of a column`);
    require(typeof column["titles"] === "string" && column["titles"] !== "", `${name}: titles`);
    require(builtIn.includes(String(column["datatype"])), `${name}: datatype`);
    require(typeof column["required"] === "boolean", `${name}: required is true or false`);
    for (const [key, value] of Object.entries(column))
      if (common(key)) found.push(...commonValues(`${name}.${key}`, value));
  }
  // 5.5: the primary key refers to columns by name.
  const key = [schema["primaryKey"]].flat();
  require(key.every((name) => names.includes(name)), "primaryKey names no column");
  return found;
}
