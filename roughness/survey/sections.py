"""A cross-section with its parts, as somebody hands it in. Lengths in m."""

from dataclasses import dataclass
from typing import Any, ClassVar

from roughness.survey.choices import STRICT
from roughness.survey.words import MAIN_CHANNEL, Setting

# `from` is a word of Python: the field is `from_`, the key in the text `from`.
_STRICT = STRICT | {"alias_generator": lambda name: name.removesuffix("_")}


@dataclass(frozen=True, kw_only=True)
class Roughness:
    """Manning's n with its range; without low or high the range ends at best."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    best: float
    low: float | None = None
    high: float | None = None


@dataclass(frozen=True, kw_only=True)
class SectionSegment:
    """Bed or bank inside one part, between two distances from the left end."""

    __pydantic_config__: ClassVar[dict[str, Any]] = _STRICT

    n: float | Roughness
    from_: float | None = None
    """Absent: the left limit of the part."""
    to: float | None = None
    """Absent: the right limit of the part. The same as from: a vertical wall there."""
    name: str | None = None


@dataclass(frozen=True, kw_only=True)
class SectionPart:
    """A part of the section with its own n, between two distances from the left end."""

    __pydantic_config__: ClassVar[dict[str, Any]] = _STRICT

    name: str = MAIN_CHANNEL
    setting: Setting = "channel"
    from_: float | None = None
    """Absent: the left end of the section."""
    to: float | None = None
    """Absent: the right end of the section."""
    n: float | Roughness | None = None
    """Of the whole part, or of what its segments leave over."""
    segments: tuple[SectionSegment, ...] | None = None
    """Bed and banks, where they are told apart."""


@dataclass(frozen=True, kw_only=True)
class Trapezoid:
    """A plain section; distance 0 is the left edge of its bottom, height 0 the bottom."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    bottom_width_m: float
    side_slope: float
    """Horizontal for 1 vertical; 0 makes a rectangle."""


@dataclass(frozen=True, kw_only=True)
class Section:
    """A section, the slope, its parts, and one of discharge, water level and depth."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    slope: float
    """Of the energy line, m per m; in uniform flow also of bed and water."""
    parts: tuple[SectionPart, ...]
    """From left to right, looking downstream, without gaps."""
    points: tuple[tuple[float, float], ...] | None = None
    """Distance and height of the bed, from left to right looking downstream."""
    trapezoid: Trapezoid | None = None
    discharge_m3s: float | None = None
    water_level_m: float | None = None
    depth_m: float | None = None
    """Over the deepest point."""
