"""A real survey in a temporary folder, and the walk opened on it."""

from collections.abc import AsyncIterator, Callable
from contextlib import AbstractAsyncContextManager, asynccontextmanager
from pathlib import Path

import pytest
from textual.app import App
from textual.pilot import Pilot

from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.places import Place, place_of
from roughness.desk.recording import Recorder
from roughness.screens.walk import WalkScreen
from roughness.survey.stream import FlowCondition, Part, Reach
from roughness.survey.words import USUAL_PARTS

FLOOD, WINTER = "design flood, leaf-on", "winter, leaf-off"


class OnlyTheWalk(App[None]):
    """The walk without the screens around it."""

    def __init__(self, pen: Recorder, reach: str, part: str, condition: str) -> None:
        super().__init__()
        self.screen_to_open = WalkScreen(pen.survey, pen, reach, part, condition)
        self.left = False

    def on_mount(self) -> None:
        self.push_screen(self.screen_to_open, lambda _: setattr(self, "left", True))


class Walked:
    """Somebody at the keyboard of a walk."""

    def __init__(self, pilot: Pilot[None], app: OnlyTheWalk) -> None:
        self.pilot, self.app = pilot, app

    async def press(self, *keys: str) -> None:
        await self.pilot.press(*keys)
        await self.pilot.pause()

    async def type(self, text: str) -> None:
        names = {" ": "space", ".": "full_stop", "%": "percent_sign", ",": "comma"}
        await self.press(*(names.get(sign, sign) for sign in text))

    async def gate(self, depth: str = "1.4 m", *, apart: bool = False) -> None:
        """Answer what is asked before the factors."""
        await self.type(depth)
        await self.press("enter")
        while self.focused != "apart":
            await self.press("enter")
        await self.press(*(["right", "enter"] if apart else []), "enter")

    @property
    def focused(self) -> str | None:
        return self.app.focused.id if self.app.focused else None

    @property
    def walk(self) -> WalkScreen:
        return self.app.screen_to_open

    @property
    def place(self) -> Place:
        course = self.walk.course
        return place_of(self.walk.survey, course.reach, course.part, course.condition)

    @property
    def text(self) -> str:
        """What is on the screen."""
        screen = self.app.screen
        strips = screen._compositor.render_strips(screen.size)
        return "\n".join(strip.text for strip in strips)

    @property
    def flat(self) -> str:
        """The same as one line, whatever was wrapped."""
        return " ".join(self.text.split())

    def grade(self, factor: str, segment: str | None = None) -> str | None:
        standing = self.place.at(segment, factor)  # type: ignore[arg-type]
        return standing.choice.grade if standing else None


OpenWalk = Callable[..., AbstractAsyncContextManager[Walked]]


@pytest.fixture
def survey(tmp_path: Path) -> SurveyFolder:
    reaches = [Reach(reach="Weir pool"), Reach(reach="Osier bend")]
    made = new_survey(tmp_path / "brook", "Runa", stream="Aldermere Brook", reaches=reaches)
    pen = Recorder(made, "Runa")
    pen.add_condition(FlowCondition(condition=FLOOD, growth="leaf-on", bank="over bank"))
    pen.add_condition(FlowCondition(condition=WINTER, growth="leaf-off", bank="in bank"))
    for reach in reaches:
        for part, setting in USUAL_PARTS.items():
            pen.add_part(reach.reach, Part(part=part, setting=setting))
    return made


@pytest.fixture
def open_walk(survey: SurveyFolder) -> OpenWalk:
    @asynccontextmanager
    async def opened(
        reach: str = "Osier bend",
        part: str = "main channel",
        condition: str = FLOOD,
        size: tuple[int, int] = (80, 24),
    ) -> AsyncIterator[Walked]:
        app = OnlyTheWalk(Recorder(survey, "Runa"), reach, part, condition)
        async with app.run_test(size=size) as pilot:
            await pilot.pause()
            yield Walked(pilot, app)

    return opened
