"""The keys that work now, on one line at the bottom of a screen."""

from rich.cells import cell_len
from rich.text import Text
from textual.binding import Binding
from textual.screen import Screen
from textual.widgets import Static

_SHOWN_AS = {
    "question_mark": "?",
    "slash": "/",
    "plus": "+",
    "enter": "⏎",
    "escape": "Esc",
    "left": "←",
    "right": "→",
    "up": "↑",
    "down": "↓",
    "backspace": "⌫",
    "tab": "Tab",
}


class KeyLine(Static):
    """Names the bindings of the screen that are shown, as many as fit; help comes last.

    Parameters
    ----------
    lead : str
        Keys of the focused widget, told first.
    """

    DEFAULT_CSS = """
    KeyLine { dock: bottom; height: 1; }
    """

    def __init__(self, lead: str = "") -> None:
        super().__init__()
        self._lead = lead

    def on_mount(self) -> None:
        """Follow the bindings of the screen."""
        self.screen.bindings_updated_signal.subscribe(self, self._changed)

    def on_resize(self) -> None:
        """Name more keys where there is more room."""
        self._draw()

    def _changed(self, _: Screen[object]) -> None:
        self._draw()

    def _draw(self) -> None:
        bindings = [
            (_shown(active.binding), active.binding.description)
            for active in self.screen.active_bindings.values()
            if active.binding.show and active.enabled
        ]
        # A binding of several keys stands there once for each of them.
        bindings = sorted(dict.fromkeys(bindings), key=lambda pair: pair[0] == "?")
        line = Text(self._lead, no_wrap=True, overflow="crop")
        room = self.size.width - sum(len(f"{k} {w}  ") for k, w in bindings if k == "?")
        for key, word in bindings:
            told = f"{key} {word}"
            if key != "?" and line.cell_len + cell_len(told) + 2 > room:
                continue
            line.append("  " if line.plain else "")
            line.append(f"{key} ", style="bold")
            line.append(word)
        self.update(line)


def _shown(binding: Binding) -> str:
    return binding.key_display or _SHOWN_AS.get(binding.key, binding.key)
