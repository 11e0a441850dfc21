"""What the lines of a review come to."""

from typing import Any

import pytest

from roughness.errors import InputError
from roughness.shelf.places import demo_folder
from roughness.trail.folding import fold_reach, fold_survey
from roughness.trail.kinds import read_data
from roughness.trail.lines import encoded, hash_of
from roughness.trail.reading import Trail, read_trail, verified
from roughness.trail.review_state import NOT_REVIEWED, ReviewState
from roughness.trail.state import ReachState
from roughness.trail.telling import describe_line, withdrawable

SHA = "c" * 64
PLACE = {"part": "main channel", "condition": "design flood"}
FACTORS = {"base": {"grade": "gravel"}}
ESTIMATE = {"handbook": "ours", "setting": "channel", "factors": FACTORS}
EVIDENCE = {"file": "evidence/0123456789ab-bar.jpg", "sha256": SHA, "size": 10, "name": "bar.jpg"}
ACCEPT = PLACE | {
    "head": SHA,
    "n": {"low": 0.03, "best": 0.0354, "high": 0.04},
    "spread": dict.fromkeys(("mean", "sd", "p05", "p16", "p50", "p84", "p95"), 0.035),
    "program": "1",
    "handbook": "ours",
    "handbook_sha256": SHA,
    "condition_line": None,
}


class Writing:
    """A trail in the making; each line has its own second."""

    def __init__(self) -> None:
        self.raws: list[bytes] = []
        self.say("begin", {"format": 1, "survey": "ab" * 16, "reach": "mill weir"})

    def say(self, kind: str, data: dict[str, Any], by: str = "Ann", *after: str) -> str:
        prev = tuple(sorted(after)) or ((hash_of(self.raws[-1]),) if self.raws else ())
        at = f"2026-06-03T10:00:{len(self.raws):02}+02:00"
        self.raws.append(encoded(prev, at, by, kind, data))
        return hash_of(self.raws[-1])

    def choose(self, grade: str = "gravel") -> str:
        choice = {"factor": "base", "choice": {"grade": grade}, "handbook": "ours"}
        return self.say("choose", PLACE | choice | {"handbook_sha256": SHA})

    def ask(self, text: str = "why gravel?", **more: Any) -> str:
        return self.say("question", PLACE | {"text": text} | more, "Rea")

    @property
    def trail(self) -> Trail:
        return verified(b"".join(raw + b"\n" for raw in self.raws), "a.jsonl")

    @property
    def state(self) -> ReachState:
        return fold_reach(self.trail)

    @property
    def review(self) -> ReviewState:
        return self.state.review("Main channel", "design flood")


@pytest.fixture
def writing() -> Writing:
    return Writing()


def test_a_place_nobody_reviewed_has_an_empty_review(writing: Writing) -> None:
    assert writing.review == NOT_REVIEWED
    writing.choose()
    assert not writing.review.questions and writing.review.acceptance is None


def test_a_question_is_open_until_an_answer_names_it(writing: Writing) -> None:
    question = writing.ask(factor="base")
    assert [asked.line.hash for asked in writing.review.open_questions] == [question]
    answer = writing.say("answer", {"question": question, "text": "see the bar"})
    (asked,) = writing.review.questions
    assert not asked.is_open and asked.answers[0].answer.text == "see the bar"
    writing.say("withdraw", {"line": answer})
    assert writing.review.open_questions


def test_a_withdrawn_question_is_gone_and_its_answer_does_no_harm(writing: Writing) -> None:
    question = writing.ask()
    writing.say("answer", {"question": question, "text": "x"})
    writing.say("answer", {"question": "d" * 64, "text": "to nothing"})
    writing.say("withdraw", {"line": question})
    assert writing.review.questions == ()
    assert writing.state.unusable == ()


def test_questions_that_go_on_from_one_another_make_a_thread(writing: Writing) -> None:
    first = writing.ask("one")
    other = writing.ask("another")
    second = writing.ask("two", follows=first)
    writing.ask("three", follows=second)
    texts = [[asked.question.text for asked in thread] for thread in writing.review.threads()]
    assert texts == [["one", "two", "three"], ["another"]]
    assert other


def test_it_is_known_whether_somebody_asked_since_the_last_change(writing: Writing) -> None:
    writing.choose()
    writing.ask()
    assert writing.review.asked_since_change
    writing.choose("cobble")
    assert not writing.review.asked_since_change


def test_the_last_answer_to_the_same_finding_counts(writing: Writing) -> None:
    finding = PLACE | {"rule": "narrow", "says": "the range is narrow", "factor": "base"}
    writing.say("finding-answered", finding | {"text": "it is"})
    writing.say("finding-answered", finding | {"text": "it is, see the samples"})
    answers = writing.review.finding_answers
    assert list(answers) == [("narrow", "base", "the range is narrow")]
    assert answers["narrow", "base", "the range is narrow"].said.text == "it is, see the samples"


def test_withdrawing_an_acceptance_takes_it_away(writing: Writing) -> None:
    line = writing.say("accept", ACCEPT, "Rea")
    acceptance = writing.review.acceptance
    assert acceptance is not None and acceptance.accept.n.best == 0.0354
    undo = writing.say("withdraw", {"line": line}, "Rea")
    assert writing.review.acceptance is None
    writing.say("withdraw", {"line": undo}, "Rea")
    assert writing.review.acceptance is not None


def test_of_an_acceptance_and_a_return_the_later_counts(writing: Writing) -> None:
    writing.say("accept", ACCEPT, "Rea")
    writing.say("return", PLACE | {"reason": "no photo"}, "Rea")
    assert writing.review.acceptance is None
    assert writing.review.standing_return is not None
    writing.say("accept", ACCEPT, "Rea")
    assert writing.review.acceptance is not None
    assert writing.review.standing_return is None


@pytest.mark.parametrize("accepted_first", [True, False])
def test_of_verdicts_that_did_not_see_each_other_the_return_stands(
    writing: Writing, accepted_first: bool
) -> None:
    fork = hash_of(writing.raws[0])
    verdicts: list[tuple[str, dict[str, Any]]] = [
        ("accept", ACCEPT),
        ("return", PLACE | {"reason": "no photo"}),
    ]
    ends = [
        writing.say(kind, data, "Rea", fork)
        for kind, data in (verdicts if accepted_first else verdicts[::-1])
    ]
    writing.say("merge", {}, "merge", *ends)
    assert writing.review.acceptance is None
    assert writing.review.standing_return is not None


def test_a_second_opinion_changes_nothing_and_the_last_of_each_person_counts(
    writing: Writing,
) -> None:
    opinion = PLACE | {"handbook_sha256": SHA, "estimate": ESTIMATE}
    writing.choose("cobble")
    writing.say("opinion", opinion, "Bo")
    writing.say("opinion", opinion | {"note": "looked again"}, " bo ")
    writing.say("opinion", opinion, "Cy")
    assert [one.opinion.note for one in writing.review.opinion_of_each] == ["looked again", None]
    place = writing.state.place(**PLACE)
    assert place is not None and place.choices[None]["base"].choice.grade == "cobble"


def test_a_consensus_replaces_every_choice_as_an_estimate_does(writing: Writing) -> None:
    writing.choose("cobble")
    data = PLACE | {"handbook_sha256": SHA, "estimate": ESTIMATE, "reason": "talked"}
    line = writing.say("consensus", data | {"opinions": [SHA]}, "Ann")
    place = writing.state.place(**PLACE)
    assert place is not None and place.choices[None]["base"].choice.grade == "gravel"
    assert place.choices[None]["base"].line.hash == line
    assert writing.review.consensus is not None


def test_the_same_evidence_again_replaces_what_was_said_of_it(writing: Writing) -> None:
    writing.say("evidence", EVIDENCE)
    writing.say("evidence", EVIDENCE | {"caption": "the bar", "factors": ["base"]})
    other = EVIDENCE | {"sha256": "d" * 64, "position": [7.1, 51.0]}
    line = writing.say("evidence", other)
    filed = writing.state.evidence
    assert [one.evidence.caption for one in filed] == ["the bar", None]
    assert filed[1].evidence.position == (7.1, 51.0)
    writing.say("withdraw", {"line": line})
    assert len(writing.state.evidence) == 1


def test_a_review_does_not_move_the_place_where_the_crew_goes_on(writing: Writing) -> None:
    writing.choose()
    writing.say("question", {"part": "left flood plain", "condition": "low", "text": "?"})
    assert writing.state.last_touched == ("main channel", "design flood")


@pytest.mark.parametrize(
    ("kind", "data"),
    [
        ("question", PLACE | {"text": ""}),
        ("question", PLACE | {"text": "?", "factor": "colour"}),
        ("answer", {"question": "short", "text": "x"}),
        ("accept", ACCEPT | {"same_person": False}),
        ("accept", {k: v for k, v in ACCEPT.items() if k != "condition_line"}),
        ("accept", ACCEPT | {"n": {"low": 1.0}}),
        ("return", PLACE),
        ("consensus", PLACE | {"handbook_sha256": SHA, "estimate": ESTIMATE, "opinions": []}),
        ("evidence", EVIDENCE | {"file": "../0123456789ab-x.jpg"}),
        ("evidence", EVIDENCE | {"file": "evidence/0123456789ab-../x"}),
        ("evidence", EVIDENCE | {"size": -1}),
        ("merge", {"by": "me"}),
    ],
)
def test_what_does_not_fit_its_kind_is_refused(kind: str, data: dict[str, Any]) -> None:
    with pytest.raises(InputError):
        read_data(True, kind, data)


def test_each_kind_of_a_review_is_told_in_a_sentence(writing: Writing) -> None:
    def told(kind: str, data: dict[str, Any]) -> str:
        writing.say(kind, data)
        return describe_line(writing.trail.lines[-1])

    at = "main channel at design flood"
    asked = PLACE | {"text": "why?", "factor": "base"}
    assert told("question", asked) == f"asked about base of {at}: why?"
    assert (
        told("question", PLACE | {"text": "so?", "follows": SHA}) == f"asked again about {at}: so?"
    )
    assert told("answer", {"question": SHA, "text": "so"}) == "answered: so"
    finding = PLACE | {"rule": "narrow", "says": "x", "text": "it is"}
    assert told("finding-answered", finding) == f"answered the finding narrow of {at}: it is"
    accepted = f"accepted {at} with n 0.035 (0.030 to 0.040)"
    assert told("accept", ACCEPT) == accepted
    more = {"overruled": "urgent", "same_person": True}
    assert told("accept", ACCEPT | more) == (
        f"{accepted}, overruling what stood against it: urgent, as the one who estimated it"
    )
    assert told("return", PLACE | {"reason": "photo"}) == f"returned {at}: photo"
    opinion = PLACE | {"handbook_sha256": SHA, "estimate": ESTIMATE}
    assert told("opinion", opinion) == f"second estimate of {at}: base gravel"
    agreed = opinion | {"reason": "both saw it", "opinions": []}
    assert told("consensus", agreed) == f"consensus on {at}: base gravel; because both saw it"
    photo = EVIDENCE | {"caption": "the bar", "factors": ["base", "meander"]}
    assert told("evidence", photo) == "evidence bar.jpg, the bar (for base, meander)"
    assert told("merge", {}) == "two ways of this trail united"
    assert told("return", {}).endswith("does not fit its kind")


def test_a_merge_is_nothing_that_a_person_takes_back(writing: Writing) -> None:
    question = writing.ask()
    writing.say("merge", {}, "Rea")
    line = withdrawable(writing.state, "Rea")
    assert line is not None and line.hash == question


def test_the_survey_may_say_that_one_person_does_both() -> None:
    raws = [encoded((), "2026-06-03T10:00:00Z", "Ann", "begin",
                    {"format": 1, "survey": "ab" * 16, "name": "s"})]  # fmt: skip
    data = {"same_person_may_accept": True}
    raws.append(encoded((hash_of(raws[0]),), "2026-06-03T10:00:00Z", "Ann", "describe", data))
    state = fold_survey(verified(b"".join(raw + b"\n" for raw in raws), "survey.jsonl"))
    assert state.described.same_person_may_accept is True


def test_trails_written_before_reviews_read_as_they_did() -> None:
    files = sorted((demo_folder() / "reaches").glob("*.jsonl"))
    assert files
    for file in files:
        state = fold_reach(read_trail(file))
        assert state.unusable == () and state.unknown == ()
        assert state.places.keys() == state.reviews.keys()
