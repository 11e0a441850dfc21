"""Whether a survey hangs together: trails, noted heads, handbooks, evidence, findings."""

import re
from collections.abc import Iterator
from dataclasses import dataclass

from roughness.desk.evidence_lists import evidence_faults, unlisted_evidence
from roughness.desk.folder import SurveyFolder
from roughness.desk.proving import faults_of_acceptances, faults_of_order
from roughness.desk.rows import Row, rows
from roughness.desk.signatures import WRONG, SignatureFound, signatures
from roughness.errors import HandbookError, RoughnessError
from roughness.handbook.parsing import hash_of
from roughness.shelf.editions import shipped_editions
from roughness.shelf.folders import contents
from roughness.shelf.handbooks import unusable_handbooks
from roughness.trail.data import NotedReach
from roughness.trail.reading import Fault, Trail


@dataclass(frozen=True)
class Checked:
    """What `check` found."""

    broken: tuple[Fault, ...]
    """Line 0 where a whole file is meant."""
    torn: tuple[str, ...]
    """Files whose last line was cut off; the next writer moves the rest aside."""
    rows: tuple[Row, ...]
    unlisted: tuple[str, ...] = ()
    """Files in the evidence folder that no trail names."""
    signatures: tuple[SignatureFound, ...] = ()
    """What is known of each signed acceptance; what is wrong stands in ``broken`` too."""

    @property
    def intact(self) -> bool:
        """Whether everything that was recorded is there and unchanged."""
        return not self.broken

    @property
    def passed(self) -> bool:
        """Whether nothing is broken and no ``stop`` stands."""
        return self.intact and not any(row.stands_stopped for row in self.rows)


def check(survey: SurveyFolder) -> Checked:
    """Verify all trails, what ties them together, handbooks and evidence; writes nothing."""
    trails = list(_trails(survey))
    faults = list(faults_of_survey(survey))
    faults += [fault for noted, trail, _ in trails if noted for fault in _of_trail(trail)]
    faults += [fault for noted, trail, why in trails for fault in _tied(survey, noted, trail, why)]
    faults += _of_handbooks(survey)
    faults += evidence_faults(survey)
    listed = rows(survey)
    faults += faults_of_acceptances(survey, listed)
    signed = signatures(survey)
    faults += [Fault(one.file, one.line, one.says) for one in signed if one.verdict == WRONG]
    torn = tuple(trail.file for _, trail, _ in trails if trail.torn)
    found = tuple(dict.fromkeys(faults))
    return Checked(found, torn, tuple(listed), unlisted_evidence(survey), signed)


def faults_of_survey(survey: SurveyFolder) -> tuple[Fault, ...]:
    """Return what is wrong with the survey's own trail: then reaches may be missing."""
    trail = survey.trail()
    if not trail.lines and not trail.broken:
        return (Fault(trail.file, 0, "it holds no whole line"),)
    # Two ends of a reach's trail are a finding of that reach; the survey's own has no row.
    ends = (Fault(trail.file, 0, "two people wrote apart: it is to be merged"),)
    return (*_of_trail(trail), *(ends if trail.to_be_merged else ()))


def _trails(survey: SurveyFolder) -> Iterator[tuple[NotedReach | None, Trail, str]]:
    yield None, survey.trail(), ""
    for noted in survey.state.reaches:
        try:
            yield noted, survey.reach_trail(noted.reach), ""
        except RoughnessError as error:
            yield noted, Trail(f"reaches/{noted.file}.jsonl"), str(error)


def _of_trail(trail: Trail) -> Iterator[Fault]:
    yield from trail.broken
    yield from faults_of_order(trail)
    if trail.newer:
        yield trail.newer


def _tied(
    survey: SurveyFolder, noted: NotedReach | None, trail: Trail, why: str
) -> Iterator[Fault]:
    """Compare a reach's trail with what the survey's own trail noted of it."""
    if noted is None:
        yield from survey.state.unusable
        return
    if why:
        yield Fault(trail.file, 0, why.removeprefix(f"{trail.file} "))
        return
    if noted.first_line not in trail.by_hash:
        yield Fault(trail.file, 1, "it is not the trail that the survey began for this reach")
    elif trail.first and trail.first.data.get("survey") != survey.state.survey:
        yield Fault(trail.file, 1, "it belongs to another survey")
    for line, heads in survey.state.heads:
        head = heads.heads.get(noted.reach)
        if head is not None and head not in trail.by_hash:
            what = f"lines missing (truncated or not yet synced): the {heads.why} of {line.at}"
            yield Fault(trail.file, 0, f"{what} noted a line that is not there")
    yield from survey.reach_state(noted.reach).unusable


def _of_file(error: HandbookError) -> Fault:
    """Tell the file, its line and the place within it apart: a program may open the file."""
    file, _, inside = (error.where or "handbooks").partition(": ")
    line = re.match(r"line (\d+)", inside)
    what = f"{error.what}; {error.wanted}"
    return Fault(file, int(line[1]) if line else 0, f"{inside}: {what}" if inside else what)


def _of_handbooks(survey: SurveyFolder) -> Iterator[Fault]:
    try:
        folder = survey.handbooks
    except RoughnessError as error:
        yield Fault("handbooks", 0, str(error).removeprefix("handbooks "))
        return
    yield from map(_of_file, unusable_handbooks(folder))
    files = contents(folder).files
    known = {
        key: {hash_of(path.read_bytes())} | shipped_editions().get(key, frozenset())
        for key, path in files.items()
    }
    for row in rows(survey):
        if row.place is None or row.place.state is None:
            continue
        served = row.place.handbook
        editions = known.get(served.key, set()) | {served.sha256}
        for chosen in row.place.state.choices.values():
            for factor, entry in chosen.items():
                if entry.handbook_sha256 not in editions:
                    here = files.get(served.key)
                    yield Fault(
                        f"handbooks/{here.name}" if here else "handbooks",
                        0,
                        f"{factor} of {row.place.part.part} in {row.reach.reach} was chosen from"
                        f" another edition of {served.key}, which is not here",
                    )
