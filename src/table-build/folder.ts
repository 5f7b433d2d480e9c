/**
 * The folder of a table under way: `table.json` says which table, `strip-0001.json` and so on are its finished strips.
 *
 * A strip is written whole or not at all and carries a checksum, so a build that was killed goes on where it stood, and what a
 * broken disk left is made again. Strips depend on the request alone: any split over runs, threads and machines of one kind of
 * processor and one version of Node gives the same bits.
 */
import { mkdir, readdir, readFile, unlink } from "node:fs/promises";
import { join } from "node:path";
import { FermistateError, requireKnown } from "../errors.js";
import { writeText } from "../files/write.js";
import { assembleTable } from "../tables/build.js";
import type { TablePlan } from "../tables/plan.js";
import { buildStrip, type Strip } from "../tables/strip.js";
import type { FreeEnergyTable } from "../tables/table.js";
import { markOf, type PlainRequest, plainRequest, planOf, type TableRequest } from "./request.js";
import { stripFromText, stripText } from "./strip-file.js";
import { startStripThreads } from "./strip-threads.js";

/** How far a build is. */
export interface FolderProgress {
  /** Strips finished, those of earlier runs included. */
  readonly done: number;
  /** Strips of this run's share. */
  readonly all: number;
}

/** Options of {@link buildInFolder}. */
export interface FolderOptions {
  /** Threads, 1 to 64; 1 does the work in the calling thread. @defaultValue 1 */
  readonly threads?: number;
  /** Share k of n of the strips, counted from 1: each of n machines makes one share. @defaultValue all of them */
  readonly shard?: readonly [number: number, of: number];
  /** Called after every strip. */
  readonly onProgress?: (progress: FolderProgress) => void;
  /** Once `aborted` is true, the build stops after the strips under way: an AbortSignal will do. */
  readonly signal?: { readonly aborted: boolean };
}

/** What a build did. */
export interface FolderResult {
  /** Strips made in this run. */
  readonly made: number;
  /** Strips found finished. */
  readonly kept: number;
  /** Strips of the share that are still to be made; more than 0 only after `signal` stopped the build. */
  readonly left: number;
  /** Strips of the whole table. */
  readonly strips: number;
}

/**
 * Makes the strips of a table, or of a share of it, as files of a folder; those that are there already are kept.
 *
 * @param folder - made if missing; must be empty or hold strips of the same request
 * @throws (rejects with) the errors of `buildTable`, `file-not-written`; `invalid-option` where the folder belongs to another
 * table; `worker-failed`
 */
export async function buildInFolder(
  folder: string,
  request: TableRequest,
  options: FolderOptions = {},
): Promise<FolderResult> {
  const { threads, shard, onProgress, signal } = checkedOptions(options);
  const plain = plainRequest(request);
  const plan = await planOf(plain);
  const mark = markOf(plain);
  await claim(folder, plain, mark);
  if (shard === undefined) await removeRemains(folder);

  const strips = plan.density.blocks;
  const share = Array.from({ length: strips }, (_, i) => i).filter(
    (i) => shard === undefined || i % shard[1] === shard[0] - 1,
  );
  const missing: number[] = [];
  for (const index of share) if ((await readStrip(folder, mark, index)) === undefined) missing.push(index);
  let done = share.length - missing.length;
  onProgress?.({ done, all: share.length });

  const pool = threads > 1 && missing.length > 1 ? await startStripThreads(threads, plain) : undefined;
  let next = 0;
  async function lane(): Promise<void> {
    while (next < missing.length && !signal?.aborted) {
      const index = missing[next++]!;
      const strip = pool === undefined ? buildStrip(plan, index) : await pool.build(index);
      await writeText(stripPath(folder, index), stripText(strip, mark));
      done += 1;
      onProgress?.({ done, all: share.length });
    }
  }
  try {
    await Promise.all(Array.from({ length: pool === undefined ? 1 : threads }, lane));
  } finally {
    await pool?.close();
  }
  return {
    made: done - (share.length - missing.length),
    kept: share.length - missing.length,
    left: share.length - done,
    strips,
  };
}

/**
 * The table whose strips stand in the folders, in any distribution; each folder names the same request.
 *
 * @throws (rejects with) `invalid-option` where a folder holds no table, another table, or strips are missing: the message says which
 */
export async function assembleFolders(...folders: readonly string[]): Promise<FreeEnergyTable> {
  if (folders.length === 0) refuse("folders", "none", "one or more folders that buildInFolder has filled");
  const requests = await Promise.all(folders.map(readRequest));
  const [first] = requests;
  const mark = markOf(first!);
  const other = requests.findIndex((request) => markOf(request) !== mark);
  if (other > 0) refuse("folders", folders[other]!, `strips of the table in ${folders[0]}`);
  const plan: TablePlan = await planOf(first!);
  const strips: Strip[] = [];
  const missing: number[] = [];
  for (let index = 0; index < plan.density.blocks; index++) {
    const found = await firstOf(folders, (folder) => readStrip(folder, mark, index));
    if (found === undefined) missing.push(index + 1);
    else strips.push(found);
  }
  if (missing.length === 0) return assembleTable(plan, strips);
  return refuse("strips", `without ${missing.join(", ")}`, `all ${plan.density.blocks} strips`);
}

const stripPath = (folder: string, index: number): string =>
  join(folder, `strip-${String(index + 1).padStart(4, "0")}.json`);
const requestPath = (folder: string): string => join(folder, "table.json");

/** The first that is there. */
async function firstOf<T>(
  folders: readonly string[],
  read: (folder: string) => Promise<T | undefined>,
): Promise<T | undefined> {
  for (const folder of folders) {
    const found = await read(folder);
    if (found !== undefined) return found;
  }
  return undefined;
}

async function readStrip(folder: string, mark: string, index: number): Promise<Strip | undefined> {
  const text = await readFile(stripPath(folder, index), "utf8").catch(() => undefined);
  return text === undefined ? undefined : stripFromText(text, mark, index);
}

async function readRequest(folder: string): Promise<PlainRequest> {
  const allowed = "a folder that buildInFolder has filled";
  const text = await readFile(requestPath(folder), "utf8").catch(() => refuse("folder", folder, allowed));
  try {
    const { matter, composition, options } = JSON.parse(text) as PlainRequest;
    return plainRequest({ matter, composition, options });
  } catch {
    return refuse("folder", `${folder}: table.json cannot be read`, allowed);
  }
}

/** Writes the request into a folder that has none; refuses one of another table. */
async function claim(folder: string, request: PlainRequest, mark: string): Promise<void> {
  await mkdir(folder, { recursive: true }).catch((error: Error) => {
    throw new FermistateError("file-not-written", { argument: "folder", given: error.message, allowed: "a folder" });
  });
  const text = await readFile(requestPath(folder), "utf8").catch(() => undefined);
  if (text === undefined) {
    await writeText(requestPath(folder), `${JSON.stringify(request, null, 2)}\n`);
    return;
  }
  if (markOf(await readRequest(folder)) !== mark) {
    refuse("folder", folder, "an empty folder, or one with strips of the same table; this one belongs to another");
  }
}

/** Removes what a killed build left half-written; its names are those of `files/write.ts`. */
async function removeRemains(folder: string): Promise<void> {
  for (const name of await readdir(folder)) {
    if (/^\.(strip-\d+|table)\.json\.[0-9a-f]+\.part$/.test(name)) await unlink(join(folder, name)).catch(() => {});
  }
}

interface CheckedOptions extends FolderOptions {
  readonly threads: number;
}

function checkedOptions(options: FolderOptions): CheckedOptions {
  requireKnown("options", options, ["threads", "shard", "onProgress", "signal"]);
  const { threads = 1, shard } = options;
  if (!Number.isInteger(threads) || threads < 1 || threads > 64) {
    refuse("options.threads", threads, "a whole number from 1 to 64");
  }
  if (shard !== undefined) {
    const [number = Number.NaN, of = Number.NaN]: readonly number[] = Array.isArray(shard) ? shard : [];
    const isGood = Number.isInteger(number) && Number.isInteger(of) && number >= 1 && number <= of;
    if (!isGood) refuse("options.shard", String(shard), "[k, n] with 1 <= k <= n");
  }
  return { ...options, threads };
}

function refuse(argument: string, given: unknown, allowed: string): never {
  throw new FermistateError("invalid-option", { argument, given, allowed });
}
