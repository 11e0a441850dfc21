"""What was measured, as columns: one row a reach."""

from dataclasses import dataclass
from typing import Final, get_args

import numpy as np
from numpy.typing import ArrayLike

from roughness.comparison.constants import Numbers, numbers
from roughness.survey.words import Setting

UNKNOWN: Final = float("nan")
CHANNEL, FLOOD_PLAIN = get_args(Setting)


@dataclass(frozen=True, kw_only=True)
class Streams:
    """Measurements of one or many reaches in metres, square metres and seconds; NaN is unknown.

    Each is a float or an array; they broadcast against each other. Grain sizes are of the
    middle axis: ``d84`` is the size that 84 % of the stones are finer than.
    """

    setting: ArrayLike = ""
    """``channel``, ``flood-plain``, or empty where it was not said."""
    slope: ArrayLike = UNKNOWN
    radius: ArrayLike = UNKNOWN
    """Hydraulic radius."""
    depth: ArrayLike = UNKNOWN
    """Mean depth."""
    max_depth: ArrayLike = UNKNOWN
    area: ArrayLike = UNKNOWN
    """Flow area."""
    velocity: ArrayLike = UNKNOWN
    """Mean velocity, where it was measured."""
    d16: ArrayLike = UNKNOWN
    d50: ArrayLike = UNKNOWN
    d65: ArrayLike = UNKNOWN
    d75: ArrayLike = UNKNOWN
    d84: ArrayLike = UNKNOWN
    d90: ArrayLike = UNKNOWN
    roughness_height: ArrayLike = UNKNOWN
    """Equivalent sand roughness ks."""
    gradation: ArrayLike = UNKNOWN
    """Geometric standard deviation of the grain sizes."""

    def known(self, name: str) -> bool:
        """Return whether any row has it."""
        return bool(np.isfinite(numbers(getattr(self, name))).any())

    @property
    def mean_depth(self) -> Numbers:
        """Mean depth; the hydraulic radius, which a wide channel's depth equals, where unknown."""
        depth = numbers(self.depth)
        return np.where(np.isnan(depth), numbers(self.radius), depth)

    @property
    def grain_size(self) -> Numbers:
        """The d50, else the next size known: what tells sand from gravel."""
        size = numbers(self.d50)
        for other in (self.d65, self.d75, self.d84, self.d90):
            size = np.where(np.isnan(size), numbers(other), size)
        return size

    @property
    def sorting(self) -> Numbers:
        """Gradation; sqrt(d84/d16) where it is not given itself."""
        given = numbers(self.gradation)
        return np.where(np.isnan(given), np.sqrt(numbers(self.d84) / numbers(self.d16)), given)

    def velocity_with(self, n: Numbers) -> Numbers:
        """Return the measured velocity, else the one that Manning's equation gives with ``n``."""
        drive = numbers(self.radius) ** (2 / 3) * np.sqrt(numbers(self.slope))
        measured = numbers(self.velocity)
        return np.where(np.isnan(measured), drive / n, measured)
