"""n from a measured flow: the energy equation solved for Manning's n along a surveyed reach.

Between two sections h_1 + hv_1 = h_2 + hv_2 + friction + k |hv_1 - hv_2|, with the friction
slope from the geometric mean of both conveyances: friction = n^2 Q^2 L / (Z_1 Z_2), where
Z = A R^(2/3) and hv = alpha V^2 / 2g. Added over all subreaches with one n::

    n = sqrt(F / sum(L / (Z_i Z_i+1))) / Q      F = fall + hv_1 - hv_m - sum(k |hv_i - hv_i+1|)

k is the expansion loss where the velocity head falls downstream, else the contraction loss.
Form after Barnes 1967 (USGS Water-Supply Paper 1849) and Dalrymple and Benson 1967 (USGS
TWRI 3-A2), both from memory; the algebra is above. An n found in this way belongs to its
scheme: it holds everything that takes energy in the reach and is not in k or alpha.

Sections stand on the last axis, from upstream to downstream; further axes in front of it are
events or reaches. Units are m, m2 and m3/s. In ft, give gravity in ft/s2 and multiply n by
(1/0.3048)^(1/3).
"""

from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.unit_systems import STANDARD_GRAVITY

Numbers = NDArray[np.float64]

EXPANSION_LOSS: Final = 0.5
CONTRACTION_LOSS: Final = 0.0


@dataclass(frozen=True, slots=True)
class Reckoning:
    """n of one stretch, or of each of several, and the heads it follows from.

    All arrays have one shape: (...) for the whole reach, (..., sections - 1) for subreaches.
    """

    n: Numbers
    """s/m^(1/3); NaN where the energy line does not fall, so that no n can carry the flow."""
    fall: Numbers
    """Fall of the water surface, m."""
    net_head: Numbers
    """What friction takes, m: fall and change of velocity head less the losses k |dhv|."""
    loss: Numbers
    """The losses k |dhv|, m."""


@dataclass(frozen=True, slots=True)
class BackCalculation:
    """n of a surveyed reach, its subreaches, and the velocity heads at the sections."""

    whole: Reckoning
    subreaches: Reckoning
    velocity_head: Numbers
    """alpha V^2 / 2g at each section, m, (..., sections)."""


def back_calculate(
    discharge: ArrayLike,
    distance: ArrayLike,
    area: ArrayLike,
    wetted_perimeter: ArrayLike,
    water_level: ArrayLike,
    alpha: ArrayLike = 1.0,
    *,
    expansion_loss: float = EXPANSION_LOSS,
    contraction_loss: float = CONTRACTION_LOSS,
    gravity: float = STANDARD_GRAVITY,
) -> BackCalculation:
    """Return n of a reach from a measured discharge and the surveyed water surface.

    Parameters
    ----------
    discharge : array of shape (...)
        m3/s.
    distance, area, wetted_perimeter, water_level, alpha : arrays of shape (..., sections)
        Two sections or more: distance along the stream in m, growing or falling downstream;
        m2; m; m above any datum; the velocity head coefficient.
    expansion_loss, contraction_loss : float
        k, the part of a change in velocity head that is lost.
    gravity : float
        m/s2.

    Returns
    -------
    BackCalculation
        NaN for n where the data contradict each other (a net head of 0 or less).

    Examples
    --------
    Two sections alike, 100 m apart, with 0.21 m of fall are uniform flow at a slope of 0.0021:

    >>> found = back_calculate(38, [0, 100], [24, 24], [15.2, 15.2], [5.21, 5])
    >>> round(float(found.whole.n), 6), round(n_of_uniform_flow(38, 24, 15.2, 0.0021), 6)
    (0.039245, 0.039245)
    """
    flow = np.asarray(discharge, dtype=np.float64)[..., np.newaxis]
    wetted = np.asarray(area, dtype=np.float64)
    level = np.asarray(water_level, dtype=np.float64)
    factor = section_factor(wetted, wetted_perimeter)
    head = np.asarray(alpha, dtype=np.float64) * (flow / wetted) ** 2 / (2 * gravity)
    drop = head[..., :-1] - head[..., 1:]
    loss = np.where(drop > 0, expansion_loss * drop, -contraction_loss * drop)
    length = np.abs(np.diff(np.asarray(distance, dtype=np.float64), axis=-1))
    resistance = flow**2 * length / (factor[..., :-1] * factor[..., 1:])
    fall = level[..., :-1] - level[..., 1:]
    return BackCalculation(
        whole=_reckoned(
            level[..., 0] - level[..., -1],
            head[..., 0] - head[..., -1],
            loss.sum(axis=-1),
            resistance.sum(axis=-1),
        ),
        subreaches=_reckoned(fall, drop, loss, resistance),
        velocity_head=head,
    )


def _reckoned(fall: Numbers, drop: Numbers, loss: Numbers, resistance: Numbers) -> Reckoning:
    net = np.asarray(fall + drop - loss)
    usable = np.where(net > 0, net, np.nan)
    n = np.asarray(np.sqrt(usable / resistance))
    return Reckoning(n, np.asarray(fall), net, np.asarray(loss))


def section_factor(area: ArrayLike, wetted_perimeter: ArrayLike) -> Numbers:
    """Return Z = A R^(2/3), in m^(8/3), of the same shape as the areas (m2)."""
    wetted = np.asarray(area, dtype=np.float64)
    radius = wetted / np.asarray(wetted_perimeter, dtype=np.float64)
    return np.asarray(wetted * radius ** (2 / 3))


def n_of_uniform_flow(
    discharge: ArrayLike, area: ArrayLike, wetted_perimeter: ArrayLike, slope: ArrayLike
) -> float | Numbers:
    """Return n = A R^(2/3) S^(1/2) / Q of uniform flow at one section, arrays alike."""
    energy = np.sqrt(np.asarray(slope, dtype=np.float64))
    n = section_factor(area, wetted_perimeter) * energy / np.asarray(discharge, dtype=np.float64)
    return float(n) if n.ndim == 0 else n


def relative_sd(
    reckoning: Reckoning,
    *,
    discharge: ArrayLike = 0.0,
    water_level: ArrayLike = 0.0,
    area: ArrayLike = 0.0,
) -> Numbers:
    """Return the standard deviation of ln n from those of what was measured, to first order.

    The derivatives are those of the whole relation, so discharge and area act through the
    velocity heads too: d ln n / d ln Q = -fall/F and d ln n / d ln A = 2/3 + fall/F. Where
    velocity heads do not change along the reach, fall = F and they are -1 and 5/3.

    Parameters
    ----------
    reckoning : Reckoning
        Of a whole reach or of subreaches.
    discharge, area : arrays that broadcast
        Relative standard deviations. The area errs at all sections together (one method, one
        crew), which is the larger case; the wetted perimeters are taken as right.
    water_level : array that broadcasts
        Standard deviation of one water level, m; each section errs for itself, and only the
        first and the last one matter.

    Returns
    -------
    array of the shape of ``reckoning.n``
        NaN where n is.
    """
    net = np.where(reckoning.net_head > 0, reckoning.net_head, np.nan)
    ratio = reckoning.fall / net
    of_fall = np.sqrt(2) * np.asarray(water_level, dtype=np.float64) / (2 * net)
    of_flow = ratio * np.asarray(discharge, dtype=np.float64)
    of_area = (2 / 3 + ratio) * np.asarray(area, dtype=np.float64)
    return np.asarray(np.sqrt(of_flow**2 + of_area**2 + of_fall**2))


def relative_sd_of_uniform_flow(
    *, discharge: ArrayLike = 0.0, slope: ArrayLike = 0.0, area: ArrayLike = 0.0
) -> Numbers:
    """Return the standard deviation of ln n of one section from relative ones, to first order."""
    squares = (
        np.asarray(discharge, dtype=np.float64) ** 2
        + (5 / 3 * np.asarray(area, dtype=np.float64)) ** 2
        + (np.asarray(slope, dtype=np.float64) / 2) ** 2
    )
    return np.asarray(np.sqrt(squares))
