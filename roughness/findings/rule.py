"""What a rule is: a key, a level, a meaning, a source, and one function over columns.

A rule is declared where its function stands::

    @rule("slope-steep", "ask", meaning="...", source=MEMORY_OF_SOMETHING)
    def slope_steep(facts: Facts) -> Case:
        return Case(facts.slope >= STEEP, lambda row: f"The slope is {facts.slope[row]} ...")

The condition is computed for all rows at once, the sentence only for the rows it is met in.
"""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Final, Literal, get_args

from roughness.findings.facts import Facts, Flags
from roughness.survey.words import Factor

Level = Literal["stop", "ask", "tell"]
"""stop: do not accept as it is; ask: answer in a note; tell: good to know."""
LEVELS: Final[tuple[Level, ...]] = get_args(Level)

COMMON_PRACTICE: Final = "common practice, no source"


@dataclass(frozen=True, slots=True)
class Finding:
    """What a check says about one estimate."""

    level: Level
    rule: str
    factor: Factor | None
    says: str


@dataclass(frozen=True, slots=True)
class Case:
    """The rows a rule is met in, and the sentence for one of them."""

    where: Flags
    says: Callable[[int], str]


@dataclass(frozen=True, kw_only=True)
class RuleInWords:
    """What a rule's documentation holds."""

    key: str
    """Stable: records and answers refer to it."""
    level: Level
    meaning: str
    """One line for the table of rules."""
    source: str
    """Publication, with 'memory' where it was only remembered, or common practice."""


@dataclass(frozen=True, kw_only=True)
class Rule(RuleInWords):
    """One named check over the columns of facts."""

    factors: tuple[Factor | None, ...]
    """The factors it looks at one by one; (None,) where it speaks of the whole."""
    check: Callable[[Facts, Factor | None], Case]


Check = Callable[[Facts], Case]
CheckOfFactor = Callable[[Facts, Factor], Case]


def rule(
    key: str, level: Level, *, meaning: str, source: str, about: Factor | None = None
) -> Callable[[Check], Rule]:
    """Declare a rule; ``about`` is the factor its findings point to."""

    def declare(check: Check) -> Rule:
        return Rule(
            key=key,
            level=level,
            meaning=meaning,
            source=source,
            factors=(about,),
            check=lambda facts, _factor: check(facts),
        )

    return declare


def rule_of_each(
    key: str, level: Level, *, meaning: str, source: str, factors: Sequence[Factor]
) -> Callable[[CheckOfFactor], Rule]:
    """Declare a rule that looks at each of ``factors`` in the same way."""

    def declare(check: CheckOfFactor) -> Rule:
        def of_factor(facts: Facts, factor: Factor | None) -> Case:
            assert factor is not None
            return check(facts, factor)

        return Rule(
            key=key,
            level=level,
            meaning=meaning,
            source=source,
            factors=tuple(factors),
            check=of_factor,
        )

    return declare
