"""Templates made into pages: escaping on, foreign text printable, values as they are shown."""

from functools import lru_cache
from pathlib import Path
from typing import Any, Final

from jinja2 import Environment, PackageLoader, StrictUndefined
from markupsafe import Markup

from roughness import __version__
from roughness.desk.history import shown_time
from roughness.desk.whole_files import refuse_place
from roughness.errors import InputError
from roughness.quantities.foreign_text import printable
from roughness.quantities.printing import enumerate_words, show_n, show_share, show_value

SHORT_HASH: Final = 12


def page(template: str, **values: Any) -> bytes:
    """Return a page as UTF-8 HTML.

    Parameters
    ----------
    template : str
        File in ``roughness/reports/templates``.
    **values
        What it shows. Every text among them is escaped, and its control and direction
        characters are spelled out; line ends stay.
    """
    return _templates().get_template(template).render(**values).encode("utf-8")


def refuse_target(target: Path, survey: Path) -> None:
    """Say no to a file that is no page or would lie inside the survey's folder.

    Raises
    ------
    InputError
        Before anything is computed or written.
    """
    if target.suffix.lower() not in (".html", ".htm"):
        where = printable(str(target))
        raise InputError("a page ends in .html", where=where, wanted="name it so")
    refuse_place(target, survey)


@lru_cache(maxsize=1)
def _templates() -> Environment:
    found = Environment(
        loader=PackageLoader("roughness.reports"),
        autoescape=True,
        undefined=StrictUndefined,
        finalize=_harmless,
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
    )
    found.filters |= {
        "n": show_n,
        "value": show_value,
        "percent": show_share,
        "change": _change,
        "short": lambda text: text[:SHORT_HASH],
        "when": shown_time,
        "words": lambda words: enumerate_words([printable(word) for word in words]),
    }
    found.globals |= {"version": __version__}
    return found


def _change(n: float) -> str:
    return f"{'−' if n < 0 else '+'}{show_n(abs(n))}" if n else "0"


def _harmless(value: Any) -> Any:
    """Spell out what would hide or reorder text; what the templates made is left alone."""
    if not isinstance(value, str) or isinstance(value, Markup) or value.isprintable():
        return value
    lines = value.replace("\r\n", "\n").split("\n")
    return "\n".join(map(printable, lines))
