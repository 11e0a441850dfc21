"""A short list to pick from, and a question with yes or no."""

from collections.abc import Sequence
from typing import ClassVar, Final

from rich.text import Text
from textual import events
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.screen import ModalScreen
from textual.widgets import OptionList, Static
from textual.widgets.option_list import Option

from roughness.quantities.foreign_text import printable

_DIGITS: Final = "123456789"


class Menu(ModalScreen[int | None]):
    """One of several entries, by arrows and Enter or by its number; returns its index.

    Parameters
    ----------
    title : str
        What is to be picked.
    entries : sequence of str
        What there is.
    at : int
        The entry that the cursor starts on.
    says : str
        A sentence under the title.
    """

    CSS_PATH = "dialog.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "leave", "leave")]

    def __init__(self, title: str, entries: Sequence[str], *, at: int = 0, says: str = "") -> None:
        super().__init__()
        self._heading, self._entries, self._at, self._says = title, entries, at, says

    def compose(self) -> ComposeResult:
        """Number the entries as far as digits go."""
        with Vertical(classes="dialog"):
            yield Static(Text(self._heading), classes="dialog--title")
            if self._says:
                yield Static(Text(self._says), classes="dialog--says")
            yield OptionList(*map(numbered, range(len(self._entries)), self._entries), compact=True)
            yield Static(Text("↑↓ move   ⏎ or its number: take   Esc leave"), id="keys")

    def on_mount(self) -> None:
        """Put the cursor on the likeliest entry."""
        self.query_one(OptionList).highlighted = self._at

    def on_option_list_option_selected(self, event: OptionList.OptionSelected) -> None:
        """Take the entry."""
        self.dismiss(event.option_index)

    def on_key(self, event: events.Key) -> None:
        """Take an entry by its number."""
        at = _DIGITS.find(event.character or " ")
        if 0 <= at < len(self._entries):
            event.stop()
            self.dismiss(at)

    def action_leave(self) -> None:
        """Close without picking."""
        self.dismiss(None)


class Confirm(ModalScreen[bool]):
    """Says what is about to happen; Enter does it, Escape does not."""

    CSS_PATH = "dialog.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("enter", "answer(True)", "do it"),
        Binding("escape", "answer(False)", "leave"),
    ]

    def __init__(self, title: str, sentence: str) -> None:
        super().__init__()
        self._heading, self._sentence = title, sentence

    def compose(self) -> ComposeResult:
        """Show the sentence whole."""
        with Vertical(classes="dialog"):
            yield Static(Text(self._heading), classes="dialog--title")
            yield Static(Text(self._sentence), classes="dialog--says")
            yield Static(Text("⏎ do it   Esc leave it as it is"), id="keys")

    def action_answer(self, yes: bool) -> None:
        """Close with the answer."""
        self.dismiss(yes)


def numbered(at: int, entry: str) -> Option:
    """Return an entry of a menu behind its number."""
    digit = _DIGITS[at] if at < len(_DIGITS) else " "
    return Option(Text(f"{digit}  {printable(entry)}", no_wrap=True, overflow="ellipsis"))
