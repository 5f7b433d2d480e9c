/**
 * JavaScript against C: the library's batch and the same algorithm compiled on the spot (the C files of this folder), in
 * turns within each process. Skipped where there is no C compiler.
 *
 * Two baselines: all that a compiler may do for this machine while results stay as they are (no -ffast-math, no fused
 * multiply-add), and what a package is compiled with as a rule.
 */
import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { cpus, tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { composition } from "../../src/index.js";
import { tablesFor } from "./tables.js";

const here = fileURLToPath(new URL(".", import.meta.url));
const baselines = [
  ["-std=c11", "-O3", "-march=native", "-ffp-contract=off", "-fno-math-errno"],
  ["-std=c11", "-O2", "-ffp-contract=off"],
];

/** One sum of one process, as measure.mjs prints it; times in nanoseconds per point. */
interface Row {
  readonly name: string;
  readonly ratio: number;
  readonly quietest: number;
  readonly time: number;
  readonly native: number;
  readonly exponential: number;
  readonly difference: number;
}

/** The rows of the bench as lines of text: each figure the median over the processes, with the range of the ratio. */
export function nativeRows(processes: number): string[] {
  const compiler = process.env["CC"] ?? "cc";
  const folder = mkdtempSync(join(tmpdir(), "fermistate-native-"));
  try {
    const version = compilerVersion(compiler);
    if (version === undefined) return [`no C compiler (${compiler}): the native baseline is skipped`];
    writeFileSync(join(folder, "tables.h"), tablesFor(composition({ C12: 0.5, O16: 0.5 })));
    return baselines.flatMap((flags, k) => {
      const program = join(folder, `native-${k}`);
      const files = ["-I", folder, "-o", program, join(here, "main.c"), "-lm"];
      execFileSync(compiler, [...flags, ...files], { stdio: "inherit" });
      const all = Array.from({ length: processes }, (_, i) => {
        const command = [...onOneProcessor(i), process.execPath, join(here, "measure.mjs"), program, folder];
        return JSON.parse(execFileSync(command[0]!, command.slice(1), { encoding: "utf8" })) as Row[];
      });
      const head = `JavaScript over C (${version}, ${flags.join(" ")}): C/O, T 1e6..1e9 K, rho 1e5..1e10 g/cm^3`;
      return [head, ...all[0]!.map((_, i) => lineOf(all.map((rows) => rows[i]!)))];
    });
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function compilerVersion(compiler: string): string | undefined {
  try {
    return execFileSync(compiler, ["--version"], { encoding: "utf8", stdio: ["ignore", "pipe", "ignore"] }).split(
      "\n",
    )[0];
  } catch {
    return undefined;
  }
}

/** Both sides on one processor, the processors in turn, where the system has taskset: a busy neighbour slows both alike. */
function onOneProcessor(turn: number): string[] {
  const command = ["taskset", "--cpu-list", String(turn % cpus().length)];
  try {
    execFileSync(command[0]!, [...command.slice(1), process.execPath, "--version"], { stdio: "ignore" });
    return command;
  } catch {
    return [];
  }
}

function lineOf(rows: readonly Row[]): string {
  const sorted = (of: (row: Row) => number): number[] => rows.map(of).sort((a, b) => a - b);
  const middle = (of: (row: Row) => number): number => sorted(of)[rows.length >> 1]!;
  const ratios = sorted((row) => row.ratio);
  const time = middle((row) => row.time);
  const parts = [
    `  ${rows[0]!.name.padEnd(12)} ${middle((row) => row.ratio).toFixed(2)} x C`,
    `(${ratios[0]!.toFixed(2)} to ${ratios.at(-1)!.toFixed(2)}; shortest slices ${middle((row) => row.quietest).toFixed(2)})`,
    `${time.toFixed(0)} ns and ${middle((row) => row.native).toFixed(0)} ns,`,
    `Math.exp ${middle((row) => row.exponential).toFixed(1)} ns;`,
    `largest difference ${middle((row) => row.difference).toExponential(0)}`,
  ];
  return parts.join("  ");
}
