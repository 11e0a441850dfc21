"""What makes a value weak, where it stands and who said so, in words and sentences."""

from collections.abc import Iterator
from typing import Final

from roughness.custody.status import ACCEPTED, CHANGED, RETURNED
from roughness.desk.folder import SurveyFolder
from roughness.desk.history import accepted_in_words, shown_time
from roughness.desk.rows import Row
from roughness.desk.weakness import Weakness
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, rounded, show_share

SIGNS: Final = {"stop": "!", "ask": "?", "tell": "·"}
_LEVELS: Final = ("stop", "ask", "tell")


def open_counts(row: Row) -> str:
    """Return the open findings and questions in few words: ``! 1 stop, 2 ask``."""
    counts = [(sum(f.level == level for f in row.open), level) for level in _LEVELS[:2]]
    told = [f"{count} {level}" for count, level in counts if count]
    if asked := len(row.review.open_questions):
        told.append(f"{asked} asked")
    if row.place is not None and row.place.missing:
        told.append(f"{len(row.place.missing)} to choose")
    if row.part is None:
        told.append("no part yet")
    sign = "!" if counts[0][0] else "?" if told else " "
    return f"{sign} {', '.join(told)}".strip()


def why_weak(row: Row, weak: Weakness) -> str:
    """Return the parts of the score as sentences."""
    return " ".join(f"{sentence}." for sentence in _parts(row, weak))


def _parts(row: Row, weak: Weakness) -> Iterator[str]:
    if row.place is None and row.part is None:
        yield "No part yet, so nothing was judged"
    elif row.place is not None and row.place.missing:
        open_ = [_named(zone, factor) for zone, factor in row.place.missing]
        yield f"Nobody chose {enumerate_words(open_)}"
    if row.estimate is not None:
        yield f"{show_share(weak.unbacked)} of the variance of n has neither note nor photo"
        if weak.width:
            times = rounded(weak.width, 2)
            yield f"Spread {times} times what experienced people differ by (from memory)"
    if weak.disagreement:
        times = rounded(weak.disagreement, 1)
        yield f"A second opinion is {times} times that away"
    yield f"Open findings: {counted(row.open)}" if row.open else "No open finding"


def _named(segment: str | None, factor: str) -> str:
    return f"{factor} of the {printable(segment)}" if segment else factor


def counted(findings: tuple[Finding, ...]) -> str:
    """Return findings by level: ``1 stop, 2 ask``."""
    counts = [(sum(f.level == level for f in findings), level) for level in _LEVELS]
    return ", ".join(f"{count} {level}" for count, level in counts if count) or "none"


def who_estimated(row: Row) -> str:
    """Say who judged last and when, and on which visit in which growth."""
    if row.estimated_by is None:
        told = "nobody judged it yet"
    else:
        told = f"estimated by {printable(row.estimated_by)}"
        told += f", {day(row.estimated_at)}" if row.estimated_at else ""
    visit = row.visit
    if visit is None:
        return f"{told}; no visit noted"
    facts = [printable(fact) for fact in (visit.on, visit.growth) if fact]
    return f"{told}; visit {printable(visit.visit)}" + (f" ({', '.join(facts)})" if facts else "")


def day(at: str) -> str:
    """Return the date of a line alone."""
    return shown_time(at).partition(" ")[0]


def verdict(survey: SurveyFolder, row: Row) -> str:
    """Say who accepted or returned a row and with what words; empty where nobody did."""
    if row.place is None:
        return ""
    if row.status == RETURNED and row.review.standing_return:
        said, line = row.review.standing_return.said, row.review.standing_return.line
        return f"Returned by {printable(line.by)}, {day(line.at)}: {printable(said.reason)}"
    accepted = accepted_in_words(survey, row.place) or ""
    accepted = accepted[:1].upper() + accepted[1:]
    if row.status == CHANGED:
        return f"Changed since it was accepted (d says how). {accepted}"
    return accepted if row.status == ACCEPTED else ""
