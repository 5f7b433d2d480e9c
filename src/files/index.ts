/**
 * Files written whole or not at all, such as those of `fermistate/grids` and `fermistate/table-files`. Node only.
 *
 * @packageDocumentation
 */
export {
  type Piece,
  type Text,
  type TextFile,
  type WriteOptions,
  type WrittenFile,
  writeText,
  writeTexts,
} from "./write.js";
