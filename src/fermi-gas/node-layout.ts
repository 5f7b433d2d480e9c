/** Layout of a row of nodes: {@link NODE_STRIDE} numbers each. No imports, so that the bundler inlines the slots. */

/** Numbers per node. */
export const NODE_STRIDE = 4;
/** E - 1, rounded. */
export const NODE_ENERGY = 0;
/** What E - 1 lost by rounding: near the Fermi surface half an ulp of E is amplified by mu/kT. */
export const NODE_ENERGY_LOW = 1;
/** Weight of number density: p^2 in momentum. */
export const NODE_NUMBER = 2;
/** Weight of pressure: p^4/(3E) in momentum. */
export const NODE_PRESSURE = 3;
