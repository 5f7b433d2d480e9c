/**
 * Strips -> sheets whose second derivatives are continuous everywhere.
 *
 * Two blocks that share an edge may be cut differently. The coarser one rules: along the edge its value and its first and second
 * derivatives across are quintics in the edge's coordinate, and a quintic on part of an interval is again the quintic through
 * value, slope and curvature at the part's ends. So the finer block's nodes on the edge take their nine numbers from those three
 * quintics, and both sides are the same function there, to the second derivative across.
 */
import type { TablePlan } from "./plan.js";
import type { Strip } from "./strip.js";
import { joined } from "./strip.js";
import { firstNumbers } from "./surface.js";
import { NODE_LENGTH, type TableSheet } from "./table.js";
import { type EdgeStep, fillTrace } from "./trace.js";

/** Sheets of a table from all its strips, in their order. */
export function assembleSheets(plan: TablePlan, strips: readonly Strip[]): readonly TableSheet[] {
  const count = plan.temperature.blocks;
  return plan.sheets.map(({ phase }, s) => {
    const own = strips.map((strip) => strip.sheets[s]!);
    const levels = (pick: "densityLevels" | "temperatureLevels" | "exponents"): number[] =>
      own.flatMap((strip) => [...strip[pick]]);
    const sheet: TableSheet = {
      phase,
      densityLevels: Int8Array.from(levels("densityLevels")),
      temperatureLevels: Int8Array.from(levels("temperatureLevels")),
      exponents: Int16Array.from(levels("exponents")),
      nodes: joined(own.map((strip) => strip.nodes)),
    };
    join(sheet, plan.density.blocks, count, 1 / blockSize(plan.density), 1 / blockSize(plan.temperature));
    return sheet;
  });
}

const blockSize = ({ lowest, highest, blocks }: TablePlan["density"]): number => Math.log(highest / lowest) / blocks;

/** A block's place in the numbers of a sheet. */
interface Place {
  readonly first: number;
  readonly rows: number;
  readonly cells: number;
  readonly exponent: number;
}

/** Makes neighbours agree on their edges, in place. */
function join(sheet: TableSheet, across: number, up: number, perU: number, perV: number): void {
  const first = firstNumbers(sheet);
  const place = (p: number, q: number): Place | undefined => {
    const k = p * up + q;
    if (p < 0 || q < 0 || p >= across || q >= up || first[k]! < 0) return undefined;
    return {
      first: first[k]!,
      rows: 2 ** sheet.densityLevels[k]!,
      cells: 2 ** sheet.temperatureLevels[k]!,
      exponent: sheet.exponents[k]!,
    };
  };
  const { nodes } = sheet;
  const number = (block: Place, i: number, j: number): number =>
    block.first + NODE_LENGTH * (i * (block.cells + 1) + j);

  /** The nine numbers of one block's node become those of another's. */
  function copy(from: Place, at: number, to: Place, target: number): void {
    for (let k = 0; k < NODE_LENGTH; k++) nodes[target + k] = nodes[at + k]!;
    nodes[target]! += (from.exponent - to.exponent) * Math.LN2;
  }

  // Corners first: each takes its numbers from the block that comes first in order.
  for (let p = 0; p <= across; p++) {
    for (let q = 0; q <= up; q++) {
      const around: (readonly [Place | undefined, 0 | 1, 0 | 1])[] = [
        [place(p - 1, q - 1), 1, 1],
        [place(p - 1, q), 1, 0],
        [place(p, q - 1), 0, 1],
        [place(p, q), 0, 0],
      ];
      const corners = around.flatMap(([block, i, j]) =>
        block === undefined ? [] : [{ block, at: number(block, i * block.rows, j * block.cells) }],
      );
      const [owner, ...others] = corners;
      for (const { block, at } of others) copy(owner!.block, owner!.at, block, at);
    }
  }
  for (let p = 0; p < across; p++) {
    for (let q = 0; q < up; q++) {
      const here = place(p, q);
      if (here === undefined) continue;
      const right = place(p + 1, q);
      if (right !== undefined) {
        edge(
          here.cells,
          right.cells,
          (i) => number(here, here.rows, i),
          (i) => number(right, 0, i),
          here,
          right,
          1,
          perV,
        );
      }
      const above = place(p, q + 1);
      if (above !== undefined) {
        edge(
          here.rows,
          above.rows,
          (i) => number(here, i, here.cells),
          (i) => number(above, i, 0),
          here,
          above,
          3,
          perU,
        );
      }
    }
  }

  /** Nodes of one edge; `step` is the distance between orders of the derivative along it: 1 for ln T, 3 for ln rho. */
  function edge(
    cellsA: number,
    cellsB: number,
    atA: (i: number) => number,
    atB: (i: number) => number,
    a: Place,
    b: Place,
    step: EdgeStep,
    perUnit: number,
  ): void {
    const isA = cellsA <= cellsB;
    const [coarse, fine] = isA ? [a, b] : [b, a];
    const [cells, parts] = isA ? [cellsA, cellsB / cellsA] : [cellsB, cellsA / cellsB];
    const [from, to] = isA ? [atA, atB] : [atB, atA];
    const h = 1 / (perUnit * cells);
    for (let i = 0; i < cells; i++) {
      if (i > 0) copy(coarse, from(i), fine, to(i * parts));
      for (let k = 1; k < parts; k++) {
        const target = to(i * parts + k);
        fillTrace(nodes, from(i), from(i + 1), k / parts, h, step, nodes, target);
        nodes[target]! += (coarse.exponent - fine.exponent) * Math.LN2;
      }
    }
  }
}
