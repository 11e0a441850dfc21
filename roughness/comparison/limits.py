"""Limits that several formulas share, each said as the formula is tested for it."""

from dataclasses import replace
from typing import Final

import numpy as np

from roughness.comparison.constants import G, Numbers, numbers
from roughness.comparison.method import Limit
from roughness.comparison.sand import SAND_M
from roughness.comparison.streams import Streams

MM: Final = 0.001
# Formulas for clean gravel doubt flow of fewer d84 than four, and nothing is left of them where
# the grains stand out of the water: Bathurst, Li & Simons 1981, memory.
_DEEP: Final = 4.0
_NEAR_BARE: Final = 1.2


def _froude(streams: Streams, n: Numbers) -> Numbers:
    return numbers(streams.velocity_with(n) / np.sqrt(G * streams.mean_depth))


GRAVEL: Final = Limit(
    of="the grain size",
    value=lambda s, _: s.grain_size,
    low=SAND_M[1],
    unit=" mm",
    shown_in=MM,
)
SAND: Final = Limit(
    of="the d50",
    value=lambda s, _: numbers(s.d50),
    low=SAND_M[0],
    high=SAND_M[1],
    near_low=SAND_M[0],
    near_high=SAND_M[1],
    unit=" mm",
    shown_in=MM,
)
SUBCRITICAL: Final = Limit(of="the Froude number", value=_froude, high=1.0, silent=True)


def grains_deep(size: str, low: float, high: float = float("inf")) -> Limit:
    """Return limits of the hydraulic radius over a grain size."""
    return Limit(
        of=f"the hydraulic radius over {size.replace('_', ' ')}",
        value=lambda s, _: numbers(s.radius) / numbers(getattr(s, size)),
        low=low,
        high=high,
    )


def deep_over(size: str) -> Limit:
    """Return the limit of flow that covers the grains well: four grains; 1.2 is still near."""
    return replace(grains_deep(size, _DEEP), near_low=_NEAR_BARE)


def power_holds_over(size: str) -> Limit:
    """Return where a power of 1/6 is within 8 % of the logarithmic law (derived)."""
    return grains_deep(size, 4.0, 500.0)


def slope_between(low: float, high: float, near_high: float | None = None) -> Limit:
    """Return limits of the slope, m/m."""
    return Limit(
        of="the slope",
        value=lambda s, _: numbers(s.slope),
        low=low,
        high=high,
        near_high=near_high,
    )


def radius_between(low: float, high: float) -> Limit:
    """Return limits of the hydraulic radius, m."""
    return Limit(
        of="the hydraulic radius",
        value=lambda s, _: numbers(s.radius),
        low=low,
        high=high,
        unit=" m",
    )
