"""A second person estimates without seeing the first; both are laid side by side."""

import json
import math
from pathlib import Path
from typing import Any

import pytest

from roughness import additive
from roughness.desk.agreement import agreement, side_by_side
from roughness.desk.making import new_survey
from roughness.desk.opinions import agree, blind_file, give_opinion, take_opinion
from roughness.desk.places import Place, place_of
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row, rows
from roughness.desk.weakness import order, weakness
from roughness.errors import InputError
from roughness.survey.choices import (
    BaseChoice,
    Choice,
    Factors,
    Judgement,
    MeanderChoice,
    ObstructionChoice,
    Segment,
    VegetationChoice,
)
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.trail.data import Gate, SegmentShare

FLOOD, CHANNEL = "design flood", "main channel"
SECRET = "zqx"  # stands in every free text of the first; no word of the file may hold it
FIRST: tuple[tuple[str, Choice], ...] = (
    ("base", BaseChoice(grade="gravel", best=0.0293, note=f"{SECRET} the bar")),
    ("irregularity", Choice(grade="minor", note=SECRET)),
    ("variation", Choice(grade="gradual")),
    ("obstruction", ObstructionChoice(grade="negligible")),
    ("vegetation", VegetationChoice(grade="medium", note=SECRET)),
    ("meander", MeanderChoice(sinuosity=1.137)),
)
SECOND: dict[str, Any] = {
    "base": {"grade": "gravel", "best": 0.0293},
    "irregularity": {"grade": "minor"},
    "variation": {"grade": "gradual"},
    "obstruction": {"grade": "negligible"},
    "vegetation": {"grade": "large", "note": "willows"},
    "meander": {"sinuosity": 1.137},
}

EMPTY = {"handbook": "usgs-wsp-2339", "setting": "channel", "factors": {}}


@pytest.fixture
def pen(tmp_path: Path) -> Recorder:
    reaches = [Reach(reach="Weir", slope=0.003, note=SECRET), Reach(reach="Mill", slope=0.003)]
    pen = Recorder(new_survey(tmp_path / "s", "Ada", reaches=reaches), "Ada")
    pen.add_condition(FlowCondition(condition=FLOOD))
    for reach in ("Weir", "Mill"):
        pen.add_part(reach, Part(part=CHANNEL, setting="channel"))
        pen.note_visit(
            reach, Visit(visit="spring", on="2026-04-02", stage="low", people="Ada", note=SECRET)
        )
        gate = Gate(part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339", depth_m=1.3)
        pen.set_gate(reach, gate)
        for factor, choice in FIRST:
            pen.choose(here(pen, reach), factor, choice)  # type: ignore[arg-type]
    return pen


def here(pen: Recorder, reach: str = "Weir") -> Place:
    return place_of(pen.survey, reach, CHANNEL, FLOOD)


def row(pen: Recorder, reach: str = "Weir") -> Row:
    return next(row for row in rows(pen.survey) if row.reach.reach == reach)


def filled(pen: Recorder, reach: str = "Weir", **changes: Any) -> bytes:
    document = json.loads(blind_file(pen.survey, here(pen, reach)))
    document["by"] = "Bo"
    document["estimate"]["factors"] = SECOND
    return json.dumps(document | changes).encode()


def judged(**factors: Any) -> Judgement:
    known: dict[str, Any] = dict(FIRST) | factors
    return Judgement(handbook="usgs-wsp-2339", setting="channel", factors=Factors(**known))


# -- blind ----------------------------------------------------------------------------------


def test_the_file_tells_what_is_judged_and_nothing_of_the_first(pen: Recorder) -> None:
    Reviewer(Recorder(pen.survey, "Rea")).ask(here(pen), f"{SECRET}?")
    pen.adopt("Weir", CHANNEL, FLOOD, 0.0517, reason=SECRET)
    text = blind_file(pen.survey, here(pen)).decode()
    document = json.loads(text)
    assert (document["reach"], document["part"]) == ("Weir", CHANNEL)
    assert document["condition"]["condition"] == FLOOD
    assert document["visit"] == {"visit": "spring", "on": "2026-04-02", "stage": "low"}
    assert (document["depth_m"], document["slope"]) == (1.3, 0.003)
    assert document["estimate"]["handbook"] == "usgs-wsp-2339"
    for leak in (SECRET, "Ada", "0.0293", "0.0517", "1.137", "gravel", "minor", "medium"):
        assert leak not in text, leak


def test_the_file_is_the_same_whatever_the_first_chose(pen: Recorder) -> None:
    before = blind_file(pen.survey, here(pen))
    pen.choose(here(pen), "base", BaseChoice(grade="boulder", note="other"))
    both = (SegmentShare(name="bed", perimeter_percent=61.0),
            SegmentShare(name="banks", perimeter_percent=39.0))  # fmt: skip
    pen.set_gate("Weir", Gate(part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339",
                              depth_m=1.3, segments=both))  # fmt: skip
    assert blind_file(pen.survey, here(pen)) == before


def test_a_filled_file_becomes_an_opinion_of_its_author_and_changes_no_n(pen: Recorder) -> None:
    before = row(pen).estimate
    line = take_opinion(pen.survey, filled(pen, note="seen from the bridge"), "file")
    assert (line.kind, line.by) == ("opinion", "Bo")
    assert line.data["note"] == "seen from the bridge"
    assert row(pen).estimate == before
    assert row(pen).estimated_by == "Ada"


def test_a_blind_file_as_it_was_handed_out_is_refused(pen: Recorder) -> None:
    with pytest.raises(InputError, match="by whom"):
        take_opinion(pen.survey, blind_file(pen.survey, here(pen)), "file")
    with pytest.raises(InputError, match="nothing was chosen"):
        take_opinion(pen.survey, blind_file(pen.survey, here(pen)), "file", by="Bo")


@pytest.mark.parametrize(
    ("changes", "word"),
    [
        ({"by": " ADA "}, "first estimate"),
        ({"by": 3}, "quotes"),
        ({"survey": "ab" * 16}, "another survey"),
        ({"reach": "Wier"}, "Weir"),
        ({"part": "mill race"}, "mill race"),
        ({"second_opinion": 2}, "no second opinion"),
        ({"colour": "grey"}, "colour"),
        ({"condition": 3}, "quotes"),
        ({"note": 3}, "quotes"),
        ({"estimate": None}, "estimate"),
        ({"estimate": EMPTY}, "missing|chosen"),
    ],
)  # fmt: skip
def test_what_does_not_fit_is_refused_and_nothing_written(
    pen: Recorder, changes: dict[str, Any], word: str
) -> None:
    before = pen.survey.reach_path("Weir").read_bytes()
    with pytest.raises(InputError, match=word):
        take_opinion(pen.survey, filled(pen, **changes), "file")
    assert pen.survey.reach_path("Weir").read_bytes() == before


def test_the_file_and_who_hands_it_in_must_name_the_same_person(pen: Recorder) -> None:
    with pytest.raises(InputError, match="not by Cy"):
        take_opinion(pen.survey, filled(pen), "file", by="Cy")
    assert take_opinion(pen.survey, filled(pen), "file", by="BO").by == "Bo"


# -- side by side ---------------------------------------------------------------------------


def test_factors_stand_side_by_side_with_what_each_does_to_n(pen: Recorder) -> None:
    take_opinion(pen.survey, filled(pen), "file")
    (beside,) = side_by_side(pen.survey, here(pen))
    assert beside.by == "Bo"
    by_factor = {one.factor: one for one in beside.factors}
    plants = by_factor["vegetation"]
    assert not plants.same_grade and plants.second.grade == "large"
    assert math.isclose(plants.difference, beside.difference, rel_tol=1e-12)
    assert all(one.difference == 0 for name, one in by_factor.items() if name != "vegetation")
    assert beside.second.n.best > beside.first.n.best


def test_a_difference_in_the_multiplier_is_its_share_of_the_whole_sum(pen: Recorder) -> None:
    bo = Recorder(pen.survey, "Bo")
    give_opinion(bo, here(pen), judged(meander=MeanderChoice(grade="severe")))
    (beside,) = side_by_side(pen.survey, here(pen))
    bends = next(one for one in beside.factors if one.factor == "meander")
    want = beside.first.n.best / bends.first.best * bends.second.best - beside.first.n.best
    assert math.isclose(bends.difference, want, rel_tol=1e-12)


def test_where_only_one_tells_bed_and_banks_apart_only_n_compares(pen: Recorder) -> None:
    both = (SegmentShare(name="bed", perimeter_percent=60.0),
            SegmentShare(name="banks", perimeter_percent=40.0))  # fmt: skip
    pen.set_gate("Weir", Gate(part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339",
                              depth_m=1.3, segments=both))  # fmt: skip
    take_opinion(pen.survey, filled(pen), "file")
    (beside,) = side_by_side(pen.survey, here(pen))
    assert beside.factors == () and beside.difference != 0


def test_where_both_tell_bed_and_banks_apart_each_factor_of_each_is_compared(
    pen: Recorder,
) -> None:
    both = (SegmentShare(name="bed", perimeter_percent=60.0),
            SegmentShare(name="banks", perimeter_percent=40.0))  # fmt: skip
    pen.set_gate("Weir", Gate(part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339",
                              segments=both))  # fmt: skip
    banks = Factors(**dict(FIRST) | {"vegetation": VegetationChoice(grade="large")})  # type: ignore[arg-type]
    told = Judgement(
        handbook="usgs-wsp-2339",
        setting="channel",
        segments=(
            Segment(name="bed", perimeter_percent=60.0, factors=Factors(**dict(FIRST))),  # type: ignore[arg-type]
            Segment(name="banks", perimeter_percent=40.0, factors=banks),
        ),
    )
    give_opinion(Recorder(pen.survey, "Bo"), here(pen), told)
    (beside,) = side_by_side(pen.survey, here(pen))
    assert len(beside.factors) == 12
    (apart,) = [one for one in beside.factors if one.difference]
    assert (apart.segment, apart.factor) == ("banks", "vegetation")
    assert math.isclose(apart.difference, beside.difference, rel_tol=1e-12)


def test_a_consensus_needs_an_opinion_and_a_reason_and_then_replaces_the_choices(
    pen: Recorder,
) -> None:
    both = judged(vegetation=VegetationChoice(grade="large"))
    with pytest.raises(InputError, match="nobody"):
        agree(pen, here(pen), both, reason="talked")
    opinion = take_opinion(pen.survey, filled(pen), "file")
    with pytest.raises(InputError, match="reason"):
        agree(pen, here(pen), both, reason=" ")
    line = agree(pen, here(pen), both, reason="walked it again together")
    assert line.data["opinions"] == [opinion.hash]
    standing = here(pen).at(None, "vegetation")
    assert standing is not None and standing.choice.grade == "large"
    (beside,) = side_by_side(pen.survey, here(pen))
    grades = [(one.first.grade, one.second.grade) for one in beside.factors]
    assert ("medium", "large") in grades, "the first is still what it was before the consensus"


def test_nobody_who_made_a_consensus_accepts_it(pen: Recorder) -> None:
    take_opinion(pen.survey, filled(pen), "file")
    agree(Recorder(pen.survey, "Cy"), here(pen), judged(), reason="both are right")
    for name in ("Ada", "Bo", "Cy"):
        with pytest.raises(InputError, match="cannot accept"):
            Reviewer(Recorder(pen.survey, name)).accept(row(pen), overruling="x")
    assert Reviewer(Recorder(pen.survey, "Rea")).accept(row(pen), overruling="x")


def test_who_only_gave_a_second_opinion_may_accept(pen: Recorder) -> None:
    take_opinion(pen.survey, filled(pen), "file")
    assert Reviewer(Recorder(pen.survey, "Bo")).accept(row(pen), overruling="x")


def test_withdrawing_a_consensus_brings_the_first_back(pen: Recorder) -> None:
    before = here(pen).estimate()
    take_opinion(pen.survey, filled(pen), "file")
    line = agree(pen, here(pen), judged(base=BaseChoice(grade="cobble")), reason="r")
    pen.withdraw("Weir", line)
    assert here(pen).estimate() == before


# -- agreement ------------------------------------------------------------------------------


def test_agreement_is_that_of_the_differences_of_ln_n(pen: Recorder) -> None:
    assert agreement(pen.survey) is None
    take_opinion(pen.survey, filled(pen), "file")
    give_opinion(
        Recorder(pen.survey, "Cy"),
        here(pen, "Mill"),
        judged(base=BaseChoice(grade="gravel", best=0.0280)),
    )
    found = agreement(pen.survey)
    assert found is not None and found.count == 2
    pairs = [side_by_side(pen.survey, here(pen, name))[0] for name in ("Weir", "Mill")]
    a, b = (math.log(pair.second.n.best / pair.first.n.best) for pair in pairs)
    assert math.isclose(found.mean, (a + b) / 2, rel_tol=1e-12)
    assert found.sd is not None
    assert math.isclose(found.sd, abs(a - b) / math.sqrt(2), rel_tol=1e-12)
    assert math.isclose(found.rms, math.sqrt((a * a + b * b) / 2), rel_tol=1e-12)
    assert found.most == "vegetation"
    sigma = additive.sigma_of_people(pairs[0].first.n.best)
    assert sigma is not None and found.published is not None
    assert math.isclose(found.published, math.sqrt(2) * sigma, rel_tol=1e-12)
    assert found.provenance == "memory"
    assert "2 places" in str(found) and "vegetation" in str(found) and "memory" in str(found)


def test_one_place_alone_has_no_scatter_and_equal_people_differ_in_nothing(
    pen: Recorder,
) -> None:
    give_opinion(Recorder(pen.survey, "Bo"), here(pen), judged())
    found = agreement(pen.survey)
    assert found is not None
    assert (found.count, found.mean, found.sd, found.most) == (1, 0.0, None, None)


# -- weakness -------------------------------------------------------------------------------


def test_the_parts_of_weakness_add_to_its_score(pen: Recorder) -> None:
    take_opinion(pen.survey, filled(pen), "file")
    weak = weakness(pen.survey, row(pen))
    parts = (weak.unbacked, weak.findings, weak.width, weak.disagreement, weak.missing)
    assert math.isclose(weak.score, sum(parts)) and min(parts[:4]) >= 0


def test_notes_evidence_and_answers_make_a_row_less_weak(pen: Recorder) -> None:
    pen.choose(here(pen), "vegetation", VegetationChoice(grade="large"))
    first = weakness(pen.survey, row(pen))
    assert first.unbacked > 0
    photo = {"file": "evidence/0123456789ab-a.jpg", "sha256": "a" * 64, "size": 1, "name": "a.jpg"}
    pen.say_of_reach("Weir", "evidence", photo | {"factors": ["obstruction", "meander"]})
    with_photo = weakness(pen.survey, row(pen))
    assert with_photo.unbacked < first.unbacked
    asked = next(finding for finding in row(pen).open if finding.level == "ask")
    Reviewer(pen).answer_finding(here(pen), asked, "seen")
    assert math.isclose(weakness(pen.survey, row(pen)).findings, with_photo.findings - 0.25)


def test_evidence_for_another_part_backs_nothing_here(pen: Recorder) -> None:
    before = weakness(pen.survey, row(pen))
    photo = {"file": "evidence/0123456789ab-a.jpg", "sha256": "a" * 64, "size": 1, "name": "a.jpg"}
    elsewhere = {"factors": ["obstruction"], "part": "mill race"}
    pen.say_of_reach("Weir", "evidence", photo | elsewhere)
    assert weakness(pen.survey, row(pen)) == before


def test_disagreement_counts_until_a_consensus(pen: Recorder) -> None:
    take_opinion(pen.survey, filled(pen), "file")
    (beside,) = side_by_side(pen.survey, here(pen))
    sigma = additive.sigma_of_people(beside.first.n.best)
    assert sigma is not None
    found = weakness(pen.survey, row(pen)).disagreement
    assert math.isclose(found, abs(beside.log_ratio) / sigma, rel_tol=1e-12)
    agree(pen, here(pen), judged(), reason="looked again")
    assert weakness(pen.survey, row(pen)).disagreement == 0


def test_the_weakest_comes_first_and_the_accepted_last(pen: Recorder) -> None:
    pen.choose(here(pen, "Mill"), "obstruction", ObstructionChoice(grade="negligible", best=0.2))
    names = [one.reach.reach for one in order(pen.survey, rows(pen.survey))]
    assert names == ["Mill", "Weir"]
    mill = row(pen, "Mill")
    Reviewer(Recorder(pen.survey, "Rea")).accept(mill, overruling="known")
    names = [one.reach.reach for one in order(pen.survey, rows(pen.survey))]
    assert names == ["Weir", "Mill"]


def test_what_nobody_estimated_is_weaker_than_what_somebody_did(pen: Recorder) -> None:
    pen.add_reach(Reach(reach="Ford"))
    found = weakness(pen.survey, row(pen, "Ford"))
    assert found.missing == 2.0
    pen.add_part("Ford", Part(part=CHANNEL, setting="channel"))
    pen.choose(here(pen, "Ford"), "base", BaseChoice(grade="gravel"))
    assert math.isclose(weakness(pen.survey, row(pen, "Ford")).missing, 2 * 5 / 6)
