/** What a composition holds: species and their sums. */

/** One kind of nucleus in a composition. */
export interface Species {
  /** Label of the nuclide, "C12"; "mean" for the fictitious mean nucleus. */
  readonly label: string;
  /** Mass number A; need not be an integer for the mean nucleus. */
  readonly massNumber: number;
  /** Charge number Z; need not be an integer for the mean nucleus, 0 for the free neutron. */
  readonly chargeNumber: number;
  /** Fraction X of the nucleons that sit in this species. */
  readonly nucleonFraction: number;
  /** Fraction x of the nuclei (free neutrons included) that are this species. */
  readonly numberFraction: number;
  /** Mass of the bare nucleus M, g. */
  readonly ionMass: number;
  /** Degeneracy g = 2J + 1 of the ground state; 1 where the spin is not known, and for the mean nucleus. */
  readonly spinDegeneracy: number;
  /** False where `spinDegeneracy` is 1 for want of knowledge. */
  readonly spinKnown: boolean;
}

/** Averages of powers of the charge number over all nuclei, by number fraction: sum_j x_j Z_j^p. */
export interface ChargeMoments {
  /** p = 2/3. */
  readonly twoThirds: number;
  /** p = 4/3. */
  readonly fourThirds: number;
  /** p = 5/3: the ion coupling parameter of a mixture over that of the electrons. */
  readonly fiveThirds: number;
  /** p = 2. */
  readonly squared: number;
  /** p = 7/3. */
  readonly sevenThirds: number;
  /** p = 5/2. */
  readonly fiveHalves: number;
}

/** Species and their sums; made by `composition` and `compositions` only, frozen throughout. */
export interface Composition {
  /** Readable label, "C12 0.5, O16 0.5". */
  readonly name: string;
  /** Species of non-zero fraction, by charge number, then mass number. */
  readonly species: readonly Species[];
  /** Nuclei per nucleon, sum X_i/A_i. */
  readonly ionsPerNucleon: number;
  /** Electrons per nucleon Y_e = sum X_i Z_i/A_i. */
  readonly electronsPerNucleon: number;
  /** Mean mass number of the nuclei, 1/sum(X_i/A_i). */
  readonly meanMassNumber: number;
  /** Mean charge number of the nuclei, sum x_j Z_j. */
  readonly meanCharge: number;
  /** Other averages over the charge. */
  readonly chargeMoments: ChargeMoments;
  /** <Z^(5/3)> over the charged nuclei alone: the ion coupling over that of the electrons; 0 without charge. */
  readonly couplingMoment: number;
  /** Nuclei per gram, sum X_i/(A_i m_u), 1/g. */
  readonly ionsPerGram: number;
  /** Electrons per gram, Y_e/m_u, 1/g. */
  readonly electronsPerGram: number;
  /**
   * C = sum_j x_j ln[(x_j/g_j) (m_u/M_j)^(3/2)]. With N = `ionsPerGram` the free energy of the ideal gas is
   * F = N k T {ln[N rho (2 pi hbar^2/(m_u k T))^(3/2)] + C - 1}, erg/g.
   */
  readonly ionEntropyConstant: number;
  /** As `ionsPerGram`, free neutrons left out. */
  readonly chargedIonsPerGram: number;
  /** As `ionEntropyConstant`, with fractions x_j among charged nuclei only; 0 where there are none. */
  readonly chargedIonEntropyConstant: number;
  /** sum_j x_j Z_j^2/M_j, 1/g: the ion plasma frequency squared over 4 pi e^2 n_i. */
  readonly plasmaFrequencySum: number;
}
