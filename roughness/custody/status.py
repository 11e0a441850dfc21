"""The one word that says where a value stands between the crew and the model."""

from dataclasses import dataclass
from typing import Final, Literal

Status = Literal[
    "unvisited",
    "incomplete",
    "estimated",
    "in review",
    "returned",
    "accepted",
    "changed since acceptance",
]
UNVISITED: Final = "unvisited"
INCOMPLETE: Final = "incomplete"
ESTIMATED: Final = "estimated"
IN_REVIEW: Final = "in review"
RETURNED: Final = "returned"
ACCEPTED: Final = "accepted"
CHANGED: Final = "changed since acceptance"
STATUSES: Final[tuple[Status, ...]] = (
    UNVISITED,
    INCOMPLETE,
    ESTIMATED,
    IN_REVIEW,
    RETURNED,
    ACCEPTED,
    CHANGED,
)


@dataclass(frozen=True, kw_only=True)
class Standing:
    """What is known of a value, as far as its status hangs on it."""

    visited: bool
    """Whether a visit or a choice is there."""
    complete: bool
    """Whether every factor was answered and n can be computed."""
    accepted: bool = False
    """Whether somebody accepted it, and nobody returned it after or beside that."""
    unchanged_since_acceptance: bool = False
    """Whether value, range, grades, criteria and condition are as they were accepted."""
    returned: bool = False
    """Whether a return stands."""
    unchanged_since_return: bool = False
    """Whether nothing was done about the value since it was returned."""
    in_question: bool = False
    """Whether a question is open, or was asked since the last change."""


def status_of(value: Standing) -> Status:
    """Return the status.

    An acceptance that no longer holds is said before anything else, since somebody may rely
    on it; a return is past when the value was changed after it.
    """
    if value.accepted:
        holds = value.complete and value.unchanged_since_acceptance
        return ACCEPTED if holds else CHANGED
    if not value.complete:
        return INCOMPLETE if value.visited else UNVISITED
    if value.returned and value.unchanged_since_return:
        return RETURNED
    return IN_REVIEW if value.in_question else ESTIMATED
