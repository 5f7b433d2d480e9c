/**
 * Writes test/fixtures/piecewise-polytrope-stars.json: heaviest stars and stars of 1.4 solar masses of the piecewise polytropes of Read, Lackey,
 * Owen & Friedman 2009 (Phys. Rev. D 79, 124032, parameters from memory), by arithmetic of its own.
 *
 *     node test/generators/piecewise-polytrope-stars.mjs      (a minute; needs nothing)
 *
 * Nothing of src: radius and mass as unknowns, the fourth root of ln((E + P)/(rho c^2)) as variable, Gragg's extrapolated midpoint
 * rule in steps that never cross a joint of the pieces, a maximum from a parabola through masses.
 */
import { writeFileSync } from "node:fs";

const [G, c, GMsun] = [6.6743e-8, 2.99792458e10, 1.3271244e26]; // CODATA 2022, IAU 2015
const length = GMsun / (c * c); // cm, half the gravitational radius of the sun
const perGram = G / (c * c); // cm/g

const crust = {
  gammas: [1.58425, 1.28733, 0.62223, 1.35692],
  breaks: [2.44034e7, 3.78358e11, 2.6278e12],
  k: 6.8011e-9,
};
const cores = {
  SLy: [34.384, 3.005, 2.988, 2.851],
  APR3: [34.392, 3.166, 3.573, 3.281],
  APR4: [34.269, 2.83, 3.445, 3.348],
  FPS: [34.283, 2.985, 2.863, 2.6],
  WFF1: [34.031, 2.519, 3.791, 3.66],
  WFF2: [34.233, 2.888, 3.475, 3.517],
  BBB2: [34.331, 3.418, 2.835, 2.832],
  ENG: [34.437, 3.514, 3.13, 3.168],
  MPA1: [34.495, 3.446, 3.572, 2.887],
  MS1: [34.858, 3.224, 3.033, 1.325],
  MS1b: [34.855, 3.456, 3.011, 1.425],
  H4: [34.669, 2.909, 2.246, 2.144],
  GNH3: [34.648, 2.664, 2.194, 2.304],
  ALF2: [34.616, 4.07, 2.411, 1.89],
  PAL6: [34.38, 2.227, 2.189, 2.159],
};

/** Pieces P/c^2 = K rho^g, E/c^2 = (1 + a) rho + K rho^g/(g - 1), H = ln(1 + a + g K rho^(g-1)/(g - 1)), in g/cm^3. */
function piecesOf([logP, ...gammas]) {
  const rho1 = 10 ** 14.7;
  const all = [];
  const push = (gamma, from, k) => {
    const last = all.at(-1);
    const constant = last === undefined ? k : last.k * from ** (last.gamma - gamma);
    const a =
      last === undefined
        ? 0
        : last.a +
          (last.k * from ** (last.gamma - 1)) / (last.gamma - 1) -
          (constant * from ** (gamma - 1)) / (gamma - 1);
    const h = last === undefined ? 0 : Math.log(1 + a + (gamma / (gamma - 1)) * constant * from ** (gamma - 1));
    all.push({ gamma, k: constant, a, from, h });
  };
  for (const [i, gamma] of crust.gammas.entries()) push(gamma, i === 0 ? 0 : crust.breaks[i - 1], crust.k);
  const coreK = 10 ** logP / c ** 2 / rho1 ** gammas[0];
  push(gammas[0], (all[3].k / coreK) ** (1 / (gammas[0] - all[3].gamma)));
  push(gammas[1], rho1);
  push(gammas[2], 1e15);
  return all;
}

const matterAt = ({ gamma, k, a }, h) => {
  const rho = Math.max(((gamma - 1) / (gamma * k)) * (Math.expm1(h) - a), 0) ** (1 / (gamma - 1));
  const p = k * rho ** gamma;
  return [(1 + a) * rho + p / (gamma - 1), p]; // E, P
};

/** d(r, m)/dx with h = x^4; r and m in units of length. */
function slope(piece, x, [r, m]) {
  const unit = perGram * length * length; // density in 1/length^2
  const [e, p] = matterAt(piece, x ** 4).map((value) => value * unit);
  const dr = ((-r * (r - 2 * m)) / (m + 4 * Math.PI * r ** 3 * p)) * 4 * x ** 3;
  return [dr, 4 * Math.PI * r * r * e * dr];
}

const counts = [2, 4, 6, 8, 10, 12, 14, 16];
/** One step of Gragg's rule extrapolated to zero; value and error. */
function step(piece, x, y, big) {
  const table = [];
  for (const [row, n] of counts.entries()) {
    const h = big / n;
    let [a, b] = [y, y.map((value, i) => value + h * slope(piece, x, y)[i])];
    for (let k = 1; k < n; k++) {
      const f = slope(piece, x + k * h, b);
      [a, b] = [b, a.map((value, i) => value + 2 * h * f[i])];
    }
    const f = slope(piece, x + big, b);
    table.push([a.map((value, i) => 0.5 * (value + b[i] + h * f[i]))]);
    for (let col = 1; col <= row; col++) {
      const ratio = (n / counts[row - col]) ** 2;
      table[row].push(table[row][col - 1].map((v, i) => v + (v - table[row - 1][col - 1][i]) / (ratio - 1)));
    }
  }
  const last = table.at(-1);
  const value = last.at(-1);
  return { value, error: Math.max(...value.map((v, i) => Math.abs(v / last.at(-2)[i] - 1))) };
}

/** Mass and radius in units of length of the star of a central density. */
function star(pieces, density, tolerance = 1e-13) {
  const centre = pieces.findLast((piece) => density >= piece.from);
  const { gamma, k, a } = centre;
  const top = Math.log(1 + a + (gamma / (gamma - 1)) * k * density ** (gamma - 1));
  const unit = perGram * length * length;
  const [e, p] = matterAt(centre, top).map((value) => value * unit);
  const depth = 1e-7 * top;
  const r = Math.sqrt((3 * depth) / (2 * Math.PI * (e + 3 * p)));
  let y = [r, (4 / 3) * Math.PI * e * r ** 3];
  let h = top - depth;
  for (let i = pieces.indexOf(centre); i >= 0; i--) {
    const end = pieces[i].h ** 0.25;
    let x = h ** 0.25;
    let big = (end - x) / 4;
    while (x > end) {
      if (x + big < end * (1 + 1e-15)) big = end - x;
      const { value, error } = step(pieces[i], x, y, big);
      if (error > tolerance) {
        big *= 0.5;
        continue;
      }
      y = value;
      x += big;
      if (Math.abs(x - end) < 1e-15) x = end;
      if (error < 1e-3 * tolerance) big *= 1.5;
    }
    h = pieces[i].h;
  }
  return y;
}

const rows = {};
for (const [name, parameters] of Object.entries(cores)) {
  const pieces = piecesOf(parameters);
  let log = Math.log(3e14);
  const mass = (at) => star(pieces, Math.exp(at))[1];
  while (mass(log + 0.05) > mass(log)) log += 0.05;
  for (const width of [3e-2, 3e-3, 1e-3, 1e-3]) {
    const [low, middle, high] = [mass(log - width), mass(log), mass(log + width)];
    log += (0.5 * width * (low - high)) / (low - 2 * middle + high);
  }
  const [r, m] = star(pieces, Math.exp(log));
  // 1.4 solar masses, by the secant.
  let [x0, x1] = [log - 1, log - 0.9];
  let [f0, f1] = [mass(x0) - 1.4, mass(x1) - 1.4];
  for (let i = 0; i < 30 && Math.abs(f1) > 1e-13 && f1 !== f0; i++) {
    [x0, x1, f0] = [x1, x1 - (f1 * (x1 - x0)) / (f1 - f0), f1];
    f1 = mass(x1) - 1.4;
  }
  const toKm = length / 1e5;
  rows[name] = {
    mass: m.toPrecision(12),
    radius: (r * toKm).toPrecision(10),
    centralDensity: Math.exp(log).toPrecision(8),
    radiusAt1_4: (star(pieces, Math.exp(x1))[0] * toKm).toPrecision(12),
  };
  console.log(name, rows[name]);
}
const about =
  "Piecewise polytropes of Read et al. 2009: mass (solar), radius (km), central baryon density (g/cm^3) of the heaviest star and " +
  "radius (km) of 1.4 solar masses; made by test/generators/piecewise-polytrope-stars.mjs";
const file = new URL("../fixtures/piecewise-polytrope-stars.json", import.meta.url);
writeFileSync(file, `${JSON.stringify({ about, rows }, null, 1)}\n`);
