"""Whether everybody can read the pages: contrast, headings, tables, pictures, paper."""

import re
import shutil
from collections.abc import Iterator
from html.parser import HTMLParser
from importlib.resources import files
from itertools import pairwise
from pathlib import Path

import pytest

from roughness.desk.folder import SurveyFolder
from roughness.desk.rows import rows
from roughness.reports.field_sheet import field_sheet
from roughness.reports.survey_report import survey_report
from roughness.shelf.places import demo_folder

TEMPLATES = files("roughness.reports") / "templates"
PAGE_CSS = (TEMPLATES / "page.css").read_text("utf-8")
SHEET_CSS = (TEMPLATES / "fieldsheet.css").read_text("utf-8")


@pytest.fixture(scope="module")
def survey(tmp_path_factory: pytest.TempPathFactory) -> SurveyFolder:
    folder: Path = tmp_path_factory.mktemp("s") / "demo"
    shutil.copytree(demo_folder(), folder)
    return SurveyFolder(folder)


@pytest.fixture(scope="module", params=["report", "field sheet"])
def page(request: pytest.FixtureRequest, survey: SurveyFolder) -> str:
    if request.param == "report":
        return survey_report(survey, rows(survey)).decode("utf-8")
    return field_sheet(survey).decode("utf-8")


class Outline(HTMLParser):
    """Tags, and what is open, of a page that must close what it opens."""

    VOID = frozenset({"meta", "img", "br"})

    def __init__(self, page: str) -> None:
        super().__init__()
        self.open: list[str] = []
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.feed(page)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append((tag, dict(attrs)))
        if tag not in self.VOID:
            self.open.append(tag)

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append((tag, dict(attrs)))

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag, f"line {self.getpos()[0]}: </{tag}>"


# -- contrast -----------------------------------------------------------------------------------


def luminance(colour: str) -> float:
    """Relative luminance of sRGB: W3C, Web Content Accessibility Guidelines 2.2."""
    parts = [int(colour[at : at + 2], 16) / 255 for at in (1, 3, 5)]
    linear = [p / 12.92 if p <= 0.04045 else ((p + 0.055) / 1.055) ** 2.4 for p in parts]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


def contrast(one: str, other: str) -> float:
    dark, light = sorted((luminance(one), luminance(other)))
    return (light + 0.05) / (dark + 0.05)


def colours() -> dict[str, str]:
    return dict(re.findall(r"--([a-z-]+): (#[0-9a-f]{6});", PAGE_CSS))


def texts_on_papers() -> Iterator[tuple[str, str]]:
    known = colours()
    for name, colour in known.items():
        if name in ("ink", "muted", "accent"):
            yield from ((colour, known[paper]) for paper in ("paper", "head"))
        if name.endswith("-ink"):
            yield colour, known[name.replace("-ink", "-paper")]


def test_the_figure_for_contrast_is_that_of_the_guidelines() -> None:
    assert contrast("#000000", "#ffffff") == pytest.approx(21)
    assert contrast("#777777", "#ffffff") == pytest.approx(4.48, abs=0.005)


@pytest.mark.parametrize(("text", "paper"), list(texts_on_papers()))
def test_text_stands_out_from_its_paper(text: str, paper: str) -> None:
    assert contrast(text, paper) >= 4.5


def test_no_text_has_a_colour_beside_those_that_are_held_to_contrast() -> None:
    named = set(re.findall(r"[^-]color: ([^;]+);", PAGE_CSS + SHEET_CSS))
    allowed = {f"var(--{name})" for name in ("ink", "muted", "accent")}
    allowed |= {f"var(--{name}-ink)" for name in ("stop", "ask", "tell")}
    assert named - {"inherit", "currentColor", "light"} <= allowed | {"#555555"}
    assert contrast("#555555", "#ffffff") >= 4.5


def test_pictures_are_drawn_in_lines_that_stand_out() -> None:
    strokes = dict(re.findall(r"svg \.([a-z]+) \{[^}]*stroke: (#[0-9a-f]{6})", PAGE_CSS))
    marks = {name: colour for name, colour in strokes.items() if name not in ("grid", "halo")}
    # 3 to 1 for what is no text: Web Content Accessibility Guidelines 2.2, 1.4.11.
    assert len(marks) >= 5
    assert all(contrast(colour, "#ffffff") >= 3 for colour in marks.values())


# -- structure ------------------------------------------------------------------------------------


def test_every_tag_is_closed_where_it_was_opened(page: str) -> None:
    assert Outline(page).open == []


def test_the_language_is_said_and_headings_leave_no_level_out(page: str) -> None:
    outline = Outline(page)
    assert dict(outline.tags)["html"] == {"lang": "en"}
    levels = [int(tag[1]) for tag, _ in outline.tags if re.fullmatch("h[1-6]", tag)]
    assert levels[0] == 1 and levels.count(1) == 1
    assert all(now <= before + 1 for before, now in pairwise(levels))


def test_every_table_head_says_what_it_heads(page: str) -> None:
    heads = [attrs for tag, attrs in Outline(page).tags if tag == "th"]
    assert heads and all(a.get("scope") in ("col", "row", "rowgroup") for a in heads)


def test_every_picture_says_what_it_shows_or_is_passed_over(survey: SurveyFolder) -> None:
    page = survey_report(survey, rows(survey)).decode("utf-8")
    drawn = re.findall(r"(<p class=\"legend\" aria-hidden=\"true\">.*?</p>)", page, re.S)
    assert len(drawn) == 1
    pictures = re.findall(r"<svg ([^>]*)>\s*(<title>[^<]+</title>)?", page.replace(drawn[0], ""))
    assert len(pictures) > 60
    for attributes, title in pictures:
        assert 'role="img"' in attributes
        assert title or re.search(r'aria-label="[^"]{10,}"', attributes)


def test_the_bar_of_a_reach_is_told_in_figures_too(survey: SurveyFolder) -> None:
    page = survey_report(survey, rows(survey)).decode("utf-8")
    told = re.findall(r'aria-label="(n 0\.[^"]+)"', page)
    assert len(told) == sum(row.estimate is not None for row in rows(survey))
    assert sum("adopted" in words for words in told) == 1


def test_paper_is_left_to_the_printer_and_blocks_are_kept_whole() -> None:
    print_rules = PAGE_CSS[PAGE_CSS.index("@media print") :]
    assert not re.search(r"@page[^}]*size:", PAGE_CSS + SHEET_CSS)  # A4 and Letter alike
    assert "display: table-header-group" in print_rules
    assert re.search(r"tr, tbody\.group, figure[^{]*\{ break-inside: avoid", print_rules)
    assert "counter(page)" in PAGE_CSS
