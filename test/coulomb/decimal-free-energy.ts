/**
 * The Coulomb terms as functions of density, temperature and the amount of every species, as the head comments of
 * src/coulomb print them, in decimal arithmetic: erg/g, no derivative anywhere. Constants, coefficients of a charge
 * and lattice constants are the library's doubles; every sum over a composition is made here.
 */
import type { Decimal } from "decimal.js";
import {
  atomicMassConstant,
  bohrRadius,
  boltzmannConstant,
  electronRestEnergy,
  elementaryChargeSquared,
  fineStructureConstant,
  reducedPlanckConstant,
} from "../../src/constants.js";
import { ANHARMONIC_SUPPRESSION, type LatticeConstants } from "../../src/coulomb/lattice.js";
import * as slot from "../../src/coulomb/slots.js";
import { coulombSpecies } from "../../src/coulomb/species.js";
import type { Composition } from "../../src/matter/composition.js";
import { Exact as Wide } from "./decimal-members.js";

/** Decimal numbers of 44 digits. */
export const Exact: typeof Decimal = Wide.clone({ precision: 44, defaults: true });
const d = (value: Decimal.Value): Decimal => new Exact(value);
const pi = Exact.acos(-1);
const sum = (values: readonly Decimal[]): Decimal => values.reduce((a, b) => a.plus(b), d(0));
const third = d(1).div(3);

/** A nucleus: what does not change with the composition. */
interface Nucleus {
  readonly z: number;
  readonly mass: number;
  readonly g: number;
  /** Record of slots.ts; of it only what depends on the charge is read. Undefined for a neutron. */
  readonly ion: Float64Array | undefined;
}

/** Terms by the names that the parts of `coulombPlasma` have, and by those of `coldCorrections`' switches. */
type Terms = Readonly<Record<string, Decimal>>;
/** F of each term at density, temperature and amounts Y = X/A in the order of `composition.species`. */
export type FreeEnergy = (density: Decimal, temperature: Decimal, amounts: readonly Decimal[]) => Terms;

/** Options of a reference. */
export interface Form {
  readonly lattice: LatticeConstants;
  readonly polarisable: boolean;
}

function nucleiOf(composition: Composition, lattice: LatticeConstants): readonly Nucleus[] {
  const { ions } = coulombSpecies(composition, lattice);
  const neutral = composition.species.length - ions.length;
  return composition.species.map((one, i) => ({
    z: one.chargeNumber,
    mass: one.ionMass,
    g: one.spinDegeneracy,
    ion: ions[i - neutral],
  }));
}

/** Plasma variables common to all terms. */
function plasma(density: Decimal, temperature: Decimal, amounts: readonly Decimal[], nuclei: readonly Nucleus[]) {
  const electrons = sum(amounts.map((y, i) => y.times(nuclei[i]!.z))).div(atomicMassConstant); // per gram
  const ne = density.times(electrons);
  const radius = d(3).div(ne.times(pi).times(4)).pow(third);
  const kT = temperature.times(boltzmannConstant);
  const gammaE = d(elementaryChargeSquared).div(radius.times(kT));
  const rs = radius.div(bohrRadius);
  const x = pi.times(9).div(4).pow(third).times(fineStructureConstant).div(rs);
  const theta = ({ z, mass }: Nucleus): Decimal =>
    pi.times(4).times(elementaryChargeSquared).times(ne).times(z).div(mass).sqrt().times(reducedPlanckConstant).div(kT);
  return { electrons, kT, gammaE, rs, x, theta };
}

/** Number fractions of charged nuclei and their moments. */
function moments(amounts: readonly Decimal[], nuclei: readonly Nucleus[]) {
  const charged = nuclei.map(({ z }, i) => ({ z, y: amounts[i]! })).filter(({ z }) => z > 0);
  const total = sum(charged.map(({ y }) => y));
  const mean = (of: (z: Decimal) => Decimal): Decimal => sum(charged.map(({ z, y }) => y.times(of(d(z))))).div(total);
  return { total, mean };
}

const z53 = (z: number): Decimal => d(z).pow(d(5).div(3));

function classical(g: Decimal): Decimal {
  const [a1, a2, b1, b2, b3, b4] = [-0.907, 0.62954, 0.00456, 211.6, -1e-4, 0.00462].map(d) as Decimal[];
  const a3 = d(3).sqrt().div(-2).minus(a1!.div(a2!.sqrt()));
  const root = g.sqrt();
  return sum([
    a1!.times(
      g
        .times(g.plus(a2!))
        .sqrt()
        .minus(a2!.times(g.div(a2!).sqrt().asinh())),
    ),
    a3.times(2).times(root.minus(root.atan())),
    b1!.times(g.minus(b2!.times(g.div(b2!).plus(1).ln()))),
    b3!.div(2).times(g.times(g).div(b4!).plus(1).ln()),
  ]);
}

const g1 = d("1.17225");
const w1 = d("0.861406");
const g2 = d(3).minus(g1);
const w2 = d(1).minus(g1.times(w1).times(w1)).div(g2).sqrt();
function twoOscillators(theta: Decimal): Decimal {
  const one = (g: Decimal, w: Decimal): Decimal => {
    const x = w.times(theta);
    return g.times(x.div(2).plus(d(1).minus(x.neg().exp()).ln()).minus(x.ln()));
  };
  return one(g1, w1).plus(one(g2, w2));
}

function baikoYakovlev(theta: Decimal): Decimal {
  const [q1, q2, q4] = [d("5.994"), d("70.3"), d("22.7")];
  const q3 = d("0.25").minus(q1.div(q2)).times(q4);
  const h = theta.div(d(3).sqrt());
  return q1.times(h.minus(q2.times(h.div(q2).plus(1).ln()))).plus(q3.div(2).times(h.times(h).div(q4).plus(1).ln()));
}

function liquidPolarisation(gammaE: Decimal, rs: Decimal, x: Decimal, z: number, ion: Float64Array): Decimal {
  const at = (i: number): Decimal => d(ion[i]!);
  const x2 = x.times(x);
  const power = gammaE.pow(at(slot.ION_NU));
  const v = gammaE.times(d(z).div(rs).pow(3));
  const first = at(slot.ION_W).times(gammaE.sqrt()).div(v.plus(21)).plus(1);
  const second = d(1)
    .div(at(slot.ION_E0).plus(gammaE.times(2)))
    .plus(1)
    .times(at(slot.ION_ZETA))
    .times(rs.pow(3).div(rs.times(rs).times(6).plus(1)))
    .plus(1);
  const h1 = x2
    .div(5)
    .plus(1)
    .div(at(slot.ION_H1).times(x).plus(at(slot.ION_H2).times(x2)).plus(1));
  const h2 = d(1).div(x2.plus(1).sqrt());
  const top = at(slot.ION_C_DH).times(gammaE.sqrt()).plus(at(slot.ION_C_TF).times(power).times(first).times(h1));
  const inner = at(slot.ION_B).times(gammaE.sqrt()).plus(at(slot.ION_A).times(second).times(power).div(rs));
  return gammaE.neg().times(top).div(inner.times(h2).plus(1));
}

/** Per charged nucleus and kT. */
function mixtureCorrection(
  gammaE: Decimal,
  mean: (of: (z: Decimal) => Decimal) => Decimal,
  polarisable: boolean,
): Decimal {
  const [m1, m2, m52, m53] = [
    mean((z) => z),
    mean((z) => z.times(z)),
    mean((z) => z.pow("2.5")),
    mean((z) => z.pow(d(5).div(3))),
  ] as const;
  const pure = polarisable ? mean((z) => z.times(z.plus(1).pow("1.5"))) : m52;
  const delta = pure.minus((polarisable ? m2.plus(m1) : m2).pow("1.5").div(m1.sqrt())).div(m52);
  const a = delta.pow(3).times(14).plus("2.6").div(d(1).minus(delta));
  const alpha = m1.pow("0.4").div(m2.pow("0.2"));
  const b = m2.div(m1.times(m1)).pow(2).times("0.0117").times(a);
  const beta = d(3).div(alpha.times(2)).minus(1);
  const g = gammaE.times(m53).pow(alpha);
  const below = a.times(g).plus(1).times(b.times(g).plus(1).pow(beta));
  return gammaE.pow("1.5").times(m52).div(d(3).sqrt()).times(delta).div(below);
}

function relativity(x: Decimal): Decimal {
  const y = x.times(x.times(x).plus(1).sqrt()).minus(x.asinh()).div(x.times(x));
  return d(1).minus(y.times(y).times("1.5"));
}

/** Per electron in e^2/a_e. */
function exchangeCorrelation(rs: Decimal, gammaE: Decimal, x: Decimal): Decimal {
  const t = d(4).div(pi.times(9)).pow(d(2).div(3)).times(2).times(rs).div(gammaE);
  const rational = (n0: string, n2: string, n3: string, n4: string, d2: string, d4: Decimal.Value): Decimal =>
    d(n0)
      .plus(t.pow(2).times(n2))
      .plus(t.pow(3).times(n3))
      .plus(t.pow(4).times(n4))
      .div(t.pow(2).times(d2).plus(t.pow(4).times(d4)).plus(1));
  const cold = t.pow(-1).tanh();
  const root = t.pow("-0.5").tanh();
  const limit = d("1.5")
    .sqrt()
    .times("0.300483986662")
    .div(d(4).div(pi.times(9)).pow(third));
  const a = rational("0.75", "3.04363", "-0.09227", "1.7035", "8.31051", "5.1105").times("0.610887").times(cold);
  const b = rational("0.3436902", "7.82159531356", "0", "0.300483986662", "15.8443467125", limit).times(root);
  const dd = rational("0.72700876", "2.38264734144", "0", "0.30221237251", "4.39347718395", "0.729951339845").times(
    root,
  );
  const e = rational("0.25388214", "0.815795138599", "0", "0.0646844410481", "15.0984620477", "0.230761357474").times(
    cold,
  );
  const c = e.times(d("0.8759442").minus(t.pow(-1).neg().exp().times("0.230130843551")));
  const top = a.plus(b.times(rs.sqrt())).plus(c.times(rs));
  const bottom = dd.times(rs.sqrt()).plus(e.times(rs)).plus(1);
  return top
    .div(bottom)
    .plus(a.times(relativity(x).minus(1)))
    .neg();
}

function thermalPhonons(theta: Decimal, lattice: LatticeConstants): Decimal {
  const polynomial = (c: readonly number[]): Decimal => sum(c.map((value, n) => theta.pow(n).times(value)));
  const logarithms = lattice.exponents.map((alpha) => d(1).minus(theta.times(alpha).neg().exp()).ln());
  return sum(logarithms).minus(polynomial(lattice.numerator).div(polynomial(lattice.denominator)));
}

function crystalPolarisation(gamma: Decimal, theta: Decimal, x: Decimal, ion: Float64Array): Decimal {
  const at = (i: number): Decimal => d(ion[i]!);
  const x2 = x.times(x);
  const y = theta.times("0.205").pow(2);
  const e = d(1).exp();
  const q = y
    .exp()
    .plus(1)
    .ln()
    .div(e.minus(e.minus(2).times(y.neg().exp())).ln())
    .sqrt();
  const infinite = at(slot.ION_F_INF).times(at(slot.ION_B2).div(x2).plus(1).sqrt());
  const a = at(slot.ION_B3).plus(at(slot.ION_A3).times(x2)).div(at(slot.ION_B4).times(x2).plus(1));
  return infinite
    .neg()
    .times(gamma)
    .times(a.times(q.div(gamma).pow(at(slot.ION_S))).plus(1));
}

/** Energy of a random alloy beyond linear mixing, e^2/a_e, times the number of charged nuclei. */
function alloy(amounts: readonly Decimal[], nuclei: readonly Nucleus[]): Decimal {
  const byCharge = new Map<number, Decimal>();
  nuclei.forEach(({ z }, i) => {
    if (z > 0) byCharge.set(z, (byCharge.get(z) ?? d(0)).plus(amounts[i]!));
  });
  const all = [...byCharge].sort((a, b) => a[0] - b[0]);
  const total = sum(all.map(([, y]) => y));
  const pairs = all.flatMap(([zi, yi], i) =>
    all.slice(i + 1).map(([zj, yj]) => {
      const r = d(zj).div(zi).minus(1);
      const inRange = Exact.min(r, "3.5");
      const s = yj.div(yi.plus(yj)).sqrt();
      const size = r
        .times(r)
        .times("0.05")
        .div(r.times("0.64").plus(1).times(r.times(r).times("0.5").plus(1)));
      const quartic = s.times(s.minus("0.3")).times(s.minus("0.7")).times(s.minus(1));
      const depth = inRange.times(27).div(inRange.times("0.1").plus(1));
      return yi.times(yj).div(total).times(z53(zi)).times(size).div(depth.times(quartic).plus(1));
    }),
  );
  return sum(pairs);
}

/** Terms of the liquid. */
export function liquid(composition: Composition, form: Form): FreeEnergy {
  const nuclei = nucleiOf(composition, form.lattice);
  return (density, temperature, amounts) => {
    const { electrons, kT, gammaE, rs, x, theta } = plasma(density, temperature, amounts, nuclei);
    const perNucleus = kT.div(atomicMassConstant);
    const linear = (of: (one: Nucleus & { ion: Float64Array }) => Decimal): Decimal =>
      sum(
        nuclei.map((one, i) => (one.ion === undefined ? d(0) : amounts[i]!.times(of({ ...one, ion: one.ion })))),
      ).times(perNucleus);
    const { total, mean } = moments(amounts, nuclei);
    const wave = d(reducedPlanckConstant).pow(2).times(pi.times(2)).div(kT);
    const ideal = nuclei.map(({ mass, g }, i) => {
      const n = density.times(amounts[i]!).div(atomicMassConstant);
      return amounts[i]!.times(n.times(wave.div(mass).pow("1.5")).div(g).ln().minus(1));
    });
    return {
      "ideal ions": sum(ideal).times(perNucleus),
      "ion correlation": linear(({ z }) => classical(gammaE.times(z53(z)))),
      "two-oscillators": linear((one) => twoOscillators(theta(one))),
      "wigner-kirkwood": linear((one) => theta(one).pow(2).div(24)),
      "baiko-yakovlev": linear((one) => baikoYakovlev(theta(one))),
      "electron polarisation": linear(({ z, ion }) => liquidPolarisation(gammaE, rs, x, z, ion)),
      "mixture correction": mixtureCorrection(gammaE, mean, form.polarisable).times(total).times(perNucleus),
      "exchange and correlation": exchangeCorrelation(rs, gammaE, x).times(gammaE).times(kT).times(electrons),
    };
  };
}

/** Terms of the crystal. */
export function crystal(composition: Composition, form: Form): FreeEnergy {
  const { lattice } = form;
  const nuclei = nucleiOf(composition, lattice);
  return (density, temperature, amounts) => {
    const { electrons, kT, gammaE, rs, x, theta } = plasma(density, temperature, amounts, nuclei);
    const perNucleus = kT.div(atomicMassConstant);
    const linear = (of: (one: Nucleus & { ion: Float64Array }, amount: Decimal) => Decimal): Decimal =>
      sum(
        nuclei.map((one, i) =>
          one.ion === undefined ? d(0) : amounts[i]!.times(of({ ...one, ion: one.ion }, amounts[i]!)),
        ),
      ).times(perNucleus);
    const { total, mean } = moments(amounts, nuclei);
    const meanCharge = mean((z) => z);
    const anharmonic = (gamma: Decimal, t: Decimal): Decimal => {
      const classicalSum = sum(lattice.anharmonic.map((a, k) => d(a).div(gamma.pow(k + 1).times(k + 1))));
      const t2 = t.times(t);
      return classicalSum
        .times(t2.times(-ANHARMONIC_SUPPRESSION).exp())
        .plus(t2.div(gamma).times(lattice.anharmonicQuantum))
        .neg();
    };
    const gammaOf = (z: number): Decimal => gammaE.times(z53(z));
    return {
      "lattice energy": linear(({ z }) => gammaOf(z).times(lattice.madelung)),
      "zero-point energy": linear((one) => theta(one).times(lattice.u1).times("1.5")),
      phonons: linear((one) => thermalPhonons(theta(one), lattice)),
      "anharmonic lattice": linear((one) => anharmonic(gammaOf(one.z), theta(one))),
      "electron polarisation": linear((one) => crystalPolarisation(gammaOf(one.z), theta(one), x, one.ion)),
      "mixing and spin entropy": linear(({ z, g }, y) => y.div(total).times(z).div(meanCharge).div(g).ln()),
      "alloy deviation": alloy(amounts, nuclei).times(gammaE).times(perNucleus),
      "exchange and correlation": exchangeCorrelation(rs, gammaE, x).times(gammaE).times(kT).times(electrons),
    };
  };
}

/** The corrections of Salpeter (1961) with the bcc lattice. */
export function cold(composition: Composition, form: Form): FreeEnergy {
  const nuclei = nucleiOf(composition, form.lattice);
  return (density, temperature, amounts) => {
    const { electrons, rs, x } = plasma(density, temperature, amounts, nuclei);
    const total = sum(amounts.map((y) => y));
    const mean = (p: Decimal): Decimal => sum(nuclei.map(({ z }, i) => amounts[i]!.times(d(z).pow(p)))).div(total);
    const unit = electrons.times(electronRestEnergy);
    const alpha = d(fineStructureConstant);
    const lambda = d(4).div(pi.times(9)).pow(third);
    const meanCharge = mean(d(1));
    const energy = sum([
      lambda
        .times(alpha)
        .times(form.lattice.madelung)
        .times(mean(d(5).div(3)))
        .div(meanCharge)
        .times(x),
      lambda
        .times(alpha)
        .pow(2)
        .times(-162)
        .div(175)
        .times(mean(d(7).div(3)))
        .div(meanCharge)
        .times(x.times(x).plus(1).sqrt()),
      alpha.times(-3).div(pi.times(4)).times(x).times(relativity(x)),
      alpha.pow(2).times(rs.ln().times("0.031091").minus("0.0469")),
    ]);
    return { "cold corrections": energy.times(unit) };
  };
}
