"""What the lines of a trail come to."""

from collections.abc import Iterable
from typing import Any

import pytest

from roughness.survey.choices import MeanderChoice, Measured, ObstructionChoice
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.trail.folding import fold_reach, fold_survey
from roughness.trail.lines import encoded, hash_of
from roughness.trail.ordering import up_to
from roughness.trail.reading import Trail, verified
from roughness.trail.state import PartState, ReachState
from roughness.trail.telling import describe_line, withdrawable

SHA = "c" * 64
ID = "ab" * 16
PLACE = {"part": "main channel", "condition": "design flood"}


class Writing:
    """A trail in the making, one minute a line."""

    def __init__(self, **begin: Any) -> None:
        self.raws: list[bytes] = []
        self.say("begin", {"format": 1, "survey": ID} | (begin or {"reach": "mill weir"}))

    def say(self, kind: str, data: dict[str, Any], by: str = "Ann") -> str:
        prev = (hash_of(self.raws[-1]),) if self.raws else ()
        at = f"2026-06-03T{len(self.raws) // 60:02}:{len(self.raws) % 60:02}:00+02:00"
        self.raws.append(encoded(prev, at, by, kind, data))
        return hash_of(self.raws[-1])

    def choose(self, factor: str, choice: dict[str, Any], **more: Any) -> str:
        by = more.pop("by", "Ann")
        said = PLACE | {"factor": factor, "choice": choice, "handbook": "ours"}
        return self.say("choose", said | {"handbook_sha256": SHA} | more, by)

    def gate(self, **more: Any) -> str:
        return self.say("gate", PLACE | {"handbook": "ours"} | more)

    def withdraw(self, line: str, by: str = "Ann") -> str:
        return self.say("withdraw", {"line": line}, by)

    @property
    def trail(self) -> Trail:
        return verified(b"".join(raw + b"\n" for raw in self.raws), "a.jsonl")

    @property
    def state(self) -> ReachState:
        return fold_reach(self.trail)

    @property
    def place(self) -> PartState:
        place = self.state.place(**PLACE)
        assert place is not None
        return place

    def grades(self, segment: str | None = None) -> dict[str, str | None]:
        return {f: c.choice.grade for f, c in self.place.choices.get(segment, {}).items()}


@pytest.fixture
def writing() -> Writing:
    return Writing()


def test_a_reach_knows_its_name_description_parts_and_visits(writing: Writing) -> None:
    writing.say("describe", {"slope": 0.002, "position": [[7.5, 51.0]], "note": "x"})
    writing.say("describe", {"slope": 0.003, "note": None})
    writing.say("part", {"part": "main channel", "setting": "channel"})
    writing.say("part", {"part": "mill race", "setting": "channel"})
    writing.say("part", {"part": "Main  Channel", "setting": "channel", "part_from": 3})
    writing.say("visit", {"visit": "spring", "people": "Ann, Bo", "growth": "leaf-off"})
    state = writing.state
    assert state.reach == Reach(reach="mill weir", slope=0.003, position=((7.5, 51.0),))
    assert state.survey == ID
    assert state.parts == (
        Part(part="Main  Channel", setting="channel", part_from=3.0),
        Part(part="mill race", setting="channel"),
    )
    assert state.visits == (Visit(visit="spring", people="Ann, Bo", growth="leaf-off"),)


def test_a_later_choice_of_the_same_factor_replaces_the_earlier(writing: Writing) -> None:
    writing.choose("obstruction", {"grade": "minor"})
    last = writing.choose("obstruction", {"blocked_percent": 8.0, "note": "logs"}, by="Bo")
    chosen = writing.place.choices[None]["obstruction"]
    assert chosen.choice == ObstructionChoice(blocked_percent=8.0, note="logs")
    assert (chosen.line.hash, chosen.line.by, chosen.handbook_sha256) == (last, "Bo", SHA)
    assert (writing.place.last_by, writing.place.last_at) == ("Bo", chosen.line.at)


def test_parts_and_conditions_are_told_apart_and_the_last_is_come_back_to(
    writing: Writing,
) -> None:
    writing.choose("base", {"grade": "gravel"})
    writing.choose("base", {"grade": "sand"}, condition="low flow")
    writing.choose("base", {"grade": "soil"}, part="left flood plain")
    state = writing.state
    assert list(state.places) == [
        ("main channel", "design flood"),
        ("main channel", "low flow"),
        ("left flood plain", "design flood"),
    ]
    assert state.last_touched == ("left flood plain", "design flood")


def test_a_withdrawn_line_has_no_effect_and_withdrawing_that_restores_it(
    writing: Writing,
) -> None:
    writing.choose("base", {"grade": "gravel"})
    second = writing.choose("base", {"grade": "sand"})
    undo = writing.withdraw(second)
    assert writing.grades() == {"base": "gravel"}
    redo = writing.withdraw(undo)
    assert writing.grades() == {"base": "sand"}
    writing.withdraw(redo)
    assert writing.grades() == {"base": "gravel"}
    assert second in writing.state.withdrawn


def test_the_first_line_and_lines_that_are_not_there_cannot_be_withdrawn(
    writing: Writing,
) -> None:
    writing.withdraw(hash_of(writing.raws[0]))
    writing.withdraw("d" * 64)
    assert writing.state.reach.reach == "mill weir"
    assert writing.state.withdrawn == frozenset()


def test_an_estimate_sets_everything_at_once_and_a_choice_after_it_one_factor(
    writing: Writing,
) -> None:
    writing.choose("meander", {"sinuosity": 1.5})
    writing.say(
        "estimate",
        PLACE
        | {
            "handbook_sha256": SHA,
            "visit": "spring",
            "estimate": {
                "handbook": "theirs",
                "setting": "channel",
                "factors": {"base": {"grade": "gravel"}, "variation": {"grade": "gradual"}},
                "measured": {"d50_mm": 34},
                "shape": "uniform",
                "dependence": 0,
            },
        },
    )
    assert writing.grades() == {"base": "gravel", "variation": "gradual"}
    writing.choose("variation", {"grade": "frequent"})
    place = writing.place
    assert writing.grades() == {"base": "gravel", "variation": "frequent"}
    assert place.measured == Measured(d50_mm=34.0)
    assert (place.shape, place.dependence, place.setting) == ("uniform", 0.0, "channel")
    assert (place.handbook, place.visit) == ("ours", "spring")
    assert place.choices[None]["base"].handbook == "theirs"


def test_an_estimate_can_tell_bed_and_banks_apart(writing: Writing) -> None:
    segment = {"perimeter_percent": 50.0, "factors": {"base": {"grade": "gravel"}}}
    writing.say(
        "estimate",
        PLACE
        | {
            "handbook_sha256": SHA,
            "estimate": {
                "handbook": "ours",
                "setting": "channel",
                "segments": [segment | {"name": "bed"}, segment | {"name": "banks"}],
            },
        },
    )
    assert list(writing.place.choices) == ["bed", "banks"]
    assert [s.name for s in writing.place.segments or ()] == ["bed", "banks"]


def test_an_estimate_of_the_whole_part_ends_the_telling_apart(writing: Writing) -> None:
    writing.gate(segments=[{"name": "bed", "perimeter_percent": 60}])
    writing.choose("base", {"grade": "sand"}, segment="bed")
    estimate = {"handbook": "ours", "setting": "channel", "factors": {"base": {"grade": "soil"}}}
    writing.say("estimate", PLACE | {"handbook_sha256": SHA, "estimate": estimate})
    assert writing.place.segments is None
    assert list(writing.place.choices) == [None]


def test_the_gate_names_segments_and_choices_of_dropped_ones_are_ignored(
    writing: Writing,
) -> None:
    both = [{"name": "bed", "perimeter_percent": 60}, {"name": "banks", "perimeter_percent": 40}]
    writing.choose("base", {"grade": "gravel"})
    writing.gate(segments=both, depth_m=1.3, bank="in bank", measured={"width_m": 14})
    writing.choose("base", {"grade": "sand"}, segment="Bed")
    writing.choose("base", {"grade": "soil"}, segment="banks")
    assert list(writing.place.choices) == [None, "bed", "banks"]
    writing.gate(depth_m=1.4)
    place = writing.place
    assert list(place.choices) == [None]
    assert place.segments is None
    assert place.gate is not None
    assert place.gate.depth_m == 1.4
    assert place.measured == Measured(width_m=14.0)
    writing.gate(segments=both[:1])
    assert list(writing.place.choices) == [None, "bed"]


def test_an_adopted_value_stands_with_what_its_author_had_seen(writing: Writing) -> None:
    seen = writing.choose("base", {"grade": "gravel"})
    writing.say("adopt", PLACE | {"n": 0.045, "low": 0.04, "reason": "measured flow"}, by="Mo")
    adopted = writing.place.adopted
    assert adopted is not None
    assert (adopted.n, adopted.low, adopted.high) == (0.045, 0.04, None)
    assert adopted.line.prev == (seen,)
    writing.choose("base", {"grade": "sand"})
    assert writing.place.adopted == adopted, "the fold itself drops nothing"


def test_what_an_adopted_value_rested_on_can_be_compared_with_now(writing: Writing) -> None:
    writing.choose("base", {"grade": "gravel"})
    writing.say("adopt", PLACE | {"n": 0.045, "reason": "measured flow"})
    adopted = writing.place.adopted
    assert adopted is not None

    def stands() -> bool:
        then = fold_reach(up_to(writing.trail, adopted.line.prev)).place(**PLACE)
        return writing.place.judged_like(then)

    assert stands()
    changed = writing.choose("base", {"grade": "sand"})
    assert not stands()
    writing.withdraw(changed)
    assert stands()


def test_a_carried_choice_says_where_from_until_it_is_confirmed(writing: Writing) -> None:
    origin = {"reach": "ford", "part": "main channel", "condition": "design flood"}
    writing.choose("meander", {"sinuosity": 1.3}, carried_from=origin)
    carried = writing.place.choices[None]["meander"].carried_from
    assert carried is not None
    assert carried.reach == "ford"
    writing.choose("meander", {"sinuosity": 1.3})
    chosen = writing.place.choices[None]["meander"]
    assert chosen.carried_from is None
    assert chosen.choice == MeanderChoice(sinuosity=1.3)


def test_unknown_kinds_are_listed_and_unknown_keys_passed_over(writing: Writing) -> None:
    writing.say("weather-report", {"rain": True})
    writing.choose("base", {"grade": "gravel", "colour": "grey"}, mood="good")
    state = writing.state
    assert [line.kind for line in state.unknown] == ["weather-report"]
    assert writing.grades() == {"base": "gravel"}
    assert state.unusable == ()


@pytest.mark.parametrize(
    ("kind", "data"),
    [
        ("choose", {"part": "x"}),
        ("choose", {"factor": ["base"]}),
        ("gate", PLACE | {"handbook": "ours", "depth_m": "deep"}),
        ("begin", {"format": 1, "survey": ID, "reach": "another"}),
        ("visit", {"visit": "\ud800"}),
    ],
)
def test_a_known_kind_that_does_not_fit_is_listed_without_effect(
    writing: Writing, kind: str, data: dict[str, Any]
) -> None:
    writing.say(kind, data)
    state = writing.state
    assert [fault.line for fault in state.unusable] == [2]
    assert state.reach.reach == "mill weir"
    assert not state.places


def test_the_last_effective_line_of_a_person_can_be_taken_back(writing: Writing) -> None:
    first = writing.choose("base", {"grade": "gravel"})
    second = writing.choose("obstruction", {"grade": "negligible"})
    writing.choose("base", {"grade": "sand"}, by="Bo")

    def last(by: str) -> str | None:
        line = withdrawable(writing.state, by)
        return line.hash if line else None

    assert last(" ANN ") == second
    writing.withdraw(second)
    assert last("Ann") == first
    writing.withdraw(first)
    assert last("Ann") is None
    assert last("Eve") is None


def test_the_survey_knows_conditions_reaches_and_their_order() -> None:
    writing = Writing(name="Mill Brook")
    line = {"first_line": "f" * 64}
    writing.say("describe", {"stream": "Mill Brook", "length_unit": "km"})
    writing.say("describe", {"grows": "upstream"})
    writing.say("flow-condition", {"condition": "design flood"})
    writing.say("flow-condition", {"condition": "low flow", "growth": "leaf-on"})
    last = writing.say("flow-condition", {"condition": "Design flood", "tolerance_cm": 10})
    for name in ("a", "b", "c"):
        writing.say("reach", line | {"reach": name, "file": name, "reach_from": 1.5})
    writing.say("order", {"reaches": ["c", "nobody", "a"]})
    writing.say("heads", {"why": "export", "heads": {"a": "e" * 64}})
    state = fold_survey(writing.trail)
    assert (state.name, state.survey) == ("Mill Brook", ID)
    described = state.described
    assert (described.stream, described.length_unit, described.grows) == (
        "Mill Brook", "km", "upstream",
    )  # fmt: skip
    assert state.conditions == (
        FlowCondition(condition="Design flood", tolerance_cm=10.0),
        FlowCondition(condition="low flow", growth="leaf-on"),
    )
    assert state.condition_lines["Design flood"].hash == last
    assert [reach.reach for reach in state.reaches] == ["c", "a", "b"]
    assert state.condition("DESIGN FLOOD") is not None
    assert state.reach(" B ") is not None
    assert state.heads[0][1].heads == {"a": "e" * 64}


def test_a_noted_reach_whose_file_leads_elsewhere_is_without_effect() -> None:
    writing = Writing(name="Mill Brook")
    writing.say("reach", {"reach": "a", "file": "../a", "first_line": "f" * 64})
    state = fold_survey(writing.trail)
    assert state.reaches == ()
    assert len(state.unusable) == 1


def test_every_line_can_be_told_in_a_sentence(writing: Writing) -> None:
    def told(lines: Iterable[bytes]) -> str:
        return describe_line(verified(b"".join(r + b"\n" for r in lines), "a").lines[-1])

    writing.choose("obstruction", {"grade": "negligible"})
    assert told(writing.raws) == "obstruction of main channel at design flood: negligible"
    writing.choose("base", {"best": 0.025, "low": 0.02}, segment="banks")
    assert told(writing.raws) == (
        "base of banks in main channel at design flood: best 0.025, low 0.02"
    )
    writing.say("adopt", PLACE | {"n": 0.04501, "reason": "gauged"})
    assert told(writing.raws) == "adopted n of main channel at design flood: 0.045, gauged"
    writing.gate(depth_m=1.3, mobile_sand=True)
    assert told(writing.raws) == (
        "setup of main channel at design flood: depth 1.3 m, mobile sand, ours"
    )
    writing.say("describe", {"slope": 0.002, "note": None})
    assert told(writing.raws) == "description: slope 0.002, note taken back"
    writing.say("choose", {"part": 3})
    assert told(writing.raws) == "a choose line whose data does not fit its kind"
    writing.say("weather", {"rain": 3})
    assert told(writing.raws).startswith("a line of a kind that this version does not know")


def test_an_estimate_and_a_carried_choice_are_told_with_what_they_set(writing: Writing) -> None:
    base = {"base": {"grade": "gravel"}, "meander": {"sinuosity": 1.2}}
    whole = {"handbook": "ours", "setting": "channel", "factors": base}
    segment = {"name": "bed", "perimeter_percent": 60, "factors": base}
    apart = {"handbook": "ours", "setting": "channel", "segments": [segment]}
    for estimate in (whole, apart):
        writing.say("estimate", PLACE | {"handbook_sha256": SHA, "estimate": estimate})
    writing.choose("meander", {"sinuosity": 1.2}, carried_from=PLACE | {"reach": "ford\u202e"})
    assert [describe_line(line) for line in writing.state.effective[1:]] == [
        "estimate of main channel at design flood: base gravel, meander by measure",
        "estimate of main channel at design flood: bed told apart",
        "meander of main channel at design flood: sinuosity 1.2, carried from ford\\u202e",
    ]


def test_the_choices_of_a_part_can_be_handed_on_as_factors(writing: Writing) -> None:
    writing.choose("meander", {"sinuosity": 1.2})
    factors = writing.place.factors()
    assert factors.meander == MeanderChoice(sinuosity=1.2)
    assert factors.base is None
    assert writing.place.factors("bed").meander is None
