"""What the lines of a review come to for one part under one flow condition."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from roughness.quantities.foreign_text import same_name_key
from roughness.trail.lines import Line
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

FindingKey = tuple[str, str | None, str]
"""Rule, factor and what the finding says: the same three again are the same finding."""


@dataclass(frozen=True, kw_only=True)
class Answered:
    """An answer and the line that gave it."""

    answer: Answer
    line: Line


@dataclass(frozen=True, kw_only=True)
class Asked:
    """A question with what was answered so far."""

    question: Question
    line: Line
    answers: tuple[Answered, ...] = ()

    @property
    def is_open(self) -> bool:
        """Whether nobody answered it."""
        return not self.answers


@dataclass(frozen=True, kw_only=True)
class FindingAnswer:
    """What was said to a finding, and by which line."""

    said: FindingAnswered
    line: Line


@dataclass(frozen=True, kw_only=True)
class Acceptance:
    """A reviewer's acceptance and its line; whether it stands is judged elsewhere."""

    accept: Accept
    line: Line


@dataclass(frozen=True, kw_only=True)
class Returned:
    """A reviewer's return and its line; ``line.prev`` is what the reviewer had seen."""

    said: Return
    line: Line


@dataclass(frozen=True, kw_only=True)
class SecondOpinion:
    """A blind second estimate and its line."""

    opinion: Opinion
    line: Line


@dataclass(frozen=True, kw_only=True)
class Agreed:
    """A consensus and its line."""

    consensus: Consensus
    line: Line


@dataclass(frozen=True, kw_only=True)
class Filed:
    """A photo or document as the last line about it says, and that line."""

    evidence: Evidence
    line: Line


@dataclass(frozen=True, kw_only=True)
class ReviewState:
    """The review of one part under one flow condition. Withdrawn lines are not here."""

    questions: tuple[Asked, ...] = ()
    """In the order they were asked."""
    finding_answers: Mapping[FindingKey, FindingAnswer] = field(default_factory=dict)
    acceptances: tuple[Acceptance, ...] = ()
    """Every one that was not withdrawn, the latest last."""
    returns: tuple[Returned, ...] = ()
    opinions: tuple[SecondOpinion, ...] = ()
    consensus: Agreed | None = None
    """The last one; later choices may have gone on from it."""
    asked_since_change: bool = False
    """Whether a question came after the last line that the estimate rests on."""
    standing_return: Returned | None = None
    """The last return that no acceptance came after. Where two people did not see each
    other's verdict the return stands, whatever their clocks say."""

    @property
    def open_questions(self) -> tuple[Asked, ...]:
        """The questions that nobody answered."""
        return tuple(asked for asked in self.questions if asked.is_open)

    @property
    def acceptance(self) -> Acceptance | None:
        """The last acceptance, unless a return stands against it."""
        return self.acceptances[-1] if self.acceptances and not self.standing_return else None

    @property
    def opinion_of_each(self) -> tuple[SecondOpinion, ...]:
        """The last opinion of each person, in the order of their first one."""
        latest = {same_name_key(one.line.by): one for one in self.opinions}
        return tuple(latest.values())

    def threads(self) -> tuple[tuple[Asked, ...], ...]:
        """Return the questions by thread: each with those that go on from it, in order."""
        threads: list[list[Asked]] = []
        of: dict[str, list[Asked]] = {}
        for asked in self.questions:
            thread = of.get(asked.question.follows or "")
            if thread is None:
                thread = []
                threads.append(thread)
            thread.append(asked)
            of[asked.line.hash] = thread
        return tuple(tuple(thread) for thread in threads)


NOT_REVIEWED = ReviewState()
