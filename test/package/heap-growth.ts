/** How much heap a repeated call of the built library leaves behind, measured in a process of its own. */
import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";

const root: string = fileURLToPath(new URL("../..", import.meta.url));

/**
 * What programs of {@link numbersOf} may call. `bytesPerItem(run, count, limit)`: bytes of heap for each of the `count`
 * items of a call of `run`, once it is compiled. That is after two calls in a row below the limit (the larger of them),
 * or after eight calls (the least of five more). The young generation is large enough to collect nothing meanwhile; a
 * call in which something was collected shows as negative and does not count.
 */
const meter = `
  import v8 from "node:v8";
  function bytesPerItem(run, count, limit) {
    const all = [];
    for (let i = 0; i < 13; i++) {
      const before = v8.getHeapStatistics().used_heap_size;
      run();
      all.push((v8.getHeapStatistics().used_heap_size - before) / count);
      const pair = all.slice(-2);
      if (pair.length === 2 && pair.every((bytes) => bytes >= 0 && bytes < limit)) return Math.max(...pair);
    }
    return Math.min(...all.slice(8).filter((bytes) => bytes >= 0));
  }`;

/** Runs a program beside the built library and reads the JSON that it prints. */
export function numbersOf<T>(program: string): T {
  const options = ["--max-semi-space-size=64", "--min-semi-space-size=64", "--input-type=module"];
  const printed = execFileSync(process.execPath, [...options, "-e", meter + program], { cwd: root, encoding: "utf8" });
  return JSON.parse(printed) as T;
}
