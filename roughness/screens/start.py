"""No survey yet: what this is, the surveys of late, the demo, a new one."""

from pathlib import Path
from typing import ClassVar, Final

from rich.text import Text
from textual import events, work
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.screen import Screen
from textual.widgets import OptionList, Static

from roughness.desk.folder import SurveyFolder
from roughness.desk.identity import known_person, recent_surveys, remember_survey
from roughness.desk.recording import Recorder
from roughness.errors import RoughnessError
from roughness.quantities.foreign_text import printable
from roughness.screens import start_forms
from roughness.screens.help import HelpScreen
from roughness.screens.help_texts import START_HELP
from roughness.screens.key_line import KeyLine
from roughness.screens.menu import numbered
from roughness.screens.survey import SurveyScreen

_WHAT_THIS_IS: Final = (
    "Manning's n for every reach of a stream, from published tables, with a range and the"
    " reasons. You are asked factor by factor; each choice shows what it does to n, and is"
    " kept at once in a record that others can check."
)
_MOST_RECENT: Final = 5
_ENTRIES: Final = ("look around: a copy of the demo survey", "new survey", "open a folder")


class StartScreen(Screen[None]):
    """Where the tool starts when it has nothing to open.

    Parameters
    ----------
    folder : Path, optional
        What to open at once: a survey, or a place to make one.
    by : str, optional
        Who is at the keyboard, where that was said.
    demo : bool
        Whether the survey is the demo: then the walk opens too.
    """

    CSS_PATH = "start.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("h", "handbook", "handbook"),
        Binding("q", "app.quit", "quit"),
        Binding("question_mark", "help", "help"),
    ]

    def __init__(self, folder: Path | None, by: str | None, *, demo: bool = False) -> None:
        super().__init__()
        self._folder, self._by, self._demo = folder, by, demo
        self._recent: list[Path] = []

    def compose(self) -> ComposeResult:
        """Say what this is, then what can be opened."""
        yield Static(Text("roughness", style="bold"), id="title")
        yield Static(Text(_WHAT_THIS_IS), id="what")
        yield Static("", id="message")
        yield OptionList(id="entries", compact=True)
        yield Static(Text("n is a judgement: calibrate it to observed flows where they exist."))
        yield KeyLine("↑↓ ⏎ or a number: open")

    def on_mount(self) -> None:
        """List the surveys of late, and open what was asked for."""
        self._list()
        self._begin()

    def on_screen_resume(self) -> None:
        """List anew after a survey was left."""
        if self.is_mounted:
            self._list()

    def _list(self) -> None:
        entries = self.query_one(OptionList)
        self._recent = recent_surveys()[:_MOST_RECENT]
        told = [*_ENTRIES, *(f"{path.name}   {path.parent}" for path in self._recent)]
        if self._recent:
            told = [*told[len(_ENTRIES) :], *_ENTRIES]
        entries.clear_options()
        entries.add_options([numbered(at, entry) for at, entry in enumerate(told)])
        entries.highlighted = 0
        entries.focus()

    def say(self, sentence: str) -> None:
        """Show one sentence: what could not be opened and why."""
        self.query_one("#message", Static).update(Text(printable(sentence)))

    # -- keys -------------------------------------------------------------------------------

    def on_option_list_option_selected(self, event: OptionList.OptionSelected) -> None:
        """Open what was picked."""
        self._pick(event.option_index)

    def on_key(self, event: events.Key) -> None:
        """Open an entry by its number."""
        count = self.query_one(OptionList).option_count
        if event.character and event.character in "123456789"[:count]:
            event.stop()
            self._pick(int(event.character) - 1)

    def action_handbook(self) -> None:
        """Open the published tables."""
        from roughness.screens.handbook import HandbookScreen

        self.app.push_screen(HandbookScreen(None))

    def action_help(self) -> None:
        """Explain the screen."""
        self.app.push_screen(HelpScreen("Start", START_HELP))

    # -- opening ----------------------------------------------------------------------------

    @work(exclusive=True, group="dialog")
    async def _begin(self) -> None:
        folder = self._folder
        if folder is None and (Path.cwd() / "survey.jsonl").is_file():
            folder = Path.cwd()
        if folder is None:
            await self._person()
        elif folder.name == "survey.jsonl" and folder.is_file():
            await self._open(folder.parent)
        elif (folder / "survey.jsonl").is_file():
            await self._open(folder)
        elif folder.is_file():
            self.say(f"{folder} is a file; a survey is a folder.")
        elif not folder.exists() or not any(folder.iterdir()):
            self.say(f"{folder} holds no survey yet.")
            await self._new(str(folder))
        else:
            self.say(f"{folder} holds no survey (no survey.jsonl) and is not empty.")

    @work(exclusive=True, group="dialog")
    async def _pick(self, at: int) -> None:
        self.say("")
        if at < len(self._recent):
            await self._open(self._recent[at])
            return
        choose = (self._copy_demo, self._new, self._open_folder)
        await choose[at - len(self._recent)]()

    async def _person(self) -> str | None:
        known = known_person(self._by)
        return known or await self.app.push_screen_wait(start_forms.person_form())

    async def _copy_demo(self) -> None:
        self._demo = True
        if await self._person():
            folder = await self.app.push_screen_wait(start_forms.demo_form())
            if folder is not None:
                await self._open(folder)

    async def _new(self, folder: str = "") -> None:
        self._demo = False
        by = await self._person()
        if by:
            made = await self.app.push_screen_wait(start_forms.new_form(by, folder))
            if made is not None:
                await self._open(made)

    async def _open_folder(self) -> None:
        self._demo = False
        folder = await self.app.push_screen_wait(start_forms.folder_form())
        if folder is not None:
            await self._open(folder)

    async def _open(self, folder: Path) -> None:
        by = await self._person()
        if not by:
            return
        try:
            survey = opened(folder)
        except RoughnessError as error:
            self.say(str(error))
            return
        except OSError as error:
            self.say(f"{folder}: it cannot be opened ({error.strerror})")
            return
        remember_survey(folder)
        self.say("")
        await self.app.push_screen(SurveyScreen(Recorder(survey, by), walk_at_once=self._demo))
        self._demo = False


def opened(folder: Path) -> SurveyFolder:
    """Return a survey that can at least be read.

    Raises
    ------
    RecordError
        Where the folder holds none, or its own trail tells nothing.
    """
    survey = SurveyFolder(folder)
    if not survey.state.survey:
        fault = next(iter(survey.trail().broken), None)
        raise start_forms.not_a_survey(folder, str(fault) if fault else "it is empty")
    return survey
