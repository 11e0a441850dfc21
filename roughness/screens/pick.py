"""One of a few fixed words, chosen with the arrows."""

from collections.abc import Sequence
from typing import ClassVar

from rich.text import Text
from textual.binding import Binding, BindingType
from textual.message import Message
from textual.widget import Widget


class Pick(Widget, can_focus=True):
    """A line that shows the choices; left, right and space move along them.

    Parameters
    ----------
    choices : sequence of str
        The words.
    value : str
        The one that stands first.
    """

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("left", "turn(-1)", "before", show=False),
        Binding("right,space", "turn(1)", "next", show=False),
    ]
    DEFAULT_CSS = """
    Pick { height: 1; width: 1fr; }
    Pick:focus { text-style: bold; }
    """

    class Changed(Message):
        """Another choice was picked."""

    def __init__(
        self,
        choices: Sequence[str],
        value: str,
        *,
        id: str | None = None,  # noqa: A002 -- Textual's own word
    ) -> None:
        super().__init__(id=id)
        self._choices = tuple(choices)
        self.value = value if value in self._choices else self._choices[0]

    def action_turn(self, by: int) -> None:
        """Go to the next or the previous choice."""
        at = (self._choices.index(self.value) + by) % len(self._choices)
        self.value = self._choices[at]
        self.refresh()
        self.post_message(self.Changed())

    def render(self) -> Text:
        """Show all choices where they fit, else the chosen one and how many there are."""
        told = [f"[{word}]" if word == self.value else f" {word} " for word in self._choices]
        line = Text("".join(told), no_wrap=True, overflow="ellipsis")
        if line.cell_len <= self.size.width:
            start = sum(map(len, told[: self._choices.index(self.value)]))
            line.stylize(
                "reverse" if self.has_focus else "bold", start, start + len(self.value) + 2
            )
            return line
        place = f"{self._choices.index(self.value) + 1} of {len(self._choices)}"
        style = "reverse" if self.has_focus else "bold"
        return Text.assemble("‹ ", (self.value, style), f" ›   ←→ {place}", no_wrap=True)
