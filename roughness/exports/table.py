"""The table of n as values: one row for each reach, part and flow condition."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from roughness import __version__
from roughness.desk.folder import SurveyFolder
from roughness.desk.places import Place
from roughness.desk.rows import Row
from roughness.exports.columns import COLUMNS
from roughness.reasoning.cautions import CAUTIONS
from roughness.survey.stream import Visit
from roughness.survey.words import FACTORS, Factor

Cell = str | float | None
"""None where the value is not known."""


@dataclass(frozen=True)
class Table:
    """What every format writes: what it is about, and rows by column name."""

    about: Mapping[str, Any]
    rows: tuple[Mapping[str, Cell], ...]


def table_of(survey: SurveyFolder, found: Sequence[Row]) -> Table:
    """Return rows of a survey as a table; the same survey gives the same table."""
    return Table(_about(survey, found), tuple(_cells(survey, row) for row in found))


def _about(survey: SurveyFolder, found: Sequence[Row]) -> dict[str, Any]:
    state = survey.state
    used = {row.place.handbook.sha256: row.place.handbook for row in found if row.place}
    return {
        "survey": state.name,
        "stream": state.described.stream,
        "length_unit": state.described.length_unit,
        "distances_grow": state.described.grows,
        "made_with": f"roughness {__version__}",
        "cautions": list(CAUTIONS),
        "handbooks": [
            {"key": book.key, "title": book.title, "year": book.year, "sha256": book.sha256}
            for book in sorted(used.values(), key=lambda book: (book.key, book.sha256))
        ],
        "columns": [
            {"name": column.name, "type": column.type, "description": column.description}
            for column in COLUMNS
        ],
    }


def _cells(survey: SurveyFolder, row: Row) -> dict[str, Cell]:
    cells: dict[str, Cell] = {
        "survey": survey.state.name,
        "stream": survey.state.described.stream,
        "reach": row.reach.reach,
        "from": row.reach.reach_from,
        "to": row.reach.reach_to,
        "status": row.status,
        "visited": _visited(row.visit),
        "open_findings": " ".join(
            dict.fromkeys(f"{finding.level}:{finding.rule}" for finding in row.open)
        ),
        "trail_head": row.trail_head,
    }
    cells |= _of_place(row) | _of_n(row)
    if row.place:
        for factor in FACTORS:
            cells |= _of_factor(row, row.place, factor)
    # A text without a sign and an unknown one are the same in a table.
    return {column.name: _known(cells.get(column.name)) for column in COLUMNS}


def _known(cell: Cell) -> Cell:
    return None if cell == "" else cell


def _visited(visit: Visit | None) -> str | None:
    return (visit.on or visit.visit) if visit else None


def _of_place(row: Row) -> dict[str, Cell]:
    cells: dict[str, Cell] = {}
    if row.part and row.condition:
        cells |= {
            "part": row.part.part,
            "setting": row.part.setting,
            "part_from": row.part.part_from,
            "part_to": row.part.part_to,
            "condition": row.condition.condition,
            "growth": row.condition.growth,
        }
    if row.place and row.place.state:
        handbook = row.place.handbook
        cells |= {"handbook": handbook.key, "handbook_sha256": handbook.sha256}
    return cells


def _of_n(row: Row) -> dict[str, Cell]:
    cells: dict[str, Cell] = {
        "n_adopted": row.n_adopted,
        "adopted_reason": row.adopted.reason if row.adopted else None,
        "estimated_by": row.estimated_by,
        "estimated_at": row.estimated_at,
        "reviewed_by": row.reviewed_by,
        "reviewed_at": row.reviewed_at,
    }
    if row.estimate:
        n, spread = row.estimate.n, row.estimate.spread
        cells |= {"n_low": n.low, "n_best": n.best, "n_high": n.high}
        cells |= {name: getattr(spread, name) for name in ("p05", "p16", "p50", "p84", "p95")}
    return cells


def _of_factor(row: Row, place: Place, factor: Factor) -> dict[str, Cell]:
    found = [
        (segment, *_answer(row, place, segment, factor))
        for segment, asked in place.questions
        if asked == factor
    ]
    names = [segment for segment, *_ in found]
    return {
        f"{factor}_{what}": _joined(names, [answer[at] for answer in found])
        for at, what in enumerate(("grade", "value", "note"), start=1)
    }


def _answer(row: Row, place: Place, segment: str | None, factor: Factor) -> tuple[Cell, Cell, Cell]:
    standing = place.at(segment, factor)
    if standing is None:
        return None, None, None
    if entry := row.entry((segment, factor)):
        return entry.grade, entry.best, standing.choice.note
    return standing.choice.grade, standing.choice.best, standing.choice.note


def _joined(segments: Sequence[str | None], cells: Sequence[Cell]) -> Cell:
    """Return the one cell, or the segments' cells in one text: ``bed: gravel; banks: reeds``."""
    if len(cells) == 1 and segments[0] is None:
        return cells[0]
    return "; ".join(
        f"{segment}: {cell}"
        for segment, cell in zip(segments, cells, strict=True)
        if cell is not None
    )
