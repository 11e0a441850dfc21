"""The list of a review: what makes each place weak, in words; one line a place where it is wide."""

from dataclasses import dataclass
from typing import Final

from rich.text import Text

from roughness.desk.rows import Row
from roughness.desk.weakness import Weakness
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import rounded, show_n, show_share
from roughness.screens.reach_list import fitted
from roughness.screens.review_words import open_counts
from roughness.screens.survey_lines import SurveyLine

_WIDE: Final = 110
_NUMBER, _STATUS = 3, 24
_ABOVE: Final = {"unbacked": "no note,", "spread": "spread to", "others": "second"}
_BELOW: Final = {
    "reach": "reach",
    "part": "part",
    "condition": "flow condition",
    "n": "n",
    "open": "open",
    "unbacked": "no photo",
    "spread": "people's",
    "others": "opinion",
    "status": "status",
}


@dataclass(frozen=True)
class ListColumns:
    """How many cells each column has, by name; none where a place takes two lines."""

    cells: dict[str, int]
    width: int

    @classmethod
    def within(cls, width: int, *, others: bool) -> "ListColumns":
        """Return the columns for ``width`` cells; ``others``: there are second opinions."""
        if width < _WIDE:
            return cls({}, width)
        fixed = {"number": _NUMBER, "reach": 0, "part": 11, "condition": 16, "n": 5, "open": 18}
        fixed |= {"unbacked": 8, "spread": 9}
        fixed |= {"others": 7} if others else {}
        fixed |= {"status": _STATUS - 11 if others else _STATUS}
        fixed["reach"] = width - sum(fixed.values()) - len(fixed) + 1
        return cls(fixed, width)

    @property
    def heading(self) -> Text:
        """The words above the list; one line where places take two."""
        if not self.cells:
            told = fitted("    reach, part, flow condition", self.width - _STATUS)
            return Text(f"{told}{'status':>{_STATUS}}", style="dim", no_wrap=True)
        return Text(f"{self.set(_ABOVE)}\n{self.set(_BELOW)}", style="dim", no_wrap=True)

    def set(self, cells: dict[str, str]) -> str:
        """Set one line; a cell that is too long ends in an ellipsis."""
        return " ".join(fitted(cells.get(word, ""), wide) for word, wide in self.cells.items())


def list_line(at: int, row: Row, weak: Weakness, columns: ListColumns) -> Text:
    """Return one place of the list.

    Parameters
    ----------
    at : int
        Its place in the order, 0 for the weakest.
    row, weak : Row, Weakness
        What stands there and how weak it is.
    columns : ListColumns
        Where what goes.
    """
    number = f"{at + 1:>{_NUMBER}}"
    told = _one_line(number, row, weak, columns) if columns.cells else ""
    told = told or "\n".join(_two_lines(number, row, weak, columns.width))
    style = "bold" if row.stands_stopped else ""
    return Text(told, style=style, no_wrap=True, overflow="crop")


def _one_line(number: str, row: Row, weak: Weakness, columns: ListColumns) -> str:
    estimate = row.estimate
    return columns.set(
        {
            "number": number,
            "reach": printable(row.reach.reach),
            "part": SurveyLine(row=row).part_word,
            "condition": printable(row.condition.condition) if row.condition else "",
            "n": show_n(estimate.n.best) if estimate else "-",
            "open": open_counts(row),
            "unbacked": f"{show_share(weak.unbacked):>6}" if estimate else "     -",
            "spread": f"{rounded(weak.width, 2):>6}" if estimate else "     -",
            "others": f"{rounded(weak.disagreement, 1):>5}" if row.review.opinions else "    -",
            "status": row.status,
        }
    )


def _two_lines(number: str, row: Row, weak: Weakness, width: int) -> tuple[str, str]:
    names = [printable(row.reach.reach), SurveyLine(row=row).part_word]
    names += [printable(row.condition.condition)] if row.condition else []
    where = f"{number} {', '.join(name for name in names if name)}"
    told = [open_counts(row) or "nothing open"]
    if row.estimate is not None:
        told.append(f"{show_share(weak.unbacked)} no note or photo")
        told.append(f"spread {rounded(weak.width, 2)}")
    if row.review.opinions:
        told.append(f"second opinion {rounded(weak.disagreement, 1)}")
    elif row.estimate is not None:
        told[-1] += " of people's"
    status = f"{row.status:>{_STATUS}}"
    return f"{fitted(where, width - _STATUS)}{status}", f"    {'  '.join(told)}"
