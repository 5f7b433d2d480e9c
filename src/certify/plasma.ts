/**
 * Matter and plasma variables of the reference: everything from nucleon fractions, printed masses and exact constants.
 *
 *     n_e = sum n_j Z_j,  a_e = (3/4 pi n_e)^(1/3),  Gamma_e = e^2/(a_e kT),  r_s = a_e/a_B,  x = (9 pi/4)^(1/3) alpha/r_s
 *     Gamma_j = Z_j^(5/3) Gamma_e,   theta_j = hbar omega_j/kT,  omega_j^2 = 4 pi e^2 n_e Z_j/M_j,   R_S,j = (M_j/m_e) Z_j^(7/3) r_s
 *
 * (Salpeter & Van Horn 1969, ApJ 155, 183, and common practice.) Of a composition only what defines it is read: labels, mass and
 * charge numbers, nucleon fractions, spin degeneracies.
 */
import type { Decimal } from "decimal.js";
import type { Composition } from "../matter/composition.js";
import { nuclide } from "../matter/nuclides.js";
import * as constants from "./constants.js";
import { type Arithmetic, exactDecimal } from "./exact.js";
import { type Series, type SeriesLength, variables } from "./series.js";

/** One species in exact numbers. */
export interface ExactSpecies {
  /** Charge number Z. */
  readonly z: Decimal;
  /** Mass of the bare nucleus, g. */
  readonly mass: Decimal;
  /** Degeneracy of the ground state. */
  readonly g: number;
  /** Nuclei per gram. */
  readonly perGram: Decimal;
  /** Z^(5/3). */
  readonly coupling: Decimal;
}

/** Species and the sums over them. */
export interface ExactMatter {
  readonly all: readonly ExactSpecies[];
  /** Those with Z > 0. */
  readonly charged: readonly ExactSpecies[];
  /** Charged nuclei per gram. */
  readonly chargedPerGram: Decimal;
  /** Electrons per gram. */
  readonly electronsPerGram: Decimal;
}

const kept = new WeakMap<Composition, Map<number, ExactMatter>>();

/** A composition in exact numbers. */
export function exactMatter(D: Arithmetic, composition: Composition): ExactMatter {
  const byPrecision = kept.get(composition) ?? new Map<number, ExactMatter>();
  kept.set(composition, byPrecision);
  const found = byPrecision.get(D.precision) ?? makeMatter(D, composition);
  byPrecision.set(D.precision, found);
  return found;
}

function makeMatter(D: Arithmetic, composition: Composition): ExactMatter {
  const all = composition.species.map((one): ExactSpecies => {
    const z = exactDecimal(D, "chargeNumber", one.chargeNumber);
    const a = exactDecimal(D, "massNumber", one.massNumber);
    // A printed mass means the decimal printed, which a double repeats; a mean nucleus has the mass A m_u.
    const inU = one.label === "mean" ? a : new D(String(nuclide(one.label).atomicMass));
    return {
      z,
      mass: inU.times(constants.atomicMassConstant).minus(z.times(constants.electronMass)),
      g: one.spinDegeneracy,
      coupling: z.isZero() ? z : z.pow(new D(5).div(3)),
      perGram: exactDecimal(D, "nucleonFraction", one.nucleonFraction).div(a).div(constants.atomicMassConstant),
    };
  });
  const charged = all.filter(({ z }) => z.gt(0));
  return {
    all,
    charged,
    chargedPerGram: sum(D, charged, ({ perGram }) => perGram),
    electronsPerGram: sum(D, charged, ({ perGram, z }) => perGram.times(z)),
  };
}

/** The sum of a term over species. */
export function sum(D: Arithmetic, species: readonly ExactSpecies[], term: (one: ExactSpecies) => Decimal): Decimal {
  return species.reduce((total, one) => total.plus(term(one)), new D(0));
}

/** Average over the charged nuclei by number. */
export function chargedMean({ charged, chargedPerGram }: ExactMatter, of: (one: ExactSpecies) => Decimal): Decimal {
  const D = chargedPerGram.constructor as Arithmetic;
  // the fraction first: for one species the average is exact
  return sum(D, charged, (one) => one.perGram.div(chargedPerGram).times(of(one)));
}

/** Plasma variables at a point as series in density and temperature; those of the electrons only where there are any. */
export interface Plasma {
  readonly D: Arithmetic;
  readonly matter: ExactMatter;
  readonly density: Series;
  readonly temperature: Series;
  readonly kT: Series;
  readonly pi: Decimal;
  readonly hbar: Decimal;
  readonly alpha: Decimal;
  /** e^2/a_e, erg. */
  readonly electronEnergy: Series;
  readonly gammaE: Series;
  readonly rs: Series;
  readonly x: Series;
  readonly gamma: (one: ExactSpecies) => Series;
  readonly theta: (one: ExactSpecies) => Series;
}

/** The variables at density [g/cm^3] and temperature [K] > 0 of matter with electrons. */
export function plasmaAt(
  D: Arithmetic,
  length: SeriesLength,
  matter: ExactMatter,
  density: Decimal,
  temperature: Decimal,
): Plasma {
  const pi = D.acos(-1);
  const third = new D(1).div(3);
  const hbar = new D(constants.planckConstant).div(pi.times(2));
  const alpha = new D(constants.fineStructureConstant);
  const squaredCharge = alpha.times(hbar).times(constants.speedOfLight);
  const bohrRadius = hbar.div(alpha.times(constants.electronMass).times(constants.speedOfLight));
  const [rho, T] = variables(D, length, density, temperature);
  const ne = rho.times(matter.electronsPerGram);
  const radius = ne.times(pi.times(4).div(3)).pow(third.neg());
  const kT = T.times(constants.boltzmannConstant);
  const electronEnergy = radius.pow(-1).times(squaredCharge);
  const gammaE = electronEnergy.div(kT);
  const rs = radius.div(bohrRadius);
  const frequency = ne.times(pi.times(4).times(squaredCharge)).sqrt().times(hbar).div(kT);
  return {
    D,
    matter,
    density: rho,
    temperature: T,
    kT,
    pi,
    hbar,
    alpha,
    electronEnergy,
    gammaE,
    rs,
    x: rs.pow(-1).times(pi.times(9).div(4).pow(third).times(alpha)),
    gamma: ({ coupling }) => gammaE.times(coupling),
    theta: ({ z, mass }) => frequency.times(z.div(mass).sqrt()),
  };
}

/** Whether the rule says crystal: sum x_j Gamma_j >= Gamma_m and mean R_S >= 160 over the charged nuclei. */
export function crystalMargins(
  { gammaE, rs, matter, D }: Plasma,
  meltingCoupling: number,
): { readonly coupling: Decimal; readonly quantum: Decimal } {
  const third = new D(1).div(3);
  const coupling = gammaE.c[0]!.times(chargedMean(matter, (one) => one.coupling));
  const quantum = rs.c[0]!.times(
    chargedMean(matter, ({ z, mass }) => z.pow(third.times(7)).times(mass).div(constants.electronMass)),
  );
  return { coupling: coupling.div(meltingCoupling), quantum: quantum.div(160) };
}
