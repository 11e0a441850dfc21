"""The rule about copies that were united while people had said different things in them."""

from collections.abc import Sequence
from dataclasses import dataclass

from roughness.findings.rule import COMMON_PRACTICE, Finding, RuleInWords
from roughness.findings.wording import starting
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words
from roughness.survey.words import Factor

RULE = RuleInWords(
    key="merge-conflict",
    level="stop",
    meaning="people who had not seen each other's word said different things; both stand",
    source=COMMON_PRACTICE,
)


@dataclass(frozen=True, slots=True)
class Word:
    """What one side says."""

    says: str
    by: str
    at: str
    """RFC 3339."""


def merge_conflict(about: str, factor: Factor | None, words: Sequence[Word]) -> Finding:
    """Return the finding for one conflict.

    Parameters
    ----------
    about : str
        What the sides speak of, in words: ``vegetation of the bed``.
    factor : Factor or None
        The factor that the finding points to.
    words : sequence of Word
        Two or more; the last one is what the state shows until somebody decides.
    """
    told = [f"{word.says} ({word.by}, {_when(word.at)})" for word in words]
    says = (
        f"{starting(about)} was set differently by people who had not seen each other's word:"
        f" {enumerate_words(told)}; {words[-1].says} by {words[-1].by} stands until somebody who"
        " has seen both sets it again."
    )
    return Finding(RULE.level, RULE.key, factor, printable(says))


def _when(at: str) -> str:
    return at[:16].replace("T", " ")
