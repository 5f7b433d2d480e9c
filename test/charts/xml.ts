/** A strict reader of the little XML that charts are made of. */

/** Elements of a text as a strict reader sees them; throws where tags do not match or a character is not escaped. */
export function readXml(text: string): { name: string; attributes: Record<string, string>; content: string }[] {
  const found: { name: string; attributes: Record<string, string>; content: string }[] = [];
  const open: { name: string; at: number; index: number }[] = [];
  for (const match of text.matchAll(/<(\/?)([a-z]+)((?: [\w:-]+="[^"<]*")*)(\/?)>|([<>])|&(?!amp;|lt;|gt;|quot;)/g)) {
    const [whole, closing, name = "", list = "", single] = match;
    if (match[2] === undefined) throw new Error(`unescaped ${whole} at ${match.index}`);
    if (closing === "/") {
      const last = open.pop();
      if (last?.name !== name) throw new Error(`</${name}> closes ${last?.name}`);
      found[last.index]!.content = text.slice(last.at, match.index);
      continue;
    }
    const attributes = Object.fromEntries([...list.matchAll(/([\w:-]+)="([^"]*)"/g)].map((one) => [one[1]!, one[2]!]));
    found.push({ name, attributes, content: "" });
    if (single !== "/") open.push({ name, at: match.index + whole.length, index: found.length - 1 });
  }
  if (open.length > 0) throw new Error(`${open.at(-1)?.name} stays open`);
  return found;
}
