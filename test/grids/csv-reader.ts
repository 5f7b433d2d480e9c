/** A reader of CSV written from RFC 4180 alone: records ended by CR LF, fields that may be quoted, quotes doubled. */
export function readCsv(text: string): string[][] {
  const records: string[][] = [];
  let record: string[] = [];
  let field = "";
  let i = 0;
  const endField = (): void => {
    record.push(field);
    field = "";
  };
  while (i < text.length) {
    if (text[i] === '"' && field === "") {
      for (i++; ; i++) {
        if (i >= text.length) throw new Error("a quoted field has no end");
        if (text[i] !== '"') field += text[i];
        else if (text[i + 1] === '"') field += text[i++];
        else break;
      }
      i++;
      if (i < text.length && text[i] !== "," && !text.startsWith("\r\n", i))
        throw new Error("text after a quoted field");
    } else if (text[i] === ",") {
      endField();
      i++;
    } else if (text.startsWith("\r\n", i)) {
      endField();
      records.push(record);
      record = [];
      i += 2;
    } else {
      if (text[i] === '"' || text[i] === "\r" || text[i] === "\n") throw new Error(`a bare ${JSON.stringify(text[i])}`);
      field += text[i++];
    }
  }
  if (field !== "" || record.length > 0) throw new Error("the last record has no end");
  return records;
}

/**
 * A double of XML Schema 1.1 Part 2, 3.3.5 (W3C 2012): its lexical space and nothing else. The exponent must be a capital
 * E, as "Model for Tabular Data and Metadata on the Web" (W3C 2015), 6.4.2, has it; section numbers from memory.
 */
export function readDouble(text: string): number {
  if (/^[+-]?(\d+(\.\d*)?|\.\d+)(E[+-]?\d+)?$/.test(text)) return Number(text);
  const special: Record<string, number> = { INF: Number.POSITIVE_INFINITY, "-INF": Number.NEGATIVE_INFINITY };
  if (text in special) return special[text]!;
  throw new Error(`${JSON.stringify(text)} is no double`);
}
