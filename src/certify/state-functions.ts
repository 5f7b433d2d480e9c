/**
 * From P(mu, T) and its derivatives to functions of net density and temperature: textbook implicit differentiation.
 *
 * n = N(mu, T) fixes mu(n, T); subscripts are derivatives, N = P_mu:
 *
 *     mu_n = 1/N_mu,   mu_T = -N_T/N_mu,   N_mu mu_TT = -(N_mumu mu_T^2 + 2 N_muT mu_T + N_TT),  ...
 *     dP/dn = n mu_n,   dP/dT|n = P_T + n mu_T,   ds/dT|n = P_TT + N_T mu_T,  ...
 *
 * Written as they stand; the working precision absorbs their cancellations.
 */
import type { Decimal } from "decimal.js";
import type { Species } from "./moments.js";

/** Values of the electron-positron gas at one (n_e, T). */
export interface ElectronGasValues {
  /** (mu_e - m c^2)/kT; infinite at T = 0. */
  readonly degeneracyParameter: Decimal;
  /** mu_e/kT with the rest mass; infinite at T = 0. */
  readonly reducedChemicalPotential: Decimal;
  /** mu_e - m c^2 [erg] */
  readonly chemicalPotential: Decimal;
  /** n_- [cm^-3] */
  readonly electronDensity: Decimal;
  /** n_+ [cm^-3] */
  readonly positronDensity: Decimal;
  /** P_- + P_+ [erg/cm^3] */
  readonly pressure: Decimal;
  /** Kinetic energy of both plus 2 n_+ m c^2 [erg/cm^3]; the rest mass of the net electrons is not in it. */
  readonly energyDensity: Decimal;
  /** s of both [erg/K/cm^3] */
  readonly entropyDensity: Decimal;
  /** dP/dn at T [erg] */
  readonly pressureByDensity: Decimal;
  /** dP/dT at n [erg/K/cm^3] */
  readonly pressureByTemperature: Decimal;
  /** T ds/dT at n [erg/K/cm^3], the heat capacity per volume. */
  readonly heatCapacityDensity: Decimal;
  /** d2P/dn2 [erg cm^3] */
  readonly pressureByDensityTwice: Decimal;
  /** d2P/dn dT [erg/K] */
  readonly pressureByDensityAndTemperature: Decimal;
  /** d2P/dT2 at n [erg/K^2/cm^3] */
  readonly pressureByTemperatureTwice: Decimal;
  /** d2s/dT2 at n [erg/K^3/cm^3] */
  readonly entropyByTemperatureTwice: Decimal;
  /** d3P/dn dT2 [erg/K^2] */
  readonly pressureByDensityAndTemperatureTwice: Decimal;
}

/** Conversion of the internal units (m = c = hbar = k = 1, no 1/pi^2) to cgs. */
export interface Units {
  /** cm^-3 of one unit of density: 8 pi (m c/h)^3 */
  readonly density: Decimal;
  /** m c^2 [erg] */
  readonly energy: Decimal;
  /** k [erg/K] */
  readonly boltzmann: Decimal;
}

/** The values in cgs from both species at degeneracy `eta`, theta = kT/mc^2. */
export function stateFunctions(
  eta: Decimal,
  theta: Decimal,
  electrons: Species,
  positrons: Species | undefined,
  positronDensity: Decimal,
  units: Units,
): ElectronGasValues {
  const d = combined(electrons, positrons);
  const dimensionless = inDensityAndTemperature(d);
  const { density, energy, boltzmann } = units;
  const perKelvin = boltzmann.div(energy);
  const pressureUnit = density.times(energy);
  const entropyUnit = density.times(boltzmann);
  const nu = theta.pow(-1).plus(eta);
  return {
    degeneracyParameter: eta,
    reducedChemicalPotential: nu,
    chemicalPotential: eta.times(theta).times(energy),
    electronDensity: electrons.n.times(density),
    positronDensity: positronDensity.times(density),
    pressure: d.p.times(pressureUnit),
    energyDensity: d.kinetic.plus(positronDensity.times(2)).times(pressureUnit),
    entropyDensity: d.pt.times(entropyUnit),
    pressureByDensity: dimensionless.pn.times(energy),
    pressureByTemperature: dimensionless.pt.times(entropyUnit),
    heatCapacityDensity: dimensionless.st.times(theta).times(entropyUnit),
    pressureByDensityTwice: dimensionless.pnn.times(energy).div(density),
    pressureByDensityAndTemperature: dimensionless.pnt.times(boltzmann),
    pressureByTemperatureTwice: dimensionless.ptt.times(entropyUnit).times(perKelvin),
    entropyByTemperatureTwice: dimensionless.stt.times(entropyUnit).times(perKelvin).times(perKelvin),
    pressureByDensityAndTemperatureTwice: dimensionless.pntt.times(boltzmann).times(perKelvin),
  };
}

/** Both species as functions of the electrons' mu: positrons have -mu, so odd orders in mu change sign. */
function combined(electrons: Species, positrons: Species | undefined): Species {
  if (positrons === undefined) return electrons;
  return {
    n: electrons.n.minus(positrons.n),
    p: electrons.p.plus(positrons.p),
    kinetic: electrons.kinetic.plus(positrons.kinetic),
    nm: electrons.nm.plus(positrons.nm),
    nt: electrons.nt.minus(positrons.nt),
    nmm: electrons.nmm.minus(positrons.nmm),
    nmt: electrons.nmt.plus(positrons.nmt),
    ntt: electrons.ntt.minus(positrons.ntt),
    nmmm: electrons.nmmm.plus(positrons.nmmm),
    nmmt: electrons.nmmt.minus(positrons.nmmt),
    nmtt: electrons.nmtt.plus(positrons.nmtt),
    pt: electrons.pt.plus(positrons.pt),
    ptt: electrons.ptt.plus(positrons.ptt),
    pttt: electrons.pttt.plus(positrons.pttt),
  };
}

interface DensityTemperatureDerivatives {
  readonly pn: Decimal;
  readonly pt: Decimal;
  readonly st: Decimal;
  readonly pnn: Decimal;
  readonly pnt: Decimal;
  readonly ptt: Decimal;
  readonly stt: Decimal;
  readonly pntt: Decimal;
}

function inDensityAndTemperature(d: Species): DensityTemperatureDerivatives {
  const { n } = d;
  const mn = d.nm.pow(-1);
  const mt = d.nt.times(mn).neg();
  const mnn = d.nmm.times(mn.pow(3)).neg();
  // d/dn and d/dT at fixed n of N_mu mu_T + N_T = 0
  const mnt = d.nmm.times(mt).plus(d.nmt).times(mn).times(mn).neg();
  const mtt = d.nmm.times(mt).times(mt).plus(d.nmt.times(mt).times(2)).plus(d.ntt).times(mn).neg();
  // d/dn of N_mu mu_TT + N_mumu mu_T^2 + 2 N_muT mu_T + N_TT = 0
  const explicit = d.nmmm.times(mt).times(mt).plus(d.nmmt.times(mt).times(2)).plus(d.nmtt).plus(d.nmm.times(mtt));
  const throughMt = d.nmm.times(mt).plus(d.nmt).times(mnt).times(2);
  const mntt = explicit.times(mn).plus(throughMt).times(mn).neg();
  return {
    pn: n.times(mn),
    pt: d.pt.plus(n.times(mt)),
    st: d.ptt.plus(d.nt.times(mt)),
    pnn: mn.plus(n.times(mnn)),
    pnt: n.times(mnt),
    ptt: d.ptt.plus(d.nt.times(mt)).plus(n.times(mtt)),
    stt: d.pttt.plus(d.ntt.times(mt).times(2)).plus(d.nmt.times(mt).times(mt)).plus(d.nt.times(mtt)),
    pntt: n.times(mntt),
  };
}
