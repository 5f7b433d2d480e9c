/** SVG 1.1 as text: escaped, with fixed digits, so that the same chart is the same bytes. */

/** Fonts that systems have, so that a chart needs no file beside it. */
export const fontStack: string = "system-ui, -apple-system, 'Segoe UI', Roboto, 'Helvetica Neue', Arial, sans-serif";

type Attributes = Readonly<Record<string, string | number>>;

/** An element; `content` is SVG already. */
export function element(name: string, attributes: Attributes, content?: string): string {
  const list = Object.entries(attributes).map(([key, value]) => ` ${key}="${escaped(attributeText(value))}"`);
  return content === undefined ? `<${name}${list.join("")}/>` : `<${name}${list.join("")}>${content}</${name}>`;
}

/** A text element with plain text inside. */
export function text(x: number, y: number, size: number, fill: string, words: string, more: Attributes = {}): string {
  return element("text", { x, y, "font-size": size, fill, ...more }, escaped(words));
}

/** Text with the characters replaced that XML gives a meaning, or does not allow. */
export function escaped(words: string): string {
  const legal = [...words].filter((one) => one >= " " && !/[\ufffe\uffff]/.test(one)).join("");
  return legal.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll(">", "&gt;").replaceAll('"', "&quot;");
}

/** Two digits after the point, none where they are zero. */
function attributeText(value: string | number): string {
  return typeof value === "number" ? String(Number(value.toFixed(2))) : value;
}

/** Width of a text in pixels, estimated: no font is at hand, and charts leave room. */
export function widthOf(words: string, size: number): number {
  return 0.53 * size * [...words].length;
}

/** Words in lines of at most `width` pixels. */
export function wrapped(words: string, size: number, width: number): string[] {
  const lines: string[] = [];
  let line = "";
  for (const word of words.split(" ")) {
    const longer = line === "" ? word : `${line} ${word}`;
    if (line !== "" && widthOf(longer, size) > width) {
      lines.push(line);
      line = word;
    } else line = longer;
  }
  return line === "" ? lines : [...lines, line];
}
