"""The JSON documents that commands print, as dataclasses; their schema is published."""

from dataclasses import dataclass

from roughness.desk.checking import Checked
from roughness.desk.copies import NotTaken
from roughness.desk.merging import StandingConflict, United
from roughness.desk.rows import Row
from roughness.desk.signatures import SignatureFound
from roughness.findings import Finding, Level
from roughness.quantities.ranges import Range
from roughness.survey.words import Factor


@dataclass(frozen=True, kw_only=True)
class Listed:
    """One part of one reach under one flow condition."""

    reach: str
    part: str | None
    """Null where the reach has no part yet."""
    condition: str | None
    n: Range | None
    """Null while a factor is missing."""
    status: str
    open_findings: tuple[Finding, ...]
    """Those that nobody answered."""


@dataclass(frozen=True, kw_only=True)
class Broken:
    """Something that does not hang together; line 0 where the whole file is meant."""

    file: str
    line: int
    what: str


@dataclass(frozen=True, kw_only=True)
class PlacedFinding:
    """A finding and what it is about."""

    reach: str
    part: str | None
    condition: str | None
    level: Level
    rule: str
    factor: Factor | None
    says: str
    answered: str | None
    """What was answered to it; null where nobody did."""


@dataclass(frozen=True, kw_only=True)
class CheckDocument:
    """What ``roughness check --json`` prints."""

    intact: bool
    broken: tuple[Broken, ...]
    findings: tuple[PlacedFinding, ...]
    signatures: tuple[SignatureFound, ...]
    """One of each signed acceptance; those that are wrong stand in ``broken`` too."""


@dataclass(frozen=True, kw_only=True)
class MergeDocument:
    """What ``roughness merge --json`` prints."""

    united: tuple[United, ...]
    """Trails that changed."""
    copied: tuple[str, ...]
    """Evidence and handbooks that came along."""
    left: tuple[str, ...]
    """Evidence and handbooks that were not copied, and why."""
    not_taken: tuple[NotTaken, ...]
    """Trails that could not be united, and why."""
    removable: tuple[str, ...]
    """Conflict copies inside the survey that hold nothing that it lacks."""
    conflicts: tuple[StandingConflict, ...]


def listed(row: Row) -> Listed:
    """Return a row as ``roughness list --json`` prints it."""
    return Listed(
        reach=row.reach.reach,
        part=row.part.part if row.part else None,
        condition=row.condition.condition if row.condition else None,
        n=row.estimate.n if row.estimate else None,
        status=row.status,
        open_findings=row.open,
    )


def check_document(checked: Checked) -> CheckDocument:
    """Return what was checked, findings worst first."""
    placed = [
        PlacedFinding(
            reach=row.reach.reach,
            part=row.part.part if row.part else None,
            condition=row.condition.condition if row.condition else None,
            level=finding.level,
            rule=finding.rule,
            factor=finding.factor,
            says=finding.says,
            answered=answer.said.text if (answer := row.answer_to(finding)) else None,
        )
        for row in checked.rows
        for finding in row.findings
    ]
    levels = ("stop", "ask", "tell")
    return CheckDocument(
        intact=checked.intact,
        broken=tuple(Broken(file=f.file, line=f.line, what=f.what) for f in checked.broken),
        findings=tuple(sorted(placed, key=lambda one: levels.index(one.level))),
        signatures=checked.signatures,
    )
