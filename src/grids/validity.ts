/** Where the numbers of an equation of state hold, in words that go with them into every file. */
import type { Contribution } from "../thermodynamics/contribution.js";
import type { EquationOfState } from "../thermodynamics/equation-of-state.js";

/** True for electrons and nuclei without interactions: an ideal plasma. */
export function isIdeal(contributions: readonly Contribution[]): boolean {
  const names = contributions.map(({ name }) => name);
  const plasma = names.includes("electrons and positrons") && names.some((name) => name.startsWith("ideal ions"));
  return plasma && contributions.every(({ ideal }) => ideal === true);
}

/** Where numbers of an equation of state hold, and what is not in them. */
export function validityOf({ domain, contributions }: Pick<EquationOfState, "domain" | "contributions">): string[] {
  const [thinnest, densest] = domain.density;
  const [coldest, hottest] = domain.temperature;
  const zero = domain.zeroTemperature ? "0 and " : "";
  const [thin, dense, cold, hot] = [thinnest, densest, coldest, hottest].map(short);
  const found = [
    `Answers at density ${thin} to ${dense} g/cm^3 and temperature ${zero}${cold} to ${hot} K; a number is physical ` +
      "only where its assumptions hold.",
    "The composition is fixed: no recombination, no electron capture, no nuclear reactions.",
  ];
  if (isIdeal(contributions)) {
    found.push(
      "Ideal plasma: no Coulomb interactions and no crystal, so the pressure is 1 to 30 % too high where white dwarfs " +
        "live (least in hot or light-element matter, most in cold dense iron).",
    );
  }
  for (const { validity } of contributions) if (validity !== undefined) found.push(validity);
  return found;
}

/** "1e18" and not a row of zeros. */
function short(value: number): string {
  return value >= 1e6 ? value.toExponential().replace("+", "") : String(value);
}
