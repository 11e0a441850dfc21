"""One reach of a survey, whole: as text and as a JSON document."""

from collections.abc import Iterator, Sequence
from dataclasses import asdict
from typing import Any

from roughness.commands.lengths import show_stretch
from roughness.commands.place_text import place_lines, question_in_words
from roughness.commands.plain_tables import wrapped
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place
from roughness.desk.rows import Row
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_value
from roughness.trail.lines import Line
from roughness.trail.review_state import Asked
from roughness.trail.telling import describe_line

_SHORT_HASH = 12


def reach_lines(
    survey: SurveyFolder,
    name: str,
    found: Sequence[Row],
    units: str | None = None,
    *,
    with_trail: bool = False,
) -> Iterator[str]:
    """Tell a reach: each part and condition, and where wanted every line of its trail."""
    reach = found[0].reach
    yield from wrapped(show_stretch(reach, survey.state.described.length_unit, units), rest="  ")
    if reach.slope is not None:
        yield f"  slope {show_value(reach.slope)}"
    if reach.note:
        yield from wrapped(f"note: {printable(reach.note)}", "  ", "    ")
    for row in found:
        yield ""
        yield from place_lines(row, units)
    if with_trail:
        yield ""
        yield "Trail:"
        yield from _trail_lines(survey, name)


def _trail_lines(survey: SurveyFolder, name: str) -> Iterator[str]:
    gone = survey.reach_state(name).withdrawn
    trail = survey.reach_trail(name)
    for line in trail.lines:
        mark = " (withdrawn)" if line.hash in gone else ""
        who = f"{line.hash[:_SHORT_HASH]} {line.at} {printable(line.by)}"
        yield from wrapped(who, f"{line.number:>4} ")
        yield from wrapped(f"{describe_line(line)}{mark}", "     ", "       ")
    if trail.torn:
        yield f"     {len(trail.torn)} bytes after the last whole line (never said to be kept)"


def reach_document(
    survey: SurveyFolder, name: str, found: Sequence[Row], *, with_trail: bool = False
) -> dict[str, Any]:
    """Return the same for a program."""
    document: dict[str, Any] = {"reach": name, "places": [_place(row) for row in found]}
    if with_trail:
        gone = survey.reach_state(name).withdrawn
        document["trail"] = [_line(line, gone) for line in survey.reach_trail(name).lines]
    return document


def _place(row: Row) -> dict[str, Any]:
    place, adopted = row.place, row.adopted
    return {
        "part": row.part.part if row.part else None,
        "condition": row.condition.condition if row.condition else None,
        "status": row.status,
        "reviewed_by": row.reviewed_by,
        "reviewed_at": row.reviewed_at,
        "questions": [_question(asked) for asked in row.review.questions],
        "estimate": row.estimate.as_document() if row.estimate else None,
        "adopted": adopted
        and {
            "n": adopted.n,
            "low": adopted.low,
            "high": adopted.high,
            "reason": adopted.reason,
            "by": adopted.line.by,
            "at": adopted.line.at,
        },
        "choices": _choices(place) if place else [],
        "missing": [question_in_words(question) for question in place.missing] if place else [],
        "findings": [_finding(row, finding) for finding in row.findings],
    }


def _finding(row: Row, finding: Finding) -> dict[str, Any]:
    answer = row.answer_to(finding)
    return asdict(finding) | {"answered": answer.said.text if answer else None}


def _question(asked: Asked) -> dict[str, Any]:
    return {
        "hash": asked.line.hash,
        "by": asked.line.by,
        "at": asked.line.at,
        "factor": asked.question.factor,
        "segment": asked.question.segment,
        "follows": asked.question.follows,
        "text": asked.question.text,
        "answers": [
            {"by": one.line.by, "at": one.line.at, "text": one.answer.text} for one in asked.answers
        ],
    }


def _choices(place: Place) -> list[dict[str, Any]]:
    return [
        {
            "segment": segment,
            "factor": factor,
            "choice": {k: v for k, v in asdict(standing.choice).items() if v is not None},
            "by": standing.by,
            "at": standing.at,
            "carried_from": asdict(standing.carried_from) if standing.carried_from else None,
            "inherited_from": standing.inherited_from,
        }
        for segment, factor in place.questions
        if (standing := place.at(segment, factor))
    ]


def _line(line: Line, gone: frozenset[str]) -> dict[str, Any]:
    return {
        "line": line.number,
        "hash": line.hash,
        "at": line.at,
        "by": line.by,
        "kind": line.kind,
        "says": describe_line(line),
        "withdrawn": line.hash in gone,
    }
