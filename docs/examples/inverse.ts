/** Stand-in for the library's inverse questions, until they are there: Newton in ln rho and ln T. */
import {
  type BatchOutput,
  type Composition,
  type EquationOfState,
  type QuantityName,
  type State,
  transition,
} from "fermistate";

type Name = "density" | "temperature" | "pressure" | "specificEnergy" | "specificEntropy" | "specificEnthalpy";
type Given = { readonly [K in Name]?: number };

function slopes(s: State, name: Name): [value: number, byLnDensity: number, byLnTemperature: number] {
  const [r, t] = [s.density, s.temperature];
  if (name === "density") return [r, r, 0];
  if (name === "temperature") return [t, 0, t];
  const p = [s.pressure, r * s.pressureByDensity, t * s.pressureByTemperature] as const;
  const e = [s.specificEnergy, r * s.energyByDensity, t * s.energyByTemperature] as const;
  if (name === "pressure") return [...p];
  if (name === "specificEnergy") return [...e];
  if (name === "specificEntropy") return [s.specificEntropy, r * s.entropyByDensity, t * s.entropyByTemperature];
  return [e[0] + p[0] / r, e[1] + (p[1] - p[0]) / r, e[2] + p[2] / r];
}

export function solve(
  eos: EquationOfState,
  composition: Composition,
  given: Given,
  options: { guess?: { density?: number; temperature?: number } } = {},
): { state: State; evaluations: number } {
  const [a, b] = Object.keys(given) as [Name, Name];
  if (
    given.density !== undefined &&
    (b === "specificEntropy" || b === "specificEnergy") &&
    eos.contributions.some((c) => c.name === "Coulomb plasma")
  ) {
    const t = transition(eos, given.density, composition);
    if (t !== undefined) {
      const [c, l] = [t.crystal[b], t.liquid[b]];
      const x = (l - given[b]!) / (l - c);
      if (x >= 0 && x <= 1) {
        const mixed = { ...t.liquid, crystalFraction: x };
        for (const q of ["pressure", "specificEnergy", "specificEntropy"] as const)
          (mixed as Record<string, unknown>)[q] = t.liquid[q] + x * (t.crystal[q] - t.liquid[q]);
        return { state: mixed, evaluations: 2 };
      }
    }
  }
  let density = given.density ?? options.guess?.density ?? 1e6;
  let temperature = given.temperature ?? options.guess?.temperature ?? 1e8;
  for (let k = 1; ; k++) {
    const state = eos.state(density, temperature, composition);
    const [f, fr, ft] = slopes(state, a);
    const [g, gr, gt] = slopes(state, b);
    const [df, dg] = [given[a]! - f, given[b]! - g];
    let [dr, dt] = [0, 0];
    if (temperature === 0) {
      if (a === "temperature") dr = dg / gr;
      else dr = df / fr;
    } else {
      const det = fr * gt - ft * gr;
      dr = (df * gt - dg * ft) / det;
      dt = (fr * dg - gr * df) / det;
    }
    const size = Math.max(Math.abs(dr), Math.abs(dt));
    const damp = Math.min(1, 1.5 / size);
    density *= Math.exp(dr * damp);
    temperature *= Math.exp(dt * damp);
    if (size < 1e-15 || (k > 12 && size < 1e-12) || k > 80) return { state, evaluations: k };
  }
}

export function solveColumns(
  eos: EquationOfState,
  input: { composition: Composition; guess?: { temperature?: Float64Array } } & {
    readonly [K in Name]?: Float64Array;
  },
  output: BatchOutput & { readonly temperature?: Float64Array; readonly density?: Float64Array },
): void {

  const { composition, guess, ...columns } = input;
  const names = Object.keys(columns) as Name[];
  let last = 1e8;
  for (let i = 0; i < columns[names[0]!]!.length; i++) {
    const given = Object.fromEntries(names.map((name) => [name, columns[name]![i]!]));
    const { state } = solve(eos, composition, given, { guess: { temperature: guess?.temperature?.[i] ?? last } });
    last = state.temperature;
    for (const name of Object.keys(output) as QuantityName[]) output[name]![i] = state[name] as number;
  }
}
