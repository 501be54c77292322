"""The lattice's share of the heat: Debye functions, heat capacity, the crossing with the electrons' share."""

from __future__ import annotations

import numpy as np

from sheetgen.physics.occupation import heat_capacity_ratio
from sheetgen.physics.phonon_integrals import scaled_bose_integral, scaled_transport_integral
from sheetgen.physics.quadrature import bracketed_root

# C_V/T of the Debye model rises up to here, in units of the Debye temperature, and falls from 0.27995 on.
_STEEPEST = 0.2799
# Where the crossing is not below that temperature it is looked for on a grid this fine in ln T.
_STEP = 0.02


def debye_function(order: int, x: np.ndarray) -> np.ndarray:
    """D_n(x) = (n/xⁿ) ∫₀ˣ sⁿ/(eˢ−1) ds for n = order ≥ 1, x ≥ 0; 1 at x = 0.

    M. Abramowitz and I. A. Stegun, Handbook of Mathematical Functions, sec. 27.1.
    """
    return order * scaled_bose_integral(order, x)


def debye_heat_ratio(temperature: np.ndarray, debye_temperature: np.ndarray) -> np.ndarray:
    """Heat capacity over its classical limit, C_V/3R per mole of atoms.

    P. Debye, Annalen der Physik 344, 789 (1912). From 0 at T = 0 to 1 at T ≫ θ without cancellation.
    """
    return 3 * scaled_transport_integral(4, ratio_of(debye_temperature, temperature))


def ratio_of(debye_temperature: np.ndarray, temperature: np.ndarray) -> np.ndarray:
    """θ/T, infinite at T = 0."""
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        return np.asarray(debye_temperature, float) / np.asarray(temperature, float)


def heat_crossover(
    fermi_temperature: np.ndarray,
    debye_temperature: np.ndarray,
    electrons_per_formula: np.ndarray,
    atoms_per_formula: np.ndarray,
) -> np.ndarray:
    """The lowest temperature above zero at which electrons and lattice have equal heat capacity, in K.

    NaN where the electrons' share is the larger at every temperature. C_el/T only falls, and up to 0.28 θ
    C_ph/T only rises, so a crossing below that is the only one there; others are found on a grid of 2 % in
    temperature, where two crossings nearer to each other than that pass as none.
    """
    scale, debye, share = np.broadcast_arrays(
        np.asarray(fermi_temperature, float) / np.asarray(debye_temperature, float),
        np.asarray(debye_temperature, float),
        np.asarray(electrons_per_formula, float) / (3 * np.asarray(atoms_per_formula, float)),
    )
    shape, scale, share = scale.shape, scale.ravel(), share.ravel()

    def excess(log_reduced: np.ndarray, where: np.ndarray) -> np.ndarray:
        reduced = np.exp(log_reduced)
        electrons = share[where] * heat_capacity_ratio(reduced / scale[where])
        return np.log(electrons / debye_heat_ratio(reduced, 1.0))

    with np.errstate(invalid="ignore", divide="ignore"):
        # The limiting laws cross at ten times the first bound; there, and far below T_F, electrons prevail.
        first = np.log(np.minimum(np.sqrt(5 * share / (8 * np.pi**2 * scale)), _STEEPEST) / 10)
        low = np.minimum(first, np.log(np.minimum(scale, 1.0)) - 3)
    low, high = _bracket(excess, low, np.full(low.shape, np.log(_STEEPEST)), scale)
    return debye * np.exp(bracketed_root(excess, low, high)).reshape(shape)


def _bracket(excess, low: np.ndarray, high: np.ndarray, scale: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Ends in ln(T/θ) around the lowest crossing; where there is none they enclose no change of sign."""
    every = np.arange(low.size)
    for index in np.flatnonzero(excess(high, every) > 0):
        top = np.log(max(scale[index], 1.0)) + 6
        grid = np.arange(high[index], top, _STEP)
        below = np.flatnonzero(excess(grid, np.full(grid.size, index)) <= 0)
        if below.size:
            low[index], high[index] = grid[below[0] - 1], grid[below[0]]
    return low, high
