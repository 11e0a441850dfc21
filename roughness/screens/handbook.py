"""The published tables: row by row with their sources, and a search over all of them."""

from pathlib import Path
from typing import ClassVar

from rich.text import Text
from textual import events, on, work
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.screen import Screen
from textual.widgets import Input, OptionList, Static
from textual.widgets.option_list import Option

from roughness.quantities.foreign_text import printable
from roughness.screens import handbook_rows as rows
from roughness.screens.handbook_rows import TableRow
from roughness.screens.help import HelpScreen
from roughness.screens.help_texts import HANDBOOK_HELP
from roughness.screens.key_line import KeyLine
from roughness.screens.menu import Menu
from roughness.screens.reach_list import fitted
from roughness.survey.words import Factor, Setting

_WIDE = 110


class HandbookScreen(Screen[None]):
    """One table at a time, or what a search finds.

    Parameters
    ----------
    folder : Path, optional
        The survey's own handbooks; they go before the shipped ones.
    key : str, optional
        The handbook to start with.
    setting, factor : optional
        The table to start with.
    """

    CSS_PATH = "handbook.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("right", "turn(1)", "factor", key_display="←→"),
        Binding("left", "turn(-1)", "factor before", show=False),
        Binding("b", "book", "handbook"),
        Binding("slash", "search", "search"),
        Binding("escape", "back", "back"),
        Binding("h", "leave", "back", show=False),
        Binding("question_mark", "help", "help"),
    ]

    def __init__(
        self,
        folder: Path | None,
        key: str | None = None,
        setting: Setting | None = None,
        factor: Factor | None = None,
    ) -> None:
        super().__init__()
        self._books, self._wrong = rows.books(folder)
        keys = [book.key for book in self._books]
        self._book = keys.index(key) if key in keys else max(0, len(keys) - 1)
        places = rows.tables_of(self._books[self._book])
        wanted = (setting or "channel", factor or "base")
        self._table = next((at for at, place in enumerate(places) if place == wanted), 0)
        self._rows: list[TableRow] = []

    def compose(self) -> ComposeResult:
        """Which table, what it asks, its rows, and the selected row in full."""
        yield Static("", id="title")
        yield Static("", id="asks")
        yield Input(
            placeholder="words of a grade or criterion, in all handbooks", id="search", compact=True
        )
        yield OptionList(id="rows", compact=True)
        yield Static("", id="row")
        yield KeyLine("←→ factor  ⏎ about it")

    def on_mount(self) -> None:
        """Show the first table."""
        self.query_one("#search").display = False
        self._draw()
        self.query_one(OptionList).focus()
        for sentence in self._wrong:
            self.notify(sentence, severity="warning", markup=False, timeout=10)

    def on_resize(self, _: events.Resize) -> None:
        """Lay the rows out for the new width."""
        self._draw()

    # -- what is shown ----------------------------------------------------------------------

    @property
    def _place(self) -> tuple[Setting, Factor]:
        return rows.tables_of(self._books[self._book])[self._table]

    def _draw(self) -> None:
        typed = self.query_one("#search", Input).value
        book, (setting, factor) = self._books[self._book], self._place
        if typed.strip():
            self._rows = rows.search(self._books, typed)
            title, asks = "Search in all handbooks", f"{len(self._rows)} rows hold these words"
        else:
            self._rows = rows.rows_of(book, setting, factor)
            words = f"{rows.setting_words(setting)} › {factor} ({book.symbols[factor]})"
            title = f"{book.key} › {words}"
            asks = book.table(setting, factor).question
        self.query_one("#title", Static).update(Text(printable(title), style="bold"))
        self.query_one("#asks", Static).update(Text(printable(asks)))
        listing = self.query_one(OptionList)
        listing.clear_options()
        listing.add_options([Option(self._line(row, bool(typed.strip()))) for row in self._rows])
        listing.highlighted = 0 if self._rows else None
        if not self._rows:
            self.query_one("#row", Static).update("")

    def _line(self, row: TableRow, searching: bool) -> Text:
        width = max(40, self.size.width - 4)
        name, places = 17, 15
        short = row.grade.short
        if searching:
            short = f"{row.place}: {short}"
        tail = f" {rows.IN_SHORT[row.grade.provenance]}" if width >= _WIDE - 4 else ""
        rest = width - name - places - 2 - (18 if tail else 0)
        told = f"{fitted(printable(row.grade.name), name)} {fitted(row.range, places)} "
        return Text(told + fitted(printable(short), rest) + tail, no_wrap=True, overflow="crop")

    @on(OptionList.OptionHighlighted)
    def _tell(self, event: OptionList.OptionHighlighted) -> None:
        if event.option_index < len(self._rows):
            searching = bool(self.query_one("#search", Input).value)
            told = rows.about_row(self._rows[event.option_index], with_place=searching)
            self.query_one("#row", Static).update(Text(told))

    # -- keys -------------------------------------------------------------------------------

    def action_turn(self, by: int) -> None:
        """Go to the next or previous table of this handbook."""
        self._end_search()
        self._table = (self._table + by) % len(rows.tables_of(self._books[self._book]))
        self._draw()

    @work(exclusive=True, group="dialog")
    async def action_book(self) -> None:
        """Pick another handbook."""
        told = [f"{book.key}   {book.authors} {book.year}" for book in self._books]
        picked = await self.app.push_screen_wait(Menu("Handbook", told, at=self._book))
        if picked is not None:
            wanted = self._place
            self._end_search()
            places = rows.tables_of(self._books[picked])
            self._book = picked
            self._table = places.index(wanted) if wanted in places else 0
            self._draw()

    def action_search(self) -> None:
        """Search all rows of all handbooks as it is typed."""
        self.query_one("#search").display = True
        self.query_one("#search").focus()

    @on(Input.Changed, "#search")
    def _typed(self) -> None:
        self._draw()

    @on(Input.Submitted, "#search")
    def _to_rows(self) -> None:
        self.query_one(OptionList).focus()

    @on(OptionList.OptionSelected)
    def action_about(self) -> None:
        """Tell what the handbook of the selected row is good for, and its contradictions."""
        at = self.query_one(OptionList).highlighted
        book, (setting, factor) = self._books[self._book], self._place
        if at is not None and at < len(self._rows):
            row = self._rows[at]
            book, setting, factor = row.handbook, row.setting, row.factor
        text = rows.about_book(book, book.table(setting, factor))
        self.app.push_screen(HelpScreen(printable(book.title), text))

    def action_back(self) -> None:
        """End the search, else leave."""
        if self.query_one("#search").display:
            self._end_search()
            self._draw()
        else:
            self.dismiss()

    def action_leave(self) -> None:
        """Leave."""
        self.dismiss()

    def action_help(self) -> None:
        """Explain the screen."""
        self.app.push_screen(HelpScreen("Handbook", HANDBOOK_HELP))

    def _end_search(self) -> None:
        entry = self.query_one("#search", Input)
        with self.prevent(Input.Changed):
            entry.value = ""
        entry.display = False
        self.query_one(OptionList).focus()
