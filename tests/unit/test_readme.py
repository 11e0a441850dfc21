"""The README holds what it promises: two commands, pictures that are there, code that runs."""

import re
import subprocess
from pathlib import Path

import pytest

from roughness.commands import VERBS

TOP = Path(__file__).parents[2]
README = (TOP / "README.md").read_text(encoding="utf-8")
BLOCKS = re.findall(r"^```(\w+)\n(.*?)^```", README, flags=re.MULTILINE | re.DOTALL)


def test_the_first_two_blocks_are_the_main_job_and_the_tests() -> None:
    (_, job), (_, tests) = BLOCKS[:2]
    assert "roughness demo" in job and "pip" in job and "venv" in job
    assert tests.strip() == "bash tests/run"
    assert "tests/run" in (TOP / ".ci" / "run").read_text(encoding="utf-8")


@pytest.mark.parametrize("link", re.findall(r"\]\(([^)#]+)\)", README))
def test_every_linked_file_is_there(link: str) -> None:
    assert (TOP / link).is_file()


@pytest.mark.parametrize("code", [code for kind, code in BLOCKS if kind == "python"])
def test_the_python_of_the_readme_runs(code: str, capsys: pytest.CaptureFixture[str]) -> None:
    exec(compile(code, "README.md", "exec"), {})
    assert "Range(low=0.04025" in capsys.readouterr().out


def test_every_verb_of_the_tour_exists() -> None:
    tour = re.findall(r"^    roughness (\w+) ", README, flags=re.MULTILINE)
    assert set(tour) - {"brook"} <= set(VERBS)


def test_pictures_ask_nothing_of_the_network() -> None:
    for picture in (TOP / "roughness" / "guide").glob("*.svg"):
        text = picture.read_text(encoding="utf-8")
        assert "font-face" not in text and "<script" not in text
        assert set(re.findall(r'https?://[^"\s)]+', text)) <= {"http://www.w3.org/2000/svg"}


def test_the_top_level_holds_what_was_agreed() -> None:
    words = ["git", "ls-files"]
    listed = subprocess.run(words, cwd=TOP, capture_output=True, text=True, check=False)
    if listed.returncode:
        pytest.skip("not a git checkout")
    names = {line.split("/")[0] for line in listed.stdout.splitlines()}
    plain = {name for name in names if not name.startswith(".")}
    agreed = {"README.md", "DEVELOPERS.md", "pyproject.toml"}
    assert plain == agreed | {"roughness", "tests", "tables", "demo_reaches"}
