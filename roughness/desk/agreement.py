"""First and second estimates side by side, and how far people agree over a survey."""

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from roughness import additive
from roughness.assessment.estimate import Estimate, FactorEstimate
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place
from roughness.desk.rows import Row, rows
from roughness.desk.verdicts import place_at, review_of
from roughness.desk.weakness import estimate_of_opinion
from roughness.errors import RoughnessError
from roughness.quantities.printing import rounded
from roughness.quantities.ranges import Range
from roughness.survey.words import FACTORS, Factor


@dataclass(frozen=True, kw_only=True)
class FactorBeside:
    """One factor as two people judged it."""

    factor: Factor
    segment: str | None
    first: FactorEstimate
    second: FactorEstimate
    difference: float
    """What n changes by when this one factor of the first is replaced by the second's."""

    @property
    def same_grade(self) -> bool:
        """Whether both chose the same grade."""
        return self.first.grade == self.second.grade


@dataclass(frozen=True, kw_only=True)
class Beside:
    """The first estimate and one second opinion."""

    by: str
    at: str
    line: str
    """Hash of the opinion's line."""
    first: Estimate
    second: Estimate
    factors: tuple[FactorBeside, ...]
    """Empty where the two told bed and banks apart in different ways: then only n compares."""
    note: str | None = None

    @property
    def difference(self) -> float:
        """N of the second less n of the first."""
        return self.second.n.best - self.first.n.best

    @property
    def log_ratio(self) -> float:
        """Ln of n of the second over n of the first."""
        return math.log(self.second.n.best / self.first.n.best)


def side_by_side(survey: SurveyFolder, place: Place) -> list[Beside]:
    """Return each person's last opinion beside the first estimate; empty without either.

    The first estimate is what stands, or what stood before a consensus that still stands.
    """
    first = _first(survey, place)
    if first is None or first.n.best <= 0:
        return []
    found = []
    for one in review_of(survey, place).opinion_of_each:
        second = estimate_of_opinion(survey, one)
        if second is not None and second.n.best > 0:
            found.append(
                Beside(
                    by=one.line.by,
                    at=one.line.at,
                    line=one.line.hash,
                    first=first,
                    second=second,
                    factors=tuple(_by_factor(first, second)),
                    note=one.opinion.note,
                )
            )
    return found


def _first(survey: SurveyFolder, place: Place) -> Estimate | None:
    agreed = review_of(survey, place).consensus
    standing = {one.line for q in place.questions if (one := place.at(*q))}
    try:
        if agreed and agreed.line.hash in standing:
            return place_at(survey, place, *agreed.line.prev).estimate()
        return place.estimate()
    except RoughnessError:
        return None


def _zones(estimate: Estimate) -> dict[str | None, dict[Factor, FactorEstimate]]:
    zones: dict[str | None, dict[Factor, FactorEstimate]] = {}
    for entry in estimate.factors:
        zones.setdefault(entry.segment, {})[entry.factor] = entry
    return zones


def _by_factor(first: Estimate, second: Estimate) -> Iterator[FactorBeside]:
    one, other = _zones(first), _zones(second)
    if one.keys() != other.keys():
        return
    for zone, entries in one.items():
        for factor in FACTORS:
            swapped = one | {zone: entries | {factor: other[zone][factor]}}
            yield FactorBeside(
                factor=factor,
                segment=zone,
                first=entries[factor],
                second=other[zone][factor],
                difference=_best(swapped, first) - first.n.best,
            )


def _best(zones: Mapping[str | None, Mapping[Factor, FactorEstimate]], of: Estimate) -> float:
    """Return n of factors by zone, the zones' shares of the perimeter as in ``of``."""
    ranges = [
        {factor: Range(e.low, e.best, e.high) for factor, e in zone.items()}
        for zone in zones.values()
    ]
    if of.segments is None:
        return additive.envelope(ranges[0]).best
    columns = [
        (
            [zone[factor].low for factor in FACTORS],
            [zone[factor].best for factor in FACTORS],
            [zone[factor].high for factor in FACTORS],
        )
        for zone in ranges
    ]
    shares = [segment.perimeter_percent for segment in of.segments]
    return additive.envelope_of_segments(columns, shares).best


@dataclass(frozen=True, kw_only=True)
class Agreement:
    """How far two people differ over the places of a survey where both estimated.

    All differences are those of ln n, second less first: 0.1 is about ten percent.
    """

    count: int
    mean: float
    """Whether the second people go higher or lower as a rule."""
    sd: float | None
    """How the differences scatter about their mean; None below two of them."""
    rms: float
    """Root of the mean square of the differences."""
    by_factor: Mapping[Factor, float]
    """Mean size of the difference in n that each factor alone makes, as a share of n."""
    most: Factor | None
    """The factor that people differ in most; None where they differ in none."""
    published: float | None
    """What the difference of two experienced people would scatter by: sqrt(2) times the
    published standard deviation of ln n at these n (root of the mean square)."""
    source: str
    provenance: str

    def __str__(self) -> str:
        told = f"{self.count} place{'s' if self.count > 1 else ''} with a second opinion: n differs"
        told += f" by {rounded(100 * math.expm1(self.mean), 0)} % in the mean"
        told += f", typically by a factor of {rounded(math.exp(self.rms), 2)}"
        if self.published is not None:
            told += (
                f" (published for two experienced people: {rounded(math.exp(self.published), 2)}"
            )
            told += f", from {self.provenance})"
        return told + (f"; people differ most in the {self.most}." if self.most else ".")


def agreement(survey: SurveyFolder, found: Sequence[Row] | None = None) -> Agreement | None:
    """Return how far first and second estimates agree; None where nobody gave a second one."""
    listed = rows(survey) if found is None else found
    pairs = [
        one for row in listed if row.place is not None for one in side_by_side(survey, row.place)
    ]
    if not pairs:
        return None
    ratios = [pair.log_ratio for pair in pairs]
    mean = math.fsum(ratios) / len(ratios)
    by_factor = _sizes(pairs)
    most = max(by_factor, key=lambda factor: by_factor[factor], default=None)
    return Agreement(
        count=len(pairs),
        mean=mean,
        sd=_scatter(ratios, mean),
        rms=math.sqrt(math.fsum(d * d for d in ratios) / len(ratios)),
        by_factor=by_factor,
        most=most if most and by_factor[most] > 0 else None,
        published=_published(pairs),
        source=additive.SOURCE_OF_PEOPLE,
        provenance="memory",
    )


def _scatter(ratios: Sequence[float], mean: float) -> float | None:
    if len(ratios) < 2:
        return None
    return math.sqrt(math.fsum((d - mean) ** 2 for d in ratios) / (len(ratios) - 1))


def _sizes(pairs: Sequence[Beside]) -> dict[Factor, float]:
    compared = [pair for pair in pairs if pair.factors]
    sizes: dict[Factor, float] = {}
    for pair in compared:
        for one in pair.factors:
            share = abs(one.difference) / pair.first.n.best / len(compared)
            sizes[one.factor] = sizes.get(one.factor, 0.0) + share
    return sizes


def _published(pairs: Sequence[Beside]) -> float | None:
    sigmas = [additive.sigma_of_people(pair.first.n.best) for pair in pairs]
    known = [sigma for sigma in sigmas if sigma is not None]
    if not known:
        return None
    return math.sqrt(2 * math.fsum(sigma * sigma for sigma in known) / len(known))
