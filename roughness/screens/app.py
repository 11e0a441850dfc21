"""The application: its look, the screen it starts on, and how it is left."""

import os
import sys
from pathlib import Path
from typing import ClassVar

from textual.app import App
from textual.binding import Binding, BindingType

from roughness.screens.start import StartScreen
from roughness.screens.survey import SurveyScreen

_DARK, _LIGHT = "ansi-dark", "ansi-light"


class RoughnessApp(App[None]):
    """The screens of the tool, in the colours of the terminal.

    Parameters
    ----------
    folder : Path, optional
        What to open: a survey, or a place to make one.
    by : str, optional
        Who is at the keyboard, where that was said.
    demo : bool
        Whether the survey is a copy of the demo.
    """

    TITLE = "roughness"
    CSS_PATH = "app.tcss"
    ENABLE_COMMAND_PALETTE = False
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("ctrl+q", "quit", "quit", show=False, priority=True),
        Binding("q", "quit", "quit"),
    ]

    def __init__(
        self, folder: Path | None = None, by: str | None = None, *, demo: bool = False
    ) -> None:
        # Said before the theme is: NO_COLOR leaves out colours then, and not the text.
        super().__init__(ansi_color=True)
        self.theme = _LIGHT if _is_light(os.environ.get("COLORFGBG", "")) else _DARK
        self._start = StartScreen(folder, by, demo=demo)
        self.last_words = ""

    def on_mount(self) -> None:
        """Start; a survey that was asked for opens over the start screen."""
        self.push_screen(self._start)

    async def action_quit(self) -> None:
        """Leave the survey properly, then the program; a blind walk is asked about first."""
        from roughness.screens.opinion_walk import BlindWalk

        if any(isinstance(s, BlindWalk) and s.warn_before_quitting() for s in self.screen_stack):
            return
        for screen in self.screen_stack:
            if isinstance(screen, SurveyScreen):
                self.last_words = screen.leave()
        self.exit()


def open_screens(survey: Path | None, by: str | None, demo: bool) -> int:
    """Open the screens and return the exit status when they are left.

    Parameters
    ----------
    survey : Path or None
        The survey to open, or a place to make one; None starts on the list of recent ones.
    by : str or None
        Who is at the keyboard; None: as remembered, else asked.
    demo : bool
        Whether the survey is a copy of the demo: then the walk opens at once.
    """
    app = RoughnessApp(survey, by, demo=demo)
    app.run()
    if app.last_words:
        print(app.last_words, file=sys.stderr)
    return app.return_code or 0


def _is_light(colours: str) -> bool:
    """Read what some terminals say of themselves: ``foreground;background`` by number."""
    background = colours.rpartition(";")[2]
    return background in ("7", "15")
