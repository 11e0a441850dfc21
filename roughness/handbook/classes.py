"""Classes of a measured number, as handbook files write them: ``>= 5 and < 15``."""

import itertools
import math
import re
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final, Literal

from roughness.quantities.printing import show_value
from roughness.survey.words import Factor, Plants

Criterion = Literal["d50_mm", "blocked_percent", "depth_over_height", "sinuosity"]

# A measured number may decide only the factor it belongs to.
CRITERION_OF: Final[dict[Factor, Criterion]] = {
    "base": "d50_mm",
    "obstruction": "blocked_percent",
    "vegetation": "depth_over_height",
    "meander": "sinuosity",
}
_TERM = re.compile(r"(>=|<=|>|<|=) ?(\d+(?:\.\d+)?)")


@dataclass(frozen=True, slots=True)
class Interval:
    """Numbers from ``low`` to ``high``; each limit belongs to it or not."""

    low: float
    high: float
    holds_low: bool
    holds_high: bool

    def __contains__(self, value: float) -> bool:
        return not self.lies_above(value) and not self.lies_below(value)

    def lies_above(self, value: float) -> bool:
        """Whether every number of the interval is greater than ``value``."""
        return value < self.low or (value == self.low and not self.holds_low)

    def lies_below(self, value: float) -> bool:
        """Whether every number of the interval is smaller than ``value``."""
        return value > self.high or (value == self.high and not self.holds_high)

    def __str__(self) -> str:
        if self.low == self.high:
            return f"= {show_value(self.low)}"
        terms = []
        if math.isfinite(self.low):
            terms.append(f"{'>=' if self.holds_low else '>'} {show_value(self.low)}")
        if math.isfinite(self.high):
            terms.append(f"{'<=' if self.holds_high else '<'} {show_value(self.high)}")
        return " and ".join(terms)


# What can be measured at all: the whole that the classes of one criterion divide.
DOMAIN: Final[dict[Criterion, Interval]] = {
    "d50_mm": Interval(0, math.inf, False, False),
    "blocked_percent": Interval(0, 100, True, True),
    "depth_over_height": Interval(0, math.inf, False, False),
    "sinuosity": Interval(1, math.inf, True, False),
}


@dataclass(frozen=True, slots=True)
class MeasuredClass:
    """The class of a measured number that stands for a grade."""

    criterion: Criterion
    interval: Interval
    plants: Plants | None = None
    """Kind of plants the class holds for; None where the criterion does not ask."""


def read_interval(text: str) -> Interval:
    """Read ``>= 5 and < 15``, ``< 5``, ``> 50`` or ``= 0``.

    Raises
    ------
    ValueError
        In words, where the text is none of these or holds no number.

    >>> str(read_interval(">= 5 and < 15"))
    '>= 5 and < 15'
    >>> 15 in read_interval(">= 5 and < 15")
    False
    """
    low, high, holds_low, holds_high = -math.inf, math.inf, False, False
    for term in text.split(" and "):
        match = _TERM.fullmatch(term.strip())
        if match is None:
            raise ValueError(f"{text!r} is not a class of numbers")
        sign, number = match[1], float(match[2])
        if (sign not in {"<", "<="} and low > -math.inf) or ("<" in sign and high < math.inf):
            raise ValueError(f"{text!r} limits the same side twice")
        if sign in (">", ">=", "="):
            low, holds_low = number, sign != ">"
        if sign in ("<", "<=", "="):
            high, holds_high = number, sign != "<"
    if low > high or (low == high and not (holds_low and holds_high)):
        raise ValueError(f"{text!r} holds no number")
    return Interval(low, high, holds_low, holds_high)


def holes(intervals: Sequence[Interval], whole: Interval) -> list[tuple[float, float]]:
    """Return the stretches of ``whole`` that no interval covers, from low to high."""
    found = []
    reach, reached = whole.low, not whole.holds_low
    for interval in sorted(intervals, key=lambda i: (i.low, not i.holds_low)):
        if interval.low > reach or (interval.low == reach and not (reached or interval.holds_low)):
            found.append((reach, interval.low))
        reach, reached = max((interval.high, interval.holds_high), (reach, reached))
    if reach < whole.high or (reach == whole.high and whole.holds_high and not reached):
        found.append((reach, whole.high))
    return found


def overlapping(intervals: Sequence[Interval]) -> tuple[Interval, Interval] | None:
    """Return the first two intervals that share a number."""
    ordered = sorted(intervals, key=lambda i: (i.low, not i.holds_low))
    for lower, upper in itertools.pairwise(ordered):
        if upper.low < lower.high:
            return lower, upper
        if upper.low == lower.high and upper.holds_low and lower.holds_high:
            return lower, upper
    return None
