/** Numbers of the reasons in refusal-reasons.ts. No imports, so that the bundler writes them as literals into the loops. */

/** The row has its answer. */
export const ANSWERED = 0;
/** NaN or an infinity as density. */
export const DENSITY_NO_NUMBER = 1;
/** NaN or an infinity as temperature. */
export const TEMPERATURE_NO_NUMBER = 2;
/** Density <= 0. */
export const DENSITY_NOT_POSITIVE = 3;
/** Temperature < 0. */
export const TEMPERATURE_NEGATIVE = 4;
/** Density below the domain. */
export const DENSITY_TOO_LOW = 5;
/** Density above the domain. */
export const DENSITY_TOO_HIGH = 6;
/** Temperature below the domain. */
export const TEMPERATURE_TOO_LOW = 7;
/** Temperature above the domain. */
export const TEMPERATURE_TOO_HIGH = 8;
/** A contribution refuses a point inside its domain. */
export const CONTRIBUTION_OUTSIDE = 9;
/** P/rho <= 0. */
export const NO_PRESSURE = 10;
/** (dP/drho) < 0 at constant temperature. */
export const NO_RESISTANCE = 11;
/** (dP/drho) <= 0 at constant entropy. */
export const NO_ADIABATIC_RESISTANCE = 12;
/** c_v < 0. */
export const NEGATIVE_HEAT_CAPACITY = 13;
/** An energy that is no finite number. */
export const NO_NUMBER_ADDED = 14;
/** An iteration inside a contribution has failed. */
export const NO_CONVERGENCE = 15;
/** NaN or an infinity as given quantity. */
export const GIVEN_NO_NUMBER = 16;
/** A pressure <= 0. */
export const GIVEN_NOT_POSITIVE = 17;
/** Below the cold value of the density. */
export const BELOW_COLD = 18;
/** Less than any state has. */
export const GIVEN_TOO_LOW = 19;
/** More than any state has. */
export const GIVEN_TOO_HIGH = 20;
/** No state has both. */
export const NO_STATE = 21;
/** A contribution does not answer for this composition. */
export const COMPOSITION_REFUSED = 22;
/** A contribution says itself that matter is unstable here. */
export const CONTRIBUTION_UNSTABLE = 23;
