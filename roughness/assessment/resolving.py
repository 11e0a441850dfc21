"""Choices made into ranges: what the table says, what the person said, what was measured."""

from dataclasses import dataclass
from itertools import pairwise
from typing import Any

from roughness.errors import InputError
from roughness.handbook import Candidates, Grade, Handbook, candidates
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, show_value
from roughness.quantities.ranges import Range, point
from roughness.survey.choices import BaseChoice, Choice, Factors, ObstructionChoice
from roughness.survey.words import (
    FACTORS,
    MULTIPLIER,
    NOT_APPLICABLE,
    NOT_ON_FLOOD_PLAINS,
    Factor,
    Setting,
    factors_of,
)

# Beyond this a number is a slip of the keyboard: published tables end at 0.2 for one
# factor and 1.3 for the multiplier.
_LARGEST = 10.0


@dataclass(frozen=True, kw_only=True)
class Resolved:
    """One factor's choice beside its table."""

    factor: Factor
    choice: Choice
    grade: Grade | None
    """None where numbers stand alone, and on a flood plain where the factor does not apply."""
    range: Range
    published: Range | None
    candidates: Candidates
    measured: bool
    """Whether a measured criterion chose the grade."""

    @property
    def grade_key(self) -> str | None:
        """Key of the grade; ``not-applicable`` where a flood plain has no such factor."""
        return self.grade.key if self.grade else self.choice.grade

    @property
    def source(self) -> str:
        """Table and page, or that there is none."""
        if self.grade is not None:
            return self.grade.source
        return self._without_grade

    @property
    def cited(self) -> str:
        """The same, marked where the values were only remembered."""
        return self.grade.cited if self.grade is not None else self._without_grade

    @property
    def _without_grade(self) -> str:
        return "a flood plain has none" if self.choice.grade else "own value, no table"


def resolve(
    handbook: Handbook, setting: Setting, factors: Factors, where: str
) -> dict[Factor, Resolved]:
    """Return every factor of ``setting`` resolved, in the order of publication.

    Raises
    ------
    InputError
        A factor is missing or does not belong to the setting; a grade is not in the
        table; a criterion leaves no single grade and none is named; numbers out of order.
    """
    missing = [f for f in factors_of(setting) if factors[f] is None]
    if missing:
        known = ", ".join(g.key for g in handbook.grades(setting, missing[0]))
        raise InputError(
            f"{enumerate_words(missing)} {'is' if len(missing) == 1 else 'are'} missing",
            where=where,
            wanted=f"choose one of {known} for {missing[0]}",
        )
    return {
        factor: resolve_one(handbook, setting, factor, factors[factor], f"{where}.{factor}")
        for factor in FACTORS
    }


def resolve_one(
    handbook: Handbook, setting: Setting, factor: Factor, choice: Choice | None, where: str
) -> Resolved:
    """Return one factor resolved; ``choice`` None stands for a factor that does not apply.

    Raises
    ------
    InputError
        As :func:`resolve`.
    """
    if setting == "flood-plain" and factor in NOT_ON_FLOOD_PLAINS:
        return _not_applicable(factor, choice, where)
    assert choice is not None
    left = candidates(handbook, setting, factor, choice.criteria(), where=where)
    grade = _grade(handbook, setting, factor, choice, left, where)
    _refuse_unanswered_sand(setting, choice, grade, where)
    published = _published(choice, grade)
    return Resolved(
        factor=factor,
        choice=choice,
        grade=grade,
        range=_range(factor, choice, published, where),
        published=published,
        candidates=left,
        measured=choice.grade is None and grade is not None,
    )


def _not_applicable(factor: Factor, choice: Choice | None, where: str) -> Resolved:
    plain = Choice(grade=NOT_APPLICABLE)
    if choice is not None and (choice.grade != NOT_APPLICABLE or _own_numbers(choice)):
        what = "multiplier for meandering" if factor == MULTIPLIER else "section variation"
        raise InputError(
            f"a flood plain has no {what}",
            where=where,
            wanted=f"leave {factor} out, or set the part to the setting channel",
        )
    return Resolved(
        factor=factor,
        choice=choice or plain,
        grade=None,
        range=point(1.0 if factor == MULTIPLIER else 0.0),
        published=None,
        candidates=Candidates(),
        measured=False,
    )


def _own_numbers(choice: Choice) -> dict[str, float]:
    numbers = {"low": choice.low, "best": choice.best, "high": choice.high}
    return {name: value for name, value in numbers.items() if value is not None}


def _grade(
    handbook: Handbook,
    setting: Setting,
    factor: Factor,
    choice: Choice,
    left: Candidates,
    where: str,
) -> Grade | None:
    if choice.grade is not None:
        return handbook.grade(setting, factor, choice.grade, where=where)
    if len(left.grades) == 1:
        return handbook.grade(setting, factor, left.grades[0], where=where)
    if len(left.grades) > 1:
        raise InputError(
            f"{left.says} leaves {enumerate_words(left.grades, 'or')}",
            where=where,
            wanted="name one of them as the grade",
        )
    if left.beyond:
        raise InputError(f"{left.says} has no published grade", where=where, wanted=left.advice)
    if _own_numbers(choice):
        return None
    known = ", ".join(g.key for g in handbook.grades(setting, factor))
    if left.says:
        said = f"{left.says} decides no grade"
        raise InputError(said, where=where, wanted=f"{left.advice} ({known})")
    raise InputError("nothing was chosen", where=where, wanted=f"name one of {known}")


def _refuse_unanswered_sand(
    setting: Setting, choice: Choice, grade: Grade | None, where: str
) -> None:
    if grade is None or not grade.by_d50_mm or not isinstance(choice, BaseChoice):
        return
    if setting == "channel" and choice.regime is None:
        raise InputError(
            "a sand bed needs its flow regime",
            where=f"{where}.regime",
            wanted="one of upper, lower, transition, unknown",
        )
    if choice.best is not None:
        return
    first, last = grade.by_d50_mm[0][0], grade.by_d50_mm[-1][0]
    span = f"{show_value(first)} to {show_value(last)} mm"
    if choice.d50_mm is None:
        raise InputError("sand needs its median size", where=f"{where}.d50_mm", wanted=span)
    if grade.published_at(choice.d50_mm) is None:
        raise InputError(
            f"nothing is published for sand of {show_value(choice.d50_mm)} mm (only {span})",
            where=f"{where}.d50_mm",
            wanted="give a best value of your own with a note",
        )


def _published(choice: Choice, grade: Grade | None) -> Range | None:
    if grade is None:
        return None
    if grade.by_d50_mm:
        size = choice.d50_mm if isinstance(choice, BaseChoice) else None
        return grade.published_at(size) if size is not None else None
    return grade.published


def _range(factor: Factor, choice: Choice, published: Range | None, where: str) -> Range:
    _refuse_numbers(factor, choice, where)
    given = _own_numbers(choice)
    if published is None:
        values = list(given.values())
        published = Range(min(values), (min(values) + max(values)) / 2, max(values))
    within = max(_typical(choice, published), given.get("low", 0.0))
    best = given.get("best", min(within, given.get("high", within)))
    return Range(
        low=given.get("low", min(published.low, best)),
        best=best,
        high=given.get("high", max(published.high, best)),
    )


def _typical(choice: Choice, published: Range) -> float:
    """Return the published typical value, or the middle of the third that the edges name."""
    edges = choice.edges if isinstance(choice, ObstructionChoice) else None
    if edges == "rounded":
        return published.low + published.width / 6
    if edges == "sharp":
        return published.high - published.width / 6
    return published.best


def _refuse_numbers(factor: Factor, choice: Choice, where: str) -> None:
    given = _own_numbers(choice)
    for name, value in given.items():
        wrong = _why_wrong(factor, name, value)
        if wrong:
            raise InputError(
                f"{show_value(value)} {wrong[0]}", where=f"{where}.{name}", wanted=wrong[1]
            )
    names = list(given)
    for first, second in pairwise(names):
        if given[first] > given[second]:
            raise InputError(
                f"{first} {show_value(given[first])} is above {second} {show_value(given[second])}",
                where=where,
                wanted="low <= best <= high is due",
            )


def _why_wrong(factor: Factor, name: str, value: float) -> tuple[str, str] | None:
    if value < 0:
        return "is negative", "0 or more is due"
    if value > _LARGEST:
        return "is far outside any table", "write 0.035, not 35"
    if factor == MULTIPLIER and value == 0:
        return "as a multiplier makes n nothing", "1 stands for a straight channel"
    if factor == "base" and name == "best" and value == 0:
        return "is no bed", "the smoothest published base is 0.011"
    return None


def noted(choice: Choice) -> bool:
    """Return whether the choice carries a note with something to read in it."""
    return any(sign.isprintable() and not sign.isspace() for sign in choice.note or "")


def shown_note(choice: Choice) -> str | None:
    """Return the note as it may be shown."""
    return printable(choice.note.strip()) if choice.note and choice.note.strip() else None


def criterion_numbers(choice: Choice) -> dict[str, Any]:
    """Return the criteria of the choice, with the sinuosity that two lengths give."""
    known = choice.criteria()
    lengths = known.get("channel_length_m"), known.get("valley_length_m")
    if "sinuosity" not in known and all(lengths):
        known["sinuosity"] = known["channel_length_m"] / known["valley_length_m"]
    return known
