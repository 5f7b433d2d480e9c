/**
 * Files written whole or not at all, such as those of `fermistate/grids`. Node only.
 *
 * @packageDocumentation
 */
export { type Text, type TextFile, type WriteOptions, type WrittenFile, writeText, writeTexts } from "./write.js";
