"""Gauss-Legendre nodes, without numpy.polynomial, which takes longer to import than to use."""

from functools import cache

import numpy as np

from roughness.additive.factor_shapes import Floats


@cache
def gauss_legendre(count: int) -> tuple[Floats, Floats]:
    """Return nodes and weights on (-1, 1), each of shape (count,).

    The nodes are the eigenvalues of the Jacobi matrix of the Legendre polynomials and the
    weights twice the squared first components of its eigenvectors (Golub and Welsch 1969).
    """
    k = np.arange(1, count)
    beside = k / np.sqrt(4.0 * k * k - 1)
    nodes, vectors = np.linalg.eigh(np.diag(beside, 1) + np.diag(beside, -1))
    return nodes, 2 * vectors[0] ** 2
