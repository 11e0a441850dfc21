"""The head of a page: where, n with its range on the axis of all screens, who, what was decided."""

from typing import Final

from rich.text import Text

from roughness.desk.folder import SurveyFolder
from roughness.desk.rows import Row
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import show_n, show_range
from roughness.reasoning.factor_sentence import capital
from roughness.screens.bars import axis, bar, people_bar
from roughness.screens.reach_list import fitted
from roughness.screens.review_words import verdict, who_estimated

_WORDS: Final = 28


def crumbs(row: Row, at: int, of: int, width: int) -> Text:
    """Return where the page is, its status, and its place among the weak ones."""
    assert row.part and row.condition
    names = ["Review", row.reach.reach, row.part.part, row.condition.condition]
    told = f"{row.status}, {at} of {of}"
    left = " › ".join(printable(name) for name in names)
    return Text.assemble(
        (fitted(left, max(0, width - len(told) - 2)), "bold"), "  ", told, no_wrap=True
    )


def sum_lines(row: Row, width: int) -> Text:
    """Return axis, bar of n and the bar of what people differ by, each with its words."""
    long = max(8, width - _WORDS - 1)
    ticks = Text(f"{axis(long):<{long}} ", style="dim")
    estimate, adopted = row.estimate, row.adopted.n if row.adopted else None
    if estimate is None:
        return Text.assemble(ticks, ("no n yet", "bold"), "\n" + ". " * (long // 2))
    spread, people = estimate.spread, estimate.people
    told = f"n {show_n(estimate.n.best)}  {show_range(estimate.n)}"
    drawn = bar(long, estimate.n, (spread.p05, spread.p95), None, adopted)
    says = f"spread {show_n(spread.p05)} to {show_n(spread.p95)}"
    says = f"◆ {show_n(adopted)} adopted" if adopted is not None else says
    lines = [Text.assemble(ticks, (told, "bold")), Text(f"{drawn} {says}")]
    if people is not None:
        dots = people_bar(long, people.p05, people.p95)
        told = f"people {show_n(people.p05)} to {show_n(people.p95)}"
        lines.append(Text(f"{dots} {told}", style="dim"))
    return Text("\n", no_wrap=True, overflow="crop").join(lines)


def who(survey: SurveyFolder, row: Row) -> Text:
    """Return who estimated, when and on what visit, and below who decided what."""
    decided = verdict(survey, row)
    below = (f"\n{decided}", "bold") if decided else ""
    return Text.assemble(f"{capital(who_estimated(row))}.", below)
