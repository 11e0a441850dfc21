"""n on one logarithmic axis, drawn with characters: pure text, no terminal.

Every bar of the same width shares the axis, so that two lines under each other can be
compared. A thin line is the envelope, the thick part the spread of the choices, the block
the best value, a diamond the adopted n.
"""

import math
from typing import Final

from roughness.quantities.ranges import Range

LOWEST, HIGHEST = 0.01, 0.3
# Where there is no room for all of them, the first ones stay.
_TICKS: Final = (0.10, 0.02, 0.05, 0.20, 0.03, 0.07, 0.15)
THIN, THICK, BEST, ADOPTED = "─", "━", "█", "◆"
_FROM, _TO, _BELOW, _ABOVE, _PEOPLE = "├", "┤", "◂", "▸", "·"


def column(n: float, width: int) -> int:
    """Return the column of ``n`` on an axis of ``width`` columns; its ends hold what is beyond."""
    if n <= LOWEST:
        return 0
    share = math.log(n / LOWEST) / math.log(HIGHEST / LOWEST)
    return min(width - 1, max(0, round(share * (width - 1))))


def axis(width: int) -> str:
    """Return the labels of the axis; one without room is moved by a column or left out."""
    cells = [" "] * width
    for tick in _TICKS:
        label = f" {tick:.2f} ".replace(" 0", " ")
        start = column(tick, width) - 2
        for moved in (start, start + 1, start - 1):
            if _is_free(cells, moved, len(label)):
                cells[moved + 1 : moved + len(label) - 1] = label.strip()
                break
    return "".join(cells)


def _is_free(cells: list[str], start: int, length: int) -> bool:
    inside = start >= 0 and start + length - 1 <= len(cells)
    return inside and not "".join(cells[start : start + length]).strip()


def bar(
    width: int,
    n: Range,
    spread: tuple[float, float] | None = None,
    best: float | None = None,
    adopted: float | None = None,
) -> str:
    """Return a range of n as a bar on the axis.

    Parameters
    ----------
    width : int
        Columns of the axis.
    n : Range
        The envelope.
    spread : (float, float), optional
        Lower and upper percentile of the spread of the choices.
    best : float, optional
        Where the block stands; ``n.best`` unless said.
    adopted : float, optional
        The n that somebody adopted in place of the estimate.
    """
    cells = [" "] * width
    low, high = column(n.low, width), column(n.high, width)
    cells[low : high + 1] = THIN * (high - low + 1)
    cells[low] = _BELOW if n.low < LOWEST else _FROM
    cells[high] = _ABOVE if n.high > HIGHEST else _TO
    if spread is not None:
        start, end = column(spread[0], width), column(spread[1], width)
        cells[start : end + 1] = THICK * (end - start + 1)
    cells[column(n.best if best is None else best, width)] = BEST
    if adopted is not None:
        cells[column(adopted, width)] = ADOPTED
    return "".join(cells)


def people_bar(width: int, low: float, high: float) -> str:
    """Return what experienced people differ by as a dotted line on the same axis."""
    start, end = column(low, width), column(high, width)
    return (" " * start + _PEOPLE * (end - start + 1)).ljust(width)
