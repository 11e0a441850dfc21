"""Pictures as coordinates: bars of n on one axis, and how the factors add up.

Every part of a picture differs from the others in form, not in colour alone, and carries its
figures as text. The templates draw what is computed here.
"""

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Final

from roughness.assessment.estimate import Estimate, FactorEstimate
from roughness.desk.rows import Row
from roughness.quantities.printing import show_addend, show_n, show_value
from roughness.quantities.ranges import Range
from roughness.survey.words import MULTIPLIER, factors_of

_TICKS: Final = (
    *(0.005, 0.007, 0.01, 0.015, 0.02, 0.03, 0.04, 0.05, 0.07, 0.1, 0.15, 0.2, 0.3, 0.5, 0.7),
    *(1.0, 2.0, 5.0, 10.0),
)
WIDTH: Final = 460.0
_MARGIN: Final = 14.0
# An axis shorter than this ratio would blow up small differences.
_LEAST_RATIO: Final = 4.0
_APART: Final = 36.0
"""Least distance between the labels of two ticks."""


@dataclass(frozen=True, slots=True)
class Axis:
    """A logarithmic axis of n that all bars of a report share."""

    low: float
    high: float

    def at(self, n: float) -> float:
        """Return where a value stands; beyond the ends it stands at the end."""
        inside = min(max(n, self.low), self.high)
        share = math.log(inside / self.low) / math.log(self.high / self.low)
        return round(_MARGIN + share * (WIDTH - 2 * _MARGIN), 1)

    @property
    def ticks(self) -> tuple[tuple[float, str], ...]:
        """Place and label of the ticks, none so near the one before that labels meet."""
        kept: list[tuple[float, str]] = []
        for n in _TICKS:
            x = self.at(n)
            if self.low <= n <= self.high and (not kept or x - kept[-1][0] >= _APART):
                kept.append((x, show_value(n)))
        return tuple(kept)


def axis_over(found: Iterable[Row]) -> Axis:
    """Return the axis that holds everything the bars of these rows show."""
    values = [n for row in found for n in _drawn(row) if n > 0]
    low, high = (min(values), max(values)) if values else (0.02, 0.1)
    middle, ratio = math.sqrt(low * high), max(high / low, _LEAST_RATIO)
    return Axis(middle / math.sqrt(ratio) / 1.05, middle * math.sqrt(ratio) * 1.05)


def _drawn(row: Row) -> list[float]:
    found = [row.adopted.n] if row.adopted else []
    if row.estimate:
        n, spread, people = row.estimate.n, row.estimate.spread, row.estimate.people
        found += [n.low, n.high, spread.p05, spread.p95]
        found += [people.p05, people.p95] if people else []
    return found


@dataclass(frozen=True, kw_only=True)
class Bar:
    """One n on the axis: thin the envelope, thick the spread, marks for best and adopted."""

    low: float
    best: float
    high: float
    p05: float
    p16: float
    p50: float
    p84: float
    p95: float
    people: tuple[float, float] | None
    adopted: float | None
    in_words: str


def bar_of(row: Row, axis: Axis) -> Bar | None:
    """Return the bar of a row; None while it has no n."""
    if row.estimate is None:
        return None
    n, spread, people = row.estimate.n, row.estimate.spread, row.estimate.people
    return Bar(
        low=axis.at(n.low),
        best=axis.at(n.best),
        high=axis.at(n.high),
        **{word: axis.at(getattr(spread, word)) for word in ("p05", "p16", "p50", "p84", "p95")},
        people=(axis.at(people.p05), axis.at(people.p95)) if people else None,
        adopted=axis.at(row.adopted.n) if row.adopted else None,
        in_words=_in_words(row, row.estimate),
    )


def _in_words(row: Row, estimate: Estimate) -> str:
    told = (
        f"n {show_n(estimate.n.best)}, all low {show_n(estimate.n.low)}, all high"
        f" {show_n(estimate.n.high)}, spread of the choices {show_n(estimate.spread.p05)}"
        f" to {show_n(estimate.spread.p95)}"
    )
    return f"{told}, adopted {show_n(row.adopted.n)}" if row.adopted else told


@dataclass(frozen=True, kw_only=True)
class Rung:
    """One factor in the ladder: it begins where the one before ended."""

    symbol: str
    name: str
    figure: str
    start: float
    best: float
    low: float
    high: float
    sums: bool = False
    """Whether it is n itself, which begins at 0."""


@dataclass(frozen=True, kw_only=True)
class Ladder:
    """How the factors of a part, or of its bed or banks, add up to n."""

    segment: str | None
    rungs: tuple[Rung, ...]
    ticks: tuple[tuple[float, str], ...]
    in_words: str


_LABELS: Final = 150.0
_FIGURES: Final = 60.0


def ladders_of(row: Row) -> tuple[Ladder, ...]:
    """Return the ladder of the part, or one for each of its segments on the same scale."""
    if row.estimate is None or row.part is None:
        return ()
    zones: list[tuple[str | None, Range]] = [
        (segment.name, segment.n) for segment in row.estimate.segments or ()
    ] or [(None, row.estimate.n)]
    asked = factors_of(row.part.setting)
    high = max(n.high for _, n in zones) * 1.02 or 1.0
    return tuple(
        _ladder(
            segment,
            [e for e in row.estimate.factors if e.segment == segment and e.factor in asked],
            n,
            high,
        )
        for segment, n in zones
    )


def _ladder(
    segment: str | None, entries: Sequence[FactorEstimate], n: Range, high: float
) -> Ladder:
    def at(value: float) -> float:
        room = WIDTH - _LABELS - _FIGURES
        return round(_LABELS + min(max(value, 0.0), high) / high * room, 1)

    rungs, total = [], 0.0
    for entry in entries:
        limits = Range(entry.low, entry.best, entry.high)
        if entry.factor == MULTIPLIER:
            begins, limits = total, Range(*(total * v for v in (entry.low, entry.best, entry.high)))
        else:
            begins, total = total, total + entry.best
            limits = Range(*(begins + v for v in (entry.low, entry.best, entry.high)))
        rungs.append(_rung(entry, at(begins), Range(*map(at, _three(limits)))))
    rungs.append(
        Rung(
            symbol="n",
            name="all together",
            figure=show_n(n.best),
            start=at(0),
            best=at(n.best),
            low=at(n.low),
            high=at(n.high),
            sums=True,
        )
    )
    told = ", ".join(f"{rung.symbol} {rung.figure}" for rung in rungs)
    ticks = tuple((at(tick), show_value(tick)) for tick in _even_ticks(high))
    return Ladder(segment=segment, rungs=tuple(rungs), ticks=ticks, in_words=told)


def _three(limits: Range) -> tuple[float, float, float]:
    return limits.low, limits.best, limits.high


def _rung(entry: FactorEstimate, start: float, limits: Range) -> Rung:
    multiplies = entry.factor == MULTIPLIER
    return Rung(
        symbol=entry.symbol,
        name=entry.factor,
        figure=f"× {show_value(entry.best)}" if multiplies else f"+ {show_addend(entry.best)}",
        start=start,
        best=limits.best,
        low=limits.low,
        high=limits.high,
    )


def _even_ticks(high: float) -> list[float]:
    rough = high / 4
    power = 10.0 ** math.floor(math.log10(rough))
    step = next(power * k for k in (1, 2, 5, 10) if power * k >= rough)
    return [round(step * k, 6) for k in range(int(high / step) + 1)]
