/** Maps of a certificate: what is drawn is the certificate's. Its numbers are invented here; the drawing is tested in test/charts. */
import { expect, test } from "vitest";
import type { Certificate } from "../../src/certify/certify.js";
import { certificateMap } from "../../src/certify/error-map.js";

const density = [1e4, 1e6, 1e8];
const temperature = [1e7, 1e8];
const pairs = temperature.flatMap((t) => density.map((rho) => [rho, t] as const));
const made = (places: readonly (readonly [number, number])[], errors: readonly number[]): Certificate =>
  ({
    libraryVersion: "0.1.0",
    composition: { name: "C12", species: [] },
    digits: 20,
    quantities: [{ name: "pressure" }],
    columns: {
      density: places.map(([rho]) => rho),
      temperature: places.map(([, t]) => t),
      relative: [errors],
      scaled: [null],
    },
  }) as unknown as Certificate;

/** Fills of the cells of a map, in order of appearance. */
const fills = (svg: string): number => new Set(svg.match(/fill="#[0-9a-f]{6}"/g)).size;

test("points on two axes are cells; a perfect value is the lowest colour, a missing pair is hatched", () => {
  const errors = [1e-16, 2e-16, 4e-16, 8e-16, 0, 3.2e-15];
  const svg = certificateMap(made(pairs, errors), "pressure");
  expect(svg).toMatch(/^<svg /);
  expect(svg).toContain("Pressure: error against 20-digit arithmetic");
  expect(svg).toContain("6 points");
  expect(svg).not.toContain("no point, or refused");
  const holed = certificateMap(made(pairs.slice(1), errors.slice(1)), "pressure");
  expect(holed).toContain("no point, or refused");
  expect(fills(svg)).toBeGreaterThan(3);
});

test("points of a region are gathered: the largest error of a cell counts", () => {
  const places = Array.from({ length: 400 }, (_, i) => {
    return [1e4 * 10 ** ((5 * ((i * 0.754877) % 1)) as number), 1e6 * 10 ** (3 * ((i * 0.56984) % 1))] as const;
  });
  const flat = certificateMap(
    made(
      places,
      places.map(() => 1e-16),
    ),
    "pressure",
  );
  const spike = certificateMap(
    made(
      places,
      places.map((_, i) => (i === 200 ? 1e-6 : 1e-16)),
    ),
    "pressure",
  );
  expect(spike).toContain("10⁻⁶");
  expect(spike).not.toBe(flat);
});

test("a quantity that was not certified is refused", () => {
  expect(() => certificateMap(made(pairs, [1, 1, 1, 1, 1, 1]), "gamma1")).toThrow(
    expect.objectContaining({ code: "unavailable-quantity" }),
  );
});
