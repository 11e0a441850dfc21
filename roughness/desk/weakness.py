"""Where a reviewer with little time looks first: a score with its parts, ours, no source."""

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from roughness import additive
from roughness.assessment.assessing import assess
from roughness.assessment.estimate import Estimate
from roughness.custody.status import ACCEPTED
from roughness.desk.folder import SurveyFolder
from roughness.desk.rows import Row
from roughness.errors import RoughnessError
from roughness.trail.review_state import SecondOpinion

# How much an open finding weighs beside a value that nothing backs at all (1). Ours.
WEIGHT: Final = {"stop": 1.0, "ask": 0.25, "tell": 0.0}
# A factor that nobody chose is weaker than one that somebody chose without a word. Ours.
_ALL_MISSING: Final = 2.0


@dataclass(frozen=True, kw_only=True)
class Weakness:
    """How weak a value is, from 0 up, and what makes it so; the parts add to the score."""

    unbacked: float = 0.0
    """Share of the variance of n, 0 to 1, from factors with neither note nor evidence."""
    findings: float = 0.0
    """Open findings: 1 for each that stops, 0.25 for each that asks."""
    width: float = 0.0
    """Width of the spread (5 to 95 %, in ln n) against what experienced people differ by."""
    disagreement: float = 0.0
    """Largest difference of a second opinion in ln n, in standard deviations of people."""
    missing: float = 0.0
    """Twice the share of factors that nobody answered."""

    @property
    def score(self) -> float:
        """The sum of the parts."""
        return math.fsum(
            (self.unbacked, self.findings, self.width, self.disagreement, self.missing)
        )


def weakness(survey: SurveyFolder, row: Row) -> Weakness:
    """Return how weak a row is."""
    findings = math.fsum(WEIGHT[finding.level] for finding in row.open)
    if row.estimate is None:
        return Weakness(findings=findings, missing=_missing(row))
    return Weakness(
        unbacked=_unbacked(row, row.estimate),
        findings=findings,
        width=_width(row.estimate),
        disagreement=max(
            (_difference(survey, one, row.estimate) for one in _unsettled(row)),
            default=0.0,
        ),
    )


def order(survey: SurveyFolder, found: Sequence[Row]) -> list[Row]:
    """Return rows with the weakest first; what is accepted and holds comes last."""

    def key(at: int) -> tuple[bool, float, int]:
        return found[at].status == ACCEPTED, -scores[at], at

    scores = [weakness(survey, row).score for row in found]
    return [found[at] for at in sorted(range(len(found)), key=key)]


def _missing(row: Row) -> float:
    if row.place is None or not row.place.questions:
        return _ALL_MISSING
    return _ALL_MISSING * len(row.place.missing) / len(row.place.questions)


def _unbacked(row: Row, estimate: Estimate) -> float:
    shares = [
        entry.share_of_variance
        for entry in estimate.factors
        if not entry.note and entry.factor not in row.supported
    ]
    # First-order shares need not add to 1; a range without any width backs nothing by itself.
    return min(1.0, max(0.0, math.fsum(shares)))


def _width(estimate: Estimate) -> float:
    sigma = additive.sigma_of_people(estimate.n.best)
    low, high = estimate.spread.p05, estimate.spread.p95
    if sigma is None or low <= 0:
        return 0.0
    return math.log(high / low) / (2 * additive.Z95 * sigma)


def _unsettled(row: Row) -> list[SecondOpinion]:
    """Return the second opinions that no consensus has weighed."""
    agreed = row.review.consensus
    weighed = agreed.consensus.opinions if agreed else ()
    return [one for one in row.review.opinion_of_each if one.line.hash not in weighed]


def _difference(survey: SurveyFolder, one: SecondOpinion, estimate: Estimate) -> float:
    second = estimate_of_opinion(survey, one)
    sigma = additive.sigma_of_people(estimate.n.best)
    if second is None or sigma is None or second.n.best <= 0:
        return 0.0
    return abs(math.log(second.n.best / estimate.n.best)) / sigma


def estimate_of_opinion(survey: SurveyFolder, one: SecondOpinion) -> Estimate | None:
    """Return the estimate of a second opinion; None where its handbook cannot be read now."""
    judgement = one.opinion.estimate
    try:
        handbook, _ = survey.handbook_for(judgement.handbook, judgement.setting)
        return assess(handbook, judgement, f"second opinion of {one.line.by}")
    except RoughnessError:
        return None
