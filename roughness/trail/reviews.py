"""The fold over the lines of a review, place by place, and over the evidence of a reach."""

from collections.abc import Mapping
from dataclasses import replace
from typing import Any, Final

from roughness.quantities.foreign_text import same_name_key
from roughness.trail.lines import Line
from roughness.trail.ordering import comes_after
from roughness.trail.review_data import (
    Accept,
    Answer,
    Consensus,
    Evidence,
    FindingAnswered,
    Opinion,
    Question,
    Return,
)
from roughness.trail.review_state import (
    Acceptance,
    Agreed,
    Answered,
    Asked,
    Filed,
    FindingAnswer,
    FindingKey,
    Returned,
    ReviewState,
    SecondOpinion,
)

REVIEW_KINDS: Final = frozenset(
    {"question", "finding-answered", "accept", "return", "opinion", "consensus"}
)
# What an estimate or the value for the model rests on; a question asked before it is past.
CHANGING_KINDS: Final = frozenset({"gate", "choose", "estimate", "consensus", "adopt"})


class _ReviewBeingTold:
    """Takes the lines about the review of one place one by one."""

    def __init__(self) -> None:
        self._questions: dict[str, Asked] = {}
        self._findings: dict[FindingKey, FindingAnswer] = {}
        self._acceptances: list[Acceptance] = []
        self._returns: list[Returned] = []
        self._opinions: list[SecondOpinion] = []
        self._consensus: Agreed | None = None
        self._asked_since_change = False

    def tell(self, line: Line, data: Any) -> None:
        if line.kind in CHANGING_KINDS:
            self._asked_since_change = False
        match data:
            case Question():
                self._questions[line.hash] = Asked(question=data, line=line)
                self._asked_since_change = True
            case FindingAnswered():
                key = data.rule, data.factor, data.says
                self._findings[key] = FindingAnswer(said=data, line=line)
            case Accept():
                self._acceptances.append(Acceptance(accept=data, line=line))
            case Return():
                self._returns.append(Returned(said=data, line=line))
            case Opinion():
                self._opinions.append(SecondOpinion(opinion=data, line=line))
            case Consensus():
                self._consensus = Agreed(consensus=data, line=line)

    def answer(self, line: Line, data: Answer) -> None:
        asked = self._questions[data.question]
        answers = (*asked.answers, Answered(answer=data, line=line))
        self._questions[data.question] = replace(asked, answers=answers)

    def state(self, known: Mapping[str, Line]) -> ReviewState:
        return ReviewState(
            questions=tuple(self._questions.values()),
            finding_answers=dict(self._findings),
            acceptances=tuple(self._acceptances),
            returns=tuple(self._returns),
            opinions=tuple(self._opinions),
            consensus=self._consensus,
            asked_since_change=self._asked_since_change,
            standing_return=self._standing_return(known),
        )

    def _standing_return(self, known: Mapping[str, Line]) -> Returned | None:
        return next(
            (
                returned
                for returned in reversed(self._returns)
                if not any(
                    comes_after(known, accepted.line, returned.line)
                    for accepted in self._acceptances
                )
            ),
            None,
        )


class ReviewsBeingTold:
    """Takes the lines of a reach about its review and evidence; :meth:`states` sums up."""

    def __init__(self) -> None:
        self._places: dict[tuple[str, str], _ReviewBeingTold] = {}
        self._asked_at: dict[str, _ReviewBeingTold] = {}
        self._evidence: dict[str, Filed] = {}

    def tell(self, line: Line, data: Any) -> None:
        """Take in one more line; what is none of a review's affair is passed over."""
        if line.kind in REVIEW_KINDS or line.kind in CHANGING_KINDS:
            key = same_name_key(data.part), same_name_key(data.condition)
            place = self._places.setdefault(key, _ReviewBeingTold())
            place.tell(line, data)
            if isinstance(data, Question):
                self._asked_at[line.hash] = place
        elif isinstance(data, Answer) and data.question in self._asked_at:
            self._asked_at[data.question].answer(line, data)
        elif isinstance(data, Evidence):
            self._evidence[data.sha256] = Filed(evidence=data, line=line)

    def states(self, known: Mapping[str, Line]) -> dict[tuple[str, str], ReviewState]:
        """Return the review of each place; ``known`` are all lines of the trail by hash."""
        return {key: place.state(known) for key, place in self._places.items()}

    @property
    def evidence(self) -> tuple[Filed, ...]:
        """Photos and documents in the order they came, as the last line about each says."""
        return tuple(self._evidence.values())
