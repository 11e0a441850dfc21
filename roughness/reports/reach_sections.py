"""What the report says of one reach: its parts under each condition, photos, timeline."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

from roughness.desk.agreement import Beside, side_by_side
from roughness.desk.folder import SurveyFolder
from roughness.desk.history import Change, Told, since_acceptance, timeline
from roughness.desk.rows import Row
from roughness.errors import RoughnessError
from roughness.findings import Finding, rule_table
from roughness.quantities.printing import show_value
from roughness.reports.arithmetic import Sum, sums_of, together
from roughness.reports.drawings import Axis, Bar, Ladder, bar_of, ladders_of
from roughness.reports.ledger import LedgerLine, ledger_of
from roughness.reports.photographs import Photograph, photographs_of
from roughness.survey.stream import Reach, Visit
from roughness.trail.review_state import FindingAnswer, SecondOpinion

_SOURCES: Mapping[str, str] = {rule.key: rule.source for rule in rule_table()}
_OF_THE_RECORD = "the record itself"


@dataclass(frozen=True, kw_only=True)
class FindingTold:
    """A finding with where its rule comes from and what was answered."""

    finding: Finding
    source: str
    answer: FindingAnswer | None


@dataclass(frozen=True, kw_only=True)
class OpinionTold:
    """A second estimate, side by side with the first."""

    opinion: SecondOpinion
    beside: Beside | None
    """None where one of the two cannot be computed now."""


@dataclass(frozen=True, kw_only=True)
class PlaceBlock:
    """One part of a reach under one flow condition, whole."""

    anchor: str
    row: Row
    ledger: tuple[LedgerLine, ...]
    sums: tuple[Sum, ...]
    together: Sum | None
    ladders: tuple[Ladder, ...]
    bar: Bar | None
    findings: tuple[FindingTold, ...]
    opinions: tuple[OpinionTold, ...]
    changes: tuple[Change, ...]
    """What was said since the acceptance."""
    signatures: Mapping[int, str]
    """What was found of signed acceptances of the reach, by the number of their line."""

    @property
    def opened(self) -> str:
        """What is open, counted: ``1 stop, 2 ask, 1 question``; empty where nothing is."""
        found = [finding.level for finding in self.row.open]
        counts = {level: found.count(level) for level in ("stop", "ask")}
        counts["question"] = len(self.row.review.open_questions)
        return ", ".join(f"{count} {what}" for what, count in counts.items() if count)


@dataclass(frozen=True, kw_only=True)
class ReachSection:
    """One reach."""

    anchor: str
    reach: Reach
    stretch: str
    position: str | None
    """Longitude and latitude of its points, unless positions are left out."""
    head: str | None
    visits: tuple[Visit, ...]
    places: tuple[PlaceBlock, ...]
    photographs: tuple[Photograph, ...]
    timeline: tuple[Told, ...]
    fault: str = ""
    """Why its trail cannot be read."""


def section_of(
    survey: SurveyFolder,
    number: int,
    found: Sequence[Row],
    axis: Axis,
    *,
    with_position: bool,
    signatures: Mapping[int, str],
) -> ReachSection:
    """Return the section of one reach from its rows; a trail that cannot be read says so.

    Parameters
    ----------
    survey, number, found, axis
        The survey, which section it is, the rows of the reach, the axis of all bars.
    with_position : bool
        Whether it says where reach and photos lie.
    signatures : mapping
        What was found of signed acceptances, by the number of their line in the trail.
    """
    first = found[0]
    anchor, name = f"reach-{number}", first.reach.reach
    try:
        visits = survey.reach_state(name).visits
        photographs = photographs_of(survey, name, with_position=with_position)
        told, fault = tuple(timeline(survey, name)), ""
    except RoughnessError as error:
        visits, photographs, told, fault = (), (), (), str(error)
    return ReachSection(
        anchor=anchor,
        reach=first.reach,
        stretch=stretch(first.reach, survey.state.described.length_unit),
        position=_position(first.reach) if with_position else None,
        head=first.trail_head,
        visits=visits,
        places=tuple(
            _block(survey, f"{anchor}-{at}", row, photographs, axis, signatures)
            for at, row in enumerate(found, start=1)
        ),
        photographs=photographs,
        timeline=told,
        fault=fault,
    )


def _block(
    survey: SurveyFolder,
    anchor: str,
    row: Row,
    photographs: Sequence[Photograph],
    axis: Axis,
    signatures: Mapping[int, str],
) -> PlaceBlock:
    estimate = row.estimate
    return PlaceBlock(
        anchor=anchor,
        row=row,
        ledger=ledger_of(row, photographs),
        sums=sums_of(estimate, row.part.setting) if estimate and row.part else (),
        together=together(estimate) if estimate else None,
        ladders=ladders_of(row),
        bar=bar_of(row, axis),
        findings=tuple(
            FindingTold(
                finding=finding,
                source=_SOURCES.get(finding.rule, _OF_THE_RECORD),
                answer=row.answer_to(finding),
            )
            for finding in row.findings
        ),
        opinions=tuple(_opinions(survey, row)),
        signatures=signatures,
        changes=tuple(since_acceptance(survey, row.place)) if row.place else (),
    )


def _opinions(survey: SurveyFolder, row: Row) -> Iterator[OpinionTold]:
    pairs = side_by_side(survey, row.place) if row.place and row.review.opinions else ()
    by_line = {pair.line: pair for pair in pairs}
    for one in row.review.opinion_of_each:
        yield OpinionTold(opinion=one, beside=by_line.get(one.line.hash))


def stretch(reach: Reach, unit: str | None) -> str:
    """Print the distances of a reach along the stream: ``120 to 480 m``; empty where unknown."""
    ends = [show_value(end) for end in (reach.reach_from, reach.reach_to) if end is not None]
    if not ends:
        return ""
    return f"{' to '.join(ends)} {unit or '(unit not said)'}"


def _position(reach: Reach) -> str | None:
    points = (f"{longitude:.5f} {latitude:.5f}" for longitude, latitude in reach.position or ())
    return ", ".join(points) or None
