"""The review: every place of the survey, the weakest first, and why it is weak."""

import asyncio
from typing import ClassVar, Final

from rich.text import Text
from textual import on, work
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.screen import Screen
from textual.widgets import Input, OptionList, Static
from textual.widgets.option_list import Option

from roughness.custody.status import CHANGED, INCOMPLETE, UNVISITED
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.screens.help import HelpScreen
from roughness.screens.help_texts import REVIEW_HELP
from roughness.screens.key_line import KeyLine
from roughness.screens.review_accept import accept_all_clean
from roughness.screens.review_lines import ListColumns, list_line
from roughness.screens.review_opinions import Opinions
from roughness.screens.review_page import ReviewPage
from roughness.screens.review_places import Key, ReviewPlaces, key_of
from roughness.screens.review_words import SIGNS, why_weak
from roughness.screens.survey_lines import SurveyLine

_LOOK_EVERY_S: Final = 2.0
_TALL: Final = 34
_IN_SHORT: Final = {CHANGED: "changed since"}


class ReviewScreen(Screen[None]):
    """The places in order of weakness; Enter opens one.

    Parameters
    ----------
    pen : Recorder
        Who reviews, and which survey.
    """

    CSS_PATH = "review.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "open", "open", priority=True),
        Binding("slash", "filter", "filter"),
        Binding("o", "opinions", "opinions"),
        Binding("l", "timeline", "timeline"),
        Binding("A", "accept_all", "accept all without findings", key_display="A"),
        Binding("h", "handbook", "handbook", show=False),
        Binding("escape", "back", "back"),
        Binding("question_mark", "help", "help"),
    ]

    def __init__(self, pen: Recorder) -> None:
        super().__init__()
        self.pen, self.survey = pen, pen.survey
        self.places = ReviewPlaces(pen.survey)
        self._reading = True
        self._shown: list[Row] = []
        self.opinions = Opinions(self, pen, lambda: self.selected, self.refresh_places)

    def compose(self) -> ComposeResult:
        """Lay out title, counts, list and why the selected place is weak."""
        yield Static("", id="review-title")
        yield Static("Reading the survey...", id="review-counts")
        yield Input(
            placeholder="words of a reach, part or status", id="review-filter", compact=True
        )
        yield Static("", id="review-heading")
        yield OptionList(id="review-list", compact=True)
        yield Static("", id="review-detail")
        yield KeyLine()

    def on_mount(self) -> None:
        """Read the survey aside: a long one takes its time."""
        self.query_one(OptionList).focus()
        self.query_one(Input).display = False
        self._read()
        self.set_interval(_LOOK_EVERY_S, self._look)

    @work(exclusive=True, group="reading")
    async def _read(self) -> None:
        try:
            await asyncio.to_thread(self.places.read)
        except RoughnessError as error:
            self.say(str(error))
            return
        self._reading = False
        self.draw()

    def _look(self) -> None:
        if not self._reading and self.is_current and self.places.look():
            self.draw()

    def on_screen_resume(self) -> None:
        """Come back from a page: order anew what was judged there."""
        if not self._reading:
            self.refresh_places()

    def refresh_places(self) -> None:
        """Read what changed and show the list as it is now."""
        self.places.look()
        self.draw()

    # -- what is shown ----------------------------------------------------------------------

    @property
    def selected(self) -> Row | None:
        """The place under the cursor."""
        at = self.query_one(OptionList).highlighted
        return self._shown[at] if at is not None and at < len(self._shown) else None

    def _filtered(self) -> list[tuple[int, Row]]:
        """Return the rows that hold every word of the filter, with their place in the order."""
        words = same_name_key(self.query_one(Input).value).split()
        told = [(at, row, _text_of(row)) for at, row in enumerate(self.places.rows)]
        return [(at, row) for at, row, text in told if all(word in text for word in words)]

    def draw(self, at: Key | None = None) -> None:
        """Show the list; ``at`` moves the cursor to a place."""
        listing = self.query_one(OptionList)
        kept = at or (key_of(self.selected) if self.selected else None)
        width = max(40, self.size.width)
        columns = ListColumns.within(width - 1, others=self.places.has_opinions)
        found = self._filtered()
        self._shown = [row for _, row in found]
        listing.clear_options()
        listing.add_options(
            Option(list_line(i, row, self.places.weakness(row), columns)) for i, row in found
        )
        keys = [key_of(row) for row in self._shown]
        if keys:
            listing.highlighted = keys.index(kept) if kept in keys else 0
        self._draw_head(columns)
        self._draw_detail()

    def _draw_head(self, columns: ListColumns) -> None:
        state = self.survey.state
        name = printable(state.described.stream or state.name)
        title = Text.assemble((f"Review › {name}", "bold"), "   weakest first", no_wrap=True)
        self.query_one("#review-title", Static).update(title)
        counts = self.places.counts()
        counts["to do"] = counts.pop(INCOMPLETE, 0) + counts.pop(UNVISITED, 0)
        said = [f"{count} {_IN_SHORT.get(word, word)}" for word, count in counts.items() if count]
        told = ", ".join(said)
        line = Text(told or "Nothing to review yet.", no_wrap=True, overflow="ellipsis")
        self.query_one("#review-counts", Static).update(line)
        self.query_one("#review-heading", Static).update(columns.heading)

    def _draw_detail(self) -> None:
        row = self.selected
        told = Text("")
        if row is not None:
            told = Text(why_weak(row, self.places.weakness(row)))
            for finding in row.open:
                told.append(f"\n{SIGNS[finding.level]} {finding.level}: {printable(finding.says)}")
        self.query_one("#review-detail", Static).update(told)

    def on_resize(self) -> None:
        """Use the room there is."""
        self.set_class(self.size.height >= _TALL, "-tall")
        if not self._reading:
            self.draw()

    def on_option_list_option_highlighted(self) -> None:
        """Say why the selected place is weak."""
        self._draw_detail()

    def on_option_list_option_selected(self) -> None:
        """Open a place that was clicked."""
        self.action_open()

    def say(self, sentence: str) -> None:
        """Say one sentence over the list."""
        self.notify(printable(sentence), severity="warning", timeout=8, markup=False)

    # -- keys -------------------------------------------------------------------------------

    def action_open(self) -> None:
        """Open the page of the place under the cursor; in the filter, go back to the list."""
        if self.query_one(Input).has_focus:
            self._leave_filter()
            return
        row = self.selected
        if row is None:
            return
        if row.place is None:
            name = printable(row.reach.reach)
            first = row.findings[0].says if row.findings else "nobody judged a part of it yet"
            self.say(f"{name} has nothing to review yet: {first}")
            return
        self.app.push_screen(ReviewPage(self.pen, self.places, key_of(row)))

    def action_filter(self) -> None:
        """Open the filter; the list follows as it is typed."""
        self.query_one(Input).display = True
        self.query_one(Input).focus()

    @on(Input.Changed, "#review-filter")
    def _typed(self) -> None:
        if not self._reading:
            self.draw()

    def _leave_filter(self) -> None:
        self.query_one(Input).display = bool(self.query_one(Input).value)
        self.query_one(OptionList).focus()

    def action_accept_all(self) -> None:
        """List what has nothing open, then accept it in one step."""
        self.run_worker(self._accept_all(), exclusive=True, group="dialog")

    async def _accept_all(self) -> None:
        self.say(await accept_all_clean(self.app, self.pen, self.places))
        self.refresh_places()

    def action_opinions(self) -> None:
        """Second opinions on the place under the cursor, and agreement over the survey."""
        self.opinions.open()

    def action_timeline(self) -> None:
        """Tell who said what about the reach."""
        from roughness.screens.timeline import TimelineScreen

        if self.selected is not None:
            self.app.push_screen(TimelineScreen(self.survey, self.selected.reach.reach))

    def action_handbook(self) -> None:
        """Open the published tables."""
        from roughness.screens.handbook import HandbookScreen

        self.app.push_screen(HandbookScreen(self.survey.handbooks))

    def action_help(self) -> None:
        """Explain the review."""
        self.app.push_screen(HelpScreen("Review", REVIEW_HELP))

    def action_back(self) -> None:
        """Drop the filter, else leave the review."""
        if self.query_one(Input).display:
            self.query_one(Input).value = ""
            self._leave_filter()
            return
        self.workers.cancel_node(self)
        self.dismiss()


def _text_of(row: Row) -> str:
    return same_name_key(" ".join((*key_of(row), SurveyLine(row=row).part_word, row.status)))
