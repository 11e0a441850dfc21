"""The pages in a browser: nothing is asked for, nothing is refused, paper holds everything.

Skipped where there is no Chromium; its print to PDF is read with poppler's tools where they
are there.
"""

import json
import re
import shutil
import socket
import subprocess
import tempfile
from collections.abc import Iterator
from pathlib import Path

import pytest

from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.desk.rows import rows
from roughness.reports.field_sheet import field_sheet
from roughness.reports.survey_report import survey_report
from roughness.shelf.places import demo_folder
from roughness.survey.stream import Reach

BROWSER = shutil.which("chromium") or shutil.which("chromium-browser")
pytestmark = pytest.mark.skipif(BROWSER is None, reason="no chromium here")
STILL = [
    "--headless",
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-sync",
    "--disable-background-networking",
    "--disable-component-update",
]


@pytest.fixture(scope="module")
def folder() -> Iterator[Path]:
    with tempfile.TemporaryDirectory(ignore_cleanup_errors=True) as name:
        yield Path(name)


@pytest.fixture(scope="module")
def survey(folder: Path) -> SurveyFolder:
    shutil.copytree(demo_folder(), folder / "demo")
    return SurveyFolder(folder / "demo")


@pytest.fixture(scope="module")
def report(folder: Path, survey: SurveyFolder) -> Path:
    (folder / "report.html").write_bytes(survey_report(survey, rows(survey)))
    return folder / "report.html"


def browse(folder: Path, page: Path, *words: str) -> subprocess.CompletedProcess[str]:
    assert BROWSER is not None
    profile = tempfile.mkdtemp(dir=folder)
    return subprocess.run(
        [BROWSER, *STILL, f"--user-data-dir={profile}", *words, page.as_uri()],
        capture_output=True,
        text=True,
        timeout=120,
        check=True,
    )


def text_on_paper(folder: Path, page: Path) -> list[str]:
    if shutil.which("pdftotext") is None:
        pytest.skip("no pdftotext here")
    pdf = folder / f"{page.stem}.pdf"
    browse(folder, page, f"--print-to-pdf={pdf}", "--no-pdf-header-footer")
    told = subprocess.run(
        ["pdftotext", "-layout", str(pdf), "-"], capture_output=True, text=True, check=True
    )
    return told.stdout.split("\f")[:-1]


def test_the_policy_refuses_nothing_that_the_page_needs(folder: Path, report: Path) -> None:
    seen = browse(folder, report, "--enable-logging=stderr", "--v=0", "--dump-dom")
    assert "Content Security Policy" not in seen.stderr
    assert "Cautions" in seen.stdout


def test_the_policy_keeps_a_foreign_picture_from_being_asked_for(
    folder: Path, report: Path
) -> None:
    with socket.create_server(("127.0.0.1", 0)) as server:
        server.settimeout(0.2)
        picture = f'<img src="http://127.0.0.1:{server.getsockname()[1]}/x.png">'
        spoiled = folder / "spoiled.html"
        spoiled.write_text(report.read_text("utf-8").replace("<main>", f"<main>{picture}"), "utf-8")
        seen = browse(folder, spoiled, "--enable-logging=stderr", "--v=0", "--dump-dom")
        with pytest.raises(TimeoutError):
            server.accept()
    assert "Content Security Policy" in seen.stderr


def test_every_n_stands_on_paper_with_its_sum_and_pages_are_numbered(
    folder: Path, report: Path, survey: SurveyFolder
) -> None:
    pages = text_on_paper(folder, report)
    text = " ".join(" ".join(pages).split())
    page = report.read_text("utf-8")
    sums = re.findall(r'<td class="number">([^<]*[=≈] [0-9.]+)</td>', page)
    assert len(sums) > 90
    assert [one for one in sums if one not in text] == []
    for number, one in enumerate(pages, start=1):
        assert re.search(rf"\b{number} / {len(pages)}\b", one)


def test_a_sheet_takes_at_most_two_pages_a_reach(folder: Path, survey: SurveyFolder) -> None:
    page = folder / "sheet.html"
    page.write_bytes(field_sheet(survey))
    pages = text_on_paper(folder, page)
    names = [noted.reach for noted in survey.state.reaches]
    first = [at for at, text in enumerate(pages) if "Date, time" in text]
    assert [next(n for n in names if n in pages[at].split("\n")[0]) for at in first] == names
    ends = [*first[1:], len(pages)]
    assert all(end - begin <= 2 for begin, end in zip(first, ends, strict=True))


def test_the_longest_names_and_notes_stay_on_the_paper(folder: Path) -> None:
    if shutil.which("pdftotext") is None:
        pytest.skip("no pdftotext here")
    reach, part, condition = "r" * 120, "p" * 120, "c" * 120
    pen = Recorder(new_survey(folder / "long", "A" * 120, reaches=[Reach(reach=reach)]), "A" * 120)
    pen.record(
        reach,
        json.dumps(
            {
                "part": part,
                "condition": condition,
                "handbook": "usgs-wsp-2339",
                "setting": "channel",
                "factors": {
                    "base": {"grade": "gravel", "note": "x" * 2000},
                    "irregularity": {"grade": "minor"},
                    "variation": {"grade": "gradual"},
                    "obstruction": {"grade": "minor"},
                    "vegetation": {"grade": "small"},
                    "meander": {"grade": "minor"},
                },
            }
        ).encode(),
        "test",
    )
    (folder / "long.html").write_bytes(survey_report(pen.survey, rows(pen.survey)))
    whole = "".join("".join(text_on_paper(folder, folder / "long.html")).split())
    assert whole.count("x") >= 4000  # in the ledger and in the reasoning
    boxes = subprocess.run(
        ["pdftotext", "-bbox", str(folder / "long.pdf"), "-"],
        capture_output=True,
        text=True,
        check=True,
    ).stdout
    width = float(re.findall(r'<page width="([0-9.]+)"', boxes)[0])
    right = [float(edge) for edge in re.findall(r'xMax="([0-9.]+)"', boxes)]
    assert len(right) > 300
    assert max(right) <= width - 30  # a margin of 13 mm is 37 points
