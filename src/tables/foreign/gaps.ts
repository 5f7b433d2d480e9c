/** Rows that lie on a mesh but for a few: which nodes have none, and which rows lie beside it. */
import { fewestNodes, type SortedRows } from "./columns.js";
import type { Places } from "./report.js";

/** Gaps of a mesh. */
export interface MeshGaps {
  /** Nodes without a row. */
  readonly missing: Places;
  /** Rows of the input at temperatures of their own. */
  readonly strayRows: readonly number[];
}

/** Share of the densities that must have a temperature for it to be one of the mesh. */
const common = 0.5;
/** Missing and stray rows, over all, up to which rows are a mesh with gaps. */
const mostGaps = 0.1;
/** Temperatures closer than this, relative, are one. */
const sameValue = 1e-10;

/** The gaps; undefined for rows that are no mesh. */
export function gapsOf({ density, temperature, starts, index }: SortedRows): MeshGaps | undefined {
  const densities = starts.length - 1;
  const order = Uint32Array.from(index, (_, k) => k).sort((a, b) => temperature[a]! - temperature[b]!);
  const missing: [number, number][] = [];
  const strayRows: number[] = [];
  let nodes = 0;
  for (let from = 0, to = 0; from < order.length; from = to) {
    const kelvin = temperature[order[from]!]!;
    while (to < order.length && temperature[order[to]!]! - kelvin <= sameValue * kelvin) to += 1;
    if (to - from < common * densities) {
      for (const row of order.subarray(from, to)) strayRows.push(index[row]!);
    } else {
      nodes += 1;
      const has = new Set(Array.from(order.subarray(from, to), (row) => density[row]!));
      for (let i = 0; has.size < densities && i < densities; i++) {
        const rho = density[starts[i]!]!;
        if (!has.has(rho)) missing.push([rho, kelvin]);
      }
    }
    if (missing.length + strayRows.length > mostGaps * order.length) return undefined;
  }
  if (nodes < fewestNodes) return undefined;
  missing.sort(([a, s], [b, t]) => a - b || s - t);
  return {
    missing: {
      density: Float64Array.from(missing, ([rho]) => rho),
      temperature: Float64Array.from(missing, ([, kelvin]) => kelvin),
    },
    strayRows: strayRows.sort((a, b) => a - b),
  };
}
