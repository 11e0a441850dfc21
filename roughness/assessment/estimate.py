"""The estimate of n for one part of one reach under one flow condition."""

from collections.abc import Mapping
from dataclasses import asdict, dataclass
from typing import Any

from roughness.additive import People, Spread
from roughness.findings import Finding
from roughness.quantities.ranges import Range
from roughness.survey.choices import Judgement
from roughness.survey.words import Factor


@dataclass(frozen=True, kw_only=True)
class Limits:
    """A published range."""

    low: float
    high: float


@dataclass(frozen=True, kw_only=True)
class FactorEstimate:
    """What one factor adds (or, for meander, multiplies by), and why."""

    factor: Factor
    symbol: str
    grade: str | None
    low: float
    best: float
    high: float
    published: Limits | None
    share_of_variance: float
    """First-order share of the variance of n, 0 to 1."""
    basis: str
    """``measured`` where a measured criterion chose the grade, else ``grade``."""
    source: str
    note: str | None
    segment: str | None = None
    """Name of the segment where bed and banks are told apart."""


@dataclass(frozen=True, kw_only=True)
class SegmentEstimate:
    """n of the bed or the banks alone."""

    name: str
    perimeter_percent: float
    n: Range


@dataclass(frozen=True, kw_only=True)
class HandbookUsed:
    """Which edition of which handbook."""

    key: str
    title: str
    year: int
    sha256: str


@dataclass(frozen=True, kw_only=True)
class Estimate:
    """n with its range, what it rests on and what is to be asked about it."""

    n: Range
    spread: Spread
    people: People | None
    factors: tuple[FactorEstimate, ...]
    findings: tuple[Finding, ...]
    reasoning: tuple[str, ...]
    handbook: HandbookUsed
    segments: tuple[SegmentEstimate, ...] | None = None
    composite_n: Mapping[str, float] | None = None
    """The best n of the part by each relation, where segments are told apart; for display."""
    judgement: Judgement | None = None

    @property
    def stands_stopped(self) -> bool:
        """Whether a finding says not to accept the estimate as it is."""
        return any(finding.level == "stop" for finding in self.findings)

    @property
    def driver(self) -> FactorEstimate:
        """The factor with the largest share of the variance."""
        return max(self.factors, key=lambda factor: factor.share_of_variance)

    def as_document(self) -> dict[str, Any]:
        """Return what ``roughness estimate`` prints, ready for JSON."""
        document = asdict(self)
        del document["judgement"]
        for entry in document["factors"]:
            if entry["segment"] is None:
                del entry["segment"]
        for optional in ("segments", "composite_n"):
            if document[optional] is None:
                del document[optional]
        return document
