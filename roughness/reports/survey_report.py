"""The report of a survey: one page with every n, why it is so, and who stands for it."""

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from datetime import datetime
from itertools import groupby
from pathlib import PurePath
from typing import Final

from roughness.custody.status import ACCEPTED
from roughness.desk.agreement import agreement
from roughness.desk.folder import SurveyFolder
from roughness.desk.rows import Row
from roughness.desk.signatures import (
    UNKNOWN,
    UNVERIFIED,
    VERIFIED,
    WRONG,
    Verdict,
    signatures,
)
from roughness.desk.weakness import order
from roughness.errors import RoughnessError
from roughness.handbook import FactorTable, Handbook
from roughness.quantities.foreign_text import same_name_key
from roughness.reasoning.cautions import CAUTIONS, IN_ONE_LINE
from roughness.reports.drawings import Axis, axis_over
from roughness.reports.pages import page
from roughness.reports.reach_sections import PlaceBlock, ReachSection, section_of
from roughness.survey.words import Setting, factors_of
from roughness.trail.lines import Line

# In words of the page's own: a sentence with the path of somebody's list goes to no reader.
_FOUND: Final[dict[Verdict, str]] = {
    VERIFIED: "verified by the list of keys of whoever made this page",
    UNKNOWN: "it fits, but the list of keys of whoever made this page does not know the key",
    UNVERIFIED: "not verified when this page was made",
    WRONG: "WRONG, it does not fit what it stands for; roughness check says why",
}


@dataclass(frozen=True, kw_only=True)
class HandbookTold:
    """A handbook that values come from, with the tables that were used."""

    book: Handbook
    tables: tuple[tuple[Setting, FactorTable], ...]


@dataclass(frozen=True, kw_only=True)
class Facts:
    """What stands at the top of the report."""

    estimated_by: tuple[str, ...]
    reviewed_by: tuple[str, ...]
    visited: tuple[str, ...]
    """Dates, or names of visits without one."""
    first: str
    """Time of the first line of any trail."""
    latest: str
    """Time of the last one that says something of the survey: the state that is told."""
    accepted: int
    rows: int


def survey_report(
    survey: SurveyFolder, found: Sequence[Row], *, with_position: bool = True
) -> bytes:
    """Return the report as a page of its own; the same state gives the same bytes.

    Parameters
    ----------
    survey : SurveyFolder
        The survey.
    found : sequence of Row
        Its rows, reaches in stream order (:func:`roughness.desk.rows.rows`).
    with_position : bool
        Whether the page says where reaches and photos lie. Small pictures never carry it.
    """
    axis = axis_over(found)
    sections = tuple(_sections(survey, found, axis, with_position=with_position))
    return page(
        "report.html",
        survey=survey.state,
        facts=_facts(survey, found),
        axis=axis,
        sections=sections,
        weak=_weak(survey, found, sections),
        agreement=agreement(survey, found),
        handbooks=_handbooks(found),
        with_position=with_position,
        cautions=CAUTIONS,
        caution=IN_ONE_LINE,
    )


def _sections(
    survey: SurveyFolder, found: Sequence[Row], axis: Axis, *, with_position: bool
) -> Iterator[ReachSection]:
    signed = _signed(survey, found)
    for number, (_, of_reach) in enumerate(groupby(found, key=lambda row: row.order), start=1):
        listed = list(of_reach)
        yield section_of(
            survey,
            number,
            listed,
            axis,
            with_position=with_position,
            signatures=signed.get(survey.reach_path(listed[0].reach.reach).name, {}),
        )


def _signed(survey: SurveyFolder, found: Sequence[Row]) -> dict[str, dict[int, str]]:
    """Return what is found of each signature, by the trail's file and the line."""
    told: dict[str, dict[int, str]] = {}
    if any(one.accept.signature for row in found for one in row.review.acceptances):
        for signature in signatures(survey):
            told.setdefault(PurePath(signature.file).name, {})[signature.line] = _FOUND[
                signature.verdict
            ]
    return told


def _weak(
    survey: SurveyFolder, found: Sequence[Row], sections: Iterable[ReachSection]
) -> tuple[PlaceBlock, ...]:
    """Return the blocks where something is open, the weakest first."""
    blocks = {id(block.row): block for section in sections for block in section.places}
    ordered = (blocks[id(row)] for row in order(survey, found))
    return tuple(block for block in ordered if _is_open(block.row))


def _is_open(row: Row) -> bool:
    asks = any(finding.level != "tell" for finding in row.open)
    return bool(asks or row.review.open_questions or row.estimate is None)


def _handbooks(found: Sequence[Row]) -> tuple[HandbookTold, ...]:
    places = [row.place for row in found if row.place and row.place.state]
    books = {place.handbook.sha256: place.handbook for place in places}
    settings = {(place.handbook.sha256, place.part.setting) for place in places}
    return tuple(
        HandbookTold(
            book=book,
            tables=tuple(
                (setting, book.table(setting, factor))
                for setting in ("channel", "flood-plain")
                if (book.sha256, setting) in settings
                for factor in factors_of(setting)
            ),
        )
        for book in sorted(books.values(), key=lambda book: (book.key, book.sha256))
    )


def _facts(survey: SurveyFolder, found: Sequence[Row]) -> Facts:
    times = [line.at for line in _lines(survey)]
    visits = (row.visit for row in found if row.visit)
    return Facts(
        estimated_by=_each(row.estimated_by for row in found),
        reviewed_by=_each(row.reviewed_by for row in found),
        visited=tuple(sorted(_each(visit.on or visit.visit for visit in visits))),
        first=min(times, default="", key=_moment),
        latest=max(times, default="", key=_moment),
        accepted=sum(row.status == ACCEPTED for row in found),
        rows=len(found),
    )


def _lines(survey: SurveyFolder) -> Iterator[Line]:
    # That a report was made is noted too, and must not change the next one.
    yield from (line for line in survey.trail().lines if line.kind != "heads")
    for noted in survey.state.reaches:
        try:
            yield from survey.reach_trail(noted.reach).lines
        except RoughnessError:
            continue  # the reach's own section says why


def _moment(at: str) -> tuple[datetime, str]:
    """Return what times are ordered by, whatever their offsets."""
    try:
        return datetime.fromisoformat(at.upper()), at
    except ValueError:  # the second 60 is a time of RFC 3339 that has no datetime
        return datetime.fromisoformat(at[:17].upper() + "59" + at[19:].upper()), at


def _each(names: Iterable[str | None]) -> tuple[str, ...]:
    return tuple({same_name_key(name): name for name in names if name}.values())
