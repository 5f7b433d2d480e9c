/** The plan of a table: its axes, its sheets, the cold curve, all decided before the first block is filled. */
import { FermistateError, requireFinite } from "../errors.js";
import { type Composition, requireComposition } from "../matter/composition.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";
import { type ColdLookUp, coldLookUp } from "./cold.js";
import { coldNode, type Rungs, type Sampler, samplerOf } from "./sampler.js";
import {
  COLD_LENGTH,
  type ColdCurve,
  type FreezingLine,
  highestLevel,
  type SheetPhase,
  type TableAxis,
} from "./table.js";

/** What {@link buildTable} is asked for. */
export interface TableOptions {
  /** Lowest and highest baryon mass density, g/cm^3. */
  readonly density: readonly [lowest: number, highest: number];
  /** Lowest and highest temperature, K. */
  readonly temperature: readonly [lowest: number, highest: number];
  /**
   * Largest relative error of any quantity up to second order, 1e-10 to 0.1. Pressure, energy and entropy come out 10 to 1000
   * times better.
   * @defaultValue 1e-6
   */
  readonly accuracy?: number;
  /**
   * Finest mesh: a block of half a decade of density by a quarter of temperature is cut into 2^level cells at most, 1 to 8.
   * @defaultValue 7
   */
  readonly finestLevel?: number;
  /**
   * Names of contributions to leave out of the table and to evaluate exactly beside it; those of the library's own that are
   * cheap are left out unless named otherwise.
   * @defaultValue those of "radiation", "ideal ions" that are in the sum
   */
  readonly beside?: readonly string[];
}

/** One sheet of a plan. */
export interface SheetPlan {
  readonly phase: SheetPhase;
  /** The contributions in this phase, without those beside the table. */
  readonly parts: readonly Contribution[];
  readonly sampler: Sampler;
  /** True where matter at ln rho, ln T is in this phase or would be after a small change: where accuracy counts. */
  isNear(u: number, v: number): boolean;
  /** Blocks of temperature [from, to) of the sheet in block `p` of density; empty where from >= to. */
  blocksAt(p: number): readonly [from: number, to: number];
}

/** A plan: everything that the strips of a table share. */
export interface TablePlan {
  readonly composition: Composition;
  readonly density: TableAxis;
  readonly temperature: TableAxis;
  readonly accuracy: number;
  readonly finestLevel: number;
  readonly cold: ColdCurve;
  readonly lookUp: ColdLookUp;
  readonly sheets: readonly SheetPlan[];
  readonly freezing?: FreezingLine;
  readonly tabulated: readonly Contribution[];
  readonly beside: readonly Contribution[];
  /** Members of what stands beside. */
  readonly besideSampler: Sampler;
  readonly rungs: Rungs;
}

/** Decades of a block along density and temperature, about. */
const blockDecades: readonly [number, number] = [0.5, 0.25];
/** Steps of the cold curve a decade: its error is below the rounding of F_0. */
const coldStepsPerDecade = 48;
/** Contributions that cost less than a look-up, and that `tableEquationOfState` knows. */
const usuallyBeside: readonly string[] = ["radiation", "ideal ions"];

/**
 * A plan of a table.
 *
 * @throws `not-a-number`, `out-of-range`, `outside-domain` (a region beyond the domain of the equation of state), `invalid-option`,
 * `invalid-composition`, `unstable` (matter that has no cold curve of positive heat)
 */
export function tablePlan(eos: EquationOfState, composition: Composition, options: TableOptions): TablePlan {
  requireComposition(composition);
  const checked = checkedOptions(eos, options);
  const { accuracy, finestLevel, beside } = checked;
  const tabulated = eos.contributions.filter((one) => !beside.includes(one));
  const density = axis(checked.density, blockDecades[0]);
  const temperature = axis(checked.temperature, blockDecades[1]);
  const rungs = { ends: ladder(temperature) };
  const line = freezingLine(tabulated, composition, density);
  const phases = phasesOf(line, density, temperature);
  const freezing = phases.length === 2 ? line : undefined;
  const side = (phase: "liquid" | "crystal"): readonly Contribution[] =>
    tabulated.map((part) => part.phases?.[phase] ?? part);
  const coldest = temperature.lowest;
  const zero = (parts: readonly Contribution[]): boolean => parts.every((part) => part.domain.zeroTemperature);
  const partsOf = (phase: SheetPhase): readonly Contribution[] => (phase === "single" ? tabulated : side(phase));
  const coldParts = partsOf(phases.at(-1)!);
  const isFrozen = phases.at(-1) === "crystal" && zero(coldParts);
  const cold = coldCurve(coldParts, composition, density, isFrozen ? 0 : coldest);
  const sheets = phases.map(
    (phase): SheetPlan => ({
      phase,
      parts: partsOf(phase),
      sampler: samplerOf(partsOf(phase), composition),
      isNear: nearness(phase, freezing),
      blocksAt: blocksOf(phase, density, rungs, freezing),
    }),
  );
  return {
    composition,
    density,
    temperature,
    accuracy,
    finestLevel,
    cold,
    lookUp: coldLookUp(cold, density),
    sheets,
    ...(freezing === undefined ? {} : { freezing }),
    tabulated,
    beside,
    besideSampler: samplerOf(beside, composition),
    rungs,
  };
}

function axis([lowest, highest]: readonly [number, number], decades: number): TableAxis {
  return { lowest, highest, blocks: Math.max(1, Math.round(Math.log10(highest / lowest) / decades)) };
}

/** ln of the ends of all blocks. */
function ladder({ lowest, highest, blocks }: TableAxis): readonly number[] {
  const [low, high] = [Math.log(lowest), Math.log(highest)];
  return Array.from({ length: blocks + 1 }, (_, i) => (i === blocks ? high : low + ((high - low) * i) / blocks));
}

/** The phases that matter has in a region: one sheet each. */
function phasesOf(line: FreezingLine | undefined, density: TableAxis, temperature: TableAxis): readonly SheetPhase[] {
  if (line === undefined) return ["single"];
  const densest = Math.min(density.highest, line.highestDensity);
  const isLiquid =
    density.highest > line.highestDensity || temperature.highest > line.factor * Math.cbrt(density.lowest);
  const isCrystal = temperature.lowest < line.factor * Math.cbrt(densest);
  if (isLiquid && isCrystal) return ["liquid", "crystal"];
  return [isCrystal ? "crystal" : "liquid"];
}

/** The line of the contribution that freezes, where some matter of the region does. */
function freezingLine(
  parts: readonly Contribution[],
  composition: Composition,
  density: TableAxis,
): FreezingLine | undefined {
  const pair = parts.find((part) => part.phases !== undefined)?.phases;
  if (pair === undefined) return undefined;
  const boundary = new Float64Array(5);
  const meltingAt = (rho: number): number => {
    boundary[0] = rho;
    pair.fillBoundary(composition, boundary);
    return boundary[2]!;
  };
  meltingAt(density.lowest);
  const highest = boundary[4]!;
  if (!(highest > density.lowest)) return { factor: 0, highestDensity: highest };
  const factor = meltingAt(density.lowest) / Math.cbrt(density.lowest);
  const other = Math.min(highest, density.highest);
  const isLine = Math.abs(meltingAt(other * (1 - 1e-12)) / (factor * Math.cbrt(other)) - 1) < 1e-9;
  if (isLine && factor > 0) return { factor, highestDensity: highest };
  throw new FermistateError("invalid-option", {
    argument: "eos",
    given: "a freezing line of its own",
    allowed: "matter that freezes at T_m = c rho^(1/3) up to some density",
  });
}

function coldCurve(
  parts: readonly Contribution[],
  composition: Composition,
  density: TableAxis,
  temperature: number,
): ColdCurve {
  const sampler = samplerOf(parts, composition);
  const steps = Math.max(4, Math.ceil(coldStepsPerDecade * Math.log10(density.highest / density.lowest)));
  const nodes = new Float64Array(COLD_LENGTH * (steps + 1));
  ladder({ ...density, blocks: steps }).forEach((u, i) => {
    sampler.sampleAt(Math.exp(u), temperature);
    nodes.set(coldNode(sampler), COLD_LENGTH * i);
  });
  return { temperature, nodes };
}

/** Which blocks of a density strip hold matter of a phase. */
function blocksOf(
  phase: SheetPhase,
  density: TableAxis,
  { ends }: Rungs,
  freezing: FreezingLine | undefined,
): SheetPlan["blocksAt"] {
  const count = ends.length - 1;
  if (freezing === undefined) return () => [0, count];
  const rhos = ladder(density).map(Math.exp);
  const { factor, highestDensity } = freezing;
  const melting = (rho: number): number => Math.log(factor * Math.cbrt(rho));
  return (p) => {
    const [low, high] = [rhos[p]!, rhos[p + 1]!];
    if (phase === "liquid") {
      if (high >= highestDensity) return [0, count];
      const first = ends.findIndex((_, q) => q < count && ends[q + 1]! >= melting(low));
      return first < 0 ? [count, count] : [first, count];
    }
    if (low > highestDensity) return [0, 0];
    const top = melting(Math.min(high, highestDensity));
    return [0, Math.min(ends.filter((end) => end <= top).length, count)];
  };
}

/** Change of ln T that counts as small. */
const near = 0.1;

function nearness(phase: SheetPhase, freezing: FreezingLine | undefined): SheetPlan["isNear"] {
  if (freezing === undefined) return () => true;
  const offset = Math.log(freezing.factor);
  const highest = Math.log(freezing.highestDensity);
  if (phase === "liquid") return (u, v) => v >= offset + u / 3 - near || u >= highest - near;
  return (u, v) => v <= offset + u / 3 + near && u <= highest + near;
}

/** Options with their defaults, checked. */
interface CheckedOptions {
  readonly density: readonly [number, number];
  readonly temperature: readonly [number, number];
  readonly accuracy: number;
  readonly finestLevel: number;
  readonly beside: readonly Contribution[];
}

function checkedOptions(eos: EquationOfState, options: TableOptions): CheckedOptions {
  const given: Readonly<Record<string, unknown>> = typeof options === "object" ? { ...options } : { options };
  const known = ["density", "temperature", "accuracy", "finestLevel", "beside"];
  const stranger = Object.keys(given).find((name) => !known.includes(name));
  if (stranger !== undefined) refuse("options", stranger, `{ ${known.join(", ")} }`);
  const density = interval("density", given["density"], eos.domain.density, "g/cm^3");
  const temperature = interval("temperature", given["temperature"], eos.domain.temperature, "K");
  const accuracy = requireFinite("accuracy", options.accuracy ?? 1e-6, "1e-10 to 0.1");
  if (accuracy < 1e-10 || accuracy > 0.1) outOfRange("accuracy", accuracy, "1e-10 to 0.1");
  const finestLevel = options.finestLevel ?? 7;
  if (!Number.isInteger(finestLevel) || finestLevel < 1 || finestLevel > highestLevel) {
    refuse("finestLevel", finestLevel, `a whole number from 1 to ${highestLevel}`);
  }
  const names = options.beside ?? usuallyBeside.filter((name) => eos.contributions.some((one) => one.name === name));
  const beside = names.map((name) => {
    const found = eos.contributions.find((one) => one.name === name);
    if (found !== undefined) return found;
    return refuse("beside", name, eos.contributions.map((one) => `"${one.name}"`).join(", "));
  });
  if (beside.length === eos.contributions.length) refuse("beside", names.join(", "), "at least one part to tabulate");
  return { density, temperature, accuracy, finestLevel, beside };
}

function interval(
  argument: string,
  value: unknown,
  domain: readonly [number, number],
  unit: string,
): readonly [number, number] {
  const allowed = `[lowest, highest] with 0 < lowest < highest, ${unit}`;
  if (!Array.isArray(value) || value.length !== 2) return refuse(argument, value, allowed);
  const [low, high] = value.map((end) => requireFinite(argument, end, allowed)) as [number, number];
  if (!(low > 0 && high > low * (1 + 1e-9))) outOfRange(argument, low > 0 ? high : low, allowed);
  for (const end of [low, high]) {
    if (end >= domain[0] && end <= domain[1]) continue;
    const inside = `${domain[0]} to ${domain[1]} ${unit}, where the equation of state answers`;
    throw new FermistateError("outside-domain", { argument, given: end, allowed: inside });
  }
  return [low, high];
}

function refuse(argument: string, given: unknown, allowed: string): never {
  throw new FermistateError("invalid-option", { argument, given, allowed });
}

function outOfRange(argument: string, given: number, allowed: string): never {
  throw new FermistateError("out-of-range", { argument, given, allowed });
}
