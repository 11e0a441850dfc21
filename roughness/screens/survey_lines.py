"""What the survey screen shows, line by line; no terminal here.

A survey of thousands of reaches is read a few reaches at a time: until a reach is read it
is one line with its name.
"""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from time import perf_counter
from typing import Final

from roughness.custody.status import ACCEPTED, CHANGED, IN_REVIEW, INCOMPLETE, RETURNED
from roughness.desk.folder import SurveyFolder
from roughness.desk.rows import Row, rows_of_reach, with_survey_findings
from roughness.errors import RoughnessError
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.survey.stream import Part
from roughness.survey.words import MAIN_CHANNEL

_SHORT: Final = {
    MAIN_CHANNEL: "channel",
    "left flood plain": "left plain",
    "right flood plain": "right plain",
}
_LEVELS: Final = ("stop", "ask")


@dataclass(frozen=True, kw_only=True)
class SurveyLine:
    """One line of the list: a part of a reach under the condition that is shown."""

    row: Row
    read: bool = True
    """False while the reach's trail was not read yet."""
    apart: str = ""
    """What to say in place of a bar where this condition asks for no n here."""

    @property
    def key(self) -> tuple[str, str]:
        """Reach and part: what the cursor stays on."""
        return self.row.reach.reach, self.row.part.part if self.row.part else ""

    @property
    def part_word(self) -> str:
        """The part in one or two short words."""
        part = self.row.part.part if self.row.part else ""
        return _SHORT.get(part, printable(part))

    @property
    def status(self) -> str:
        """How far it is, in words: what a reviewer said last, else what is open."""
        if not self.read:
            return ""
        if self.row.status in (ACCEPTED, CHANGED, RETURNED):
            return self.row.status
        counts = [(self.count(level), level) for level in _LEVELS]
        told = [f"{count} {level}" for count, level in counts if count]
        if self.row.status == IN_REVIEW and not self.count("stop"):
            return IN_REVIEW
        if told:
            return f"{'!' if self.count('stop') else '?'} {', '.join(told)}"
        return self._how_far

    @property
    def _how_far(self) -> str:
        if self.row.adopted is not None:
            return "adopted"
        if self.row.estimate is not None:
            return "estimated"
        return INCOMPLETE if self.row.place and self.row.place.state else "to do"

    def count(self, level: str) -> int:
        """Return how many findings of a level are open."""
        return sum(finding.level == level for finding in self.row.open)

    @property
    def weakness(self) -> tuple[int, int, float]:
        """Greater where a reviewer should look first: stops, asks, width of the spread."""
        spread = self.row.estimate.spread if self.row.estimate else None
        width = spread.p95 / spread.p05 if spread and spread.p05 > 0 else 0.0
        return self.count("stop"), self.count("ask"), width

    def matches(self, words: Sequence[str]) -> bool:
        """Whether every word occurs in the names or the status, whatever the case."""
        return all(word in self._text for word in words)

    @cached_property
    def _text(self) -> str:
        return same_name_key(f"{self.key[0]} {self.key[1]} {self.part_word} {self.status}")


@dataclass(frozen=True)
class Counts:
    """How far the survey is, in reaches, under one condition."""

    reaches: int
    estimated: int

    @property
    def to_do(self) -> int:
        """Reaches with something still to be judged."""
        return self.reaches - self.estimated


class SurveyLines:
    """The rows of a survey, read bit by bit.

    Parameters
    ----------
    survey : SurveyFolder
        The survey.
    """

    def __init__(self, survey: SurveyFolder) -> None:
        self.survey = survey
        self._rows: dict[str, list[Row]] = {}
        self._complete: dict[str, list[Row]] = {}
        self._recorded: dict[str, None] = {}
        self._all_of: tuple[str | None, list[SurveyLine]] | None = None

    @property
    def names(self) -> list[str]:
        """The reaches in stream order."""
        return [noted.reach for noted in self.survey.state.reaches]

    @property
    def conditions(self) -> list[str]:
        """The flow conditions: the survey's own, then those that only a recorded n names."""
        own = [one.condition for one in self.survey.state.conditions]
        return list({same_name_key(name): name for name in (*own, *self._recorded)}.values())

    @property
    def unread(self) -> list[str]:
        """The reaches that were not read yet, in stream order."""
        return [name for name in self.names if name not in self._rows]

    @property
    def two_ends(self) -> list[str]:
        """The reaches read so far that two people wrote to apart, their trails not united."""
        return [
            name
            for name, rows in self._rows.items()
            if any(finding.rule == "to-be-merged" for finding in rows[0].findings)
        ]

    def read(self, names: Sequence[str], within_s: float | None = None) -> int:
        """Read reaches again and return how many; stops after ``within_s`` seconds.

        At least one is read, so that whoever calls gets on.
        """
        order = {name: at for at, name in enumerate(self.names)}
        started = perf_counter()
        self._all_of = None
        for done, name in enumerate(names):
            if done and within_s is not None and perf_counter() - started > within_s:
                return done
            if name in order:
                self._rows[name] = rows_of_reach(self.survey, name, order[name])
                self._complete.pop(name, None)
                named = (row.condition.condition for row in self._rows[name] if row.condition)
                self._recorded |= dict.fromkeys(named)
        return len(names)

    def find_over_survey(self) -> None:
        """Let the rules over the whole survey say what they find in what was read."""
        self.take(self.found_over_survey(self.rows()))

    def rows(self) -> list[Row]:
        """Return the rows that were read, in stream order."""
        return [
            replace(row, order=order)
            for order, name in enumerate(self.names)
            for row in self._rows.get(name, [])
        ]

    @staticmethod
    def found_over_survey(rows: list[Row]) -> dict[str, list[Row]]:
        """Return the rows by reach with what the rules over a survey say; touches nothing."""
        found: dict[str, list[Row]] = {}
        for row in with_survey_findings(rows):
            found.setdefault(row.reach.reach, []).append(row)
        return found

    def take(self, found: dict[str, list[Row]]) -> None:
        """Show these rows from now on, until their reach is read again."""
        self._complete, self._all_of = found, None

    def lines(
        self, condition: str | None, *, filtered: str = "", weak_first: bool = False
    ) -> list[SurveyLine]:
        """Return what is to be shown, in stream order or the weakest first.

        Parameters
        ----------
        condition : str or None
            The flow condition that is shown; None where the survey has none yet.
        filtered : str
            Words that every line must hold.
        weak_first : bool
            Sort by stops, then asks, then the widest spread.
        """
        found = self._all(condition)
        if words := same_name_key(filtered).split():
            found = [line for line in found if line.matches(words)]
        if weak_first:
            found = sorted(found, key=lambda line: line.weakness, reverse=True)
        return found

    def counts(self, condition: str | None) -> Counts:
        """Return how many reaches are estimated in all their parts under a condition."""
        done: dict[str, bool] = {}
        for line in self._all(condition):
            if not line.apart:
                name = line.row.reach.reach
                done[name] = done.get(name, True) and line.row.estimate is not None
        return Counts(len(self.names), sum(done.values()))

    def _all(self, condition: str | None) -> list[SurveyLine]:
        if self._all_of is None or self._all_of[0] != condition:
            self._all_of = condition, list(self._built(condition))
        return self._all_of[1]

    def _built(self, condition: str | None) -> Iterator[SurveyLine]:
        for order, noted in enumerate(self.survey.state.reaches):
            rows = self._complete.get(noted.reach) or self._rows.get(noted.reach)
            if rows is None:
                yield SurveyLine(row=Row(order=order, reach=noted), read=False)
            else:
                yield from self._lines_of(rows, condition)

    def _lines_of(self, rows: Sequence[Row], condition: str | None) -> Iterator[SurveyLine]:
        wanted = same_name_key(condition or "")
        here = [
            SurveyLine(row=row)
            for row in rows
            if row.condition and same_name_key(row.condition.condition) == wanted
        ]
        yield from here or self._without_condition(rows, condition)

    def _without_condition(
        self, rows: Sequence[Row], condition: str | None
    ) -> Iterator[SurveyLine]:
        """Yield a reach's parts where there is no n to give under the condition shown."""
        row = rows[0]
        bare = Row(order=row.order, reach=row.reach, visit=row.visit, findings=_of_trail(row))
        known = self.survey.state.condition(condition) if condition else None
        parts = self._parts(rows)
        if not parts:
            yield SurveyLine(row=bare, apart="no part yet")
        for part in parts:
            says = "not asked here" if condition else "no flow condition yet"
            if known and known.bank == "in bank" and part.setting == "flood-plain":
                says = "no flow here in bank"
            yield SurveyLine(row=replace(bare, part=part), apart=says)

    def _parts(self, rows: Sequence[Row]) -> list[Part]:
        try:
            known = list(self.survey.reach_state(rows[0].reach.reach).parts)
        except RoughnessError:
            known = []
        return list(dict.fromkeys([*known, *(row.part for row in rows if row.part)]))


def _of_trail(row: Row) -> tuple[Finding, ...]:
    about = ("trail-unreadable", "trail-broken", "to-be-merged", "newer-lines")
    return tuple(finding for finding in row.findings if finding.rule in about)
