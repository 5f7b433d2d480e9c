/**
 * Writes test/fixtures/electron-gas-mpmath.csv: the pair gas by mpmath 1.3.0 (Python), 45 digits.
 *
 *     node test/generators/electron-gas-mpmath.mjs      (two minutes; needs python3 with mpmath)
 *
 * Gauss-Legendre quadrature in sqrt((E - mc^2)/kT), secant for neutrality, entropy from e + P - sum n mu, derivatives
 * by central differences of step 1e-7: nothing of it is the method of src/certify. Differences leave about 13 digits;
 * they are left out where P hardly depends on n (pair plasma) or second derivatives almost vanish (classical gas), as
 * differences would lose more there.
 */
import { execFileSync } from "node:child_process";
import { writeFileSync } from "node:fs";

/** n_e, T, a start for eta, and whether to difference. */
const points = [
  ["1e30", "2e9", "0.6375514832", true],
  ["3e26", "4e6", "4.543277376", true],
  ["1e20", "8e9", "-0.7412370730", false],
  ["5e33", "1e7", "11535.22752", true],
  ["7e22", "3e4", "1.976522704", true],
  ["1e10", "5e12", "-0.001185979317", false],
  ["2e10", "6e5", "-32.35171061", false],
];

const program = `
import sys
from mpmath import *
mp.dps = 45
h, k, c, m = mpf('6.62607015e-27'), mpf('1.380649e-16'), mpf('29979245800'), mpf('9.1093837139e-28')
unit, mc2 = 8*pi*(m*c/h)**3, m*c*c

def integral(eta, theta, weight):
    if eta > 0:
        borders = [mpf(0)] + [sqrt(eta + d) for d in (-100, -60, -30, -12, -4, 0, 4, 12, 30, 60, 120) if eta + d > 0]
    else:
        borders = [sqrt(mpf(d)) for d in (0, 2, 6, 14, 30, 60, 120)]
    def integrand(y):
        x = y*y
        E, p = 1 + theta*x, sqrt(theta*x*(2 + theta*x))
        f = 1/(exp(x) + exp(eta)) if eta < 0 else 1/(exp(x - eta) + 1)
        return weight(p, E)*f*2*y
    return exp(min(eta, mpf(0)))*theta*quad(integrand, borders, method='gauss-legendre', maxdegree=9)

density = lambda p, E: p*E
pressure = lambda p, E: p**3/3
kinetic = lambda p, E: p*E*(E - 1)

def state(n, T, start):
    theta, n = k*T/mc2, n/unit
    positron = lambda eta: -eta - 2/theta
    net = lambda eta: integral(eta, theta, density) - integral(positron(eta), theta, density)
    eta = findroot(lambda e: net(e)/n - 1, (start, start + mpf('1e-6')), solver='secant', tol=mpf(10)**-80, maxsteps=12, verify=False)
    (n1, p1, e1), (n2, p2, e2) = [[integral(e, theta, w) for w in (density, pressure, kinetic)] for e in (eta, positron(eta))]
    s = (e1 + e2 + p1 + p2)/theta - n1*eta - n2*positron(eta)
    return eta, n2*unit, (p1 + p2)*unit*mc2, (e1 + e2 + 2*n2)*unit*mc2, s*unit*k

n, T, start = mpf(float(sys.argv[1])), mpf(float(sys.argv[2])), mpf(sys.argv[3])
centre = state(n, T, start)
row = [nstr(v, 28) for v in centre]
if sys.argv[4] == 'true':
    d = mpf('1e-7')
    hn, hT = n*d, T*d
    grid = {(i, j): state(n*(1 + i*d), T*(1 + j*d), centre[0]) for i in (-1, 0, 1) for j in (-1, 0, 1)}
    P = {place: v[2] for place, v in grid.items()}
    S = {place: v[4] for place, v in grid.items()}
    PTT = lambda i: (P[i, 1] - 2*P[i, 0] + P[i, -1])/hT**2
    row += [nstr(v, 16) for v in (
        (P[1, 0] - P[-1, 0])/2/hn, (P[0, 1] - P[0, -1])/2/hT, T*(S[0, 1] - S[0, -1])/2/hT,
        (P[1, 0] - 2*P[0, 0] + P[-1, 0])/hn**2, (P[1, 1] - P[1, -1] - P[-1, 1] + P[-1, -1])/4/hn/hT, PTT(0),
        (S[0, 1] - 2*S[0, 0] + S[0, -1])/hT**2, (PTT(1) - PTT(-1))/2/hn)]
else:
    row += ['']*8
print(','.join(row))
`;

const rows = points.map(([n, T, eta, differences]) => {
  const arguments_ = ["-c", program, n, T, eta, String(differences)];
  return `${n},${T},${execFileSync("python3", arguments_, { encoding: "utf8" }).trim()}`;
});
const head = [
  "# Ideal electron-positron gas, cgs, CODATA 2022, computed with mpmath 1.3.0 by test/generators/electron-gas-mpmath.mjs.",
  "# eta to e_pair and s: 28 digits; the rest: central differences, about 13 digits. Definitions as in the reference file.",
  "n_e,T,eta,n_plus,P,e_pair,s,dP_dn,dP_dT,c_v,d2P_dn2,d2P_dndT,d2P_dT2,d2s_dT2,d3P_dndT2",
];
const target = new URL("../fixtures/electron-gas-mpmath.csv", import.meta.url);
writeFileSync(target, `${[...head, ...rows].join("\n")}\n`);
