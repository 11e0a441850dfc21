"""First and second estimates side by side, and how far people agree over a survey."""

import math
from collections.abc import Iterator, Sequence
from itertools import zip_longest
from typing import ClassVar, Final

from rich.text import Text
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.screen import Screen
from textual.widgets import Static

from roughness.assessment.estimate import Estimate, FactorEstimate
from roughness.desk.agreement import Agreement, Beside
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import rounded, show_n, show_range, show_value
from roughness.reasoning.factor_sentence import capital
from roughness.screens.bars import axis, bar
from roughness.screens.key_line import KeyLine
from roughness.screens.reach_list import fitted
from roughness.screens.review_ledger import named
from roughness.screens.review_words import day
from roughness.screens.walk_table import figure
from roughness.survey.words import FACTORS, MULTIPLIER, Factor

_FACTOR, _DIFFERENCE = 18, 9
# Below this a grade and its range take a line each.
_ROOMY: Final = 40


class BesideScreen(Screen[None]):
    """Each second opinion beside the first, factor by factor.

    Parameters
    ----------
    place : str
        Reach, part and flow condition.
    found : sequence of Beside
        One for each person.
    """

    CSS_PATH = "review.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape,o,enter", "back", "back", key_display="Esc"),
        Binding("down", "scroll(1)", "more", key_display="↑↓"),
        Binding("up", "scroll(-1)", "less", show=False),
        Binding("pagedown,space", "scroll(10)", "next page", show=False),
        Binding("pageup", "scroll(-10)", "previous page", show=False),
    ]

    def __init__(self, place: str, found: Sequence[Beside]) -> None:
        super().__init__()
        self._place, self._found = place, found

    def compose(self) -> ComposeResult:
        """One column that scrolls."""
        yield Static(Text(f"Side by side › {self._place}", style="bold", no_wrap=True))
        with VerticalScroll(id="page", can_focus=False):
            yield Static("", id="beside")
        yield KeyLine()

    def on_resize(self) -> None:
        """Draw for the width there is."""
        width = max(40, self.size.width - 2)
        told = [line for one in self._found for line in beside_lines(one, width)]
        self.query_one("#beside", Static).update(Text("\n").join(told))

    def action_back(self) -> None:
        """Leave."""
        self.dismiss()

    def action_scroll(self, by: int) -> None:
        """Move through the page."""
        self.query_one("#page").scroll_relative(y=by, animate=False)


def beside_lines(one: Beside, width: int) -> Iterator[Text]:
    """Yield the comparison of one second opinion with the first, line by line."""
    first, second = one.first.n, one.second.n
    by = printable(one.by)
    long = width - 34
    yield Text("")
    yield Text(f"{axis(long)}", style="dim")
    for name, n in (("first", first), (by, second)):
        yield Text(f"{bar(long, n)} {fitted(name, 18)} {show_n(n.best)}", no_wrap=True)
    share = rounded(100 * math.expm1(one.log_ratio), 0)
    yield Text(
        f"First {show_n(first.best)} ({show_range(first)}); {by}, {day(one.at)},"
        f" {show_n(second.best)} ({show_range(second)}): {_signed(one.difference)}, {share} %.",
        style="bold",
    )
    if one.note:
        yield Text(f"{by} notes: {printable(one.note)}")
    if not one.factors:
        yield Text("They told bed and banks apart in different ways: only n can be subtracted.")
        yield from _each_as_it_is(one, by, width)
        return
    yield from _table(one, by, width)


def _table(one: Beside, by: str, width: int) -> Iterator[Text]:
    half = (width - _FACTOR - _DIFFERENCE - 4) // 2
    yield _line(("  factor", "first", by, "n differs"), half, style="dim")
    for factor in one.factors:
        mark = " " if factor.same_grade else "≠"
        name = f"{mark} {named((factor.segment, factor.factor))}"
        sides = [_cells(entry, half) for entry in (factor.first, factor.second)]
        rows = zip(*sides, strict=True)
        for at, (first, second) in enumerate(rows):
            difference = "" if at else _signed(factor.difference)
            yield _line(("" if at else name, first, second, difference), half)
    yield Text(
        "≠ another grade. 'n differs': what n would change by if this one factor were as the"
        " second has it; with the multiplier they need not add up.",
        style="dim",
    )


def _line(cells: tuple[str, str, str, str], half: int, style: str = "") -> Text:
    name, first, second, last = cells
    told = f"{fitted(name, _FACTOR)} {fitted(first, half)} {fitted(second, half)} {last}"
    return Text(told, style=style, no_wrap=True, overflow="crop")


def _each_as_it_is(one: Beside, by: str, width: int) -> Iterator[Text]:
    """Yield what both chose for each factor, where their zones do not match."""
    half = (width - _FACTOR - 3) // 2
    yield _line(("factor", "first", by, ""), half, style="dim")
    for factor in FACTORS:
        sides = [list(_zones(estimate, factor, half)) for estimate in (one.first, one.second)]
        for at, (first, second) in enumerate(zip_longest(*sides, fillvalue="")):
            yield _line(("" if at else factor, first, second, ""), half)


def _zones(estimate: Estimate, factor: Factor, half: int) -> Iterator[str]:
    entries = [entry for entry in estimate.factors if entry.factor == factor]
    if len({_grade(e) + _numbers(e) for e in entries}) == 1:
        yield from _cells(entries[0], half)
        return
    for entry in entries:
        first, *more = _cells(entry, half)
        yield f"{printable(entry.segment or '')}: {first}"
        yield from more


def _cells(entry: FactorEstimate, half: int) -> list[str]:
    """Return grade, value and range on one line, or on two where there is no room."""
    if half >= _ROOMY:
        return [f"{_grade(entry)} {_numbers(entry)}"]
    return [_grade(entry), f"  {_numbers(entry)}"]


def _grade(entry: FactorEstimate) -> str:
    return printable(entry.grade) if entry.grade else "own value"


def _numbers(entry: FactorEstimate) -> str:
    cross = "×" if entry.factor == MULTIPLIER else ""
    told = f"×{show_value(entry.best)}" if cross else figure(entry.best)
    if entry.low == entry.high:
        return told
    return f"{told} ({cross}{figure(entry.low)}–{figure(entry.high)})"


def _signed(difference: float) -> str:
    told = rounded(abs(difference), 3)
    if told == "0.000":
        return "0"
    return f"{'+' if difference > 0 else '−'}{told}"


def agreement_text(found: Agreement) -> str:
    """Return how far people agree, which factor they differ in, and what was published."""
    told = [str(found), ""]
    told.append(f"Mean of ln(second/first): {rounded(found.mean, 3)}; root mean square")
    told[-1] += f" {rounded(found.rms, 3)}"
    if found.sd is not None:
        told[-1] += f"; they scatter about the mean by {rounded(found.sd, 3)}"
    told[-1] += "."
    if found.published is not None:
        memory = "from memory" if found.provenance == "memory" else found.provenance
        told.append(
            f"Published for the difference of two experienced people:"
            f" {rounded(found.published, 3)} ({printable(found.source)}; {memory})."
        )
    if found.by_factor:
        told += ["", "What each factor makes n differ by, as a share of n, in the mean:"]
    sizes = sorted(found.by_factor.items(), key=lambda pair: -pair[1])
    told += [f"{capital(factor):15} {rounded(100 * size, 1):>5} %" for factor, size in sizes]
    if found.count < 5:
        told += ["", f"With {found.count} compared, these figures say little yet."]
    return "\n".join(told)
