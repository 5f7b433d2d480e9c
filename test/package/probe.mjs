/**
 * What is compared between Node and a browser: plain data (numbers, text, arrays, objects) made with the built core only.
 *
 * This file runs in both: no imports, no Node, no DOM.
 */

/**
 * Largest relative difference of two numbers, times the `conditioning` of the object they stand in (1 where it has none):
 * 4 units in the last place. Engines differ by 1 to 2 in exp, log and pow (measured between V8 11.3 and Chromium).
 */
export const relativeTolerance = 4 * 2 ** -52;

/**
 * By how much half an ulp of an elementary function can grow in a state: e^eta of thin gas loses |eta| ulp, e^(-1/theta)
 * of pairs 1/theta ulp, the entropy of partly degenerate gas 0.28 eta ulp.
 */
function conditioningOf(state) {
  const eta = state.electronDegeneracy;
  const inverse = 5929896583 / state.temperature;
  const thin = eta < 0 ? -eta : eta < 40 ? 0.28 * eta : 0;
  return 1 + thin + (state.positronDensity > 1e-12 * state.electronDensity ? inverse : 0);
}

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
  const eos = fermistate.whiteDwarfMatter({ coulomb: false });
  const full = fermistate.whiteDwarfMatter();
  const cold = fermistate.combine(fermistate.electronPositronGas());
  const compositions = [
    { C12: 0.5, O16: 0.5 },
    { H1: 0.7, He4: 0.3 },
    { meanMassNumber: 50, meanCharge: 23.5 },
  ];
  const states = [];
  for (const fractions of compositions) {
    const matter = fermistate.composition(fractions);
    for (let logT = 2; logT <= 13; logT += 1) {
      for (let logRho = -14; logRho <= 14; logRho += 2) {
        // Differences that cross zero are left out, their terms are in: e - T s, and P - T dP/dT of an ideal gas.
        const { composition, specificFreeEnergy, energyByDensity, ...state } = eos.state(
          10 ** logRho,
          10 ** logT,
          matter,
        );
        states.push({ name: composition.name, conditioning: conditioningOf(state), ...state });
      }
    }
    // The Coulomb plasma where it is ionised: liquid and crystal. Its fits subtract numbers of order Gamma. Hydrogen and
    // helium as cold and dense as this are beyond the quantum liquid, and refused.
    const densest = "H1" in fractions ? 6 : 10;
    for (let logT = 6; logT <= 9; logT += 0.5) {
      for (let logRho = 5; logRho <= densest; logRho += 1) {
        const { composition, specificFreeEnergy, energyByDensity, ...state } = full.state(
          10 ** logRho,
          10 ** logT,
          matter,
        );
        states.push({ name: composition.name, conditioning: 4 * conditioningOf(state), ...state });
      }
    }
    for (let logRho = -14; logRho <= 14; logRho += 2) {
      const { composition, electronDegeneracy, electronCoupling, ionCoupling, ...state } = cold.state(
        10 ** logRho,
        0,
        matter,
      );
      states.push(state);
    }
  }
  return {
    error: { code: error.code, message: error.message, recognised: fermistate.isFermistateError(error) },
    constants: fermistate.constants,
    nuclides: ["n", "H1", "He4", "C12", "Fe56", "U238"].map((label) => fermistate.nuclide(label)),
    states,
  };
}
