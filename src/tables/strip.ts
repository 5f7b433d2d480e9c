/**
 * One strip of a table: all blocks over one interval of density, each cut into as many cells as its accuracy asks for.
 *
 * A strip depends on the plan and its own number alone, so strips can be made anywhere in any order. Density and temperature
 * are refined apart: a front in temperature, such as the onset of pairs, costs no nodes in density.
 */
import { FermistateError, isFermistateError } from "../errors.js";
import { MEMBER_COUNT, SECOND_ORDER_COUNT } from "../thermodynamics/free-energy.js";
import { fillCold } from "./cold.js";
import { fillErrors } from "./errors-at.js";
import { addTableMembers } from "./members.js";
import type { SheetPlan, TablePlan } from "./plan.js";
import { type Column, columnOf, heatAt, heatFromDifference, heatFromZero } from "./sampler.js";
import { fillSurface, type Surface, surfaceOf } from "./surface.js";
import { highestLevel, NODE_LENGTH, type SheetPhase, type TableAxis } from "./table.js";
import { fillTrace } from "./trace.js";

/** The blocks of one sheet in a strip, in the form of `TableSheet`. */
interface SheetStrip {
  readonly phase: SheetPhase;
  readonly densityLevels: Int8Array;
  readonly temperatureLevels: Int8Array;
  readonly exponents: Int16Array;
  readonly nodes: Float64Array;
}

/** One strip. */
export interface Strip {
  /** Its number along density. */
  readonly index: number;
  readonly sheets: readonly SheetStrip[];
  /** Blocks that did not reach the accuracy. */
  readonly blocksAboveTarget: number;
}

/** A block's own nodes and how well they do. */
interface Block {
  readonly levels: readonly [density: number, temperature: number];
  readonly exponent: number;
  readonly nodes: Float64Array;
  /** Largest error along density, along temperature, and in the middle of cells, relative to the accuracy asked for. */
  readonly errors: readonly [density: number, temperature: number, middle: number];
}

/** Level to begin with, by accuracy: enough cells for a fair sample of what is wrong. */
const firstLevel = (accuracy: number): number => (accuracy < 1e-4 ? 2 : 1);
/** The finished table is measured elsewhere than the cells were: strive for this part of the accuracy. */
const margin = 0.5;

/** Makes strip `index` of a plan. */
export function buildStrip(plan: TablePlan, index: number): Strip {
  let blocksAboveTarget = 0;
  const sheets = plan.sheets.map((sheet): SheetStrip => {
    const count = plan.temperature.blocks;
    const densityLevels = new Int8Array(count).fill(-1);
    const temperatureLevels = new Int8Array(count).fill(-1);
    const exponents = new Int16Array(count);
    const [bottom, top] = sheet.blocksAt(index);
    const column = columns(plan, sheet, index, bottom);
    const blocks: (Block | undefined)[] = [];
    for (let q = bottom; q < top; q++) blocks[q] = refine(plan, sheet, index, q, column);
    smoothEdges(plan, blocks, (q, m, n) => fill(plan, sheet, index, q, column, m, n));
    const parts: Float64Array[] = [];
    blocks.forEach((block, q) => {
      if (block === undefined) return;
      densityLevels[q] = block.levels[0];
      temperatureLevels[q] = block.levels[1];
      exponents[q] = block.exponent;
      parts.push(block.nodes);
      if (!(Math.max(...block.errors) <= 1)) blocksAboveTarget += 1;
    });
    return { phase: sheet.phase, densityLevels, temperatureLevels, exponents, nodes: joined(parts) };
  });
  return { index, sheets, blocksAboveTarget };
}

/** Concatenation. */
export function joined(parts: readonly Float64Array[]): Float64Array {
  const all = new Float64Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    all.set(part, at);
    at += part.length;
  }
  return all;
}

/** ln rho at node `i` of 2^highestLevel in strip `index`. */
function densityAt({ density }: TablePlan, index: number, i: number): number {
  const low = Math.log(density.lowest);
  const steps = density.blocks * 2 ** highestLevel;
  const k = index * 2 ** highestLevel + i;
  return k === steps ? Math.log(density.highest) : low + ((Math.log(density.highest) - low) * k) / steps;
}

/** Columns of a sheet in a strip by their place on the finest mesh, each made once. */
function columns(plan: TablePlan, sheet: SheetPlan, index: number, bottom: number): (i: number) => Column {
  const made = new Map<number, Column>();
  const lowest = Math.exp(plan.rungs.ends[bottom]!);
  function start(u: number): readonly [number, number, number] {
    if (bottom === 0 && sheet === plan.sheets.at(-1)) {
      return plan.cold.temperature === 0 ? heatFromZero(sheet.sampler, u, lowest) : heatAt(sheet.sampler, u, lowest);
    }
    plan.lookUp.at[0] = u;
    fillCold(plan.lookUp, 2);
    const [f, fu, fuu] = plan.lookUp.out;
    return heatFromDifference(sheet.sampler, u, lowest, [f!, fu!, fuu!]);
  }
  return (i) => {
    let column = made.get(i);
    if (column === undefined) {
      const u = densityAt(plan, index, i);
      column = columnOf(sheet.sampler, u, plan.rungs, bottom, start(u));
      made.set(i, column);
    }
    return column;
  };
}

/** Cuts a block until its cells are accurate, or cannot become so; undefined where the matter cannot be tabulated. */
function refine(
  plan: TablePlan,
  sheet: SheetPlan,
  index: number,
  q: number,
  column: (i: number) => Column,
): Block | undefined {
  let m = Math.min(firstLevel(plan.accuracy), plan.finestLevel);
  let n = m;
  try {
    let best = fill(plan, sheet, index, q, column, m, n);
    while (Math.max(...best.errors) > 1) {
      const [density, temperature, middle] = best.errors;
      const steps = (error: number): number => Math.min(2, Math.ceil(Math.log2(error) / 4));
      // An error in the middle that neither direction shows alone is cut in both.
      const alone = Math.max(density, temperature) <= 1 ? middle : 0;
      const finer = [Math.max(density, alone), Math.max(temperature, alone)].map((error) =>
        error > 1 ? steps(error) : 0,
      );
      const next = [Math.min(m + finer[0]!, plan.finestLevel), Math.min(n + finer[1]!, plan.finestLevel)];
      if (next[0] === m && next[1] === n) break;
      [m, n] = next as [number, number];
      const tried = fill(plan, sheet, index, q, column, m, n);
      // Rounding: a finer mesh that does no better is not worth its bytes.
      if (Math.max(...tried.errors) > 0.7 * Math.max(...best.errors)) break;
      best = tried;
    }
    return best;
  } catch (error) {
    if (isFermistateError(error)) return undefined;
    throw error;
  }
}

/**
 * Cuts coarse blocks finer where their error along density, small as it is, would shake a neighbour in temperature: on the common edge
 * the finer block takes its numbers from the coarser one, and divides the difference by the square of its own low cells.
 */
function smoothEdges(
  plan: TablePlan,
  blocks: (Block | undefined)[],
  make: (q: number, m: number, n: number) => Block,
): void {
  for (let isDone = false; !isDone; ) {
    isDone = true;
    for (let q = 0; q + 1 < blocks.length; q++) {
      const [low, high] = [blocks[q], blocks[q + 1]];
      if (low === undefined || high === undefined || low.levels[0] === high.levels[0]) continue;
      if (!(edgeError(plan, low, high) > plan.accuracy * margin)) continue;
      const isLow = low.levels[0] < high.levels[0];
      const [coarse, fine] = isLow ? [low, high] : [high, low];
      blocks[isLow ? q : q + 1] = make(isLow ? q : q + 1, fine.levels[0], coarse.levels[1]);
      isDone = false;
    }
  }
}

/** About the largest relative error of the heat capacity that the edge between two blocks of a strip brings to the finer one. */
function edgeError(plan: TablePlan, low: Block, high: Block): number {
  const isLow = low.levels[0] < high.levels[0];
  const [coarse, fine] = isLow ? [low, high] : [high, low];
  const node = (block: Block, i: number): number =>
    NODE_LENGTH * (i * (2 ** block.levels[1] + 1) + (block === low ? 2 ** block.levels[1] : 0));
  const size = ({ lowest, highest, blocks }: TableAxis): number => Math.log(highest / lowest) / blocks;
  const h = size(plan.density) / 2 ** coarse.levels[0];
  const cell = size(plan.temperature) / 2 ** fine.levels[1];
  const parts = 2 ** (fine.levels[0] - coarse.levels[0]);
  const shift = (coarse.exponent - fine.exponent) * Math.LN2;
  const hanging = new Float64Array(NODE_LENGTH);
  let largest = 0;
  for (let i = 0; i < 2 ** coarse.levels[0]; i++) {
    for (let k = 1; k < parts; k++) {
      fillTrace(coarse.nodes, node(coarse, i), node(coarse, i + 1), k / parts, h, 3, hanging, 0);
      const own = node(fine, i * parts + k);
      const off = (slot: number): number =>
        Math.abs(hanging[slot]! + (slot === 0 ? shift : 0) - fine.nodes[own + slot]!);
      const slope = fine.nodes[own + 1]!;
      const heat = fine.nodes[own + 2]! + slope * slope - slope;
      // Largest second derivatives of the basis: 5.8, 3.9, 1.
      largest = Math.max(largest, (5.8 * off(0) + 3.9 * off(1) * cell + off(2) * cell * cell) / (cell * cell * heat));
    }
  }
  return largest;
}

/** Nodes of a block at given levels, and its errors. */
function fill(
  plan: TablePlan,
  sheet: SheetPlan,
  index: number,
  q: number,
  column: (i: number) => Column,
  m: number,
  n: number,
): Block {
  const [rows, cells] = [2 ** m, 2 ** n];
  const nodes = new Float64Array(NODE_LENGTH * (rows + 1) * (cells + 1));
  const place = (i: number): number => i * 2 ** (highestLevel - m);
  const exponent = Math.floor(Math.log2(column(0).at(q)[0]));
  if (!(Math.abs(exponent) <= 1000)) {
    throw new FermistateError("unstable", { argument: "heat function", given: exponent, allowed: "within 2^1000" });
  }
  for (let i = 0; i <= rows; i++) column(place(i)).fillNodes(q, n, exponent, nodes, NODE_LENGTH * (cells + 1) * i);
  const one: TableAxis = { ...blockAxis(plan.density, index), blocks: 1 };
  const other: TableAxis = { ...blockAxis(plan.temperature, q), blocks: 1 };
  const surface = surfaceOf(
    {
      phase: sheet.phase,
      densityLevels: Int8Array.of(m),
      temperatureLevels: Int8Array.of(n),
      exponents: Int16Array.of(exponent),
      nodes,
    },
    one,
    other,
  );
  return { levels: [m, n], exponent, nodes, errors: measure(plan, sheet, surface, rows, cells) };
}

function blockAxis({ lowest, highest, blocks }: TableAxis, i: number): { lowest: number; highest: number } {
  const at = (k: number): number => (k === blocks ? highest : lowest * (highest / lowest) ** (k / blocks));
  return { lowest: at(i), highest: at(i + 1) };
}

/** Largest errors over the cells of a block: in the middle of their sides and of themselves, relative to the aim. */
function measure(
  plan: TablePlan,
  sheet: SheetPlan,
  surface: Surface,
  rows: number,
  cells: number,
): readonly [number, number, number] {
  const largest: [number, number, number] = [0, 0, 0];
  const aim = plan.accuracy * margin;
  const members = new Float64Array(MEMBER_COUNT);
  const whole = new Float64Array(MEMBER_COUNT);
  const errors = new Float64Array(6);
  const at = (i: number, j: number, kind: 0 | 1 | 2): void => {
    const u = surface.u.start + i / (surface.u.perUnit * rows);
    const v = surface.v.start + j / (surface.v.perUnit * cells);
    if (!sheet.isNear(u, v)) return;
    fillTableMembers(plan, surface, u, v, members);
    sheet.sampler.sample(u, v, 2);
    fillWhole(plan, sheet, u, v, whole);
    fillErrors(members, sheet.sampler.members, whole, errors);
    for (const error of errors) if (!(error <= aim * largest[kind])) largest[kind] = error / aim;
  };
  for (let i = 0; i <= rows; i++) {
    for (let j = 0; j <= cells; j++) {
      if (i < rows) at(i + 0.5, j, 0);
      if (j < cells) at(i, j + 0.5, 1);
      if (i < rows && j < cells) at(i + 0.5, j + 0.5, 2);
    }
  }
  return largest;
}

/** Members of the table at a point of one surface. */
export function fillTableMembers(plan: TablePlan, surface: Surface, u: number, v: number, members: Float64Array): void {
  surface.at[0] = u;
  surface.at[1] = v;
  plan.lookUp.at[0] = u;
  fillSurface(surface, 2);
  fillCold(plan.lookUp, 2);
  members.fill(0);
  addTableMembers(plan.lookUp, surface, 2, members);
}

/** Members of the whole matter, with what stands beside the table: the sampler's last point. */
export function fillWhole(plan: TablePlan, sheet: SheetPlan, u: number, v: number, whole: Float64Array): void {
  const own = sheet.sampler.members;
  if (plan.beside.length === 0) {
    whole.set(own);
    return;
  }
  plan.besideSampler.sample(u, v, 2);
  for (let k = 0; k < SECOND_ORDER_COUNT; k++) whole[k] = own[k]! + plan.besideSampler.members[k]!;
}
