"""What an estimate has to tell: plain values, so that sentences need no arithmetic."""

from dataclasses import dataclass
from typing import Literal

from roughness.quantities.ranges import Range
from roughness.survey.words import Factor, Setting, Shape


@dataclass(frozen=True, kw_only=True)
class Step:
    """What one factor was given, and on what grounds."""

    factor: Factor
    symbol: str
    """The handbook's own, 'nb'."""
    range: Range
    grade_name: str | None
    """None where numbers stand alone."""
    published: Range | None
    """None where nothing is published for the grade as it was met."""
    best_is_middle: bool = False
    """Whether the publication has no typical value and the middle of its range stands in."""
    own_best: bool = False
    """Whether the best value was given and not taken from the table."""
    basis: Literal["grade", "measured"]
    """Whether a person picked the grade or a measured criterion did."""
    measured_says: str = ""
    """The measured criterion in words, 'blocked 8 %'."""
    source: str
    """Table and page."""
    note: str | None = None
    share_of_variance: float = 0.0


@dataclass(frozen=True, kw_only=True)
class Zone:
    """The whole part, or its bed or banks where they are told apart."""

    name: str | None
    """None where the part has one n."""
    perimeter_percent: float = 100.0
    """Share of the wetted perimeter."""
    n: Range
    steps: tuple[Step, ...]
    """In the order of publication."""


@dataclass(frozen=True, kw_only=True)
class People:
    """What experienced people differ by when they judge one and the same reach."""

    p05: float
    p95: float
    source: str
    provenance: str


@dataclass(frozen=True, kw_only=True)
class Account:
    """Everything that the sentences of one estimate tell."""

    setting: Setting
    handbook: str
    """Title of the handbook whose table was used."""
    citation: str
    """Authors and year, 'Cowan 1956'."""
    asked_handbook: str | None = None
    """Title or key of another handbook that was asked for and has no table for the setting."""
    zones: tuple[Zone, ...]
    """One, or the segments of the part."""
    n: Range
    p05: float
    p95: float
    shape: Shape = "triangular"
    dependence: float
    people: People | None = None
    stops: int = 0
    """How many findings say not to accept the estimate as it is."""
    asks: int = 0
    """How many findings ask for an answer."""
