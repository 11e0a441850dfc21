"""The sentences of the survey screen: its head, and what is known of the selected line."""

from collections.abc import Sequence
from typing import Final

from rich.cells import cell_len
from rich.text import Text

from roughness.desk.folder import SurveyFolder
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import rounded, show_n, show_range
from roughness.screens.reach_list import fitted
from roughness.screens.survey_lines import Counts, SurveyLine

MOST_FINDINGS: Final = 3
_LEVEL_WORDS: Final = {"stop": "! stop", "ask": "? ask", "tell": "  tell"}


def title_line(survey: SurveyFolder, condition: str | None, several: bool, width: int) -> Text:
    """Return the survey's name on the left and the flow condition on the right."""
    state = survey.state
    stream = state.described.stream
    name = printable(state.name)
    if stream and stream.split()[0] not in state.name:
        name = f"{printable(stream)}: {name}"
    told = f"{printable(condition)}" if condition else "no flow condition yet"
    right = f"{told} (f: another)" if several else told
    right = fitted(right, min(cell_len(right), width * 3 // 5)).rstrip()
    left = fitted(name, max(0, width - cell_len(right) - 2))
    return Text.assemble((left, "bold"), "  ", right, no_wrap=True)


def counts_line(counts: Counts, progress: str) -> Text:
    """Return how far the survey is, and what is going on."""
    reaches = "1 reach" if counts.reaches == 1 else f"{counts.reaches} reaches"
    told = f"{reaches}   {counts.estimated} estimated   {counts.to_do} to do"
    return Text(f"{told}   {progress}", no_wrap=True, overflow="ellipsis")


def detail_text(line: SurveyLine | None, lines: int, width: int) -> Text:
    """Return what is known of a line: n, range, adopted n, the findings that weigh most.

    Parameters
    ----------
    line : SurveyLine or None
        The selected one.
    lines : int
        How many lines of the screen there are for it.
    width : int
        Cells of a line.
    """
    if line is None:
        return Text("Nothing to show here. + adds a reach.")
    first = _number_sentence(line, width)
    told = [first]
    if line.row.adopted is not None:
        reason = f"adopted because: {printable(line.row.adopted.reason)}"
        told.append(fitted(reason, width).rstrip())
    told += _finding_lines(line.row.findings, lines - len(told), width)
    return Text("\n".join(told), no_wrap=True)


def _number_sentence(line: SurveyLine, width: int) -> str:
    row = line.row
    if row.estimate is None:
        told = _what_to_do(line)
    else:
        n, spread = row.estimate.n, row.estimate.spread
        told = f"n {show_n(n.best)} ({show_range(n)})"
        if row.adopted is not None:
            told = f"adopted {show_n(row.adopted.n)}; the estimate is {told}"
        else:
            told += f", spread of choices {show_n(spread.p05)} to {show_n(spread.p95)}"
    name = printable(row.reach.reach)
    name = f"{name}, {line.part_word}" if row.part else name
    # The names stand in the list too: the numbers are what must not be cut.
    room = max(12, width - cell_len(told) - 2)
    name = fitted(name, min(room, cell_len(name))).replace(",… ", "…")
    return fitted(f"{name}: {told}", width).rstrip()


def _what_to_do(line: SurveyLine) -> str:
    if not line.read:
        return "not read yet"
    if line.row.part is None:
        return "no part yet; Enter picks one and starts"
    if line.row.condition is None:
        return line.apart
    missing = line.row.place.missing if line.row.place else ()
    if line.row.place is None or line.row.place.state is None:
        return "nothing chosen yet; Enter starts"
    return f"{len(missing)} of {len(line.row.place.questions)} choices open; Enter goes on"


def _finding_lines(findings: Sequence[Finding], room: int, width: int) -> list[str]:
    """Give each finding one line, and what is left over to the ones that weigh most."""
    heaviest = findings[:MOST_FINDINGS]
    more = len(findings) - len(heaviest)
    told = [f"{_LEVEL_WORDS[found.level]}: {found.says}" for found in heaviest]
    if more and told:
        told[-1] += f" (and {more} more)"
    needed = [_wrapped(sentence, width) for sentence in told]
    spare = room - len(needed)
    shown: list[str] = []
    for lines in needed:
        given = min(len(lines), 1 + max(0, spare))
        spare -= given - 1
        cut = len(lines) > given
        shown += lines[: given - 1]
        shown.append(
            fitted(" ".join(lines[given - 1 :]), width).rstrip() if cut else lines[given - 1]
        )
    return shown


def _wrapped(sentence: str, width: int) -> list[str]:
    lines = [""]
    for word in printable(sentence).split():
        if lines[-1] and cell_len(lines[-1]) + 1 + cell_len(word) > width:
            lines.append("      ")
        lines[-1] += f" {word}" if lines[-1].strip() else word
    return lines


def progress_of(read: int, of: int) -> str:
    """Return how much of a long survey was read."""
    share = rounded(100 * read / of, 0) if of else "100"
    return f"reading {read} of {of} ({share} %), Esc stops"
