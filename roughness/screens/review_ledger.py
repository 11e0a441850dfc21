"""What a page of a review lists: a line a factor, the sum, what was found, what was asked."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from rich.text import Text

from roughness.assessment.estimate import FactorEstimate
from roughness.desk.evidence_lists import Item as Evidence
from roughness.desk.offers import resolved_at
from roughness.desk.places import Place, Question
from roughness.desk.rows import Row
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_n, show_share, show_value
from roughness.screens.reach_list import fitted
from roughness.screens.review_words import SIGNS
from roughness.screens.walk_stack import CARRIED
from roughness.screens.walk_table import figure
from roughness.survey.words import MULTIPLIER
from roughness.trail.review_state import Asked

ANSWERED: Final = "✓"
_EIGHTHS: Final = ("", "▏", "▎", "▍", "▌", "▋", "▊", "▉")
_VALUE, _SHARE, _NOTE, _PHOTO = 6, 5, 4, 5
_WIDE = 100


@dataclass(frozen=True)
class Columns:
    """How many cells each column of the ledger has."""

    factor: int
    range: int
    bar: int
    why: int

    @classmethod
    def within(cls, width: int, *, apart: bool) -> "Columns":
        """Return the columns for lines of ``width`` cells."""
        factor = 18 if apart else 15
        span, long = (11, 3) if width < _WIDE else (15, 12)
        fixed = 2 + factor + _VALUE + span + _SHARE + long + _NOTE + _PHOTO + 7
        return cls(factor, span, long, max(0, width - fixed))

    def line(
        self,
        mark: str,
        name: str,
        value: str,
        span: str,
        drives: str,
        why: str,
        marks: tuple[str, str],
    ) -> str:
        """Set one line."""
        cells = (
            f"{mark:2}{fitted(name, self.factor)}",
            fitted(value, _VALUE),
            fitted(span, self.range),
            fitted(drives, _SHARE + 1 + self.bar),
            fitted(why, self.why),
            f"{marks[0]:{_NOTE}}",
            f"{marks[1]:>{_PHOTO}}",
        )
        return " ".join(cells)

    def sum_line(self, mark: str, n: str, span: str, sketch: str, photos: str) -> str:
        """Set the line of the sum, whose sketch takes the room of three columns."""
        room = _SHARE + 1 + self.bar + 1 + self.why + 1 + _NOTE
        name = fitted("n", self.factor)
        span = fitted(span, self.range)
        told = f"{mark:2}{name} {fitted(n, _VALUE)} {span} {fitted(sketch, room)}"
        return f"{told} {photos:>{_PHOTO}}"

    def drives(self, share: float | None) -> str:
        """Return a share of the variance as a percentage and a bar."""
        if share is None:
            return ""
        eighths = round(min(1.0, max(0.0, share)) * self.bar * 8)
        bar = "█" * (eighths // 8) + _EIGHTHS[eighths % 8]
        return f"{show_share(share):>{_SHARE}} {bar}"


@dataclass(frozen=True, kw_only=True)
class Line:
    """One line of a page. Where nothing is named it is the sum."""

    question: Question | None = None
    """Segment and factor of a line of the ledger."""
    finding: Finding | None = None
    asked: Asked | None = None

    @property
    def key(self) -> object:
        """What the cursor stays on while answers come in."""
        return self.asked.line.hash if self.asked else (self.question, self.finding)

    @property
    def about(self) -> Question | None:
        """The segment and factor it is about; None: the whole part."""
        if self.asked is not None:
            asked = self.asked.question
            return (asked.segment, asked.factor) if asked.factor else None
        if self.finding is not None:
            return (None, self.finding.factor) if self.finding.factor else None
        return self.question


def lines_of(row: Row) -> list[Line]:
    """Return the lines of a page: factors, the sum, findings (open ones first), threads."""
    assert row.place is not None
    answered = [finding for finding in row.findings if row.answer_to(finding)]
    threads = row.review.threads()
    return [
        *(Line(question=question) for question in row.place.questions),
        Line(),
        *(Line(finding=finding) for finding in (*row.open, *answered)),
        *(Line(asked=asked) for thread in threads for asked in thread),
    ]


def weightiest(row: Row, lines: Sequence[Line]) -> Line:
    """Return the factor to look at first: what stops, what asks, else what drives n."""
    factors = [line for line in lines if line.question is not None]
    signs = [SIGNS["stop"], SIGNS["ask"], " "]

    def weight(line: Line) -> tuple[int, float]:
        assert line.question is not None
        share = sum(entry.share_of_variance for entry in entries(row, line.question))
        return -signs.index(mark_of(row, line.question)), share

    return max(factors, key=weight)


def entries(row: Row, question: Question) -> list[FactorEstimate]:
    """Return what the estimate says of a question: several where one answer serves segments."""
    segment, factor = question
    found = row.estimate.factors if row.estimate else ()
    return [e for e in found if e.factor == factor and segment in (None, e.segment)]


def photos_of(row: Row, question: Question | None, items: Sequence[Evidence]) -> list[Evidence]:
    """Return what is filed for a factor by name, or (None) for the part as a whole."""
    assert row.part and row.condition
    here = [item for item in items if item.supports(row.part.part, row.condition.condition)]
    if question is None:
        return [item for item in here if not item.evidence.factors]
    return [item for item in here if question[1] in (item.evidence.factors or ())]


def heading(width: int, *, apart: bool) -> Text:
    """Return the words over the columns; ``apart`` where bed and banks have lines of their own."""
    told = Columns.within(width, apart=apart).line(
        "  ", "factor", "value", "range", "drives n", "grade: why", ("note", "photo")
    )
    return Text(told, style="dim", no_wrap=True, overflow="crop")


def drawn(line: Line, row: Row, items: Sequence[Evidence], width: int) -> Text:
    """Return a line of the page in ``width`` cells."""
    if line.asked is not None:
        text, bold = _asked_line(line.asked), line.asked.is_open
    elif line.finding is not None:
        text, bold = _finding_line(row, line.finding), line.finding.level == "stop"
    elif line.question is not None:
        text, bold = _factor_line(row, line.question, items, width), False
    else:
        text, bold = _sum_line(row, items, width), True
    return Text(
        fitted(text, width), style="bold" if bold else "", no_wrap=True, overflow="ellipsis"
    )


def _asked_line(asked: Asked) -> str:
    question = asked.question
    about = named((question.segment, question.factor)) if question.factor else "the whole"
    told = f"{about}: {printable(question.text)}"
    if asked.is_open:
        return f"? asked of {told} ({printable(asked.line.by)})"
    last = asked.answers[-1]
    return f"{ANSWERED} asked of {told} › {printable(last.answer.text)}"


def _finding_line(row: Row, finding: Finding) -> str:
    answer = row.answer_to(finding)
    told = f"{finding.level}: {printable(finding.says)}"
    if answer is None:
        return f"{SIGNS[finding.level]} {told}"
    return f"{ANSWERED} {finding.level}: {printable(answer.said.text)} › {printable(finding.says)}"


def named(question: Question) -> str:
    """Return ``base of the bed``."""
    segment, factor = question
    return f"{factor} of the {printable(segment)}" if segment else factor


def _factor_line(row: Row, question: Question, items: Sequence[Evidence], width: int) -> str:
    place = row.place
    assert place is not None
    segment, factor = question
    symbol = place.handbook.symbols[factor]
    columns = Columns.within(width, apart=bool(place.segments))
    name = f"{factor} {printable(segment)}" if segment else f"{symbol:2} {factor}"
    standing, resolved = place.at(*question), resolved_at(place, question)
    if standing is None or resolved is None:
        says = "open" if standing is None else "does not fit the handbook"
        return columns.line(mark_of(row, question), name, "", says, "", "", ("", ""))
    range_, cross = resolved.range, "×" if factor == MULTIPLIER else ""
    span = "no range" if range_.is_point else f"{_figure(range_.low, cross)}–{figure(range_.high)}"
    found = entries(row, question)
    share = sum(entry.share_of_variance for entry in found) if found else None
    count = len(photos_of(row, question, items))
    marks = ("note" if standing.choice.note else "-", str(count) if count else "-")
    value = _figure(range_.best, cross) if range_.best else "0"
    why = why_in_a_phrase(place, question)
    drives = columns.drives(share)
    return columns.line(mark_of(row, question), name, value, span, drives, why, marks)


def _figure(value: float, cross: str) -> str:
    return f"×{show_value(value)}" if cross else figure(value)


def why_in_a_phrase(place: Place, question: Question) -> str:
    """Return the grade and what decides it: what was measured, else its criterion in short."""
    standing, resolved = place.at(*question), resolved_at(place, question)
    if standing is None or resolved is None:
        return ""
    grade = resolved.grade
    origin = ""
    if standing.carried_from and not standing.inherited_from:
        origin = f"{CARRIED} not confirmed, "
    name = printable(grade.name) if grade else "own value"
    reason = resolved.candidates.says or (grade.short if grade else "")
    return f"{origin}{name}: {printable(reason)}" if reason else f"{origin}{name}"


def mark_of(row: Row, question: Question) -> str:
    """Return the weightiest sign of what is open about a factor."""
    segment, factor = question
    levels = {finding.level for finding in row.open if finding.factor == factor}
    asked = any(
        one.question.factor == factor and one.question.segment in (None, segment)
        for one in row.review.open_questions
    )
    if "stop" in levels:
        return SIGNS["stop"]
    return SIGNS["ask"] if "ask" in levels or asked else " "


def _sum_line(row: Row, items: Sequence[Evidence], width: int) -> str:
    assert row.place is not None
    columns = Columns.within(width, apart=bool(row.place.segments))
    estimate, count = row.estimate, len(photos_of(row, None, items))
    photos = str(count) if count else "-"
    if estimate is None:
        return columns.sum_line(" ", "", "not yet", "factors are open", photos)
    span = f"{show_n(estimate.n.low)}–{show_n(estimate.n.high)}"
    asks: set[str] = {finding.level for finding in row.open if finding.factor is None}
    asks |= {"ask" for one in row.review.open_questions if one.question.factor is None}
    mark = next((SIGNS[level] for level in ("stop", "ask") if level in asks), " ")
    told = sketch(row) if width >= _WIDE else sketch(row).replace(" ", "")
    return columns.sum_line(mark, show_n(estimate.n.best), span, told, photos)


def sketch(row: Row) -> str:
    """Return the sum as it is written on paper: ``(0.038 + 0.005 + 0.010) × 1.15``."""
    estimate = row.estimate
    if estimate is None:
        return ""
    if estimate.segments:
        told = (f"{printable(s.name)} {show_n(s.n.best)}" for s in estimate.segments)
        return ", ".join(told)
    addends = [e.best for e in estimate.factors if e.factor != MULTIPLIER and e.best]
    told_sum = " + ".join(figure(value) for value in addends)
    times = next((e.best for e in estimate.factors if e.factor == MULTIPLIER), 1.0)
    if times == 1.0:
        return told_sum
    return f"({told_sum}) × {show_value(times)}" if len(addends) > 1 else f"{told_sum} × {times}"
