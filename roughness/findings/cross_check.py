"""Rules that lay independent estimates beside what was judged, like beside like."""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from typing import Final

from roughness.comparison import OtherN, PebbleCount
from roughness.findings.rule import COMMON_PRACTICE, Finding, RuleInWords
from roughness.quantities.printing import enumerate_words, show_n, show_range, show_value
from roughness.quantities.ranges import Range
from roughness.survey.words import Factor

# What formulas differ by among themselves in the beds they were made from.
UNSAID_ERROR: Final = 0.20
ENOUGH_STONES: Final = 100
CHANNEL_TYPES: Final = "chow-1959"
LOWER, UPPER = "brownlie-1983-lower", "brownlie-1983-upper"


@dataclass(frozen=True, kw_only=True)
class Compared:
    """What the rules look at: one reach."""

    estimates: tuple[OtherN, ...]
    base: Range | None = None
    """The judged base value."""
    n: Range | None = None
    """The judged n of the part."""
    count: PebbleCount | None = None
    given_mm: tuple[tuple[int, float], ...] = ()
    """Sizes that were given beside a count: percent finer and mm."""


@dataclass(frozen=True, kw_only=True)
class CrossRule(RuleInWords):
    """One named check over the independent estimates of a reach."""

    about: Factor | None = None
    check: Callable[[Compared], Iterator[str]]
    """Says a sentence for each case that is met."""


def find_cross(compared: Compared) -> tuple[Finding, ...]:
    """Return what the rules say, in their order."""
    return tuple(
        Finding(rule.level, rule.key, rule.about, says)
        for rule in RULES
        for says in rule.check(compared)
    )


def _inside(compared: Compared, includes: str) -> list[OtherN]:
    return [
        other
        for other in compared.estimates
        if other.includes == includes and other.domain == "inside" and other.n is not None
    ]


def _span(others: Sequence[OtherN]) -> Range:
    """Return from where to where the values reach, each with its error."""
    low, best, high = [], [], []
    for other in others:
        n = other.n or 0.0
        error = UNSAID_ERROR if other.error_percent is None else other.error_percent / 100
        best.append(n)
        low.append(n * (1 - error) if other.low is None else other.low)
        high.append(n * (1 + error) if other.high is None else other.high)
    return Range(min(low), sum(best) / len(best), max(high))


def _apart(judged: Range, others: Sequence[OtherN]) -> str:
    """Return ``above`` or ``below`` where the whole range lies beyond all values."""
    if not others:
        return ""
    span = _span(others)
    return "above" if judged.low > span.high else "below" if judged.high < span.low else ""


def _named(others: Sequence[OtherN]) -> str:
    shown = [f"{o.method} {show_n(o.n)}" for o in others if o.n is not None]
    more = [f"{len(shown) - 4} more"] if len(shown) > 5 else []
    return enumerate_words(shown[:4] + more if more else shown)


def _mm(size: float) -> str:
    return show_value(float(f"{size:.3g}"))


def _base_against_grains(compared: Compared) -> Iterator[str]:
    others = _inside(compared, "grain")
    if compared.base and (how := _apart(compared.base, others)):
        yield (
            f"The base value {show_range(compared.base)} lies {how} all formulas for the bed inside"
            f" their domain, errors included ({_named(others)}); check the grain sizes, or say in"
            " a note why this bed differs."
        )


def _whole_against_reaches(compared: Compared) -> Iterator[str]:
    others = [o for o in _inside(compared, "whole reach") if o.method != CHANNEL_TYPES]
    if compared.n and (how := _apart(compared.n, others)):
        yield (
            f"n {show_range(compared.n)} lies {how} all formulas for whole reaches inside their "
            f"domain, errors included ({_named(others)}); look for what holds the flow back here, "
            "or say in a note why this reach differs."
        )


def _whole_below_grains(compared: Compared) -> Iterator[str]:
    others = _inside(compared, "grain")
    if compared.n and others and compared.n.high < _span(others).low:
        yield (
            f"n {show_range(compared.n)} is below what the grains alone give, errors included "
            f"({_named(others)}), and a reach is not smoother than its bed; check grain sizes and "
            "base value."
        )


def _outside_channel_type(compared: Compared) -> Iterator[str]:
    if compared.n is None:
        return
    for other in compared.estimates:
        if other.method != CHANNEL_TYPES or other.low is None or other.high is None:
            continue
        if compared.n.low > other.high or compared.n.high < other.low:
            published = f"{show_value(other.low)} to {show_value(other.high)}"
            yield (
                f"n {show_range(compared.n)} has nothing in common with the {published} published "
                "for the type of channel that was named; check which of the two describes the "
                "reach."
            )


def _regime(compared: Compared) -> Iterator[str]:
    found = {o.method: o for o in compared.estimates if o.domain != "outside"}
    lower, upper = found.get(LOWER), found.get(UPPER)
    # Each is tested with its own velocity. Where one alone is inside, that one holds.
    if lower and upper and lower.n and upper.n and lower.domain == upper.domain:
        yield (
            f"A sand bed may be in either regime at this flow: n {show_n(lower.n)} with dunes, "
            f"{show_n(upper.n)} with a flat bed; take an interval, and say what the bed looked "
            "like."
        )


def _few_stones(compared: Compared) -> Iterator[str]:
    if compared.count and compared.count.stones < ENOUGH_STONES:
        d84 = next(p for p in compared.count.percentiles if p.percent == 84)
        between = "the d84 is not told by them"
        if d84.low_mm is not None and d84.high_mm is not None:
            between = f"the d84 is between {_mm(d84.low_mm)} and {_mm(d84.high_mm)} mm"
        yield f"{compared.count.stones} stones were counted, and {between}; count 100 or more."


def _sizes_against_count(compared: Compared) -> Iterator[str]:
    if compared.count is None:
        return
    for percent, mm in compared.given_mm:
        of = next(p for p in compared.count.percentiles if p.percent == percent)
        if of.mm is None or of.low_mm is None or of.high_mm is None:
            continue
        if not of.low_mm <= mm <= of.high_mm:
            yield (
                f"The d{percent} was given as {show_value(mm)} mm and the count says "
                f"{_mm(of.mm)} mm; the given one was used: check which is right."
            )


def _nothing_inside(compared: Compared) -> Iterator[str]:
    if compared.estimates and all(other.domain != "inside" for other in compared.estimates):
        yield (
            "No independent estimate stands inside its domain here; compare with measured streams "
            "that are alike."
        )


RULES: Final = (
    CrossRule(
        key="base-against-grain-formulas",
        level="ask",
        meaning="the base value lies beyond all formulas for the bed inside their domain",
        source=COMMON_PRACTICE,
        about="base",
        check=_base_against_grains,
    ),
    CrossRule(
        key="n-against-reach-formulas",
        level="ask",
        meaning="n lies beyond all formulas for whole reaches inside their domain",
        source=COMMON_PRACTICE,
        check=_whole_against_reaches,
    ),
    CrossRule(
        key="n-below-grains",
        level="ask",
        meaning="n of the whole is below what the grains of its bed give alone",
        source=COMMON_PRACTICE,
        check=_whole_below_grains,
    ),
    CrossRule(
        key="n-outside-channel-type",
        level="ask",
        meaning="n has nothing in common with the values published for the type of channel named",
        source="Chow 1959, table 5-6, memory and second hand",
        check=_outside_channel_type,
    ),
    CrossRule(
        key="sand-in-either-regime",
        level="ask",
        meaning="a sand bed may be in the lower or the upper regime at this flow",
        source="Brownlie 1983, memory",
        about="base",
        check=_regime,
    ),
    CrossRule(
        key="few-stones-counted",
        level="ask",
        meaning="fewer than 100 stones were counted for the grain sizes",
        source=COMMON_PRACTICE,
        about="base",
        check=_few_stones,
    ),
    CrossRule(
        key="size-against-count",
        level="ask",
        meaning="a grain size that was given lies beyond the sampling error of the count",
        source=COMMON_PRACTICE,
        about="base",
        check=_sizes_against_count,
    ),
    CrossRule(
        key="nothing-inside-its-domain",
        level="tell",
        meaning="no independent estimate stands inside its domain",
        source=COMMON_PRACTICE,
        check=_nothing_inside,
    ),
)
