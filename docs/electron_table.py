#!/usr/bin/env python3
"""Electrons and positrons, any composition, from a table of fermistate in an .npz file. Needs numpy.

    python3 electron_table.py electrons.npz                              checks the file, tells what it holds
    python3 electron_table.py electrons.npz 3.0110703768336843e25 1e9    net electrons per cm^3, temperature in K

docs/guide/electron-table.md of fermistate has the formulas and the errors; electron_table.c is the same in C.
"""
import hashlib
import io
import json
import math
import sys

import numpy as np

ORDER = 6  # highest derivative in each variable at a node
LOWEST_DENSITY, HIGHEST_DENSITY = 1e3, 1e42  # per cm^3: about 1e-20 to 1e18 g/cm^3, the domain of the library's own gas
ZETA = [math.pi**2 / 6, math.pi**4 / 90] + [sum(m ** (-2.0 * k) for m in range(1, 40)) for k in range(3, 16)]


class Refused(ValueError):
    """An argument that has no answer: which one, what was given, what is allowed."""

    def __init__(self, argument, given, allowed):
        super().__init__(f"{argument}: given {given}; allowed: {allowed}")


def arrays_of(path):
    """The arrays of an .npz file by name, each held against its CRC-32."""

    def refuse(reason):
        allowed = "an electron table as speciesTableToNpz of fermistate writes it"
        return Refused("file", f"{path}, and {reason}", allowed)

    try:
        with open(path, "rb") as file:
            content = file.read()
    except OSError:
        raise refuse("it cannot be read") from None
    if content[:4] != b"PK\3\4":
        raise refuse("it is no .npz file")
    try:
        with np.load(io.BytesIO(content)) as data:
            found = {name: data[name] for name in data.files}
    except Exception:  # of zipfile and numpy, by the kind of damage
        raise refuse("it is cut or damaged") from None
    try:
        layout, description = float(found["format.electron_table_layout"]), json.loads(str(found["description"]))
        good = layout == 2 and checksum(found, description["items"]) == description["checksum"]
    except (KeyError, TypeError, ValueError):
        raise refuse("it is no electron table of layout 2") from None
    if layout != 2:
        raise refuse("it is no electron table of layout 2")
    if not good:
        raise refuse("its content does not have the checksum that it states")
    return found


def checksum(data, items):
    """SHA-256 of the content, as the description's checksumRecipe says."""
    lines = ""
    for item in items:
        values = data[item["array"]]
        if item["kind"] == "text":
            content = (str(values) + "\n").encode()
        else:
            content = values.astype(np.dtype(item["kind"]).newbyteorder("<")).tobytes()
        shape = "x".join(map(str, item["shape"])) or "scalar"
        lines += f"{hashlib.sha256(content).hexdigest()} {item['kind']} {shape} {item['name']}\n"
    return hashlib.sha256(lines.encode()).hexdigest()


def weights(t, h):
    """Value, first and second derivative of the weights of the 0th..6th derivative at the lower, then the upper end."""
    found = np.zeros((3, 2, ORDER + 1))
    for end, x in enumerate((t, 1 - t)):
        r = 1 - x
        v = [r**7, -7 * r**6, 42 * r**5]
        for i in range(ORDER + 1):  # x^i/i! r^7 S(x), S a sum of C(6 + k, k) x^k
            u = [x ** (i - d) / math.factorial(i - d) if i >= d else 0 for d in range(3)]
            s = [sum(math.comb(6 + k, k) * math.perm(k, d) * x ** (k - d) for k in range(d, 7 - i)) for d in range(3)]
            uv = [u[0] * v[0], u[1] * v[0] + u[0] * v[1], u[2] * v[0] + 2 * u[1] * v[1] + u[0] * v[2]]
            value = [uv[0] * s[0], uv[1] * s[0] + uv[0] * s[1], uv[2] * s[0] + 2 * uv[1] * s[1] + uv[0] * s[2]]
            if i == 0:  # the same without cancellation
                value[1:] = -12012 * (x * r) ** 6, -72072 * (x * r) ** 5 * (r - x)
            for d in range(3):
                found[d, end, i] = value[d] * h ** (i - d) * (-1) ** (end * (i + d))
    return found


class ElectronTable:
    """A table of ln P of electrons alone; refuses a file whose content does not have its checksum."""

    def __init__(self, path):
        data = arrays_of(path)
        self.eta, self.y, self.nodes = (data[name] for name in ("axes.degeneracy", "axes.log_theta", "surface.nodes"))
        self.rest = float(data["units.rest_temperature"])
        self.pressure = float(data["units.pressure"])
        self.density = float(data["units.density"])
        self.range = "{:.4g} to {:.4g} K".format(*(self.rest * math.exp(self.y[k]) for k in (0, -1)))
        self.quantities = str(data["certificate.quantity"]).split("\n")
        self.largest = data["certificate.errors.largest"]

    def look_up(self, eta, y):
        """3 x 3 matrix of d^(i+j) L/(d eta^i d y^j), within the table."""
        a = min(max(np.searchsorted(self.eta, eta, "right") - 1, 0), len(self.eta) - 2)
        b = min(max(np.searchsorted(self.y, y, "right") - 1, 0), len(self.y) - 2)
        he, hy = self.eta[a + 1] - self.eta[a], self.y[b + 1] - self.y[b]
        de, dy = eta - self.eta[a], y - self.y[b]
        cell = self.nodes[a : a + 2, b : b + 2].copy()
        plane = cell[0, 0, :2, :2].copy()  # taken out first: differences of large values would round in the derivatives
        cell[:, :, 0, 0] -= plane[0, 0] + np.add.outer([0, plane[1, 0] * he], [0, plane[0, 1] * hy])
        cell[:, :, 1, 0] -= plane[1, 0]
        cell[:, :, 0, 1] -= plane[0, 1]
        found = np.einsum("dpi,pqij,eqj->de", weights(de / he, he), cell, weights(dy / hy, hy))
        found[0, 0] += plane[0, 0] + plane[1, 0] * de + plane[0, 1] * dy
        found[1, 0] += plane[1, 0]
        found[0, 1] += plane[0, 1]
        return found

    def species(self, eta, theta, sign, rate):
        """Sums of one species: electrons (sign 1), or positrons (-1), whose eta moves with ln theta at a rate."""
        edge = self.eta[0]
        (l, b, l02), (a, l11, l12), (l20, _, _) = self.look_up(max(eta, edge), math.log(theta))
        if eta < edge:  # classical
            d, c = eta - edge, a - 1
            growth = math.expm1(d)
            l, b, l02 = l + d + c * growth, b + l11 * growth, l02 + l12 * growth
            a, l11, l20 = 1 + c * (1 + growth), l11 * (1 + growth), c * (1 + growth)
        p = math.exp(l)
        p20, p11, p02 = l20 + a * a, l11 + a * b, l02 + b * b
        dp, ddp = b + rate * a, p02 + rate * (2 * p11 - a) + rate**2 * p20
        plus = a if sign < 0 else 0
        # P, theta n, T s, energy without the rest mass of net electrons, theta n_+,
        sums = [1, sign * a, b - eta * a, b - 1 + 2 * plus / theta, plus]
        # theta dn/d eta, theta D n, D P, D^2 P - D P with D = d/d ln theta at fixed eta of the electrons
        return p * np.array([*sums, p20, sign * (p11 + rate * p20 - a), dp, ddp - dp])

    def sums(self, nu, eta, theta):
        """The same of the gas at nu = mu/kT and eta = nu - 1/theta: both, as either may be small beside the other."""
        total = degenerate(eta, theta) if eta > self.eta[-1] else self.species(eta, theta, 1, 0)
        opposite = -nu - 1 / theta
        if opposite > -740:
            total += self.species(opposite, theta, -1, 2 / theta)
        if nu < 1e-5:
            total[1] = nu * total[5]  # n_- - n_+ is a small difference here
        return total

    def check(self, density, temperature, words=None):
        """Refuses what has no answer; `words`: how the two were written."""
        written = words or (f"{density!r}", f"{temperature!r}")
        if not LOWEST_DENSITY <= density <= HIGHEST_DENSITY:
            raise Refused("density", written[0], "1e3 to 1e42 net electrons per cm^3")
        if not (temperature > 0 and self.y[0] <= math.log(temperature / self.rest) <= self.y[-1]):
            raise Refused("temperature", written[1], self.range)

    def gas(self, density, temperature):
        """Quantities at `density` net electrons per cm^3, 1e3 to 1e42, and `temperature`, K, by name, in cgs."""
        self.check(density, temperature)
        theta, n = temperature / self.rest, density / self.density
        middle = 0.5 / theta
        pairs = n * theta < self.sums(middle, -middle, theta)[1]
        if pairs:  # the unknown is ln nu, in which ln n is convex: Newton's method converges from above
            nu = min(middle, n * theta / self.sums(0, -1 / theta, theta)[5])
            eta = nu - 1 / theta
        else:  # eta, in which it is concave: from below, where the classical gas has it
            classical = self.species(self.eta[0], theta, 1, 0)[1]
            eta = max(-middle, self.eta[0] + math.log(n * theta / classical))
            nu = eta + 1 / theta
        last = math.inf
        for _ in range(200):
            total = self.sums(nu, eta, theta)
            step = math.log(n * theta / total[1]) * total[1] / total[5]
            if pairs:
                nu *= math.exp(min(step / nu, 3))
                eta = nu - 1 / theta
            else:
                eta += step
                nu = eta + 1 / theta
            size = abs(step) / max(nu if pairs else 1, abs(eta))
            if size < 4e-16 or last <= size < 1e-10:
                break
            last = size
        else:
            raise ArithmeticError(f"{density} per cm^3 and {temperature} K: no convergence")
        p, _, ts, energy, plus, a, b, dp, c = self.sums(nu, eta, theta)
        return {
            "pressure": self.pressure * p,  # dyn/cm^2
            "entropy": self.pressure * ts / temperature,  # erg/(K cm^3)
            "energy": self.pressure * energy,  # erg/cm^3
            "heat_capacity": self.pressure * (c - b * b / a) / temperature,  # at constant volume, erg/(K cm^3)
            "pressure_by_density": self.pressure / self.density * theta * n * theta / a,  # erg
            "pressure_by_temperature": self.pressure * (dp - n * theta * b / a) / temperature,  # dyn/(cm^2 K)
            "eta": eta,  # (mu_- - m_e c^2)/kT
            "positrons": self.density * plus / theta,  # cm^-3
        }


def degenerate(eta, theta):
    """The sums above the table by Sommerfeld's series, D at fixed mu."""
    mu = eta * theta
    p2 = mu * (mu + 2)
    p, w = math.sqrt(p2), p2**1.5 / 3 * theta
    x, s = 2 * (1 + mu) * theta / p2, theta**2 / p2
    a = [1, 1.5 * x]  # theta^k W^(k)/W
    for k in range(2, 2 * len(ZETA) + 2):
        a.append(x * (2.5 - k) * a[-1] + s * (5 - k) * (k - 1) * a[-2])
    even = np.arange(2, 2 * len(ZETA) + 1, 2)
    series = 2 * (1 - 2.0 ** (1 - even)) * ZETA
    low, mid, high = (series * np.array(a)[even + d] for d in (-1, 0, 1))
    if p > 0.6:
        cold = (p * (1 + mu) * (2 * p2 - 3) + 3 * math.asinh(p)) / 24
    else:  # where that form loses digits
        terms = np.cumprod([1] + [-(k - 0.5) / k * p2 for k in range(1, 40)])
        cold = p * p2**2 / 3 * sum(terms / (2 * np.arange(40) + 5))
    pressure, tn, ts = cold + w * sum(low), w * (1 + sum(mid)), w * sum(even * low)
    slopes = [w * (a[1] + sum(high)), w * sum(even * mid), ts, w * sum(even * (even - 1) * low)]
    return np.array([pressure, tn, ts, ts - pressure + eta * tn, 0, *slopes])


def number(word):
    """The number that a word is; NaN, which every check refuses, where it is none."""
    try:
        return float(word)
    except ValueError:
        return math.nan


def main(words):
    """The command line."""
    if not words:
        raise Refused("arguments", "none", "electrons.npz [DENSITY TEMPERATURE]...: net electrons per cm^3, K")
    table = ElectronTable(words[0])
    if len(words) == 1:
        print(f"{len(table.eta)} x {len(table.y)} nodes, {table.range}")
        for quantity, largest in zip(table.quantities, table.largest):
            print(f"{quantity}: {largest:.1e}")
    elif len(words) % 2 == 0:
        raise Refused("temperature", "none", "one after each density")
    points = list(zip(words[1::2], words[2::2]))
    for pair in points:  # all of them before the first line of numbers
        table.check(*map(number, pair), pair)
    for pair in points:
        state = table.gas(*map(float, pair))
        print(" ".join(f"{name} {float(value)!r}" for name, value in state.items()))


if __name__ == "__main__":
    try:
        main(sys.argv[1:])
    except (Refused, ArithmeticError) as refusal:
        sys.exit(str(refusal))
