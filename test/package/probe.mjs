/**
 * What is compared between Node and a browser. EXTEND HERE: return more plain data (numbers, text, arrays, objects)
 * made with the built core only; the comparison walks through all of it.
 *
 * This file runs in both: no imports, no Node, no DOM.
 */

/**
 * Largest relative difference of two numbers. Engines differ in the last bit of exp, log and pow (measured between
 * V8 11.3 and Chromium: 1 to 2 units in the last place); a state passes that on times its condition number.
 */
export const relativeTolerance = 1e-13;

/**
 * @param {typeof import("../../src/index.js")} fermistate the built core
 * @returns {unknown} plain data
 */
export function probe(fermistate) {
  const error = new fermistate.FermistateError("out-of-range", {
    argument: "density",
    given: -1,
    allowed: "more than 0 g/cm^3",
  });
  return {
    error: { code: error.code, message: error.message, recognised: fermistate.isFermistateError(error) },
  };
}
