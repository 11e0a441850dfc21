"""Text tables and paragraphs for a terminal of 80 columns."""

import unicodedata
from collections.abc import Iterator, Sequence

WIDTH = 80
_ELLIPSIS = "…"
_GAP = 1


def cells_wide(text: str) -> int:
    """Return how many terminal cells ``text`` takes.

    >>> cells_wide("reach"), cells_wide("漢字")
    (5, 4)
    """
    return len(text) if text.isascii() else sum(map(_sign_width, text))


def _sign_width(sign: str) -> int:
    if unicodedata.combining(sign) or unicodedata.category(sign) in ("Mn", "Me", "Cf"):
        return 0
    return 2 if unicodedata.east_asian_width(sign) in ("W", "F") else 1


def fitted(text: str, width: int, *, right: bool = False) -> str:
    """Return ``text`` in exactly ``width`` cells: padded, or cut with an ellipsis.

    >>> fitted("main channel", 6), fitted("n", 3, right=True)
    ('main …', '  n')
    """
    if cells_wide(text) > width:
        kept = ""
        for sign in text:
            if cells_wide(kept + sign) > width - 1:
                break
            kept += sign
        text = kept + _ELLIPSIS
    padding = " " * (width - cells_wide(text))
    return padding + text if right else text + padding


def wrapped(text: str, first: str = "", rest: str | None = None, width: int = WIDTH) -> list[str]:
    """Return ``text`` broken between words; ``first`` and ``rest`` start the lines.

    >>> wrapped("one two three", "- ", "  ", width=9)
    ['- one two', '  three']
    """
    rest = " " * cells_wide(first) if rest is None else rest
    lines, line, is_bare = [], first, True
    for word in _words(text, width - max(cells_wide(first), cells_wide(rest))):
        if not is_bare and cells_wide(line) + 1 + cells_wide(word) > width:
            lines.append(line)
            line, is_bare = rest, True
        line = f"{line}{word}" if is_bare else f"{line} {word}"
        is_bare = False
    return [*lines, line.rstrip()]


def _words(text: str, longest: int) -> Iterator[str]:
    for word in text.split():
        piece = ""
        for sign in word:
            if cells_wide(piece + sign) > longest:
                yield piece
                piece = ""
            piece += sign
        yield piece


def table(
    rows: Sequence[Sequence[str]], *, give: Sequence[int], indent: int = 0, width: int = WIDTH
) -> list[str]:
    """Return rows as aligned columns that fit ``width``.

    Parameters
    ----------
    rows : sequence of rows of cells
        All of the same length.
    give : sequence of int
        The columns that are cut where not everything fits, the widest one first.
    indent : int
        Blanks before each line.
    width : int
        Cells of a line.
    """
    if not rows:
        return []
    widths = [max(map(cells_wide, column)) for column in zip(*rows, strict=True)]
    while indent + sum(widths) + _GAP * (len(widths) - 1) > width:
        widest = max(give, key=lambda column: widths[column])
        if widths[widest] <= 4:
            break
        widths[widest] -= 1
    return [
        (
            " " * indent
            + (" " * _GAP).join(fitted(cell, w) for cell, w in zip(row, widths, strict=True))
        ).rstrip()
        for row in rows
    ]
