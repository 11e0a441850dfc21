"""The report of a survey: what stands in it, that n can be rebuilt from it, what stays out."""

import base64
import io
import json
import re
import shutil
from html.parser import HTMLParser
from math import isclose
from pathlib import Path
from typing import Any

import pytest
from PIL import Image

from roughness.__main__ import main
from roughness.desk.attaching import attach
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row, rows
from roughness.quantities.printing import show_n
from roughness.reports.survey_report import survey_report
from roughness.shelf.places import demo_folder
from roughness.survey.stream import FlowCondition, Reach, Visit

HOSTILE = '<script>alert(1)</script><img src=x onerror="alert(2)">\u202e\x1b[31m {{ 7 * 7 }}'
PLAIN_FACTORS: dict[str, Any] = {
    "base": {"grade": "firm-soil", "best": 0.0271, "low": 0.0255, "high": 0.0303, "note": HOSTILE},
    "irregularity": {"grade": "minor"},
    "variation": {"grade": "alternating-occasionally"},
    "obstruction": {"blocked_percent": 8},
    "vegetation": {"grade": "medium"},
    "meander": {"sinuosity": 1.3},
}
ON_PLAIN = {k: v for k, v in PLAIN_FACTORS.items() if k not in ("variation", "meander")}
BANKS = PLAIN_FACTORS | {"vegetation": {"grade": "large", "note": "alders"}}
HERE = {"condition": "design flood", "visit": "June", "handbook": "usgs-wsp-2339"}
WHOLE = HERE | {"setting": "channel", "part": "main channel", "factors": PLAIN_FACTORS}
PLAIN = HERE | {"setting": "flood-plain", "part": "left flood plain", "factors": ON_PLAIN}
APART = HERE | {
    "setting": "channel",
    "part": "main channel",
    "segments": [
        {"name": "bed", "perimeter_percent": 62.5, "factors": PLAIN_FACTORS},
        {"name": "banks", "perimeter_percent": 37.5, "factors": BANKS},
    ],
}


class Reading(HTMLParser):
    """A page as tags with their attributes, and its text."""

    def __init__(self, page: bytes) -> None:
        super().__init__()
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.words: list[str] = []
        self.feed(page.decode("utf-8"))

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append((tag, dict(attrs)))
        self.words.append(" " if tag in ("td", "th", "li", "p", "dd", "dt", "h4") else "")

    def handle_data(self, data: str) -> None:
        self.words.append(data)

    @property
    def text(self) -> str:
        return re.sub(r"\s+", " ", "".join(self.words))

    def named(self, tag: str) -> list[dict[str, str | None]]:
        return [attrs for name, attrs in self.tags if name == tag]


@pytest.fixture
def pen(tmp_path: Path) -> Recorder:
    reaches = [
        Reach(reach="Mill <weir>", reach_from=0.0, reach_to=120.5, position=((8.25, 47.51),)),
        Reach(reach="Ford"),
        Reach(reach="Gorge"),
    ]
    pen = Recorder(new_survey(tmp_path / "survey", "Ada", reaches=reaches), "Ada")
    pen.describe(stream="Otter", length_unit="m")
    pen.add_condition(FlowCondition(condition="design flood", growth="leaf-on"))
    pen.note_visit("Mill <weir>", Visit(visit="June", on="2026-06-30", people="Ada & Bo"))
    pen.record("Mill <weir>", json.dumps(WHOLE).encode(), "a")
    pen.record("Mill <weir>", json.dumps(PLAIN).encode(), "b")
    pen.record("Ford", json.dumps(APART | {"visit": "July"}).encode(), "c")
    return pen


def report(pen: Recorder, **words: bool) -> bytes:
    return survey_report(pen.survey, rows(pen.survey), **words)


def row_of(pen: Recorder, part: str = "main channel") -> Row:
    return next(row for row in rows(pen.survey) if row.part and row.part.part == part)


# -- n can be rebuilt ------------------------------------------------------------------------

_SUM = re.compile(
    r'<tr class="(sum|together)"><th scope="row">(low|best|high)</th>'
    r'<td class="number">([^=≈<]*) ([=≈]) ([0-9.]+)</td>'
    r'<td class="figure"><strong>([0-9.]+)</strong>'
)


def rebuilt(figures: str) -> float:
    """Compute what stands there, by nothing but the rules of arithmetic."""
    assert re.fullmatch(r"[0-9.+×()/^ ]+", figures)
    return float(eval(figures.replace("×", "*").replace("^", "**")))


def sums_by_article(page: bytes) -> list[list[tuple[str, ...]]]:
    articles = page.decode("utf-8").split("<article ")[1:]
    return [_SUM.findall(article) for article in articles]


def check_every_sum(page: bytes, found: list[Row]) -> int:
    articles = sums_by_article(page)
    assert len(articles) == len(found)
    for sums, row in zip(articles, found, strict=True):
        for _, _, figures, _, result, shown in sums:
            n = rebuilt(figures)
            assert isclose(n, float(result), abs_tol=1e-6)
            assert shown == show_n(n)
        if row.estimate:
            last = {word: rebuilt(figures) for _, word, figures, *_ in sums[-3:]}
            for word in ("low", "best", "high"):
                assert isclose(last[word], getattr(row.estimate.n, word), abs_tol=1e-6)
                assert show_n(last[word]) == show_n(getattr(row.estimate.n, word))
        else:
            assert sums == []
    return sum(map(len, articles))


def test_every_n_of_the_demo_is_rebuilt_from_the_printed_arithmetic(tmp_path: Path) -> None:
    shutil.copytree(demo_folder(), tmp_path / "demo")
    survey = SurveyFolder(tmp_path / "demo")
    found = rows(survey)
    assert check_every_sum(survey_report(survey, found), found) >= 3 * 30


def test_bed_and_banks_are_rebuilt_and_put_together_by_equal_velocity(pen: Recorder) -> None:
    page = report(pen)
    assert check_every_sum(page, rows(pen.survey)) == 3 + 3 + 9
    assert "62.5 × " in Reading(page).text and "^1.5" in Reading(page).text


def test_a_flood_plain_is_summed_without_variation_and_multiplier(pen: Recorder) -> None:
    plain = sums_by_article(report(pen))[1]
    assert [figures for _, _, figures, *_ in plain] == [
        "0.0255 + 0.001 + 0.005 + 0.011",
        "0.0271 + 0.003 + 0.012 + 0.018",
        "0.0303 + 0.005 + 0.019 + 0.025",
    ]


# -- what stands in it ------------------------------------------------------------------------


def test_the_ledger_tells_value_range_published_range_source_and_who(pen: Recorder) -> None:
    told = Reading(report(pen)).text
    assert "nb base firm soil 0.0271 0.0255 to 0.0303 0.025 to 0.032" in told
    assert "Criterion: Soil that holds together and that the flow does not move" in told
    assert "Measured: blocked 8 %, which chose the grade." in told
    assert "table 1; seen second hand" in told
    assert "× 1.15" in told


def test_cautions_stand_at_the_top_in_one_line_and_whole_at_the_end(pen: Recorder) -> None:
    told = Reading(report(pen)).text
    assert told.index("n is a judgement: calibrate it") < told.index("Summary")
    end = told[told.rindex("Cautions") :]
    assert "Not for decisions on life and limb by itself." in end
    assert "Local codes and a licensed practitioner's review come first." in end


def test_weak_points_come_before_the_reaches_and_name_what_is_open(pen: Recorder) -> None:
    Reviewer(Recorder(pen.survey, "Bo")).ask(pen_place(pen), "Why so rough?", factor="vegetation")
    told = Reading(report(pen)).text
    weak = told[told.index("Weak points first") : told.index("Levels of findings")]
    assert "Why so rough?" in weak
    assert "neither note nor photo" in weak


def pen_place(pen: Recorder) -> Any:
    place = row_of(pen).place
    assert place is not None
    return place


def test_questions_answers_acceptance_and_what_came_after_are_told(pen: Recorder) -> None:
    reviewer = Reviewer(Recorder(pen.survey, "Bo"))
    asked = reviewer.ask(pen_place(pen), "Why so rough?", factor="vegetation")
    Reviewer(pen).answer("Mill <weir>", asked.hash, "Reeds, see the photo.")
    accepted = reviewer.accept(row_of(pen), overruling="seen on site")
    told = Reading(report(pen)).text
    assert "on vegetation: Why so rough?" in told
    assert "Reeds, see the photo." in told
    n = show_n(accepted.data["n"]["best"])
    assert f"Accepted by Bo, {accepted.at[:10]}" in told
    assert f"n {n} (" in told and accepted.data["head"][:12] in told
    assert "Not signed." in told
    changed = WHOLE | {"factors": PLAIN_FACTORS | {"irregularity": {"grade": "moderate"}}}
    pen.record("Mill <weir>", json.dumps(changed).encode(), "d")
    told = Reading(report(pen)).text
    assert "changed since acceptance" in told
    assert "Accepted then, does not stand now by Bo" in told
    assert "Said since the acceptance:" in told


def test_one_person_who_estimated_and_accepted_is_named_as_such(pen: Recorder) -> None:
    assert "The same person estimated and accepted." not in Reading(report(pen)).text
    pen.describe(same_person_may_accept=True)
    Reviewer(pen).accept(row_of(pen), overruling="one person alone")
    told = Reading(report(pen)).text
    assert "The same person estimated and accepted." in told
    assert "One person does both" in told


def test_a_return_is_told_with_its_reason(pen: Recorder) -> None:
    Reviewer(Recorder(pen.survey, "Bo")).return_(pen_place(pen), "walk it again")
    told = Reading(report(pen)).text
    assert "Returned by Bo" in told and "walk it again" in told


def test_an_adopted_value_stands_with_its_reason(pen: Recorder) -> None:
    pen.adopt("Mill <weir>", "main channel", "design flood", 0.07, reason="gauged in May")
    told = Reading(report(pen)).text
    assert "Adopted in its place: n 0.070" in told and "gauged in May" in told


def test_handbooks_stand_with_citation_and_whole_hash(pen: Recorder) -> None:
    told = Reading(report(pen)).text
    place = pen_place(pen)
    assert place.handbook.sha256 in told
    assert "Arcement, G.J., and Schneider, V.R., 1989" in told


def test_a_reach_without_parts_and_a_survey_without_reaches_have_a_report(
    pen: Recorder, tmp_path: Path
) -> None:
    assert "Gorge: no part of the section was described yet" in Reading(report(pen)).text
    bare = new_survey(tmp_path / "bare", "Ada")
    assert "No value was judged yet." in Reading(survey_report(bare, rows(bare))).text


# -- photos -----------------------------------------------------------------------------------


def photo(path: Path) -> Path:
    exif = Image.Exif()
    exif.get_ifd(0x8769).update({0x9003: "2026:06:30 14:03:22", 0x9011: "+02:00"})
    exif.get_ifd(0x8825).update({1: "N", 2: (47.0, 30.0, 36.0), 3: "E", 4: (8.0, 15.0, 0.0)})
    Image.effect_noise((900, 600), 60).convert("RGB").save(path, exif=exif)
    return path


def test_a_photo_is_shown_small_and_without_its_metadata(pen: Recorder, tmp_path: Path) -> None:
    line = attach(
        pen,
        "Mill <weir>",
        photo(tmp_path / "a.jpg"),
        caption='"left" <bank>',
        factors=["vegetation"],
    ).line
    page = Reading(report(pen))
    (image,) = page.named("img")
    assert image["alt"] == '"left" <bank>'
    head, _, data = str(image["src"]).partition(",")
    assert head == "data:image/jpeg;base64"
    with Image.open(io.BytesIO(base64.b64decode(data))) as small:
        assert small.format == "JPEG" and max(small.size) <= 420
        assert not small.getexif() and "exif" not in small.info
    assert line.data["sha256"][:12] in page.text
    assert "Photos: 1." in page.text and "taken 2026-06-30T14:03:22+02:00" in page.text


def test_without_position_says_nowhere_where_reaches_and_photos_lie(
    pen: Recorder, tmp_path: Path
) -> None:
    attach(pen, "Mill <weir>", photo(tmp_path / "a.jpg"))
    assert b"47.51" in report(pen)
    page = report(pen, with_position=False)
    assert b"47.5" not in page and b"8.25" not in page
    assert "Positions are left out of this report." in Reading(page).text


def test_a_photo_that_was_changed_or_is_gone_is_not_shown(pen: Recorder, tmp_path: Path) -> None:
    line = attach(pen, "Mill <weir>", photo(tmp_path / "a.jpg")).line
    kept = pen.survey.folder / str(line.data["file"])
    Image.new("RGB", (10, 10), "red").save(kept)
    page = Reading(report(pen))
    assert not page.named("img") and "not the one that was attached" in page.text
    kept.unlink()
    assert "the file is missing" in Reading(report(pen)).text


# -- nothing from outside acts ------------------------------------------------------------------


def test_text_from_outside_is_text_in_the_page_and_never_markup(pen: Recorder) -> None:
    raw = report(pen)
    page = Reading(raw)
    assert not {tag for tag, _ in page.tags} & {"script", "iframe", "object", "form", "link"}
    assert not page.named("img")
    assert "<script>alert(1)</script><img src=x" in page.text
    assert "{{ 7 * 7 }}" in page.text and "\\u202e\\u001b[31m" in page.text
    assert "\x1b" not in raw.decode() and "\u202e" not in raw.decode()
    assert not [name for _, attrs in page.tags for name in attrs if name.startswith("on")]


def test_the_page_asks_for_nothing_from_outside_and_forbids_it(pen: Recorder) -> None:
    page = Reading(report(pen))
    policy = next(m for m in page.named("meta") if m.get("http-equiv"))
    assert policy["http-equiv"] == "Content-Security-Policy"
    wanted = "default-src 'none'; img-src data:; style-src 'unsafe-inline'"
    assert policy["content"] == wanted
    links = [str(a[k]) for _, a in page.tags for k in ("href", "src", "action") if k in a]
    assert links and all(link.startswith(("#", "data:image/jpeg;")) for link in links)
    assert "url(" not in page.text and "@import" not in page.text


def test_every_link_inside_the_page_leads_somewhere(pen: Recorder) -> None:
    page = Reading(report(pen))
    ids = [str(attrs["id"]) for _, attrs in page.tags if "id" in attrs]
    assert len(ids) == len(set(ids))
    assert {str(a["href"])[1:] for a in page.named("a")} <= set(ids)


# -- the verb -----------------------------------------------------------------------------------


def test_the_same_records_give_the_same_bytes_although_the_report_was_noted(
    pen: Recorder, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    folder, first, again = str(pen.survey.folder), tmp_path / "1.html", tmp_path / "2.html"
    assert main(["report", folder, "-o", str(first), "--by", "Ada"]) in (0, 1)
    noted = SurveyFolder(pen.survey.folder).state.heads[-1][1]
    assert noted.why == "report" and "Ford" in noted.heads
    assert main(["report", folder, "-o", str(again), "--by", "Bo"]) in (0, 1)
    assert first.read_bytes() == again.read_bytes()


def test_a_report_is_made_where_nobody_is_known_and_says_that_it_was_not_noted(
    pen: Recorder,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.delenv("ROUGHNESS_BY", raising=False)
    target = tmp_path / "r.html"
    assert main(["report", str(pen.survey.folder), "-o", str(target)]) in (0, 1)
    assert target.is_file() and "does not note this report" in capsys.readouterr().err


@pytest.mark.parametrize("name", ["survey/r.html", "survey/evidence/r.html", "r.pdf", "r"])
def test_a_target_inside_the_survey_or_of_another_kind_is_refused(
    pen: Recorder, tmp_path: Path, name: str, capsys: pytest.CaptureFixture[str]
) -> None:
    (tmp_path / "survey" / "evidence").mkdir(exist_ok=True)
    for verb in ("report", "fieldsheet"):
        assert main([verb, str(pen.survey.folder), "-o", str(tmp_path / name)]) == 2
        assert capsys.readouterr().err.count("\n") == 1
        assert not (tmp_path / name).exists()


def test_a_trail_that_was_tampered_with_is_said_in_the_report_and_by_the_status(
    pen: Recorder, tmp_path: Path
) -> None:
    pen.note_visit("Ford", Visit(visit="August"))  # the last line alone has nothing after it
    trail = pen.survey.reach_path("Ford")
    trail.write_bytes(trail.read_bytes().replace(b"alders", b"poplar"))
    target = tmp_path / "r.html"
    assert main(["report", str(pen.survey.folder), "-o", str(target), "--by", "Ada"]) == 1
    assert "The trail is broken" in Reading(target.read_bytes()).text


def test_a_reach_whose_file_is_gone_leaves_the_others_in_the_report(pen: Recorder) -> None:
    pen.survey.reach_path("Ford").unlink()
    told = Reading(report(pen)).text
    assert "The record of this reach cannot be read" in told
    assert "Mill <weir>: main channel, design flood" in told
