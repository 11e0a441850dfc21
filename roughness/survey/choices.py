"""What was chosen for each factor, and what was measured. Unknown is None, never 0."""

from collections.abc import Iterator
from dataclasses import dataclass, fields
from typing import Any, ClassVar

from roughness.survey.words import Edges, Factor, Plants, Regime, Setting, Shape, Where

STRICT: dict[str, Any] = {"extra": "forbid", "strict": True, "allow_inf_nan": False}


@dataclass(frozen=True, kw_only=True)
class Choice:
    """The choice for one factor: a grade of the handbook's table, or numbers of one's own."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    grade: str | None = None
    """Key of the grade in the handbook's table."""
    best: float | None = None
    low: float | None = None
    high: float | None = None
    note: str | None = None
    """Why this grade and value here."""

    def criteria(self) -> dict[str, Any]:
        """Return what was measured or observed for this factor, by field name."""
        known = {f.name for f in fields(Choice)}
        return {
            f.name: value
            for f in fields(self)
            if f.name not in known and (value := getattr(self, f.name)) is not None
        }


@dataclass(frozen=True, kw_only=True)
class BaseChoice(Choice):
    """Bed and bank material."""

    d50_mm: float | None = None
    """Median size of the bed material, mm."""
    regime: Regime | None = None
    """Flow regime over a sand bed."""


@dataclass(frozen=True, kw_only=True)
class ObstructionChoice(Choice):
    """Logs, stumps, boulders, piers in the flow."""

    blocked_percent: float | None = None
    """Share of the flow area blocked at the condition's stage, 0 to 100."""
    acting_together: bool | None = None
    """So close that one influences the next: one grade above the percentage."""
    edges: Edges | None = None
    counted_in: Factor | None = None
    """Where trees and logs are counted: obstruction or vegetation, never both."""


@dataclass(frozen=True, kw_only=True)
class VegetationChoice(Choice):
    """Plants in the flow."""

    depth_m: float | None = None
    """Mean depth in this part at this condition, m."""
    vegetation_height_m: float | None = None
    plants: Plants | None = None
    where: Where | None = None
    perimeter_percent: float | None = None
    """Share of the wetted perimeter with plants, 0 to 100."""


@dataclass(frozen=True, kw_only=True)
class MeanderChoice(Choice):
    """Bends: the multiplier."""

    sinuosity: float | None = None
    """Channel length over valley length, 1 or more."""
    channel_length_m: float | None = None
    valley_length_m: float | None = None


CHOICES: dict[Factor, type[Choice]] = {
    "base": BaseChoice,
    "irregularity": Choice,
    "variation": Choice,
    "obstruction": ObstructionChoice,
    "vegetation": VegetationChoice,
    "meander": MeanderChoice,
}


@dataclass(frozen=True, kw_only=True)
class Factors:
    """One choice per factor; None where nothing was chosen."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    base: BaseChoice | None = None
    irregularity: Choice | None = None
    variation: Choice | None = None
    obstruction: ObstructionChoice | None = None
    vegetation: VegetationChoice | None = None
    meander: MeanderChoice | None = None

    def __getitem__(self, factor: Factor) -> Choice | None:
        choice: Choice | None = getattr(self, factor)
        return choice

    def __iter__(self) -> Iterator[tuple[Factor, Choice]]:
        for factor in CHOICES:
            if (choice := self[factor]) is not None:
                yield factor, choice


@dataclass(frozen=True, kw_only=True)
class Segment:
    """Bed or banks of one part, told apart by their share of the wetted perimeter."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    name: str
    perimeter_percent: float
    factors: Factors


@dataclass(frozen=True, kw_only=True)
class Measured:
    """What was measured in the part; it feeds findings alone and never chooses a grade."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    d50_mm: float | None = None
    d84_mm: float | None = None
    slope: float | None = None
    slope_along: str | None = None
    """Along what the slope was taken: ``channel`` or ``valley``."""
    hydraulic_radius_m: float | None = None
    depth_m: float | None = None
    width_m: float | None = None
    vegetation_height_m: float | None = None


@dataclass(frozen=True, kw_only=True)
class Judgement:
    """Everything one estimate of n rests on: the input of ``roughness estimate``."""

    __pydantic_config__: ClassVar[dict[str, Any]] = STRICT

    handbook: str
    setting: Setting
    factors: Factors | None = None
    segments: tuple[Segment, ...] | None = None
    measured: Measured = Measured()
    shape: Shape = "triangular"
    dependence: float = 0.5
