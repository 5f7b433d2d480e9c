/**
 * The Riemann problem of Newtonian gas dynamics, solved exactly for any equation of state.
 *
 * Two uniform halves meet at x = 0. A wave runs into each: a shock if the pressure between them is higher than in that
 * half, else a rarefaction. Pressure and velocity agree at the contact, which is one equation for the pressure. Shocks obey
 * the Rankine-Hugoniot conditions, rarefactions are isentropes, and of the equation of state nothing is assumed but that
 * isentropes are convex (Menikoff & Plohr 1989, Rev. Mod. Phys. 61, 75; Colella & Glaz 1985, J. Comput. Phys. 59, 264).
 */
import { type Composition, type EquationOfState, type State, solve } from "fermistate";

/** Uniform matter: density g/cm^3, velocity cm/s, temperature K. */
export interface Half {
  readonly density: number;
  readonly velocity: number;
  readonly temperature: number;
}

/** Matter and its velocity somewhere in the solution. */
export interface Flow {
  readonly velocity: number;
  readonly state: State;
}

/** The solution between the waves, and along every ray. */
export interface RiemannSolution {
  /** Pressure between the waves, dyn/cm^2. */
  readonly pressure: number;
  /** Velocity of the contact, cm/s. */
  readonly velocity: number;
  /** Matter on the left and on the right of the contact. */
  readonly contact: readonly [left: State, right: State];
  /** Speeds of the ends of the two waves (equal at a shock) and of the contact, from left to right, cm/s. */
  readonly speeds: readonly number[];
  /** The flow at x/t, cm/s. */
  at(ray: number): Flow;
}

/** The exact solution, unless the halves part so fast that a vacuum opens. */
export function exactRiemann(eos: EquationOfState, matter: Composition, left: Half, right: Half): RiemannSolution {
  const [leftAhead, rightAhead] = [left, right].map((half) => eos.state(half.density, half.temperature, matter)) as [
    State,
    State,
  ];
  const closing = left.velocity - right.velocity;
  const unspent = (pressure: number): number =>
    closing - waveTo(eos, leftAhead, pressure).kick - waveTo(eos, rightAhead, pressure).kick;
  const pressure = root(unspent, leftAhead.pressure, rightAhead.pressure);
  const waves = [waveTo(eos, leftAhead, pressure), waveTo(eos, rightAhead, pressure)] as const;
  const velocity = 0.5 * (left.velocity - waves[0].kick + right.velocity + waves[1].kick);
  const leftSide = profile(eos, leftAhead, left.velocity, waves[0], -1);
  const rightSide = profile(eos, rightAhead, right.velocity, waves[1], 1);
  return {
    pressure,
    velocity,
    contact: [waves[0].state, waves[1].state],
    speeds: [leftSide.head, leftSide.tail, velocity, rightSide.tail, rightSide.head],
    at: (ray) => (ray < velocity ? leftSide.at(ray) : rightSide.at(ray)),
  };
}

/** What a wave leaves behind it, and the change of velocity across it, positive for a compression. */
interface Wave {
  readonly state: State;
  readonly kick: number;
}

/** The wave that takes matter to a pressure. */
function waveTo(eos: EquationOfState, ahead: State, pressure: number): Wave {
  if (pressure > ahead.pressure) return shock(eos, ahead, pressure);
  return { state: isentrope(eos, ahead, pressure), kick: -rarefaction(eos, ahead, pressure) };
}

/**
 * Behind a shock P = P* and e - e0 = (P* + P0)(1/rho0 - 1/rho)/2: Newton's method in ln rho and ln T at once. P hardly
 * depends on the temperature of degenerate matter, so an inner loop that finds T from P would lose digits; this does not.
 */
function shock(eos: EquationOfState, ahead: State, pressure: number): Wave {
  const mean = 0.5 * (pressure + ahead.pressure);
  // A weak shock is almost an isentrope; a strong one is reached along the Hugoniot curve.
  const isWeak = pressure < 4 * ahead.pressure;
  let state = isWeak ? isentrope(eos, ahead, pressure) : shock(eos, ahead, pressure / 4).state;
  for (let i = 0, step = 1; i < 50 && step > 1e-14; i++) {
    const { density, temperature } = state;
    const dP = pressure - state.pressure;
    const de = ahead.specificEnergy + mean * (1 / ahead.density - 1 / density) - state.specificEnergy;
    const [pR, pT] = [density * state.pressureByDensity, temperature * state.pressureByTemperature];
    const [eR, eT] = [density * state.energyByDensity - mean / density, temperature * state.energyByTemperature];
    const determinant = pR * eT - pT * eR;
    const [dR, dT] = [(dP * eT - de * pT) / determinant, (de * pR - dP * eR) / determinant];
    step = Math.abs(dR) + Math.abs(dT);
    const part = Math.min(1, 0.7 / step);
    state = eos.state(density * Math.exp(part * dR), temperature * Math.exp(part * dT), state.composition);
  }
  const squeeze = Math.max(0, 1 / ahead.density - 1 / state.density); // rounding, in a shock of no strength
  return { state, kick: Math.sqrt((pressure - ahead.pressure) * squeeze) };
}

/** Matter taken to another pressure at constant entropy. */
function isentrope(eos: EquationOfState, from: State, pressure: number): State {
  const ratio = pressure / from.pressure;
  const guess = {
    density: from.density * ratio ** (1 / from.gamma1),
    temperature: from.temperature * ratio ** from.adiabaticGradient,
  };
  return solve(eos, from.composition, { pressure, specificEntropy: from.specificEntropy }, { guess }).state;
}

/** Velocity gained in a rarefaction: the Riemann invariant, the integral of dP/(rho c) along the isentrope. */
function rarefaction(eos: EquationOfState, ahead: State, pressure: number): number {
  const half = 0.5 * Math.log(ahead.pressure / pressure);
  let sum = 0;
  for (const [node, weight] of gaussLegendre) {
    for (const sign of [-1, 1]) {
      const state = isentrope(eos, ahead, pressure * Math.exp(half * (1 + sign * node)));
      sum += (weight * state.pressure) / (state.density * sound(state));
    }
  }
  return half * sum;
}

/** Nodes and weights of the rule of ten points on (-1, 1). */
const gaussLegendre = [
  [0.1488743389816312, 0.2955242247147529],
  [0.4333953941292472, 0.2692667193099963],
  [0.6794095682990244, 0.219086362515982],
  [0.8650633666889845, 0.1494513491505806],
  [0.9739065285171717, 0.0666713443086881],
] as const;

/** Speed of sound of Newtonian gas dynamics; `soundSpeed` of a state is the relativistic one. */
export const sound = (state: State): number => Math.sqrt(state.bulkModulus / state.density);

/** The flow on one side of the contact; `side` is -1 on the left, 1 on the right. */
function profile(eos: EquationOfState, ahead: State, speed: number, wave: Wave, side: -1 | 1) {
  const undisturbed = { velocity: speed, state: ahead };
  const behind = { velocity: speed + side * wave.kick, state: wave.state };
  if (wave.state.pressure > ahead.pressure) {
    const front = speed + (side * wave.kick) / (1 - ahead.density / wave.state.density); // conservation of mass
    return { head: front, tail: front, at: (ray: number): Flow => (side * (ray - front) < 0 ? behind : undisturbed) };
  }
  const head = speed + side * sound(ahead);
  const tail = behind.velocity + side * sound(wave.state);
  const fan = (ray: number): Flow => {
    const miss = (pressure: number): number => {
      const { state, kick } = waveTo(eos, ahead, pressure);
      return kick + sound(state) - side * (ray - speed);
    };
    const { state, kick } = waveTo(eos, ahead, root(miss, wave.state.pressure, ahead.pressure));
    return { velocity: speed + side * kick, state };
  };
  const at = (ray: number): Flow => {
    if (side * (ray - head) >= 0) return undisturbed;
    return side * (ray - tail) <= 0 ? behind : fan(ray);
  };
  return { head, tail, at };
}

/** Root of a monotonic function of pressure: false position in ln P (Illinois rule), in a bracket widened as needed. */
function root(f: (pressure: number) => number, low: number, high: number): number {
  let [a, b] = [Math.log(Math.min(low, high)), Math.log(Math.max(low, high))];
  let [fa, fb] = [f(Math.exp(a)), f(Math.exp(b))];
  while (fa * fb > 0) {
    if (Math.abs(fa) < Math.abs(fb)) {
      a -= 1;
      fa = f(Math.exp(a));
    } else {
      b += 1;
      fb = f(Math.exp(b));
    }
  }
  for (let i = 0; i < 100 && fb !== 0 && Math.abs(b - a) > 1e-14; i++) {
    const c = b - (fb * (b - a)) / (fb - fa);
    const fc = f(Math.exp(c));
    if (fc * fb < 0) [a, fa] = [b, fb];
    else fa *= 0.5;
    if (c === b) break;
    [b, fb] = [c, fc];
  }
  return Math.exp(b);
}
