"""One photo or document after another, as well as a terminal can show it."""

from collections.abc import Sequence
from typing import ClassVar

from rich.text import Text
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.screen import Screen
from textual.widgets import Static

from roughness.desk.evidence_lists import Item
from roughness.screens.key_line import KeyLine
from roughness.screens.photo_picture import Picture
from roughness.screens.photo_text import about_lines, heading, why_not_shown


class PhotoScreen(Screen[None]):
    """Shows the evidence of a place; left and right go to the next one.

    Parameters
    ----------
    items : sequence of Item
        What :func:`roughness.desk.evidence_lists.evidence_of` gave, or some of it; at least
        one.
    at : int
        The one to begin with.
    """

    CSS_PATH = "photo.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("left", "turn(-1)", "before"),
        Binding("right", "turn(1)", "next"),
        Binding("space", "turn(1)", show=False),
        Binding("escape", "back", "back"),
        Binding("enter,p", "back", show=False),
    ]

    def __init__(self, items: Sequence[Item], at: int = 0) -> None:
        super().__init__()
        self._items, self._at = tuple(items), at

    def compose(self) -> ComposeResult:
        """Caption on top, the picture, and what is known of it below."""
        yield Static("", id="caption")
        yield Picture(id="picture")
        yield Static("", id="about")
        yield KeyLine()

    def on_mount(self) -> None:
        """Show the first one."""
        self._show()

    def on_resize(self) -> None:
        """Write the caption anew for the new width."""
        self._write()

    @property
    def item(self) -> Item:
        """What is shown."""
        return self._items[self._at]

    def _show(self) -> None:
        self._write()
        picture = self.query_one(Picture)
        if self.item.may_be_shown:
            picture.show(self.item.path)
        else:
            picture.tell(why_not_shown(self.item))

    def _write(self) -> None:
        count = f" {self._at + 1} of {len(self._items)}"
        line = Text(heading(self.item), style="bold")
        line.truncate(max(0, self.size.width - len(count) - 2), overflow="ellipsis", pad=True)
        self.query_one("#caption", Static).update(line + Text(count))
        self.query_one("#about", Static).update(Text("\n").join(about_lines(self.item)))

    def check_action(self, action: str, _: tuple[object, ...]) -> bool | None:
        """Leave out turning where there is one alone."""
        return action != "turn" or len(self._items) > 1

    def action_turn(self, by: int) -> None:
        """Go to the next or the previous one; after the last comes the first."""
        self._at = (self._at + by) % len(self._items)
        self._show()

    def action_back(self) -> None:
        """Leave."""
        self.dismiss()
