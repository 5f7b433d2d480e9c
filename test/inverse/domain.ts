/** Random points of the valid domain: where the library itself raises no finding of the kind "outside its physics". */
import { type Composition, composition, type EquationOfState, regime, type State } from "../../src/index.js";

/** Compositions of the round trips. */
export const compositions: readonly Composition[] = [
  composition({ C12: 0.5, O16: 0.5 }),
  composition({ He4: 1 }),
  composition({ Fe56: 1 }),
  composition({ H1: 0.7, He4: 0.3 }),
  composition({ C12: 0.3, O16: 0.6, Ne22: 0.1 }),
];

/** Findings that put a number outside its physics, or where the cold liquid's terms are strained so far that c_v has no one sign. */
const excluded = new Set([
  "partial-ionisation",
  "linear-response",
  "liquid-fit-range",
  "superheated-crystal",
  "thermodynamically-unstable",
]);
const strainedToo = new Set(["liquid-quantum-range", "quantum-melting"]);

/** A state drawn at random: density 1e-2 to 1e11 g/cm^3, temperature 1e6 to 1e11 K, both even in the logarithm. */
export function randomState(eos: EquationOfState, index: number, random: () => number): State {
  const matter = compositions[index % compositions.length]!;
  for (;;) {
    const density = 10 ** (-2 + 13 * random());
    const temperature = 10 ** (6 + 5 * random());
    // Protons capture electrons above 1.2e7 g/cm^3: no hydrogen there.
    if (matter.species.some(({ label }) => label === "H1") && density > 1e7) continue;
    const found = regime(density, temperature, matter);
    if (
      found.findings.some((one) => strainedToo.has(one.code) || (one.severity === "outside" && excluded.has(one.code)))
    ) {
      continue;
    }
    const state = eos.state(density, temperature, matter);
    // Where polarisation is strained the crystal has the higher pressure of the two, so that near freezing two temperatures
    // give one pressure.
    if (found.findings.some(({ code }) => code === "linear-response") && Math.abs(state.ionCoupling - 175) < 10)
      continue;
    // At the freezing boundary the two sides overlap in pressure: phases.test.ts.
    if (Math.abs(state.ionCoupling / 175 - 1) > 2e-3) return state;
  }
}

/** A linear congruential generator: the same points in every run. */
export function generator(seed: number): () => number {
  let now = seed;
  return () => {
    now = (now * 48271) % 2147483647;
    return now / 2147483647;
  };
}
