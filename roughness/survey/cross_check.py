"""What was measured for independent estimates of n. Unknown is None, never 0."""

from dataclasses import dataclass
from typing import Any, ClassVar, Literal

from roughness.survey.choices import STRICT
from roughness.survey.words import Setting


@dataclass(frozen=True, kw_only=True)
class SizeClass:
    """Stones of one size class."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    from_mm: float
    to_mm: float
    count: int


@dataclass(frozen=True, kw_only=True)
class CountedStems:
    """Stems of one class of diameter in the sample area."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    number: int
    diameter_m: float
    height_m: float | None = None
    """Only where they end below the water surface."""


@dataclass(frozen=True, kw_only=True)
class StemSample:
    """Stems counted in a sample area, and what the boundary is without them."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    counted: tuple[CountedStems, ...]
    area_m2: float
    n_boundary: float
    """Base, irregularity, obstruction and the plants that were not counted."""
    drag: float
    """Effective drag coefficient."""


@dataclass(frozen=True, kw_only=True)
class Judged:
    """A judged value with its range, to be laid beside the independent ones."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    low: float
    best: float
    high: float


@dataclass(frozen=True, kw_only=True)
class CrossCheck:
    """Everything independent estimates rest on: the input of ``roughness crosscheck``."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    setting: Setting | None = None
    slope: float | None = None
    """Of water surface or energy line, m/m."""
    hydraulic_radius_m: float | None = None
    depth_m: float | None = None
    """Mean depth; the hydraulic radius stands for it where it is not given."""
    max_depth_m: float | None = None
    area_m2: float | None = None
    velocity_ms: float | None = None
    """Mean velocity, where it was measured."""
    d16_mm: float | None = None
    d50_mm: float | None = None
    d65_mm: float | None = None
    d75_mm: float | None = None
    d84_mm: float | None = None
    d90_mm: float | None = None
    pebble_count_mm: tuple[float, ...] | None = None
    """Middle axis of each stone; sizes that are given beside it stand."""
    pebble_tally: tuple[SizeClass, ...] | None = None
    """The same count by size class."""
    gradation: float | None = None
    """Geometric standard deviation of a sand bed's grains, sqrt(d84/d16)."""
    roughness_height_mm: float | None = None
    """Equivalent sand roughness."""
    channel_type: str | None = None
    """Words that name a row of the table of channel types."""
    stems: StemSample | None = None
    retardance: Literal["A", "B", "C", "D", "E"] | None = None
    """Class of a grass lining."""
    base: Judged | None = None
    """The judged base value."""
    n: Judged | None = None
    """The judged n of the part."""
