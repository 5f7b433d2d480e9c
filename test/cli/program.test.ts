/** The program itself, as a process: exit codes, streams, and readers that go away. */
import { spawnSync } from "node:child_process";
import { mkdirSync, mkdtempSync, readdirSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { build } from "esbuild";
import { afterAll, beforeAll, expect, test } from "vitest";

const root = fileURLToPath(new URL("../..", import.meta.url));
mkdirSync(`${root}.cache`, { recursive: true });
/** The program bundled from the sources, where Node finds its packages. */
const bundle = mkdtempSync(join(`${root}.cache`, "program-"));
const program = `"${process.execPath}" "${join(bundle, "main.mjs")}"`;
const cwd = mkdtempSync(join(tmpdir(), "fermistate-program-"));
beforeAll(async () => {
  const options = { bundle: true, format: "esm", platform: "node", packages: "external", logLevel: "silent" } as const;
  await build({ ...options, entryPoints: [`${root}src/cli/main.ts`], outfile: join(bundle, "main.mjs") });
});
afterAll(() => {
  for (const folder of [bundle, cwd]) rmSync(folder, { recursive: true, force: true });
});

/** Runs a line of the shell in which $F is the program; `status` is that of the line. */
function shell(line: string): { status: number | null; stdout: string; stderr: string } {
  return spawnSync("bash", ["-c", `set -o pipefail; F() { ${program} "$@"; }; ${line}`], { cwd, encoding: "utf8" });
}

test("an answer goes to standard output, exit code 0", () => {
  const { status, stdout, stderr } = shell("F state --density 2e6 --temperature 1e7 --composition C12=0.5,O16=0.5");
  expect([status, stderr]).toEqual([0, ""]);
  expect(stdout).toContain("pressure");
});

test("a refusal goes to standard error as one line without a stack, exit codes 1 and 2", () => {
  const wrong = shell("F state --density -1 --temperature 1e7 --composition C12=1");
  expect(wrong).toMatchObject({
    status: 2,
    stdout: "",
    stderr: "fermistate: density: given -1; allowed: > 0 g/cm^3 (out-of-range)\n",
  });
  expect(shell("F state --density 1e19 --temperature 1e7 --composition C12=1").status).toBe(1);
});

test("a reader that goes away is no error, and files are still written", () => {
  // More text than a pipe holds (64 kB), so the program meets the closed end.
  const line = "F grid --density 1e2..1e10,2000-points --temperature 1e6,1e7,1e8 --composition C12=1 | head -n 1";
  const { status, stdout, stderr } = shell(line);
  expect([status, stderr]).toEqual([0, ""]);
  expect(stdout).toMatch(/^density \[g\/cm\^3\],/);
  const files = shell("F demo | true");
  expect([files.status, files.stderr]).toEqual([0, ""]);
  expect(readdirSync(join(cwd, "fermistate-demo"))).toHaveLength(12);
});

test("no colours, even where they are asked for", () => {
  const { stdout } = shell("FORCE_COLOR=1 F help grid; FORCE_COLOR=1 F demo");
  expect(stdout).not.toContain("\u001b");
});
