/**
 * Files written whole or not at all: texts, and bytes. Node only.
 *
 * Each text goes to a new file of a random name in the folder of its target, is flushed to the disk (fsync), and takes
 * the target's name by `rename`, which POSIX makes atomic: a reader sees the old file or the new one, never a part.
 * Of a set, no file takes its name before all of them are on the disk. After a failure nothing that was begun is left.
 */
import { randomBytes } from "node:crypto";
import { type FileHandle, link, open, rename, unlink } from "node:fs/promises";
import { basename, dirname, join } from "node:path";
import { FermistateError } from "../errors.js";
import { reasonOf, refused } from "./refusal.js";
import { makeFolders, type Target, targetOf } from "./target.js";

/**
 * A text: a string, or pieces of one, made as they are written (no piece may end inside a surrogate pair); or bytes, which
 * are written as they are.
 */
export type Text = string | Uint8Array | Iterable<string> | AsyncIterable<string>;

/** One file to write. */
export interface TextFile {
  /** Path of the file. A symbolic link is followed: the file it names is replaced, the link stays. */
  readonly path: string;
  /** What to write; texts in UTF-8. */
  readonly text: Text;
}

/** Options of {@link writeText} and {@link writeTexts}. */
export interface WriteOptions {
  /** Replace a file that exists. @defaultValue true */
  readonly overwrite?: boolean;
  /** Make missing folders; they are removed again if writing fails. @defaultValue false */
  readonly createFolders?: boolean;
  /** An AbortSignal, or anything with its `aborted`: once true, writing stops before the next piece, as a failure. */
  readonly signal?: { readonly aborted: boolean };
}

/** What was written. */
export interface WrittenFile {
  /** Path as given. */
  readonly path: string;
  /** Length in bytes. */
  readonly bytes: number;
}

/**
 * Writes one text file whole or not at all.
 *
 * @throws FermistateError `file-not-written` with the path and the system's reason: a missing folder (unless
 * `createFolders`), no permission, a full disk, a target that is a folder or a device, an existing file where
 * `overwrite` is false; `invalid-option` for arguments of the wrong type. An error thrown while `text` makes its pieces
 * comes through as it is.
 * @example
 * ```ts
 * import { writeText } from "fermistate/files";
 * const { bytes } = await writeText("greeting.txt", "hello\n");
 * bytes; // => 6
 * ```
 */
export async function writeText(path: string, text: Text, options: WriteOptions = {}): Promise<WrittenFile> {
  const [written] = await writeTexts([{ path, text }], options);
  return written as WrittenFile;
}

/**
 * Writes several text files; none takes its name before all are complete on the disk.
 *
 * The names are then taken one after the other. Should the system refuse one of them in that last step, which all checks
 * before make unlikely, the error says which files are already new.
 *
 * @throws FermistateError as {@link writeText}; `invalid-option` where two paths name the same file
 */
export async function writeTexts(files: readonly TextFile[], options: WriteOptions = {}): Promise<WrittenFile[]> {
  const { overwrite, createFolders } = readOptions(options);
  checkFiles(files);
  const begun: Begun[] = [];
  let undoFolders: () => Promise<void> = async () => {};
  try {
    undoFolders = await makeFolders(files, createFolders);
    const targets: Target[] = [];
    for (const { path } of files) targets.push(await targetOf(path, overwrite));
    checkDistinct(targets);
    for (const [i, target] of targets.entries()) await begin(target, files[i]!.text, options.signal, begun);
    await finish(begun, overwrite);
    return begun.map(({ target, bytes }) => ({ path: target.path, bytes }));
  } catch (error) {
    for (const { temporary } of begun) await unlink(temporary).catch(() => {}); // gone already where it was renamed
    await undoFolders();
    throw error;
  }
}

/** A file whose text is on its way to the disk under a temporary name. */
interface Begun {
  readonly target: Target;
  readonly temporary: string;
  bytes: number;
}

/** Writes the text under a temporary name, which is in `begun` from the moment the file exists. */
async function begin(target: Target, text: Text, signal: WriteOptions["signal"], begun: Begun[]): Promise<void> {
  const { path, place, mode } = target;
  const temporary = join(dirname(place), `.${basename(place).slice(0, 40)}.${randomBytes(9).toString("hex")}.part`);
  const entry = { target, temporary, bytes: 0 };
  const file = await attempt(path, () => open(temporary, "wx", mode ?? 0o666));
  begun.push(entry);
  try {
    if (mode !== undefined) await attempt(path, () => file.chmod(mode)); // the mask of the process would take bits away
    entry.bytes = await writePieces(file, path, text, signal);
    await attempt(path, () => file.sync());
  } finally {
    await file.close().catch(() => {});
  }
}

async function writePieces(
  file: FileHandle,
  path: string,
  text: Text,
  signal: WriteOptions["signal"],
): Promise<number> {
  let bytes = 0;
  const isWhole = typeof text === "string" || text instanceof Uint8Array;
  for await (const piece of isWhole ? [text] : text) {
    if (signal?.aborted) throw refused(path, "writing was interrupted");
    if (typeof piece !== "string" && !(isWhole && piece instanceof Uint8Array)) {
      throw new FermistateError("invalid-option", {
        argument: "text",
        given: piece,
        allowed: "pieces that are strings",
      });
    }
    const data = typeof piece === "string" ? Buffer.from(piece, "utf8") : piece;
    await attempt(path, () => file.appendFile(data));
    bytes += data.length;
  }
  if (signal?.aborted) throw refused(path, "writing was interrupted");
  return bytes;
}

/** Gives every complete file its name. */
async function finish(begun: readonly Begun[], overwrite: boolean): Promise<void> {
  const done: string[] = [];
  for (const { target, temporary } of begun) {
    try {
      await takeName(temporary, target.place, overwrite);
    } catch (error) {
      const others = done.length === 0 ? "" : `; already written: ${done.join(", ")}`;
      throw refused(target.path, `${reasonOf(error)}${others}`);
    }
    done.push(target.path);
  }
  for (const folder of new Set(begun.map(({ target }) => dirname(target.place)))) await flushFolder(folder);
}

async function takeName(temporary: string, place: string, overwrite: boolean): Promise<void> {
  if (overwrite) return rename(temporary, place);
  // Unlike rename, link fails where the name has been taken since it was checked.
  try {
    await link(temporary, place);
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code ?? "";
    if (!["EPERM", "ENOTSUP", "EOPNOTSUPP", "ENOSYS", "EMLINK"].includes(code)) throw error;
    await (await open(place, "wx")).close(); // a file system without links: reserve the name
    await rename(temporary, place).catch(async (failure) => {
      await unlink(place).catch(() => {});
      throw failure;
    });
    return;
  }
  await unlink(temporary);
}

/** Makes the new names outlive a power cut. Not every system lets a folder be flushed; the files are whole anyway. */
async function flushFolder(folder: string): Promise<void> {
  const handle = await open(folder, "r").catch(() => undefined);
  await handle?.sync().catch(() => {});
  await handle?.close().catch(() => {});
}

async function attempt<T>(path: string, action: () => Promise<T>): Promise<T> {
  try {
    return await action();
  } catch (error) {
    throw refused(path, reasonOf(error));
  }
}

function readOptions(options: WriteOptions): { overwrite: boolean; createFolders: boolean } {
  const allowed = "{ overwrite, createFolders: true or false; signal: an AbortSignal }";
  const fail = (given: unknown): never => {
    throw new FermistateError("invalid-option", { argument: "options", given, allowed });
  };
  if (typeof options !== "object" || options === null) return fail(options);
  const { overwrite = true, createFolders = false, signal, ...others } = options;
  const [stranger] = Object.keys(others);
  if (stranger !== undefined) return fail(stranger);
  for (const value of [overwrite, createFolders]) if (typeof value !== "boolean") return fail(value);
  if (signal !== undefined && typeof signal.aborted !== "boolean") return fail(signal);
  return { overwrite, createFolders };
}

function checkFiles(files: readonly TextFile[]): void {
  const fail = (argument: string, given: unknown, allowed: string): never => {
    throw new FermistateError("invalid-option", { argument, given, allowed });
  };
  if (!Array.isArray(files)) fail("files", files, "a list of { path, text }");
  for (const { path, text } of files) {
    if (typeof path !== "string" || path === "" || path.includes("\0")) fail("path", path, "the path of a file");
    const iterable =
      typeof text === "object" && text !== null && (Symbol.iterator in text || Symbol.asyncIterator in text);
    if (typeof text !== "string" && !iterable) fail("text", text, "a string, pieces of one, or bytes");
  }
}

function checkDistinct(targets: readonly Target[]): void {
  const seen = new Set<string>();
  for (const { path, place } of targets) {
    if (seen.has(place)) {
      throw new FermistateError("invalid-option", { argument: "path", given: path, allowed: "different files" });
    }
    seen.add(place);
  }
}
