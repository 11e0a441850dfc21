"""The published tables on the screen: rows, sources, search, what the handbook says of itself."""

from typing import Any

import pytest
from textual.app import App

from roughness.desk.folder import SurveyFolder
from roughness.screens.handbook import HandbookScreen
from roughness.shelf.handbooks import load_handbook


@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_a_table_shows_its_rows_with_range_criterion_and_source(
    open_app: Any, survey: SurveyFolder, size: tuple[int, int]
) -> None:
    async with open_app(survey.folder, size=size) as keyboard:
        await keyboard.press("h", "right", "right", "right")
        assert "usgs-wsp-2339 › channel › obstruction" in keyboard.text
        for grade in load_handbook("usgs-wsp-2339").grades("channel", "obstruction"):
            assert f"{grade.name}" in keyboard.text
        await keyboard.press("down", "down")
        assert "minor: 0.005 – 0.015" in keyboard.words
        assert "table 2" in keyboard.words
        assert "seen second hand" in keyboard.words


async def test_the_last_line_names_every_key_once_on_eighty_columns(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("h")
        last = keyboard.text.splitlines()[-1]
        for told in ("⏎ about it", "←→ factor", "b handbook", "/ search", "Esc back", "? help"):
            assert last.count(told) == 1, last
        await keyboard.press("question_mark")
        assert keyboard.text.splitlines()[-1].count("Esc back") == 1


async def test_after_the_channel_come_the_flood_plains(open_app: Any, survey: SurveyFolder) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("h", "left")
        assert "flood plain › vegetation" in keyboard.text


async def test_the_search_looks_into_all_handbooks_as_one_types(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.type("h/willow")
        screen = keyboard.app.screen
        found = {row.handbook.key for row in screen._rows}
        assert len(found) > 1
        assert all("willow" in row.text for row in screen._rows)
        await keyboard.type(" zzz")
        assert "0 rows hold these words" in keyboard.text
        await keyboard.press("escape")
        assert "channel › base" in keyboard.text


async def test_another_handbook_is_picked_and_tells_what_it_is_good_for(
    open_app: Any, survey: SurveyFolder
) -> None:
    async with open_app(survey.folder) as keyboard:
        await keyboard.press("h", "b", "1")
        assert "cowan-1956 › channel › base" in keyboard.text
        await keyboard.press("enter")
        assert "GOOD FOR" in keyboard.text
        assert "Cowan" in keyboard.text


async def test_it_opens_at_the_factor_that_is_asked(survey: SurveyFolder) -> None:
    app: App[None] = App()
    async with app.run_test(size=(80, 24)) as pilot:
        screen = HandbookScreen(survey.handbooks, "scs-1963", "channel", "vegetation")
        await app.push_screen(screen)
        await pilot.pause()
        assert {row.factor for row in screen._rows} == {"vegetation"}
        assert {row.handbook.key for row in screen._rows} == {"scs-1963"}


async def test_an_agency_file_that_cannot_be_read_is_said_and_the_others_stay(
    open_app: Any, survey: SurveyFolder
) -> None:
    (survey.folder / "handbooks" / "own.toml").write_text('key = "own"\n')
    async with open_app(survey.folder, size=(120, 40)) as keyboard:
        await keyboard.press("h")
        assert "own.toml" in keyboard.words
        assert "channel › base" in keyboard.text
