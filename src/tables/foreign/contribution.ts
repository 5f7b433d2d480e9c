/** The fit as a contribution: one composition, the domain of its mesh. */
import { type Composition, requireComposition } from "../../matter/composition.js";
import { requireSame } from "../../matter/composition-difference.js";
import { DENSITY, TEMPERATURE } from "../../matter/point.js";
import type { Contribution, Domain } from "../../thermodynamics/contribution.js";
import { ENTROPY, type Order } from "../../thermodynamics/free-energy.js";
import { addTableMembers } from "../members.js";
import type { ColumnFit } from "./fit.js";
import type { StateMesh } from "./mesh.js";
import { columnSurface, fillColumnSurface } from "./surface.js";

/** Makes the contribution. */
export function columnsContribution(
  mesh: StateMesh,
  fit: ColumnFit,
  own: Composition,
  name: string,
  validity: string,
): Contribution {
  const surface = columnSurface(fit, mesh.u, mesh.v);
  const ends = (axis: Float64Array): readonly [number, number] => Object.freeze([axis[0]!, axis.at(-1)!] as const);
  const domain: Domain = Object.freeze({
    density: ends(mesh.density),
    temperature: ends(mesh.temperature),
    zeroTemperature: false,
  });
  const shift = Float64Array.of(fit.addedEntropy);
  let last: Composition | undefined;

  function accept(composition: Composition): void {
    requireComposition(composition);
    requireSame(composition, own, "these columns");
    last = composition;
  }

  return Object.freeze({
    name,
    domain,
    validity,
    add(point: Float64Array, composition: Composition, order: Order, members: Float64Array): void {
      if (composition !== last) accept(composition);
      surface.at[0] = Math.log(point[DENSITY]!);
      surface.at[1] = Math.log(point[TEMPERATURE]!);
      fillColumnSurface(surface, order);
      addTableMembers(surface.cold, surface, order, members);
      // F has c T: entropy alone feels it.
      members[ENTROPY]! -= shift[0]! * point[TEMPERATURE]!;
    },
  });
}
