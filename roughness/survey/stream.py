"""Stream, reach, part, visit and flow condition."""

from dataclasses import dataclass
from typing import Any, ClassVar

from roughness.survey.choices import STRICT
from roughness.survey.words import USUAL_TOLERANCE_CM, Bank, Growth, Setting


@dataclass(frozen=True, kw_only=True)
class Part:
    """A part of the reach's cross-section with its own n."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    part: str
    setting: Setting
    part_from: float | None = None
    """Lateral limits, m from the left end of the section, looking downstream."""
    part_to: float | None = None


@dataclass(frozen=True, kw_only=True)
class Visit:
    """Who was there, when, and in what state the reach was seen."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    visit: str
    """Name of the visit: the date where nothing else was said."""
    people: str | None = None
    on: str | None = None
    """Date, YYYY-MM-DD."""
    stage: str | None = None
    """Stage or depth as it was seen."""
    growth: Growth | None = None
    flood_marks: str | None = None
    note: str | None = None


@dataclass(frozen=True, kw_only=True)
class FlowCondition:
    """What the n is for."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    condition: str
    growth: Growth = "any"
    bank: Bank | None = None
    discharge_m3s: float | None = None
    tolerance_cm: float = USUAL_TOLERANCE_CM
    """How many centimetres of water level matter."""


@dataclass(frozen=True, kw_only=True)
class Reach:
    """A length of stream with one set of values, as the survey's list has it."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    reach: str
    reach_from: float | None = None
    """Distance along the stream, in the survey's length unit."""
    reach_to: float | None = None
    slope: float | None = None
    position: tuple[tuple[float, float], ...] | None = None
    """Longitude and latitude (WGS 84), one point or a line."""
    note: str | None = None
