"""The grades of the factor at hand, each with what it would do, before it is taken."""

from collections.abc import Sequence
from typing import Final

from rich.cells import cell_len
from rich.text import Text
from textual.widget import Widget

from roughness.handbook import Grade
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, rounded, show_n, show_value
from roughness.quantities.ranges import Range
from roughness.screens.walk_at_hand import GradeRow
from roughness.screens.walk_course import Course
from roughness.survey.words import MULTIPLIER

SUGGESTED, TAKEN = "◆", "✓"
_LOWER_BOUND: Final = "smoothest attainable, a lower bound in a natural stream:"
_MARKS, _RANGE, _N, _WATER = 5, 12, 6, 8
_DIGITS: Final = 9
_HOW: Final = "A number takes its grade, or ↑↓ and ⏎."


class GradeTable(Widget):
    """The rows around the highlighted one, as many as there is room for."""

    DEFAULT_CSS = "GradeTable { height: 1fr; min-height: 3; }"

    def __init__(self, course: Course, id: str | None = None) -> None:  # noqa: A002
        super().__init__(id=id)
        self.course = course

    def render(self) -> Text:
        """Draw heading and rows."""
        width, height = self.size
        lines = table_lines(self.course, width, height)
        return Text("\n", no_wrap=True, overflow="crop").join(lines)


def table_lines(course: Course, width: int, height: int) -> list[Text]:
    """Return heading and rows in at most ``height`` lines of ``width`` columns."""
    rows = course.rows()
    if not rows or height < 2:
        return []
    water = any(row.water_cm is not None for row in rows)
    name = max(cell_len(_name(row.offer.grade)) for row in rows)
    told = suggestion(course)
    lines = [Text(f" {told}", style="bold")] if told else []
    lines.append(_heading(_HOW, _verb(course), width, water))
    drawn: list[Text] = []
    cursor_line = 0
    for at, row in enumerate(rows):
        if row.offer.grade.lower_bound and not (at and rows[at - 1].offer.grade.lower_bound):
            drawn.append(Text(f"{' ' * _MARKS}{_LOWER_BOUND}", style="dim"))
        if at == course.cursor:
            cursor_line = len(drawn)
        drawn.append(_row(row, at, at == course.cursor, (name, width, water)))
    return lines + _window(drawn, cursor_line, height - len(lines))


def _verb(course: Course) -> str:
    assert course.question is not None
    return "times" if course.question[1] == MULTIPLIER else "adds"


def suggestion(course: Course) -> str:
    """Say what the measured criterion suggests, or why it suggests nothing."""
    assert course.offers is not None
    measured = course.offers.measured
    names = {offer.grade.key: offer.grade.name for offer in course.offers.grades}
    if measured.near:
        both = enumerate_words([names[key] for key in measured.near], "or")
        return f"{SUGGESTED} {measured.says}: near an edge, {both}; B takes both"
    if measured.grades:
        grades = enumerate_words([names[key] for key in measured.grades], "or")
        return f"{SUGGESTED} {measured.says}: {grades}"
    return f"{measured.says}: {measured.advice}" if measured.says else ""


def _heading(told: str, verb: str, width: int, water: bool) -> Text:
    right = f"{verb:>{_RANGE}}{'n then':>{_N + 1}}" + (f"{'water':>{_WATER}}" if water else "")
    line = Text(f" {told}")
    line.truncate(max(0, width - len(right)), overflow="ellipsis", pad=True)
    return line + Text(right, style="dim")


def _row(row: GradeRow, at: int, highlighted: bool, shape: tuple[int, int, bool]) -> Text:
    name, width, water = shape
    grade = row.offer.grade
    digit = str(at + 1) if at < _DIGITS else " "
    marks = (
        f"{'›' if highlighted else ' '}{SUGGESTED if row.offer.suggested else ' '}"
        f"{TAKEN if row.standing else ' '}{digit} "
    )
    right = f"{_range(row.range):>{_RANGE}}{show_n(row.n.best) if row.n else '':>{_N + 1}}"
    if water:
        right += f"{_water(row.water_cm):>{_WATER}}"
    left = Text(f"{marks}{_name(grade):<{name}}  {printable(grade.short)}")
    left.truncate(max(0, width - len(right) - 1), overflow="ellipsis", pad=True)
    line = left + Text(f" {right}")
    line.stylize("bold reverse" if highlighted else "bold" if row.standing else "")
    return line


def _name(grade: Grade) -> str:
    """Return the name as it stands in the table: 'smoothest' is said by the heading above."""
    name = printable(grade.name)
    return name.partition(",")[0] if grade.lower_bound else name


def _range(range_: Range | None) -> str:
    if range_ is None:
        return "asks size"
    if range_.is_point:
        return figure(range_.best)
    return f"{figure(range_.low)}–{figure(range_.high)}"


def figure(value: float) -> str:
    """Print a table value with three decimals like n, or with all it has where it has more."""
    told = show_n(value)
    return told if value and float(told) == value and value < 1 else show_value(value)


def _water(cm: float | None) -> str:
    if cm is None:
        return ""
    told = rounded(abs(cm), 0)
    if told == "0":
        return "0 cm"
    return f"{'+' if cm > 0 else '−'}{told} cm"


def _window(drawn: Sequence[Text], cursor: int, height: int) -> list[Text]:
    """Return the lines around the cursor, saying how many there are beyond."""
    if len(drawn) <= height:
        return list(drawn)
    room = max(1, height - 1)
    start = max(0, min(cursor - room // 2, len(drawn) - room))
    above, below = start, len(drawn) - start - room
    told = [f"↑ {above} above"] if above else []
    told += [f"↓ {below} more below"] if below else []
    more = Text(f"{' ' * _MARKS}{', '.join(told)}", style="dim italic")
    return [*drawn[start : start + room], more]


def detail(course: Course) -> Text:
    """Return the whole of the highlighted row: value, range, criterion, source."""
    if not course.is_marked:
        return Text("Nothing is taken before you choose. ↑↓ mark a grade and show it in full.")
    grade, range_ = course.offer.grade, course.range_at_hand()
    line = Text()
    if range_ is not None:
        line.append(f"{_verb(course).capitalize()} {figure(range_.best)}", style="bold")
        if not range_.is_point:
            line.append(f", {figure(range_.low)} to {figure(range_.high)}")
        if course.outside:
            line.append(", outside the published range (needs a note)")
        line.append(". ")
    if course.is_draft:
        line.append("Not taken yet: ⏎ takes it. ", style="bold")
    line.append(f"{printable(grade.criterion)} ({printable(grade.cited)})")
    return line
