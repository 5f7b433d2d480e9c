/**
 * Tables built in a folder: on threads, on many machines, resumable after a kill, with the same bits however they are split. Node only.
 *
 * @packageDocumentation
 */
export {
  assembleFolders,
  buildInFolder,
  type FolderOptions,
  type FolderProgress,
  type FolderResult,
} from "./folder.js";
export type { TableRequest } from "./request.js";
