"""The end of a part: n, what weighs most, the reasoning, what would narrow the range."""

from collections.abc import Sequence
from typing import Final

from rich.text import Text
from textual.containers import VerticalScroll
from textual.widgets import Static

from roughness.assessment.estimate import Estimate, FactorEstimate
from roughness.desk.rows import rows_of_reach, with_survey_findings
from roughness.errors import RoughnessError
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_n, show_range, show_share
from roughness.screens.walk_course import Course
from roughness.trail.state import Adopted

MOST_SHOWN: Final = 3
CAUTIONS: Final = (
    "A judgement: calibrate to observed flows, check the sensitivity of the water level; local"
    " codes and a licensed practitioner's review come first. Not for life and limb by itself."
)
_SIGNS: Final = {"stop": "!", "ask": "?", "tell": "·"}
_STYLES: Final = {"stop": "bold", "ask": "", "tell": ""}


class Summary(VerticalScroll, can_focus=False):
    """What the finished part says; scrolls where it is longer than the screen."""

    DEFAULT_CSS = """
    Summary { height: 1fr; }
    Summary > Static { height: auto; }
    """

    def __init__(self, course: Course, id: str | None = None) -> None:  # noqa: A002
        super().__init__(Static("", id="summary-text"), id=id)
        self.course = course
        self.unfolded = False

    def show(self) -> None:
        """Draw it anew."""
        text = Text("\n").join(summary_lines(self.course, self.unfolded))
        self.query_one("#summary-text", Static).update(text)


def summary_lines(course: Course, unfolded: bool) -> list[Text]:
    """Return the summary line by line; findings beyond the first few only when unfolded."""
    try:
        estimate = course.place.estimate()
    except RoughnessError as error:
        return [Text(f"! No estimate: {error}.", style="bold")]
    if estimate is None:
        return [Text("A factor is still open: ⏎ goes to it.", style="bold")]
    lines = [*_numbers(estimate, course)]
    lines += [Text(""), *_narrowing(estimate)]
    lines += [Text(""), *_findings(findings_here(course, estimate), unfolded)]
    lines += [Text(""), Text("Reasoning", style="bold")]
    lines += [Text(sentence) for sentence in estimate.reasoning]
    return lines


def findings_here(course: Course, estimate: Estimate) -> tuple[Finding, ...]:
    """Return what is found here, also beside the neighbouring reaches; worst first."""
    names = [noted.reach for noted in course.survey.state.reaches]
    at = names.index(course.place.reach.reach)
    near = range(max(0, at - 1), min(len(names), at + 2))
    rows = [row for order in near for row in rows_of_reach(course.survey, names[order], order)]
    wanted = course.place.part, course.place.condition
    for row in with_survey_findings(rows):
        if row.order == at and (row.part, row.condition) == wanted:
            return row.findings
    return estimate.findings


def _numbers(estimate: Estimate, course: Course) -> list[Text]:
    spread = estimate.spread
    line = Text.assemble(
        (f"n {show_n(estimate.n.best)}", "bold"),
        f", range {show_range(estimate.n)}; spread of the choices {show_n(spread.p05)} to"
        f" {show_n(spread.p95)}",
    )
    if estimate.people is not None:
        people = estimate.people
        line.append(
            f"; what experienced people differ by ({_memory(people.provenance)})"
            f" {show_n(people.p05)} to {show_n(people.p95)}"
        )
    lines = [line + Text(".")]
    if estimate.segments:
        told = ", ".join(f"{printable(s.name)} {show_n(s.n.best)}" for s in estimate.segments)
        lines.append(Text(f"Told apart: {told}."))
    state = course.place.state
    if state and state.adopted:
        lines.append(_adopted(state.adopted))
    if course.place.unconfirmed:
        names = ", ".join(course.place.unconfirmed)
        lines.append(Text(f"~ Carried over and not confirmed: {names}.", style="bold"))
    return lines


def _memory(provenance: str) -> str:
    return "from memory" if provenance == "memory" else provenance


def _adopted(adopted: Adopted) -> Text:
    reason = printable(adopted.reason)
    return Text(f"◆ Adopted for the model: {show_n(adopted.n)} ({reason}).", style="bold")


def _narrowing(estimate: Estimate) -> list[Text]:
    driver = estimate.driver
    if driver.share_of_variance <= 0:
        return [Text("The range has no width: nothing in it would narrow it.")]
    line = Text(
        f"What would narrow the range most: {_named(driver)}, which makes"
        f" {show_share(driver.share_of_variance)} of its variance. "
    )
    if driver.note:
        line.append(f"Noted: {printable(driver.note)}")
    else:
        line.append(f"No note says yet why it is {driver.grade or 'so'}: n writes one.", "bold")
    return [line]


def _named(factor: FactorEstimate) -> str:
    return (
        f"{factor.factor} of the {printable(factor.segment)}" if factor.segment else factor.factor
    )


def _findings(found: Sequence[Finding], unfolded: bool) -> list[Text]:
    if not found:
        return [Text("No finding.", style="bold")]
    shown = found if unfolded else found[:MOST_SHOWN]
    counts = [
        f"{count} {level}"
        for level in _SIGNS
        if (count := sum(finding.level == level for finding in found))
    ]
    lines = [Text(f"Findings: {', '.join(counts)}", style="bold")]
    lines += [
        Text(
            f"{_SIGNS[f.level]} {f.level}: {printable(f.says)}", style="bold" * (f.level == "stop")
        )
        for f in shown
    ]
    if len(found) > len(shown):
        lines.append(Text(f"  Space: {len(found) - len(shown)} more", style="dim"))
    return lines
