"""The places of a survey as a review goes through them: the weakest first, read again on change."""

from collections.abc import Sequence
from dataclasses import dataclass, field

from roughness.custody.status import STATUSES
from roughness.desk.folder import SurveyFolder
from roughness.desk.rows import Row, rows_of_reach, with_survey_findings
from roughness.desk.weakness import Weakness, order, weakness
from roughness.quantities.foreign_text import same_name_key
from roughness.screens.file_watch import FileWatch

Key = tuple[str, str, str]
"""Reach, part and flow condition; empty where there is none yet."""


def key_of(row: Row) -> Key:
    """Return what a row is known by while it changes."""
    return (
        row.reach.reach,
        row.part.part if row.part else "",
        row.condition.condition if row.condition else "",
    )


@dataclass
class ReviewPlaces:
    """The rows of a survey in order of weakness.

    Parameters
    ----------
    survey : SurveyFolder
        The survey; read when :meth:`read` is called.
    """

    survey: SurveyFolder
    _bare: dict[str, list[Row]] = field(default_factory=dict)
    """Rows by reach, without what the rules over the survey say."""
    _rows: dict[Key, Row] = field(default_factory=dict)
    _weakness: dict[Key, Weakness] = field(default_factory=dict)

    def __post_init__(self) -> None:
        self._watch = FileWatch(self.survey)

    def read(self, reaches: Sequence[str] | None = None) -> None:
        """Read some reaches again, or all of them, and find over the survey."""
        names = [noted.reach for noted in self.survey.state.reaches]
        wanted = {same_name_key(name) for name in (names if reaches is None else reaches)}
        self._bare = {
            name: rows_of_reach(self.survey, name, at)
            if same_name_key(name) in wanted or name not in self._bare
            else self._bare[name]
            for at, name in enumerate(names)
        }
        found = with_survey_findings([row for rows in self._bare.values() for row in rows])
        self._rows = {key_of(row): row for row in order(self.survey, found)}
        self._weakness = {key: weakness(self.survey, row) for key, row in self._rows.items()}

    def look(self) -> bool:
        """Read again what changed on disk; returns whether anything did."""
        changed = self._watch.changed()
        if changed is None:
            return False
        self.read(changed)
        return True

    @property
    def rows(self) -> list[Row]:
        """All rows, the weakest first, what is accepted and holds last."""
        return list(self._rows.values())

    @property
    def keys(self) -> list[Key]:
        """What the rows are known by, in the same order."""
        return list(self._rows)

    def row(self, key: Key) -> Row | None:
        """Return a row as it was read last; None where it is gone."""
        return self._rows.get(key)

    def weakness(self, row: Row) -> Weakness:
        """Return the score of a row with its parts."""
        known = self._weakness.get(key_of(row))
        return known if known is not None else weakness(self.survey, row)

    @property
    def has_opinions(self) -> bool:
        """Whether anybody gave a second opinion anywhere."""
        return any(row.review.opinions for row in self._rows.values())

    def counts(self) -> dict[str, int]:
        """Return how many rows stand where, what was accepted or changed since first."""
        found = [row.status for row in self._rows.values()]
        return {status: found.count(status) for status in STATUSES[::-1] if status in found}
