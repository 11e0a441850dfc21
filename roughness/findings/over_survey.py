"""Rules that need more than one estimate, or what a survey knows around it."""

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from itertools import groupby, pairwise
from typing import Final

from roughness.findings.ranges import NOISE
from roughness.findings.rule import COMMON_PRACTICE, Finding, Level, RuleInWords
from roughness.findings.wording import FACTOR_WORDS, ratio
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import (
    enumerate_words,
    show_n,
    show_range,
    show_share,
    show_value,
)
from roughness.quantities.ranges import Range
from roughness.survey.words import Factor, Growth

LARGEST_JUMP: Final = 1.4
ENOUGH_TO_COMPARE: Final = 3
SHARE_OF_A_DRIVER: Final = 1 / 3


@dataclass(frozen=True, kw_only=True)
class Estimated:
    """One estimate in its survey: n of (reach, part, flow condition)."""

    reach: str
    order: int
    """Place of the reach in stream order; neighbours differ by one."""
    part: str
    condition: str
    n: Range
    p05: float
    p95: float
    adopted: float | None = None
    """The n that goes to the model where somebody adopted another one."""
    jump_noted: bool = False
    """Whether a note says why n jumps to or from a neighbour."""
    shares: Mapping[Factor, float] = field(default_factory=dict)
    """Share of the variance of n by factor."""
    backed: frozenset[Factor] = frozenset()
    """Factors with a note or a photo."""
    unconfirmed: tuple[Factor, ...] = ()
    """Factors carried over from elsewhere that nobody confirmed here."""
    visit_growth: Growth | None = None
    condition_growth: Growth | None = None
    made_by_record: tuple[str, ...] = ()
    """What a `record` made because it was not there: ``part``, ``condition``."""
    visited: bool = True
    """Whether a visit is noted that the choices belong to."""
    multiplier_over_bank: float | None = None
    """The channel's multiplier for bends where its condition is over bank, else None."""


@dataclass(frozen=True, slots=True)
class Said:
    """What a rule says: of which estimate, about which factor."""

    of: Estimated
    says: str
    factor: Factor | None = None


@dataclass(frozen=True, slots=True)
class Placed:
    """A finding with the reach, part and condition it belongs to."""

    reach: str
    part: str
    condition: str
    finding: Finding


Check = Callable[[Sequence[Estimated]], Iterator[Said]]


@dataclass(frozen=True, kw_only=True)
class SurveyRule(RuleInWords):
    """One named check over the estimates of a survey."""

    check: Check


def survey_rule(
    key: str, level: Level, *, meaning: str, source: str = COMMON_PRACTICE
) -> Callable[[Check], SurveyRule]:
    """Declare a rule over the estimates of a survey."""
    return lambda check: SurveyRule(
        key=key, level=level, meaning=meaning, source=source, check=check
    )


def find_over_survey(rows: Sequence[Estimated]) -> list[Placed]:
    """Return what the rules over a survey say, rule by rule, in the order of the rows."""
    return [
        Placed(
            said.of.reach,
            said.of.part,
            said.of.condition,
            Finding(rule.level, rule.key, said.factor, said.says),
        )
        for rule in RULES
        for said in rule.check(rows)
    ]


def _along_the_stream(rows: Sequence[Estimated]) -> Iterator[list[Estimated]]:
    """Yield the rows of each part and condition in stream order."""

    def series(row: Estimated) -> tuple[str, str]:
        return row.part, row.condition

    ordered = sorted(rows, key=lambda row: (*series(row), row.order))
    for _, group in groupby(ordered, key=series):
        yield list(group)


@survey_rule(
    "jump-between-neighbours",
    "ask",
    meaning="n of neighbouring reaches differs by more than 1.4 times, spreads apart, no reason",
)
def jump_between_neighbours(rows: Sequence[Estimated]) -> Iterator[Said]:
    """Ask at the second of the two reaches."""
    for series in _along_the_stream(rows):
        for one, next_one in pairwise(series):
            lower, upper = sorted((one, next_one), key=lambda row: row.n.best)
            jumps = upper.n.best > LARGEST_JUMP * lower.n.best + NOISE
            apart = lower.p95 < upper.p05
            noted = one.jump_noted or next_one.jump_noted
            if next_one.order - one.order == 1 and jumps and apart and not noted:
                yield Said(
                    next_one,
                    f"n jumps from {show_n(one.n.best)} in {printable(one.reach)} to "
                    f"{show_n(next_one.n.best)} in {printable(next_one.reach)}, and their spreads "
                    "do not meet; say in the note of either reach what changes between them.",
                )


@survey_rule(
    "all-reaches-alike",
    "ask",
    meaning="three or more reaches, and all have the same n",
)
def all_reaches_alike(rows: Sequence[Estimated]) -> Iterator[Said]:
    """Ask once for a part and condition, at its first reach."""
    for series in _along_the_stream(rows):
        bests = [row.n.best for row in series]
        if len(series) >= ENOUGH_TO_COMPARE and max(bests) - min(bests) <= NOISE:
            yield Said(
                series[0],
                f"All {len(series)} reaches have n {show_n(bests[0])} for "
                f"{printable(series[0].part)}; was each one judged by itself? Say so in a note.",
            )


@survey_rule(
    "carried-over-unconfirmed",
    "ask",
    meaning="choices carried over from elsewhere were not confirmed for this reach",
)
def carried_over_unconfirmed(rows: Sequence[Estimated]) -> Iterator[Said]:
    """Ask once, naming the factors."""
    for row in rows:
        if row.unconfirmed:
            named = enumerate_words([FACTOR_WORDS[factor] for factor in row.unconfirmed])
            them = "it" if len(row.unconfirmed) == 1 else "them"
            yield Said(
                row,
                f"Carried over and not confirmed here: {named}; confirm or change {them}.",
                row.unconfirmed[0] if len(row.unconfirmed) == 1 else None,
            )


@survey_rule(
    "driver-without-reason",
    "ask",
    meaning="the factor with the largest share of the variance, a third or more, has no note",
)
def driver_without_reason(rows: Sequence[Estimated]) -> Iterator[Said]:
    """Ask for a note on the one factor that a note is worth most for."""
    for row in rows:
        driver = max(row.shares, key=lambda factor: row.shares[factor], default=None)
        if driver is None or driver in row.backed or row.shares[driver] < SHARE_OF_A_DRIVER - NOISE:
            continue
        told = FACTOR_WORDS[driver]
        yield Said(
            row,
            f"The {told} drives n with {show_share(row.shares[driver])} of the variance, and "
            "neither note nor photo backs it; say in a note why this grade and value.",
            driver,
        )


@survey_rule(
    "growth-differs",
    "ask",
    meaning="the visit saw another state of growth than the flow condition is for",
)
def growth_differs(rows: Sequence[Estimated]) -> Iterator[Said]:
    """Silent where either is unknown or any state will do."""
    for row in rows:
        seen, wanted = row.visit_growth, row.condition_growth
        if seen and wanted and "any" not in (seen, wanted) and seen != wanted:
            yield Said(
                row,
                f"The visit saw the growth '{seen}', but the condition "
                f"{printable(row.condition)} is for '{wanted}'; say in a note how the vegetation "
                "was judged for it.",
                "vegetation",
            )


@survey_rule(
    "made-by-record",
    "ask",
    meaning="a recorded estimate named a part or condition that was not there and made it",
)
def made_by_record(rows: Sequence[Estimated]) -> Iterator[Said]:
    """Ask, since a slip in a name makes a new part as easily."""
    for row in rows:
        for noun in row.made_by_record:
            name = {"part": row.part, "condition": row.condition}.get(noun, "")
            yield Said(
                row,
                f"The {printable(noun)} {printable(name)!r} was not there before this estimate was "
                f"recorded and was made by it; check that this {printable(noun)} was meant.",
            )


@survey_rule(
    "adopted-differs",
    "ask",
    meaning="the adopted n lies outside low to high of the estimate",
)
def adopted_differs(rows: Sequence[Estimated]) -> Iterator[Said]:
    """Ask how far apart the judgement and the value for the model are."""
    for row in rows:
        if row.adopted is None or row.n.low - NOISE <= row.adopted <= row.n.high + NOISE:
            continue
        times = ratio(row.adopted, row.n.best, 2)
        yield Said(
            row,
            f"The adopted n {show_n(row.adopted)} lies outside the estimate's "
            f"{show_range(row.n)}, {times} times its best value; does the reason carry that far?",
        )


@survey_rule(
    "multiplier-over-bank",
    "ask",
    meaning="a multiplier for bends above 1 while the water is over bank, and no note says why",
    source="USGS WSP 2339, text on meandering: flow confined to the channel (seen second hand)",
)
def multiplier_over_bank(rows: Sequence[Estimated]) -> Iterator[Said]:
    """Over bank, part of the water takes the short way across the bends."""
    for row in rows:
        m = row.multiplier_over_bank
        if m is not None and m > 1 + NOISE and "meander" not in row.backed:
            yield Said(
                row,
                f"The bends multiply n by {show_value(m)}, but at {printable(row.condition)} the "
                "water is over bank and part of it crosses them; say in a note that most of it "
                "still follows the channel, or take the multiplier back.",
                "meander",
            )


@survey_rule(
    "no-visit",
    "ask",
    meaning="no visit is noted that the choices belong to",
)
def no_visit(rows: Sequence[Estimated]) -> Iterator[Said]:
    """A judgement by somebody who was not there is another thing."""
    for row in rows:
        if not row.visited:
            yield Said(
                row,
                "No visit to the reach is noted; note who was there and when, or that it was "
                "judged from pictures.",
            )


RULES: tuple[SurveyRule, ...] = (
    jump_between_neighbours,
    all_reaches_alike,
    carried_over_unconfirmed,
    driver_without_reason,
    growth_differs,
    made_by_record,
    adopted_differs,
    multiplier_over_bank,
    no_visit,
)
