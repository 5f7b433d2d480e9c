/** Threads that make strips: each makes the plan once, then any strip it is asked for. */
import { startThreads } from "../parallel/threads.js";
import type { Strip } from "../tables/strip.js";
import type { PlainRequest } from "./request.js";

/** Threads of one request. */
export interface StripThreads {
  /** A strip, made in a thread that is free. */
  build(index: number): Promise<Strip>;
  close(): Promise<void>;
}

/** The built file of strip-worker.ts stands beside the file this code is built into. */
const workerFile: URL = new URL(
  import.meta.url.endsWith(".cjs") ? "./strip-worker.cjs" : "./strip-worker.js",
  import.meta.url,
);

/** What a thread is asked. */
export interface StripQuestion {
  readonly request: PlainRequest;
  readonly index: number;
}

/** Starts threads for the strips of a request. */
export async function startStripThreads(count: number, request: PlainRequest): Promise<StripThreads> {
  const threads = await startThreads<StripQuestion, Strip>(count, workerFile);
  return {
    build: (index) => threads.ask({ request, index }),
    close: () => threads.end("the table is finished"),
  };
}
