"""Optical response of independent electrons with one relaxation time, for fields that vary as e^{−iωt}."""

from __future__ import annotations

import numpy as np

SPEED_OF_LIGHT = 299792458.0  # m/s, exact in the SI


def permittivity(
    angular_frequency: np.ndarray,
    bare_plasma_frequency: np.ndarray,
    relaxation_time: np.ndarray,
    background: np.ndarray,
) -> np.ndarray:
    """Relative permittivity ε_b − ω₀²/(ω² + iω/τ); the imaginary part is positive for a lossy metal.

    P. Drude, Annalen der Physik 306, 566 (1900). ω₀² = ne²/ε₀m is not screened by the background.
    """
    frequency = np.asarray(angular_frequency, float)
    damping = 1 / np.asarray(relaxation_time, float)
    strength = np.asarray(bare_plasma_frequency, float) ** 2 / (frequency**2 + damping**2)
    real = background - strength
    return real + 1j * np.broadcast_to(strength * damping / frequency, real.shape)


def refractive_index(permittivity: np.ndarray) -> np.ndarray:
    """n + ik of a passive medium: the square root with k ≥ 0."""
    index = np.sqrt(np.asarray(permittivity, complex))
    return np.where(index.imag < 0, -index, index)


def normal_reflectance(index: np.ndarray) -> np.ndarray:
    """Reflected part of the intensity that falls from vacuum at normal incidence (Fresnel)."""
    return np.abs((index - 1) / (index + 1)) ** 2


def intensity_depth(angular_frequency: np.ndarray, index: np.ndarray) -> np.ndarray:
    """Depth c/2ωk at which the intensity has fallen to 1/e, in m; infinite without absorption."""
    with np.errstate(divide="ignore"):
        return SPEED_OF_LIGHT / (2 * np.asarray(angular_frequency, float) * np.imag(index))


def plasma_edge(plasma_frequency: np.ndarray, relaxation_time: np.ndarray) -> np.ndarray:
    """Angular frequency (ω_p² − τ⁻²)^{1/2} at which Re ε = 0; NaN where damping leaves none (ω_pτ ≤ 1).

    The plasma frequency is the screened one, (ne²/ε₀ε_b m)^{1/2}.
    """
    turns = np.asarray(plasma_frequency, float) * relaxation_time
    # The product of difference and sum keeps its accuracy where ω_pτ is nearly 1.
    square = (turns - 1) * (turns + 1)
    return np.sqrt(np.where(turns > 1, square, np.nan)) / relaxation_time
