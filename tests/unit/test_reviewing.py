"""A review as a reviewer does it: questions, verdicts, what they rest on and what undoes them."""

from collections.abc import Callable
from pathlib import Path

import pytest

from roughness.desk.checking import check
from roughness.desk.folder import SurveyFolder
from roughness.desk.history import accepted_in_words, since_acceptance, timeline
from roughness.desk.making import new_survey
from roughness.desk.places import Place, place_of
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row, rows
from roughness.errors import InputError, RecordError
from roughness.exports.table import table_of
from roughness.survey.choices import (
    BaseChoice,
    Choice,
    MeanderChoice,
    ObstructionChoice,
    VegetationChoice,
)
from roughness.survey.stream import FlowCondition, Part, Reach, Visit
from roughness.trail.data import Gate, SegmentShare

FLOOD, LOW, CHANNEL = "design flood", "low flow", "main channel"
WHOLE: tuple[tuple[str, Choice], ...] = (
    ("base", BaseChoice(grade="gravel", note="pebble count on the bar")),
    ("irregularity", Choice(grade="minor")),
    ("variation", Choice(grade="gradual")),
    ("obstruction", ObstructionChoice(grade="minor", note="logs, counted")),
    ("vegetation", VegetationChoice(grade="medium", note="willows, seen leafless")),
    ("meander", MeanderChoice(grade="minor")),
)


@pytest.fixture
def pen(tmp_path: Path) -> Recorder:
    reaches = [Reach(reach="Weir"), Reach(reach="Mill")]
    pen = Recorder(new_survey(tmp_path / "s", "Ada", reaches=reaches), "Ada")
    pen.add_condition(FlowCondition(condition=FLOOD, tolerance_cm=30))
    for reach in ("Weir", "Mill"):
        pen.add_part(reach, Part(part=CHANNEL, setting="channel"))
        pen.note_visit(reach, Visit(visit="spring"))
    for factor, choice in WHOLE:
        choose(pen, factor, choice)
    return pen


@pytest.fixture
def rea(pen: Recorder) -> Reviewer:
    return Reviewer(Recorder(pen.survey, "Rea"))


def choose(pen: Recorder, factor: str, choice: Choice, condition: str = FLOOD) -> None:
    place = place_of(pen.survey, "Weir", CHANNEL, condition)
    pen.choose(place, factor, choice)  # type: ignore[arg-type]


def row_of(survey: SurveyFolder, condition: str = FLOOD, reach: str = "Weir") -> Row:
    return next(
        row
        for row in rows(survey)
        if row.reach.reach == reach and row.condition and row.condition.condition == condition
    )


def place(survey: SurveyFolder, condition: str = FLOOD) -> Place:
    return place_of(survey, "Weir", CHANNEL, condition)


def stop(pen: Recorder) -> None:
    """Make a finding that stops: a value outside its published range, without a note."""
    choose(pen, "obstruction", ObstructionChoice(grade="minor", best=0.09, high=0.1))


# -- questions ------------------------------------------------------------------------------


def test_a_question_puts_a_row_in_review_and_an_answer_closes_it(rea: Reviewer) -> None:
    line = rea.ask(place(rea.survey), "which gravel?", factor="base")
    row = row_of(rea.survey)
    assert row.status == "in review"
    assert [asked.question.text for asked in row.review.open_questions] == ["which gravel?"]
    rea.answer("Weir", line.hash, "that of the bar")
    assert not row_of(rea.survey).review.open_questions
    assert row_of(rea.survey).status == "in review", "asked, and nobody judged since"


def test_a_change_after_an_answered_question_makes_it_an_estimate_again(
    pen: Recorder, rea: Reviewer
) -> None:
    line = rea.ask(place(rea.survey), "why?")
    rea.answer("Weir", line.hash, "a slip")
    choose(pen, "base", BaseChoice(grade="cobble"))
    assert row_of(rea.survey).status == "estimated"


def test_empty_words_and_unknown_questions_are_refused(rea: Reviewer) -> None:
    here = place(rea.survey)
    before = rea.survey.reach_path("Weir").read_bytes()
    with pytest.raises(InputError, match="empty"):
        rea.ask(here, "  ")
    with pytest.raises(InputError, match="no question"):
        rea.ask(here, "so?", follows="a" * 64)
    with pytest.raises(InputError, match="no question"):
        rea.answer("Weir", "a" * 64, "x")
    with pytest.raises(InputError, match="empty"):
        rea.return_(here, " ")
    assert rea.survey.reach_path("Weir").read_bytes() == before


def test_an_answered_finding_is_open_no_more_until_it_says_something_else(
    pen: Recorder, rea: Reviewer
) -> None:
    choose(pen, "vegetation", VegetationChoice(grade="large"))
    asks = [f for f in row_of(rea.survey).open if f.rule == "driver-without-reason"]
    assert len(asks) == 1
    rea.answer_finding(place(rea.survey), asks[0], "seen in June")
    row = row_of(rea.survey)
    assert asks[0] in row.findings and asks[0] not in row.open
    choose(pen, "vegetation", VegetationChoice(grade="very-large"))
    assert [f for f in row_of(rea.survey).open if f.rule == "driver-without-reason"]


def test_a_finding_that_stops_cannot_be_answered_away(pen: Recorder, rea: Reviewer) -> None:
    stop(pen)
    finding = next(f for f in row_of(rea.survey).findings if f.level == "stop")
    with pytest.raises(InputError, match="not answered"):
        rea.answer_finding(place(rea.survey), finding, "it is so")


def test_rows_without_a_place_are_refused_in_a_sentence_and_never_clean(rea: Reviewer) -> None:
    rea.pen.add_reach(Reach(reach="Ford"))
    row = next(row for row in rows(rea.survey) if row.reach.reach == "Ford")
    (refusal,) = rea.refusals(row)
    assert "nothing to review" in refusal.says and not refusal.may_be_overruled
    assert [row.reach.reach for row in rea.clean()] == ["Weir"]
    with pytest.raises(InputError, match="nothing to review"):
        rea.accept(row)


def test_rows_whose_trail_is_broken_are_refused_in_a_sentence(rea: Reviewer) -> None:
    path = rea.survey.reach_path("Weir")
    lines = path.read_bytes().splitlines(keepends=True)
    path.write_bytes(b"".join(lines[:2] + lines[3:]))
    assert any("broken" in refusal.says for refusal in rea.refusals(row_of(rea.survey)))
    assert rea.clean() == []
    path.unlink()
    unreadable = next(row for row in rows(rea.survey) if row.reach.reach == "Weir")
    assert rea.refusals(unreadable)


# -- acceptance -----------------------------------------------------------------------------


def test_an_accepted_row_says_so_with_who_and_when_and_the_survey_notes_the_head(
    rea: Reviewer,
) -> None:
    line = rea.accept(row_of(rea.survey))
    row = row_of(rea.survey)
    assert (row.status, row.reviewed_by, row.reviewed_at) == ("accepted", "Rea", line.at)
    noted = rea.survey.state.heads[-1][1]
    assert noted.why == "acceptance" and noted.heads["Weir"] == line.hash
    assert check(rea.survey).intact
    cells = table_of(rea.survey, [row]).rows[0]
    assert (cells["status"], cells["reviewed_by"], cells["reviewed_at"]) == (
        "accepted", "Rea", line.at,
    )  # fmt: skip
    assert "accepted by Rea" in str(accepted_in_words(rea.survey, place(rea.survey)))


def test_an_acceptance_is_bound_to_the_head_that_was_judged(rea: Reviewer) -> None:
    head = rea.survey.reach_trail("Weir").heads[0]
    line = rea.accept(row_of(rea.survey))
    row = row_of(rea.survey)
    assert row.estimate is not None
    assert line.data["head"] == head
    assert line.data["n"]["best"] == row.estimate.n.best
    condition = rea.survey.state.condition_lines[FLOOD]
    assert line.data["condition_line"] == condition.hash


def test_the_one_who_estimated_is_refused_unless_the_survey_says_otherwise(
    pen: Recorder,
) -> None:
    ada = Reviewer(Recorder(pen.survey, " ADA "))
    with pytest.raises(InputError, match="cannot accept"):
        ada.accept(row_of(pen.survey))
    pen.describe(same_person_may_accept=True)
    line = ada.accept(row_of(pen.survey))
    assert line.data["same_person"] is True
    pen.describe(same_person_may_accept=None)
    assert row_of(pen.survey).status == "accepted"
    assert check(pen.survey).intact, "it was allowed then, and says so"


def test_one_choice_of_a_place_is_enough_to_be_one_who_estimated(
    pen: Recorder, rea: Reviewer
) -> None:
    choose(rea.pen, "meander", MeanderChoice(grade="appreciable"))
    with pytest.raises(InputError, match="cannot accept"):
        rea.accept(row_of(rea.survey))
    choose(pen, "meander", MeanderChoice(grade="appreciable"))
    assert rea.accept(row_of(rea.survey))


def test_who_adopted_the_value_does_not_accept_it(rea: Reviewer) -> None:
    rea.pen.adopt("Weir", CHANNEL, FLOOD, 0.05, reason="gauged")
    with pytest.raises(InputError, match="cannot accept"):
        rea.accept(row_of(rea.survey))


def test_a_stop_or_an_open_question_needs_a_reason(pen: Recorder, rea: Reviewer) -> None:
    rea.ask(place(rea.survey), "why?")
    with pytest.raises(InputError, match="open"):
        rea.accept(row_of(rea.survey))
    stop(pen)
    line = rea.accept(row_of(rea.survey), overruling="the gauge says so")
    assert line.data["overruled"] == "the gauge says so"
    row = row_of(rea.survey)
    assert row.status == "accepted" and row.stands_stopped


def test_an_incomplete_place_is_not_accepted(rea: Reviewer) -> None:
    row = next(row for row in rows(rea.survey) if row.reach.reach == "Mill")
    with pytest.raises(InputError, match="factor is open"):
        rea.accept(row)


def test_what_was_changed_since_it_was_read_is_not_accepted(pen: Recorder, rea: Reviewer) -> None:
    seen = row_of(rea.survey)
    choose(Recorder(SurveyFolder(pen.survey.folder), "Ada"), "base", BaseChoice(grade="cobble"))
    with pytest.raises(InputError, match="changed since it was read"):
        rea.accept(seen)


def test_a_question_asked_meanwhile_by_another_reviewer_refuses_too(rea: Reviewer) -> None:
    seen = row_of(rea.survey)
    other = Reviewer(Recorder(SurveyFolder(rea.survey.folder), "Bo"))
    other.ask(place(other.survey), "hold on")
    with pytest.raises(InputError, match="hold on"):
        rea.accept(seen)


def test_two_reviewers_at_once_both_stand_in_the_trail(rea: Reviewer) -> None:
    seen = row_of(rea.survey)
    bo = Reviewer(Recorder(SurveyFolder(rea.survey.folder), "Bo"))
    bo.accept(row_of(bo.survey))
    rea.accept(seen)
    row = row_of(rea.survey)
    assert row.status == "accepted" and row.reviewed_by == "Rea"
    assert [one.line.by for one in row.review.acceptances] == ["Bo", "Rea"]
    with pytest.raises(InputError, match="already"):
        rea.accept(row)
    assert check(SurveyFolder(rea.survey.folder)).intact


Act = Callable[[Recorder, Reviewer], object]
HARMLESS: dict[str, Act] = {
    "question": lambda pen, rea: rea.ask(place(rea.survey), "one more thing"),
    "caption": lambda pen, rea: pen.say_of_reach(
        "Weir",
        "evidence",
        {"file": "evidence/0123456789ab-a.jpg", "sha256": "a" * 64, "size": 1, "name": "a.jpg",
         "caption": "the bar"},
    ),
    "heads": lambda pen, rea: pen.note_heads("report"),
    "same choice again": lambda pen, rea: choose(pen, *WHOLE[1]),
    "another note": lambda pen, rea: choose(pen, "meander", MeanderChoice(grade="minor", note="x")),
    "same condition again": lambda pen, rea: pen.add_condition(
        FlowCondition(condition=FLOOD, tolerance_cm=30)
    ),
    "visit": lambda pen, rea: pen.note_visit("Weir", Visit(visit="later")),
    "reach note": lambda pen, rea: pen.describe_reach("Weir", note="seen again"),
    "another reach": lambda pen, rea: pen.describe_reach("Mill", slope=0.01),
    "another condition": lambda pen, rea: pen.add_condition(FlowCondition(condition=LOW)),
}  # fmt: skip
CHANGES: dict[str, Act] = {
    "grade": lambda pen, rea: choose(pen, "base", BaseChoice(grade="cobble")),
    "best": lambda pen, rea: choose(pen, "base", BaseChoice(grade="gravel", best=0.03)),
    "low": lambda pen, rea: choose(pen, "vegetation", VegetationChoice(grade="medium", low=0.012)),
    "high": lambda pen, rea: choose(pen, "vegetation", VegetationChoice(grade="medium", high=0.02)),
    "criterion": lambda pen, rea: choose(
        pen, "vegetation", VegetationChoice(grade="medium", where="banks")
    ),
    "measured criterion": lambda pen, rea: choose(pen, "meander", MeanderChoice(sinuosity=1.1)),
    "depth": lambda pen, rea: pen.set_gate(
        "Weir", Gate(part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339", depth_m=1.4)
    ),
    "bed and banks": lambda pen, rea: pen.set_gate(
        "Weir",
        Gate(
            part=CHANNEL, condition=FLOOD, handbook="usgs-wsp-2339",
            segments=(SegmentShare(name="bed", perimeter_percent=60.0),
                      SegmentShare(name="banks", perimeter_percent=40.0)),
        ),
    ),
    "tolerance": lambda pen, rea: pen.add_condition(
        FlowCondition(condition=FLOOD, tolerance_cm=10)
    ),
    "growth": lambda pen, rea: pen.add_condition(
        FlowCondition(condition=FLOOD, growth="leaf-on")
    ),
    "adopted": lambda pen, rea: pen.adopt("Weir", CHANNEL, FLOOD, 0.06, reason="gauged"),
    "withdrawal": lambda pen, rea: pen.withdraw(
        "Weir", next(i for i in pen.survey.reach_trail("Weir").lines if i.kind == "choose")
    ),
}  # fmt: skip


@pytest.mark.parametrize("act", HARMLESS)
def test_an_acceptance_stands_under(act: str, pen: Recorder, rea: Reviewer) -> None:
    rea.accept(row_of(rea.survey))
    HARMLESS[act](pen, rea)
    assert row_of(rea.survey).status == "accepted"
    assert not any(change.weighs for change in since_acceptance(rea.survey, place(rea.survey)))


@pytest.mark.parametrize("act", CHANGES)
def test_an_acceptance_falls_with(act: str, pen: Recorder, rea: Reviewer) -> None:
    rea.accept(row_of(rea.survey))
    seen = place(rea.survey)
    CHANGES[act](pen, rea)
    assert row_of(rea.survey).status == "changed since acceptance"
    changes = since_acceptance(rea.survey, seen)
    assert any(change.weighs for change in changes), "and it is told what changed"


def test_taking_a_change_back_restores_the_acceptance(pen: Recorder, rea: Reviewer) -> None:
    rea.accept(row_of(rea.survey))
    choose(pen, "base", BaseChoice(grade="cobble"))
    pen.withdraw("Weir", pen.survey.reach_trail("Weir").lines[-1])
    assert row_of(rea.survey).status == "accepted"


def test_an_acceptance_can_be_withdrawn(rea: Reviewer) -> None:
    line = rea.accept(row_of(rea.survey))
    rea.pen.withdraw("Weir", line)
    assert row_of(rea.survey).status == "estimated"


def test_an_acceptance_of_a_second_condition_falls_with_the_base_of_the_first(
    pen: Recorder, rea: Reviewer
) -> None:
    pen.add_condition(FlowCondition(condition=LOW))
    for factor, choice in WHOLE[3:]:
        choose(pen, factor, choice, LOW)
    rea.accept(row_of(rea.survey, LOW))
    assert row_of(rea.survey, LOW).status == "accepted"
    choose(pen, "base", BaseChoice(grade="cobble"))
    assert row_of(rea.survey, LOW).status == "changed since acceptance"
    changes = since_acceptance(rea.survey, place(rea.survey, LOW))
    assert [change.weighs for change in changes] == [True]
    assert "accepted was gravel" in changes[0].says


def test_an_acceptance_does_not_reach_another_condition(pen: Recorder, rea: Reviewer) -> None:
    rea.accept(row_of(rea.survey))
    pen.add_condition(FlowCondition(condition=LOW))
    for factor, choice in WHOLE[3:]:
        choose(pen, factor, choice, LOW)
    assert row_of(rea.survey, LOW).status == "estimated"
    assert row_of(rea.survey).status == "accepted"


def test_a_return_stands_until_something_is_done(pen: Recorder, rea: Reviewer) -> None:
    rea.return_(place(rea.survey), "no photo of the willows")
    row = row_of(rea.survey)
    assert (row.status, row.reviewed_by) == ("returned", "Rea")
    choose(pen, "vegetation", VegetationChoice(grade="small"))
    assert row_of(rea.survey).status == "estimated"


def test_all_that_is_clean_is_listed_first_and_then_accepted(pen: Recorder, rea: Reviewer) -> None:
    assert [row.reach.reach for row in rea.clean()] == ["Weir"]
    assert Reviewer(pen).clean() == [], "the one who estimated has nothing to accept"
    rea.ask(place(rea.survey), "why?")
    assert rea.clean() == []
    rea.pen.withdraw("Weir", rea.survey.reach_trail("Weir").lines[-1])
    (line,) = rea.accept_all(rea.clean())
    assert row_of(rea.survey).status == "accepted" and line.kind == "accept"
    assert rea.clean() == []
    assert check(rea.survey).intact


def test_clocks_that_go_backwards_and_time_zones_do_not_matter(
    pen: Recorder, rea: Reviewer, monkeypatch: pytest.MonkeyPatch
) -> None:
    times = iter(
        ["2026-06-03T18:00:00+12:00", "1999-01-01T00:00:00-11:00", "2031-01-01T00:00:00Z"] * 4
    )
    monkeypatch.setattr("roughness.desk.recording.now", lambda: next(times))
    rea.accept(row_of(rea.survey))
    assert row_of(rea.survey).status == "accepted"
    choose(pen, "base", BaseChoice(grade="cobble"))
    assert row_of(rea.survey).status == "changed since acceptance"
    rea.return_(place(rea.survey), "look again")
    assert row_of(rea.survey).status == "returned"
    rea.accept(row_of(rea.survey))
    assert row_of(rea.survey).status == "accepted"
    assert check(rea.survey).intact


def test_the_timeline_tells_each_line_in_a_sentence(rea: Reviewer) -> None:
    question = rea.ask(place(rea.survey), "which gravel?", factor="base")
    answer = rea.answer("Weir", question.hash, "that of the bar")
    rea.pen.withdraw("Weir", answer)
    told = timeline(rea.survey, "Weir")
    assert len(told) == len(rea.survey.reach_trail("Weir").lines)
    assert str(told[-2]).endswith(
        "Rea: answered: that of the bar (to Rea's question: which gravel?) (taken back later)."
    )
    assert "took back Rea's line: answered: that of the bar" in told[-1].says


def test_a_broken_survey_takes_no_acceptance(rea: Reviewer) -> None:
    seen = row_of(rea.survey)
    path = rea.survey.path
    lines = path.read_bytes().splitlines(keepends=True)
    path.write_bytes(b"".join(lines[:2] + lines[3:]))
    with pytest.raises((InputError, RecordError)):
        rea.accept(seen)
