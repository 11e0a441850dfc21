"""n of plants in the flow: rigid stems that stand out of the water or under it, and grass.

Stems make n grow with depth as R^(2/3); just submerged grass makes it fall steeply with
velocity times hydraulic radius. All take floats and arrays, in metres.
"""

from typing import Any, Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.errors import InputError
from roughness.hydraulics.unit_systems import STANDARD_GRAVITY as _G

_KAPPA: Final = 0.41


def _array(values: ArrayLike) -> NDArray[np.float64]:
    return np.asarray(values, dtype=np.float64)


def _plain(values: NDArray[np.float64]) -> Any:
    return float(values) if values.ndim == 0 else values


def vegetation_density(
    stems: ArrayLike,
    diameter_m: ArrayLike,
    area_m2: float,
    height_m: ArrayLike | None = None,
    depth_m: float | None = None,
) -> float:
    """Return the area of the stems against the flow per volume of water, 1/m.

    Vegd = sum(N d) / area, where all stems reach the water surface; with heights below the
    depth h, sum(N d height) / (h area). USGS WSP 2339 (FHWA-TS-84-204, eq. 11): counting by
    class of diameter seen, the formula from memory.

    Parameters
    ----------
    stems, diameter_m : arrays of shape (classes,)
        Number of stems and their diameter, m.
    area_m2 : float
        The sample area, m2; 30 m across the flow by 15 m along it is usual (memory), two or
        three of them a part.
    height_m : array, optional
        Height of the stems under water, m; absent where all stand out of it.
    depth_m : float, optional
        Depth of flow, m; due where heights are given.

    Raises
    ------
    InputError
        An area of 0 or less, a count or diameter below 0, heights without a depth.

    >>> feet = vegetation_density([100, 40, 25, 10, 4], [0.1, 0.25, 0.5, 1.0, 1.5], 5000)
    >>> round(feet, 7)
    0.0097
    """
    count, diameter = _array(stems), _array(diameter_m)
    if not (area_m2 > 0 and (count >= 0).all() and (diameter >= 0).all()):
        raise InputError(
            "the counted stems cannot be used",
            wanted="a sample area above 0, numbers and diameters not below 0",
        )
    across = count * diameter
    if height_m is not None:
        if depth_m is None or not depth_m > 0:
            raise InputError("heights of stems stand without a depth", wanted="a depth above 0")
        across = across * np.minimum(_array(height_m), depth_m) / depth_m
    return float(across.sum() / area_m2)


def n_with_stems(
    n_boundary: ArrayLike, density: ArrayLike, drag: ArrayLike, radius_m: ArrayLike
) -> Any:
    """Return n of a boundary with rigid stems that stand out of the water.

    n = sqrt(n0^2 + C* Vegd R^(4/3) / (2g)), from the forces on bed and stems (derived).
    Stems that bend little, spread evenly; velocity changes little across the section (memory).
    Petryk and Bosmajian 1975; USGS WSP 2339, eq. 7: seen second hand.

    Parameters
    ----------
    n_boundary : float or array
        n0: base, irregularity, obstruction and the plants that are not counted.
    density : float or array
        Vegd, 1/m, from :func:`vegetation_density`.
    drag : float or array
        Effective drag coefficient C*; it falls with R. Its published curve was not seen: the
        value must be the user's own.
    radius_m : float or array
        Hydraulic radius, m; on a flood plain the depth.

    Returns
    -------
    float or array
        n of the whole part, never to be added to a vegetation grade.

    >>> round(n_with_stems(0.055, 0.0115 / 0.3048, 22.7, 2.9 * 0.3048), 5)
    0.20017
    """
    stems = _array(drag) * _array(density) * _array(radius_m) ** (4 / 3) / (2 * _G)
    return _plain(np.sqrt(_array(n_boundary) ** 2 + stems))


def n4_of_stems(
    n_boundary: ArrayLike, density: ArrayLike, drag: ArrayLike, radius_m: ArrayLike
) -> Any:
    """Return what counted stems add in the additive method with m = 1: n4 = n - n0.

    It replaces the vegetation grade. Less than the root of the stems' own term (derived):
    roots of squares add, n does not. Parameters as :func:`n_with_stems`.

    >>> round(n4_of_stems(0.025, 0.0115 / 0.3048, 11.0, 2.9 * 0.3048), 6)
    0.111292
    """
    whole = n_with_stems(n_boundary, density, drag, radius_m)
    return _plain(_array(whole) - _array(n_boundary))


def density_from_n(
    n: ArrayLike, n_boundary: ArrayLike, drag: ArrayLike, radius_m: ArrayLike
) -> Any:
    """Return the density, 1/m, that makes n of n0: the inverse of :func:`n_with_stems`.

    NaN where n is below n0.
    """
    stems = _array(n) ** 2 - _array(n_boundary) ** 2
    usable = np.where(stems >= 0, stems, np.nan)
    return _plain(usable * 2 * _G / (_array(drag) * _array(radius_m) ** (4 / 3)))


def n_with_submerged_stems(
    n_boundary: ArrayLike,
    density: ArrayLike,
    drag: ArrayLike,
    height_m: ArrayLike,
    depth_m: ArrayLike,
) -> Any:
    """Return n of rigid stems, also where the flow is deeper than they are high.

    C = [1/Cb^2 + Cd m D k / (2g)]^(-1/2) + sqrt(g)/kappa ln(h/k) with k the smaller of height
    and depth, Cb = h^(1/6)/n0, n = h^(1/6)/C and kappa 0.41. Emergent it equals
    :func:`n_with_stems` (derived). Baptist and others 2007; form and kappa seen second hand,
    the rest from memory.

    >>> round(n_with_submerged_stems(1 / 45, 1.5, 1.0, 0.4, 1.0), 7)
    0.0789241
    """
    depth = _array(depth_m)
    under = np.minimum(_array(height_m), depth)
    bed = (_array(n_boundary) / depth ** (1 / 6)) ** 2
    inside = (bed + _array(drag) * _array(density) * under / (2 * _G)) ** -0.5
    above = np.sqrt(_G) / _KAPPA * np.log(depth / under)
    return _plain(depth ** (1 / 6) / (inside + above))
