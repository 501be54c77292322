"""Time the physics of many materials at once against the same formulas called one by one.

    python benchmarks/physics.py

Both sides compute, for invented but ordinary metals: the chemical potential and the electronic heat capacity at
three temperatures, the Debye heat capacity and the Bloch–Grüneisen resistivity at the same, the hard-wall and
periodic states of six cubes, and the resistivity of one film by Fuchs–Sondheimer and by Mayadas–Shatzkes. The
one-by-one side is what a careful scientist writes alone with scipy.integrate.quad and scipy.optimize.brentq, with
a NumPy column sum for the counts. It is timed on a few materials, and everything is compared per material.
"""

from __future__ import annotations

import argparse
from math import pi, sqrt
from time import perf_counter

import numpy as np
from scipy.integrate import dblquad, quad
from scipy.optimize import brentq

from sheetgen.physics.bloch_grueneisen import resistivity_from_debye
from sheetgen.physics.counting import hard_wall_points, periodic_points
from sheetgen.physics.debye import debye_heat_ratio
from sheetgen.physics.films import film_factor, surface_factor
from sheetgen.physics.occupation import chemical_potential_ratio, heat_capacity_ratio

TEMPERATURES = np.array([4.2, 77.0, 293.15])
EDGES = np.array([1, 2, 5, 10, 20, 50]) * 1e-9
INPUTS = ("fermi_temperature", "debye_temperature", "wavevector", "kappa", "alpha", "specularity")
NAMES = (
    "chemical potential",
    "electron heat",
    "Debye heat",
    "resistivity",
    "hard-wall states",
    "periodic states",
    "Fuchs–Sondheimer",
    "Mayadas–Shatzkes",
)


def invent(count: int, seed: int = 1) -> dict[str, np.ndarray]:
    """Inputs of so many metals."""
    rng = np.random.default_rng(seed)
    ranges = ((2e4, 1.5e5), (40, 1000), (7e9, 1.8e10), (0.1, 10), (0.05, 2), (0, 0.9))
    return {name: rng.uniform(*limits, count) for name, limits in zip(INPUTS, ranges, strict=True)}


def at_once(metals: dict[str, np.ndarray]) -> list[np.ndarray]:
    """Every quantity of every metal, in the order of NAMES."""
    fermi, debye, wavevector, kappa, alpha, specularity = (metals[name] for name in INPUTS)
    reduced = TEMPERATURES / fermi[:, None]
    radius = wavevector[:, None] * EDGES / pi
    return [
        chemical_potential_ratio(reduced),
        heat_capacity_ratio(reduced),
        debye_heat_ratio(TEMPERATURES, debye[:, None]),
        resistivity_from_debye(TEMPERATURES, debye[:, None], 0.0, 1.0, 300.0),
        hard_wall_points(radius),
        periodic_points(radius / 2),
        surface_factor(kappa, specularity),
        film_factor(kappa, alpha, specularity),
    ]


def one_by_one(fermi, debye, wavevector, kappa, alpha, specularity) -> list:
    """The same of one metal."""
    potentials = [scalar_potential(t / fermi) for t in TEMPERATURES]
    radii = [wavevector * edge / pi for edge in EDGES]
    return [
        potentials,
        [scalar_heat(y, t / fermi) for y, t in zip(potentials, TEMPERATURES, strict=True)],
        [scalar_debye(debye / t) for t in TEMPERATURES],
        [scalar_bloch(debye / t) / scalar_bloch(debye / 300.0) for t in TEMPERATURES],
        [scalar_hard_wall(radius) for radius in radii],
        [scalar_periodic(radius / 2) for radius in radii],
        scalar_surface(kappa, specularity),
        scalar_film(kappa, alpha, specularity),
    ]


def scalar_moment(power: float, potential: float, t: float) -> float:
    """∫ x^power (−df/dx) dx about the Fermi edge, in units of E_F: what every integral over f becomes by parts."""

    def integrand(z):
        return max(potential + t * z, 0.0) ** power / (4 * np.cosh(z / 2) ** 2)

    return quad(integrand, -potential / t if potential < 40 * t else -40, 40, epsabs=0, epsrel=1e-10)[0]


def scalar_potential(t: float) -> float:
    return brentq(lambda y: scalar_moment(1.5, y, t) - 1, 1 - 2 * t, 1 + t, xtol=1e-13)


def scalar_heat(potential: float, t: float) -> float:
    """(15/4) F_{3/2}/F_{1/2} − (9/4) F_{1/2}/F_{−1/2}, the textbook form, with the cancellation that it has."""
    upper, middle, lower = (scalar_moment(power, potential, t) for power in (2.5, 1.5, 0.5))
    return 1.5 / t * (upper / middle - middle / lower)


def scalar_debye(x: float) -> float:
    return (
        3
        / x**3
        * quad(lambda s: s**4 / (4 * np.sinh(s / 2) ** 2) if s else 0, 0, min(x, 60), epsrel=1e-10)[0]
    )


def scalar_bloch(x: float) -> float:
    return quad(lambda s: s**5 / (4 * np.sinh(s / 2) ** 2) if s else 0, 0, min(x, 60), epsrel=1e-10)[0] / x**5


def scalar_hard_wall(radius: float) -> int:
    axis = np.arange(1, int(radius) + 1)
    rest = radius**2 - axis[:, None] ** 2 - axis**2
    return int(np.floor(np.sqrt(rest[rest > 0])).sum())


def scalar_periodic(radius: float) -> int:
    axis = np.arange(-int(radius), int(radius) + 1)
    rest = radius**2 - axis[:, None] ** 2 - axis**2
    return int((2 * np.floor(np.sqrt(rest[rest >= 0])) + 1).sum())


def scalar_surface(kappa: float, specularity: float) -> float:
    def loss(t):
        return (1 / t**3 - 1 / t**5) * -np.expm1(-kappa * t) / (1 - specularity * np.exp(-kappa * t))

    return 1 / (1 - 1.5 / kappa * (1 - specularity) * quad(loss, 1, np.inf, epsrel=1e-10)[0])


def scalar_film(kappa: float, alpha: float, specularity: float) -> float:
    def loss(u, phi):
        slowing = 1 + alpha / (np.cos(phi) * sqrt(1 - u * u))
        decay = np.exp(-kappa * slowing / u)
        return u * (1 - u * u) * (np.cos(phi) / slowing) ** 2 * (1 - decay) / (1 - specularity * decay)

    integral = dblquad(loss, 0, pi / 2, 0, 1, epsrel=1e-8, epsabs=1e-10)[0]
    grains = 1 - 1.5 * alpha + 3 * alpha**2 - 3 * alpha**3 * np.log1p(1 / alpha)
    return 1 / (grains - 6 / (pi * kappa) * (1 - specularity) * integral)


def best_of(repeats: int, work) -> float:
    """Shortest time of several runs, in seconds."""
    times = []
    for _ in range(repeats):
        start = perf_counter()
        work()
        times.append(perf_counter() - start)
    return min(times)


def main() -> None:
    parser = argparse.ArgumentParser(description="Time the physics of many materials at once and one by one.")
    parser.add_argument("--materials", type=int, default=1000, help="materials computed at once")
    parser.add_argument("--sample", type=int, default=10, help="materials computed one by one")
    arguments = parser.parse_args()

    start = perf_counter()
    at_once(invent(1))
    print(f"first call, with the tables that a process keeps   {perf_counter() - start:8.3f} s")

    metals = invent(arguments.materials)
    together = best_of(3, lambda: at_once(metals)) / arguments.materials
    sample = [[metals[name][number] for name in INPUTS] for number in range(arguments.sample)]
    start = perf_counter()
    separate = [one_by_one(*metal) for metal in sample]
    alone = (perf_counter() - start) / arguments.sample

    print(f"{arguments.materials} materials at once       {together * 1e3:10.4f} ms a material")
    print(f"{arguments.sample} materials one by one    {alone * 1e3:10.4f} ms a material")
    print(f"ratio                          {alone / together:10.0f}   (goal: at least 50)")
    for name, ours, theirs in zip(NAMES, at_once(metals), zip(*separate, strict=True), strict=True):
        difference = np.abs(np.array(theirs, float) / ours[: arguments.sample] - 1).max()
        print(f"    largest difference in {name:20s} {difference:.1e}")

    counts = np.array([100, 1000, 10_000])
    times = np.array([best_of(3, lambda n=n: at_once(invent(n))) for n in counts])
    for count, time in zip(counts, times, strict=True):
        print(f"{count:6d} materials {time:9.4f} s")
    slope = np.polyfit(np.log(counts), np.log(times), 1)[0]
    print(f"slope of the cost, 100 to 10,000 materials {slope:.2f}   (goal: at most 1)")


if __name__ == "__main__":
    main()
