/**
 * Weak-coupling limits of the excess free energy, closed forms. In units of kT, per ion unless said otherwise.
 *
 * Debye & Hueckel 1923, Phys. Z. 24, 185: F/V = -kT kappa^3/(12 pi), kappa^2 = (4 pi e^2/kT) [sum_j n_j Z_j^2 + s n_e].
 * Ions are classical; the electrons screen with s = d ln n_e/d eta at constant T: 1 if classical, 0 for a rigid
 * background. With Gamma_e = e^2/(a_e kT), a_e the electron-sphere radius, and averages over the ions,
 *
 *     f = -(Gamma_e^(3/2)/sqrt 3) (<Z^2> + s <Z>)^(3/2)/<Z>^(1/2),
 *
 * for one ion in a rigid background -Gamma^(3/2)/sqrt 3, Gamma = Gamma_e Z^(5/3). Next term of the latter: Abe 1959,
 * Prog. Theor. Phys. 22, 213, u = -(sqrt 3/2) Gamma^(3/2) - 3 Gamma^3 [(3/8) ln 3 Gamma + gamma/2 - 1/3] (from memory;
 * checked in the test).
 *
 * Accuracy: exact as Gamma_e -> 0 at given s. With s < 1 this is the static part of the electrons' screening, which is
 * all of the limit only for weak degeneracy. Exchange and diffraction of the electrons are not contained.
 */

/** Ions of one kind: charge number and share of the number of ions. */
export interface IonShare {
  readonly charge: number;
  readonly fraction: number;
}

/** Euler's constant. */
const euler = 0.57721566490153286061;

/** Whole excess free energy per ion of a mixture, background of response s: ions, electrons and their interaction. */
export function debyeHueckel(ions: readonly IonShare[], gammaE: number, response: number): number {
  const charge = mean(ions, 1);
  return -(((gammaE * (mean(ions, 2) + response * charge)) ** 1.5 / Math.sqrt(3)) * (1 / Math.sqrt(charge)));
}

/** One kind of ion in a rigid background. */
export function ionDebyeHueckel(gamma: number): number {
  return -(gamma ** 1.5) / Math.sqrt(3);
}

/** Electrons alone in a rigid background of the opposite charge, per electron. */
export function electronDebyeHueckel(gammaE: number, response: number): number {
  return -((gammaE * response) ** 1.5) / Math.sqrt(3);
}

/**
 * Ion-electron part per ion for one kind of ion: the whole less the ions and less Z times the electrons, each in a
 * rigid background: -(Gamma_e^(3/2) Z/sqrt 3) [(Z + s)^(3/2) - Z^(3/2) - s^(3/2)].
 */
export function ionElectronDebyeHueckel(charge: number, gammaE: number, response: number): number {
  const bracket = (charge + response) ** 1.5 - charge ** 1.5 - response ** 1.5;
  return -(charge * gammaE ** 1.5 * bracket) / Math.sqrt(3);
}

/**
 * Departure from linear mixing at common electron density, per ion: the whole less the same of each pure kind.
 * Positive. Response 0: (Gamma_e^(3/2)/sqrt 3) [<Z^(5/2)> - <Z^2>^(3/2)/<Z>^(1/2)].
 */
export function mixingDebyeHueckel(ions: readonly IonShare[], gammaE: number, response: number): number {
  const pure = ions.reduce((sum, { charge, fraction }) => sum + fraction * charge * (charge + response) ** 1.5, 0);
  const charge = mean(ions, 1);
  const mixed = (mean(ions, 2) + response * charge) ** 1.5 / Math.sqrt(charge);
  return ((pure - mixed) * gammaE ** 1.5) / Math.sqrt(3);
}

/** Debye-Hueckel and Abe terms of one kind of ion in a rigid background. Next term: order Gamma^(9/2) ln Gamma. */
export function abe(gamma: number): { f: number; u: number } {
  const logarithm = (3 / 8) * Math.log(3 * gamma) + euler / 2;
  return {
    f: ionDebyeHueckel(gamma) - gamma ** 3 * (logarithm - 1 / 3 - 1 / 8),
    u: 1.5 * ionDebyeHueckel(gamma) - 3 * gamma ** 3 * (logarithm - 1 / 3),
  };
}

function mean(ions: readonly IonShare[], power: number): number {
  return ions.reduce((sum, { charge, fraction }) => sum + fraction * charge ** power, 0);
}
