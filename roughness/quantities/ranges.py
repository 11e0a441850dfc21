"""A value with its range."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Range:
    """A chosen value between its limits, all in the same unit, low <= best <= high."""

    low: float
    best: float
    high: float

    def __post_init__(self) -> None:
        if not self.low <= self.best <= self.high:
            raise ValueError(f"not in order: {self.low} <= {self.best} <= {self.high}")

    @property
    def width(self) -> float:
        """High minus low."""
        return self.high - self.low

    @property
    def is_point(self) -> bool:
        """Whether the range has no width."""
        return self.low == self.high


def point(value: float) -> Range:
    """Return the range without width at ``value``."""
    return Range(value, value, value)
