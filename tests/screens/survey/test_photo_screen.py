"""Photos and documents looked at in the terminal: fitted to the room, redrawn, never trusted."""

import re
from collections.abc import AsyncIterator
from contextlib import asynccontextmanager
from pathlib import Path

import pytest
from PIL import Image
from rich.color_triplet import ColorTriplet
from rich.segment import Segment
from textual.app import App
from textual.pilot import Pilot

from roughness.desk.attaching import attach
from roughness.desk.evidence_lists import evidence_of
from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.evidence.pictures import UPPER_HALF
from roughness.screens.photo import PhotoScreen
from roughness.screens.photo_picture import Picture
from roughness.survey.stream import Reach

REACH = "Osier bend"
SIZES = [(80, 24), (120, 40), (40, 12)]


class OnlyPhotos(App[None]):
    """The photos without the screens around them."""

    def __init__(self, pen: Recorder, at: int = 0) -> None:
        super().__init__(ansi_color=True)
        self.photos = PhotoScreen(evidence_of(pen.survey, REACH), at)

    def on_mount(self) -> None:
        self.push_screen(self.photos)

    @property
    def text(self) -> str:
        screen = self.screen
        return "\n".join(strip.text for strip in screen._compositor.render_strips(screen.size))

    @property
    def words(self) -> str:
        return " ".join(self.text.split())


@pytest.fixture
def pen(tmp_path: Path) -> Recorder:
    survey = new_survey(tmp_path / "brook", "Runa", reaches=[Reach(reach=REACH)])
    return Recorder(survey, "Runa")


@asynccontextmanager
async def looking(
    pen: Recorder, size: tuple[int, int] = (80, 24), at: int = 0
) -> AsyncIterator[tuple[OnlyPhotos, Pilot[None]]]:
    app = OnlyPhotos(pen, at)
    async with app.run_test(size=size) as pilot:
        await drawn(app, pilot)
        yield app, pilot


async def drawn(app: OnlyPhotos, pilot: Pilot[None]) -> None:
    await pilot.pause()
    await app.workers.wait_for_complete()
    await pilot.pause()


def photo(folder: Path, name: str = "bend.jpg", size: tuple[int, int] = (400, 300)) -> Path:
    """A picture with red above and blue below, with time and position in its metadata."""
    image = Image.new("RGB", size, (200, 30, 30))
    image.paste((30, 30, 200), (0, size[1] // 2, size[0], size[1]))
    exif = Image.Exif()
    exif.get_ifd(0x8769).update({0x9003: "2026:06:30 14:03:22", 0x9011: "+02:00"})
    exif.get_ifd(0x8825).update({1: "N", 2: (51.0, 30.0, 0.0), 3: "W", 4: (2.0, 15.0, 0.0)})
    image.save(folder / name, exif=exif)
    return folder / name


@pytest.mark.parametrize("size", SIZES)
async def test_a_photo_is_shown_as_half_blocks_that_fit(
    pen: Recorder, tmp_path: Path, size: tuple[int, int]
) -> None:
    attach(pen, REACH, photo(tmp_path), caption="The bend", factors=["base", "vegetation"])
    async with looking(pen, size) as (app, _):
        lines = [line for line in app.text.splitlines() if UPPER_HALF in line]
        # Four to three, a cell being twice as high as wide.
        width = lines[0].count(UPPER_HALF)
        assert width / (2 * len(lines)) == pytest.approx(4 / 3, rel=0.15)
        assert len(lines) >= size[1] - 8
        assert all(len(line) <= size[0] for line in app.text.splitlines())


async def test_the_colours_are_those_of_the_picture(pen: Recorder, tmp_path: Path) -> None:
    attach(pen, REACH, photo(tmp_path))
    async with looking(pen) as (app, _):
        strips = app.screen._compositor.render_strips(app.screen.size)
        blocks = [s for strip in strips for s in strip if UPPER_HALF in s.text]
        first, last = (_foreground(blocks[at]) for at in (0, -1))
        assert first.red > 150 and first.blue < 90
        assert last.blue > 150 and last.red < 90


def _foreground(block: Segment) -> ColorTriplet:
    assert block.style and block.style.color and block.style.color.triplet
    return block.style.color.triplet


async def test_caption_time_position_hash_and_factors_are_told(
    pen: Recorder, tmp_path: Path
) -> None:
    line = attach(
        pen, REACH, photo(tmp_path), caption="Willows at the bend", factors=["base", "vegetation"]
    ).line
    async with looking(pen) as (app, _):
        for told in (
            "Willows at the bend",
            "Supports base and vegetation; the whole reach",
            "taken 2026-06-30 14:03:22+02:00",
            "51.50000° N, 2.25000° W",
            f"sha256 {line.data['sha256'][:12]}",
            "as it was attached",
            "by Runa",
        ):
            assert told in app.words, told


async def test_it_is_drawn_anew_for_another_size(pen: Recorder, tmp_path: Path) -> None:
    attach(pen, REACH, photo(tmp_path))
    async with looking(pen) as (app, pilot):
        before = app.text.count(UPPER_HALF)
        await pilot.resize_terminal(120, 40)
        await drawn(app, pilot)
        assert app.text.count(UPPER_HALF) > 2 * before
        assert app.screen.query_one(Picture).shown


async def test_left_and_right_turn_the_pages(pen: Recorder, tmp_path: Path) -> None:
    attach(pen, REACH, photo(tmp_path), caption="first")
    attach(pen, REACH, photo(tmp_path, "weir.png", (30, 90)), caption="second")
    async with looking(pen) as (app, pilot):
        assert "first" in app.words and "1 of 2" in app.words
        await pilot.press("right")
        await drawn(app, pilot)
        assert "second" in app.words and "2 of 2" in app.words
        await pilot.press("right")
        assert "1 of 2" in app.words
        await pilot.press("left", "escape")
        assert app.screen is not app.photos


async def test_what_is_missing_changed_or_no_picture_is_said(pen: Recorder, tmp_path: Path) -> None:
    notes = tmp_path / "levels.csv"
    notes.write_text("a,b\n")
    attach(pen, REACH, photo(tmp_path, "gone.jpg"))
    attach(pen, REACH, photo(tmp_path, "swapped.jpg", (20, 20)))
    attach(pen, REACH, notes)
    gone, swapped, _ = (one.path for one in evidence_of(pen.survey, REACH))
    gone.unlink()
    swapped.write_bytes(photo(tmp_path, "other.jpg", (50, 20)).read_bytes())
    for at, told in enumerate(("Missing: there is no file", "is not opened", "A document (CSV)")):
        async with looking(pen, at=at) as (app, _):
            assert told in app.words
            assert UPPER_HALF not in app.text


async def test_a_damaged_picture_is_a_sentence(pen: Recorder, tmp_path: Path) -> None:
    cut = tmp_path / "cut.jpg"
    whole = photo(tmp_path).read_bytes()
    cut.write_bytes(whole[: len(whole) // 2])
    attach(pen, REACH, cut)
    async with looking(pen) as (app, _):
        assert "It cannot be shown here" in app.words and "cut off or damaged" in app.words


async def test_names_and_captions_never_act_on_the_terminal(pen: Recorder, tmp_path: Path) -> None:
    attach(pen, REACH, photo(tmp_path, "a\x1b[2Jb.jpg"), caption="[bold]x[/] \x1b]0;y\x07 \u202e")
    async with looking(pen) as (app, _):
        assert "[bold]x[/]" in app.text
        assert not re.search("[\x00-\x09\x0b-\x1f\x7f\u202e]", app.text)


async def test_without_colours_the_picture_is_in_shades(
    pen: Recorder, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("NO_COLOR", "1")
    image = Image.new("L", (40, 40), 0)
    image.paste(255, (0, 0, 20, 40))
    image.save(tmp_path / "half.png")
    attach(pen, REACH, tmp_path / "half.png")
    async with looking(pen) as (app, _):
        assert UPPER_HALF not in app.text
        line = app.text.splitlines()[8].strip()
        assert set(line) == {"█"}  # one half has ink, the other none
        assert 10 < len(line) < 20
