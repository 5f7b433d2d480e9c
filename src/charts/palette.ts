/**
 * Colours of ordered lines, dark for the first to light for the last.
 *
 * Lightness falls along the list all the way, so the order survives colour blindness and grey print; the lightest has a
 * contrast of 3.06 to white, above the 3:1 of WCAG 2.2 (1.4.11, non-text contrast).
 */
export const palette: readonly string[] = [
  "#1d1147",
  "#38207f",
  "#5d2391",
  "#872a8a",
  "#b0337b",
  "#cf4a60",
  "#dc6145",
  "#e2762a",
];

/** `count` colours (1 to 8), spread over the whole list. */
export function colours(count: number): readonly string[] {
  const last = palette.length - 1;
  return Array.from({ length: count }, (_, i) => palette[count === 1 ? 2 : Math.round((i * last) / (count - 1))]!);
}

/** Greys of everything that is not data. */
export const ink = { title: "#1a1a1a", label: "#3d3d3d", tick: "#5a5a5a", axis: "#8c8c8c", grid: "#ebebeb" } as const;
