"""The trail of a reach in sentences: who said what and when, the latest first."""

from typing import ClassVar

from rich.text import Text
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.screen import Screen
from textual.widgets import OptionList, Static
from textual.widgets.option_list import Option

from roughness.desk.folder import SurveyFolder
from roughness.desk.history import Told, timeline
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.screens.help import HelpScreen
from roughness.screens.help_texts import TIMELINE_HELP
from roughness.screens.key_line import KeyLine


class TimelineScreen(Screen[None]):
    """What was said about a reach; nothing is ever taken out of it."""

    CSS_PATH = "survey.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape,l", "back", "back"),
        Binding("question_mark", "help", "help"),
    ]

    def __init__(self, survey: SurveyFolder, reach: str) -> None:
        super().__init__()
        self._survey, self._reach = survey, reach

    def compose(self) -> ComposeResult:
        """A line each, and the whole of the selected one below."""
        yield Static(Text(f"{printable(self._reach)}: who said what", style="bold"), id="title")
        yield OptionList(id="lines", compact=True)
        yield Static("", id="detail")
        yield KeyLine()

    def on_mount(self) -> None:
        """Read the trail."""
        listing = self.query_one(OptionList)
        try:
            told = timeline(self._survey, self._reach)
        except RoughnessError as error:
            self.query_one("#detail", Static).update(Text(str(error)))
            return
        self._sentences = [sentence(one) for one in reversed(told)]
        listing.add_options(
            Option(Text(told, no_wrap=True, overflow="ellipsis")) for told in self._sentences
        )
        listing.highlighted = 0
        listing.focus()

    def on_option_list_option_highlighted(self, event: OptionList.OptionHighlighted) -> None:
        """Show the sentence whole."""
        self.query_one("#detail", Static).update(Text(self._sentences[event.option_index]))

    def action_back(self) -> None:
        """Leave."""
        self.dismiss()

    def action_help(self) -> None:
        """Explain the screen."""
        self.app.push_screen(HelpScreen("Timeline", TIMELINE_HELP))


def sentence(told: Told) -> str:
    """Return a line of the trail as people read it; what was taken back is said to be."""
    gone = "taken back: " if told.withdrawn else ""
    return f"{told.at[:16]}  {told.by}  {gone}{told.says}"
