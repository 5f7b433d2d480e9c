/** Builds dist and packs the tarball, once for all tests of this folder. */
import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type { TestProject } from "vitest/node";

/** One file of the tarball, as npm lists it. */
export interface PackedFile {
  readonly path: string;
  readonly size: number;
  readonly mode: number;
}

declare module "vitest" {
  export interface ProvidedContext {
    /** Absolute path of the packed tarball. */
    tarball: string;
    /** What is in it. */
    packedFiles: readonly PackedFile[];
    /** Why there is no build, or "". */
    buildProblem: string;
  }
}

const root: string = fileURLToPath(new URL("../..", import.meta.url));

/** Runs npm quietly; on failure says what npm and the program printed. */
function npm(...args: string[]): string {
  const { status, stdout, stderr } = spawnSync("npm", args, { cwd: root, encoding: "utf8" });
  if (status !== 0) throw new Error(`npm ${args.join(" ")} failed:\n${stdout}${stderr}`);
  return stdout;
}

/** A build that fails fails the tests of this folder (see built.ts), but not the whole run. */
export default function setup(project: TestProject): () => void {
  const folder = mkdtempSync(join(tmpdir(), "fermistate-pack-"));
  let tarball = "";
  let packedFiles: readonly PackedFile[] = [];
  let buildProblem = "";
  try {
    npm("run", "build", "--silent");
    const list = npm("pack", "--json", "--ignore-scripts", "--pack-destination", folder);
    const [packed] = JSON.parse(list) as [{ filename: string; files: PackedFile[] }];
    tarball = join(folder, packed.filename);
    packedFiles = packed.files;
  } catch (error) {
    buildProblem = String(error);
  }
  project.provide("tarball", tarball);
  project.provide("packedFiles", packedFiles);
  project.provide("buildProblem", buildProblem);
  return () => rmSync(folder, { recursive: true, force: true });
}
