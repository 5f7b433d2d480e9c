#!/usr/bin/env python3
"""Reads a table of fermistate from HDF5 and evaluates it. Needs numpy and h5py.

    python3 read_table.py core.h5                 checks the file, tells what it holds
    python3 read_table.py core.h5 1e6 2e7         quantities at 1e6 g/cm^3 and 2e7 K

The file says itself what its parts mean: see the attribute "reading" of its root. Of what stands beside the table
(source/beside) radiation is added to every quantity, and ideal ions to those that need no mass and spin of the nuclei,
which the file does not hold: not to entropy and free energy. Each number says what it is without.
"""
import hashlib
import math
import sys

import h5py
import numpy as np
from numpy.polynomial import Polynomial

# Quintic Hermite basis on [0, 1]: value, slope, curvature at 0, then at 1.
BASIS = [
    Polynomial([1, 0, 0, -10, 15, -6]),
    Polynomial([0, 1, 0, -6, 8, -3]),
    Polynomial([0, 0, 0.5, -1.5, 1.5, -0.5]),
    Polynomial([0, 0, 0, 10, -15, 6]),
    Polynomial([0, 0, 0, -4, 7, -3]),
    Polynomial([0, 0, 0, 0.5, -1, 0.5]),
]
BASES = [BASIS, [b.deriv(1) for b in BASIS], [b.deriv(2) for b in BASIS]]

# CODATA 2022: exact but for the atomic mass constant.
BOLTZMANN, PLANCK, LIGHT, ATOMIC_MASS = 1.380649e-16, 6.62607015e-27, 29979245800.0, 1.66053906892e-24
RADIATION = 8 * math.pi**5 * BOLTZMANN**4 / (15 * PLANCK**3 * LIGHT**3)  # erg/(cm^3 K^4)

UNITS = {
    "specificFreeEnergy": "erg/g",
    "pressure": "dyn/cm^2",
    "specificEnergy": "erg/g",
    "specificEntropy": "erg/(g K)",
    "heatCapacityV": "erg/(g K)",
    "pressureByDensity": "erg/g",
    "pressureByTemperature": "dyn/(cm^2 K)",
}


def weights(t, step):
    """The basis at t by order of derivative (rows), for ends with derivatives by a variable with cells of `step`."""
    scale = [1, step, step**2] * 2
    return np.array([[b(t) * s for b, s in zip(bases, scale)] / np.float64(step) ** k for k, bases in enumerate(BASES)])


def texts(dataset):
    """The texts of a dataset as a list."""
    return [dataset.asstr()[()]] if dataset.shape == () else list(dataset.asstr()[:])


def checksum(file):
    """SHA-256 of the content, as the attribute checksum_recipe says."""
    kinds = {"f8": "float64", "i4": "int32", "i2": "int16", "i1": "int8"}
    lines = ""
    for name in texts(file["format/items"]):
        dataset = file[name]
        if h5py.check_string_dtype(dataset.dtype):
            kind = "text"
            data = "".join(text + "\n" for text in texts(dataset)).encode()
        else:
            kind = kinds[dataset.dtype.str[1:]]
            data = np.asarray(dataset[()]).astype(dataset.dtype.newbyteorder("<")).tobytes()
        shape = "x".join(map(str, dataset.shape)) or "scalar"
        lines += f"{hashlib.sha256(data).hexdigest()} {kind} {shape} {name}\n"
    return hashlib.sha256(lines.encode()).hexdigest()


class Axis:
    """Equal steps of a logarithm."""

    def __init__(self, name, unit, group):
        self.name, self.unit = name, unit
        self.lowest = float(group["lowest"][()])
        self.highest = float(group["highest"][()])
        self.blocks = int(group["blocks"][()])
        self.step = math.log(self.highest / self.lowest) / self.blocks

    def __str__(self):
        return f"{self.lowest!r} to {self.highest!r} {self.unit}"

    def blocks_above(self, value):
        """How many blocks a value lies above the lower end."""
        if not self.lowest <= value <= self.highest:
            raise ValueError(f"{self.name}: given {value!r}; allowed: {self}")
        return (math.log(value) - math.log(self.lowest)) / self.step


class Sheet:
    """One surface L(ln rho, ln T)."""

    def __init__(self, group):
        self.levels = np.stack([group["density_level"][:], group["temperature_level"][:]], axis=-1).astype(int)
        self.exponent = group["exponent"][:]
        self.nodes = group["nodes"][:]
        counts = np.prod(2**np.maximum(self.levels, 0) + 1, axis=-1) * (self.levels[..., 0] >= 0)
        self.first = np.concatenate([[0], np.cumsum(counts.ravel())])[:-1].reshape(counts.shape)

    def at(self, density, temperature, x, y):
        """Exponent k, and the 3 x 3 derivatives of L, at x and y blocks from the lower ends."""
        p = min(int(x), density.blocks - 1)
        q = min(int(y), temperature.blocks - 1)
        m, n = self.levels[p, q]
        if m < 0:
            raise ValueError("the sheet has no block here")
        u, v = (x - p) * 2**m, (y - q) * 2**n
        i, j = min(int(u), 2**m - 1), min(int(v), 2**n - 1)
        corner = self.first[p, q] + i * (2**n + 1) + j
        along_u = weights(u - i, density.step / 2**m)
        along_v = weights(v - j, temperature.step / 2**n)
        # Rows: L, L_u, L_uu at the lower and at the upper density; columns the same along temperature.
        corners = np.block(
            [
                [self.nodes[corner], self.nodes[corner + 1]],
                [self.nodes[corner + 2**n + 1], self.nodes[corner + 2**n + 2]],
            ]
        )
        # The value at one corner is taken out first: differences of large values would round in the derivatives.
        value = corners[0, 0]
        corners[::3, ::3] -= value
        found = along_u @ corners @ along_v.T
        found[0, 0] += value
        return int(self.exponent[p, q]), found


class Table:
    """A table of the free energy; refuses a file whose content does not have its checksum."""

    def __init__(self, path):
        with h5py.File(path, "r") as file:
            if file["format/layout"][()] != 1:
                raise ValueError("another layout")
            if checksum(file) != file["format/checksum"].asstr()[()]:
                raise ValueError("the content does not have the checksum that the file states")
            self.composition = file["composition/name"].asstr()[()]
            self.beside = texts(file["source/beside"])
            self.ions = sum(file["composition/nucleon_fraction"][:] / file["composition/mass_number"][:]) / ATOMIC_MASS
            self.density = Axis("density", "g/cm^3", file["axes/density"])
            self.temperature = Axis("temperature", "K", file["axes/temperature"])
            self.cold = file["cold/nodes"][:]
            self.sheets = {phase: Sheet(file["sheets"][phase]) for phase in texts(file["sheets/phase"])}
            self.freezing = None
            if "freezing" in file["sheets"]:
                self.freezing = (file["sheets/freezing/factor"][()], file["sheets/freezing/highest_density"][()])

    def phase(self, density, temperature):
        """Name of the sheet that holds."""
        if self.freezing is None:
            return next(iter(self.sheets))
        factor, highest = self.freezing
        frozen = density <= highest and temperature <= factor * density ** (1 / 3)
        return "crystal" if frozen else "liquid"

    def cold_at(self, x):
        """F_0 and its first two derivatives by ln rho at x blocks from the lowest density."""
        steps = len(self.cold) - 1
        t = x / self.density.blocks * steps
        i = min(int(t), steps - 1)
        ends = self.cold[i : i + 2].flatten()
        value = ends[0]
        ends[::3] -= value
        found = weights(t - i, self.density.step * self.density.blocks / steps) @ ends
        found[0] += value
        return found

    def added(self, density, temperature):
        """What stands beside the table and is known here: by its name, its part in each quantity, in cgs."""
        photons = RADIATION * temperature**4 / density
        gas = self.ions * BOLTZMANN * temperature
        known = {
            "radiation": {
                "specificFreeEnergy": -photons / 3,
                "pressure": density * photons / 3,
                "specificEnergy": photons,
                "specificEntropy": 4 * photons / (3 * temperature),
                "heatCapacityV": 4 * photons / temperature,
                "pressureByDensity": 0,
                "pressureByTemperature": 4 * density * photons / (3 * temperature),
            },
            "ideal ions": {
                "pressure": density * gas,
                "specificEnergy": 1.5 * gas,
                "heatCapacityV": 1.5 * gas / temperature,
                "pressureByDensity": gas,
                "pressureByTemperature": density * gas / temperature,
            },
        }
        return {name: known.get(name, {}) for name in self.beside}

    def state(self, density, temperature):
        """The phase, and by name of each quantity its value in cgs, its unit, and a list of what it is without."""
        x = self.density.blocks_above(density)
        y = self.temperature.blocks_above(temperature)
        phase = self.phase(density, temperature)
        k, l = self.sheets[phase].at(self.density, self.temperature, x, y)
        f0, f0_u, f0_uu = self.cold_at(x)
        heat = 2.0**k * math.exp(l[0, 0])
        free = f0 - heat
        f_u = f0_u - heat * l[1, 0]
        f_v = -heat * l[0, 1]
        f_uu = f0_uu - heat * (l[2, 0] + l[1, 0] ** 2)
        f_uv = -heat * (l[1, 1] + l[1, 0] * l[0, 1])
        f_vv = -heat * (l[0, 2] + l[0, 1] ** 2)
        own = {
            "specificFreeEnergy": free,
            "pressure": density * f_u,
            "specificEnergy": free - f_v,
            "specificEntropy": -f_v / temperature,
            "heatCapacityV": (f_v - f_vv) / temperature,
            "pressureByDensity": f_u + f_uu,
            "pressureByTemperature": density * f_uv / temperature,
        }
        added = self.added(density, temperature)
        found = {"phase": phase}
        for name, value in own.items():
            whole = value + sum(part.get(name, 0) for part in added.values())
            found[name] = (float(whole), UNITS[name], [other for other, part in added.items() if name not in part])
        return found


def main(arguments):
    """The command line."""
    if len(arguments) not in (1, 3):
        sys.exit(__doc__)
    table = Table(arguments[0])
    if len(arguments) == 1:
        print(f"density: {table.density}")
        print(f"temperature: {table.temperature}")
        print(f"composition: {table.composition}")
        print(f"sheets: {', '.join(table.sheets)}")
        print(f"beside the table: {', '.join(table.beside) or 'nothing'}")
        return
    try:
        density, temperature = map(float, arguments[1:])
    except ValueError:
        raise ValueError(f"density, temperature: given {' '.join(arguments[1:])}; allowed: two numbers") from None
    for name, value in table.state(density, temperature).items():
        if name == "phase":
            print(f"phase: {value}")
            continue
        number, unit, without = value
        print(f"{name}: {number!r} {unit}" + (f" (without {', '.join(without)})" if without else ""))


if __name__ == "__main__":
    try:
        main(sys.argv[1:])
    except (OSError, KeyError, ValueError) as error:
        sys.exit(f"{sys.argv[1]}: {error}")
