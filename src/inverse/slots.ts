/** Slots of the records of the inverse: constants of hot loops, in a file that imports nothing so that they are inlined. */

/** Kinds of a given quantity. */
export const PRESSURE_KIND = 0;
/** e. */
export const ENERGY_KIND = 1;
/** s. */
export const ENTROPY_KIND = 2;
/** h = e + P/rho. */
export const ENTHALPY_KIND = 3;

// What is asked.

/** Temperature at a given density. */
export const TEMPERATURE_AT_DENSITY = 0;
/** Density at a given temperature. */
export const DENSITY_AT_TEMPERATURE = 1;
/** Both. */
export const BOTH = 2;

// Where a result stands.

/** Matter of one phase throughout its domain. */
export const WHOLE = 0;
/** In the liquid. */
export const LIQUID = 1;
/** In the crystal. */
export const CRYSTAL = 2;
/** On the boundary, part of the mass frozen. */
export const COEXISTENCE = 3;

/** A quantity as a function of u = ln rho and v = ln T: value, f_u, f_v, f_uu, f_uv, f_vv, size of its terms. */
export const FUNCTION_LENGTH = 7;
/** Slot of f_u behind the value. */
export const BY_U = 1;
/** Slot of f_v. */
export const BY_V = 2;
/** Slot of f_uu. */
export const BY_UU = 3;
/** Slot of f_uv. */
export const BY_UV = 4;
/** Slot of f_vv. */
export const BY_VV = 5;
/** Slot of the size of the terms of the value: an error of one unit in its last place is this times 2^-53. */
export const SIZE = 6;

// The record of one search.

/** Density, g/cm^3: start, then result. */
export const DENSITY_NOW = 0;
/** Temperature, K: start, then result. */
export const TEMPERATURE_NOW = 1;
/** Target of the first quantity. */
export const FIRST_TARGET = 2;
/** Target of the second quantity. */
export const SECOND_TARGET = 3;
/** Lowest density allowed. */
export const LOWEST_DENSITY = 4;
/** Highest density allowed. */
export const HIGHEST_DENSITY = 5;
/** Lowest temperature allowed. */
export const LOWEST_TEMPERATURE = 6;
/** Highest temperature allowed. */
export const HIGHEST_TEMPERATURE = 7;
/** Evaluations so far. */
export const EVALUATIONS = 8;
/** Step in ln rho from the last evaluation to the result. */
export const STEP_U = 9;
/** Step in ln T from the last evaluation to the result. */
export const STEP_V = 10;
/** 1 where the start is a caller's guess. */
export const GUESSED = 11;
/**
 * 1 where the start is a prediction from the evaluator's last place: the members of third order left there serve for the
 * steps, and evaluations of second order, half as costly, do.
 */
export const FOLLOWS = 12;
/** Rows since members of third order were computed. */
export const AGE = 13;
/** Length of the record of a search. */
export const SEARCH_LENGTH = 14;

// How a search ends.

/** The root is found. */
export const FOUND = 0;
/** The target lies below what the lower end of the interval gives (for a falling quantity: above). */
export const BEYOND_LOWER = 1;
/** The target lies above what the upper end gives (for a falling quantity: below). */
export const BEYOND_UPPER = 2;
/** No root: the quantity is not monotonic there, or the matter is unstable. */
export const LOST = 3;
