"""Resistivity against temperature from scattering by a Debye spectrum of phonons."""

from __future__ import annotations

import numpy as np

from sheetgen.physics.debye import ratio_of
from sheetgen.physics.phonon_integrals import scaled_transport_integral


def bloch_grueneisen_shape(temperature: np.ndarray, debye_temperature: np.ndarray) -> np.ndarray:
    """(T/θ)⁵ ∫₀^{θ/T} x⁵/((eˣ−1)(1−e⁻ˣ)) dx: 124.43 (T/θ)⁵ at low temperatures, T/4θ at high ones.

    E. Grüneisen, Annalen der Physik 408, 530 (1933). The T⁵ law keeps its relative accuracy down to T = 0.
    """
    reduced = np.asarray(temperature, float) / np.asarray(debye_temperature, float)
    return reduced * scaled_transport_integral(5, ratio_of(debye_temperature, temperature))


def resistivity_from_debye(
    temperature: np.ndarray,
    debye_temperature: np.ndarray,
    residual: np.ndarray,
    reference_resistivity: np.ndarray,
    reference_temperature: np.ndarray,
) -> np.ndarray:
    """Residual part plus a Bloch–Grüneisen part that passes through the reference resistivity, in Ω m.

    The two parts add (Matthiessen's rule). NaN where the reference temperature is zero.
    """
    at_reference = bloch_grueneisen_shape(reference_temperature, debye_temperature)
    at_reference = np.where(at_reference > 0, at_reference, np.nan)
    growth = bloch_grueneisen_shape(temperature, debye_temperature) / at_reference
    return residual + (reference_resistivity - residual) * growth
