"""Every relation for one n of a part whose bed and banks differ, with what each one assumes.

They answer different questions and need not agree: in a trapezoid with rough banks the largest
can be twice the smallest. A vertical wall is a segment without area: the relations that weight
by area or radius leave it out, and only those that weight by perimeter see it. They are for
segments within one part. Between channel and flood plains none of them serves: there
conveyances add (:mod:`roughness.hydraulics.conveyance`).
The formulas are from memory (Chow 1959, chapter 6; Yen 1991 and 2002); that of Horton and
Einstein was seen in three places.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any, Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from roughness.hydraulics.geometry import ratio

Floats = NDArray[np.float64]


@dataclass(frozen=True, slots=True)
class Segments:
    """The segments of one part on the last axis, cut by vertical lines at their limits.

    Arrays of shape (..., segments): Manning's n, flow area, wetted perimeter, mean depth. A
    segment that is dry has none of the last three and does not count.
    """

    n: Floats
    area: Floats
    perimeter: Floats
    depth: Floats

    @property
    def radius(self) -> Floats:
        """Hydraulic radius of each segment, with its bed alone as perimeter."""
        return np.asarray(ratio(self.area, self.perimeter))


@dataclass(frozen=True, slots=True)
class Relation:
    """One relation in words and as a function."""

    key: str
    assumption: str
    """What is the same in all segments, or adds."""
    source: str
    of: Callable[[Segments], Any]


def segments_of(n: ArrayLike, area: ArrayLike, perimeter: ArrayLike, depth: ArrayLike) -> Segments:
    """Return the segments as arrays of one shape."""
    numbers = np.broadcast_arrays(
        *(np.asarray(v, dtype=np.float64) for v in (n, area, perimeter, depth))
    )
    return Segments(*(np.asarray(v) for v in numbers))


def composite_n(segments: Segments) -> dict[str, Any]:
    """Return the n of the part by every relation, (...) each; not finite where one is not defined.

    >>> found = composite_n(segments_of([0.05, 0.03, 0.08], [2.25, 9, 2.25],
    ...                                 [3.3541, 6, 3.3541], [0.75, 1.5, 0.75]))
    >>> round(found["horton-einstein"], 5), round(found["lotter"], 5)
    (0.05058, 0.03129)
    """
    with np.errstate(invalid="ignore", divide="ignore"):
        return {key: relation.of(segments) for key, relation in RELATIONS.items()}


def _mean(weight: Floats, n: Floats, power: float) -> Any:
    """Return the power mean of n; power 0 is the geometric mean."""
    share = weight / weight.sum(axis=-1, keepdims=True)
    if power == 0:
        return _plain(np.exp((share * np.log(n)).sum(axis=-1)))
    return _plain((share * n**power).sum(axis=-1) ** (1 / power))


def _plain(values: Any) -> Any:
    found = np.asarray(values)
    return float(found) if found.ndim == 0 else found


def _whole_radius(s: Segments) -> Floats:
    return np.asarray(s.area.sum(axis=-1) / s.perimeter.sum(axis=-1))


def _horton_einstein(s: Segments) -> Any:
    """Return (sum P n^1.5 / P)^(2/3)."""
    return _mean(s.perimeter, s.n, 1.5)


def _pavlovskii(s: Segments) -> Any:
    """Return (sum P n^2 / P)^(1/2)."""
    return _mean(s.perimeter, s.n, 2.0)


def _perimeter_mean(s: Segments) -> Any:
    """Return sum P n / P."""
    return _mean(s.perimeter, s.n, 1.0)


def _felkel(s: Segments) -> Any:
    """Return P / sum(P/n)."""
    return _mean(s.perimeter, s.n, -1.0)


def _colebatch(s: Segments) -> Any:
    """Return (sum A n^1.5 / A)^(2/3)."""
    return _mean(s.area, s.n, 1.5)


def _cox(s: Segments) -> Any:
    """Return sum A n / A."""
    return _mean(s.area, s.n, 1.0)


def _krishnamurthy_christensen(s: Segments) -> Any:
    """Return exp(sum P h^1.5 ln n / sum P h^1.5), h the mean depth of the segment."""
    return _mean(s.perimeter * s.depth**1.5, s.n, 0.0)


def _lotter(s: Segments) -> Any:
    """Return P R^(5/3) / sum(P R_i^(5/3) / n)."""
    carried = (s.perimeter * s.radius ** (5 / 3) / s.n).sum(axis=-1)
    return _plain(s.perimeter.sum(axis=-1) * _whole_radius(s) ** (5 / 3) / carried)


def _ida_engelund(s: Segments) -> Any:
    """Return sum(P R_i^(5/3)) / sum(P R_i^(5/3) / n)."""
    return _mean(s.perimeter * s.radius ** (5 / 3), s.n, -1.0)


def _yen_shear(s: Segments) -> Any:
    """Return sum(n P R_i^(1/3)) / (P R^(1/3))."""
    over = (s.n * s.perimeter * s.radius ** (1 / 3)).sum(axis=-1)
    return _plain(over / (s.perimeter.sum(axis=-1) * _whole_radius(s) ** (1 / 3)))


def _yen_slope(s: Segments) -> Any:
    """Return sum(n P / R_i^(1/6)) / (P / R^(1/6))."""
    zeros = np.zeros(s.n.shape)
    # Infinite with a vertical wall, whose radius is 0: this relation is none for it.
    each = np.divide(s.n * s.perimeter, s.radius ** (1 / 6), out=zeros, where=s.perimeter > 0)
    over = each.sum(axis=-1)
    return _plain(over / s.perimeter.sum(axis=-1) * _whole_radius(s) ** (1 / 6))


RELATIONS: Final[Mapping[str, Relation]] = {
    relation.key: relation
    for relation in (
        Relation(
            "horton-einstein",
            "the mean velocity is the same in all segments",
            "Horton 1933; Einstein 1934 (from memory)",
            _horton_einstein,
        ),
        Relation(
            "pavlovskii",
            "the resisting forces of the segments add, at one shear for one velocity",
            "Pavlovskii 1931; Muehlhofer 1933; Einstein and Banks 1950 (from memory)",
            _pavlovskii,
        ),
        Relation(
            "perimeter-mean",
            "n itself is averaged, weighted by wetted perimeter",
            "FHWA-TS-84-204 (Arcement and Schneider 1984; rule seen in part); Yen 1991 (memory)",
            _perimeter_mean,
        ),
        Relation(
            "felkel",
            "velocities of the segments are averaged as 1/n, weighted by wetted perimeter",
            "Felkel 1960 (from memory)",
            _felkel,
        ),
        Relation(
            "lotter",
            "the segments' discharges add at one slope, each with its own hydraulic radius",
            "Lotter 1933 (from memory)",
            _lotter,
        ),
        Relation(
            "ida-engelund",
            "as Lotter, for a section whose radius is averaged over the segments too",
            "Ida 1960; Engelund 1966 (from memory)",
            _ida_engelund,
        ),
        Relation(
            "colebatch",
            "as the equal-velocity relation, weighted by area",
            "Colebatch 1941 (from memory)",
            _colebatch,
        ),
        Relation(
            "cox",
            "n itself is averaged, weighted by area",
            "Cox 1973, Los Angeles District (from memory)",
            _cox,
        ),
        Relation(
            "krishnamurthy-christensen",
            "logarithmic velocity profiles over segments of their own depth",
            "Krishnamurthy and Christensen 1972 (from memory)",
            _krishnamurthy_christensen,
        ),
        Relation(
            "yen-shear-velocity",
            "shear velocities are weighted by wetted perimeter",
            "Yen 1991 (from memory)",
            _yen_shear,
        ),
        Relation(
            "yen-friction-slope",
            "friction slopes are weighted by wetted perimeter",
            "Yen 1991 (from memory)",
            _yen_slope,
        ),
    )
}

# Means of the segments' n, so never below the least nor above the greatest of them. The others
# set the whole section's radius against the segments' own and may leave that range.
BOUNDED: Final = tuple(
    key for key in RELATIONS if key not in ("lotter", "yen-shear-velocity", "yen-friction-slope")
)
