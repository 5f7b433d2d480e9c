/** Derivatives of a field on a mesh, at its nodes: along ln rho or ln T, of its logarithm where it has one. */
import { type LineStencils, lineStencils, weighted } from "../../numerics/stencil.js";
import type { StateMesh } from "./mesh.js";

/** Weights of both axes. */
export interface MeshStencils {
  readonly u: LineStencils;
  readonly v: LineStencils;
}

/** Nodes of a stencil: sixth order in the middle. */
export const widestStencil = 7;

/** Weights of a mesh. */
export function meshStencils({ u, v }: Pick<StateMesh, "u" | "v">, widest: number = widestStencil): MeshStencils {
  return { u: lineStencils(u, widest), v: lineStencils(v, widest) };
}

/** d/d ln rho (`along` "u") or d/d ln T ("v") of a field; the second derivative with `bend`. */
export function derivative(
  stencils: MeshStencils,
  along: "u" | "v",
  field: Float64Array,
  bend: boolean = false,
): Float64Array {
  const { u, v } = stencils;
  const line = along === "u" ? u : v;
  const weights = bend ? line.bends : line.slopes;
  const stride = along === "u" ? v.count : 1;
  const out = new Float64Array(u.count * v.count);
  for (let i = 0; i < u.count; i++) {
    for (let j = 0; j < v.count; j++) {
      const k = along === "u" ? i : j;
      const from = along === "u" ? line.first[i]! * v.count + j : i * v.count + line.first[j]!;
      out[i * v.count + j] = weighted(weights, k * line.width, line.width, field, from, stride);
    }
  }
  return out;
}

/** The first derivative of a field that is a power of its variable nearly: of its logarithm where all of it is positive. */
export function slope(stencils: MeshStencils, along: "u" | "v", field: Float64Array): Float64Array {
  if (!field.every((value) => value > 0)) return derivative(stencils, along, field);
  return derivative(stencils, along, field.map(Math.log)).map((value, i) => value * field[i]!);
}
