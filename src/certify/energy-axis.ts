/**
 * Where the integrands live: x = (E - m c^2)/kT from 0 upward, cut into panels for double-exponential quadrature.
 *
 * The Fermi function has poles at x = eta +- i pi (2k + 1). A panel border at x = eta and borders that leave the
 * surface in growing steps keep them away from every panel's interior.
 *
 * - eta <= 1/4: panels from x = 0, the same for every eta; e^-x is kept, so a sweep needs one exponential.
 * - eta > 1/4: panels in z = x - eta on both sides of the Fermi surface, the same for every eta, with all kernels kept;
 *   below them one panel down to x = 0, on which f = 1 to all digits if it begins deep enough (the filled sea).
 */
import type { Decimal } from "decimal.js";
import { type Kernels, kernels, mirrored, mirroredOccupation, type Occupation, occupation } from "./kernels.js";
import { keptPerResolution, quadratureNodes, type Resolution } from "./quadrature.js";

/** Called at one node: weight, x, the coarse-rule mark, and the kernels there (undefined in the filled sea: f = 1). */
export type Visit<K> = (weight: Decimal, x: Decimal, coarse: boolean, at: K | undefined) => void;

interface AxisNode {
  readonly z: Decimal;
  readonly weight: Decimal;
  readonly coarse: boolean;
  /** e^-z */
  readonly decay: Decimal;
  /** Kernels at z and at -z, made when first asked for. */
  above: Kernels | undefined;
  below: Kernels | undefined;
}

interface AxisPanel {
  readonly end: number;
  readonly nodes: readonly AxisNode[];
}

/** Makes what a visitor wants from z >= 0 and q = e^-z, and turns it into the same at -z. */
interface Recipe<K> {
  readonly make: (z: Decimal, q: Decimal) => K;
  readonly mirror: (at: K) => K;
  readonly coarseOnly: boolean;
}

/** Borders of the panels before the last one: of eight choices measured, the fewest nodes for equal accuracy. */
const innerBorders = [0, 9];
/** Up to this eta the panels start at x = 0. */
const largestFixedStart = 0.25;
/** The lowest panel must be at least this share of its upper border, so that the branch point x = 0 is not near. */
const lowestPanelShare = 0.25;

/** Calls `visit` with all kernels at every node of the integral over x in (0, infinity). */
export function sweepKernels(resolution: Resolution, eta: Decimal, visit: Visit<Kernels>): void {
  sweep(resolution, eta, { make: kernels, mirror: mirrored, coarseOnly: false }, visit);
}

/** The same with f and g only; on request at the nodes of the coarse rule alone. */
export function sweepOccupation(
  resolution: Resolution,
  eta: Decimal,
  coarseOnly: boolean,
  visit: Visit<Occupation>,
): void {
  sweep(resolution, eta, { make: (_z, q) => occupation(q), mirror: mirroredOccupation, coarseOnly }, visit);
}

function sweep<K extends Occupation | Kernels>(
  resolution: Resolution,
  eta: Decimal,
  recipe: Recipe<K>,
  visit: Visit<K | Kernels>,
): void {
  if (eta.lte(largestFixedStart)) sweepFromBottom(resolution, eta, recipe, visit);
  else sweepFromSurface(resolution, eta, recipe, visit);
}

function sweepFromBottom<K>(resolution: Resolution, eta: Decimal, recipe: Recipe<K>, visit: Visit<K>): void {
  const fugacity = eta.exp();
  for (const panel of axisPanels(resolution)) {
    for (const { z: x, weight, coarse, decay } of panel.nodes) {
      if (recipe.coarseOnly && !coarse) continue;
      visit(weight, x, coarse, at(recipe, x.minus(eta), decay.times(fugacity)));
    }
  }
}

/** For 0 < eta <= 1/4 some nodes lie below the Fermi surface: kernels are made from e^-|z|, where nothing cancels. */
function at<K>(recipe: Recipe<K>, z: Decimal, q: Decimal): K {
  if (!z.isNegative()) return recipe.make(z, q);
  return recipe.mirror(recipe.make(z.neg(), new (z.constructor as Decimal.Constructor)(1).div(q)));
}

function sweepFromSurface<K>(resolution: Resolution, eta: Decimal, recipe: Recipe<K>, visit: Visit<K | Kernels>): void {
  const panels = axisPanels(resolution);
  let reached = 0;
  for (const panel of panels) {
    const bothSides = eta.gte(panel.end * (1 + lowestPanelShare));
    for (const node of panel.nodes) {
      const { z, weight, coarse } = node;
      if (recipe.coarseOnly && !coarse) continue;
      node.above ??= kernels(z, node.decay);
      visit(weight, eta.plus(z), coarse, node.above);
      if (!bothSides) continue;
      node.below ??= mirrored(node.above);
      visit(weight, eta.minus(z), coarse, node.below);
    }
    if (bothSides) reached = panel.end;
  }
  const filled = reached === panels[panels.length - 1]!.end;
  const bottom = eta.minus(eta);
  for (const { position: x, weight, coarse } of quadratureNodes(resolution, bottom, eta.minus(reached))) {
    if (recipe.coarseOnly && !coarse) continue;
    const below = eta.minus(x);
    visit(weight, x, coarse, filled ? undefined : recipe.mirror(recipe.make(below, below.neg().exp())));
  }
}

/** The last panel ends where e^-z, times the sixth power of z that the steepest integrand adds, is below one digit. */
const axisPanels = keptPerResolution((resolution): readonly AxisPanel[] => {
  const { D } = resolution;
  const borders = [...innerBorders, Math.ceil(D.precision * Math.LN10) + 30];
  return borders.slice(1).map((end, index) => {
    const nodes = quadratureNodes(resolution, new D(borders[index]!), new D(end));
    return {
      end,
      nodes: nodes.map(({ position: z, weight, coarse }) => ({
        z,
        weight,
        coarse,
        decay: z.neg().exp(),
        above: undefined,
        below: undefined,
      })),
    };
  });
});
