"""The factors chosen so far, each as a bar; where bed and banks are told apart, side by side."""

from collections.abc import Sequence
from typing import Final

from rich.cells import set_cell_size
from rich.text import Text
from textual.widgets import Static

from roughness.desk.offers import resolved_at
from roughness.desk.places import OF_THE_WHOLE_PART, Place, Question, Standing
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_n, show_value
from roughness.screens.walk_course import Course
from roughness.survey.words import MULTIPLIER, Factor, factors_of

_BAR: Final = "█"
_FACTOR, _VALUE, _LONGEST_BAR = 15, 7, 24
_NAME, _NAME_IN_CELL, _SHORTEST_BAR = 24, 15, 6
# The longest bar stands for at least this much n, so that small factors look small.
_FULL: Final = 0.05
# Where, message, question, heading of the table, whole of a row, sum and keys.
_OTHER_LINES: Final = 12
CARRIED, INHERITED = "~", "="


class FactorStack(Static):
    """One line a factor; on a low screen those to come share the last line."""

    DEFAULT_CSS = "FactorStack { height: auto; }"

    def show(self, course: Course) -> None:
        """Draw the factors as they stand in the course."""
        width, height = self.screen.size
        rows = len(course.offers.grades) if course.offers else 0
        factors = len(factors_of(course.place.part.setting)) + bool(course.place.segments)
        roomy = height >= _OTHER_LINES + rows + factors
        lines = stack_lines(course.place, course.question, width, roomy)
        self.update(Text("\n", no_wrap=True, overflow="ellipsis").join(lines))


def stack_lines(place: Place, at: Question | None, width: int, roomy: bool) -> list[Text]:
    """Return the lines of the stack.

    Parameters
    ----------
    place : Place
        With what was chosen.
    at : Question or None
        The one at hand.
    width : int
        Columns there are.
    roomy : bool
        Whether factors to come have lines of their own.
    """
    told_apart = bool(place.segments)
    lines = [_heading(place, width)] if told_apart else []
    to_come: list[str] = []
    for factor in factors_of(place.part.setting):
        here = at is not None and at[1] == factor
        open_ = all(place.at(zone, factor) is None for zone in place.zones)
        if open_ and not here and not roomy:
            to_come.append(factor)
            continue
        label = Text(f"{'▸' if here else ' '}{factor}", style="bold" if here else "")
        label.truncate(_FACTOR, pad=True)
        if told_apart and factor not in OF_THE_WHOLE_PART:
            cells = [_cell(place, (z, factor), _cell_width(place, width)) for z in place.zones]
            lines.append(label + Text("").join(cells))
        else:
            names = _name_width(_cell_width(place, width)) if told_apart else _NAME
            lines.append(label + _whole(place, (None, factor), width - _FACTOR, names))
    if to_come:
        lines.append(Text(f" to come: {', '.join(to_come)}", style="dim"))
    return lines


def _heading(place: Place, width: int) -> Text:
    cells = [
        set_cell_size(
            f"{printable(s.name)} {show_value(s.perimeter_percent)} %", _cell_width(place, width)
        )
        for s in place.segments
    ]
    standing = [place.at(*question) for question in place.questions]
    legend = []
    if any(s and s.carried_from and not s.inherited_from for s in standing):
        legend.append(f"{CARRIED} to confirm")
    if any(s and s.inherited_from for s in standing):
        legend.append(f"{INHERITED} other condition")
    line = Text(f" {'perimeter:':{_FACTOR - 1}}{''.join(cells).rstrip()}", style="dim")
    if legend:
        line.append(f"  {', '.join(legend)}")
    return line


def _cell_width(place: Place, width: int) -> int:
    return max(12, (width - _FACTOR) // max(1, len(place.segments)))


def _cell(place: Place, question: Question, width: int) -> Text:
    """Draw one segment's choice in its column."""
    standing, resolved = place.at(*question), resolved_at(place, question)
    if standing is None or resolved is None:
        return Text(set_cell_size(" ·", width), style="dim")
    mark = INHERITED if standing.inherited_from else CARRIED if standing.carried_from else " "
    grade = resolved.grade.name if resolved.grade else "own value"
    value = _value(question[1], resolved.range.best)
    names = _name_width(width)
    bar_width = max(0, width - names - _VALUE - 2)
    bar = _bar(_added(place, question), bar_width)
    cell = f"{mark}{_fitted(printable(grade), names - 1)} {value:<{_VALUE - 1}} {bar}"
    return Text(_fitted(cell, width))


def _name_width(cell: int) -> int:
    """Return the columns for a grade's name in a column of a segment; the bar comes last."""
    roomy = cell >= _NAME_IN_CELL + _VALUE + _SHORTEST_BAR
    return _NAME_IN_CELL if roomy else max(4, cell - _VALUE - 1)


def _whole(place: Place, question: Question, width: int, name_width: int) -> Text:
    """Draw the choice for the whole part: grade, value, bar, and where it comes from."""
    standing, resolved = place.at(*question), resolved_at(place, question)
    if standing is None or resolved is None:
        return Text(" ·", style="dim")
    grade = resolved.grade.name if resolved.grade else "own value"
    value = _value(question[1], resolved.range.best)
    origin = origin_of(standing)
    line = Text(f" {_fitted(printable(grade), name_width - 1)} {value:<{_VALUE}}")
    room = width - line.cell_len
    bar = _bar(_added(place, question), _LONGEST_BAR)
    if origin and room - len(origin) - 1 < _LONGEST_BAR:
        return line + Text(origin, style="italic")
    line.append(bar)
    if origin:
        line.append(f"{' ' * (_LONGEST_BAR + 1 - len(bar))}{origin}", style="italic")
    return line


def origin_of(standing: Standing) -> str:
    """Say where a choice comes from that was not made here; empty where it was."""
    if standing.inherited_from:
        return f"from {printable(standing.inherited_from)}"
    if standing.carried_from:
        origin = standing.carried_from
        return f"to confirm, from {printable(origin.reach)}"
    return ""


def _value(factor: Factor, best: float) -> str:
    if factor == MULTIPLIER:
        return f"×{show_value(best)}"
    return show_n(best) if best else "0"


def _added(place: Place, question: Question) -> float:
    """Return what a factor adds to n; the multiplier adds its part of the sum."""
    resolved = resolved_at(place, question)
    if resolved is None:
        return 0.0
    if question[1] != MULTIPLIER:
        return resolved.range.best
    zone = place.zones[0]
    others = [resolved_at(place, (zone, f)) for f in factors_of(place.part.setting)]
    total = sum(one.range.best for one in others if one and one.factor != MULTIPLIER)
    return total * (resolved.range.best - 1.0)


def _bar(added: float, width: int) -> str:
    return _BAR * min(width, round(added / _FULL * width)) if added > 0 else ""


def _fitted(text: str, width: int) -> str:
    """Return the text in exactly this many columns."""
    line = Text(text)
    line.truncate(max(1, width), overflow="ellipsis", pad=True)
    return line.plain


def names_of(question: Question, segments: Sequence[str]) -> str:
    """Say what is asked for: ``base of the bed``, ``variation of the whole part``."""
    segment, factor = question
    if segment is not None:
        return f"{factor} of the {printable(segment)}"
    return f"{factor} of the whole part" if segments else factor
