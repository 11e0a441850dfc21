"""Laws of acceptance over generated histories: it holds exactly while what it rests on does."""

import json
import tempfile
from pathlib import Path
from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from roughness.desk.checking import check
from roughness.desk.folder import SurveyFolder
from roughness.desk.history import since_acceptance
from roughness.desk.making import new_survey
from roughness.desk.opinions import blind_file
from roughness.desk.places import Place, place_of
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row, rows
from roughness.survey.choices import (
    BaseChoice,
    Choice,
    MeanderChoice,
    ObstructionChoice,
    VegetationChoice,
)
from roughness.survey.stream import FlowCondition, Part, Reach

FLOOD, CHANNEL = "design flood", "main channel"
FIRST: dict[str, Choice] = {
    "base": BaseChoice(grade="gravel"),
    "irregularity": Choice(grade="minor"),
    "variation": Choice(grade="gradual"),
    "obstruction": ObstructionChoice(grade="negligible"),
    "vegetation": VegetationChoice(grade="small"),
    "meander": MeanderChoice(grade="minor"),
}

choices = st.one_of(
    st.builds(BaseChoice, grade=st.sampled_from(["gravel", "cobble"])),
    st.builds(Choice, grade=st.sampled_from(["minor", "moderate"])),
    st.builds(
        VegetationChoice,
        grade=st.sampled_from(["small", "medium"]),
        where=st.sampled_from([None, "banks"]),
        note=st.sampled_from([None, "seen"]),
    ),
    st.builds(MeanderChoice, grade=st.sampled_from(["minor", "severe"])),
)
acts = st.one_of(
    st.tuples(st.just("choose"), choices),
    st.tuples(st.sampled_from(["ask", "visit", "heads", "withdraw"]), st.none()),
    st.tuples(st.just("tolerance"), st.sampled_from([10.0, 30.0])),
)


def here(survey: SurveyFolder) -> Place:
    return place_of(survey, "Weir", CHANNEL, FLOOD)


def row(survey: SurveyFolder) -> Row:
    return rows(survey)[0]


def started(folder: Path) -> Recorder:
    pen = Recorder(new_survey(folder / "s", "Ada", reaches=[Reach(reach="Weir")]), "Ada")
    pen.add_condition(FlowCondition(condition=FLOOD))
    pen.add_part("Weir", Part(part=CHANNEL, setting="channel"))
    for factor, choice in FIRST.items():
        pen.choose(here(pen.survey), factor, choice)  # type: ignore[arg-type]
    return pen


def do(pen: Recorder, act: str, what: Any) -> None:
    if act == "choose":
        factor = {
            BaseChoice: "base",
            Choice: "irregularity",
            VegetationChoice: "vegetation",
            MeanderChoice: "meander",
        }[type(what)]
        pen.choose(here(pen.survey), factor, what)  # type: ignore[arg-type]
    elif act == "ask":
        Reviewer(Recorder(pen.survey, "Rea")).ask(here(pen.survey), "why?")
    elif act == "tolerance":
        pen.add_condition(FlowCondition(condition=FLOOD, tolerance_cm=what))
    elif act == "heads":
        pen.note_heads("report")
    elif act == "visit":
        pen.say_of_reach("Weir", "visit", {"visit": "again"})
    elif act == "withdraw":
        last = pen.survey.reach_state("Weir").effective[-1]
        if last.kind != "accept":
            pen.withdraw("Weir", last)


def basis(survey: SurveyFolder) -> object:
    """What an acceptance rests on, told independently of how the tool compares it."""
    place = here(survey)
    told: dict[str, Any] = {}
    for factor in FIRST:
        standing = place.at(None, factor)  # type: ignore[arg-type]
        choice = standing.choice if standing else None
        told[factor] = choice and {k: v for k, v in vars(choice).items() if k != "note"}
    return told, survey.state.condition(FLOOD)


@settings(max_examples=40, deadline=None)
@given(st.lists(acts, max_size=6))
def test_an_acceptance_holds_exactly_while_what_it_rests_on_stands(
    history: list[tuple[str, Any]],
) -> None:
    with tempfile.TemporaryDirectory() as folder:
        pen = started(Path(folder))
        Reviewer(Recorder(pen.survey, "Rea")).accept(row(pen.survey), overruling="x")
        accepted = basis(pen.survey)
        for act, what in history:
            do(pen, act, what)
            same = basis(pen.survey) == accepted
            status = row(pen.survey).status
            assert status == ("accepted" if same else "changed since acceptance")
            told = since_acceptance(pen.survey, here(pen.survey))
            assert any(change.weighs for change in told) != same
        assert check(SurveyFolder(pen.survey.folder)).intact


@settings(max_examples=40, deadline=None)
@given(st.lists(acts, max_size=5))
def test_a_blind_file_does_not_change_with_what_the_first_chooses(
    history: list[tuple[str, Any]],
) -> None:
    with tempfile.TemporaryDirectory() as folder:
        pen = started(Path(folder))
        before = blind_file(pen.survey, here(pen.survey))
        for act, what in history:
            if act in ("choose", "ask", "heads"):
                do(pen, act, what)
        after = json.loads(blind_file(pen.survey, here(pen.survey)))
        assert after == json.loads(before)
