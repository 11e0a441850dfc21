"""The demo survey is whole, says that it is invented, and shows what the checks are for."""

import os
import re
import stat
from itertools import pairwise
from pathlib import Path

import pytest

from roughness.desk.checking import Checked, check
from roughness.desk.evidence_lists import evidence_of
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import copy_demo
from roughness.desk.recording import Recorder
from roughness.desk.rows import Row
from roughness.desk.weakness import order
from roughness.findings import rule_table
from roughness.shelf.places import demo_folder
from roughness.survey.stream import Visit
from roughness.survey.words import MAIN_CHANNEL

FLOOD, SPRING = "design flood", "spring high flow"


@pytest.fixture(scope="module")
def survey() -> SurveyFolder:
    return SurveyFolder(demo_folder())


@pytest.fixture(scope="module")
def checked(survey: SurveyFolder) -> Checked:
    return check(survey)


def files_of(folder: Path) -> dict[str, bytes]:
    return {
        str(path.relative_to(folder)): path.read_bytes()
        for path in folder.rglob("*")
        if path.is_file()
    }


def test_it_hangs_together_to_the_last_line(checked: Checked) -> None:
    assert checked.broken == ()
    assert checked.torn == ()
    assert checked.intact


def test_it_says_wherever_it_can_that_it_is_invented(survey: SurveyFolder) -> None:
    described = survey.state.described
    assert described.note and re.search("invented river, invented people", described.note, re.I)
    assert described.stream and described.stream.endswith("(invented)")
    assert "(invented)" in survey.state.name
    assert "invented" in (survey.folder / "README.md").read_text(encoding="utf-8")


def test_its_positions_lie_in_the_open_ocean(survey: SurveyFolder) -> None:
    positions = [reach.position for reach in survey.state.reaches if reach.position]
    assert positions
    assert all(0 <= x <= 0.1 and 0 <= y <= 0.1 for line in positions for x, y in line)


def test_its_reaches_follow_each_other_upstream_without_a_gap(survey: SurveyFolder) -> None:
    reaches = survey.state.reaches
    assert len(reaches) >= 10
    assert reaches[0].reach_from == 0
    assert all(one.reach_to == after.reach_from for one, after in pairwise(reaches))
    assert survey.state.described.grows == "upstream"


def test_two_flow_conditions_differ_in_growth_and_bank(survey: SurveyFolder) -> None:
    flood, spring = (survey.state.condition(name) for name in (FLOOD, SPRING))
    assert flood and (flood.growth, flood.bank, flood.tolerance_cm) == ("leaf-on", "over bank", 30)
    assert spring and (spring.growth, spring.bank) == ("leaf-off", "in bank")
    assert flood.discharge_m3s and spring.discharge_m3s
    assert flood.discharge_m3s > spring.discharge_m3s


def test_every_status_of_a_review_is_met(checked: Checked) -> None:
    statuses = {row.status for row in checked.rows}
    assert statuses == {
        "unvisited",
        "incomplete",
        "estimated",
        "in review",
        "returned",
        "accepted",
        "changed since acceptance",
    }


def test_nobody_accepted_what_they_estimated_themselves(checked: Checked) -> None:
    accepted = [row for row in checked.rows if row.status == "accepted"]
    assert accepted and all(row.reviewed_by != row.estimated_by for row in accepted)


def test_its_pictures_are_there_and_said_to_be_drawn(survey: SurveyFolder) -> None:
    items = [i for r in survey.state.reaches for i in evidence_of(survey, r.reach)]
    assert len(items) == 3
    assert all(i.held == "ok" and "invented" in (i.evidence.caption or "") for i in items)


# What a hydrologist would expect of each kind of reach: textbook ranges, common practice,
# no source; wider for the plains, whose n the trees decide.
EXPECTED = {
    ("Reed ditch", MAIN_CHANNEL, FLOOD): (0.06, 0.10),
    ("Sand flats", MAIN_CHANNEL, SPRING): (0.018, 0.030),
    ("Meadow bends", MAIN_CHANNEL, FLOOD): (0.045, 0.060),
    ("Meadow bends", "left flood plain", FLOOD): (0.030, 0.050),
    ("Hay meadow", MAIN_CHANNEL, FLOOD): (0.040, 0.060),
    ("Willow bend", MAIN_CHANNEL, FLOOD): (0.045, 0.070),
    ("Gravel run", MAIN_CHANNEL, SPRING): (0.030, 0.035),
    ("Alder wood", MAIN_CHANNEL, SPRING): (0.035, 0.050),
    ("Alder wood", "left flood plain", FLOOD): (0.12, 0.15),
    ("Alder wood", "right flood plain", FLOOD): (0.12, 0.15),
    ("Carr", "left flood plain", FLOOD): (0.08, 0.15),
    ("Lined channel", MAIN_CHANNEL, FLOOD): (0.014, 0.017),
    ("Culvert approach", MAIN_CHANNEL, FLOOD): (0.045, 0.070),
    ("Cobble riffles", MAIN_CHANNEL, SPRING): (0.040, 0.050),
    ("Boulder steps", MAIN_CHANNEL, FLOOD): (0.060, 0.080),
}


def named(row: Row) -> tuple[str, str, str]:
    assert row.part and row.condition
    return row.reach.reach, row.part.part, row.condition.condition


@pytest.mark.parametrize("which", EXPECTED, ids=" ".join)
def test_n_is_what_one_expects_of_such_a_reach(
    checked: Checked, which: tuple[str, str, str]
) -> None:
    row = next(row for row in checked.rows if row.place and named(row) == which)
    assert row.estimate
    least, most = EXPECTED[which]
    assert least <= row.estimate.n.best <= most


def test_a_flood_in_leaf_is_nowhere_smoother_than_the_bare_spring(checked: Checked) -> None:
    n = {named(row): row.estimate.n.best for row in checked.rows if row.estimate}
    pairs = [(n[r, p, FLOOD], best) for (r, p, c), best in n.items() if c == SPRING]
    assert len(pairs) >= 10
    assert all(flood >= spring for flood, spring in pairs)


WEAK_ON_PURPOSE = {
    "outside-published-range",
    "outside-published-range-noted",
    "jump-between-neighbours",
    "multiplier-over-bank",
    "driver-without-reason",
    "near-class-edge",
    "grade-against-criterion",
    "average-base-with-irregularity",
    "carried-over-unconfirmed",
    "growth-differs",
    "regime-not-settled",
    "bends-counted-twice",
    "widening-counted-twice",
    "handbook-handed-over",
    "slope-steep",
    "slope-little-tested",
    "few-grains-deep",
}


# Every finding of every row, as it was planted.
PLANTED = {
    ("Sand flats", MAIN_CHANNEL, FLOOD): "jump-between-neighbours outside-published-range-noted",
    ("Sand flats", MAIN_CHANNEL, SPRING): "jump-between-neighbours outside-published-range-noted",
    ("Below the old weir", MAIN_CHANNEL, FLOOD): "outside-published-range-noted regime-not-settled",
    (
        "Below the old weir",
        MAIN_CHANNEL,
        SPRING,
    ): "outside-published-range-noted regime-not-settled",
    ("Meadow bends", MAIN_CHANNEL, FLOOD): "average-base-with-irregularity multiplier-over-bank",
    ("Meadow bends", "right flood plain", FLOOD): "carried-over-unconfirmed",
    ("Meadow bends", MAIN_CHANNEL, SPRING): "average-base-with-irregularity",
    (
        "Hay meadow",
        MAIN_CHANNEL,
        FLOOD,
    ): "bends-counted-twice driver-without-reason multiplier-over-bank near-class-edge",
    ("Hay meadow", "left flood plain", FLOOD): "near-class-edge",
    ("Hay meadow", "right flood plain", FLOOD): "driver-without-reason outside-published-range",
    ("Hay meadow", MAIN_CHANNEL, SPRING): "bends-counted-twice near-class-edge",
    ("Willow bend", MAIN_CHANNEL, FLOOD): "average-base-with-irregularity multiplier-over-bank",
    ("Willow bend", MAIN_CHANNEL, SPRING): "average-base-with-irregularity",
    ("Gravel run", MAIN_CHANNEL, FLOOD): "growth-differs",
    ("Alder wood", MAIN_CHANNEL, FLOOD): "slope-little-tested",
    ("Alder wood", MAIN_CHANNEL, SPRING): "slope-little-tested",
    ("Carr", "left flood plain", FLOOD): "handbook-handed-over",
    (
        "Culvert approach",
        MAIN_CHANNEL,
        FLOOD,
    ): (
        "average-base-with-irregularity driver-without-reason grade-against-criterion"
        " slope-little-tested widening-counted-twice"
    ),
    (
        "Culvert approach",
        MAIN_CHANNEL,
        SPRING,
    ): (
        "average-base-with-irregularity driver-without-reason"
        " slope-little-tested widening-counted-twice"
    ),
    ("Cobble riffles", MAIN_CHANNEL, FLOOD): "slope-little-tested",
    ("Cobble riffles", MAIN_CHANNEL, SPRING): "near-class-edge slope-little-tested",
    ("Boulder steps", MAIN_CHANNEL, FLOOD): "few-grains-deep slope-steep",
    ("Boulder steps", MAIN_CHANNEL, SPRING): "few-grains-deep slope-steep",
}


def test_its_findings_are_exactly_the_planted_ones(checked: Checked) -> None:
    found = {named(r): " ".join(sorted(f.rule for f in r.findings)) for r in checked.rows if r.part}
    assert {place: rules for place, rules in found.items() if rules} == PLANTED
    assert {rule for rules in PLANTED.values() for rule in rules.split()} == WEAK_ON_PURPOSE
    assert {rule.key for rule in rule_table()} >= WEAK_ON_PURPOSE


def test_every_weak_point_comes_before_the_sound_ones_in_the_reviewers_order(
    survey: SurveyFolder, checked: Checked
) -> None:
    ranked = [row for row in order(survey, list(checked.rows)) if row.estimate]
    asked = [bool({f.level for f in row.open} & {"stop", "ask"}) for row in ranked]
    assert ranked[0].stands_stopped
    assert sum(asked[: sum(asked)]) >= sum(asked) - 1


def test_one_thing_alone_must_not_be_accepted_as_it_is(checked: Checked) -> None:
    stops = [row for row in checked.rows if row.stands_stopped]
    assert [named(row) for row in stops] == [("Hay meadow", "right flood plain", FLOOD)]
    assert not checked.passed


def test_most_of_it_is_good_work(checked: Checked) -> None:
    rows = [row for row in checked.rows if row.estimate]
    asked = [row for row in rows if any(f.level != "tell" for f in row.findings)]
    assert len(asked) < len(rows) / 2


def test_it_has_an_adopted_value_a_correction_and_bed_and_banks_told_apart(
    survey: SurveyFolder, checked: Checked
) -> None:
    adopted = [row.adopted for row in checked.rows if row.adopted]
    assert adopted and all(len(one.reason) > 20 for one in adopted)
    assert survey.reach_state("Willow bend").withdrawn
    apart = [row.place.segments for row in checked.rows if row.place and row.place.segments]
    assert apart and {segment.name for segment in apart[0]} == {"bed", "banks"}


def test_it_carries_the_handbooks_it_used_and_keeps_its_bytes_in_git(survey: SurveyFolder) -> None:
    kept = {path.name for path in survey.handbooks.iterdir()}
    assert kept == {"cowan-1956.toml", "usgs-wsp-2339.toml"}
    assert "* -text" in (survey.folder / ".gitattributes").read_text(encoding="utf-8").splitlines()


def test_a_copy_is_the_same_survey_and_can_be_written_to(tmp_path: Path) -> None:
    copy = copy_demo(tmp_path / "copy")
    assert files_of(copy.folder) == {
        name: raw for name, raw in files_of(demo_folder()).items() if name != ".lock"
    }
    visit = Visit(visit="today", people="nobody", on="2026-07-01")
    Recorder(copy, "a reader").note_visit("Spring head", visit)
    assert check(copy).intact
    assert copy.reach_state("Spring head").visits == (visit,)
    assert not SurveyFolder(demo_folder()).reach_state("Spring head").visits


def test_a_copy_of_a_read_only_installation_is_the_readers_own(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    installed = copy_demo(tmp_path / "installed").folder
    (installed / ".lock").write_text("somebody else's")
    everything = [installed, *installed.rglob("*")]
    for path in everything:
        path.chmod(0o555 if path.is_dir() else 0o444)
    monkeypatch.setattr("roughness.desk.making.demo_folder", lambda: installed)
    copy = copy_demo(tmp_path / "copy").folder
    for path in everything:
        path.chmod(0o755 if path.is_dir() else 0o644)
    assert not (copy / ".lock").exists()
    assert all(path.stat().st_mode & stat.S_IWUSR for path in (copy, *copy.rglob("*")))
    assert {path.name for path in copy.iterdir() if path.is_dir()} == {
        "evidence",
        "handbooks",
        "reaches",
    }
    assert os.access(copy / "survey.jsonl", os.W_OK)
