"""The photos and documents of a reach as lists show them, and whether they are still there."""

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

from roughness.desk.folder import SurveyFolder
from roughness.errors import RoughnessError
from roughness.evidence.holding import Held, held, unlisted
from roughness.evidence.naming import PHOTO_ENDINGS, ending_of
from roughness.quantities.foreign_text import printable, same_name_key
from roughness.survey.words import Factor
from roughness.trail.lines import Line
from roughness.trail.reading import Fault
from roughness.trail.review_data import Evidence


@dataclass(frozen=True, kw_only=True)
class Item:
    """A photo or document of a reach."""

    evidence: Evidence
    line: Line
    held: Held
    """``ok``, ``missing``, or ``changed`` where it is not what was attached."""
    path: Path

    @property
    def may_be_shown(self) -> bool:
        """Whether it is there as it came, and a picture by its ending."""
        return self.held == "ok" and ending_of(self.evidence.file) in PHOTO_ENDINGS

    def supports(self, part: str, condition: str, factor: Factor | None = None) -> bool:
        """Whether it is about a part under a condition, and about a factor of it.

        What names no part, condition or factor is about all of them.
        """
        return is_about(self.evidence, part, condition, factor)


def is_about(evidence: Evidence, part: str, condition: str, factor: Factor | None = None) -> bool:
    """Whether a piece of evidence is about a place and a factor; see :meth:`Item.supports`."""
    there = [
        (evidence.part, part),
        (evidence.condition, condition),
    ]
    return all(
        named is None or same_name_key(named) == same_name_key(here) for named, here in there
    ) and (factor is None or not evidence.factors or factor in evidence.factors)


def evidence_of(survey: SurveyFolder, reach: str) -> tuple[Item, ...]:
    """Return the photos and documents of a reach, in the order they came."""
    return tuple(
        Item(
            evidence=filed.evidence,
            line=filed.line,
            held=held(
                survey.folder, filed.evidence.file, filed.evidence.sha256, filed.evidence.size
            ),
            path=survey.folder / filed.evidence.file,
        )
        for filed in survey.reach_state(reach).evidence
    )


def evidence_faults(survey: SurveyFolder) -> Iterator[Fault]:
    """Yield what is missing or is not what was attached; line 0, since a file is meant."""
    says = {
        "missing": "the file is missing",
        "changed": "it is not the file that was attached (its bytes differ)",
    }
    for noted in survey.state.reaches:
        try:
            items = evidence_of(survey, noted.reach)
        except RoughnessError:
            continue  # the trail itself is a fault already
        for item in items:
            if item.held != "ok":
                what = f"{says[item.held]}; it belongs to {printable(noted.reach)}"
                yield Fault(item.evidence.file, 0, what)


def unlisted_evidence(survey: SurveyFolder) -> tuple[str, ...]:
    """Return the files in the evidence folder that no trail names, not even a withdrawn line.

    Nothing is told while a trail cannot be read: it may name them.
    """
    listed: set[str] = set()
    for noted in survey.state.reaches:
        try:
            trail = survey.reach_trail(noted.reach)
        except RoughnessError:
            return ()
        if trail.broken:
            return ()
        listed |= {str(line.data.get("file")) for line in trail.lines if line.kind == "evidence"}
    return unlisted(survey.folder, listed)
