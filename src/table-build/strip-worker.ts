/** What runs in a thread: the plan of a table once, then the strips it is asked for. */
import { markThread } from "../parallel/thread-mark.js";
import type { TablePlan } from "../tables/plan.js";
import { buildStrip, type Strip } from "../tables/strip.js";
import { planOf } from "./request.js";
import type { StripQuestion } from "./strip-threads.js";

markThread();

let plan: Promise<TablePlan> | undefined;

/** A strip of the table that this thread serves. */
export async function answer({ request, index }: StripQuestion): Promise<Strip> {
  plan ??= planOf(request);
  return buildStrip(await plan, index);
}
