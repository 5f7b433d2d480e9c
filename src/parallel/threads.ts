/**
 * The threads of a pool, by tinypool, with one rule more: when one dies, all end and everything asked of them is refused,
 * once nobody writes to the shared columns any more. (The pool alone would wait forever for a thread that has exited.)
 */
import { FermistateError } from "../errors.js";

/** Several threads that answer requests. */
export interface Threads<Request, Answer> {
  /** False once a thread has died or {@link Threads.end} was called. */
  isAlive(): boolean;
  /** One request to one thread. Rejects with `worker-failed` when the threads end before it is answered. */
  ask(request: Request): Promise<Answer>;
  /** Ends all threads; what is under way is refused for the reason given. */
  end(reason: string): Promise<void>;
}

/**
 * Starts `count` threads.
 *
 * @param file - a module that exports `answer(request)`
 */
export async function startThreads<Request, Answer>(count: number, file: URL): Promise<Threads<Request, Answer>> {
  const { Tinypool } = await import("tinypool");
  // Without atomics a thread that waits keeps its event loop: an error of the caller's code outside of a task is seen.
  const pool = new Tinypool({
    filename: file.href,
    name: "answer",
    minThreads: count,
    maxThreads: count,
    useAtomics: false,
  });
  const waiting = new Set<(error: FermistateError) => void>();
  let ended: Promise<void> | undefined;

  function end(reason: string): Promise<void> {
    ended ??= Promise.all(pool.threads.map((thread) => thread.terminate())).then(() => {
      for (const refuse of waiting) refuse(failure(reason));
      waiting.clear();
    });
    return ended;
  }

  pool.on("error", (error: unknown) => void end(String(error)));
  // An error of the thread may be reported in the same turn of the event loop as its exit, and only a few promises later:
  // it names the reason, so the exit waits a turn for it.
  for (const thread of pool.threads) {
    thread.once("exit", (code: number) => setImmediate(() => void end(`a thread has exited with code ${code}`)));
  }

  function ask(request: Request): Promise<Answer> {
    if (ended !== undefined) return ended.then(() => Promise.reject(failure("the threads have ended")));
    return new Promise((resolve, reject) => {
      waiting.add(reject);
      pool.run(request).then(
        (answer: Answer) => {
          if (ended !== undefined) return; // refused by `end`
          waiting.delete(reject);
          resolve(answer);
        },
        (error: unknown) => void end(String(error)),
      );
    });
  }

  return { isAlive: () => ended === undefined, ask, end };
}

function failure(given: string): FermistateError {
  return new FermistateError("worker-failed", {
    argument: "worker",
    given,
    allowed: "threads that run until they are closed",
  });
}
