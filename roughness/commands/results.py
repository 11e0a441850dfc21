"""How results reach standard output: text that wraps, and JSON that no terminal obeys."""

import json
import sys
from collections.abc import Iterable
from dataclasses import asdict, is_dataclass
from typing import Any


def print_lines(lines: Iterable[str]) -> None:
    """Print lines of text; signs that the terminal's encoding lacks are spelled out."""
    text = "".join(f"{line}\n" for line in lines)
    encoding = sys.stdout.encoding or "utf-8"
    sys.stdout.write(text.encode(encoding, "backslashreplace").decode(encoding))


def print_json(document: Any) -> None:
    """Print one JSON document, indented, numbers in full precision."""
    sys.stdout.write(json_text(document))


def json_text(document: Any) -> str:
    """Return a document, or dataclasses, as JSON that may go to any terminal.

    Text stays readable; control and direction characters are JSON escapes, so that a
    terminal shows them and a program reads them back unchanged.
    """
    text = json.dumps(
        _plain(document),
        ensure_ascii=(sys.stdout.encoding or "utf-8").lower() not in ("utf-8", "utf8"),
        allow_nan=False,
        indent=2,
    )
    if not text.replace("\n", "").isprintable():
        text = "".join(c if c == "\n" or c.isprintable() else json.dumps(c)[1:-1] for c in text)
    return f"{text}\n"


def _plain(document: Any) -> Any:
    if is_dataclass(document) and not isinstance(document, type):
        return asdict(document)
    if isinstance(document, list | tuple):
        return [_plain(entry) for entry in document]
    return document
