/**
 * A map of the errors of a certificate: SVG. Points on two axes are cells of their own; points of a region are gathered into
 * cells of equal ratios, each showing the largest error found in it.
 */
import { nameOf } from "../charts/labels.js";
import { chartMap } from "../charts/map.js";
import type { MapOptions } from "../charts/map-request.js";
import { FermistateError } from "../errors.js";
import type { QuantityName } from "../thermodynamics/quantities.js";
import type { Certificate } from "./certify.js";
import { type CertifiedQuantity, derivativeNames } from "./reference-quantities.js";

/** Errors below the rounding of a double are drawn as this. */
const floor = 1e-17;

/**
 * A map of the relative error of one quantity over density and temperature, as SVG text.
 *
 * @throws `unavailable-quantity` for a quantity that was not certified; `invalid-option` as `chartMap`, and for points that span no
 * area
 */
export function certificateMap(made: Certificate, quantity: CertifiedQuantity, options: MapOptions = {}): string {
  const k = made.quantities.findIndex(({ name }) => name === quantity);
  if (k < 0) {
    const allowed = `a quantity that was certified: ${made.quantities.map(({ name }) => name).join(", ")}`;
    throw new FermistateError("unavailable-quantity", { argument: "quantity", given: quantity, allowed });
  }
  const { density, temperature, relative } = made.columns;
  const errors = relative[k]!.map((one) => Math.max(one, floor));
  const isDerivative = (derivativeNames as readonly string[]).includes(quantity);
  const words = isDerivative ? quantity : nameOf(quantity as QuantityName);
  const warning = made.nodes === 0 ? "" : ` ${made.nodes} of them are nodes of a table and show no error of it.`;
  const cells = cellsOf(density, temperature, errors);
  return chartMap(
    { ...cells, label: `relative error of ${words}` },
    {
      title: `${words.charAt(0).toUpperCase()}${words.slice(1)}: error against ${made.digits}-digit arithmetic`,
      note: `fermistate ${made.libraryVersion}. ${made.composition.name}. ${density.length} points; the largest error of a cell.${warning}`,
      missing: "no point, or refused",
      ...options,
    },
  );
}

interface MapCells {
  readonly density: number[];
  readonly temperature: number[];
  readonly values: Float64Array;
}

function cellsOf(density: readonly number[], temperature: readonly number[], errors: readonly number[]): MapCells {
  const rows = axisOf(temperature);
  const columns = axisOf(density);
  const values = new Float64Array(rows.centres.length * columns.centres.length).fill(Number.NaN);
  errors.forEach((error, i) => {
    const at = rows.cell(temperature[i]!) * columns.centres.length + columns.cell(density[i]!);
    if (!(values[at]! >= error)) values[at] = error;
  });
  return { density: columns.centres, temperature: rows.centres, values };
}

/** Few different values are an axis; many are gathered, about two points a cell. */
function axisOf(values: readonly number[]): { centres: number[]; cell: (value: number) => number } {
  const different = [...new Set(values)].sort((a, b) => a - b);
  if (different.length * different.length <= 4 * values.length || different.length < 3) {
    return { centres: different, cell: (value) => different.indexOf(value) };
  }
  const [low, high] = [Math.log(different.find((value) => value > 0)!), Math.log(different.at(-1)!)];
  const count = Math.max(2, Math.round(Math.sqrt(values.length / 2)));
  const cell = (value: number): number => {
    const place = value > 0 ? Math.floor((count * (Math.log(value) - low)) / (high - low)) : 0;
    return Math.min(Math.max(place, 0), count - 1);
  };
  return { centres: Array.from({ length: count }, (_, i) => Math.exp(low + ((high - low) * (i + 0.5)) / count)), cell };
}
