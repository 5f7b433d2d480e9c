/** Where a path leads, checked before anything is written there. */
import { lstat, mkdir, realpath, rmdir, stat } from "node:fs/promises";
import { basename, dirname, join, resolve, sep } from "node:path";
import { reasonOf, refused } from "./refusal.js";

/** The place of one file. */
export interface Target {
  /** The path as given. */
  readonly path: string;
  /** The path with links followed: what will be replaced. */
  readonly place: string;
  /** Permissions of the file that is there; undefined where there is none. */
  readonly mode: number | undefined;
}

/**
 * The target of a path. Refuses a folder, a device, pipe or socket (renaming onto one would destroy it), a link that
 * leads nowhere, an existing file unless `overwrite`, a missing folder.
 */
export async function targetOf(path: string, overwrite: boolean): Promise<Target> {
  const whole = resolve(path);
  if (path.endsWith("/") || path.endsWith(sep)) throw refused(path, "the path ends like that of a folder");
  try {
    const folder = await realpath(dirname(whole));
    if (!(await stat(folder)).isDirectory()) throw refused(path, "a part of the path is a file, not a folder");
    const found = await lstatOf(join(folder, basename(whole)));
    if (found === undefined) return { path, place: join(folder, basename(whole)), mode: undefined };
    if (!overwrite) throw refused(path, "a file of this name exists and was not to be replaced");
    const place = await realpath(whole).catch((error) => {
      throw error.code === "ENOENT" ? refused(path, "the symbolic link leads to nothing") : error;
    });
    const there = await stat(place);
    if (there.isDirectory()) throw refused(path, "a folder of this name exists");
    if (!there.isFile()) throw refused(path, "it is a device, pipe or socket, not a file");
    return { path, place, mode: there.mode & 0o777 };
  } catch (error) {
    throw isSystemError(error) ? refused(path, reasonOf(error)) : error;
  }
}

/**
 * Refuses now what writing would refuse later, as far as it can be seen: worth asking before a long calculation.
 */
export async function checkTargets(
  files: readonly { path: string }[],
  options: { readonly overwrite: boolean; readonly createFolders: boolean },
): Promise<void> {
  for (const { path } of files) {
    const folder = await lstatOf(dirname(resolve(path))).catch(() => undefined);
    if (folder === undefined && options.createFolders) continue;
    await targetOf(path, options.overwrite);
  }
}

/**
 * Makes the folders of the files if `wanted`. Returns what takes back those that were made, as far as they are empty.
 */
export async function makeFolders(files: readonly { path: string }[], wanted: boolean): Promise<() => Promise<void>> {
  const made: { readonly first: string; readonly last: string }[] = [];
  const undo = async (): Promise<void> => {
    for (const { first, last } of made.reverse()) {
      for (let folder = last; folder.length >= first.length; folder = dirname(folder)) {
        await rmdir(folder).catch(() => {}); // not empty: somebody else uses it by now
      }
    }
  };
  if (!wanted) return undo;
  for (const { path } of files) {
    const last = dirname(resolve(path));
    try {
      const first = await mkdir(last, { recursive: true });
      if (first !== undefined) made.push({ first, last });
    } catch (error) {
      await undo();
      // mkdir says EEXIST where a file stands in the way of a folder.
      const isFile = (error as NodeJS.ErrnoException).code === "EEXIST";
      throw refused(path, isFile ? "a part of the path is a file, not a folder" : reasonOf(error));
    }
  }
  return undo;
}

async function lstatOf(path: string): Promise<Awaited<ReturnType<typeof lstat>> | undefined> {
  try {
    return await lstat(path);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ENOENT") return undefined;
    throw error;
  }
}

function isSystemError(error: unknown): error is NodeJS.ErrnoException {
  return error instanceof Error && "syscall" in error;
}
