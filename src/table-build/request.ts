/** A table as it is asked for: plain data, so that threads, other machines and a resumed run mean the same table. */
import { createHash } from "node:crypto";
import { type Composition, composition, type MeanNucleus, type NucleonFractions } from "../matter/composition.js";
import { loadMatter, type MatterSource, type PlainSource, plainSource } from "../parallel/matter-source.js";
import { type TableOptions, type TablePlan, tablePlan } from "../tables/plan.js";
import { libraryVersion } from "../version.js";

/** Which table. */
export interface TableRequest {
  /** Where the equation of state comes from, as for `parallelEvaluator`. */
  readonly matter: MatterSource;
  /** Nucleon fractions or a mean nucleus, as for `composition`. */
  readonly composition: NucleonFractions | MeanNucleus;
  /** Region and accuracy. */
  readonly options: TableOptions;
}

/** The same as plain data. */
export interface PlainRequest {
  readonly matter: PlainSource;
  readonly composition: NucleonFractions | MeanNucleus;
  readonly options: TableOptions;
}

/** Checks a request and makes it plain. */
export function plainRequest(request: TableRequest): PlainRequest {
  const made: Composition = composition(request.composition);
  const [first] = made.species;
  const fractions =
    first!.label === "mean"
      ? { meanMassNumber: first!.massNumber, meanCharge: first!.chargeNumber }
      : Object.fromEntries(made.species.map(({ label, nucleonFraction }) => [label, nucleonFraction]));
  return { matter: plainSource(request.matter), composition: fractions, options: structuredClone(request.options) };
}

/** The plan of a request, made in the thread that asks. */
export async function planOf({ matter, composition: fractions, options }: PlainRequest): Promise<TablePlan> {
  return tablePlan(await loadMatter(matter), composition(fractions), options);
}

/** Identifies a request and the library that answers it: strips of one mark belong together. */
export function markOf(request: PlainRequest): string {
  return createHash("sha256")
    .update(JSON.stringify([libraryVersion, ordered(request)]))
    .digest("hex");
}

/** The value with the keys of all objects in alphabetical order. */
function ordered(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(ordered);
  if (typeof value !== "object" || value === null) return value;
  const keys = Object.keys(value).sort();
  return Object.fromEntries(keys.map((key) => [key, ordered((value as Record<string, unknown>)[key])]));
}
