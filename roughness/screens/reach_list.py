"""The list of the survey screen: a line for each part of each reach, bars on one axis.

Only the lines that are on the screen are drawn, so thousands of reaches cost no more than
a dozen.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import ClassVar, Final

from rich.cells import set_cell_size
from rich.segment import Segment
from rich.style import Style
from textual import events
from textual.binding import Binding, BindingType
from textual.geometry import Size
from textual.message import Message
from textual.scroll_view import ScrollView
from textual.strip import Strip

from roughness.quantities.foreign_text import printable
from roughness.screens import bars
from roughness.screens.survey_lines import SurveyLine

_STATUS: Final = 15
_WIDE: Final = 100


@dataclass(frozen=True)
class Columns:
    """How many cells each column of the list has."""

    name: int
    part: int
    axis: int

    @classmethod
    def within(cls, width: int) -> "Columns":
        """Return the columns for a list of ``width`` cells."""
        name, part = (24, 18) if width >= _WIDE else (15, 11)
        return cls(name, part, max(8, width - name - part - _STATUS - 4))


class ReachList(ScrollView, can_focus=True):
    """The reaches as lines; one of them holds the cursor."""

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("up", "move(-1)", "up", show=False),
        Binding("down", "move(1)", "down", show=False),
        Binding("pageup", "page(-1)", "page up", show=False),
        Binding("pagedown", "page(1)", "page down", show=False),
        Binding("home", "edge(0)", "first", show=False),
        Binding("end", "edge(-1)", "last", show=False),
    ]
    COMPONENT_CLASSES: ClassVar[set[str]] = {
        "reach-list--axis",
        "reach-list--cursor",
        "reach-list--bar",
        "reach-list--stop",
        "reach-list--faint",
    }
    DEFAULT_CSS = """
    ReachList {
        height: 1fr;
        overflow-x: hidden;
        scrollbar-size-vertical: 1;
    }
    ReachList > .reach-list--axis { text-style: dim; }
    ReachList > .reach-list--bar { color: $primary; }
    ReachList > .reach-list--stop { color: $error; text-style: bold; }
    ReachList > .reach-list--faint { text-style: dim; }
    ReachList > .reach-list--cursor { text-style: reverse; }
    """

    @dataclass
    class Moved(Message):
        """The cursor came to another line, or its line changed."""

        line: SurveyLine | None
        by_person: bool = False

    @dataclass
    class Clicked(Message):
        """The line under the cursor was clicked once more."""

        line: SurveyLine

    def __init__(self, *, id: str | None = None) -> None:  # noqa: A002 -- Textual's own word
        super().__init__(id=id)
        self._lines: Sequence[SurveyLine] = ()
        self._at = 0
        self._names_on_every_line = False

    @property
    def line(self) -> SurveyLine | None:
        """The line under the cursor."""
        return self._lines[self._at] if self._lines else None

    def show(
        self,
        lines: Sequence[SurveyLine],
        *,
        names_on_every_line: bool = False,
        at: tuple[str, str] | None = None,
    ) -> None:
        """Show these lines; the cursor stays on its reach and part, and on its row.

        Parameters
        ----------
        lines : sequence of SurveyLine
            From top to bottom.
        names_on_every_line : bool
            False leaves a reach's name out where the line before has the same.
        at : (reach, part), optional
            Where the cursor is to go instead.
        """
        row = self._at - round(self.scroll_y)
        wanted = at or (self.line.key if self.line else None)
        self._lines, self._names_on_every_line = lines, names_on_every_line
        self._at = _found(lines, wanted, self._at)
        self.virtual_size = Size(self.size.width, len(lines) + 1)
        if at is None:
            self.scroll_to(y=max(0, self._at - row), animate=False, force=True, immediate=True)
        self._keep_in_sight()
        self.refresh()
        self.post_message(self.Moved(self.line))

    def visible_reaches(self) -> list[str]:
        """Return the reaches whose lines are on the screen."""
        top = round(self.scroll_y)
        shown = self._lines[top : top + max(1, self.size.height)]
        return list(dict.fromkeys(line.row.reach.reach for line in shown))

    # -- keys and mouse -------------------------------------------------------------------

    def action_move(self, by: int) -> None:
        """Move the cursor by lines."""
        self._go(self._at + by)

    def action_page(self, by: int) -> None:
        """Move the cursor by what fits on the screen."""
        self._go(self._at + by * max(1, self.size.height - 2))

    def action_edge(self, at: int) -> None:
        """Move the cursor to the first or the last line."""
        self._go(0 if at == 0 else len(self._lines) - 1)

    def on_click(self, event: events.Click) -> None:
        """Move the cursor to the line; a click on the cursor's line opens it."""
        at = event.y - 1 + round(self.scroll_y)
        if event.y < 1 or not 0 <= at < len(self._lines):
            return
        if at == self._at and self.line is not None:
            self.post_message(self.Clicked(self.line))
        self._go(at)

    def on_resize(self) -> None:
        """Keep the cursor in sight when the terminal changes."""
        self.virtual_size = Size(self.size.width, len(self._lines) + 1)
        self._keep_in_sight()

    def _go(self, to: int) -> None:
        to = max(0, min(len(self._lines) - 1, to))
        if self._lines and to != self._at:
            self._at = to
            self._keep_in_sight()
            self.refresh()
            self.post_message(self.Moved(self.line, by_person=True))

    def _keep_in_sight(self) -> None:
        top, fit = round(self.scroll_y), max(1, self.size.height - 1)
        if self._at < top:
            self.scroll_to(y=self._at, animate=False, force=True, immediate=True)
        elif self._at >= top + fit:
            self.scroll_to(y=self._at - fit + 1, animate=False, force=True, immediate=True)

    # -- drawing --------------------------------------------------------------------------

    def render_line(self, y: int) -> Strip:
        """Draw one line; the first one is the axis and does not scroll."""
        width = self.scrollable_content_region.width
        columns = Columns.within(width)
        if y == 0:
            lead = " " * (columns.name + columns.part + 3)
            labels = bars.axis(columns.axis)
            lead += " " * (len(labels) - len(labels.lstrip()))
            style = self.rich_style + self._style("axis")
            axis = [Segment(lead, self.rich_style), Segment(labels.lstrip(), style)]
            return Strip(axis).adjust_cell_length(width, self.rich_style)
        at = y - 1 + round(self.scroll_y)
        if at >= len(self._lines):
            return Strip.blank(width, self.rich_style)
        strip = Strip(self._segments(at, columns)).adjust_cell_length(width, self.rich_style)
        return strip.apply_style(self._style("cursor")) if at == self._at else strip

    def _segments(self, at: int, columns: Columns) -> list[Segment]:
        line, plain = self._lines[at], self.rich_style
        name = "" if self._is_named_above(at) else printable(line.row.reach.reach)
        mark = "›" if at == self._at else " "
        drawn = plain + self._style("bar" if line.row.estimate else "faint")
        status = plain + self._style("stop") if line.count("stop") else plain
        if at == self._at:
            drawn = status = plain
        says = fitted(_drawn(line, columns.axis), columns.axis)
        lead = len(says) - len(says.lstrip())
        return [
            Segment(f"{mark}{fitted(name, columns.name)} ", plain),
            Segment(f"{fitted(line.part_word, columns.part)} ", plain),
            # Some pictures drop blanks at the start of a piece of text.
            Segment(says[:lead], plain),
            Segment(says[lead:] + " ", drawn),
            Segment(fitted(line.status, _STATUS), status),
        ]

    def _is_named_above(self, at: int) -> bool:
        if self._names_on_every_line or at in (0, self._at):
            return False
        return self._lines[at].key[0] == self._lines[at - 1].key[0]

    def _style(self, component: str) -> Style:
        return self.get_component_rich_style(f"reach-list--{component}", partial=True)


def fitted(text: str, width: int) -> str:
    """Return text cut or filled to a width in cells; a cut is shown by an ellipsis."""
    filled = set_cell_size(text, width)
    if filled.rstrip() == text.rstrip():
        return filled
    return set_cell_size(set_cell_size(text, width - 1).rstrip() + "…", width)


def _drawn(line: SurveyLine, width: int) -> str:
    estimate = line.row.estimate
    if not line.read:
        return "reading"
    if estimate is None:
        return line.apart or ". " * (width // 2)
    adopted = line.row.adopted.n if line.row.adopted else None
    return bars.bar(width, estimate.n, (estimate.spread.p05, estimate.spread.p95), None, adopted)


def _found(lines: Sequence[SurveyLine], key: tuple[str, str] | None, fallback: int) -> int:
    """Return where the line is, else the first one of its reach, else about the same place."""
    by_reach = -1
    for at, line in enumerate(lines):
        if line.key == key:
            return at
        if key is not None and by_reach < 0 and line.key[0] == key[0]:
            by_reach = at
    return by_reach if by_reach >= 0 else max(0, min(len(lines) - 1, fallback))
