"""n so far, with its range, on the axis that all screens share."""

from typing import Final

from rich.text import Text
from textual.widgets import Static

from roughness.desk.offers import n_so_far
from roughness.errors import RoughnessError
from roughness.quantities.printing import show_n, show_range
from roughness.screens.bars import axis, bar, people_bar
from roughness.screens.walk_course import Course

_WORDS: Final = 28
_SHORTEST: Final = 8  # a narrower terminal cuts the words off instead


class SumSoFar(Static):
    """Axis and bar; the spread and what people differ by once every factor is there."""

    DEFAULT_CSS = "SumSoFar { height: auto; }"

    def show(self, course: Course) -> None:
        """Draw what stands in the course."""
        lines = sum_lines(course, self.screen.size.width)
        self.update(Text("\n", no_wrap=True, overflow="crop").join(lines))


def sum_lines(course: Course, width: int) -> list[Text]:
    """Return the axis, the bar of n, and, when complete, what people differ by."""
    long = max(_SHORTEST, width - _WORDS - 1)
    ticks = Text(f"{axis(long):<{long}} ", style="dim")
    n = n_so_far(course.place)
    if n is None:
        return [ticks + Text("n so far: nothing chosen"), Text("")]
    try:
        estimate = course.place.estimate()
    except RoughnessError as error:
        return [ticks + Text(f"n so far {show_n(n.best)}"), Text(f"! {error}")]
    if estimate is None:
        so_far = Text(f"n so far {show_n(n.best)}", style="bold")
        return [ticks + so_far, Text(f"{bar(long, n)} {show_range(n)}")]
    spread = estimate.spread
    lines = [
        ticks + Text(f"n {show_n(estimate.n.best)}  {show_range(estimate.n)}", style="bold"),
        Text(
            f"{bar(long, estimate.n, (spread.p05, spread.p95))} "
            f"spread {show_n(spread.p05)} to {show_n(spread.p95)}"
        ),
    ]
    if estimate.people is not None:
        people = estimate.people
        told = f"people {show_n(people.p05)} to {show_n(people.p95)}"
        lines.append(Text(f"{people_bar(long, people.p05, people.p95)} {told}", style="dim"))
    return lines
