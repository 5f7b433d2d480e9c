/**
 * What mixing adds to a sum over species at common electron density, per charged nucleus in kT; undefined for one charge.
 *
 * Coefficients stand here a second time, see liquid-terms.ts. Averages run over charged nuclei by number.
 */
import type { Decimal } from "decimal.js";
import { chargedMean, type Plasma } from "./plasma.js";
import type { Series } from "./series.js";

/** A charge and its number fraction among charged nuclei, isotopes together, in rising order. */
function charges({ matter: { charged, chargedPerGram } }: Plasma): readonly { z: Decimal; x: Decimal }[] {
  const found: { z: Decimal; x: Decimal }[] = [];
  for (const { z, perGram } of charged) {
    const x = perGram.div(chargedPerGram);
    const same = found.find((one) => one.z.eq(z));
    if (same === undefined) found.push({ z, x });
    else same.x = same.x.plus(x);
  }
  return found.sort((a, b) => a.z.cmp(b.z));
}

/**
 * Liquid: Potekhin, Chabrier, Chugunov, DeWitt & Rogers 2009, Phys. Rev. E 80, 047401.
 *
 *     f = (Gamma_e^(3/2) <Z^(5/2)>/3^(1/2)) delta/[(1 + a G^alpha) (1 + b G^alpha)^beta],   G = Gamma_e <Z^(5/3)>
 *     delta = 1 - <Z^2>^(3/2)/(<Z>^(1/2) <Z^(5/2)>)                                       rigid electrons
 *     delta = [<Z (Z + 1)^(3/2)> - (<Z^2> + <Z>)^(3/2)/<Z>^(1/2)]/<Z^(5/2)>               polarisable electrons
 *     a = (2.6 + 14 delta^3)/(1 - delta),  alpha = <Z>^(2/5)/<Z^2>^(1/5),  b = 0.0117 (<Z^2>/<Z>^2)^2 a,  beta = 3/(2 alpha) - 1
 */
export function liquidMixture(plasma: Plasma, polarisable: boolean): Series | undefined {
  if (charges(plasma).length < 2) return undefined;
  const { D, gammaE, matter } = plasma;
  const mean = (of: (z: Decimal) => Decimal): Decimal => chargedMean(matter, ({ z }) => of(z));
  const first = mean((z) => z);
  const second = mean((z) => z.times(z));
  const fiveHalves = mean((z) => z.pow("2.5"));
  const coupling = chargedMean(matter, (one) => one.coupling);
  const separate = polarisable ? mean((z) => z.plus(1).pow("1.5").times(z)) : fiveHalves;
  const together = (polarisable ? second.plus(first) : second).pow("1.5").div(first.sqrt());
  const delta = separate.minus(together).div(fiveHalves);
  const a = delta.pow(3).times(14).plus("2.6").div(delta.minus(1).neg());
  const alpha = first.pow("0.4").div(second.pow("0.2"));
  const b = second.div(first.times(first)).pow(2).times("0.0117").times(a);
  const beta = new D(3).div(alpha.times(2)).minus(1);
  const power = gammaE.times(coupling).pow(alpha);
  const below = power.times(a).plus(1).times(power.times(b).plus(1).pow(beta));
  return gammaE
    .pow("1.5")
    .times(fiveHalves.times(delta).div(new D(3).sqrt()))
    .div(below);
}

/**
 * Random alloy: Ogata, Iyetomi, Ichimaru & Van Horn 1993, Phys. Rev. E 48, 1344, in the sum over pairs of Medin & Cumming
 * 2010, Phys. Rev. E 81, 036107.
 *
 *     f = sum over Z_i < Z_j of Gamma_i x_i x_j dg(R, y),   R = Z_j/Z_i,  y = x_j/(x_i + x_j)
 *     dg = C/{1 + [27 (R - 1)/(1 + 0.1 (R - 1))] y^(1/2) (y^(1/2) - 0.3) (y^(1/2) - 0.7) (y^(1/2) - 1)}
 *     C = 0.05 (R - 1)^2/{[1 + 0.64 (R - 1)] [1 + 0.5 (R - 1)^2]}
 *
 * The bracket 27 ... is held at its value for R = 4.5 beyond that ratio, this library's continuation.
 */
export function alloy(plasma: Plasma): Series | undefined {
  const { D, gammaE } = plasma;
  const all = charges(plasma);
  if (all.length < 2) return undefined;
  let total = new D(0);
  for (const [i, light] of all.entries()) {
    for (const heavy of all.slice(i + 1)) {
      const r = heavy.z.div(light.z).minus(1);
      const held = r.gt("3.5") ? new D("3.5") : r;
      const s = heavy.x.div(light.x.plus(heavy.x)).sqrt();
      const size = r
        .pow(2)
        .times("0.05")
        .div(r.times("0.64").plus(1).times(r.pow(2).times("0.5").plus(1)));
      const bracket = held.times(27).div(held.times("0.1").plus(1));
      const quartic = s.times(s.minus("0.3")).times(s.minus("0.7")).times(s.minus(1));
      const weight = light.x.times(heavy.x).times(light.z.pow(new D(5).div(3)));
      total = total.plus(weight.times(size).div(bracket.times(quartic).plus(1)));
    }
  }
  return gammaE.times(total);
}

/** sum_j x_j [ln(x_j Z_j/<Z>) - ln g_j]: mixing of the crystal at common electron density, and nuclear spins. */
export function mixingAndSpin({ matter }: Plasma): Decimal {
  const mean = chargedMean(matter, ({ z }) => z);
  return chargedMean(matter, ({ z, perGram, g }) => perGram.div(matter.chargedPerGram).times(z).div(mean).div(g).ln());
}
