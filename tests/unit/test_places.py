"""What stands for a part under a condition: own, inherited, carried, segments, missing."""

from pathlib import Path

import pytest

from roughness.desk.carrying import carry, carry_part, confirm, sources
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.offers import n_so_far, offers
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.desk.resuming import LeftAt, left_at, left_unfinished, open_question
from roughness.desk.rows import rows
from roughness.errors import InputError
from roughness.survey.choices import (
    BaseChoice,
    Choice,
    MeanderChoice,
    ObstructionChoice,
    VegetationChoice,
)
from roughness.survey.stream import FlowCondition, Part, Reach
from roughness.trail.data import Gate, SegmentShare

FLOOD, WINTER = "design flood", "winter flow"
CHANNEL, LEFT, RIGHT = "main channel", "left flood plain", "right flood plain"
WHOLE: list[tuple[str, Choice]] = [
    ("base", BaseChoice(grade="gravel")),
    ("irregularity", Choice(grade="minor")),
    ("variation", Choice(grade="gradual")),
    ("obstruction", ObstructionChoice(grade="negligible")),
    ("vegetation", VegetationChoice(grade="medium")),
    ("meander", MeanderChoice(grade="appreciable")),
]


@pytest.fixture
def pen(tmp_path: Path) -> Recorder:
    reaches = [Reach(reach="Upper"), Reach(reach="Lower", slope=0.004)]
    pen = Recorder(new_survey(tmp_path / "s", "Ada", reaches=reaches), "Ada")
    pen.add_condition(FlowCondition(condition=FLOOD, growth="leaf-on", bank="over bank"))
    pen.add_condition(FlowCondition(condition=WINTER, growth="leaf-off", bank="in bank"))
    for reach in ("Upper", "Lower"):
        pen.add_part(reach, Part(part=CHANNEL, setting="channel"))
    return pen


def walk(
    pen: Recorder, reach: str, part: str, condition: str, *choices: tuple[str, Choice]
) -> None:
    for factor, choice in choices:
        pen.choose(place_of(pen.survey, reach, part, condition), factor, choice)  # type: ignore[arg-type]


def test_a_walk_asks_every_factor_once_and_then_has_an_estimate(pen: Recorder) -> None:
    place = place_of(pen.survey, "Upper", CHANNEL, FLOOD)
    assert [factor for _, factor in place.questions] == [factor for factor, _ in WHOLE]
    assert place.missing == place.questions and place.estimate() is None
    walk(pen, "Upper", CHANNEL, FLOOD, *WHOLE)
    place = place_of(pen.survey, "Upper", CHANNEL, FLOOD)
    estimate = place.estimate()
    assert not place.missing and estimate is not None
    assert n_so_far(place) == estimate.n


def test_a_second_condition_asks_only_what_changes(pen: Recorder) -> None:
    walk(pen, "Upper", CHANNEL, FLOOD, *WHOLE)
    winter = place_of(pen.survey, "Upper", CHANNEL, WINTER)
    assert [f for _, f in winter.missing] == ["obstruction", "vegetation", "meander"]
    base = winter.at(None, "base")
    assert base is not None and base.inherited_from == FLOOD


def test_a_corrected_base_holds_for_the_second_condition_too(pen: Recorder) -> None:
    walk(pen, "Upper", CHANNEL, FLOOD, *WHOLE)
    walk(pen, "Upper", CHANNEL, WINTER, *WHOLE[3:])
    walk(pen, "Upper", CHANNEL, FLOOD, ("base", BaseChoice(grade="cobble")))
    winter = place_of(pen.survey, "Upper", CHANNEL, WINTER).estimate()
    assert winter is not None and winter.factors[0].grade == "cobble"


def test_a_choice_of_its_own_beats_the_inherited_one(pen: Recorder) -> None:
    walk(pen, "Upper", CHANNEL, FLOOD, *WHOLE)
    walk(pen, "Upper", CHANNEL, WINTER, ("base", BaseChoice(grade="cobble")))
    base = place_of(pen.survey, "Upper", CHANNEL, WINTER).at(None, "base")
    assert base is not None and base.choice.grade == "cobble" and base.inherited_from is None


def test_bed_and_banks_are_asked_apart_but_bends_once(pen: Recorder) -> None:
    shares = (
        SegmentShare(name="bed", perimeter_percent=60),
        SegmentShare(name="banks", perimeter_percent=40),
    )
    gate = Gate(part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339", segments=shares)
    pen.set_gate("Upper", gate)
    place = place_of(pen.survey, "Upper", CHANNEL, FLOOD)
    assert place.questions[:3] == (("bed", "base"), ("banks", "base"), ("bed", "irregularity"))
    assert [q for q in place.questions if q[0] is None] == [(None, "variation"), (None, "meander")]
    for segment, factor in place.questions:
        pen.choose(place, factor, dict(WHOLE)[factor], segment=segment)
    place = place_of(pen.survey, "Upper", CHANNEL, FLOOD)
    estimate = place.estimate()
    assert estimate is not None and n_so_far(place) == estimate.n


def test_carried_choices_are_marked_until_confirmed(pen: Recorder) -> None:
    walk(pen, "Upper", CHANNEL, FLOOD, *WHOLE)
    lower = place_of(pen.survey, "Lower", CHANNEL, FLOOD)
    (source,) = sources(pen.survey, lower)
    carry(pen, lower, (None, "base"), source)
    carry_part(pen, lower, source)
    lower = place_of(pen.survey, "Lower", CHANNEL, FLOOD)
    assert len(lower.unconfirmed) == 6 and open_question(lower) == (None, "base")
    assert left_unfinished(SurveyFolder(pen.survey.folder)) == LeftAt("Lower", CHANNEL, FLOOD)
    row = next(r for r in rows(pen.survey) if r.reach.reach == "Lower" and r.estimate)
    assert "carried-over-unconfirmed" in [finding.rule for finding in row.findings]
    for question in lower.questions:
        confirm(pen, lower, question)
    lower = place_of(pen.survey, "Lower", CHANNEL, FLOOD)
    assert not lower.unconfirmed and open_question(lower) is None
    assert left_unfinished(pen.survey) is None


def test_the_other_plain_is_a_source_and_a_channel_is_none(pen: Recorder) -> None:
    for name in (LEFT, RIGHT):
        pen.add_part("Upper", Part(part=name, setting="flood-plain"))
    walk(pen, "Upper", CHANNEL, FLOOD, *WHOLE)
    plain = [(f, c) for f, c in WHOLE if f not in ("variation", "meander")]
    walk(pen, "Upper", LEFT, FLOOD, *plain)
    right = place_of(pen.survey, "Upper", RIGHT, FLOOD)
    assert [source.part.part for source in sources(pen.survey, right)] == [LEFT]


def test_an_open_factor_cannot_be_carried(pen: Recorder) -> None:
    walk(pen, "Upper", CHANNEL, FLOOD, WHOLE[0])
    lower = place_of(pen.survey, "Lower", CHANNEL, FLOOD)
    with pytest.raises(InputError, match="open"):
        carry(pen, lower, (None, "vegetation"), sources(pen.survey, lower)[0])


def test_somebody_who_left_in_the_middle_comes_back_to_the_open_question(pen: Recorder) -> None:
    walk(pen, "Upper", CHANNEL, FLOOD, *WHOLE)
    walk(pen, "Lower", CHANNEL, FLOOD, *WHOLE[:3])
    again = SurveyFolder(pen.survey.folder)
    assert left_at(again) == LeftAt("Lower", CHANNEL, FLOOD)
    assert open_question(place_of(again, "Lower", CHANNEL, FLOOD)) == (None, "obstruction")
    walk(pen, "Upper", CHANNEL, FLOOD, WHOLE[4])
    assert left_unfinished(pen.survey) == LeftAt("Lower", CHANNEL, FLOOD)


def test_an_offer_tells_n_and_water_before_it_is_taken(pen: Recorder) -> None:
    gate = Gate(part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339", depth_m=1.5)
    pen.set_gate("Upper", gate)
    walk(pen, "Upper", CHANNEL, FLOOD, *WHOLE[:3])
    place = place_of(pen.survey, "Upper", CHANNEL, FLOOD)
    seen = offers(place, (None, "obstruction"), ObstructionChoice(blocked_percent=20))
    assert [o.grade.key for o in seen.grades if o.suggested] == ["appreciable"]
    for offer in seen.grades:
        choice = ObstructionChoice(grade=offer.grade.key)
        pen.choose(place, "obstruction", choice)
        after = n_so_far(place_of(pen.survey, "Upper", CHANNEL, FLOOD))
        assert offer.n == after
    rises = [offer.water_cm for offer in seen.grades if offer.water_cm is not None]
    assert rises[0] == 0 and rises == sorted(rises) and rises[-1] > 30


def test_nothing_flows_on_the_plain_while_the_stream_keeps_to_its_bed(pen: Recorder) -> None:
    pen.add_part("Upper", Part(part=LEFT, setting="flood-plain"))
    found = {
        (row.part.part, row.condition.condition)
        for row in rows(pen.survey)
        if row.reach.reach == "Upper" and row.part and row.condition
    }
    assert (LEFT, FLOOD) in found and (LEFT, WINTER) not in found
