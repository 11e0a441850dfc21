"""The ledger: one line a factor with everything its value rests on."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from roughness.assessment.resolving import Resolved
from roughness.desk.offers import resolved_at
from roughness.desk.places import Place, Question, Standing
from roughness.desk.rows import Row
from roughness.handbook import Grade
from roughness.quantities.ranges import Range
from roughness.reports.arithmetic import figure
from roughness.reports.photographs import Photograph
from roughness.survey.words import MULTIPLIER, Factor


@dataclass(frozen=True, kw_only=True)
class LedgerLine:
    """One factor of a part, or of its bed or banks."""

    segment: str | None
    factor: Factor
    symbol: str
    grade: str
    """Name of the grade, or that the value is one's own."""
    criterion: str
    """What decides the grade, in words; empty where there is no grade."""
    remembered: bool
    """Whether the criterion is from memory."""
    value: str = ""
    limits: str = ""
    published: str = ""
    share: float | None = None
    """Share of the variance of n, 0 to 1; None while the estimate is incomplete."""
    basis: str
    measured: str
    """What was measured, in words."""
    source: str
    provenance: str
    note: str | None
    said: Standing
    marks: tuple[str, ...]
    """Carried over, taken over, another edition of the handbook."""
    photographs: tuple[int, ...]


def ledger_of(row: Row, photographs: Sequence[Photograph]) -> tuple[LedgerLine, ...]:
    """Return the lines of a row in the order of publication; open factors are left out."""
    if row.place is None:
        return ()
    return tuple(_lines(row, row.place, photographs))


def _lines(row: Row, place: Place, photographs: Sequence[Photograph]) -> Iterator[LedgerLine]:
    for question in place.questions:
        standing = place.at(*question)
        if standing is not None:
            yield _line(row, place, question, standing, photographs)


def _line(
    row: Row,
    place: Place,
    question: Question,
    standing: Standing,
    photographs: Sequence[Photograph],
) -> LedgerLine:
    segment, factor = question
    resolved, entry = resolved_at(place, question), row.entry(question)
    grade = resolved.grade if resolved else None
    measured = resolved.candidates.says if resolved else ""
    here = place.part.part, place.condition.condition
    told = _numbers(resolved) if resolved else {}
    return LedgerLine(
        segment=segment,
        factor=factor,
        symbol=place.handbook.symbols[factor],
        grade=_grade_name(grade, standing),
        criterion=grade.criterion if grade else "",
        remembered=bool(grade and grade.criterion_provenance == "memory"),
        share=entry.share_of_variance if entry else None,
        basis="measured" if resolved and resolved.measured else "judged",
        measured=measured,
        source=resolved.source if resolved else "no longer fits the handbook",
        provenance=grade.provenance if grade else "",
        note=standing.choice.note,
        said=standing,
        marks=tuple(_marks(place, standing)),
        photographs=tuple(p.number for p in photographs if p.supports(*here, factor)),
        **told,
    )


def _grade_name(grade: Grade | None, standing: Standing) -> str:
    return grade.name if grade else standing.choice.grade or "own value"


def _numbers(resolved: Resolved) -> dict[str, str]:
    factor, published = resolved.factor, resolved.published
    times = "× " if factor == MULTIPLIER else ""
    return {
        "value": times + figure(factor, resolved.range.best),
        "limits": _between(factor, resolved.range),
        "published": _between(factor, published) if published else "none",
    }


def _between(factor: Factor, limits: Range) -> str:
    if limits.is_point:
        return figure(factor, limits.low)
    return f"{figure(factor, limits.low)} to {figure(factor, limits.high)}"


def _marks(place: Place, standing: Standing) -> Iterator[str]:
    if (source := standing.carried_from) is not None:
        from_where = ", ".join((source.reach, source.part, source.condition))
        yield f"carried over from {from_where}; nobody confirmed it here"
    if standing.inherited_from:
        yield f"taken over from the flow condition {standing.inherited_from}"
    if standing.handbook_sha256 != place.handbook.sha256:
        then = standing.handbook_sha256[:12]
        yield f"chosen with another edition of the handbook ({then}) than the one read now"
