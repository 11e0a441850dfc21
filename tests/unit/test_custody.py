"""Who may accept what, and the word for where a value stands."""

from dataclasses import replace
from itertools import product

import pytest

from roughness.custody import STATUSES, Case, Standing, decide, may_accept, status_of
from roughness.errors import InputError

CLEAR = Case(place="main channel of Weir at flood", complete=True, estimated_by=("Ada",))


def test_another_person_may_accept_what_nothing_speaks_against() -> None:
    assert may_accept(CLEAR, "Rea") == []
    decision = decide(CLEAR, "Rea")
    assert (decision.overruled, decision.same_person) == (None, False)


@pytest.mark.parametrize("name", ["Ada", " ada ", "ADA", "A\u200bda".replace("\u200b", "")])
def test_the_one_who_estimated_cannot_accept_even_with_a_reason(name: str) -> None:
    (refusal,) = may_accept(CLEAR, name)
    assert "estimated" in refusal.says and not refusal.may_be_overruled
    with pytest.raises(InputError, match="does not say that one person does both"):
        decide(CLEAR, name, overruling="nobody else is here")


def test_where_the_survey_lets_one_person_do_both_the_acceptance_says_so() -> None:
    assert decide(CLEAR, "ada", same_person_may=True).same_person
    assert not decide(CLEAR, "Rea", same_person_may=True).same_person


def test_letters_that_look_the_same_are_the_same_person() -> None:
    case = replace(CLEAR, estimated_by=("Jose\u0301",))
    assert may_accept(case, "jos\u00e9")


@pytest.mark.parametrize(
    ("change", "word"),
    [
        ({"stops": ("no note",)}, "stops"),
        ({"open_questions": ("why gravel?",)}, "why gravel"),
    ],
)
def test_a_stop_and_an_open_question_are_overruled_only_with_a_reason(
    change: dict[str, tuple[str, ...]], word: str
) -> None:
    case = replace(CLEAR, **change)  # type: ignore[arg-type]
    for reason in (None, "", "  "):
        with pytest.raises(InputError, match=word):
            decide(case, "Rea", overruling=reason)
    assert decide(case, "Rea", overruling=" known ").overruled == "known"


def test_a_reason_where_nothing_is_overruled_is_not_kept() -> None:
    assert decide(CLEAR, "Rea", overruling="just so").overruled is None


def test_findings_that_ask_refuse_nothing() -> None:
    assert may_accept(replace(CLEAR, unanswered=5), "Rea") == []


@pytest.mark.parametrize(
    ("change", "word"),
    [
        ({"complete": False}, "no n yet"),
        ({"trail": "the trail a is to be merged"}, "to be merged"),
        ({"accepted_by": "rea"}, "already"),
    ],
)
def test_no_reason_overrules_what_cannot_be_accepted(change: dict[str, object], word: str) -> None:
    case = replace(CLEAR, **change)  # type: ignore[arg-type]
    with pytest.raises(InputError, match=word):
        decide(case, "Rea", overruling="urgent")


def test_another_reviewer_may_accept_it_too() -> None:
    assert may_accept(replace(CLEAR, accepted_by="Bo"), "Rea") == []


def test_a_name_cannot_bring_signs_into_a_sentence() -> None:
    case = replace(CLEAR, open_questions=("a\x1b[2Jb",))
    assert "\x1b" not in str(may_accept(case, "Rea")[0])


@pytest.mark.parametrize(
    ("words", "status"),
    [
        ({}, "unvisited"),
        ({"visited": True}, "incomplete"),
        ({"complete": True}, "estimated"),
        ({"complete": True, "in_question": True}, "in review"),
        ({"complete": True, "returned": True, "unchanged_since_return": True}, "returned"),
        ({"complete": True, "returned": True}, "estimated"),
        ({"complete": True, "returned": True, "in_question": True}, "in review"),
        ({"complete": True, "accepted": True, "unchanged_since_acceptance": True}, "accepted"),
        ({"complete": True, "accepted": True}, "changed since acceptance"),
        ({"accepted": True, "unchanged_since_acceptance": True}, "changed since acceptance"),
    ],
)
def test_the_status_says_where_a_value_stands(words: dict[str, bool], status: str) -> None:
    assert status_of(Standing(**({"visited": False, "complete": False} | words))) == status


def test_nothing_is_accepted_that_was_not_accepted_or_does_not_hold() -> None:
    names = list(Standing.__dataclass_fields__)
    for values in product([False, True], repeat=len(names)):
        standing = Standing(**dict(zip(names, values, strict=True)))
        status = status_of(standing)
        assert status in STATUSES
        holds = standing.accepted and standing.complete and standing.unchanged_since_acceptance
        assert (status == "accepted") == holds
