"""Rules about the water in one section."""

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from typing import Final

from roughness.findings.rule import COMMON_PRACTICE, LEVELS, Finding, RuleInWords
from roughness.findings.wording import ratio, starting
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, rounded, show_n, show_range, show_value
from roughness.quantities.ranges import Range

# n is shown with three decimals: what differs by less is the same to a reader.
SEEN: Final = 0.0005
UNEVEN: Final = 2.0
# The sine and the tangent of the bed's angle, and depths normal and vertical, part from here.
TEN_DEGREES: Final = 0.176


@dataclass(frozen=True, kw_only=True)
class PartFacts:
    """One part at the level of the best n."""

    name: str
    n: Range | None
    """None where it is dry."""
    composite: Mapping[str, float]
    """n by every relation; empty where it is dry or of one n."""
    bench: tuple[float, float, float, float] | None
    """Distance, depth and width of a shallow plain inside the part, and its greatest depth."""
    n_unused: bool


@dataclass(frozen=True, kw_only=True)
class SectionFacts:
    """A section at the level of the best n."""

    slope: float
    froude: float
    alpha: float
    fully_rough: bool
    equivalent_n: float
    overhangs: tuple[int, ...]
    """Numbers of the points where the bed begins to run backwards."""
    waters: int
    normal_levels: tuple[float, ...]
    """All that carry the discharge, for the case that has most of them."""
    critical_depths: tuple[float, ...]
    parts: tuple[PartFacts, ...]


@dataclass(frozen=True, kw_only=True)
class SectionRule(RuleInWords):
    """A rule with the sentences it has for a section."""

    says: Callable[[SectionFacts], Iterable[str]]


def find_in_section(facts: SectionFacts) -> tuple[Finding, ...]:
    """Return what is to be said about one section, worst first."""
    return tuple(
        Finding(rule.level, rule.key, None, sentence)
        for rule in RULES
        for sentence in rule.says(facts)
    )


def _metres(length: float) -> str:
    return f"{rounded(length, 2)} m"


def _listed(lengths: Iterable[float]) -> list[str]:
    """Return lengths as they are printed; those that a reader cannot tell apart once."""
    return list(dict.fromkeys(_metres(length) for length in lengths))


def _named(part: PartFacts) -> str:
    return printable(part.name)


def _composites_differ(facts: SectionFacts) -> Iterable[str]:
    for part in facts.parts:
        if not part.composite or part.n is None:
            continue
        low, high = (f(part.composite, key=part.composite.__getitem__) for f in (min, max))
        span = Range(part.composite[low], part.composite[low], part.composite[high])
        if span.width > max(part.n.width, SEEN):
            yield (
                f"In the {_named(part)} the relations for one n of bed and banks differ by more"
                f" than the range of n ({show_range(part.n)}): from {show_n(span.low)} ({low}) to"
                f" {show_n(span.high)} ({high}); look at which assumption fits this section, and"
                " say why."
            )


def _to_divide(facts: SectionFacts) -> Iterable[str]:
    for part in facts.parts:
        if part.bench is not None:
            at, depth, width, deepest = part.bench
            yield (
                f"In the {_named(part)} water stands only {_metres(depth)} deep and"
                f" {_metres(width)} wide beside a depth of {_metres(deepest)}: make it a part of"
                f" its own, divided at {_metres(at)} from the left end, or its conveyance is"
                " misjudged."
            )


def _several_normal(facts: SectionFacts) -> Iterable[str]:
    levels = _listed(facts.normal_levels)
    if len(levels) > 1:
        yield (
            f"Water levels of {enumerate_words(levels)} all carry this discharge, because the"
            " wetted perimeter of an undivided part grows faster than its area; the highest one is"
            " given: divide the section where its depth changes abruptly."
        )


def _overhangs(facts: SectionFacts) -> Iterable[str]:
    if facts.overhangs:
        numbers = enumerate_words([str(number) for number in facts.overhangs])
        yield (
            f"The bed runs backwards after point {numbers}: it is taken for an overhang with"
            " water under it; if there is none, put the points in order."
        )


def _supercritical(facts: SectionFacts) -> Iterable[str]:
    if facts.froude >= 1:
        yield (
            f"The Froude number is {rounded(facts.froude, 2)}: over a long natural reach flow is"
            " hardly ever supercritical; look at n and at the slope."
        )


def _not_rough(facts: SectionFacts) -> Iterable[str]:
    if not facts.fully_rough:
        yield (
            "Flow is not fully rough here, so that n depends on the velocity too and Manning's"
            " equation does not hold; use a friction law with viscosity."
        )


def _several_critical(facts: SectionFacts) -> Iterable[str]:
    depths = _listed(facts.critical_depths)
    if len(depths) > 1:
        yield (
            f"Depths of {enumerate_words(depths)} are all critical; the one of least specific"
            " energy is given."
        )


def _no_critical(facts: SectionFacts) -> Iterable[str]:
    if not facts.critical_depths:
        yield "The critical depth lies above the section's lower end and is not given."


def _separate(facts: SectionFacts) -> Iterable[str]:
    if facts.waters > 1:
        yield (
            f"At this level there are {facts.waters} waters side by side, all taken to flow at one"
            " level; take out those that the stream does not reach."
        )


def _dry_parts(facts: SectionFacts) -> Iterable[str]:
    dry = [_named(part) for part in facts.parts if part.n is None]
    if dry:
        yield f"At this level the {enumerate_words(dry)} {'is' if len(dry) == 1 else 'are'} dry."


def _uneven(facts: SectionFacts) -> Iterable[str]:
    if facts.alpha > UNEVEN:
        yield (
            f"The velocity head coefficient is {rounded(facts.alpha, 2)}: velocities of the parts"
            " differ widely, so that the mean velocity and the Froude number describe none of them."
        )


def _outside(facts: SectionFacts) -> Iterable[str]:
    wet = [part.n.best for part in facts.parts if part.n is not None]
    low, high = min(wet), max(wet)
    if len(wet) > 1 and not low - SEEN <= facts.equivalent_n <= high + SEEN:
        beyond = "below" if facts.equivalent_n < low else "above"
        yield (
            f"The equivalent n of the whole, {show_n(facts.equivalent_n)}, lies {beyond} that of"
            " every part: an effect of dividing; it is for display and goes into no model."
        )


def _steep(facts: SectionFacts) -> Iterable[str]:
    if facts.slope > TEN_DEGREES:
        yield (
            f"On a slope of {show_value(facts.slope)}, over ten degrees, depth normal to the bed"
            f" and vertical depth differ by a factor of"
            f" {ratio((1 + facts.slope**2) ** 0.5, 1.0, 2)}."
        )


def _unused(facts: SectionFacts) -> Iterable[str]:
    for part in facts.parts:
        if part.n_unused:
            yield starting(
                f"{_named(part)}: its segments cover it, so that the n given for the part is not"
                " used."
            )


def _rule(
    key: str,
    level: str,
    says: Callable[[SectionFacts], Iterable[str]],
    meaning: str,
    source: str = COMMON_PRACTICE,
) -> SectionRule:
    known = next(word for word in LEVELS if word == level)
    return SectionRule(key=key, level=known, meaning=meaning, source=source, says=says)


RULES: Final = (
    _rule(
        "composite-n-differs",
        "ask",
        _composites_differ,
        "the relations for one n of bed and banks differ by more than the range of n",
    ),
    _rule(
        "section-to-divide",
        "ask",
        _to_divide,
        "a wide shallow plain and a deep channel lie in one part",
        "Davidian 1984, USGS TWRI 3-A15 (memory): depth twice, width five times that at the bank",
    ),
    _rule(
        "several-normal-depths",
        "ask",
        _several_normal,
        "more than one water level carries the discharge",
    ),
    _rule("bed-runs-backwards", "ask", _overhangs, "points run backwards as under an overhang"),
    _rule(
        "section-supercritical",
        "ask",
        _supercritical,
        "the Froude number of a section is 1 or more",
        "Jarrett 1984 (memory); common practice",
    ),
    _rule(
        "not-fully-rough",
        "ask",
        _not_rough,
        "n^6 sqrt(R S) is below 1.9e-13 (R in ft), so that Manning's equation fails",
        "Henderson 1966 (memory)",
    ),
    _rule(
        "several-critical-depths",
        "tell",
        _several_critical,
        "more than one depth of the section is critical",
    ),
    _rule(
        "no-critical-depth",
        "tell",
        _no_critical,
        "the critical depth lies above what was surveyed",
    ),
    _rule(
        "separate-waters",
        "tell",
        _separate,
        "at this level several waters stand side by side",
    ),
    _rule("part-is-dry", "tell", _dry_parts, "a part of the section is dry at this level"),
    _rule(
        "uneven-velocities",
        "tell",
        _uneven,
        "the velocity head coefficient is above 2",
    ),
    _rule(
        "equivalent-n-outside",
        "tell",
        _outside,
        "the n of the whole section lies outside those of its parts",
    ),
    _rule(
        "steep-bed-and-depth",
        "tell",
        _steep,
        "over ten degrees depth normal to the bed and vertical depth differ",
    ),
    _rule(
        "part-n-not-used",
        "tell",
        _unused,
        "segments cover the part, so that its own n has no place",
    ),
)
