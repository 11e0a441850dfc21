"""Somebody at the keyboard of the whole application, on real surveys in temporary folders."""

import re
from collections.abc import AsyncIterator, Callable
from contextlib import AbstractAsyncContextManager, asynccontextmanager
from pathlib import Path

import pytest
from textual.pilot import Pilot

from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.screens.app import RoughnessApp
from roughness.screens.survey import SurveyScreen
from roughness.survey.choices import CHOICES, Choice
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.survey.words import USUAL_PARTS, Factor

FLOOD = "design flood"
SIGNS = {
    " ": "space", ".": "full_stop", "/": "slash", "+": "plus", "?": "question_mark",
    "[": "left_square_bracket", "]": "right_square_bracket", "-": "minus", ",": "comma",
    "_": "underscore", "\n": "enter", ":": "colon",
}  # fmt: skip
GRADES: dict[Factor, str] = {
    "base": "firm-soil",
    "irregularity": "minor",
    "variation": "gradual",
    "obstruction": "negligible",
    "vegetation": "small",
    "meander": "minor",
}


class Keyboard:
    """Presses keys and reads the screen."""

    def __init__(self, app: RoughnessApp, pilot: Pilot[None]) -> None:
        self.app, self.pilot = app, pilot

    async def press(self, *keys: str) -> None:
        await self.pilot.press(*keys)
        for _ in range(3):
            await self.pilot.pause()

    async def until(self, screen: str) -> None:
        """Wait for work that runs aside."""
        for _ in range(200):
            if self.screen == screen:
                return
            await self.pilot.pause(0.01)

    async def done(self) -> None:
        """Wait until a form no longer says that it works."""
        await self.press()
        for _ in range(200):
            if "Working..." not in self.text:
                return
            await self.pilot.pause(0.01)

    async def type(self, text: str) -> None:
        await self.press(*(SIGNS.get(sign, sign) for sign in text))

    @property
    def text(self) -> str:
        """What is on the screen, line by line."""
        screen = self.app.screen
        return "\n".join(strip.text for strip in screen._compositor.render_strips(screen.size))

    @property
    def words(self) -> str:
        """The same as running text, frames taken away."""
        return " ".join(re.sub(r"[│╭╮╰╯─▌]", " ", self.text).split())

    @property
    def screen(self) -> str:
        return type(self.app.screen).__name__

    @property
    def survey_screen(self) -> SurveyScreen:
        found = [s for s in self.app.screen_stack if isinstance(s, SurveyScreen)]
        assert found, f"no survey is open: {self.text}"
        return found[-1]

    @property
    def selected(self) -> tuple[str, str]:
        line = self.survey_screen.selected
        assert line is not None
        return line.key


OpenApp = Callable[..., AbstractAsyncContextManager[Keyboard]]


@pytest.fixture(autouse=True)
def here(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """Stand in an empty folder, with a memory of nobody."""
    folder = tmp_path / "here"
    folder.mkdir()
    monkeypatch.chdir(folder)
    monkeypatch.setenv("HOME", str(tmp_path / "home"))
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.delenv("ROUGHNESS_BY", raising=False)
    return folder


@pytest.fixture
def open_app() -> OpenApp:
    @asynccontextmanager
    async def opened(
        folder: Path | None = None,
        by: str | None = "Runa",
        *,
        size: tuple[int, int] = (80, 24),
        demo: bool = False,
    ) -> AsyncIterator[Keyboard]:
        app = RoughnessApp(folder, by, demo=demo)
        async with app.run_test(size=size, notifications=True) as pilot:
            keyboard = Keyboard(app, pilot)
            await keyboard.press()
            yield keyboard

    return opened


@pytest.fixture
def pen(tmp_path: Path) -> Recorder:
    """Three reaches under one flow condition: one estimated, one begun, one untouched."""
    reaches = [Reach(reach=name) for name in ("Weir pool", "Osier bend", "Mill race")]
    survey = new_survey(tmp_path / "brook", "Runa", stream="Aldermere Brook", reaches=reaches)
    pen = Recorder(survey, "Runa")
    pen.add_condition(FlowCondition(condition=FLOOD, growth="leaf-on"))
    for name in ("Weir pool", "Osier bend"):
        pen.note_visit(name, Visit(visit="spring"))
        pen.add_part(name, Part(part="main channel", setting=USUAL_PARTS["main channel"]))
    judge(pen, "Osier bend", {"base": "firm-soil"})
    judge(pen, "Weir pool", GRADES)
    return pen


def judge(pen: Recorder, reach: str, grades: dict[Factor, str], part: str = "main channel") -> None:
    """Choose a grade for each factor that is named."""
    for factor, grade in grades.items():
        place = place_of(pen.survey, reach, part, FLOOD)
        choice: Choice = CHOICES[factor](grade=grade)
        pen.choose(place, factor, choice)


@pytest.fixture
def survey(pen: Recorder) -> SurveyFolder:
    return pen.survey


@pytest.fixture
def grades() -> dict[Factor, str]:
    return dict(GRADES)


@pytest.fixture
def judged() -> Callable[..., None]:
    return judge
