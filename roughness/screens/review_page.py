"""One value on a page that can be judged in thirty seconds, and every key of a review."""

from typing import ClassVar, Final

from rich.text import Text
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Horizontal
from textual.screen import Screen
from textual.widgets import OptionList, Static
from textual.widgets.option_list import Option

from roughness.desk.evidence_lists import Item as Evidence
from roughness.desk.evidence_lists import evidence_of
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.screens.help import HelpScreen
from roughness.screens.help_texts import REVIEW_HELP
from roughness.screens.key_line import KeyLine
from roughness.screens.photo_picture import Picture
from roughness.screens.review_detail import detail_of, reasons, whole_page
from roughness.screens.review_dialogs import ReviewDialogs
from roughness.screens.review_head import crumbs, sum_lines, who
from roughness.screens.review_ledger import Line, drawn, heading, lines_of, photos_of, weightiest
from roughness.screens.review_places import Key, ReviewPlaces
from roughness.screens.review_words import open_counts
from roughness.survey.words import Factor

_LOOK_EVERY_S: Final = 2.0
_TALL: Final = 34
# Where, axis and bars, heading, message, keys.
_OTHER_LINES: Final = 7
_MOST_WHO: Final = 4
_LEAST_ITEM: Final = 6


class ReviewPage(Screen[None]):
    """The page of one part of one reach under one flow condition.

    Parameters
    ----------
    pen : Recorder
        Who reviews, and which survey.
    places : ReviewPlaces
        The places in order of weakness; the page keeps the order it was opened in.
    key : (str, str, str)
        Reach, part and flow condition to begin with.
    """

    CSS_PATH = "review.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "answer", "answer", priority=True),
        Binding("enter", "read", "read", priority=True),
        Binding("i", "inquire", "inquire"),
        Binding("a", "accept", "accept"),
        Binding("t", "return", "return"),
        Binding("right,pagedown", "turn(1)", "next", key_display="→", priority=True),
        Binding("left,pageup", "turn(-1)", "before", show=False, priority=True),
        Binding("d", "since", "changed"),
        Binding("p", "photos", "photos"),
        Binding("o", "opinions", "opinions"),
        Binding("l", "timeline", "timeline"),
        Binding("u", "undo", "undo"),
        Binding("escape", "back", "back"),
        Binding("h", "handbook", "handbook"),
        Binding("A", "accept_all", "accept all", key_display="A"),
        Binding("space", "read", "all of it", key_display="Space", show=False),
        Binding("question_mark", "help", "help"),
    ]

    def __init__(self, pen: Recorder, places: ReviewPlaces, key: Key) -> None:
        super().__init__()
        self.pen, self.survey, self.places = pen, pen.survey, places
        self.keys = [k for k in places.keys if (row := places.row(k)) and row.place]
        self.at = self.keys.index(key)
        self._known = {k: row for k in self.keys if (row := places.row(k))}
        self.items: tuple[Evidence, ...] = ()
        self._lines: list[Line] = []
        self._said = ""
        self.dialogs = ReviewDialogs(self)

    def compose(self) -> ComposeResult:
        """Lay out head, ledger, message and the selected line in full."""
        yield Static("", id="crumbs", markup=False)
        yield Static("", id="page-sum", markup=False)
        yield Static("", id="who", markup=False)
        yield Static("", id="ledger-heading", markup=False)
        yield OptionList(id="ledger", compact=True)
        yield Static("", id="message", markup=False)
        with Horizontal(id="lower"):
            yield Static("", id="item", markup=False)
            yield Picture(id="photo")
        yield KeyLine()

    def on_mount(self) -> None:
        """Begin on the line that weighs most."""
        self.query_one(OptionList).focus()
        self.say()
        self.draw()
        self.set_interval(_LOOK_EVERY_S, self._look)

    def _look(self) -> None:
        if self.is_current and self.places.look():
            self.draw()

    def on_screen_resume(self) -> None:
        """Come back from another screen: somebody may have written meanwhile."""
        self._look()

    # -- what is shown ----------------------------------------------------------------------

    @property
    def row(self) -> Row:
        """The value as it was read last, also where it cannot be read any more."""
        row = self.places.row(self.keys[self.at])
        if row is not None and row.place is not None:
            self._known[self.keys[self.at]] = row
        return self._known[self.keys[self.at]]

    @property
    def _is_gone(self) -> bool:
        row = self.places.row(self.keys[self.at])
        return row is None or row.place is None

    @property
    def line(self) -> Line:
        """The line under the cursor."""
        at = self.query_one(OptionList).highlighted or 0
        return self._lines[min(at, len(self._lines) - 1)] if self._lines else Line()

    @property
    def factor(self) -> tuple[str | None, Factor] | None:
        """The segment and factor that the cursor is about; None: the whole."""
        return self.line.about

    def draw(self, *, first: bool = False) -> None:
        """Show the page anew; the cursor stays on its line, or goes to the weightiest."""
        if self._is_gone:
            self._draw_gone()
            return
        kept = None if first or not self._lines else self.line.key
        self._read_evidence()
        row, width = self.row, max(40, self.size.width)
        self._lines = lines_of(row)
        self.query_one("#crumbs", Static).update(crumbs(row, self.at + 1, len(self.keys), width))
        self.query_one("#page-sum", Static).update(sum_lines(row, width))
        told = who(self.survey, row)
        self.query_one("#who", Static).update(told)
        words = heading(width - 1, apart=bool(row.place and row.place.segments))
        self.query_one("#ledger-heading", Static).update(words)
        listing = self.query_one(OptionList)
        listing.styles.height = self._room(len(told.wrap(self.app.console, width)))
        listing.clear_options()
        listing.add_options(Option(drawn(line, row, self.items, width - 1)) for line in self._lines)
        keys = [line.key for line in self._lines]
        start = keys.index(weightiest(row, self._lines).key)
        listing.highlighted = keys.index(kept) if kept in keys else start
        if not self._said:
            self.say()
        self._draw_item()

    def _draw_gone(self) -> None:
        self._lines, self.items = [], ()
        width = max(40, self.size.width)
        told = crumbs(self.row, self.at + 1, len(self.keys), width)
        self.query_one("#crumbs", Static).update(told)
        for name in ("page-sum", "who", "item"):
            self.query_one(f"#{name}", Static).update("")
        self.query_one(OptionList).clear_options()
        self.query_one(Picture).display = False
        self.say("! This place cannot be read any more, so nothing of it is shown.")

    def _room(self, who_lines: int) -> int:
        """Return how many lines the ledger may have, so that the marked one is told below."""
        room = self.size.height - _OTHER_LINES - min(who_lines, _MOST_WHO) - _LEAST_ITEM
        return max(4, min(len(self._lines), room))

    def _read_evidence(self) -> None:
        try:
            self.items = evidence_of(self.survey, self.row.reach.reach)
        except RoughnessError as error:
            self.items = ()
            self.say(f"! {error}")

    def _draw_item(self) -> None:
        if self._lines:
            told = detail_of(self.line, self.row, self.items)
            if self.has_class("-tall"):
                told = Text("\n").join([told, Text(""), *reasons(self.row)])
            self.query_one("#item", Static).update(told)
            self._draw_photo()
            self.refresh_bindings()

    def _draw_photo(self) -> None:
        """Show a photo of the factor, else of the part, where the window has room for it."""
        picture = self.query_one(Picture)
        shown = [item for item in self._evidence_here() if item.may_be_shown]
        picture.display = self.has_class("-tall") and bool(shown)
        if picture.display:
            picture.show(shown[0].path)

    def _evidence_here(self) -> list[Evidence]:
        row = self.row
        assert row.part and row.condition
        part, condition = row.part.part, row.condition.condition
        here = [item for item in self.items if item.supports(part, condition)]
        return photos_of(row, self.factor, self.items) or here

    def on_resize(self) -> None:
        """Use the room there is."""
        self.set_class(self.size.height >= _TALL, "-tall")
        if self._lines:
            self.draw()

    def on_option_list_option_highlighted(self) -> None:
        """Show the line in full."""
        self._draw_item()

    def say(self, sentence: str = "") -> None:
        """Show a sentence until the next key; else what is open, on a rule."""
        self._said = sentence
        words = f" open: {open_counts(self.row).strip(' !?') or 'nothing'} ── Space: all of it ──"
        rule = Text(f"{'─' * max(0, self.size.width - len(words))}{words}", style="dim")
        told = Text(printable(sentence), style="bold") if sentence else rule
        self.query_one("#message", Static).update(told)

    def on_key(self) -> None:
        """Clear the last message."""
        self.say()

    # -- keys -------------------------------------------------------------------------------

    def check_action(self, action: str, parameters: tuple[object, ...]) -> bool | None:  # noqa: ARG002
        """Leave Enter to what the line is: something to answer, or something to read."""
        if action == "answer":
            return self._answerable
        if action == "photos":
            return bool(self.items)
        if action == "since":
            return bool(self._lines) and self.row.review.acceptance is not None
        return True

    @property
    def _answerable(self) -> bool:
        line = self.line
        return line.asked is not None or (line.finding is not None and line.finding.level != "stop")

    def action_answer(self) -> None:
        """Answer the question or finding under the cursor."""
        self.dialogs.answer()

    def action_read(self) -> None:
        """Show the line in full, with every step of the reasoning."""
        text = whole_page(self.row, self.line, self.items)
        self.app.push_screen(HelpScreen(self.dialogs.place_in_words, text))

    def action_inquire(self) -> None:
        """Ask about the factor under the cursor, the whole, or go on from a question."""
        self.dialogs.inquire()

    def action_accept(self) -> None:
        """Accept the value, after saying what is accepted and what speaks against it."""
        self.dialogs.accept()

    def action_return(self) -> None:
        """Give it back to the crew with the reason."""
        self.dialogs.return_()

    def action_accept_all(self) -> None:
        """Accept everything without open findings, after a list."""
        self.dialogs.accept_all()

    def action_undo(self) -> None:
        """Take back the last own line of this reach, after saying which."""
        self.dialogs.undo()

    def action_since(self) -> None:
        """Tell what changed since it was accepted."""
        self.dialogs.since()

    def action_photos(self) -> None:
        """Look at what is filed for the factor, else at everything filed for the place."""
        from roughness.screens.photo import PhotoScreen

        found = self._evidence_here()
        if found:
            self.app.push_screen(PhotoScreen(found))
        else:
            self.say("No photo or document is filed for this part.")

    def action_opinions(self) -> None:
        """Second opinions: hand out, take in, lay side by side, agree."""
        self.dialogs.opinions.open()

    def action_timeline(self) -> None:
        """Tell who said what about this reach."""
        from roughness.screens.timeline import TimelineScreen

        self.app.push_screen(TimelineScreen(self.survey, self.row.reach.reach))

    def action_handbook(self) -> None:
        """Open the published table of the factor."""
        from roughness.screens.handbook import HandbookScreen

        place = self.row.place
        assert place is not None
        factor = self.factor[1] if self.factor else None
        self.app.push_screen(
            HandbookScreen(self.survey.handbooks, place.handbook.key, place.part.setting, factor)
        )

    def action_turn(self, by: int) -> None:
        """Go to the next weak place, or back to the one before."""
        to = self.at + by
        if not 0 <= to < len(self.keys):
            self.say("This is the weakest place." if by < 0 else "This was the last place.")
            return
        self.at = to
        self.say()
        self.draw(first=True)

    def action_help(self) -> None:
        """Explain the review."""
        self.app.push_screen(HelpScreen("Review", REVIEW_HELP))

    def action_back(self) -> None:
        """Go back to the list."""
        self.dismiss()
