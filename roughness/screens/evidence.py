"""The photos and documents of a reach: whether they are intact, looked at, attached."""

import asyncio
from collections.abc import Awaitable, Callable
from typing import Any, ClassVar, Final

from rich.text import Text
from textual import work
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.screen import Screen
from textual.widgets import OptionList, Static
from textual.widgets.option_list import Option

from roughness.desk.attaching import Attached
from roughness.desk.evidence_lists import Item, evidence_of
from roughness.desk.folder import SurveyFolder
from roughness.desk.recording import Recorder
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.screens.evidence_drop import DropFolder
from roughness.screens.evidence_forms import About, attach_form, caption_form, drop_form
from roughness.screens.evidence_text import EVIDENCE_HELP, item_line, supports
from roughness.screens.help import HelpScreen
from roughness.screens.key_line import KeyLine
from roughness.screens.menu import Menu
from roughness.screens.photo import PhotoScreen
from roughness.screens.photo_text import about_lines

_LOOK_EVERY_S: Final = 1.0
_FILE, _WATCH = range(2)


class EvidenceScreen(Screen[None]):
    """Lists the evidence of a reach.

    Parameters
    ----------
    pen : Recorder
        Who attaches, and to which survey.
    about : About
        The reach; part, condition and factor where it was opened from one.
    drop : DropFolder
        The folder that is watched while the survey is open.
    """

    CSS_PATH = "evidence.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "look", "look", priority=True),
        Binding("plus", "add", "attach"),
        Binding("n", "note", "caption"),
        Binding("escape", "back", "back"),
        Binding("p", "back", show=False),
        Binding("question_mark", "help", "help"),
    ]

    def __init__(self, pen: Recorder, about: About, drop: DropFolder) -> None:
        super().__init__()
        self._pen, self._about, self._drop = pen, about, drop
        self._items: tuple[Item, ...] = ()
        self._asks = False

    def compose(self) -> ComposeResult:
        """Where, the list, and what is known of the selected one."""
        yield Static("", id="title")
        yield OptionList(id="items", compact=True)
        yield Static("", id="detail")
        yield Static("", id="message")
        yield Static("", id="drop")
        yield KeyLine()

    def on_mount(self) -> None:
        """Read what there is, and look into the watched folder from time to time."""
        self.query_one(OptionList).focus()
        self._tell_drop()
        self._read()
        self.set_interval(_LOOK_EVERY_S, self.look_into_drop)

    # -- what is shown ------------------------------------------------------------------------

    @property
    def item(self) -> Item | None:
        """The one under the cursor."""
        at = self.query_one(OptionList).highlighted
        return None if at is None else self._items[at]

    @work(exclusive=True, group="reading")
    async def _read(self) -> None:
        """Read the list aside: every byte of every file is compared with its hash."""
        self._title("reading...")
        folder, reach = self._pen.survey.folder, self._about.reach
        try:
            found = await asyncio.to_thread(lambda: evidence_of(SurveyFolder(folder), reach))
        except RoughnessError as error:
            self._title("")
            self.query_one("#detail", Static).update(Text(str(error)))
            return
        # What is about the factor at hand comes first; otherwise in the order they came.
        self._items = tuple(sorted(found, key=lambda one: not supports(one, self._about)))
        self._show()

    def _show(self) -> None:
        listing = self.query_one(OptionList)
        at = listing.highlighted or 0
        lines = [item_line(one, self._about, self.size.width - 2) for one in self._items]
        listing.clear_options().add_options(Option(line) for line in lines)
        listing.highlighted = min(at, len(lines) - 1) if lines else None
        self._title(f"{len(lines)} in all")
        if not lines:
            told = "No photo or document yet. + attaches one, or watches a folder for them."
            self.query_one("#detail", Static).update(Text(told))
        self.refresh_bindings()

    def _title(self, count: str) -> None:
        about = self._about
        words = [about.reach, *(w for w in (about.part, about.condition, about.factor) if w)]
        line = Text(f"Evidence: {printable(' › '.join(words))}", style="bold")
        line.truncate(max(0, self.size.width - len(count) - 4), overflow="ellipsis", pad=True)
        self.query_one("#title", Static).update(line + Text(f"  {count}"))

    def _tell_drop(self) -> None:
        folder = self._drop.folder
        wait = f", {self._drop.waiting} more to offer" if self._drop.waiting else ""
        told = f"watching {printable(str(folder))}{wait}" if folder else ""
        line = Text(told, style="italic", no_wrap=True, overflow="ellipsis")
        self.query_one("#drop", Static).update(line)

    def on_option_list_option_highlighted(self) -> None:
        """Tell what is known of the item under the cursor."""
        if self.item is not None:
            lines = about_lines(self.item)
            self.query_one("#detail", Static).update(Text("\n").join(lines))

    def on_resize(self) -> None:
        """Write the lines anew for the new width."""
        if self._items:
            self._show()

    # -- the watched folder -------------------------------------------------------------------

    def look_into_drop(self) -> None:
        """Look for files that stood still, and offer one where nothing else is asked."""
        self._drop.look()
        self._tell_drop()
        if not self._asks and self.app.screen is self and self._drop.waiting:
            self._run(self._offer)

    async def _offer(self) -> None:
        while (path := self._drop.next()) is not None:
            self._tell_drop()
            await self._attach_with(attach_form(self._pen, self._about, path))

    # -- keys ---------------------------------------------------------------------------------

    def _run(self, steps: Callable[[], Awaitable[None]]) -> None:
        if not self._asks:
            self._asks = True
            self._say("")
            self.run_worker(self._said(steps), group="dialog")

    async def _said(self, steps: Callable[[], Awaitable[None]]) -> None:
        try:
            await steps()
        except RoughnessError as error:
            self._say(f"! {error}")
        finally:
            self._asks = False

    def _say(self, sentence: str) -> None:
        """Tell something in a line of its own, until something else is done."""
        self.query_one("#message", Static).update(Text(printable(sentence), style="bold"))

    async def _ask(self, dialog: Screen[Any]) -> Any:
        return await self.app.push_screen_wait(dialog)

    async def _attach_with(self, form: Screen[Any]) -> None:
        attached: Attached | None = await self._ask(form)
        self._read()  # also after Esc: copying may have been under way
        if attached is None:
            return
        came = "Attached" if attached.is_new else "It was here already"
        self._say("; ".join([f"{came}: {attached.line.data['name']}", *attached.tells]) + ".")

    def check_action(self, action: str, _: tuple[object, ...]) -> bool | None:
        """Leave out what needs an item."""
        return bool(self._items) or action not in ("look", "note")

    def on_option_list_option_selected(self) -> None:
        """Enter and a click look at it."""
        self.action_look()

    def action_look(self) -> None:
        """Show it, and the others left and right of it."""
        if self.item is not None:
            self.app.push_screen(PhotoScreen(self._items, self._items.index(self.item)))

    def action_add(self) -> None:
        """Attach a file by its path, or watch a folder."""
        self._run(self._add)

    async def _add(self) -> None:
        folder = self._drop.folder
        watch = f"stop watching {folder}" if folder else "files that are put into a folder"
        picked = await self._ask(Menu("Attach", ["a file, by its path", watch]))
        if picked == _FILE:
            await self._attach_with(attach_form(self._pen, self._about))
        elif picked == _WATCH and folder:
            self._drop.stop()
        elif picked == _WATCH:
            await self._ask(drop_form(self._pen.survey.folder, self._drop))
        self._tell_drop()

    def action_note(self) -> None:
        """Say anew what the item shows."""
        item = self.item
        if item is not None:
            self._run(lambda: self._caption(item))

    async def _caption(self, item: Item) -> None:
        if await self._ask(caption_form(self._pen, self._about.reach, item)):
            self._read()

    def action_back(self) -> None:
        """Leave."""
        self.dismiss()

    def action_help(self) -> None:
        """Explain the screen."""
        self.app.push_screen(HelpScreen("Evidence", EVIDENCE_HELP))
