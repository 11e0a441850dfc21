"""Gauss-Legendre nodes."""

import numpy as np
import pytest

from roughness.additive.quadrature import gauss_legendre


def test_two_nodes_are_the_known_ones() -> None:
    # The zeros of the second Legendre polynomial, (3 x^2 - 1) / 2.
    nodes, weights = gauss_legendre(2)
    assert nodes == pytest.approx([-(3**-0.5), 3**-0.5], abs=1e-15)
    assert weights == pytest.approx([1, 1], abs=1e-15)


@pytest.mark.parametrize("count", [12, 128])
def test_powers_up_to_twice_the_count_are_integrated_exactly(count: int) -> None:
    nodes, weights = gauss_legendre(count)
    powers = np.arange(0, 2 * count, 2)
    assert weights @ nodes[:, None] ** powers == pytest.approx(2 / (powers + 1), rel=1e-10)
