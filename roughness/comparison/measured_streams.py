"""Streams whose n was computed from measured flow: the nouns of the catalogue."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Final, Literal, get_args

from roughness.survey.words import Growth, Setting

Bed = Literal["sand", "gravel", "cobbles", "boulders", "firm soil", "bedrock"]
Plant = Literal["grass", "brush", "trees", "undergrowth"]
Provenance = Literal["seen", "seen second hand", "own"]
"""``own``: measured by those who use the catalogue. What is remembered has no place in it."""

BEDS: Final[tuple[Bed, ...]] = get_args(Bed)
PLANTS: Final[tuple[Plant, ...]] = get_args(Plant)
# Upper limits of the sizes, mm; Wentworth's classes, gravel from granules on.
BED_BY_SIZE: Final[tuple[tuple[float, Bed], ...]] = (
    (2.0, "sand"),
    (64.0, "gravel"),
    (256.0, "cobbles"),
    (float("inf"), "boulders"),
)


@dataclass(frozen=True, kw_only=True)
class Event:
    """One flow that was measured; what is not known is None."""

    n: float
    """s/m^(1/3)."""
    date: str | None = None
    """Year, month or day: ``1964``, ``1964-03``, ``1964-03-12``."""
    discharge_m3s: float | None = None
    area_m2: float | None = None
    hydraulic_radius_m: float | None = None
    depth_m: float | None = None
    velocity_ms: float | None = None
    slope: float | None = None
    plants: tuple[Plant, ...] | None = None
    """Kinds in the flow, none where empty; those of the stream where not said."""
    growth: Growth | None = None
    vegetation: str = ""
    derived: tuple[str, ...] = ()
    """Fields that were computed from others of the publication."""
    original: Mapping[str, float] = field(default_factory=dict)
    """The figures in the units of the publication, by field name with unit."""


@dataclass(frozen=True, kw_only=True)
class MeasuredStream:
    """A reach with n from one or several measured flows."""

    key: str
    stream: str
    place: str
    setting: Setting
    bed: tuple[Bed, ...] = ()
    """Materials, empty where not known."""
    bed_facts: str = ""
    d50_mm: float | None = None
    d84_mm: float | None = None
    plants: tuple[Plant, ...] | None = None
    vegetation: str = ""
    source: str
    """Citation, or who measured."""
    page: str = ""
    read_at: str = ""
    provenance: Provenance
    notes: tuple[str, ...] = ()
    events: tuple[Event, ...]

    @property
    def name(self) -> str:
        """Stream and place: ``Rock Creek near Darby, Montana``."""
        return f"{self.stream} {self.place}".strip()

    @property
    def citation(self) -> str:
        """The source with its page."""
        return f"{self.source}, {self.page}" if self.page else self.source


@dataclass(frozen=True, kw_only=True)
class StreamFile:
    """One file of the catalogue."""

    title: str
    notes: tuple[str, ...] = ()
    streams: tuple[MeasuredStream, ...]


def bed_of_size(d50_mm: float) -> Bed:
    """Return the material that a median size (mm) stands for.

    >>> bed_of_size(45.0), bed_of_size(0.4)
    ('gravel', 'sand')
    """
    return next(bed for limit, bed in BED_BY_SIZE if d50_mm <= limit)
