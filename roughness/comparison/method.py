"""A road to n: its formula, what it needs, where it holds, what it includes, whose it is."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final, Literal, get_args

import numpy as np
from numpy.typing import NDArray

from roughness.comparison.constants import Numbers, numbers
from roughness.comparison.streams import FLOOD_PLAIN, Streams
from roughness.quantities.printing import show_value

Domain = Literal["inside", "near", "outside"]
DOMAINS: Final[tuple[Domain, ...]] = get_args(Domain)
Includes = Literal["grain", "whole reach"]
Provenance = Literal["seen", "seen second hand", "memory"]
Codes = NDArray[np.int64]

INSIDE, NEAR, OUTSIDE = 0, 1, 2
# Where no wider limit is published, this far beyond a limit is near it: common practice, no source.
BESIDE: Final = 1.2


@dataclass(frozen=True, kw_only=True)
class Limit:
    """Between which values of one quantity a formula was tested."""

    of: str
    """The quantity in words, as a sentence goes on: ``the slope``."""
    value: Callable[[Streams, Numbers], Numbers]
    """From what was measured and the formula's own n."""
    low: float = 0.0
    high: float = float("inf")
    near_low: float | None = None
    near_high: float | None = None
    unit: str = ""
    shown_in: float = 1.0
    """What one shown unit is in the unit of ``value``: 0.001 for mm."""
    silent: bool = False
    """Whether nothing is said where it cannot be computed."""

    def standing(self, values: Numbers) -> Codes:
        """Return 0 inside, 1 near or unknown, 2 outside; 0 for an unknown of a silent limit."""
        near_low = self.low / BESIDE if self.near_low is None else self.near_low
        near_high = self.high * BESIDE if self.near_high is None else self.near_high
        code = np.where((values >= self.low) & (values <= self.high), INSIDE, NEAR)
        code = np.where((values < near_low) | (values > near_high), OUTSIDE, code)
        unknown = INSIDE if self.silent else NEAR
        return np.where(np.isnan(values), unknown, code).astype(np.int64)

    def words(self, value: float) -> str:
        """Return how a value stands to the limits, in words."""
        if np.isnan(value):
            return f"{self.of} is not known, so its limits ({self._limits()}) were not checked"
        told = "in" if self.low <= value <= self.high else "not in"
        shown = f"{_short(value / self.shown_in)}{self.unit}"
        return f"{self.of}, {shown}, is {told} its tested range ({self._limits()})"

    def _limits(self) -> str:
        low, high = self.low / self.shown_in, self.high / self.shown_in
        if np.isinf(high):
            return f"{_short(low)}{self.unit} or more"
        if low == 0:
            return f"{_short(high)}{self.unit} or less"
        return f"{_short(low)} to {_short(high)}{self.unit}"


@dataclass(frozen=True, kw_only=True)
class Method:
    """One independent estimate of n."""

    key: str
    formula: Callable[[Streams], Numbers]
    needs: tuple[str, ...]
    """Names of :class:`Streams` without which there is no value."""
    limits: tuple[Limit, ...] = ()
    includes: Includes
    about: str
    """What the value holds and for what it was made, in one sentence."""
    error_percent: float | None = None
    """Published error of n, percent of n; None where none is known."""
    source: str
    provenance: Provenance
    """How the constants of the formula are known."""
    unchecked: str = ""
    """A condition that no measurement tells; the domain is then never better than near."""

    def n(self, streams: Streams) -> Numbers:
        """Return n of each row, NaN where the formula gives none or a measurement lacks."""
        with np.errstate(all="ignore"):
            value = self.formula(streams)
        return np.where(np.isfinite(value) & (value > 0), value, np.nan)

    def domain(self, streams: Streams, n: Numbers) -> Codes:
        """Return 0 inside, 1 near, 2 outside for each row: the worst of all limits."""
        worst = np.zeros(np.shape(n), dtype=np.int64)
        for limit in self.limits:
            worst = np.maximum(worst, limit.standing(self._values(limit, streams, n)))
        if self.unchecked:
            worst = np.maximum(worst, NEAR)
        worst = np.where(np.asarray(streams.setting) == FLOOD_PLAIN, OUTSIDE, worst)
        return np.asarray(np.where(np.isnan(n), OUTSIDE, worst))

    def why(self, streams: Streams, n: float) -> str:
        """Return the reasons of one reach's domain in words; what is wrong goes first."""
        if np.asarray(streams.setting) == FLOOD_PLAIN:
            return "made from stream channels, and this is a flood plain"
        told = []
        for limit in self.limits:
            value = self._values(limit, streams, numbers(n))
            code = int(limit.standing(value))
            if not (np.isnan(value) and code == INSIDE):
                told.append((code, limit.words(float(value))))
        if self.unchecked:
            told.append((NEAR, self.unchecked))
        worst = max((code for code, _ in told), default=INSIDE)
        reasons = [words for code, words in told if code == worst]
        if np.isnan(n):
            reasons.insert(0, "it gives no value here")
        silent = (
            "within the limits known of it" if self.limits else "no limits of it are known here"
        )
        return "; ".join(reasons) or silent

    @staticmethod
    def _values(limit: Limit, streams: Streams, n: Numbers) -> Numbers:
        with np.errstate(all="ignore"):
            return numbers(limit.value(streams, n))


def _short(value: float) -> str:
    """Print with three significant digits, without an exponent."""
    return show_value(float(f"{value:.3g}"))
