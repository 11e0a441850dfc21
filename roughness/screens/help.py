"""A page of explanation over any screen."""

from typing import ClassVar

from rich.text import Text
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.screen import Screen
from textual.widgets import Static

from roughness.screens.key_line import KeyLine


class HelpScreen(Screen[None]):
    """A title and plain text to read; Escape leaves.

    Parameters
    ----------
    title : str
        What it explains.
    text : str
        The explanation; empty lines divide paragraphs, nothing in it is markup.
    """

    CSS_PATH = "survey.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape,question_mark,enter", "back", "back", key_display="Esc"),
        Binding("down", "scroll(1)", "more", key_display="↑↓"),
        Binding("up", "scroll(-1)", "less", show=False),
        Binding("pagedown,space", "page(1)", "next page", show=False),
        Binding("pageup", "page(-1)", "previous page", show=False),
    ]

    def __init__(self, title: str, text: str) -> None:
        super().__init__()
        self._heading, self._text = title, text

    def compose(self) -> ComposeResult:
        """Show the text in a column that scrolls."""
        yield Static(Text(self._heading, style="bold"), id="title")
        with VerticalScroll(id="page", can_focus=False):
            yield Static(Text(self._text))
        yield KeyLine()

    def action_back(self) -> None:
        """Go back to the screen below."""
        self.dismiss()

    def action_scroll(self, by: int) -> None:
        """Move by a line."""
        self.query_one("#page").scroll_relative(y=by, animate=False)

    def action_page(self, by: int) -> None:
        """Move by what fits on the screen."""
        page = self.query_one("#page")
        page.scroll_relative(y=by * max(1, page.size.height - 1), animate=False)
