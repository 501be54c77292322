"""The vectorised root finder."""

from __future__ import annotations

import numpy as np
import pytest

from sheetgen.physics.quadrature import bracketed_root, unit_gauss_nodes


def test_nodes_integrate_polynomials_exactly():
    nodes, weights = unit_gauss_nodes(8)
    assert [weights @ nodes**power for power in range(16)] == pytest.approx(
        [1 / (n + 1) for n in range(16)], rel=1e-14
    )


def test_roots_of_many_functions_at_once():
    targets = np.array([[1e-12, 0.3, 2.0], [1e6, np.nan, 5.0]])

    def excess(x, where):
        return x**3 - targets.ravel()[where]

    roots = bracketed_root(excess, np.zeros(targets.shape), np.full(targets.shape, 200.0))
    assert roots == pytest.approx(np.cbrt(targets), rel=4e-16, nan_ok=True)


def test_ends_count_and_brackets_without_a_change_of_sign_do_not():
    values = bracketed_root(
        lambda x, where: x - np.array([0.0, 1.0, 2.0, -1.0])[where], np.zeros(4), np.ones(4)
    )
    assert values == pytest.approx([0.0, 1.0, np.nan, np.nan], nan_ok=True)


def test_a_hard_root_is_found_to_rounding():
    root = bracketed_root(
        lambda x, where: np.expm1(50 * (x - 0.77)) + 1e-9, np.array([-3.0]), np.array([2.0])
    )
    assert root == pytest.approx([0.77 + np.log1p(-1e-9) / 50], rel=3e-16)
