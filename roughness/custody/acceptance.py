"""What speaks against accepting a value, and which of that a reason may overrule.

A finding that asks and has no answer refuses nothing: it is counted, and the reviewer sees
the count. The one who estimated is nobody to confirm it, unless the survey says that one
person does both; then the acceptance says so for ever.
"""

from collections.abc import Iterator
from dataclasses import dataclass

from roughness.errors import InputError
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.quantities.printing import enumerate_words


@dataclass(frozen=True, kw_only=True)
class Case:
    """A value that somebody is to judge."""

    place: str
    """Reach, part and condition as a sentence names them."""
    complete: bool
    """Whether it has an n."""
    stops: tuple[str, ...] = ()
    """What the findings say that stop it."""
    open_questions: tuple[str, ...] = ()
    unanswered: int = 0
    """How many findings ask something that nobody answered."""
    estimated_by: tuple[str, ...] = ()
    """Everybody whose choice stands in it, or who adopted another value."""
    accepted_by: str | None = None
    """Who accepted it, where that still holds."""
    trail: str | None = None
    """Why its trail, or the survey's own, takes no line; None where it does."""


@dataclass(frozen=True, slots=True)
class Refusal:
    """One thing that speaks against accepting, in a sentence."""

    says: str
    may_be_overruled: bool

    def __str__(self) -> str:
        return self.says


@dataclass(frozen=True, kw_only=True)
class Decision:
    """What an acceptance has to say of itself."""

    overruled: str | None = None
    same_person: bool = False


def may_accept(case: Case, by: str, *, same_person_may: bool = False) -> list[Refusal]:
    """Return what speaks against ``by`` accepting, the weightiest first; nothing: go on.

    Parameters
    ----------
    case : Case
        What is to be accepted.
    by : str
        The reviewer; a claim, compared with others as people would.
    same_person_may : bool
        Whether the survey says that one person estimates and accepts.
    """
    return [*_never(case, by, same_person_may), *_unless_overruled(case)]


def _never(case: Case, by: str, same_person_may: bool) -> Iterator[Refusal]:
    if case.trail:
        yield Refusal(f"{case.trail}; nothing can be accepted before that is settled", False)
    if not case.complete:
        yield Refusal(f"{case.place} has no n yet: a factor is open", False)
    if is_among(by, case.estimated_by) and not same_person_may:
        others = "the survey does not say that one person does both"
        yield Refusal(
            f"{printable(by)} estimated {case.place} and cannot accept it too; {others}", False
        )
    if case.accepted_by and same_name_key(case.accepted_by) == same_name_key(by):
        yield Refusal(f"{printable(by)} accepted {case.place} already, and it still holds", False)


def _unless_overruled(case: Case) -> Iterator[Refusal]:
    for stop in case.stops:
        yield Refusal(f"a finding stops {case.place}: {stop.rstrip('.')}", True)
    for question in case.open_questions:
        asked = printable(question).rstrip(".")
        yield Refusal(f"a question about {case.place} is open: {asked}", True)


def decide(
    case: Case, by: str, *, same_person_may: bool = False, overruling: str | None = None
) -> Decision:
    """Return what the acceptance says of itself.

    Raises
    ------
    InputError
        What speaks against it. A reason in ``overruling`` takes what may be overruled.
    """
    reason = (overruling or "").strip()
    refusals = may_accept(case, by, same_person_may=same_person_may)
    final = [refusal.says for refusal in refusals if not refusal.may_be_overruled]
    other = [refusal.says for refusal in refusals if refusal.may_be_overruled]
    if final:
        raise InputError(enumerate_words(final))
    if other and not reason:
        raise InputError(enumerate_words(other), wanted="answer it, or overrule it with a reason")
    return Decision(
        overruled=reason if other else None, same_person=is_among(by, case.estimated_by)
    )


def is_among(person: str, people: tuple[str, ...]) -> bool:
    """Return whether a person is one of several, names compared as people would."""
    return same_name_key(person) in {same_name_key(one) for one in people}
