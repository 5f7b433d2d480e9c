/**
 * The numbers that decide accuracy, in one place, each with its reason. No physics, no tables.
 *
 * This file imports nothing on purpose: the bundler writes such constants into the loops that use them as literals.
 */

/** ln(1e16) = 37 plus the logarithm of the first omitted pole's amplitude, 1e2...1e3 (tuned by measurement). */
export const DIGITS = 45;
/** In rapidity the weights grow with cosh u: three digits more. */
export const RAPIDITY_DIGITS = 48;
/** A Gaussian e^(-p^2/2 theta) grows to 1e16 at height sqrt(74 theta): beyond, growth wins over decay. */
export const GAUSSIAN_HEIGHT = 74;
/** Height in rapidity below which no zero of cosh u disturbs: pi/2 less a margin. */
export const CLEAR_HEIGHT = 1.35;
/** A pole counts only below the contour; the margin covers the rounding of the comparison itself. */
export const CONTOUR_MARGIN = 1.0000001;

/** End of the sums in y: x^(7/2) e^(-x) < 1e-17 of the integral (order 2). */
export const CUT_SECOND = 52;
/** The same for x^(9/2) e^(-x) (order 3), and for x^4 e^(-x) of a relativistic species alone. */
export const CUT_THIRD = 57;
/** The same for the classical moments x^3 p^2 e^(-x), and for a positive sum of e^(-x). */
export const CUT_CLASSICAL = 56;
export const CUT_DENSITY = 46;

/** Degeneracy from which Sommerfeld's series is used: where its error, e^(-eta) times amplitudes, is the smaller. */
export const SOMMERFELD_ETA = 38;
/** The same for third-order members. */
export const SOMMERFELD_ETA_THIRD = 39.5;
/** Terms of the series at most; at eta = 38 it stops by itself before. */
export const SOMMERFELD_TERMS = 24;
/** A term below this part of its sum ends the series. */
export const SERIES_END = 1e-17;

/** Positrons are summed below this nu: beyond, e^(-2 nu) (2/theta)^2 of c_v is below 1e-17 ... */
export const PAIRS_NU = 26;
/** ... unless theta is above PAIRS_THETA, where the cut of E costs e^(-nu - 2 pi/h): then up to this nu. */
export const PAIRS_NU_HOT = 46;
export const PAIRS_THETA = 0.05;

/** Fermi energy over temperature from which the degenerate start value is the better one. */
export const DEGENERATE_START = 39;
/** e^(-38): X below which the Fermi correction 2^(-3/2) X of the classical gas is under 1e-17. */
export const CLASSICAL_LIMIT = 3.1391327920480296e-17;
/** Relative offset from which a Taylor step leaves less than 1e-14 in every second-order member. */
export const TAYLOR_RADIUS = 2e-7;
/** The same before the second sweep of order 3, whose own remainder is a derivative higher. */
export const TAYLOR_RADIUS_THIRD = 1e-7;
/** Sweeps after which the solver gives up (the most seen is 9, from starts put off on purpose). */
export const MOST_SWEEPS = 40;
