"""The n table of a survey as text: what ``list`` and ``demo`` print."""

from collections import Counter
from collections.abc import Iterator, Sequence
from itertools import groupby

from roughness.commands.lengths import show_stretch
from roughness.commands.plain_tables import table, wrapped
from roughness.desk.folder import SurveyFolder
from roughness.desk.rows import Row
from roughness.findings import Finding
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_n

_HEADER = ["part", "condition", "n", "low-high", "status", "findings"]


def survey_lines(
    survey: SurveyFolder, found: Sequence[Row], units: str | None = None
) -> Iterator[str]:
    """Tell every reach with its parts, n, range, status and findings, in 80 columns."""
    described = survey.state.described
    title = printable(survey.state.name)
    yield from wrapped(f"{title}, {printable(described.stream)}" if described.stream else title)
    if not found:
        yield "no reach yet"
        return
    aligned = iter(table([_HEADER, *map(_cells, found)], give=(0, 1, 4, 5), indent=2))
    yield next(aligned)
    for _, group in groupby(found, key=lambda row: row.order):
        rows_of_reach = list(group)
        reach = rows_of_reach[0].reach
        yield from wrapped(show_stretch(reach, described.length_unit, units), rest="  ")
        for row in rows_of_reach:
            yield next(aligned)
            if row.adopted:
                text = f"adopted {show_n(row.adopted.n)}: {printable(row.adopted.reason)}"
                yield from wrapped(text, "    ", "    ")


def _cells(row: Row) -> list[str]:
    n = row.estimate.n if row.estimate else None
    return [
        printable(row.part.part) if row.part else "no part yet",
        printable(row.condition.condition) if row.condition else "",
        show_n(n.best) if n else "-",
        f"{show_n(n.low)}-{show_n(n.high)}" if n else "",
        row.status,
        count_in_words(row.open),
    ]


def count_in_words(findings: Sequence[Finding]) -> str:
    """Count findings by level: ``1 stop 2 ask 3 tell``."""
    counts = Counter(finding.level for finding in findings)
    return " ".join(
        f"{counts[level]} {level}" for level in ("stop", "ask", "tell") if counts[level]
    )
