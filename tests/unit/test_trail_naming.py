"""File names of reaches: harmless on every file system, inside the survey."""

import re
from pathlib import Path

import pytest

from roughness.errors import RecordError
from roughness.trail.naming import FILE_NAME, file_name_for, reach_trail, shown, survey_trail


@pytest.mark.parametrize("plain", ["a", "mill-weir", "r-01", "x" * 40, "com10", "console"])
def test_a_plain_name_is_its_own_file_name(plain: str) -> None:
    assert file_name_for(plain) == plain


@pytest.mark.parametrize(
    "name",
    [
        "con", "nul", "com1", "lpt9", "Mill Weir", "../../etc/passwd", "a/b", "a\\b", "c:d", ".",
        "..", "x" * 41, "Größe", "[bold]x[/bold]", "🐟", "", "a.b", "UPPER", "-" * 60, "\ud800",
    ],
)  # fmt: skip
def test_any_other_name_gets_a_slug_and_eight_digits(name: str) -> None:
    assert re.fullmatch(r"[a-z0-9-]{1,40}-[0-9a-f]{8}", file_name_for(name))
    assert re.fullmatch(FILE_NAME, file_name_for(name))


def test_names_that_differ_only_in_case_or_signs_get_different_files() -> None:
    names = ["mill weir", "Mill Weir", "mill/weir", "mill-weir", "mill:weir", "mill.weir"]
    assert len({file_name_for(name) for name in names}) == len(names)


def test_trails_lie_inside_the_survey(tmp_path: Path) -> None:
    assert survey_trail(tmp_path) == tmp_path / "survey.jsonl"
    assert reach_trail(tmp_path, "a") == tmp_path / "reaches" / "a.jsonl"
    assert shown(reach_trail(tmp_path, "a")) == "reaches/a.jsonl"


@pytest.mark.parametrize("file", ["../survey", "a/b", "A", "", "a.b", "nul", "x" * 50, "a\n"])
def test_a_noted_file_that_leads_elsewhere_is_not_opened(tmp_path: Path, file: str) -> None:
    with pytest.raises(RecordError, match="is no file name"):
        reach_trail(tmp_path, file)


def test_links_are_not_followed(tmp_path: Path) -> None:
    (tmp_path / "reaches").mkdir()
    (tmp_path / "reaches" / "a.jsonl").symlink_to(tmp_path / "elsewhere")
    with pytest.raises(RecordError, match="links are not followed"):
        reach_trail(tmp_path, "a")
