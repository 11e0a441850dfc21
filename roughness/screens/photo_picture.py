"""A picture as half blocks, as large as the room there is, or a sentence in its place."""

import asyncio
from collections.abc import Iterable, Sequence
from pathlib import Path
from typing import Final

from rich.color import Color
from rich.style import Style
from rich.text import Text
from textual import work
from textual.widgets import Static

from roughness.errors import InputError
from roughness.evidence.pictures import Cells, Colour, half_blocks
from roughness.quantities.foreign_text import printable

# From little to much ink; without colours these stand for the half blocks.
_SHADES: Final = " ░▒▓█"


class Picture(Static):
    """Shows one picture and draws it anew when the room changes."""

    DEFAULT_CSS = "Picture { height: 1fr; content-align: center middle; }"

    def __init__(self, id: str | None = None) -> None:  # noqa: A002 -- Textual's own word
        super().__init__("", id=id)
        self._path: Path | None = None
        self.shown: tuple[Path, int, int] | None = None
        """The picture and the room that it was last drawn for."""

    def show(self, path: Path) -> None:
        """Show a picture; a sentence where it cannot be shown."""
        self._path = path
        self._draw()

    def tell(self, sentence: str) -> None:
        """Say something in place of a picture."""
        self._path, self.shown = None, None
        self.workers.cancel_node(self)
        self.update(Text(printable(sentence), justify="center"))

    def on_resize(self) -> None:
        """Use the room there is."""
        if self._path is not None:
            self._draw()

    @work(exclusive=True, group="picture")
    async def _draw(self) -> None:
        path, (columns, rows) = self._path, self.size
        if path is None or not self.size or self.shown == (path, columns, rows):
            return
        self.update(Text("reading the picture...", style="dim"))
        try:
            lines = await asyncio.to_thread(half_blocks, path, columns, rows)
        except InputError as error:
            self.update(Text(f"It cannot be shown here: {error}.", justify="center"))
            return
        shaded = self.app.no_color
        is_dark = self.app.current_theme.dark
        self.update(in_shades(lines, light_ink=is_dark) if shaded else in_colours(lines))
        self.shown = path, columns, rows


def in_colours(lines: Iterable[Sequence[Cells]]) -> Text:
    """Return half blocks in the colours of the picture."""
    told = [
        Text.assemble(*((run.text, _style(run)) for run in line), no_wrap=True) for line in lines
    ]
    return Text("\n", no_wrap=True).join(told)


def in_shades(lines: Iterable[Sequence[Cells]], *, light_ink: bool) -> Text:
    """Return a picture in four shades of ink, for a terminal without colours.

    Parameters
    ----------
    lines : iterable of sequence of Cells
        The picture.
    light_ink : bool
        Whether the terminal writes light on dark: then much ink is bright.
    """
    told = ["".join(len(run.text) * _shade(run, light_ink) for run in line) for line in lines]
    return Text("\n".join(told), no_wrap=True)


def _style(run: Cells) -> Style:
    below = None if run.below is None else Color.from_rgb(*run.below)
    return Style(color=Color.from_rgb(*run.above), bgcolor=below)


def _shade(run: Cells, light_ink: bool) -> str:
    both = [colour for colour in (run.above, run.below) if colour is not None]
    bright = sum(map(_brightness, both)) / len(both)
    at = min(len(_SHADES) - 1, int(bright * len(_SHADES)))
    return _SHADES[at if light_ink else len(_SHADES) - 1 - at]


def _brightness(colour: Colour) -> float:
    """Return the luma of a colour, 0 to 1 (weights of ITU-R BT.601)."""
    red, green, blue = colour
    return (0.299 * red + 0.587 * green + 0.114 * blue) / 255
