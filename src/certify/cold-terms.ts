/**
 * The classic zero-temperature corrections, erg per electron: Salpeter 1961, ApJ 134, 669.
 *
 *     lattice        -C alpha (4/9 pi)^(1/3) (<Z^(5/3)>/<Z>) x m c^2,       C = 0.9 or the bcc constant
 *     Thomas-Fermi   -(162/175) (4/9 pi)^(2/3) alpha^2 (<Z^(7/3)>/<Z>) (1 + x^2)^(1/2) m c^2
 *     exchange       -(3/4 pi) alpha x Phi(x) m c^2
 *     correlation    alpha^2 (0.031091 ln r_s - 0.0469) m c^2
 */
import * as constants from "./constants.js";
import { lattices } from "./crystal-terms.js";
import { relativisticExchange } from "./exchange-terms.js";
import { chargedMean, type Plasma } from "./plasma.js";
import type { Series } from "./series.js";

/** The terms by name; `lattice` is "bcc", "ion-sphere" or false. */
export function coldTerms(
  { D, pi, alpha, matter, x, rs }: Plasma,
  options: Readonly<Record<string, string | number | boolean>>,
): Readonly<Record<string, Series>> {
  const restEnergy = new D(constants.electronMass).times(new D(constants.speedOfLight).pow(2));
  const lambda = new D(4).div(pi.times(9)).cbrt();
  const ratio = (thirds: number) =>
    chargedMean(matter, ({ z }) => z.pow(new D(thirds).div(3))).div(chargedMean(matter, ({ z }) => z));
  const constant = options["lattice"] === "bcc" ? lattices.bcc.madelung : "-0.9";
  const thomasFermi = alpha.times(lambda).pow(2).times(-162).div(175).times(ratio(7));
  const energies: Record<string, Series | false> = {
    "cold lattice": options["lattice"] !== false && x.times(alpha.times(lambda).times(constant).times(ratio(5))),
    "Thomas-Fermi": options["thomasFermi"] === true && x.times(x).plus(1).sqrt().times(thomasFermi),
    "cold exchange":
      options["exchange"] === true &&
      relativisticExchange(x)
        .times(x)
        .times(alpha.times(-3).div(pi.times(4))),
    "cold correlation":
      options["correlation"] === true && rs.ln().times("0.031091").minus("0.0469").times(alpha.times(alpha)),
  };
  const kept = Object.entries(energies).filter((entry): entry is [string, Series] => entry[1] !== false);
  return Object.fromEntries(kept.map(([name, one]) => [name, one.times(restEnergy)]));
}
