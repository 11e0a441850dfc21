"""A part, or the segments it is told apart into, with every factor resolved."""

from collections.abc import Mapping
from dataclasses import dataclass

from roughness.assessment.resolving import Resolved
from roughness.quantities.ranges import Range
from roughness.survey.words import FACTORS, Factor


@dataclass(frozen=True, kw_only=True)
class Zone:
    """A segment, or the whole part where there are none."""

    name: str | None
    percent: float
    resolved: Mapping[Factor, Resolved]

    @property
    def ranges(self) -> dict[Factor, Range]:
        """The range of each factor."""
        return {factor: entry.range for factor, entry in self.resolved.items()}

    @property
    def columns(self) -> tuple[list[float], list[float], list[float]]:
        """Low, best and high of the six factors in the order of publication."""
        ordered = [self.resolved[factor].range for factor in FACTORS]
        return [r.low for r in ordered], [r.best for r in ordered], [r.high for r in ordered]
