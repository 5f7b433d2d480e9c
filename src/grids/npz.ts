/**
 * Named arrays, and grids, as NumPy's .npz bytes: a ZIP archive of .npy members, stored without compression.
 *
 * In Python: `data = numpy.load("FILE.npz")`, then `data["pressure"]`, an array of one row per temperature, and
 * `json.loads(str(data["description"]))` for units, composition and where the numbers hold.
 */
import { FermistateError } from "../errors.js";
import { refuseBytes, requireBytes } from "./bytes.js";
import { conventions, type GridTexts, titleOf } from "./description.js";
import { columnOf, type Grid } from "./grid.js";
import { arrayToNpy, contentFromNpy, type NumberArray, readArray, textToNpy } from "./npy.js";
import { fromZip, toZip } from "./zip.js";

/**
 * Arrays and texts by name as .npz bytes; the same ones in the same order give the same bytes.
 *
 * @param arrays - names are printable ASCII without / and \
 * @throws FermistateError `invalid-option`, `length-mismatch`, `too-large` (4 GiB or 65535 members)
 * @example
 * ```ts
 * import { arraysFromNpz, arraysToNpz } from "fermistate/grids";
 * const bytes = arraysToNpz({ pressure: { shape: [2], values: Float64Array.of(1e23, 2e23) }, source: "my table" });
 * arraysFromNpz(bytes).get("source"); // => "my table"
 * ```
 */
export function arraysToNpz(arrays: Readonly<Record<string, NumberArray | string>>): Uint8Array {
  if (typeof arrays !== "object" || arrays === null) {
    const allowed = "an object of arrays { shape, values } and texts by name";
    throw new FermistateError("invalid-option", { argument: "arrays", given: arrays, allowed });
  }
  const members = Object.entries(arrays).map(([name, array]) => {
    if (!/^[\x20-\x7e]{1,200}$/.test(name) || /[/\\]/.test(name)) {
      const allowed = "1 to 200 printable ASCII characters without / and \\";
      throw new FermistateError("invalid-option", { argument: "name", given: name, allowed });
    }
    const bytes = typeof array === "string" ? textToNpy(array) : arrayToNpy(readArray(name, array));
    return { name: `${name}.npy`, bytes };
  });
  return toZip(members);
}

/**
 * The arrays and texts of .npz bytes, in the order of the archive.
 *
 * Members are numbers as `arrayFromNpy` reads them, or texts without axes. Memory is bounded by twice the bytes given.
 * @throws FermistateError `invalid-file` where the bytes are not a whole, undamaged archive of such members (the message says
 * which member and why; compressed members are refused); `invalid-option` for no Uint8Array
 */
export function arraysFromNpz(bytes: Uint8Array): ReadonlyMap<string, NumberArray | string> {
  requireBytes(bytes);
  const found = new Map<string, NumberArray | string>();
  for (const { name, bytes: content } of fromZip(bytes)) {
    const where = `bytes, member ${name.slice(0, 60)}`;
    if (!name.endsWith(".npy")) refuseBytes(where, "another ending", "members whose names end in .npy");
    found.set(name.slice(0, -".npy".length), contentFromNpy(where, content));
  }
  return found;
}

/**
 * A grid as .npz bytes: the axes `density` and `temperature`; every other column as an array of shape
 * (temperatures, densities); and `description`, JSON text of what they mean.
 * Rows that are refused have NaN; `refused` tells why, and its numbers stand in the description.
 *
 * @throws FermistateError `too-large` from 4 GiB
 */
export function gridToNpz(grid: Grid, texts: GridTexts = {}): Uint8Array {
  const { composition, axes, columnNames, columns } = grid;
  const description = {
    title: titleOf(grid, texts),
    ...(texts.note === undefined ? {} : { note: texts.note }),
    creator: `fermistate ${grid.libraryVersion}`,
    equationOfState: grid.equationOfState,
    contributions: grid.contributions,
    composition: Object.fromEntries(composition.species.map((one) => [one.label, one.nucleonFraction])),
    conventions,
    validity: grid.validity,
    ...(grid.refusedRows === undefined ? {} : { refusedRows: grid.refusedRows, empty: "NaN, where refused is not 0" }),
    columns: Object.fromEntries(columnNames.map((name) => [name, columnOf(name)])),
  };
  const axis = (values: readonly number[]): NumberArray => ({
    shape: [values.length],
    values: Float64Array.from(values),
  });
  const arrays: Record<string, NumberArray | string> = {
    density: axis(axes.density.values),
    temperature: axis(axes.temperature.values),
  };
  for (const name of columnNames.slice(2)) arrays[name] = { shape: grid.shape, values: columns[name]! };
  return arraysToNpz({ ...arrays, description: JSON.stringify(description) });
}
