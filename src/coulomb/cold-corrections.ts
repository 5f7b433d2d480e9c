/**
 * The classic zero-temperature corrections to an ideal electron gas, for those who reproduce older work.
 *
 * Per electron in m_e c^2 (Salpeter 1961, ApJ 134, 669; formulas from memory, recomputed):
 *
 *     lattice        -C alpha (4/9 pi)^(1/3) <Z^(5/3)>/<Z> x            C = 0.9 (ion sphere) or 0.8959 (bcc)
 *     Thomas-Fermi   -(162/175)(4/9 pi)^(2/3) alpha^2 <Z^(7/3)>/<Z> (1 + x^2)^(1/2)
 *     exchange       -(3/4 pi) alpha x Phi(x)
 *     correlation    alpha^2 (0.031091 ln r_s - 0.0469)
 *
 * Functions of density alone, for matter at T = 0 or whose thermal part is left to others. The Thomas-Fermi term is the
 * limit of many electrons per ion and overestimates polarisation by 1.5 to 6 times for real nuclei: prefer
 * `coulombPlasma()`. The two are never added: `combine` refuses. The correlation is that of a dense non-relativistic gas
 * (Gell-Mann & Brueckner 1957, Phys. Rev. 106, 364) and negligible here.
 */
import { electronRestEnergy, fineStructureConstant } from "../constants.js";
import { FermistateError, requireFlags } from "../errors.js";
import type { Composition } from "../matter/composition.js";
import { RELATIVITY, radiusFactor } from "../matter/plasma.js";
import { notesOf } from "../matter/species-list.js";
import { NATURAL_LENGTH, SINGLE_LENGTH } from "../numerics/natural.js";
import type { Contribution } from "../thermodynamics/contribution.js";
import { addNaturalDerivatives, type Order } from "../thermodynamics/free-energy.js";
import { SPECIES_ENERGY, SPECIES_LENGTH, SPECIES_PRESSURE } from "../thermodynamics/species-members.js";
import { exchangeRelativity } from "./exchange-relativity.js";
import { bcc } from "./lattice.js";
import { POINT_LENGTH, POINT_X } from "./slots.js";

/** Options of {@link coldCorrections}: which of the terms are in. */
export interface ColdCorrectionsOptions {
  /**
   * Electrostatic energy: the bcc lattice, the ion-sphere value 0.9, or none.
   * @defaultValue "bcc"
   */
  readonly lattice?: "bcc" | "ion-sphere" | false;
  /**
   * Thomas-Fermi deviation from uniform electrons.
   * @defaultValue true
   */
  readonly thomasFermi?: boolean;
  /**
   * Relativistic exchange.
   * @defaultValue true
   */
  readonly exchange?: boolean;
  /**
   * Correlation.
   * @defaultValue true
   */
  readonly correlation?: boolean;
}

const lambda = Math.cbrt(4 / (9 * Math.PI));

/** The corrections of Salpeter (1961) as a contribution; not for use beside `coulombPlasma()`. @throws `invalid-option` */
export function coldCorrections(options: ColdCorrectionsOptions = {}): Contribution {
  requireFlags("options", options, ["thomasFermi", "exchange", "correlation"], ["lattice"]);
  const { lattice = "bcc", thomasFermi = true, exchange = true, correlation = true } = options;
  if (lattice !== "bcc" && lattice !== "ion-sphere" && lattice !== false) {
    throw new FermistateError("invalid-option", {
      argument: "lattice",
      given: lattice,
      allowed: "bcc, ion-sphere, false",
    });
  }
  const alpha = fineStructureConstant;
  const constant = lattice === "bcc" ? -bcc.madelung : lattice === "ion-sphere" ? 0.9 : 0;
  const plasma = new Float64Array(POINT_LENGTH);
  const phi = new Float64Array(SINGLE_LENGTH);
  // Linear in the nuclei, sum x_j Z_j^(5/3) and sum x_j Z_j^(7/3), and per electron.
  const ofFiveThirds = new Float64Array(NATURAL_LENGTH);
  const ofSevenThirds = new Float64Array(NATURAL_LENGTH);
  const perElectron = new Float64Array(NATURAL_LENGTH);

  function fill(point: Float64Array, composition: Composition, order: Order): void {
    const x = point[RELATIVITY]!;
    const { fiveThirds, sevenThirds } = composition.chargeMoments;
    const unit = composition.electronsPerGram * electronRestEnergy;
    ofFiveThirds.fill(0);
    ofSevenThirds.fill(0);
    perElectron.fill(0);
    // Each term as rho^i d^i/d rho^i of its energy; x ~ rho^(1/3).
    const electrostatic = (-unit * constant * alpha * lambda * fiveThirds * x) / composition.meanCharge;
    add3(ofFiveThirds, electrostatic, electrostatic / 3, (-2 / 9) * electrostatic, (10 / 27) * electrostatic);
    if (thomasFermi) {
      const e = Math.sqrt(1 + x * x);
      const k = (-unit * (162 / 175) * lambda * lambda * alpha * alpha * sevenThirds) / composition.meanCharge;
      const w = (x * x) / (1 + x * x);
      // D = x d/dx: D e = e w, D^2 e = e w (2 - w), D^3 e = e w (4 - 6w + 3w^2).
      addOfX(ofSevenThirds, k * e, k * e * w, k * e * w * (2 - w), k * e * w * (4 - 6 * w + 3 * w * w));
    }
    if (exchange) {
      plasma[POINT_X] = x;
      exchangeRelativity(phi, order, plasma);
      const k = (-3 / (4 * Math.PI)) * alpha * x * unit;
      const p0 = 1 + phi[0]!;
      const [p1, p2, p3] = [phi[1]!, phi[2]!, order === 3 ? phi[3]! : 0];
      // Leibniz with rho^(1/3): its scaled derivatives are 1, 1/3, -2/9, 10/27.
      add3(
        perElectron,
        k * p0,
        k * (p0 / 3 + p1),
        k * ((-2 / 9) * p0 + (2 / 3) * p1 + p2),
        k * ((10 / 27) * p0 - (2 / 3) * p1 + p2 + p3),
      );
    }
    if (correlation) {
      const k = unit * alpha * alpha;
      addOfX(perElectron, k * (0.031091 * Math.log(radiusFactor / x) - 0.0469), -k * 0.031091, 0, 0);
    }
  }

  return Object.freeze({
    name: "cold corrections",
    physics: Object.freeze([{ model: "cold corrections", options: { lattice, thomasFermi, exchange, correlation } }]),
    domain: Object.freeze({ density: [1e-20, 1e18], temperature: [1, 1e13], zeroTemperature: true } as const),
    validity:
      "Zero-temperature corrections of first order to degenerate, fully ionised matter: meaningless where kT is not far " +
      "below the Fermi energy or x_r is below about 0.1.",
    excludes: ["Coulomb plasma"],
    add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void {
      if (point[RELATIVITY] === 0) return;
      fill(point, composition, order);
      addNaturalDerivatives(members, order, ofFiveThirds);
      addNaturalDerivatives(members, order, ofSevenThirds);
      addNaturalDerivatives(members, order, perElectron);
    },

    // At fixed n_e the first two are sums over nuclei, dF/dY_a = phi_a + (Z_a/Y_e) rho F_rho; the third has (Z_a/Y_e) F
    // for phi_a. No temperature: dF and de are the same.
    addSpecies(point: Float64Array, composition: Composition, rows: Float64Array): void {
      if (point[RELATIVITY] === 0) return;
      fill(point, composition, 2);
      const { fiveThirds, sevenThirds } = composition.chargeMoments;
      const first = ofFiveThirds[1]! + ofSevenThirds[1]! + perElectron[1]!;
      const second = first + ofFiveThirds[3]! + ofSevenThirds[3]! + perElectron[3]!;
      const { nuclei } = notesOf(composition).list;
      for (let i = 0, row = 0; i < nuclei.length; i++, row += SPECIES_LENGTH) {
        const z = nuclei[i]!.chargeNumber;
        const third = Math.cbrt(z);
        const share = z / composition.electronsPerNucleon;
        const five = (z * third * third) / (fiveThirds * composition.ionsPerNucleon);
        const seven = (z * z * third) / (sevenThirds * composition.ionsPerNucleon);
        rows[row + SPECIES_ENERGY]! +=
          five * ofFiveThirds[0]! + seven * ofSevenThirds[0]! + share * (perElectron[0]! + first);
        rows[row + SPECIES_PRESSURE]! +=
          five * ofFiveThirds[1]! + seven * ofSevenThirds[1]! + share * (perElectron[1]! + second);
      }
    },
  });
}

/** Adds an energy with its scaled density derivatives of order 0 to 3. */
function add3(natural: Float64Array, value: number, first: number, second: number, third: number): void {
  natural[0]! += value;
  natural[1]! += first;
  natural[3]! += second;
  natural[6]! += third;
}

/** The same from derivatives (x d/dx)^k: with L = D/3, rho^2 d^2 = L^2 - L, rho^3 d^3 = L^3 - 3 L^2 + 2 L. */
function addOfX(natural: Float64Array, value: number, d1: number, d2: number, d3: number): void {
  add3(natural, value, d1 / 3, d2 / 9 - d1 / 3, d3 / 27 - d2 / 3 + (2 / 3) * d1);
}
