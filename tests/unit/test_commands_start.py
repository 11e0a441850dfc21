"""The first words of the command line: version, help, and the wish for the screens."""

import os
import subprocess
import sys
from pathlib import Path

import pytest

from roughness import __version__, commands
from roughness.__main__ import main
from roughness.commands import VERBS

Capture = pytest.CaptureFixture[str]


def test_the_version_is_one_line(capsys: Capture) -> None:
    assert main(["--version"]) == 0
    assert capsys.readouterr() == (f"roughness {__version__}\n", "")


def test_help_is_one_page_that_names_every_verb(capsys: Capture) -> None:
    assert main(["--help"]) == 0
    page = capsys.readouterr().out.splitlines()
    assert len(page) <= 24 and all(len(line) <= 80 for line in page)
    assert all(any(line.split()[:1] == [verb] for line in page) for verb in VERBS)


@pytest.mark.parametrize("verb", VERBS)
def test_every_verb_explains_itself_without_loading_arithmetic(verb: str) -> None:
    code = (
        "import sys; from roughness.__main__ import main; status = main(sys.argv[1:]);"
        "heavy = [m for m in ('textual', 'numpy', 'pydantic') if m in sys.modules];"
        "sys.exit(f'{status} {heavy}' if status or heavy else 0)"
    )
    run = subprocess.run(
        [sys.executable, "-c", code, verb, "--help"], capture_output=True, text=True, check=False
    )
    assert (run.returncode, run.stderr) == (0, "")
    assert run.stdout.startswith(f"usage: roughness {verb} ")


def test_the_screens_need_a_terminal_and_say_what_does_not(tmp_path: Path, capsys: Capture) -> None:
    assert main([str(tmp_path)]) == 2
    assert "roughness list SURVEY" in capsys.readouterr().err


@pytest.mark.skipif(os.name == "nt", reason="no pseudo terminals there")
def test_in_a_terminal_a_survey_and_the_demo_ask_for_the_screens(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    import pty

    ours, theirs = pty.openpty()
    name = Path(os.ttyname(theirs))
    with name.open(encoding="utf-8") as stdin, name.open("w", encoding="utf-8") as stdout:
        monkeypatch.setattr(sys, "stdin", stdin)
        monkeypatch.setattr(sys, "stdout", stdout)
        monkeypatch.setattr(sys, "stderr", stdout)
        opened = commands.run([str(tmp_path), "--by", "Ann Reeve"])
        demo = commands.run(["demo", str(tmp_path / "demo")])
        monkeypatch.undo()
    os.close(theirs)
    os.close(ours)
    assert isinstance(opened, commands.Screens) and isinstance(demo, commands.Screens)
    assert (opened.survey, opened.by, opened.demo) == (tmp_path, "Ann Reeve", False)
    assert (demo.survey, demo.demo) == (tmp_path / "demo", True)


@pytest.mark.skipif(os.name == "nt", reason="a shell's way of closing")
def test_without_standard_output_nothing_is_done_and_one_sentence_says_so(tmp_path: Path) -> None:
    words = [sys.executable, "-m", "roughness", "new", str(tmp_path / "brook"), "--by", "Ann"]
    run = subprocess.run(
        ["sh", "-c", 'exec "$@" >&-', "sh", *words],
        capture_output=True,
        text=True,
        check=False,
        env=os.environ | {"PYTHONPATH": str(Path(__file__).parents[2])},
    )
    assert run.returncode == 2 and run.stderr.startswith("roughness: there is no standard output")
    assert list(tmp_path.iterdir()) == []
