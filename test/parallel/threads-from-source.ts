/**
 * Threads for tests of the sources: the worker and the core bundled into one folder, as the build does it, where modules
 * of the tests' own stand beside them and import "./core.js".
 */
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";
import { build } from "esbuild";

const root = fileURLToPath(new URL("../..", import.meta.url));

/** A folder with parallel-worker.js and core.js, and a way to add modules and to remove it all. */
export interface Workshop {
  readonly worker: URL;
  /** Writes a module and gives its URL. */
  module(name: string, code: string): URL;
  remove(): void;
}

export async function makeWorkshop(): Promise<Workshop> {
  mkdirSync(`${root}.cache`, { recursive: true });
  const folder = mkdtempSync(join(`${root}.cache`, "parallel-"));
  await build({
    entryPoints: {
      "parallel-worker": `${root}src/parallel/parallel-worker.ts`,
      "strip-worker": `${root}src/table-build/strip-worker.ts`,
      core: `${root}src/index.ts`,
      parallel: `${root}src/parallel/index.ts`,
    },
    outdir: folder,
    bundle: true,
    splitting: true,
    format: "esm",
    platform: "node",
    external: ["tinypool", "zod"],
    logLevel: "silent",
  });
  writeFileSync(join(folder, "package.json"), '{ "type": "module" }');
  return {
    worker: pathToFileURL(join(folder, "parallel-worker.js")),
    module(name, code) {
      const file = join(folder, name);
      writeFileSync(file, code);
      return pathToFileURL(file);
    },
    remove: () => rmSync(folder, { recursive: true, force: true }),
  };
}
