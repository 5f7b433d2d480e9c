/**
 * Colours of a map: the scale "cividis" of Nunez, Anderton & Renslow 2018 (PLoS ONE 13, e0199239).
 *
 * Made so that equal steps look equal, to readers with red-green blindness too, and lightness rises all the way, so that a
 * grey print keeps the order. Ten anchors (from memory; the test holds their lightness to the CIE 1976 formula), linear
 * in sRGB between them.
 */

/** Anchors at 0, 1/9, ... 1, red, green and blue from 0 to 255. */
const anchors: readonly (readonly [number, number, number])[] = [
  [0, 32, 77],
  [0, 51, 111],
  [57, 72, 107],
  [87, 92, 109],
  [112, 113, 115],
  [138, 135, 121],
  [166, 157, 117],
  [196, 181, 108],
  [228, 207, 91],
  [255, 234, 70],
];

/** The colour of a share from 0 (dark) to 1 (light), as "#rrggbb". */
export function colourAt(share: number): string {
  const at = Math.min(Math.max(share, 0), 1) * (anchors.length - 1);
  const below = Math.min(Math.floor(at), anchors.length - 2);
  const mixed = anchors[below]!.map((low, i) => low + (anchors[below + 1]![i]! - low) * (at - below));
  return `#${mixed.map((one) => Math.round(one).toString(16).padStart(2, "0")).join("")}`;
}
