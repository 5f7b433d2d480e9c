/**
 * Large batches on several cores: worker threads that share the columns' memory and give the numbers of one thread. Node
 * only.
 *
 * @packageDocumentation
 */
export type {
  MatterModule,
  MatterSource,
  WhiteDwarfMatterSource,
} from "./matter-source.js";
export {
  type AsyncClosing,
  type BatchThreads,
  type ParallelEvaluator,
  type ParallelOptions,
  parallelEvaluator,
} from "./parallel-evaluator.js";
