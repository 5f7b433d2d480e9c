/**
 * Not written yet.
 *
 * @packageDocumentation
 */
export { isFermistateError } from "../errors.js";
