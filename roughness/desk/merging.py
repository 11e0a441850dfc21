"""Copies of a survey united: trails known by their first line, whatever their files are called.

Each trail is united as a whole or stays as it is. Reaches come before the survey's own
trail, so that the survey never names a reach that is not there yet. Copies are only read:
nobody's file is removed or changed but the survey's own trails.
"""

from collections.abc import Collection, Iterable, Iterator, Sequence
from dataclasses import dataclass, field
from pathlib import Path

from roughness.desk.copies import Copy, NotTaken, copies_in, copies_of, own_trails
from roughness.desk.folder import SurveyFolder
from roughness.desk.identity import known_person
from roughness.desk.merging_files import FilesTaken, take_files
from roughness.desk.recording import now
from roughness.desk.rows import rows_of_reach
from roughness.desk.whole_files import write_whole
from roughness.errors import BrokenTrailError, InputError, RecordError, RoughnessError
from roughness.findings.merge_conflict import RULE
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.trail.data import NotedReach
from roughness.trail.folding import fold_survey
from roughness.trail.kinds import read_data
from roughness.trail.lines import Line, hash_of
from roughness.trail.merging import MERGE, authored, file_bytes, hindrances, origin, united
from roughness.trail.naming import reach_trail, shown
from roughness.trail.reading import Trail, read_trail, verified
from roughness.trail.writing import save_torn


@dataclass(frozen=True, kw_only=True)
class United:
    """What became of one trail of the survey."""

    file: str
    new_lines: int
    """How many authored lines it did not hold before."""
    joined: bool
    """Whether a line was made that joins two ends."""
    is_new: bool = False
    """Whether the file was not there before."""


@dataclass(frozen=True, kw_only=True)
class Merged:
    """What `merge` did."""

    united: tuple[United, ...]
    """Trails that changed."""
    compared: int
    """How many copies were read and could be used, also where they brought nothing."""
    not_taken: tuple[NotTaken, ...]
    files: FilesTaken
    removable: tuple[str, ...]
    """Conflict copies inside the survey that hold nothing that the survey lacks."""
    repaired: int
    """How many torn tails were moved aside."""
    unlocked: bool
    """Whether the file system turned out to have no locks."""


@dataclass(frozen=True, kw_only=True)
class StandingConflict:
    """A conflict that somebody has to settle."""

    reach: str
    part: str
    condition: str
    says: str


def merge(survey: SurveyFolder, other: Path | None = None) -> Merged:
    """Unite the survey with another copy of it, and with the conflict copies inside it.

    Parameters
    ----------
    survey : SurveyFolder
        The survey that is written to.
    other : Path, optional
        Another copy of the survey's folder, or one trail.

    Raises
    ------
    InputError
        Where ``other`` is no copy of this survey.
    BrokenTrailError
        Where the survey's own trail does not hang together; nothing was changed.
    RecordError
        Where somebody else is writing, or the disk did not take it.
    """
    own = survey.trail()
    if faults := hindrances(own):
        raise BrokenTrailError(f"{faults[0]}; nothing was changed")
    _refuse_itself(survey, other)
    found = copies_in(other) if other else ((), ())
    inside = copies_of(survey)
    _refuse_another_survey(own, found[0])
    work = _Merging(survey, own)
    work.not_taken += [*found[1], *inside[1]]
    return work.done([*found[0], *inside[0]], other)


def conflict_copies(survey: SurveyFolder) -> tuple[Path, ...]:
    """Return the copies of trails inside the survey that hold what the survey lacks.

    These are what a synced folder makes where two people wrote at once; ``merge`` without
    another folder unites them. Nothing is written.
    """
    found, _ = copies_of(survey)
    mine = own_trails(survey)
    return tuple(copy.path for copy in found if not _holds(mine, copy.trail))


def standing_conflicts(survey: SurveyFolder) -> Iterator[StandingConflict]:
    """Yield what people said apart and nobody settled, in the order of the stream."""
    for noted in survey.state.reaches:
        try:
            told_apart = bool(survey.conflicts(noted.reach))
        except RoughnessError:
            continue
        for row in rows_of_reach(survey, noted.reach) if told_apart else ():
            for finding in row.findings:
                if finding.rule == RULE.key and row.part and row.condition:
                    yield StandingConflict(
                        reach=noted.reach,
                        part=row.part.part,
                        condition=row.condition.condition,
                        says=finding.says,
                    )


@dataclass
class _Merging:
    """One merge in the making."""

    survey: SurveyFolder
    own: Trail
    united: list[United] = field(default_factory=list)
    not_taken: list[NotTaken] = field(default_factory=list)
    repaired: int = 0
    unlocked: bool = False

    def done(self, copies: Sequence[Copy], other: Path | None) -> Merged:
        of_survey = [copy for copy in copies if copy.first == origin(self.own)]
        told = [line for copy in (self.own, *(c.trail for c in of_survey)) for line in copy.lines]
        together = self._survey_together(of_survey)
        of_survey = [copy for copy in of_survey if not self._was_refused(copy)]
        targets = {reach.first_line: reach for reach in _noted_reaches(together)}
        begun = {reach.first_line for reach in _noted_reaches(told)}
        of_reach = list(self._of_reaches(copies, targets.keys(), begun))
        for first_line, reach in targets.items():
            mine = [copy for copy in of_reach if copy.first == first_line]
            self._unite_reach(reach, mine, _noted_ends(told))
        if of_survey or self.own.to_be_merged or self.own.broken:
            self._unite(self.survey.path, origin(self.own), of_survey, frozenset())
        used = [copy for copy in (*of_survey, *of_reach) if not self._was_refused(copy)]
        mine_now = own_trails(self.survey)
        return Merged(
            united=tuple(self.united),
            compared=len(used),
            not_taken=tuple(self.not_taken),
            files=take_files(self.survey, other, mine_now) if other else FilesTaken(),
            removable=tuple(c.name for c in used if c.inside and _holds(mine_now, c.trail)),
            repaired=self.repaired,
            unlocked=self.unlocked,
        )

    def _survey_together(self, of_survey: Sequence[Copy]) -> Sequence[Line]:
        """Return the lines that the survey's own trail will have; refuse copies that clash."""
        together = united([self.own, *(copy.trail for copy in of_survey)])
        twice = _begun_twice(together)
        if twice is None:
            return together
        why = (
            f"{printable(twice)!r} was begun apart in both copies: in one of them take the"
            " reach back, begin it again under another name, and merge again"
        )
        self._refuse(of_survey, why)
        return self.own.lines

    def _of_reaches(
        self, copies: Iterable[Copy], targets: Collection[str], begun: Collection[str]
    ) -> Iterator[Copy]:
        """Yield the copies of reaches that the survey has; refuse those of others."""
        assert self.own.first
        survey = self.own.first.data.get("survey")
        for copy in copies:
            if copy.first in targets:
                yield copy
            elif copy.trail.is_of_reach:
                self._refuse([copy], _why_strange(copy, survey, begun))

    def _unite_reach(
        self, reach: NotedReach, copies: Sequence[Copy], noted: frozenset[str]
    ) -> None:
        try:
            path = reach_trail(self.survey.folder, reach.file)
        except RecordError as error:
            self._refuse(copies, str(error))
            return
        if copies or _needs_mending(path):
            self._unite(path, reach.first_line, copies, noted)

    def _unite(
        self, path: Path, first_line: str, copies: Sequence[Copy], noted: frozenset[str]
    ) -> None:
        """Unite one trail under the lock, or say why it stays as it is."""
        with self.survey.lock.held(known_person() or MERGE, now()) as locked:
            self.unlocked |= not locked
            before = read_trail(path) if path.exists() else Trail(shown(path))
            why = _hindrance(before, first_line) if path.exists() else None
            if why:
                self.not_taken.append(NotTaken(before.file, why))
                self._refuse(copies, f"it could not be united with {before.file}")
                return
            lines = united([before, *(copy.trail for copy in copies)], noted)
            content = file_bytes(lines)
            if hash_of(content) == before.digest:
                return
            self._write(path, before, content)
        known = before.by_hash
        new = [line for line in lines if line.hash not in known]
        self.united.append(
            United(
                file=shown(path),
                new_lines=sum(line.kind != MERGE for line in new),
                joined=any(line.kind == MERGE for line in new),
                is_new=not before.lines,
            )
        )

    def _write(self, path: Path, before: Trail, content: bytes) -> None:
        if before.torn:
            save_torn(path, before, now())
            self.repaired += 1
        path.parent.mkdir(exist_ok=True)
        write_whole(path, content)

    def _refuse(self, copies: Iterable[Copy], why: str) -> None:
        self.not_taken += [NotTaken(copy.name, why) for copy in copies]

    def _was_refused(self, copy: Copy) -> bool:
        return any(refused.file == copy.name for refused in self.not_taken)


def _refuse_itself(survey: SurveyFolder, other: Path | None) -> None:
    if other is None:
        return
    here, there = survey.folder.resolve(), other.resolve()
    if there == here or there in {path.resolve() for path in own_trails(survey)}:
        raise InputError(
            "it is the survey itself",
            where=printable(str(other)),
            wanted="name another copy of it, or none to unite the copies that lie inside",
        )


def _refuse_another_survey(own: Trail, copies: Iterable[Copy]) -> None:
    for copy in copies:
        if not copy.trail.is_of_reach and copy.first != origin(own):
            raise InputError(
                "it is another survey, not a copy of this one",
                where=copy.name,
                wanted="a copy begins with the same first line",
            )


def _why_strange(copy: Copy, survey: object, begun: Collection[str]) -> str:
    assert copy.trail.first
    if copy.trail.first.data.get("survey") != survey:
        return "it belongs to another survey"
    if copy.first in begun:
        return "its reach is not in the survey before survey.jsonl can be united"
    return (
        "the survey notes no reach that begins like this; merge the whole folder that it comes from"
    )


def _hindrance(trail: Trail, first_line: str) -> str | None:
    if faults := hindrances(trail):
        return f"line {faults[0].line}: {faults[0].what}"
    if origin(trail) != first_line:
        return "another trail has this file name"
    return None


def _needs_mending(path: Path) -> bool:
    try:
        trail = read_trail(path)
    except RoughnessError:
        return False  # missing or unreadable, which `check` says
    return trail.to_be_merged or (bool(trail.broken) and not hindrances(trail))


def _noted_ends(lines: Iterable[Line]) -> frozenset[str]:
    """Return every end of a reach's trail that the survey ever noted."""
    return frozenset(
        end
        for line in lines
        if line.kind == "heads" and isinstance(line.data.get("heads"), dict)
        for end in line.data["heads"].values()
        if isinstance(end, str)
    )


def _noted_reaches(lines: Iterable[Line]) -> Iterator[NotedReach]:
    """Yield the reaches that were ever begun; also one that was taken back keeps its trail."""
    for line in lines:
        if line.kind == "reach":
            try:
                yield read_data(False, line.kind, line.data, keep_unknown=True)
            except InputError:
                continue


def _begun_twice(lines: Iterable[Line]) -> str | None:
    """Return the name of a reach that stands with two different first lines."""
    state = fold_survey(verified(file_bytes(lines), "survey.jsonl"))
    begun: dict[str, str] = {}
    for reach in _noted_reaches(state.effective):
        first_line = begun.setdefault(same_name_key(reach.reach), reach.first_line)
        if first_line != reach.first_line:
            return reach.reach
    return None


def _holds(mine: dict[Path, Trail], copy: Trail) -> bool:
    first = origin(copy)
    return any(
        authored(copy) <= trail.by_hash.keys()
        for trail in mine.values()
        if trail.lines and origin(trail) == first
    )
