/** The error of a file that was not written: its path, and the system's reason in words. */
import { FermistateError } from "../errors.js";

/** `file-not-written` for a path; `reason` completes "a path that can be written; here ...". */
export function refused(path: string, reason: string): FermistateError {
  const allowed = `a path that can be written; here ${reason}`;
  return new FermistateError("file-not-written", { argument: "path", given: path, allowed });
}

/** What the codes of POSIX.1 (errno.h) mean to the one who gave the path; other codes speak for themselves. */
const reasons: Readonly<Record<string, string>> = {
  EACCES: "permission is denied",
  EDQUOT: "the disk quota is used up",
  EEXIST: "a file of this name exists and was not to be replaced",
  EFBIG: "the file grew beyond the largest size allowed",
  EIO: "the disk reported an error",
  EISDIR: "a folder of this name exists",
  ELOOP: "symbolic links lead in a circle",
  EMFILE: "too many files are open",
  ENAMETOOLONG: "the name is too long",
  ENOENT: "the folder does not exist",
  ENOSPC: "no space is left on the device",
  ENOTDIR: "a part of the path is a file, not a folder",
  EPERM: "the system does not permit it",
  EROFS: "the file system is read-only",
};

/** The reason of a system error, with its code. */
export function reasonOf(error: unknown): string {
  const { code, message } = error as NodeJS.ErrnoException;
  const words = reasons[code ?? ""];
  if (words !== undefined) return `${words} (${code})`;
  return message ?? String(error);
}
