/**
 * Constants of the reference evaluation as decimal strings, cgs.
 *
 * Source: CODATA 2022 recommended values (P. J. Mohr, D. B. Newell, B. N. Taylor, E. Tiesinga, Rev. Mod. Phys. 97,
 * 025002, 2025). h, k, c and N_A are exact in the SI. They stand here a second time on purpose: the reference shares
 * nothing with the code it certifies.
 */
export const planckConstant = "6.62607015e-27"; // erg s, exact
export const boltzmannConstant = "1.380649e-16"; // erg/K, exact
export const speedOfLight = "29979245800"; // cm/s, exact
export const electronMass = "9.1093837139e-28"; // g
export const atomicMassConstant = "1.66053906892e-24"; // g
export const fineStructureConstant = "7.2973525643e-3";
